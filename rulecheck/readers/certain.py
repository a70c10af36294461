"""Numbers that say what is certain: exact while they can be, else balls, with the operators that partials use.

A comparison that a ball does not settle raises `Unsure`, so no slope ever rests on rounding. `SPACE` stands in for
`math` where an operation's own partials are evaluated with such numbers.
"""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from typing import Any

from rulecheck.operations import arithmetic, roots_and_exponentials, trigonometry
from rulecheck.operations.exact import (
    BITS,
    Ball,
    PiNumber,
    Rational,
    all_exact,
    from_fraction,
    is_exact,
    sign,
    size,
    to_ball,
)
from rulecheck.operations.operation import UNDECIDED, Operation, Undefined
from rulecheck.operations.powers import rational_power_of_ball, rational_power_of_exact

Value = Any
"""A rational, a quotient of polynomials in pi, or a ball."""


class Unsure(Exception):
    """What was asked is not settled by the numbers as they are known."""


class Certain:
    """A number as it is known: exact, or a ball around it.

    >>> Certain(Rational(1, 3)) * 3 == 1, Certain(Ball(2).sqrt()) > 1
    (True, True)
    """

    __slots__ = ("value",)
    __hash__ = None  # type: ignore[assignment]

    def __init__(self, value: Value) -> None:
        self.value = _kept(value)

    def __add__(self, other: Any) -> Certain:
        return Certain(self.value + lifted(other))

    __radd__ = __add__

    def __neg__(self) -> Certain:
        return Certain(-self.value)

    def __sub__(self, other: Any) -> Certain:
        return Certain(self.value - lifted(other))

    def __rsub__(self, other: Any) -> Certain:
        return Certain(lifted(other) - self.value)

    def __mul__(self, other: Any) -> Certain:
        factor = lifted(other)
        if is_exact(factor) and not factor:
            return ZERO  # also of a ball that is not finite, whose number is
        return Certain(self.value * factor)

    __rmul__ = __mul__

    def __truediv__(self, other: Any) -> Certain:
        return applied(arithmetic.divide, self, other)

    def __rtruediv__(self, other: Any) -> Certain:
        return applied(arithmetic.divide, other, self)

    def __pow__(self, exponent: Any) -> Certain:
        if isinstance(exponent, (int, float, Fraction)):
            fixed = Fraction(exponent)
            value = self.value
            found = rational_power_of_exact(value, fixed) if is_exact(value) else None
            return _settled(rational_power_of_ball(to_ball(value), fixed) if found is None else found)
        return applied(arithmetic.power, self, exponent)

    def __abs__(self) -> Certain:
        return Certain(abs(self.value))

    def __bool__(self) -> bool:
        return self.sign() != 0

    def __eq__(self, other: object) -> bool:
        return self._against(other) == 0

    def __ne__(self, other: object) -> bool:
        return self._against(other) != 0

    def __lt__(self, other: Any) -> bool:
        return self._against(other) < 0

    def __gt__(self, other: Any) -> bool:
        return self._against(other) > 0

    def __le__(self, other: Any) -> bool:
        return _not_negative(lifted(other) - self.value)

    def __ge__(self, other: Any) -> bool:
        return _not_negative(self.value - lifted(other))

    def _against(self, other: Any) -> int:
        return Certain(self.value - lifted(other)).sign()

    def sign(self) -> int:
        """-1, 0 or 1. Raises `Unsure` where a ball holds zero and more."""
        if is_exact(self.value):
            return sign(self.value)
        if self.value > 0 or self.value < 0:
            return 1 if self.value > 0 else -1
        if self.value.is_zero():
            return 0
        raise Unsure

    @property
    def is_exact(self) -> bool:
        """True where the number is known without a radius."""
        return is_exact(self.value)

    def ball(self) -> Ball:
        """A ball around it."""
        return to_ball(self.value)

    def __float__(self) -> float:
        return float(self.ball().mid())


def _not_negative(room: Value) -> bool:
    if is_exact(room):
        return sign(room) >= 0
    if room >= 0:
        return True
    if room < 0:
        return False
    raise Unsure


def _kept(value: Value) -> Value:
    return to_ball(value) if is_exact(value) and size(value) > BITS else value


def lifted(other: Any) -> Value:
    """The value of a number of any kind; doubles and fractions are taken as the exact numbers that they are."""
    if isinstance(other, Certain):
        return other.value
    if isinstance(other, (Rational, PiNumber, Ball)):
        return other
    try:
        return from_fraction(Fraction(other))
    except (ValueError, OverflowError):
        raise Unsure from None  # not a number, or without bound


def applied(operation: Operation, *operands: Any) -> Certain:
    """An operation by its exact rule, else by its ball rule."""
    values = [lifted(operand) for operand in operands]
    found = operation.exact(values) if all_exact(values) else None
    return _settled(operation.ball(values) if found is None else found)


def _settled(found: Any) -> Certain:
    if found is UNDECIDED or isinstance(found, Undefined) or (isinstance(found, Ball) and not found.is_finite()):
        raise Unsure
    return Certain(found)


ZERO = Certain(Rational(0))
ONE = Certain(Rational(1))
# Every slope from the one number to the other.
UP_TO_ONE = Certain(Ball(0.5, 0.5))
BOTH_WAYS = Certain(Ball(0, 1))


def _function(operation: Operation) -> Callable[[Any], Certain]:
    return lambda value: applied(operation, value)


class _Space:
    """The functions that partials use, on certain numbers; `certain` tells them which space this is."""

    certain = True
    sqrt = staticmethod(_function(roots_and_exponentials.sqrt))
    exp = staticmethod(_function(roots_and_exponentials.exp))
    log = staticmethod(_function(roots_and_exponentials.ln))
    sin = staticmethod(_function(trigonometry.sin))
    cos = staticmethod(_function(trigonometry.cos))
    tan = staticmethod(_function(trigonometry.tan))
    sinh = staticmethod(_function(trigonometry.sinh))
    cosh = staticmethod(_function(trigonometry.cosh))
    tanh = staticmethod(_function(trigonometry.tanh))


SPACE = _Space()
