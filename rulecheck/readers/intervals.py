"""Arithmetic on many intervals at once, in doubles that are rounded outwards: certain, though not exact.

An interval is a pair of its ends, each a double or an array of doubles, one for each lane. Every result encloses all
values that the operation takes on its operands: IEEE 754 rounds sums, products, quotients and square roots to the
nearest double, so one further out is beyond the true end. Not a number at both ends says that the number may have
no value there; it spreads through every operation, and no comparison with it is certain. Loads numpy.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from fractions import Fraction
from typing import Any

import numpy

Interval = tuple[Any, Any]
Rule = Callable[[Sequence[Interval]], Interval]
# Certainly true, certainly false: where neither, it is not certain.
Certainty = tuple[Any, Any]

NOWHERE: Interval = (math.nan, math.nan)
MOST_POWER = 8


def around(value: Fraction) -> Interval:
    """The narrowest interval of doubles around a rational.

    >>> around(Fraction(1, 4)), around(Fraction(1, 10))[0] < Fraction(1, 10) < around(Fraction(1, 10))[1]
    ((0.25, 0.25), True)
    """
    try:
        near = float(value)
    except OverflowError:
        return NOWHERE
    held = Fraction(near)
    return (
        near if held <= value else math.nextafter(near, -math.inf),
        near if held >= value else math.nextafter(near, math.inf),
    )


# A double is off by half the last place at most: 2^-53 of itself, or next to nothing where it is next to zero. Scaling
# by a power of two is exact, so the double found lies beyond the next one.
_PLACE, _NOTHING = 2.0**-52, 1e-300


def _out(low: Any, high: Any) -> Interval:
    return low - (abs(low) * _PLACE + _NOTHING), high + (abs(high) * _PLACE + _NOTHING)


def add(values: Sequence[Interval]) -> Interval:
    """The sum of two."""
    (a, b), (c, d) = values
    return _out(a + c, b + d)


def subtract(values: Sequence[Interval]) -> Interval:
    """The difference of two."""
    (a, b), (c, d) = values
    return _out(a - d, b - c)


def negate(values: Sequence[Interval]) -> Interval:
    """The interval with the other sign."""
    low, high = values[0]
    return -high, -low


def multiply(values: Sequence[Interval]) -> Interval:
    """The product of two; of one with itself, its square."""
    first, second = values
    if first is second:
        return _even_power(first, 2)
    if isinstance(first[0], float):
        first, second = second, first
    (a, b), (c, d) = first, second
    if isinstance(c, float) and isinstance(d, float) and (c >= 0 or d <= 0):
        return _scaled(first, c, d)
    corners = (a * c, a * d, b * c, b * d)
    return _out(_least(corners), _greatest(corners))


def _scaled(first: Interval, low: float, high: float) -> Interval:
    """The product with an interval on one side of zero."""
    a, b = first if low >= 0 else (-first[1], -first[0])
    low, high = (low, high) if low >= 0 else (-high, -low)
    if low == high:
        return _out(a * low, b * low)
    return _out(numpy.minimum(a * low, a * high), numpy.maximum(b * low, b * high))


def divide(values: Sequence[Interval]) -> Interval:
    """The quotient of two; nowhere where the divisor may be zero."""
    (a, b), (c, d) = values
    away = (c > 0) | (d < 0)
    c, d = numpy.where(away, c, math.nan), numpy.where(away, d, math.nan)
    corners = (a / c, a / d, b / c, b / d)
    return _out(_least(corners), _greatest(corners))


def absolute(values: Sequence[Interval]) -> Interval:
    """The magnitude."""
    low, high = values[0]
    return numpy.maximum(numpy.maximum(low, -high), 0.0), numpy.maximum(-low, high)


def total(values: Sequence[Interval]) -> Interval:
    """The sum of one or more. A sum of n doubles is off by less than n places of the sum of their magnitudes."""
    still = [value for value in values if isinstance(value[0], float)]
    if len(still) == len(values) or not all(math.isfinite(end) for value in still for end in value):
        return _one_by_one(values)
    moving = [value for value in values if not isinstance(value[0], float)]
    if still:
        moving.append(_out(math.fsum(low for low, _ in still), math.fsum(high for _, high in still)))
    size = len(moving)
    low, high = sum(value[0] for value in moving), sum(value[1] for value in moving)
    below, above = sum(abs(value[0]) for value in moving), sum(abs(value[1]) for value in moving)
    return low - size * (below * _PLACE + _NOTHING), high + size * (above * _PLACE + _NOTHING)


def _one_by_one(values: Sequence[Interval]) -> Interval:
    found = values[0]
    for value in values[1:]:
        found = add((found, value))
    return found


def minimum(values: Sequence[Interval]) -> Interval:
    """The least of one or more."""
    return _least([low for low, _ in values]), _least([high for _, high in values])


def maximum(values: Sequence[Interval]) -> Interval:
    """The greatest of one or more."""
    return _greatest([low for low, _ in values]), _greatest([high for _, high in values])


def square_root(values: Sequence[Interval]) -> Interval:
    """The square root; nowhere where the number may be negative."""
    low, high = values[0]
    sound = low >= 0
    low, high = numpy.where(sound, low, math.nan), numpy.where(sound, high, math.nan)
    least, greatest = _out(numpy.sqrt(low), numpy.sqrt(high))
    return numpy.maximum(least, 0.0), greatest


def whole_power(exponent: int) -> Rule:
    """The power with a whole exponent from 1 to `MOST_POWER`."""

    def rule(values: Sequence[Interval]) -> Interval:
        if exponent == 1:
            return values[0]
        even = _even_power(values[0], exponent - exponent % 2)
        return multiply((even, values[0])) if exponent % 2 else even

    return rule


def _even_power(value: Interval, exponent: int) -> Interval:
    base = absolute([value])
    low, high = base
    for _ in range(exponent - 1):
        low, high = _out(low * base[0], high * base[1])
        low = numpy.maximum(low, 0.0)
    return low, high


def _least(values: Sequence[Any]) -> Any:
    found = values[0]
    for value in values[1:]:
        found = numpy.minimum(found, value)
    return found


def _greatest(values: Sequence[Any]) -> Any:
    found = values[0]
    for value in values[1:]:
        found = numpy.maximum(found, value)
    return found


def at_most(left: Interval, right: Interval) -> Certainty:
    """Whether the first is not above the second."""
    return left[1] <= right[0], left[0] > right[1]


def below(left: Interval, right: Interval) -> Certainty:
    """Whether the first is below the second."""
    return left[1] < right[0], left[0] >= right[1]


def equal(left: Interval, right: Interval) -> Certainty:
    """Whether two numbers are equal: only that they differ can be certain, unless both are points."""
    apart = (left[1] < right[0]) | (left[0] > right[1])
    return (left[0] == right[1]) & (left[1] == right[0]), apart


def rule_of(name: str) -> Rule | None:
    """The rule of an operation that gives a number, None where there is none and the exact reader is to be asked."""
    if name.startswith("power["):
        exponent = name[6:-1]
        if exponent == "1/2":
            return square_root
        return whole_power(int(exponent)) if exponent.isdigit() and 1 <= int(exponent) <= MOST_POWER else None
    return NUMBERS.get(name)


NUMBERS: dict[str, Rule] = {
    "add": add,
    "subtract": subtract,
    "negate": negate,
    "multiply": multiply,
    "divide": divide,
    "abs": absolute,
    "total": total,
    "minimum": minimum,
    "maximum": maximum,
    "sqrt": square_root,
}
COMPARISONS: dict[str, Callable[[Interval, Interval], Certainty]] = {
    "at_most": at_most,
    "below": below,
    "equal": equal,
}
