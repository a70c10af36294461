"""What a rule asks of a whole curve: whether it rises, how steep it is, how far it lies over another.

Between rows a curve runs straight, so its slopes are those of its stretches, and the difference of two curves is least
where one of them has a row, or at an end of the range.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from itertools import pairwise

from rulecheck.binding.bound import BROKEN, Bound, Broken, Curve, Number, Slopes, Truth, kind_of
from rulecheck.binding.inputs import scope_units
from rulecheck.binding.scope import Scope
from rulecheck.binding.signal_arithmetic import rational
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import Call, Syntax
from rulecheck.graph.conditions import Use
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.units import Unit, find_unit, show_unit

Key = Fraction


@dataclass(frozen=True, slots=True)
class _Rows:
    """The rows of a curve over one key, in SI without their powers of pi, which are one for all keys and all values."""

    keys: tuple[Fraction, ...]
    values: tuple[Fraction, ...]
    key_power: int
    power: int

    def at(self, key: Fraction) -> Fraction:
        """The value at a key within the rows."""
        for (low, first), (high, second) in pairwise(zip(self.keys, self.values, strict=True)):
            if low <= key <= high:
                return first + (second - first) * (key - low) / (high - low)
        raise ValueError("a key outside the rows")


def curve_property(scope: Scope, syntax: Call) -> Bound:
    """Bind a call of one of these functions."""
    least, most = _COUNTS[syntax.function]
    if not least <= len(syntax.arguments) <= most:
        told = f"'{syntax.function}' takes {least} arguments, not {len(syntax.arguments)}"
        if least == 1:
            told = told.replace("arguments,", "argument,")
        return scope.fault("wrong-arguments", told, syntax.span, expected=_FORMS[syntax.function])
    bound = scope.express(syntax.arguments[0])
    if isinstance(bound, Broken):
        return BROKEN
    entry = scope.shared.vocabulary.entry(bound.path) if isinstance(bound, Curve) else None
    if not isinstance(bound, Curve) or entry is None or entry.kind == "map":
        what = "a map" if isinstance(bound, Curve) else kind_of(bound)
        told = f"'{syntax.function}' takes a curve, and '{show(syntax.arguments[0])}' is {what}"
        return scope.fault("kind-mismatch", told, syntax.arguments[0].span, expected=_FORMS[syntax.function])
    found = CURVES[syntax.function](scope, syntax, bound)
    if isinstance(found, (Number, Truth)) and not scope.loop:
        unit = found.unit if isinstance(found, Number) else None
        scope.uses.setdefault(show(syntax), Use(show(syntax), "", found.term, unit))
    return found


def _rising(scope: Scope, syntax: Call, curve: Curve) -> Bound:
    if not curve.keys:
        return Truth(scope.missing(curve.path, "flag", span=syntax.span))
    rows = _rows(curve)
    rows_with_keys = pairwise(zip(rows.keys, rows.values, strict=True))
    level = [(low, high) for (low, first), (high, second) in rows_with_keys if second <= first]
    place = f"does not rise from {_shown(curve, level[0][0])} to {_shown(curve, level[0][1])}" if level else ""
    return Truth(scope.bank.flag(not level), place)


def _slope(scope: Scope, syntax: Call, curve: Curve) -> Bound:
    if not curve.keys:
        key = _key_dimension(scope, curve)
        if any(isinstance(_end(scope, syntax, curve, end, key), Broken) for end in syntax.arguments[1:]):
            return BROKEN
        missing = Number(scope.missing(curve.path, "number", curve.unit.dimension / key, syntax.span))
        return Slopes(missing, missing)
    if curve.steps:
        told = f"'{curve.path}' runs in steps, and has no slope"
        return scope.fault("kind-mismatch", told, syntax.span, expected="a curve with straight lines between its rows")
    span = _range(scope, syntax, curve, syntax.arguments[1:])
    if isinstance(span, Broken):
        return BROKEN
    rows, dimension = _rows(curve), curve.unit.dimension / curve.keys[0][0].dimension
    lacking = _outside(curve, rows, span)
    if lacking:
        missing = Number(scope.missing(lacking, "number", dimension, syntax.span))
        return Slopes(missing, missing)
    steep = [
        ((second - first) / (high - low), f"closest from {_shown(curve, low)} to {_shown(curve, high)}")
        for (low, first), (high, second) in pairwise(zip(rows.keys, rows.values, strict=True))
        if low < span[1] and high > span[0]
    ]
    power = rows.power - rows.key_power
    ends = []
    for value, place in (min(steep, key=_value), max(steep, key=_value)):
        ends.append(Number(scope.bank.number(value, dimension, power), place=place))
    return Slopes(ends[0], ends[1])


def _value(pair: tuple[Fraction, str]) -> Fraction:
    return pair[0]


def _over(scope: Scope, syntax: Call, curve: Curve) -> Bound:
    other = scope.express(syntax.arguments[1])
    if isinstance(other, Broken):
        return BROKEN
    where = syntax.arguments[1]
    if not isinstance(other, (Curve, Number)) or (isinstance(other, Curve) and len(other.keys) > 1):
        told = f"'over' takes a curve or a number to lie over, and '{show(where)}' is {kind_of(other)}"
        return scope.fault("kind-mismatch", told, where.span, expected=_FORMS["over"])
    own = other.unit.dimension if isinstance(other, Curve) else other.dimension
    if own != curve.unit.dimension:
        told = f"'{curve.path}' is {name_of(curve.unit.dimension)}, '{show(where)}' is {name_of(own)}"
        return scope.fault("dimension-mismatch", told, where.span, advice="the two must be of one dimension")
    lacking = " and ".join(item.path for item in (curve, other) if isinstance(item, Curve) and not item.keys)
    if lacking:
        return Number(scope.missing(lacking, "number", curve.unit.dimension, syntax.span), curve.unit)
    span = _range(scope, syntax, curve, syntax.arguments[2:])
    if isinstance(span, Broken):
        return BROKEN
    return _least_gap(scope, syntax, curve, other, span)


def _least_gap(scope: Scope, syntax: Call, curve: Curve, other: Curve | Number, span: tuple[Key, Key]) -> Bound:
    rows = _rows(curve)
    below = _below(scope, syntax, curve, rows, other)
    if isinstance(below, Broken):
        return BROKEN
    items = [(curve, rows)] + ([(other, below)] if isinstance(other, Curve) else [])
    lacking = next((text for item, read in items if (text := _outside(item, read, span))), "")
    if lacking:
        return Number(scope.missing(lacking, "number", curve.unit.dimension, syntax.span), curve.unit)
    keys = {*span, *(key for _, read in items for key in read.keys if span[0] < key < span[1])}
    gap, at = min((rows.at(key) - below.at(key), key) for key in keys)
    term = scope.bank.number(gap, curve.unit.dimension, rows.power)
    return Number(term, curve.unit, place=f"closest at {_shown(curve, at)}")


def _below(scope: Scope, syntax: Call, curve: Curve, rows: _Rows, other: Curve | Number) -> _Rows | Broken:
    """What the curve is to lie over, as rows; a number is a level one."""
    where = syntax.arguments[1]
    if isinstance(other, Number):
        level = rational(scope, other, where, "a level under a curve", "state a curve, which may change")
        if isinstance(level, Broken):
            return BROKEN
        value, power = level
        found = _Rows(rows.keys, (value,) * len(rows.keys), rows.key_power, power if value else rows.power)
    else:
        if curve.steps or other.steps:
            told = "a curve in steps is not held over another"
            return scope.fault("kind-mismatch", told, where.span, expected="curves with straight lines")
        if other.keys[0][0].dimension != curve.keys[0][0].dimension:
            told = f"'{curve.path}' and '{other.path}' have keys of two kinds"
            return scope.fault("dimension-mismatch", told, where.span, advice="state both over one figure")
        found = _rows(other)
    if found.power != rows.power or found.key_power != rows.key_power:
        told = f"'{curve.path}' and '{show(where)}' are in units of which one has pi in it"
        return scope.fault("bad-curve", told, where.span, advice="state both in one unit")
    return found


def _rows(curve: Curve) -> _Rows:
    read = [[_monomial(number) for number in column] for column in (curve.keys[0], curve.values)]
    powers = [next((value.power for value in column if value.rational), 0) for column in read]
    keys, values = (tuple(value.rational for value in column) for column in read)
    return _Rows(keys, values, powers[0], powers[1])


def _monomial(number: Number) -> Monomial:
    assert isinstance(number.term.value, Monomial), "the rows of a design's curve are constants"
    return number.term.value


def _range(scope: Scope, syntax: Call, curve: Curve, ends: Sequence[Syntax]) -> tuple[Key, Key] | Broken:
    """The two ends of the range, constants of the curve's own key."""
    found: list[Key] = []
    key, power = curve.keys[0][0], _rows(curve).key_power
    for end in ends:
        bound = _end(scope, syntax, curve, end, key.dimension)
        if isinstance(bound, Broken):
            return BROKEN
        value = rational(scope, bound, end, "an end of the range", "write the key, as in 2000 rpm")
        if isinstance(value, Broken):
            return BROKEN
        if value[0] and value[1] != power:
            told = f"'{show(end)}' and the keys of '{curve.path}' are in units of which one has pi in it"
            return scope.fault("bad-curve", told, end.span, expected=f"a key in {show_unit(curve.key_units[0])}")
        found.append(value[0])
    if found[0] >= found[1]:
        told = f"the range from '{show(ends[0])}' to '{show(ends[1])}' does not rise"
        return scope.fault("bad-value", told, ends[1].span, expected="the lower end first")
    return found[0], found[1]


def _end(scope: Scope, syntax: Call, curve: Curve, end: Syntax, due: Dimension) -> Number | Broken:
    bound = scope.express(end)
    if isinstance(bound, Broken) or (isinstance(bound, Number) and bound.dimension == due):
        return bound
    what = name_of(bound.dimension) if isinstance(bound, Number) else kind_of(bound)
    told = f"the key of '{curve.path}' is {name_of(due)}, and '{show(end)}' is {what}"
    return scope.fault("dimension-mismatch", told, end.span, expected=_FORMS[syntax.function])


def _key_dimension(scope: Scope, curve: Curve) -> Dimension:
    """What the key of a curve is that the design does not state."""
    entry = scope.shared.vocabulary.entry(curve.path)
    assert entry is not None
    return find_unit(entry.over[0], scope_units(scope)).dimension


def _outside(curve: Curve, rows: _Rows, span: tuple[Key, Key]) -> str:
    """What is missing where the range leaves the rows."""
    if span[0] < rows.keys[0]:
        return f"{curve.path} below {_shown(curve, rows.keys[0])}, where its rows begin"
    if span[1] > rows.keys[-1]:
        return f"{curve.path} beyond {_shown(curve, rows.keys[-1])}, where its rows end"
    return ""


def _shown(curve: Curve, key: Fraction) -> str:
    unit: Unit = curve.key_units[0]
    return f"{float(unit.of_si(key)[0]):g} {show_unit(unit)}".rstrip()


CURVES: dict[str, Callable[[Scope, Call, Curve], Bound]] = {"rising": _rising, "slope": _slope, "over": _over}
"""The functions of whole curves by name."""
_COUNTS = {"rising": (1, 1), "slope": (3, 3), "over": (4, 4)}
_FORMS = {
    "rising": "rising(curve)",
    "slope": "slope(curve, from, to)",
    "over": "over(curve, other, from, to)",
}


def steepest(bound: Bound, operator: str, left: bool) -> Bound:
    """All slopes of a stretch keep a limit where the one does that comes closest to it."""
    if not isinstance(bound, Slopes) or operator not in ("<", "<=", ">", ">="):
        return bound
    return bound.greatest if (operator in ("<", "<=")) == left else bound.least
