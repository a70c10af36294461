"""The results of `whatif`."""

from __future__ import annotations

from dataclasses import dataclass

from rulecheck.outcome.results import Amount, Mark, Verdict


@dataclass(frozen=True, slots=True)
class Moved:
    """A margin or a figure under one change: after, difference, and what the first order foretold."""

    verdict: Verdict | None
    after: Amount | None
    difference: Amount | None
    foretold: Amount | None
    binding: str = ""


@dataclass(frozen=True, slots=True)
class RuleChange:
    """A rule before, and under each of the changes."""

    name: str
    clause: str
    title: str
    verdict: Verdict
    before: Amount | None
    binding: str
    moved: tuple[Moved, ...]


@dataclass(frozen=True, slots=True)
class FigureChange:
    """A physics or derived figure before, and under each of the changes."""

    name: str
    meaning: str
    before: Amount | None
    moved: tuple[Moved, ...]


@dataclass(frozen=True, slots=True)
class InputChange:
    """An input that is not as it was: its text before, and under each change; empty where nothing is stated."""

    path: str
    before: str
    after: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class LimitChange:
    """A figure that is a word, such as the limit that binds or the axle that locks first; empty where not known."""

    name: str
    meaning: str
    before: str
    after: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class WhatIf:
    """Every rule and figure that moves, most affected first; `limits` also where they stay."""

    design: str
    file: str
    date: str
    columns: tuple[tuple[str, tuple[str, ...]], ...]
    verdict: Verdict
    verdicts: tuple[Verdict, ...]
    rules: tuple[RuleChange, ...]
    figures: tuple[FigureChange, ...]
    inputs: tuple[InputChange, ...]
    limits: tuple[LimitChange, ...]
    unchanged: int
    cautions: tuple[str, ...]
    version: str
    marks: tuple[Mark, ...] = ()
