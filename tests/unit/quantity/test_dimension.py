from __future__ import annotations

from fractions import Fraction

from rulecheck.quantity.dimension import LENGTH, MASS, PURE, TIME, Dimension


def test_products_and_powers_of_dimensions() -> None:
    force = MASS * LENGTH / TIME**2
    assert force == Dimension.of(kg=1, m=1, s=-2)
    assert force / force == PURE
    assert (force**0).is_pure
    assert LENGTH ** Fraction(1, 2) * LENGTH ** Fraction(1, 2) == LENGTH


def test_the_print_is_sorted_and_a_pure_number_is_one() -> None:
    assert str(Dimension.of(s=-2, kg=1)) == "kg*s^-2"
    assert str(PURE) == "1"
    assert Dimension.of(m=0) == PURE
