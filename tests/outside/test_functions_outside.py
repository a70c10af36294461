"""Functions against mpmath to 50 digits, and the calendar against the standard library.

mpmath evaluates each function on its own algorithms, at 60 digits; ours are balls of 200 bits.
"""

from __future__ import annotations

from datetime import date, timedelta
from fractions import Fraction as F

import mpmath
import pytest

from rulecheck.graph.terms import Bank
from rulecheck.operations.arithmetic import rational_power
from rulecheck.operations.calendar import add_days, end_of_year
from rulecheck.operations.catalogue import CATALOGUE
from rulecheck.operations.exact import Rational
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.exact import ExactReader

POINTS = {
    "sqrt": [F(2), F(1, 7), F(10**20 + 1)],
    "exp": [F(1), F(-5, 3), F(40)],
    "ln": [F(2), F(1, 1000), F(10**9)],
    "log10": [F(2), F(3, 7)],
    "sin": [F(1), F(-22, 7), F(1000)],
    "cos": [F(1), F(11, 7), F(-1000)],
    "tan": [F(1), F(-3, 2)],
    "asin": [F(1, 3), F(-99, 100)],
    "acos": [F(1, 3), F(-99, 100)],
    "atan": [F(2), F(-1, 50)],
    "sinh": [F(1), F(-3)],
    "cosh": [F(1), F(-3)],
    "tanh": [F(1, 3), F(-3)],
}
CASES = [(name, point) for name, points in POINTS.items() for point in points]


def exactly(point):
    return mpmath.mpf(point.numerator) / point.denominator


def fifty_digits(operation, *points):
    bank = Bank()
    term = bank.apply(operation, [bank.number(point) for point in points], PURE)
    return str(ExactReader(bank, {}).decimal(term, 50))


def assert_same(found, due):
    with mpmath.workdps(60):
        assert abs(mpmath.mpf(found) - due) <= abs(due) * mpmath.mpf(10) ** -49


@pytest.mark.parametrize(("name", "point"), CASES)
def test_functions_to_fifty_digits(name, point):
    with mpmath.workdps(60):
        due = getattr(mpmath, name)(exactly(point))
    assert_same(fifty_digits(CATALOGUE[name], point), due)


@pytest.mark.parametrize(("y", "x"), [(F(1), F(2)), (F(1), F(-3)), (F(-2, 7), F(-3)), (F(-5), F(1, 9))])
def test_atan2_to_fifty_digits(y, x):
    with mpmath.workdps(60):
        due = mpmath.atan2(exactly(y), exactly(x))
    assert_same(fifty_digits(CATALOGUE["atan2"], y, x), due)


@pytest.mark.parametrize(("base", "exponent"), [(F(2), F(1, 3)), (F(7, 5), F(-5, 2)), (F(1, 9), F(2, 7))])
def test_powers_to_fifty_digits(base, exponent):
    with mpmath.workdps(60):
        due = exactly(base) ** exactly(exponent)
    assert_same(fifty_digits(rational_power(exponent), base), due)
    assert_same(fifty_digits(CATALOGUE["power"], base, exponent), due)


def test_roots_of_two_as_printed():
    # OEIS A002193: 1.41421356237309504880168872420969807856967187537694...
    assert fifty_digits(CATALOGUE["sqrt"], F(2)) == "1.4142135623730950488016887242096980785696718753769"


def test_days_against_the_standard_library():
    start = date(1996, 2, 27)
    for step in (-1000, -1, 0, 1, 2, 365, 366, 100_000):
        due = (start + timedelta(days=step)).toordinal()
        assert add_days.exact([Rational(start.toordinal()), Rational(step)]) == Rational(due)


def test_ends_of_years_against_the_standard_library():
    for year in (1, 1900, 2000, 2027, 2028, 9999):
        first = date(year, 1, 1)
        due = (date(year + 1, 1, 1) - timedelta(days=1)) if year < 9999 else date.max
        assert end_of_year.exact([Rational(first.toordinal())]) == Rational(due.toordinal())
