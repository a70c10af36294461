"""Real algebraic numbers, exactly: the second typed door to the library of exact numbers.

A number is a root of a polynomial with rational coefficients, known by that polynomial and a place.
Whether one is zero can always be decided, at a cost that grows fast with the degree.
"""

from __future__ import annotations

from fractions import Fraction
from typing import Any

from flint import fmpq as Rational
from flint.types import _gr  # type: ignore[attr-defined,unused-ignore]

_FIELD: Any = _gr.gr_real_qqbar_ctx.new()

# An element of the field; the library gives it no type of its own.
AlgebraicNumber = Any


def algebraic(value: Rational | int) -> AlgebraicNumber:
    """A rational as an algebraic number."""
    return _FIELD(value)


def is_zero(value: AlgebraicNumber) -> bool:
    """Decides whether a number is zero.

    >>> is_zero(raised(algebraic(2), Fraction(1, 2)) * raised(algebraic(8), Fraction(1, 2)) - algebraic(4))
    True
    """
    return bool(_FIELD.is_zero(value))


def sign(value: AlgebraicNumber) -> int:
    """-1, 0 or 1."""
    return 0 if is_zero(value) else (1 if _FIELD.cmp(value, _FIELD(0)) > 0 else -1)


def raised(base: AlgebraicNumber, exponent: Fraction) -> AlgebraicNumber:
    """A power; the base is positive, or the exponent a whole number and the base not zero."""
    power = _FIELD(Rational(exponent.numerator, exponent.denominator))
    return _FIELD.pow(base, power)


def sine_of_half_turns(multiple: Rational) -> AlgebraicNumber | None:
    """The sine of `multiple` times pi where that is a multiple of 15 deg, else None."""
    steps = multiple * 12
    if steps.denom() != 1:
        return None
    place = int(steps.numer()) % 24
    sine = _SINES[min(place % 12, 12 - place % 12)]
    return -sine if place > 12 else sine


def _root(value: int) -> AlgebraicNumber:
    return _FIELD(value).sqrt()


# At 0, 15, 30, 45, 60, 75 and 90 deg.
_SINES = (
    _FIELD(0),
    (_root(6) - _root(2)) / _FIELD(4),
    _FIELD(Rational(1, 2)),
    _root(2) / _FIELD(2),
    _root(3) / _FIELD(2),
    (_root(6) + _root(2)) / _FIELD(4),
    _FIELD(1),
)
