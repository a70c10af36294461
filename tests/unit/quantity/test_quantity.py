from __future__ import annotations

from fractions import Fraction

import pytest

from rulecheck.quantity.quantity import Quantity, Tolerance, Uncertainty
from rulecheck.quantity.units import find_unit

MM = find_unit("mm")


@pytest.mark.parametrize(
    ("quantity", "shown"),
    [
        (Quantity(Fraction(1900), MM), "1900 mm"),
        (Quantity(Fraction(3, 10), find_unit("1")), "0.3"),
        (Quantity(Fraction(1895), MM, Uncertainty(Fraction(3, 5), Fraction(2), "normal")), "1895 mm ± 0.6 mm (k=2)"),
        (Quantity(Fraction(1895), MM, Uncertainty(Fraction(1))), "1895 mm ± 1 mm"),
        (Quantity(Fraction(5), MM, Uncertainty(Fraction(1), None, "triangular")), "5 mm ± 1 mm (triangular)"),
        (Quantity(Fraction(1895), MM, Tolerance(Fraction(0), Fraction(-2))), "1895 mm +0/-2 mm"),
        (Quantity(Fraction(10), MM, Tolerance(Fraction(3), Fraction(1))), "10 mm +3/+1 mm"),
        (Quantity(Fraction(9, 5), find_unit("bar"), pressure="gauge"), "1.8 bar gauge"),
    ],
)
def test_a_quantity_is_shown_as_it_is_written(quantity: Quantity, shown: str) -> None:
    assert str(quantity) == shown


def test_the_si_value_is_exact() -> None:
    assert Quantity(Fraction(1900), MM).si() == Quantity(Fraction(19, 10), find_unit("m")).si()
    assert Quantity(Fraction(180), find_unit("deg")).si() == Quantity(Fraction(1, 2), find_unit("turn")).si() == (1, 1)


def test_limits_follow_from_the_spread() -> None:
    assert Quantity(Fraction(5), MM).limits() == (5, 5)
    assert Quantity(Fraction(5), MM, Uncertainty(Fraction(2))).limits() == (3, 7)
    assert Quantity(Fraction(5), MM, Tolerance(Fraction(0), Fraction(-2))).limits() == (3, 5)


def test_variances_by_the_guide_to_uncertainty() -> None:
    # JCGM 100:2008, 4.3.3, 4.3.7, 4.3.9 (clause numbers from memory): (U/k)^2, a^2/3, a^2/6
    assert Uncertainty(Fraction(6), Fraction(2), "normal").variance() == 9
    assert Uncertainty(Fraction(6)).variance() == 12
    assert Uncertainty(Fraction(6), None, "triangular").variance() == 6
