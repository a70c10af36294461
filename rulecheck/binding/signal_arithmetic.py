"""Arithmetic with signals, sample by sample: with constants, and with one another where their records overlap."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from fractions import Fraction
from typing import Any

from rulecheck.binding.bound import BROKEN, Bound, Broken, Number, Signal, kind_of
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import Binary, Syntax
from rulecheck.graph.terms import Term
from rulecheck.operations.exact import Rational, exact_number, to_fraction
from rulecheck.operations.samples import Samples, added, linear, magnitude, multiplied
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.units import Unit

_VERBS = {"+": "added", "-": "subtracted", "*": "multiplied", "/": "divided", "^": "raised"}


def made(scope: Scope, key: tuple[object, ...], signal: Signal, make: Callable[[], Samples | None]) -> Signal:
    """A signal with samples that are made once, and kept for as long as others are looked up by them."""
    whole = ("samples", *key)
    if whole not in scope.shared.memo:
        scope.shared.memo[whole] = make()
    return replace(signal, samples=scope.shared.memo[whole])


def settled(term: Term) -> Any:
    """The exact value of a term that rests on constants alone, else None."""
    if term.kind == "constant":
        return exact_number(term.value) if isinstance(term.value, Monomial) else None
    if term.operation is None:
        return None
    values = [settled(part) for part in term.arguments]
    if any(value is None for value in values):
        return None
    found = term.operation.exact(values)
    return found if found is not None and hasattr(found, "sign" if not isinstance(found, Rational) else "p") else None


_IN_THE_LIMIT = "put what may change into the limit, as in longest(s > limit), or outside of the function"


def rational(
    scope: Scope, number: Number, syntax: Syntax, what: str, advice: str = _IN_THE_LIMIT
) -> tuple[Fraction, int] | Broken:
    """A constant as `fraction * pi^power`; noted where it is none."""
    value = number.term.value
    if number.term.kind == "constant" and isinstance(value, Monomial):
        return value.rational, value.power
    found = settled(number.term)
    if isinstance(found, Rational):
        return to_fraction(found), 0
    told = f"{what} is a constant, and '{show(syntax)}' is not"
    return scope.fault("kind-mismatch", told, syntax.span, expected="a number with unit", advice=advice)


def turned(scope: Scope, signal: Signal) -> Signal:
    """`-s`."""
    if signal.samples is None:
        return signal
    given = signal.samples
    return made(scope, ("-", id(given)), signal, lambda: linear(given, Fraction(-1)))


def without_sign(scope: Scope, signal: Signal) -> Signal:
    """`abs(s)`."""
    if signal.samples is None:
        return signal
    given = signal.samples
    return made(scope, ("abs", id(given)), signal, lambda: magnitude(given))


def calculated(scope: Scope, syntax: Binary, left: Bound, right: Bound) -> Bound:
    """A signal with a number or with another signal."""
    for side, part in ((left, syntax.left), (right, syntax.right)):
        if not isinstance(side, (Number, Signal)):
            told = f"a signal and {kind_of(side)} cannot be {_VERBS[syntax.operator]}"
            return scope.fault("kind-mismatch", told, part.span, expected="a signal or a number")
        if isinstance(side, Number) and side.offset:
            told = f"'{show(part)}' is a point on a scale and cannot be calculated with"
            return scope.fault("dimension-mismatch", told, part.span, advice="write a difference in K")
    assert isinstance(left, (Number, Signal)) and isinstance(right, (Number, Signal))
    if syntax.operator == "^" or (syntax.operator == "/" and isinstance(right, Signal)):
        told = f"a signal cannot be {'raised to a power' if syntax.operator == '^' else 'a divisor'}"
        return scope.fault("kind-mismatch", told, syntax.span, expected="+, -, * of signals, or / by a number")
    if syntax.operator in "+-" and left.dimension != right.dimension:
        told = (
            f"'{show(syntax.left)}' is {name_of(left.dimension)}, '{show(syntax.right)}' is {name_of(right.dimension)}"
        )
        return scope.fault("dimension-mismatch", told, syntax.span, advice="the two sides must be of one dimension")
    return _both(scope, syntax, left, right) if isinstance(left, Signal) and isinstance(right, Signal) else _one(
        scope, syntax, left, right
    )  # fmt: skip


def _head(syntax: Binary, left: Number | Signal, right: Number | Signal) -> Signal:
    """The signal that results, without samples."""
    path = " and ".join(side.path for side in (left, right) if isinstance(side, Signal))
    lacking = " and ".join(side.lacking for side in (left, right) if isinstance(side, Signal) and side.lacking)
    dimension, unit = left.dimension, left.unit or right.unit
    if syntax.operator in "*/":
        dimension = left.dimension * right.dimension if syntax.operator == "*" else left.dimension / right.dimension
        unit = _product_unit(syntax.operator, left, right)
    counted = left.counted and right.counted and syntax.operator != "/"
    return Signal(path, None, dimension, unit, lacking, syntax.span, counted)


def _product_unit(operator: str, left: Number | Signal, right: Number | Signal) -> Unit | None:
    if right.dimension.is_pure:
        return left.unit
    return right.unit if left.dimension.is_pure and operator == "*" else None


def _both(scope: Scope, syntax: Binary, left: Signal, right: Signal) -> Bound:
    head, a, b = _head(syntax, left, right), left.samples, right.samples
    if a is None or b is None:
        return head
    key = (syntax.operator, id(a), id(b))
    if syntax.operator == "*":
        found = made(scope, key, head, lambda: multiplied(a, b))
    else:
        found = made(scope, key, head, lambda: added(a, b, 1 if syntax.operator == "+" else -1))
        if found.samples is None:
            told = "one of these signals is in a unit with pi, the other is not"
            return scope.fault("log-file", told, syntax.span, advice="log both in one unit, such as rad or deg")
    return overlapping(found)


def overlapping(signal: Signal) -> Signal:
    """The signal, or without samples where the records that it is made of have no time in common."""
    if signal.samples is not None and len(signal.samples.values) < 2:
        return replace(signal, samples=None, lacking=f"records of {signal.path} that overlap")
    return signal


def _one(scope: Scope, syntax: Binary, left: Number | Signal, right: Number | Signal) -> Bound:
    head = _head(syntax, left, right)
    signal, number = (left, right) if isinstance(left, Signal) else (right, left)
    assert isinstance(signal, Signal) and isinstance(number, Number)
    part = syntax.right if signal is left else syntax.left
    found = rational(scope, number, part, "what a signal is calculated with")
    if isinstance(found, Broken):
        return BROKEN
    value, power = found
    if syntax.operator == "/" and not value:
        return scope.fault("bad-value", "a signal is divided by zero", part.span, expected="another number")
    given = signal.samples
    if given is None:
        return head
    make = _linear(syntax.operator, given, value, power, signal is left)
    key = (syntax.operator, id(given), value, power, signal is left)
    done = made(scope, key, head, make)
    if done.samples is None:
        return _mixed(scope, syntax.span)
    return done


def _mixed(scope: Scope, span: Span) -> Broken:
    told = "the signal or the number is in a unit with pi, the other is not"
    return scope.fault("log-file", told, span, advice="write the number in the unit of the log, such as rad or deg")


def _linear(
    operator: str, given: Samples, value: Fraction, power: int, signal_left: bool
) -> Callable[[], Samples | None]:
    if operator == "*":
        return lambda: linear(given, value, power=power)
    if operator == "/":
        return lambda: linear(given, 1 / value, power=-power)
    if value and power != given.power and not given.is_zero:
        return lambda: None
    slope = Fraction(1) if signal_left or operator == "+" else Fraction(-1)
    height = value if operator == "+" or not signal_left else -value
    moved = replace(given, power=power) if given.is_zero else given
    return lambda: linear(moved, slope, height)
