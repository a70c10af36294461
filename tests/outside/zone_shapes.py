"""Random polygons with exact corners, and the same as shapely geometry: a second opinion on distances."""

from __future__ import annotations

import math
import random
from collections.abc import Sequence
from fractions import Fraction

from shapely import LineString, MultiPoint, Point, Polygon

from rulecheck.geometry.making import Maker
from rulecheck.geometry.rooms import Room
from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import LENGTH
from rulecheck.readers.exact import ExactReader

Corners = list[tuple[Fraction, Fraction]]


def star(chance: random.Random, corners: int, *, grid: int = 0) -> Corners:
    """A polygon round a middle, each corner at its own distance: simple, and mostly not convex."""
    while True:
        turns = sorted(chance.uniform(0, 2 * math.pi) for _ in range(corners))
        across, up = chance.uniform(-2, 2), chance.uniform(-2, 2)
        sizes = [chance.uniform(0.3, 3) for _ in turns]
        points = [
            (across + size * math.cos(turn), up + size * math.sin(turn))
            for turn, size in zip(turns, sizes, strict=True)
        ]
        step = grid or 1000
        made = [(Fraction(round(x * step), step), Fraction(round(y * step), step)) for x, y in points]
        if len(set(made)) == corners and Polygon(made).is_valid and Polygon(made).area > 1e-3:
            return made if chance.random() < 0.5 else made[::-1]


def hull(chance: random.Random, corners: int) -> Corners:
    """A convex polygon."""
    found = MultiPoint([(float(x), float(y)) for x, y in star(chance, corners + 2)]).convex_hull
    return [
        (Fraction(x).limit_denominator(1000), Fraction(y).limit_denominator(1000))
        for x, y in found.exterior.coords[:-1]
    ]


class Bench:
    """Terms of corners, settled or as inputs, and what rooms come to."""

    def __init__(self) -> None:
        self.bank = Bank()
        self.make = Maker(self.bank)
        self.inputs: dict[str, Monomial] = {}

    def term(self, value: Fraction, *, moving: bool = True) -> Term:
        """A length as an input, or as a constant."""
        if not moving:
            return self.bank.number(value, LENGTH)
        path = f"at.{len(self.inputs)}"
        self.inputs[path] = Monomial(value)
        return self.bank.input(path, "number", LENGTH)

    def polygon(
        self, corners: Sequence[tuple[Fraction, Fraction]], *, moving: bool = True
    ) -> tuple[tuple[Term, Term], ...]:
        """A polygon of terms."""
        return tuple((self.term(x, moving=moving), self.term(y, moving=moving)) for x, y in corners)

    def read(self, room: Room) -> tuple[float, bool]:
        """The margin as a number, and whether it holds; the sign of the one is the other."""
        reader = ExactReader(self.bank, self.inputs)
        margin, holds = reader.approximate(room.margin), reader.truth(room.holds)
        assert isinstance(holds, bool), holds
        assert margin is not None
        sign = reader.sign(room.margin)
        assert isinstance(sign, int)
        assert holds == (sign >= 0), (margin, holds)
        return margin, holds


def signed(polygon: Polygon, point: tuple[Fraction, Fraction]) -> float:
    """The signed distance of a point to the border, positive inside, in double precision."""
    place = Point(float(point[0]), float(point[1]))
    away = float(polygon.exterior.distance(place))
    return away if polygon.covers(place) else -away


def inside_room(zone: Polygon, body: Polygon) -> tuple[float, float]:
    """Room of a body inside a zone: exactly where it lies inside, else bounds by points along its edges."""
    if zone.covers(body):
        away = float(zone.exterior.distance(body.exterior))
        return away, away
    return -farthest(zone, body.exterior), 0.0


def farthest(zone: Polygon, line: LineString) -> float:
    """The greatest distance of points on a line to a zone, by close sampling (a lower bound of it)."""
    steps = 60
    return max(zone.distance(line.interpolate(step / steps, normalized=True)) for step in range(steps))
