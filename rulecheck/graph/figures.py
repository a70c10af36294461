"""Figures: the only things with a name."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import date

from rulecheck.diagnostics import Span
from rulecheck.formula.syntax import Syntax
from rulecheck.graph.conditions import BoundRule, Use
from rulecheck.graph.terms import Bank, Inputs, Term
from rulecheck.model.design import Correlation
from rulecheck.quantity.quantity import Tolerance, Uncertainty
from rulecheck.quantity.units import Unit


@dataclass(frozen=True, slots=True)
class Solved:
    """What a figure is solved for: the input, and the label under which figures at the solution are kept."""

    path: str
    low: str
    high: str
    label: str
    residual: Term


@dataclass(frozen=True, slots=True)
class Figure:
    """A named value with the formula behind it. `valid` is a flag: within the range of validity, or None. Where it is
    `solved`, the formula is zero at the value. `arms` are the conditionals of the formula that are settled, each with
    the arm that is taken. `method` says how a solver found it, where no formula stands behind it."""

    name: str
    term: Term
    unit: Unit | None
    syntax: Syntax
    meaning: str
    source: str
    span: Span
    uses: tuple[Use, ...]
    valid: Term | None = None
    solved: Solved | None = None
    arms: Mapping[Syntax, Syntax] = field(default_factory=dict)
    method: str = ""


@dataclass(frozen=True, slots=True)
class InputFact:
    """What is known of an input beside its value; the widths of its spread are in SI, without the value's power of pi.

    `setting` is the state that sets it: such an input goes by its path and that state, and is nobody's to move.
    `sign` is what it must be: `more than 0`, `0 or more`, or nothing.
    """

    path: str
    unit: Unit | None
    span: Span | None
    basis: str = ""
    reference: str = ""
    text: str = ""
    setting: str = ""
    spread: Uncertainty | Tolerance | None = None
    sign: str = ""


@dataclass(frozen=True, slots=True)
class DeclaredCheck:
    """A declared value beside what the car's own parts give; `agrees` is a flag."""

    path: str
    figure: str
    relation: str
    agrees: Term
    declared: Term
    computed: Term
    unit: Unit | None
    span: Span | None


@dataclass(frozen=True, slots=True)
class Graph:
    """Everything that was bound: terms, values of inputs, figures and rules by name.

    `replaced` says of a figure by which file it stands in the place of another, and why.
    """

    bank: Bank
    inputs: Inputs
    facts: Mapping[str, InputFact]
    figures: Mapping[str, Figure]
    rules: tuple[BoundRule, ...]
    day: date
    declared: tuple[DeclaredCheck, ...] = field(default=())
    cautions: Mapping[str, str] = field(default_factory=dict)
    correlations: tuple[Correlation, ...] = ()
    replaced: Mapping[str, str] = field(default_factory=dict)
