"""Closed polygons in a view as terms: which side a point is on, how far off the border is, room of one in another.

A point lies inside where the border winds round it (crossings of a ray, counted with their sense: Sunday's winding
number, common practice). Distances are those to the edges as segments. An edge of one polygon is cut where it meets
the other; a stretch between two cuts lies on one side, so its middle decides for all of it.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import partial

from rulecheck.geometry.convex import Corner, Side, clear_of_sides
from rulecheck.geometry.making import Maker, constant
from rulecheck.geometry.outlines import area, is_convex
from rulecheck.geometry.rooms import Room
from rulecheck.graph.terms import Term
from rulecheck.operations.comparison import equal
from rulecheck.operations.statistics import count_where
from rulecheck.quantity.dimension import LENGTH, PURE

_AREA = LENGTH**2
Polygon = tuple[Corner, ...]
"""Corners in order around it, in metres."""
Ends = tuple[Term | None, Term | None]


@dataclass(frozen=True, slots=True)
class _Spot:
    """A point with what is known of it: strictly inside, strictly outside, squared distance to the border."""

    inside: Term
    outside: Term
    square: Term


def edges(polygon: Polygon) -> list[tuple[Corner, Corner]]:
    """The edges in order, the last one back to the first corner."""
    return list(zip(polygon, (*polygon[1:], polygon[0]), strict=True))


def point_room(make: Maker, polygon: Polygon, point: Corner) -> Room:
    """The signed distance of a point to the border, positive inside."""
    convex = as_convex(make, polygon)
    if convex is not None:
        return _in_convex(make, convex, [point])
    spot = _spot(make, polygon, point)
    root = make.root(spot.square)
    holds = make.opposite_flag(spot.outside)
    return Room(make.choose(holds, root, make.opposite(root)), holds)


def room_inside(make: Maker, polygon: Polygon, other: Polygon) -> Room:
    """The room of another polygon inside this one: of its worst point.

    Exact while it lies inside. Else the distance of the worst corner, or of the middle of the worst stretch of an edge
    that lies outside: the farthest point may lie farther out between them, never on the other side.
    """
    convex = as_convex(make, polygon)
    if convex is not None:
        return _in_convex(make, convex, other)
    spots = [_spot(make, polygon, corner) for corner in other]
    out = [(spot.outside, spot.square) for spot in spots]
    for spot, active in _stretches(make, polygon, other):
        out.append((make.every([active, spot.outside]), spot.square))
    holds = make.opposite_flag(make.some(flag for flag, _ in out))
    inside = make.root(_apart(make, polygon, other))
    return Room(make.choose(holds, inside, make.opposite(make.root(make.greatest_where(out)))), holds)


def room_clear(make: Maker, polygon: Polygon, other: Polygon) -> Room:
    """The room of another polygon clear of this one: the distance between them.

    Exact while they are apart. Else the depth of the deepest corner, or middle of a stretch of an edge, that lies
    inside: the deepest point may lie deeper.
    """
    convex = as_convex(make, polygon)
    if convex is not None:
        return _clear_of_convex(make, convex, other)
    spots = [_spot(make, polygon, corner) for corner in other]
    deep = [(spot.inside, spot.square) for spot in spots]
    for spot, active in _stretches(make, polygon, other):
        deep.append((make.every([active, spot.inside]), spot.square))
    for ear in _middles_of_ears(make, polygon):
        # One of these lies inside the polygon whatever its shape (two ears theorem, Meisters 1975): where no edge of
        # the other comes inside, this polygon may lie in the other as a whole.
        within, around = _spot(make, polygon, ear), _spot(make, other, ear)
        deep.append((make.every([within.inside, around.inside]), within.square))
    holds = make.opposite_flag(make.some(flag for flag, _ in deep))
    apart = make.root(_apart(make, polygon, other))
    return Room(make.choose(holds, apart, make.opposite(make.root(make.greatest_where(deep)))), holds)


def is_simple(make: Maker, polygon: Polygon) -> Term:
    """Whether no two edges of a polygon meet but at the corner that they share, and no corner turns back."""
    sides = edges(polygon)
    bad = []
    for index, (a, b) in enumerate(sides):
        for later in range(index + 1, len(sides)):
            c, d = sides[later]
            if later == index + 1 or (index == 0 and later == len(sides) - 1):
                continue
            bad.append(_meet(make, a, b, c, d))
        before = sides[index - 1][0]
        straight = make.every([_is_none(make, _cross(make, before, a, b))])
        back = make.at_most(_dot(make, _from_to(make, before, a), _from_to(make, a, b)), make.number(0, _AREA))
        bad.append(make.every([straight, back]))
    return make.opposite_flag(make.some(bad))


def _meet(make: Maker, a: Corner, b: Corner, c: Corner, d: Corner) -> Term:
    """Whether two segments have a point in common."""
    sides = [_cross(make, a, b, c), _cross(make, a, b, d), _cross(make, c, d, a), _cross(make, c, d, b)]
    none = make.number(0, _AREA**2)
    crossing = [make.below(make.times(one, other), none) for one, other in (sides[:2], sides[2:])]
    ends = ((sides[0], a, b, c), (sides[1], a, b, d), (sides[2], c, d, a), (sides[3], c, d, b))
    touching = [make.every([_is_none(make, side), _between(make, p, q, r)]) for side, p, q, r in ends]
    return make.some([make.every(crossing), *touching])


def _between(make: Maker, a: Corner, b: Corner, c: Corner) -> Term:
    """Whether c, on the line through a and b, lies between them."""
    along = _dot(make, _from_to(make, a, c), _from_to(make, c, b))
    return make.is_room(along)


def _is_none(make: Maker, value: Term) -> Term:
    return make.every([make.is_room(value), make.is_room(make.opposite(value))])


def cost(polygon: Polygon, other: Polygon) -> int:
    """A count for the bound on how much two polygons may be cut by each other."""
    return len(polygon) ** 2 * len(other)


def as_convex(make: Maker, polygon: Polygon) -> Polygon | None:
    """The polygon turned anticlockwise, where its corners are settled and none points inward; else None."""
    values = [(constant(across), constant(up)) for across, up in polygon]
    corners = [(across, up) for across, up in values if across is not None and up is not None]
    if len(corners) < len(values) or not is_convex(corners):
        return None
    return polygon if area(corners) > 0 else tuple(reversed(polygon))


# --- convex ----------------------------------------------------------------------------------------------------------


def _in_convex(make: Maker, polygon: Polygon, points: Sequence[Corner]) -> Room:
    """Exact for every polygon of such corners: the distance to a convex border is concave, its worst is at a corner."""
    sides = edges(polygon)
    crosses = [[_cross(make, a, b, point) for a, b in sides] for point in points]
    lengths = [make.root(_square_length(make, a, b)) for a, b in sides]
    holds = make.every(make.is_room(value) for row in crosses for value in row)
    depths = [make.over(make.least([row[index] for row in crosses]), length) for index, length in enumerate(lengths)]
    out = [
        (make.opposite_flag(make.every(map(make.is_room, row))), _off(make, sides, point))
        for row, point in zip(crosses, points, strict=True)
    ]
    return Room(make.choose(holds, make.least(depths), make.opposite(make.root(make.greatest_where(out)))), holds)


def _clear_of_convex(make: Maker, polygon: Polygon, other: Polygon) -> Room:
    sides = [Side(partial(_cross, make, a, b), make.root(_square_length(make, a, b))) for a, b in edges(polygon)]
    middle = middle_of(make, polygon)
    return clear_of_sides(make, sides, other, _apart(make, polygon, other), (middle, is_within(make, other, middle)))


def clear_of_box(make: Maker, low: Ends, high: Ends, outline: Polygon) -> Room:
    """The room of an outline clear of a box in its view; an end that is None is free."""
    sides, ways = [], []
    for axis in (0, 1):
        least, most = low[axis], high[axis]
        if least is not None:
            sides.append(Side(partial(_over, make, axis, least)))
        if most is not None:
            sides.append(Side(partial(_under, make, axis, most)))
    for corner in outline:
        ways.append(make.total([make.square(_gap(make, low[axis], high[axis], corner[axis])) for axis in (0, 1)]))
    corners = [(a, b) for a in (low[0], high[0]) for b in (low[1], high[1]) if a is not None and b is not None]
    ways += [to_segment(make, a, b, corner) for a, b in edges(outline) for corner in corners]
    middle = None
    if len(corners) == 4:
        point = middle_of(make, corners)
        middle = (point, is_within(make, outline, point))
    return clear_of_sides(make, sides, outline, make.least(ways), middle)


def _over(make: Maker, axis: int, end: Term, corner: Corner) -> Term:
    return make.minus(corner[axis], end)


def _under(make: Maker, axis: int, end: Term, corner: Corner) -> Term:
    return make.minus(end, corner[axis])


def _gap(make: Maker, low: Term | None, high: Term | None, value: Term) -> Term:
    """How far a value lies beside a range, zero within."""
    ways = [make.number(0, value.dimension)]
    ways += [make.minus(low, value)] if low is not None else []
    return make.greatest([*ways, *([make.minus(value, high)] if high is not None else [])])


def middle_of(make: Maker, corners: Sequence[Corner]) -> Corner:
    """The mean of some corners: it lies inside of what is convex."""
    count = make.number(len(corners))
    across, up = (make.over(make.total([corner[axis] for corner in corners]), count) for axis in (0, 1))
    return across, up


def is_within(make: Maker, polygon: Polygon, point: Corner) -> Term:
    """Whether a point lies strictly inside of a polygon."""
    return _spot(make, polygon, point).inside


# --- points ----------------------------------------------------------------------------------------------------------


def _spot(make: Maker, polygon: Polygon, point: Corner) -> _Spot:
    square = _off(make, edges(polygon), point)
    wound = _is_wound(make, polygon, point)
    off = make.is_above_zero(square)
    return _Spot(make.every([wound, off]), make.every([make.opposite_flag(wound), off]), square)


def _is_wound(make: Maker, polygon: Polygon, point: Corner) -> Term:
    """Whether the border winds round a point; on the border it says either."""
    up, down = [], []
    for a, b in edges(polygon):
        cross = _cross(make, a, b, point)
        zero = make.number(0, cross.dimension)
        up.append(make.every([make.at_most(a[1], point[1]), make.below(point[1], b[1]), make.below(zero, cross)]))
        down.append(make.every([make.at_most(b[1], point[1]), make.below(point[1], a[1]), make.below(cross, zero)]))
    counts = [_count(make, flags) for flags in (up, down)]
    values = [constant(count) for count in counts]
    if None not in values:
        return make.bank.flag(values[0] != values[1])
    return make.opposite_flag(make.bank.apply(equal, counts, PURE))


def _count(make: Maker, flags: Sequence[Term]) -> Term:
    open_flags = [flag for flag in flags if flag.kind != "constant"]
    settled = sum(1 for flag in flags if flag.kind == "constant" and flag.value)
    if not open_flags:
        return make.number(settled)
    return make.plus(make.bank.apply(count_where, open_flags, PURE), make.number(settled))


def _off(make: Maker, sides: Sequence[tuple[Corner, Corner]], point: Corner) -> Term:
    """The squared distance of a point to the nearest of some segments."""
    return make.least([to_segment(make, a, b, point) for a, b in sides])


def to_segment(make: Maker, a: Corner, b: Corner, point: Corner) -> Term:
    """The squared distance of a point to a segment."""
    along, to = _from_to(make, a, b), _from_to(make, a, point)
    size = _square_length(make, a, b)
    # A body without thickness has edges without length: there the end is the nearest point.
    share = make.choose(make.is_above_zero(size), make.over(_dot(make, along, to), size), make.number(0))
    held = make.least([make.greatest([share, make.number(0)]), make.number(1)])
    rest = [make.minus(t, make.times(held, d)) for t, d in zip(to, along, strict=True)]
    return make.total([make.square(rest[0]), make.square(rest[1])])


def _apart(make: Maker, polygon: Polygon, other: Polygon) -> Term:
    """The least squared distance between the borders of two polygons that do not cross."""
    ways = [to_segment(make, a, b, corner) for a, b in edges(polygon) for corner in other]
    ways += [to_segment(make, a, b, corner) for a, b in edges(other) for corner in polygon]
    return make.least(ways)


# --- stretches -------------------------------------------------------------------------------------------------------


def _stretches(make: Maker, polygon: Polygon, other: Polygon) -> list[tuple[_Spot, Term]]:
    """The middle of every stretch into which the polygon cuts the edges of the other; a flag says if it is there."""
    found = []
    zero, one = make.number(0), make.number(1)
    for start, end in edges(other):
        cuts = [_cut(make, start, end, a, b) for a, b in edges(polygon)]
        for active, share in ((make.bank.flag(True), zero), *cuts):
            behind = [(make.every([there, make.below(share, cut)]), cut) for there, cut in cuts if cut is not share]
            following = make.least_where([*behind, (make.bank.flag(True), one)])
            middle = make.middle(share, following)
            point = (_along(make, start[0], end[0], middle), _along(make, start[1], end[1], middle))
            found.append((_spot(make, polygon, point), active))
    return found


def _cut(make: Maker, start: Corner, end: Corner, a: Corner, b: Corner) -> tuple[Term, Term]:
    """Where an edge is met by a segment: whether it is between its ends, and at which share of it."""
    along, across, to = _from_to(make, start, end), _from_to(make, a, b), _from_to(make, start, a)
    whole = _det(make, along, across)
    mine, theirs = _det(make, to, across), _det(make, to, along)
    square = make.square(whole)
    none = make.number(0, square.dimension)
    own, others = make.times(mine, whole), make.times(theirs, whole)
    there = make.every(
        [make.below(none, own), make.below(own, square), make.at_most(none, others), make.at_most(others, square)]
    )
    return there, make.over(mine, whole)


def _middles_of_ears(make: Maker, polygon: Polygon) -> list[Corner]:
    count = len(polygon)
    threes = ((polygon[index - 1], polygon[index], polygon[(index + 1) % count]) for index in range(count))
    return [middle_of(make, three) for three in threes]


# --- vectors ---------------------------------------------------------------------------------------------------------


def _along(make: Maker, a: Term, b: Term, share: Term) -> Term:
    return make.plus(a, make.times(share, make.minus(b, a)))


def _from_to(make: Maker, a: Corner, b: Corner) -> Corner:
    return make.minus(b[0], a[0]), make.minus(b[1], a[1])


def _dot(make: Maker, u: Corner, v: Corner) -> Term:
    return make.plus(make.times(u[0], v[0]), make.times(u[1], v[1]))


def _det(make: Maker, u: Corner, v: Corner) -> Term:
    return make.minus(make.times(u[0], v[1]), make.times(u[1], v[0]))


def _cross(make: Maker, a: Corner, b: Corner, point: Corner) -> Term:
    """Positive where the point lies left of the way from a to b."""
    return _det(make, _from_to(make, a, b), _from_to(make, a, point))


def _square_length(make: Maker, a: Corner, b: Corner) -> Term:
    d = _from_to(make, a, b)
    return make.plus(make.square(d[0]), make.square(d[1]))
