"""Signed distances against shapely: points, and polygons in or clear of each other.

Source: shapely 2 (GEOS), an independent implementation of the same definitions (OGC Simple Features: distance is the
least between any two points). Sides are compared wherever the distance is above what double precision can tell.
"""

from __future__ import annotations

import math
import random

import pytest
from shapely import Polygon
from zone_shapes import Bench, farthest, hull, signed, star

from rulecheck.geometry.polygons import point_room, room_clear, room_inside

NEAR = 1e-9


def _polygon(corners: object) -> Polygon:
    return Polygon([(float(x), float(y)) for x, y in corners])  # type: ignore[attr-defined]


def _points(seed: int, count: int) -> None:
    chance = random.Random(seed)
    for _ in range(count):
        convex = chance.random() < 0.3
        corners = hull(chance, 5) if convex else star(chance, chance.randint(3, 7))
        bench = Bench()
        polygon = bench.polygon(corners, moving=chance.random() < 0.5)
        (point,) = star(chance, 3)[:1]
        margin, _ = bench.read(point_room(bench.make, polygon, bench.polygon([point])[0]))
        assert margin == pytest.approx(signed(_polygon(corners), point), abs=1e-9)


def _pairs(seed: int, count: int) -> None:
    chance = random.Random(seed)
    for _ in range(count):
        zone = hull(chance, 4) if chance.random() < 0.3 else star(chance, chance.randint(3, 6))
        body = star(chance, chance.randint(3, 5))
        size = chance.choice((1, 3, 8))
        body = [(x / size, y / size) for x, y in body]
        bench = Bench()
        borders = bench.polygon(zone, moving=chance.random() < 0.5)
        outline = bench.polygon(body)
        _inside(bench, borders, outline, _polygon(zone), _polygon(body))
        _clear(bench, borders, outline, _polygon(zone), _polygon(body))


def _inside(bench: Bench, borders: object, outline: object, zone: Polygon, body: Polygon) -> None:
    margin, holds = bench.read(room_inside(bench.make, borders, outline))  # type: ignore[arg-type]
    out = body.difference(zone).area
    if zone.exterior.distance(body.exterior) > NEAR or out > NEAR:
        assert holds == zone.covers(body)
    if holds:
        assert margin == pytest.approx(zone.exterior.distance(body.exterior), abs=1e-9)
    else:
        worst = max(farthest(zone, body.exterior), max(zone.distance(p) for p in _corners(body)))
        assert max(zone.distance(p) for p in _corners(body)) - 1e-9 <= -margin
        assert -margin <= worst + 0.05 * body.length, "never beyond the farthest point"


def _corners(body: Polygon) -> list[object]:
    from shapely import Point

    return [Point(place) for place in body.exterior.coords[:-1]]


def _clear(bench: Bench, borders: object, outline: object, zone: Polygon, body: Polygon) -> None:
    margin, holds = bench.read(room_clear(bench.make, borders, outline))  # type: ignore[arg-type]
    common = zone.intersection(body).area
    if zone.distance(body) > NEAR or common > NEAR:
        assert holds == (common <= NEAR)
    if holds:
        assert margin == pytest.approx(zone.distance(body), abs=1e-9)
    else:
        corners = [zone.exterior.distance(place) for place in _corners(body) if zone.covers(place)]
        assert max([0.0, *corners]) - 1e-9 <= -margin, "at least the deepest corner"
        assert 0 < -margin <= math.sqrt(zone.area / math.pi) + 1e-9, "no circle inside has more area than the zone"


def test_points() -> None:
    _points(1, 150)


def test_pairs() -> None:
    _pairs(2, 15)


@pytest.mark.long
@pytest.mark.parametrize("seed", range(10))
def test_ten_thousand_points_and_pairs(seed: int) -> None:
    _points(100 + seed, 800)
    _pairs(200 + seed, 200)
