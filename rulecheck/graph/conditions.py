"""What a rule asks, bound to terms: parts joined by `and` and `or`, for each element and state."""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import date
from fractions import Fraction
from typing import Literal

from rulecheck.diagnostics import Span
from rulecheck.formula.syntax import Syntax
from rulecheck.graph.terms import Axis, Term
from rulecheck.model.ruleset import Decision
from rulecheck.quantity.units import Unit


@dataclass(frozen=True, slots=True)
class Use:
    """A name in a formula with what it stands for: its term, unit, and the figure or input that it names."""

    text: str
    target: str
    term: Term
    unit: Unit | None


PartKind = Literal["comparison", "flag", "evidence", "judgement", "zone", "record", "frozen"]


@dataclass(frozen=True, slots=True)
class Ruled:
    """What the rule book's tolerance and rounding, in its words, did to a part: its margin without them, and the
    rounded value."""

    margin: Term
    value: Term | None
    tolerance: str
    rounding: str


@dataclass(frozen=True, slots=True)
class Part:
    """One condition. `holds` decides it; `margin` is its room to the limit in SI, None where it has no number.

    `scale` is what the relative margin is measured by (SI, positive), None where there is none. `unit` is the unit of
    the margin, `value` and `limit` the two sides of a comparison; `counted` marks a count, which may well stand
    on its limit, `where` says in words at which key of a curve or at which time that is.
    """

    kind: PartKind
    text: str
    holds: Term
    margin: Term | None = None
    strict: bool = False
    scale: Term | None = None
    unit: Unit | None = None
    value: Term | None = None
    limit: Term | None = None
    sense: str = ""
    span: Span | None = field(default=None, compare=False)
    place: Span | None = field(default=None, compare=False)
    formula: Syntax | None = field(default=None, compare=False)
    counted: bool = False
    ruled: Ruled | None = None
    where: str = ""


@dataclass(frozen=True, slots=True)
class AllOf:
    """Joined by `and`: the least relative margin binds."""

    parts: tuple[Condition, ...]


@dataclass(frozen=True, slots=True)
class AnyOf:
    """Joined by `or`, or named branches: the greatest relative margin binds."""

    parts: tuple[Condition, ...]
    labels: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Either:
    """A conditional: `gate` says which of two conditions is asked, and the one that is taken binds."""

    gate: Condition
    chooses: Term
    then: Condition
    otherwise: Condition


Condition = Part | AllOf | AnyOf | Either


def numeric_parts(condition: Condition) -> list[Part]:
    """All parts with a margin, of both arms of a conditional."""
    return [part for part in every_part(condition) if part.margin is not None]


def every_part(condition: Condition) -> list[Part]:
    """All parts in order, of both arms of a conditional."""
    if isinstance(condition, Part):
        return [condition]
    if isinstance(condition, Either):
        return [*every_part(condition.then), *every_part(condition.otherwise)]
    return [inner for part in condition.parts for inner in every_part(part)]


@dataclass(frozen=True, slots=True)
class Envelope:
    """The ranges of inputs throughout which a case must hold, with the unit in which each is spoken of; `label` names
    them among the states of figures that rest on them."""

    axes: tuple[Axis, ...]
    units: tuple[Unit, ...]
    label: str


@dataclass(frozen=True, slots=True)
class Case:
    """A rule for one element in one combination of states. `applies` and `exempt` are flags; `gates` the conditions
    behind `applies`, with their margins; `uses` the names in its formulas. Where it has an `envelope` it must hold
    throughout; `at` is the point of it at which the case stands, each axis with its value, and empty where it has none
    yet."""

    element: str
    states: tuple[tuple[str, str], ...]
    applies: Term
    exempt: Term
    condition: Condition
    because: str = ""
    gates: tuple[Condition, ...] = ()
    uses: tuple[Use, ...] = ()
    envelope: Envelope | None = None
    at: tuple[tuple[Axis, Fraction], ...] = ()


@dataclass(frozen=True, slots=True)
class Permit:
    """A dispensation in force: its reference, its last day, and where it stands."""

    reference: str
    until: date
    span: Span | None = field(default=None, compare=False)


@dataclass(frozen=True, slots=True)
class BoundRule:
    """A rule with its cases, and one flag term that says whether it is met (what `rule(x)` reads)."""

    name: str
    ruleset: str
    met: Term
    cases: tuple[Case, ...]
    empty: str
    estimated: tuple[str, ...]
    inputs: tuple[str, ...]
    figures: tuple[str, ...]
    permit: Permit | None = None
    binds: bool = True
    decision: Decision | None = None
