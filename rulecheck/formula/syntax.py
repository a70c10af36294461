"""The syntax tree of a formula: what was written, with places; places do not count in equality.

A tree says nothing of units, kinds or values: binding does. Two trees are equal when they say the
same; printing a tree and parsing the print gives an equal tree.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from fractions import Fraction
from typing import Literal

from rulecheck.diagnostics import Span

Arithmetic = Literal["+", "-", "*", "/", "^"]
Comparator = Literal["<", "<=", ">", ">=", "==", "!=", "in"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Part:
    """What all nodes have: the place in the file."""

    span: Span = field(compare=False, repr=False)


@dataclass(frozen=True, slots=True)
class Number(Part):
    """`1900 mm`: the value is exact, the text kept as written, the unit a symbol or None."""

    value: Fraction
    unit: str | None
    text: str = field(compare=False)


@dataclass(frozen=True, slots=True)
class Day(Part):
    """A date, `2027-03-01`, kept as text (the calendar is checked when it is read)."""

    text: str


@dataclass(frozen=True, slots=True)
class Text(Part):
    """Quoted text, without the quotes."""

    text: str


@dataclass(frozen=True, slots=True)
class Flag(Part):
    """`yes` or `no`."""

    value: bool


@dataclass(frozen=True, slots=True)
class Name(Part):
    """A dotted name: `tyres.rear.width`, `t.width`, `minimum_mass`, `on`, `pi`."""

    path: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Member(Part):
    """A field of what a formula gives: `point(a, b, c).x`, `usable(b).z`."""

    base: Syntax
    path: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Call(Part):
    """`sqrt(x)`, `distance(p, line(a, b))`, `minimum_mass(x)`, `pairs(lamps)`, `usable(b)`."""

    function: str
    arguments: tuple[Syntax, ...]


@dataclass(frozen=True, slots=True)
class Listing(Part):
    """`[corners.front_left, corners.front_right]`."""

    items: tuple[Syntax, ...]


@dataclass(frozen=True, slots=True)
class Negative(Part):
    """`-x`."""

    operand: Syntax


@dataclass(frozen=True, slots=True)
class Binary(Part):
    """Arithmetic with two operands."""

    operator: Arithmetic
    left: Syntax
    right: Syntax


@dataclass(frozen=True, slots=True)
class Comparison(Part):
    """`a <= b < c`, `a == b within w`, `x in list`: one more operand than operators."""

    operands: tuple[Syntax, ...]
    operators: tuple[Comparator, ...]
    within: Syntax | None = None


@dataclass(frozen=True, slots=True)
class Not(Part):
    """`not x`."""

    operand: Syntax


@dataclass(frozen=True, slots=True)
class Joined(Part):
    """`a and b and c`, `a or b`: two or more operands under one word."""

    word: Literal["and", "or"]
    operands: tuple[Syntax, ...]


@dataclass(frozen=True, slots=True)
class Conditional(Part):
    """`then if condition else otherwise`."""

    then: Syntax
    condition: Syntax
    otherwise: Syntax


@dataclass(frozen=True, slots=True)
class Aggregate(Part):
    """`sum(m.mass for m in masses where m.unsprung == yes)`; `count` and `share` have no expression."""

    function: str
    expression: Syntax | None
    variables: tuple[str, ...]
    collection: Syntax
    where: Syntax | None = None


Syntax = (
    Number
    | Day
    | Text
    | Flag
    | Name
    | Member
    | Call
    | Listing
    | Negative
    | Binary
    | Comparison
    | Not
    | Joined
    | Conditional
    | Aggregate
)


@dataclass(frozen=True, slots=True)
class Each(Part):
    """The head of a rule's `each`, or of a derived figure's `for`: `t in tyres where t.axle == rear`."""

    variables: tuple[str, ...]
    collection: Syntax
    where: Syntax | None = None
