"""The results of `workings --vary`: rules and figures along the values of one input."""

from __future__ import annotations

from dataclasses import dataclass

from rulecheck.outcome.results import Amount, Verdict


@dataclass(frozen=True, slots=True)
class VariedPoint:
    """A margin or a figure at one value. `amount` is None where there is no number or word, and `reason` says why;
    `verdict` is None for figures; `binding` is the part that decides a rule; `outside` is outside its validity."""

    amount: Amount | None
    verdict: Verdict | None = None
    reason: str = ""
    binding: str = ""
    outside: bool = False


@dataclass(frozen=True, slots=True)
class VariedFigure:
    """A rule (its margin) or a figure: for each curve one point at each value."""

    name: str
    clause: str
    title: str
    unit: str
    is_rule: bool
    curves: tuple[tuple[VariedPoint, ...], ...]


@dataclass(frozen=True, slots=True)
class Axis:
    """An input with the values that it runs through; `step` says the step of a range in words."""

    path: str
    values: tuple[Amount, ...]
    step: str = ""


@dataclass(frozen=True, slots=True)
class Varied:
    """The outcome. `curves` is None, or the second input, with one curve for each of its values."""

    design: str
    file: str
    date: str
    along: Axis
    curves: Axis | None
    figures: tuple[VariedFigure, ...]
    changes: tuple[str, ...]
    cautions: tuple[str, ...]
    version: str
