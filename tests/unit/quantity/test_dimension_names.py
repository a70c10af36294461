from __future__ import annotations

from fractions import Fraction

import pytest

from rulecheck.quantity.dimension import LENGTH, PURE, Dimension
from rulecheck.quantity.dimension_names import base_form, example_unit, name_of, preferred
from rulecheck.quantity.units import find_unit


@pytest.mark.parametrize(
    ("dimension", "words"),
    [
        (LENGTH, "length [m]"),
        (PURE, "pure number [1]"),
        (LENGTH**2, "area [m^2]"),
        (Dimension.of(kg=1, m=-3), "density [kg/m^3]"),
        (Dimension.of(day=1), "calendar days [day]"),
        (Dimension.of(EUR=1), "[EUR]"),
        (Dimension.of(kg=3, s=-1), "[kg^3/s]"),
        (LENGTH ** Fraction(1, 2), "[m^(1/2)]"),
    ],
)
def test_dimensions_have_words(dimension: Dimension, words: str) -> None:
    assert name_of(dimension) == words


def test_examples_take_an_everyday_unit_of_the_same_dimension() -> None:
    assert example_unit(LENGTH) == "mm"
    assert example_unit(Dimension.of(kg=1)) == "kg"
    for symbol in ("m", "m/s", "1/s", "J", "Pa", "W", "N"):
        dimension = find_unit(symbol).dimension
        assert find_unit(example_unit(dimension)).dimension == dimension


def test_the_base_form_stands_for_the_dimension() -> None:
    dimension = Dimension.of(kg=1, m=-1, s=-5)
    assert base_form(dimension) == "kg/(m*s^5)"
    assert find_unit(base_form(dimension)) == preferred(dimension)
