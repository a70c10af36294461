"""Ranges joined, hulls and lines of sight against shapely; areas of outlines against published values.

Source: shapely 2 (GEOS): union, distance, convex hull. A box lies in a union where the union covers it; its room is
the distance to the border of the union.
"""

from __future__ import annotations

import random
from fractions import Fraction

import pytest
from shapely import LineString, MultiPoint, Polygon, box, unary_union
from zone_shapes import Bench, signed, star

from rulecheck.geometry.bodies import Body
from rulecheck.geometry.hulls import in_hull, in_hull_of_view
from rulecheck.geometry.outlines import area
from rulecheck.geometry.sightlines import clear_in_view
from rulecheck.geometry.union_area import union_area
from rulecheck.geometry.zones import Every, Range, Some, clear, inside

Ends = tuple[Fraction, Fraction]


def _ends(chance: random.Random, most: int) -> Ends:
    low = Fraction(chance.randint(-most, most - 1))
    return low, low + chance.randint(1, most)


def _in_unions(seed: int, count: int) -> tuple[int, int]:
    chance = random.Random(seed)
    held = 0
    for _ in range(count):
        bench = Bench()
        boxes = [(_ends(chance, 6), _ends(chance, 6)) for _ in range(chance.randint(2, 3))]
        body = (_ends(chance, 3), _ends(chance, 3))
        zone = Some(tuple(
            Every(tuple(Range(axis, bench.term(low), bench.term(high)) for axis, (low, high) in zip("xz", ends, strict=True)))
            for ends in boxes
        ))  # fmt: skip
        spans = {axis: (bench.term(low), bench.term(high)) for axis, (low, high) in zip("xz", body, strict=True)}
        thing = Body({**spans, "y": spans["x"]})
        union = unary_union([box(float(x[0]), float(z[0]), float(x[1]), float(z[1])) for x, z in boxes])
        own = box(float(body[0][0]), float(body[1][0]), float(body[0][1]), float(body[1][1]))
        room, within = bench.read(inside(bench.make, zone, thing))
        assert within == union.covers(own)
        if within:
            assert room == pytest.approx(union.boundary.distance(own), abs=1e-9)
            held += 1
        away, off = bench.read(clear(bench.make, zone, thing))
        assert off == (union.intersection(own).area == 0)
        if off:
            assert away == pytest.approx(union.distance(own), abs=1e-9)
    return held, count


def test_a_box_in_a_union_of_ranges() -> None:
    held, count = _in_unions(1, 40)
    assert 1 < held < count, "both sides are met"


@pytest.mark.long
def test_many_boxes_in_unions_of_ranges() -> None:
    _in_unions(2, 1500)


def test_hulls_in_a_view() -> None:
    chance = random.Random(3)
    for _ in range(20):
        bench = Bench()
        corners = star(chance, chance.randint(3, 6))
        (point,) = star(chance, 3)[:1]
        hull = MultiPoint([(float(x), float(y)) for x, y in corners]).convex_hull
        margin, _ = bench.read(in_hull_of_view(bench.make, bench.polygon(corners), bench.polygon([point])[0]))
        assert margin == pytest.approx(signed(hull, point), abs=1e-9)


def test_a_hull_in_space() -> None:
    # The corners of a unit cube and its inside; by hand.
    corners = [(Fraction(x), Fraction(y), Fraction(z)) for x in (0, 1) for y in (0, 1) for z in (0, 1)]
    for point, room in (
        ((Fraction(1, 2), Fraction(1, 2), Fraction(1, 4)), 0.25),
        ((Fraction(1, 2), Fraction(3, 2), Fraction(1, 2)), -0.5),
    ):
        bench = Bench()
        places = [tuple(bench.term(value) for value in corner) for corner in (*corners, point)]
        margin, _ = bench.read(in_hull(bench.make, places[:-1], places[-1]))  # type: ignore[arg-type]
        assert margin == pytest.approx(room)


def test_lines_of_sight_stay_clear_of_outlines() -> None:
    chance = random.Random(4)
    met = set()
    for _ in range(14):
        bench = Bench()
        outline = star(chance, chance.randint(3, 5))
        start, end = star(chance, 3)[0], star(chance, 3)[1]
        shape = Polygon([(float(x), float(y)) for x, y in outline])
        line = LineString([(float(x), float(y)) for x, y in (start, end)])
        a, b = bench.polygon([start, end])
        margin, free = bench.read(clear_in_view(bench.make, bench.polygon(outline), a, b))
        assert free == (shape.distance(line) > 0 or shape.intersection(line).length < 1e-12)
        if free:
            assert margin == pytest.approx(shape.distance(line), abs=1e-9)
        met.add(free)
    assert met == {True, False}


@pytest.mark.parametrize(
    ("corners", "expected"),
    [
        # A worked example of the shoelace formula, from memory: area 16.5.
        ([(1, 6), (3, 1), (7, 2), (4, 4), (8, 5)], Fraction(33, 2)),
        # A rectangle and a right triangle, by definition.
        ([(0, 0), (3, 0), (3, 2), (0, 2)], Fraction(6)),
        ([(0, 0), (3, 0), (0, 1)], Fraction(3, 2)),
    ],
)
def test_areas_of_outlines(corners: list[tuple[int, int]], expected: Fraction) -> None:
    exact = [(Fraction(x), Fraction(y)) for x, y in corners]
    assert area(exact) == expected
    assert area(exact[::-1]) == -expected


def test_area_of_two_squares_that_overlap() -> None:
    """Derived: the area of A or B is the area of A and that of B less what both cover, 1 + 1 - 1/4."""
    one = [(Fraction(x), Fraction(y)) for x, y in ((0, 0), (1, 0), (1, 1), (0, 1))]
    other = [(x + Fraction(1, 2), y + Fraction(1, 2)) for x, y in one]
    assert union_area([one, other]) == union_area([other[::-1], one]) == Fraction(7, 4)
