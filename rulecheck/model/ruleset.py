"""Rulesets, physics modules and the house file as frozen values."""

from __future__ import annotations

from collections.abc import Mapping as MappingOf
from dataclasses import dataclass, field
from datetime import date
from fractions import Fraction
from typing import Literal

from rulecheck.diagnostics import Span
from rulecheck.model.clauses import Answer, Clause
from rulecheck.model.consequences import Consequence
from rulecheck.model.examples import Example
from rulecheck.model.frozen import FrozenWanted
from rulecheck.model.records import RecordWanted
from rulecheck.model.rulings import NO_RULING, Ruling
from rulecheck.model.solver import Solver
from rulecheck.model.vocabulary import Entry
from rulecheck.model.zones import PlaceCondition, Template, ZoneRule
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.quantity import Quantity, Uncertainty
from rulecheck.quantity.units import Unit
from rulecheck.reading.nodes import Located, Node

Standing = Literal["shall", "should", "may", "note"]
EmptyMeans = Literal["open", "complies", "breach", "not applicable"]
DecisionName = Literal["simple", "guarded", "worst case"]


@dataclass(frozen=True, slots=True)
class Window:
    """First and last day on which something holds; both days included, None for no end."""

    first: date | None = None
    last: date | None = None

    def holds(self, day: date) -> bool:
        """True within the window.

        >>> Window(date(2027, 1, 1), None).holds(date(2026, 12, 31))
        False
        """
        return (self.first is None or self.first <= day) and (self.last is None or day <= self.last)


@dataclass(frozen=True, slots=True)
class EvidenceWanted:
    """A document that a rule asks for."""

    kind: Located
    name: Located
    due: Located | None
    expires: bool


@dataclass(frozen=True, slots=True)
class Alternative:
    """The conditions of a rule or of one branch; all that are given must hold."""

    name: str
    require: Located | None
    evidence: EvidenceWanted | None
    judgement: Located | None
    when: Located | None
    places: tuple[PlaceCondition, ...] = ()
    record: RecordWanted | None = None
    frozen: FrozenWanted | None = None
    ruling: Ruling = NO_RULING


@dataclass(frozen=True, slots=True)
class Unless:
    """An exemption."""

    when: Located
    because: str


@dataclass(frozen=True, slots=True)
class Origin:
    """Where an older form of a rule stood, what became of it, and the clause that it stood for."""

    ruleset: str
    span: Span
    what: str
    clause: str = ""


@dataclass(frozen=True, slots=True)
class Decision:
    """How a verdict takes account of spread. `coverage` is the factor k of a guard band `k * u`.

    The factor is 2 where nothing is said (JCGM 100:2008, 6.3.3: a level of confidence of about 95 %).
    """

    name: DecisionName = "simple"
    coverage: Fraction = Fraction(2)


SIMPLE = Decision()


@dataclass(frozen=True, slots=True)
class Scrutineer:
    """What the scrutineer measures with: the uncertainty of the instrument, in `unit`, and the leniency that it gives."""

    uncertainty: Uncertainty | None
    unit: Unit | None
    tolerance: Quantity | None
    span: Span = field(compare=False)


@dataclass(frozen=True, slots=True)
class Range:
    """One axis of an envelope as written: an input, and the values from which to which it runs."""

    path: Located
    low: Located
    high: Located


@dataclass(frozen=True, slots=True)
class Rule:
    """One rule, as written. `own` are its own conditions, `branches` its alternatives; `states` is None for the design
    as written, () for every state, else pairs of axis and names (() for every name); `envelope` are the ranges throughout
    which it must hold."""

    name: str
    span: Span
    ruleset: str
    clause: str
    title: str
    note: str
    standing: Standing
    own: Alternative
    branches: tuple[Alternative, ...]
    each: tuple[Located, ...]
    empty: EmptyMeans
    states: tuple[tuple[str, tuple[Located, ...]], ...] | None
    when: tuple[Located, ...]
    unless: Unless | None
    scale: Located | None
    valid: Window
    measure: Node | None = None
    scrutineer: Scrutineer | None = None
    decision: Decision | None = None
    examples: tuple[Example, ...] = ()
    consequence: Consequence | None = None
    history: tuple[Origin, ...] = ()
    answers: tuple[Answer, ...] = ()
    envelope: tuple[Range, ...] = ()


@dataclass(frozen=True, slots=True)
class Row:
    """A row of a table: `test` is up_to, below, is, when or otherwise."""

    test: str
    key: Located | None
    value: Located


@dataclass(frozen=True, slots=True)
class Table:
    """A table by steps or straight lines."""

    name: str
    span: Span
    over: tuple[Located, ...]
    steps: tuple[Row, ...]
    linear: tuple[tuple[Located, ...], ...]
    unit: Located | None
    meaning: str


@dataclass(frozen=True, slots=True)
class Formula:
    """A figure defined by a formula: derived in a ruleset, or of a physics module; or what a solver gives."""

    name: str
    span: Span
    formula: Located
    unit: Located | None
    meaning: str
    source: str
    valid: Located | None
    loop: Located | None
    of: Located | None
    solve: Located | None = None
    between: tuple[Located, ...] = ()
    by_solver: bool = False


@dataclass(frozen=True, slots=True)
class Withdrawn:
    """A rule that no longer holds."""

    rule: Rule
    reason: str
    span: Span


@dataclass(frozen=True, slots=True)
class Book:
    """One rule book file: a ruleset is made of those that it extends, and its own."""

    name: str
    edition: str
    file: str


@dataclass(frozen=True, slots=True)
class Ruleset:
    """A rule book with what it extends already merged in; `physics` are the files of physics modules that it names,
    each beside the file that names it; `validity` says whether figures outside their range are `noted`, or no rule may
    rest on them (`required`); `needed` are the states by axis, with the paths they set;
    `books` are the files that it is made of, the most general first; `clauses` is the register of the rule book; `idle` are
    the files that are not in force on the day for which it was read, so that nothing of them counts."""

    file: str
    name: str
    edition: str
    note: str
    valid: Window
    units: MappingOf[str, Dimension]
    inputs: tuple[Entry, ...]
    tables: MappingOf[str, Table]
    lists: MappingOf[str, tuple[Located, ...]]
    derived: MappingOf[str, Formula]
    needed: MappingOf[str, MappingOf[str, tuple[Located, ...]]]
    rules: MappingOf[str, Rule]
    withdrawn: tuple[Withdrawn, ...]
    books: tuple[Book, ...]
    span: Span = field(compare=False)
    zones: MappingOf[str, ZoneRule] = field(default_factory=dict)
    templates: MappingOf[str, Template] = field(default_factory=dict)
    physics: tuple[Located, ...] = ()
    validity: str = "noted"
    clauses: MappingOf[str, Clause] = field(default_factory=dict)
    idle: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Replaces:
    """A figure of another module that a module takes the place of, and why."""

    path: Located
    because: str


@dataclass(frozen=True, slots=True)
class PhysicsModule:
    """A named set of formulas; `replaces` are the figures of other modules that its own take the place of. Those that
    `solver` gives have no formula of their own."""

    name: str
    file: str
    meaning: str
    sources: MappingOf[str, str]
    figures: MappingOf[str, Formula]
    caution: str
    replaces: tuple[Replaces, ...] = ()
    span: Span | None = field(default=None, compare=False)
    solver: Solver | None = None
    traps: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class House:
    """What the constructor adds."""

    file: str
    name: str
    designs: tuple[Located, ...]
    rulesets: tuple[Located, ...]
    reserves: MappingOf[str, Located]
    decision: Decision | None
    fails_on: tuple[Located, ...]
    eroded: MappingOf[str, Located]
    ending: MappingOf[str, Located]
    validity: str = "noted"
