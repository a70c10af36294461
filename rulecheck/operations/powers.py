"""The rules of powers: exact where they can be and stay small, else on balls."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from typing import Any

from rulecheck.operations.exact import (
    BITS,
    Ball,
    Exact,
    Rational,
    exact_root,
    from_fraction,
    sign,
    size,
    to_ball,
    to_fraction,
)
from rulecheck.operations.operation import UNDECIDED, Undefined
from rulecheck.operations.spaces import is_arrays, is_certain, is_symbolic, logarithm, raised

FRACTIONAL = Undefined("a fractional power of a negative number")
BY_ZERO = Undefined("division by zero")
# Roots of a higher degree are left to balls.
HIGHEST_ROOT = 1000


def rational_power_of_exact(base: Exact, exponent: Fraction) -> Any:
    """`base ^ exponent` in the exact ring, `Undefined`, or None where it leads out of the ring."""
    if not base:
        return _power_of_zero(exponent)
    if exponent.denominator == 1:
        return _whole_power(base, exponent.numerator)
    if sign(base) < 0:
        return FRACTIONAL
    if exponent.denominator > HIGHEST_ROOT:
        return None
    found = exact_root(base, exponent.denominator)
    return None if found is None else _whole_power(found, exponent.numerator)


def rational_power_of_ball(base: Ball, exponent: Fraction) -> Any:
    """The same on a ball."""
    whole = exponent.denominator == 1
    if exponent < 0 and base.contains(0):
        return BY_ZERO if base.is_zero() else UNDECIDED
    if not whole and not base >= 0:
        return FRACTIONAL if base < 0 else UNDECIDED
    if whole or base.contains(0):
        return _whole_power_of_ball(base if whole else base.root(exponent.denominator), exponent.numerator)
    return base ** from_fraction(exponent)


def _whole_power_of_ball(base: Ball, exponent: int) -> Ball:
    """By products: flint's own power goes through the logarithm and is lost on a ball that holds zero."""
    rest = abs(exponent)
    square = base if rest % 2 else abs(base)
    found = Ball(1)
    while rest:
        if rest % 2:
            found *= square
        square *= square
        rest //= 2
    return found if exponent >= 0 else 1 / found


def power_of_exact(values: Sequence[Any]) -> Any:
    """`base ^ exponent` with any exponent."""
    base, exponent = values
    if isinstance(exponent, Rational):
        return rational_power_of_exact(base, to_fraction(exponent))
    if sign(base) > 0:
        return Rational(1) if base == Rational(1) else None
    return FRACTIONAL if base else _power_of_zero(exponent)


def power_of_balls(values: Sequence[Any]) -> Any:
    """The same on balls; the exponent may be exact."""
    base, exponent = to_ball(values[0]), values[1]
    if isinstance(exponent, Rational):
        return rational_power_of_ball(base, to_fraction(exponent))
    raised_to = to_ball(exponent)
    if base > 0:
        return base**raised_to
    if base < 0 and not raised_to.contains_integer():
        return FRACTIONAL
    return UNDECIDED


def constant_power_partials(space: Any, base: Any, exponent: Fraction) -> Any:
    """The derivative of `base ^ exponent`: `exponent * base ^ (exponent - 1)`."""
    lower = exponent - 1
    if is_symbolic(space):
        return space.Rational(exponent.numerator, exponent.denominator) * base ** space.Rational(
            lower.numerator, lower.denominator
        )
    if is_certain(space):
        return exponent * base**lower
    return float(exponent) * raised(space, base, int(lower) if lower.denominator == 1 else float(lower))


def power_partials(space: Any, values: Sequence[Any]) -> Sequence[Any]:
    """By the base, `e b^(e-1)`; by the exponent, `b^e ln b`, which needs a positive base."""
    base, exponent = values
    if is_arrays(space):
        base, exponent = space.asarray(base, dtype=float), space.asarray(exponent, dtype=float)
    by_base = exponent * raised(space, base, exponent - 1)
    return by_base, raised(space, base, exponent) * logarithm(space, base)


def _whole_power(base: Exact, exponent: int) -> Any:
    if abs(exponent) * size(base) > BITS and base not in (Rational(1), Rational(-1)):
        return None
    return base ** (exponent if abs(exponent) < BITS else exponent % 2)


def _power_of_zero(exponent: Any) -> Any:
    if not exponent:
        return Rational(1)
    return Rational(0) if exponent > 0 else BY_ZERO
