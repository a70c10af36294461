"""Lines of sight: past things in a view by their outlines, in space by boxes."""

from __future__ import annotations

from rulecheck.geometry.bodies import AXES, Body, Vector
from rulecheck.geometry.convex import Corner
from rulecheck.geometry.making import Maker
from rulecheck.geometry.polygons import Polygon, room_clear
from rulecheck.geometry.rooms import Room
from rulecheck.graph.terms import Term


def clear_in_view(make: Maker, outline: Polygon, start: Corner, end: Corner) -> Room:
    """How far a line of sight stays clear of an outline; less than zero where it is cut."""
    return room_clear(make, outline, (start, end))


def covered_in_view(make: Maker, outline: Polygon, start: Corner, end: Corner) -> Room:
    """How far a line of sight would have to move sideways before the outline no longer cuts it.

    For an outline that lies between its ends along the line; where nothing is cut, less the distance to it.
    """
    free = clear_in_view(make, outline, start, end)
    along = (make.minus(end[0], start[0]), make.minus(end[1], start[1]))
    size = make.root(make.plus(make.square(along[0]), make.square(along[1])))
    left = [
        make.minus(
            make.times(along[0], make.minus(corner[1], start[1])), make.times(along[1], make.minus(corner[0], start[0]))
        )
        for corner in outline
    ]
    ways = make.least([make.greatest(left), make.opposite(make.least(left))])
    cut = make.opposite_flag(free.holds)
    return Room(make.choose(cut, make.over(ways, size), make.opposite(free.margin)), cut)


def cut_by_box(make: Maker, body: Body, start: Vector, end: Vector) -> Term:
    """Whether a line of sight passes through the inside of the box of a body.

    Along each axis the line is within the box for a stretch of its length (the slabs of Kay and Kajiya 1986); it passes
    through where these stretches have a common part.
    """
    zero, one = make.number(0), make.number(1)
    begins, ends, level = [zero], [one], []
    for axis, p, q in zip(AXES, start, end, strict=True):
        low, high = body.spans[axis]
        along = make.minus(q, p)
        flat = make.every([make.is_room(along), make.is_room(make.opposite(along))])
        shares = [make.over(make.minus(side, p), along) for side in (low, high)]
        begins.append(make.choose(flat, zero, make.least(shares)))
        ends.append(make.choose(flat, one, make.greatest(shares)))
        between = make.every([make.below(low, p), make.below(p, high)])
        level.append(make.some([make.opposite_flag(flat), between]))
    return make.every([make.below(make.greatest(begins), make.least(ends)), *level])
