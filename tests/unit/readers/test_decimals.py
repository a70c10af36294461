"""Rationals with significant digits."""

from __future__ import annotations

from fractions import Fraction as F

import pytest

from rulecheck.operations.exact import Ball
from rulecheck.readers.decimals import in_digits, rounded


@pytest.mark.parametrize(
    ("value", "digits", "due"),
    [
        (F(0), 3, "0"),
        (F(19, 10), 3, "1.90"),
        (F(2, 3), 4, "0.6667"),
        (F(-1, 8), 2, "-0.13"),
        (F(12345), 2, "1.2E+4"),
        (F(99999, 10), 3, "1.00E+4"),
        (F(1, 10**30), 2, "1.0E-30"),
        (F(10**30), 2, "1.0E+30"),
    ],
)
def test_rounded(value, digits, due):
    assert str(rounded(value, digits)) == due


def test_balls():
    assert str(in_digits(Ball(1.5), 3)) == "1.50"
    assert in_digits(Ball(10) ** Ball(10) ** 30, 3) is None
