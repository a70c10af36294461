"""The area that several closed outlines cover together, each spot counted once; exact.

The plane is cut into slabs at every corner and every crossing of two edges. Within a slab no two edges cross, so each
covers it as a trapezium whose borders keep one order, and what is covered is found by walking that order.
Source: area of a trapezium; the cutting into slabs is common practice of plane geometry.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from fractions import Fraction
from itertools import combinations, pairwise

Corner = tuple[Fraction, Fraction]
Edge = tuple[Corner, Corner, int]
"""Left corner, right corner, and which outline the edge belongs to; upright edges border no slab and are left out."""
MOST_EDGES = 400
"""So many edges may be joined to one area: the work grows with the square of their number."""


def union_area(outlines: Iterable[Sequence[Corner]]) -> Fraction:
    """The area of the union of closed outlines, in the square of the corners' unit.

    The last corner of an outline is joined to the first. Where an outline crosses itself, what an even number of its
    turns encloses does not count. Raises `ValueError` where there are more than `MOST_EDGES` edges.

    >>> square = [(Fraction(x), Fraction(y)) for x, y in ((0, 0), (2, 0), (2, 2), (0, 2))]
    >>> union_area([square, [(x + 1, y + 1) for x, y in square]])
    Fraction(7, 1)
    """
    edges = [edge for place, outline in enumerate(outlines) for edge in _edges(outline, place)]
    if len(edges) > MOST_EDGES:
        raise ValueError(f"{len(edges)} edges are more than {MOST_EDGES}")
    total = Fraction(0)
    for left, right in pairwise(sorted(_cuts(edges))):
        total += _covered(edges, left, right)
    return total


def _edges(outline: Sequence[Corner], place: int) -> list[Edge]:
    turned = zip(outline, (*outline[1:], *outline[:1]), strict=True)
    return [(min(a, b), max(a, b), place) for a, b in turned if a[0] != b[0]]


def _cuts(edges: Sequence[Edge]) -> set[Fraction]:
    """Where slabs end: at corners and crossings."""
    cuts = {corner[0] for first, second, _ in edges for corner in (first, second)}
    for one, other in combinations(edges, 2):
        left, right = max(one[0][0], other[0][0]), min(one[1][0], other[1][0])
        if left < right:
            at_left, at_right = _height(one, left) - _height(other, left), _height(one, right) - _height(other, right)
            if at_left * at_right < 0:
                cuts.add(left + (right - left) * at_left / (at_left - at_right))
    return cuts


def _height(edge: Edge, x: Fraction) -> Fraction:
    (x0, y0), (x1, y1), _ = edge
    return y0 + (y1 - y0) * (x - x0) / (x1 - x0)


def _covered(edges: Sequence[Edge], left: Fraction, right: Fraction) -> Fraction:
    """The area covered in one slab: the heights of borders are those in its middle, since areas grow straight."""
    middle = (left + right) / 2
    borders = sorted((_height(edge, middle), edge[2]) for edge in edges if edge[0][0] <= left and right <= edge[1][0])
    inside: set[int] = set()
    height, begun = Fraction(0), Fraction(0)
    for at, outline in borders:
        before = bool(inside)
        inside ^= {outline}
        if inside and not before:
            begun = at
        elif before and not inside:
            height += at - begun
    return height * (right - left)
