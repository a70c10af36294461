"""Areas of unions: against shapely, by hand, and what moving, doubling and cutting must not change."""

from __future__ import annotations

from fractions import Fraction
from itertools import pairwise

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely.geometry import Polygon
from shapely.ops import unary_union

from rulecheck.geometry.union_area import MOST_EDGES, union_area

NUMBER = st.fractions(-9, 9, max_denominator=4)
RING = st.lists(st.tuples(NUMBER, NUMBER), min_size=3, max_size=7, unique=True).filter(
    lambda ring: Polygon([(float(x), float(y)) for x, y in ring]).is_valid
)
RINGS = st.lists(RING, min_size=1, max_size=4)


def box(x: int, y: int, width: int, height: int) -> list[tuple[Fraction, Fraction]]:
    corners = ((x, y), (x + width, y), (x + width, y + height), (x, y + height))
    return [(Fraction(a), Fraction(b)) for a, b in corners]


def shoelace(ring: list[tuple[Fraction, Fraction]]) -> Fraction:
    """Area of one outline by its corners (Gauss; any textbook of surveying)."""
    return abs(sum((a[0] * b[1] - b[0] * a[1] for a, b in pairwise([*ring, ring[0]])), Fraction(0))) / 2


@settings(max_examples=60, deadline=None)
@given(RINGS)
def test_against_shapely(rings: list[list[tuple[Fraction, Fraction]]]) -> None:
    due = unary_union([Polygon([(float(x), float(y)) for x, y in ring]) for ring in rings]).area
    assert float(union_area(rings)) == pytest.approx(due, rel=1e-9, abs=1e-9)


@settings(max_examples=40, deadline=None)
@given(RING, st.tuples(NUMBER, NUMBER))
def test_one_outline_is_its_shoelace_and_stays_so(
    ring: list[tuple[Fraction, Fraction]], by: tuple[Fraction, Fraction]
) -> None:
    moved = [(x + by[0], y + by[1]) for x, y in ring]
    assert union_area([ring]) == shoelace(ring) == union_area([moved]) == union_area([ring, ring[::-1]])
    assert union_area([[(y, x) for x, y in ring]]) == shoelace(ring)


@pytest.mark.parametrize(
    ("boxes", "area"),
    [
        ([(0, 0, 4, 4)], 16),
        ([(0, 0, 4, 4), (2, 2, 4, 4)], 28),
        ([(0, 0, 4, 4), (4, 0, 2, 4)], 24),
        ([(0, 0, 9, 9), (2, 2, 1, 1)], 81),
        ([(0, 0, 1, 1), (5, 5, 2, 2)], 5),
        ([(0, 0, 6, 1), (0, 0, 1, 6), (5, 0, 1, 6), (0, 5, 6, 1)], 20),
        ([], 0),
    ],
)
def test_by_hand(boxes: list[tuple[int, int, int, int]], area: int) -> None:
    assert union_area([box(*item) for item in boxes]) == area


def test_the_bound() -> None:
    ring = [(Fraction(place), Fraction(place * place)) for place in range(MOST_EDGES + 1)]
    with pytest.raises(ValueError, match="edges are more than"):
        union_area([ring])
