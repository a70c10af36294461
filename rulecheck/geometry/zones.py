"""Zones as trees of borders, and the room of a body inside of one or clear of it.

Inside of `all` parts a body lies where it lies inside of each. Clear of it, one part may keep it away; parts that
share no axis are at right angles, so what each keeps adds by squares. Clear of `any` is clear of each.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass

from rulecheck.geometry.bodies import VIEWS, Body, Vector, in_view, point_body
from rulecheck.geometry.cells import Cell, together
from rulecheck.geometry.making import Maker
from rulecheck.geometry.polygons import Polygon, clear_of_box, point_room, room_clear, room_inside
from rulecheck.geometry.rooms import Room, crosswise, greatest, least, linear, turned
from rulecheck.graph.terms import Term


@dataclass(frozen=True, slots=True)
class Range:
    """From `low` to `high` along an axis, either None where it is free; `lift` turns z into height above ground."""

    axis: str
    low: Term | None
    high: Term | None
    lift: Callable[[Term], Term] | None = None


@dataclass(frozen=True, slots=True)
class Half:
    """The side of a plane, or of a line in a view, that a normal (of any length) shows; `facing` is its sense, 1 or -1."""

    axes: str
    foot: tuple[Term, ...]
    normal: tuple[Term, ...]
    facing: Term


@dataclass(frozen=True, slots=True)
class Prism:
    """A polygon in a view, through the whole car across it."""

    view: str
    polygon: Polygon


@dataclass(frozen=True, slots=True)
class Every:
    """The common part of several."""

    parts: tuple[Zone, ...]


@dataclass(frozen=True, slots=True)
class Some:
    """Several together."""

    parts: tuple[Zone, ...]


Zone = Range | Half | Prism | Every | Some


def inside(make: Maker, zone: Zone, body: Body) -> Room:
    """The room of a body inside of a zone: the signed distance of its worst point to the border."""
    if isinstance(zone, Range):
        low, high = span(make, zone, body)
        rooms = [make.minus(low, zone.low)] if zone.low is not None else []
        rooms += [make.minus(zone.high, high)] if zone.high is not None else []
        return least(make, [linear(make, room) for room in rooms])
    if isinstance(zone, Half):
        return least(make, [_beyond(make, zone, corner) for corner in body.corners()])
    if isinstance(zone, Prism):
        if body.is_point:
            return point_room(make, zone.polygon, in_view(body.point, zone.view))
        return room_inside(make, zone.polygon, body.in_view(zone.view))
    if isinstance(zone, Every):
        return _inside_every(make, zone, body)
    return _inside_some(make, zone, body)


def _inside_every(make: Maker, zone: Every, body: Body) -> Room:
    ranges, others = _sorted(zone.parts)
    rooms = [(axes(part), inside(make, part, body)) for part in others]
    if ranges:
        rooms.append((axes(Every(ranges)), _inside_ranges(make, ranges, body)))
    return crosswise(make, [least(make, group) for group in _grouped(rooms)], inside=True)


def clear(make: Maker, zone: Zone, body: Body) -> Room:
    """The room of a body clear of a zone: the distance between them, or less than zero the depth of the worst point."""
    if body.is_point:
        return turned(make, inside(make, zone, body))
    if isinstance(zone, Range):
        return _clear_of_range(make, zone, body)
    if isinstance(zone, Half):
        return least(make, [_short(make, zone, corner) for corner in body.corners()])
    if isinstance(zone, Prism):
        return room_clear(make, zone.polygon, body.in_view(zone.view))
    if isinstance(zone, Some):
        return least(make, [clear(make, part, body) for part in zone.parts])
    ranges, others = _sorted(zone.parts)
    rooms = [(axes(part), clear(make, part, body)) for part in others]
    if ranges:
        rooms.append((axes(Every(ranges)), _clear_of_ranges(make, ranges, body)))
    return crosswise(make, [greatest(make, group) for group in _grouped(rooms)], inside=False)


def axes(zone: Zone) -> frozenset[str]:
    """The axes along which a zone has borders; height above ground counts as z."""
    if isinstance(zone, Range):
        return frozenset("z" if zone.axis == "above_ground" else zone.axis)
    if isinstance(zone, Half):
        return frozenset(zone.axes)
    if isinstance(zone, Prism):
        return frozenset(VIEWS[zone.view])
    return frozenset().union(*(axes(part) for part in zone.parts))


def _grouped(rooms: Iterable[tuple[frozenset[str], Room]]) -> list[list[Room]]:
    """Rooms whose borders share an axis, directly or through others, together."""
    found: list[tuple[frozenset[str], list[Room]]] = []
    for own, room in rooms:
        together = [room]
        apart = []
        for known, group in found:
            if known & own:
                own, together = own | known, [*group, *together]
            else:
                apart.append((known, group))
        found = [*apart, (own, together)]
    return [group for _, group in found]


def span(make: Maker, zone: Range, body: Body) -> tuple[Term, Term]:
    """Least and greatest of a body along the axis of a range."""
    if zone.lift is None:
        return body.spans[zone.axis]
    heights = [make.plus(corner[2], zone.lift(corner[0])) for corner in body.corners()]
    return make.least(heights), make.greatest(heights)


def _sorted(parts: Iterable[Zone]) -> tuple[tuple[Range, ...], list[Zone]]:
    """The ranges among parts that all count, and the others."""
    flat = list(_flat(parts))
    ranges = tuple(part for part in flat if isinstance(part, Range))
    return ranges, [part for part in flat if not isinstance(part, Range)]


def _flat(parts: Iterable[Zone]) -> Iterable[Zone]:
    for part in parts:
        if isinstance(part, Every):
            yield from _flat(part.parts)
        else:
            yield part


# --- ranges ----------------------------------------------------------------------------------------------------------


def _inside_ranges(make: Maker, ranges: Sequence[Range], body: Body) -> Room:
    """Room inside of a box: of a body with an outline the room of its worst corner, else of its spans."""
    if body.outlines:
        return least(make, [_inside_ranges(make, ranges, point_body(corner)) for corner in body.corners()])
    rooms = [(axes(part), inside(make, part, body)) for part in ranges]
    return crosswise(make, [least(make, group) for group in _grouped(rooms)], inside=True)


def _clear_of_ranges(make: Maker, ranges: Sequence[Range], body: Body) -> Room:
    """Room clear of a box; in a view in which the body has an outline the box is a rectangle."""
    plain = [part for part in ranges if part.lift is None]
    across = {part.axis for part in plain}
    view = next((view for view in body.outlines if set(VIEWS[view]) <= across), None)
    rooms = []
    if view is not None:
        rooms.append((frozenset(VIEWS[view]), _clear_in_view(make, plain, view, body)))
    rest = [part for part in ranges if view is None or part.lift is not None or part.axis not in VIEWS[view]]
    rooms += [(axes(part), clear(make, part, body)) for part in rest]
    return crosswise(make, [greatest(make, group) for group in _grouped(rooms)], inside=False)


def _clear_in_view(make: Maker, ranges: Sequence[Range], view: str, body: Body) -> Room:
    low: list[Term | None] = []
    high: list[Term | None] = []
    for axis in VIEWS[view]:
        own = [part for part in ranges if part.axis == axis]
        lows = [part.low for part in own if part.low is not None]
        highs = [part.high for part in own if part.high is not None]
        low.append(make.greatest(lows) if lows else None)
        high.append(make.least(highs) if highs else None)
    return clear_of_box(make, (low[0], low[1]), (high[0], high[1]), body.outlines[view])


# --- one border ------------------------------------------------------------------------------------------------------


def _clear_of_range(make: Maker, zone: Range, body: Body) -> Room:
    low, high = span(make, zone, body)
    depths = [make.minus(high, zone.low)] if zone.low is not None else []
    depths += [make.minus(zone.high, low)] if zone.high is not None else []
    if zone.low is not None and zone.high is not None:
        # A body that reaches through is deepest in the middle.
        depths.append(make.over(make.minus(zone.high, zone.low), make.number(2)))
    return linear(make, make.opposite(make.least(depths)))


def _beyond(make: Maker, zone: Half, point: Vector) -> Room:
    """How far a point lies beyond the border on the side that is meant."""
    here = [point["xyz".index(axis)] for axis in zone.axes]
    steps = [make.times(n, make.minus(p, a)) for n, p, a in zip(zone.normal, here, zone.foot, strict=True)]
    along = make.times(zone.facing, make.total(steps))
    size = make.root(make.total([make.square(n) for n in zone.normal]))
    return Room(make.over(along, size), make.is_room(along))


def _short(make: Maker, zone: Half, point: Vector) -> Room:
    """How far a point stays short of the border."""
    here = Half(zone.axes, zone.foot, zone.normal, make.opposite(zone.facing))
    return _beyond(make, here, point)


# --- several together ------------------------------------------------------------------------------------------------


def _inside_some(make: Maker, zone: Some, body: Body) -> Room:
    """A point lies where it lies inside of one. A body may lie across ranges that together hold it; of other borders,
    one part has to hold it as a whole."""
    whole = greatest(make, [inside(make, part, body) for part in zone.parts])
    if body.is_point:
        return whole
    cells = cells_of(zone)
    return whole if cells is None else _clear_of_cells(make, cells, dict(_lifts(zone)), body)


def _clear_of_cells(
    make: Maker, cells: Sequence[Cell], lifts: dict[str, Callable[[Term], Term] | None], body: Body
) -> Room:
    """The room of a body that should meet none of some cells; those that are empty do not count."""
    found, kept = [], []
    for cell in cells:
        there = make.every(make.below(low, high) for lows, highs in cell.values() for low in lows for high in highs)
        ranges = [
            Range(axis, make.greatest(lows) if lows else None, make.least(highs) if highs else None, lifts[axis])
            for axis, (lows, highs) in cell.items()
        ]
        room = _clear_of_ranges(make, ranges, body)
        found.append((there, room.margin))
        kept.append(make.some([make.opposite_flag(there), room.holds]))
    return Room(make.least_where(found), make.every(kept))


def _lifts(zone: Zone) -> Iterable[tuple[str, Callable[[Term], Term] | None]]:
    if isinstance(zone, Range):
        yield zone.axis, zone.lift
    elif isinstance(zone, (Every, Some)):
        for part in zone.parts:
            yield from _lifts(part)


def cells_of(zone: Zone) -> list[Cell] | None:
    """What a zone of ranges leaves free; None where it has other borders, or too many of them."""
    if isinstance(zone, Range):
        below: list[Cell] = [{zone.axis: ((), (zone.low,))}] if zone.low is not None else []
        return [*below, *([{zone.axis: ((zone.high,), ())}] if zone.high is not None else [])]
    if not isinstance(zone, (Every, Some)):
        return None
    each = [cells_of(part) for part in zone.parts]
    found: list[Cell] | None = each[0]
    for cells in each[1:]:
        if found is None or cells is None:
            return None
        found = together(found, cells) if isinstance(zone, Some) else [*found, *cells]
    return found
