"""Closed outlines as designs write them: corners in order, exact, none of its edges crossing another.

>>> from rulecheck.diagnostics import Faults, Span
>>> from rulecheck.reading.nodes import Located
>>> text = "0 0, 200 0, 200 100 mm"
>>> read_closed(Located(text, Span("a", 0, len(text), 1, 1)), {}, Faults())
((Fraction(0, 1), Fraction(0, 1)), (Fraction(1, 5), Fraction(0, 1)), (Fraction(1, 5), Fraction(1, 10)))
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction
from itertools import combinations

from rulecheck.diagnostics import Faults, Span
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.reading_values import read_outline
from rulecheck.reading.nodes import Located

Corner = tuple[Fraction, Fraction]
"""A corner in metres: the axis across the view first, then the upright one."""
MOST_CORNERS = 200


def read_closed(where: Located, own: Mapping[str, Dimension], faults: Faults) -> tuple[Corner, ...] | None:
    """The corners of a closed outline in metres, or None with the faults noted.

    The last corner is joined to the first; an outline that repeats its first corner at the end means the same.
    """
    read = read_outline(where, own, faults)
    if read is None:
        return None
    corners = tuple((across.si()[0], up.si()[0]) for across, up in read)
    if len(corners) > 1 and corners[0] == corners[-1]:
        corners = corners[:-1]
    fault = fault_of(corners)
    if fault is None:
        return corners
    what, corner = fault
    code = "too-large" if len(corners) > MOST_CORNERS else "bad-value"
    faults.add(code, what, _place(where, corner), advice=_ADVICE)
    return None


_ADVICE = "write the corners in order around the outline, each once, such as '340 880, 640 880, 640 940 mm'"


def fault_of(corners: Sequence[Corner]) -> tuple[str, int] | None:
    """What is wrong with a closed outline, and at which corner (counted from 0); None where it is sound.

    >>> fault_of([(Fraction(x), Fraction(y)) for x, y in ((0, 0), (1, 1), (1, 0), (0, 1))])
    ('the outline crosses itself: the edge from corner 1 meets the edge from corner 3', 2)
    """
    if len(corners) > MOST_CORNERS:
        return f"the outline has {len(corners)} corners, and {MOST_CORNERS} is the bound", MOST_CORNERS
    if len(corners) < 3:
        return f"an outline of {len(corners)} corners encloses nothing", 0
    count = len(corners)
    for index in range(count):
        before, here, after = corners[index - 1], corners[index], corners[(index + 1) % count]
        if here == after:
            return f"corners {index + 1} and {(index + 1) % count + 1} of the outline are one", index
        if turn(before, here, after) == 0 and _ahead(before, here, after) < 0:
            return f"the outline turns back on itself at corner {index + 1}", index
    for first, second in combinations(range(count), 2):
        if second - first > 1 and not (first == 0 and second == count - 1) and _meet(corners, first, second):
            told = (
                f"the outline crosses itself: the edge from corner {first + 1} meets the edge from corner {second + 1}"
            )
            return told, second
    return None


def turn(a: Corner, b: Corner, c: Corner) -> Fraction:
    """Twice the signed area of a triangle: positive where a, b, c turn anticlockwise."""
    return (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])


def area(corners: Sequence[Corner]) -> Fraction:
    """Signed area by the shoelace formula (Gauss), positive where the corners turn anticlockwise."""
    pairs = zip(corners, (*corners[1:], corners[0]), strict=True)
    return sum((a[0] * b[1] - b[0] * a[1] for a, b in pairs), Fraction(0)) / 2


def is_convex(corners: Sequence[Corner]) -> bool:
    """True where no corner of a sound outline points inward."""
    count = len(corners)
    turns = [turn(corners[index - 1], corners[index], corners[(index + 1) % count]) for index in range(count)]
    return all(value >= 0 for value in turns) or all(value <= 0 for value in turns)


def _ahead(before: Corner, here: Corner, after: Corner) -> Fraction:
    return (here[0] - before[0]) * (after[0] - here[0]) + (here[1] - before[1]) * (after[1] - here[1])


def _meet(corners: Sequence[Corner], first: int, second: int) -> bool:
    """True where two edges, named by their first corner, have a point in common."""
    count = len(corners)
    a, b, c, d = corners[first], corners[(first + 1) % count], corners[second], corners[(second + 1) % count]
    sides = [turn(a, b, c), turn(a, b, d), turn(c, d, a), turn(c, d, b)]
    if sides[0] * sides[1] < 0 and sides[2] * sides[3] < 0:
        return True
    touching = zip(sides, ((a, b, c), (a, b, d), (c, d, a), (c, d, b)), strict=True)
    return any(side == 0 and _between(*three) for side, three in touching)


def _between(a: Corner, b: Corner, c: Corner) -> bool:
    """True where c, on the line through a and b, lies between them."""
    return all(min(a[axis], b[axis]) <= c[axis] <= max(a[axis], b[axis]) for axis in (0, 1))


def _place(where: Located, corner: int) -> Span:
    """Where a corner stands in the text."""
    pieces = where.text.split(",")
    if corner >= len(pieces):
        return where.span
    start = sum(len(piece) + 1 for piece in pieces[:corner])
    text = pieces[corner]
    start += len(text) - len(text.lstrip())
    return where.part(start, start + len(text.strip()))
