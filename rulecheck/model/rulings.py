"""What a rule book does to a value and a limit before it compares: its tolerance on the limit, its rounding."""

from __future__ import annotations

from collections.abc import Mapping as Units
from dataclasses import dataclass, field, replace
from fractions import Fraction
from typing import Literal

from rulecheck.diagnostics import Faults, Span
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.quantity import Quantity, Tolerance
from rulecheck.quantity.reading_values import read_quantity
from rulecheck.quantity.units import Unit
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node

How = Literal["up", "down", "nearest", "even"]
_TOLD = {
    "up": "up to {}",
    "down": "down to {}",
    "nearest": "to the nearest {}",
    "even": "to the nearest {}, ties to even",
}
HOW: tuple[How, ...] = ("up", "down", "nearest", "even")
_KEYS = ("to", "how")


@dataclass(frozen=True, slots=True)
class Allowance:
    """The rule book's tolerance on a limit: by `upper` a greatest value may be passed, a least one by `lower`.

    Both are not negative and in `unit`; in `%` they are shares of the limit.
    """

    upper: Quantity
    lower: Quantity
    text: str
    span: Span = field(compare=False)

    @property
    def unit(self) -> Unit:
        """The unit of both widths."""
        return self.upper.unit

    @property
    def is_share(self) -> bool:
        """True for a share of the limit."""
        return self.unit.symbol == "%"

    @property
    def is_even(self) -> bool:
        """True where it is the same both ways."""
        return self.upper.value == self.lower.value


@dataclass(frozen=True, slots=True)
class Rounding:
    """How a value is rounded before it is compared: to whole steps."""

    step: Quantity
    how: How
    text: str
    span: Span = field(compare=False)


@dataclass(frozen=True, slots=True)
class Ruling:
    """Tolerance and rounding of a rule, a branch or a record."""

    tolerance: Allowance | None = None
    rounding: Rounding | None = None

    def within(self, outer: Ruling) -> Ruling:
        """This ruling, with what it leaves out taken from the one around it."""
        return Ruling(self.tolerance or outer.tolerance, self.rounding or outer.rounding)


NO_RULING = Ruling()


def read_ruling(node: Node | None, own: Units[str, Dimension], faults: Faults) -> Ruling:
    """`tolerance` and `rounding` of a rule, a branch or a record; what is at fault is left out."""
    if not isinstance(node, Mapping):
        return NO_RULING
    return Ruling(_allowance(node.get("tolerance"), own, faults), _rounding(node.get("rounding"), own, faults))


def _allowance(where: Node | None, own: Units[str, Dimension], faults: Faults) -> Allowance | None:
    """`3 mm`, `+0/-5 deg`, or `3 %` of the limit."""
    if not isinstance(where, Located):
        return None
    two_sided = where.text[:1] in "+-" and "/" in where.text
    # A tolerance alone is read as one of the value zero: its unit is then that of both.
    asked = Located(f"0 {where.text}", replace(where.span, column=where.span.column - 2)) if two_sided else where
    before = len(faults.found)
    read = read_quantity(asked, None, own=own, faults=faults)
    if read is None or len(faults.found) > before:
        return None
    widths = _widths(read)
    if widths is None:
        told = f"'{where.text}' is no tolerance on a limit"
        faults.add("bad-value", told, where.span, expected="a width such as '3 mm', '3 %' of the limit, or '+0/-5 deg'")
        return None
    upper, lower = widths
    if read.unit.offset:
        faults.add("bad-value", "a tolerance on a temperature is a width", where.span, advice="write it in 'K'")
        return None
    return Allowance(Quantity(upper, read.unit), Quantity(lower, read.unit), where.text, where.span)


def _widths(read: Quantity) -> tuple[Fraction, Fraction] | None:
    """How far a limit may be passed upwards and downwards; None where this is no width."""
    upper, lower = read.value, read.value
    if isinstance(read.spread, Tolerance) and not read.value:
        upper, lower = read.spread.upper, -read.spread.lower
    elif read.spread is not None:
        return None
    return None if upper < 0 or lower < 0 or read.pressure else (upper, lower)


def _rounding(node: Node | None, own: Units[str, Dimension], faults: Faults) -> Rounding | None:
    """`{to: 1 kg, how: down}`."""
    if node is None:
        return None
    if not isinstance(node, Mapping):
        faults.add("bad-structure", "a rounding says to what, and how", node.span, expected="{to: 1 kg, how: down}")
        return None
    said: dict[str, Located] = {}
    for entry in node:
        name = entry.key.text
        if name not in _KEYS:
            faults.add(
                "unknown-key", f"a rounding has no key '{name}'", entry.key.span,
                expected=" or ".join(_KEYS), advice=nearest(name, _KEYS),
            )  # fmt: skip
        elif isinstance(entry.value, Located):
            said[name] = entry.value
    missing = [name for name in _KEYS if name not in said]
    if missing:
        told = f"a rounding says to what, and how: '{missing[0]}:' is missing here"
        faults.add("missing-key", told, node.span, expected="{to: 1 kg, how: down}")
        return None
    return _whole_rounding(said["to"], said["how"], node.span, own, faults)


def _whole_rounding(
    to: Located, how: Located, span: Span, own: Units[str, Dimension], faults: Faults
) -> Rounding | None:
    step = read_quantity(to, None, own=own, faults=faults)
    known: How | None = next((word for word in HOW if word == how.text), None)
    if known is None:
        faults.add(
            "unknown-choice", f"'{how.text}' is no way of rounding", how.span, expected=" or ".join(HOW),
            advice=nearest(how.text, HOW),
        )  # fmt: skip
    if step is None:
        return None
    if step.value <= 0 or step.spread is not None or step.unit.offset:
        expected = "a step such as '1 kg' ('1 K' for a temperature)"
        faults.add("bad-value", "what is rounded to is a step above zero", to.span, expected=expected)
        return None
    return None if known is None else Rounding(step, known, _TOLD[known].format(to.text), span)
