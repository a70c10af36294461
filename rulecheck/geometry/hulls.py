"""Room of a point in the convex hull of others, in space or in a view.

A border of the hull is a plane through three of the points (a line through two, in a view) with all others on one side.
"""

from __future__ import annotations

from collections.abc import Sequence
from itertools import combinations

from rulecheck.geometry.bodies import Vector
from rulecheck.geometry.convex import Corner
from rulecheck.geometry.making import Maker
from rulecheck.geometry.polygons import to_segment
from rulecheck.geometry.rooms import Room
from rulecheck.graph.terms import Term

MOST_POINTS = 12
"""Points of one hull."""


def in_hull(make: Maker, points: Sequence[Vector], point: Vector) -> Room:
    """Signed distance of a point to the hull, positive inside, where it is exact.

    Outside it is the greatest distance beyond one of the planes: the hull may be farther away.
    """
    sides: list[tuple[Term, Term, Term]] = []
    for three in combinations(range(len(points)), 3):
        a, b, c = (points[index] for index in three)
        normal = _cross(make, _from_to(make, a, b), _from_to(make, a, c))
        size = make.total([make.square(part) for part in normal])
        there = make.is_above_zero(size)
        others = [points[index] for index in range(len(points)) if index not in three]
        heights = [_dot(make, normal, _from_to(make, a, other)) for other in others]
        own = _dot(make, normal, _from_to(make, a, point))
        sides.extend(_both_ways(make, there, heights, own, make.root(size)))
    margin = make.least_where((there, depth) for there, depth, _ in sides)
    holds = make.every(make.some([make.opposite_flag(there), right]) for there, _, right in sides)
    return Room(margin, holds)


def in_hull_of_view(make: Maker, points: Sequence[Corner], point: Corner) -> Room:
    """Signed distance of a point to the hull in a view, positive inside; exact on both sides."""
    sides: list[tuple[Term, Term, Term]] = []
    away: list[tuple[Term, Term]] = []
    for first, second in combinations(range(len(points)), 2):
        a, b = points[first], points[second]
        along = (make.minus(b[0], a[0]), make.minus(b[1], a[1]))
        size = make.plus(make.square(along[0]), make.square(along[1]))
        others = [points[index] for index in range(len(points)) if index not in (first, second)]
        heights = [_left(make, a, along, other) for other in others]
        found = _both_ways(make, make.is_above_zero(size), heights, _left(make, a, along, point), make.root(size))
        sides.extend(found)
        away.extend((there, to_segment(make, a, b, point)) for there, _, _ in found)
    holds = make.every(make.some([make.opposite_flag(there), right]) for there, _, right in sides)
    inside = make.least_where((there, depth) for there, depth, _ in sides)
    return Room(make.choose(holds, inside, make.opposite(make.root(make.least_where(away)))), holds)


def _both_ways(
    make: Maker, there: Term, heights: Sequence[Term], own: Term, size: Term
) -> list[tuple[Term, Term, Term]]:
    """A side with its normal either way: whether it is a border, the depth of the point, whether that is none or more."""
    found = []
    for turned in (False, True):
        rooms = [make.opposite(height) if turned else height for height in heights]
        here = make.opposite(own) if turned else own
        border = make.every([there, *(make.is_room(room) for room in rooms)])
        found.append((border, make.over(here, size), make.is_room(here)))
    return found


def _left(make: Maker, a: Corner, along: Corner, point: Corner) -> Term:
    to = (make.minus(point[0], a[0]), make.minus(point[1], a[1]))
    return make.minus(make.times(along[0], to[1]), make.times(along[1], to[0]))


def _from_to(make: Maker, a: Vector, b: Vector) -> Vector:
    return make.minus(b[0], a[0]), make.minus(b[1], a[1]), make.minus(b[2], a[2])


def _dot(make: Maker, u: Vector, v: Vector) -> Term:
    return make.total([make.times(a, b) for a, b in zip(u, v, strict=True)])


def _cross(make: Maker, u: Vector, v: Vector) -> Vector:
    parts = [make.minus(make.times(u[i], v[j]), make.times(u[j], v[i])) for i, j in ((1, 2), (2, 0), (0, 1))]
    return parts[0], parts[1], parts[2]
