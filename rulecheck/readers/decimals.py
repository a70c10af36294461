"""Exact rationals as decimals with a number of significant digits."""

from __future__ import annotations

import math
from decimal import Decimal, InvalidOperation
from fractions import Fraction

from rulecheck.operations.exact import Ball


def rounded(value: Fraction, digits: int) -> Decimal:
    """`value` with so many significant digits, ties away from zero.

    >>> rounded(Fraction(1, 3), 4), rounded(Fraction(-25, 2), 2), rounded(Fraction(9999, 10), 3)
    (Decimal('0.3333'), Decimal('-13'), Decimal('1.00E+3'))
    """
    if not value:
        return Decimal(0)
    magnitude = abs(value)
    exponent = _leading_exponent(magnitude) - digits + 1
    whole = math.floor(magnitude / _power_of_ten(exponent) + Fraction(1, 2))
    if whole == 10**digits:
        whole, exponent = whole // 10, exponent + 1
    figures = tuple(int(figure) for figure in str(whole))
    return Decimal((int(value < 0), figures, exponent))


def in_digits(ball: Ball, digits: int) -> Decimal | None:
    """The midpoint of a ball; None where its exponent is beyond what `Decimal` holds."""
    try:
        return Decimal(ball.str(digits, radius=False))
    except InvalidOperation:
        return None


def _leading_exponent(magnitude: Fraction) -> int:
    """The n with 10^n <= magnitude < 10^(n + 1)."""
    bits = magnitude.numerator.bit_length() - magnitude.denominator.bit_length()
    found = math.floor(bits * math.log10(2)) - 1
    while magnitude >= _power_of_ten(found + 1):
        found += 1
    return found


def _power_of_ten(exponent: int) -> Fraction:
    return Fraction(10**exponent) if exponent >= 0 else Fraction(1, 10**-exponent)
