"""Room of a thing in a zone, or clear of it: a signed length, and a flag without roots that decides it.

The number never says more than there is: where it is not the exact distance it is nearer to zero, and its sign is
the flag's. Joining follows from what distance is: to the border of an intersection from inside, and to a union
from outside, it is the least over the parts.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from rulecheck.geometry.making import Maker
from rulecheck.graph.terms import Term


@dataclass(frozen=True, slots=True)
class Room:
    """`margin` is the signed distance (m) of the worst point, `holds` whether it is zero or more."""

    margin: Term
    holds: Term


def linear(make: Maker, margin: Term) -> Room:
    """A room whose number needs no root."""
    return Room(margin, make.is_room(margin))


def turned(make: Maker, room: Room) -> Room:
    """The room of a point clear of what it is measured against, from its room inside; on the border both hold."""
    margin = make.opposite(room.margin)
    return Room(margin, make.some([make.opposite_flag(room.holds), make.is_room(margin)]))


def least(make: Maker, rooms: Sequence[Room]) -> Room:
    """All of these: the least decides."""
    if len(rooms) == 1:
        return rooms[0]
    return Room(make.least([room.margin for room in rooms]), make.every(room.holds for room in rooms))


def greatest(make: Maker, rooms: Sequence[Room]) -> Room:
    """Any of these: the greatest decides."""
    if len(rooms) == 1:
        return rooms[0]
    return Room(make.greatest([room.margin for room in rooms]), make.some(room.holds for room in rooms))


def crosswise(make: Maker, rooms: Sequence[Room], *, inside: bool) -> Room:
    """Rooms along directions at right angles to each other, for a thing that is their product.

    Inside of all, the least is the distance to the border; outside, what is lacking along each adds by squares.
    Clear of the zone along some, what there is along each adds by squares; along none, the least depth counts.
    """
    if len(rooms) == 1:
        return rooms[0]
    margins = [room.margin for room in rooms]
    zero = make.number(0, margins[0].dimension)
    if inside:
        holds = make.every(room.holds for room in rooms)
        apart = [make.square(make.least([margin, zero])) for margin in margins]
        return Room(make.choose(holds, make.least(margins), make.opposite(_root(make, apart))), holds)
    holds = make.some(room.holds for room in rooms)
    apart = [make.square(make.greatest([margin, zero])) for margin in margins]
    return Room(make.choose(holds, _root(make, apart), make.greatest(margins)), holds)


def _root(make: Maker, squares: Sequence[Term]) -> Term:
    return make.root(make.total(squares))
