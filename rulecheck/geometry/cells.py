"""What ranges leave free, as open cells: whether a body may lie across several ranges that together hold it.

The complement of ranges that count together is the common part of their complements, each of which is one side of one
border: a list of cells, open boxes that may be empty or without end. A body lies inside where it meets none of them,
and its distance to the border is the distance to the nearest.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from rulecheck.graph.terms import Term

Cell = Mapping[str, tuple[tuple[Term, ...], tuple[Term, ...]]]
"""By axis, what lies below and what lies above the cell: it is open at all of them."""
MOST_CELLS = 300


def together(first: Sequence[Cell], second: Sequence[Cell]) -> list[Cell] | None:
    """The cells common to two complements; None where there are too many."""
    if len(first) * len(second) > MOST_CELLS:
        return None
    return [_merged(one, other) for one in first for other in second]


def _merged(one: Cell, other: Cell) -> Cell:
    found = dict(one)
    for axis, (lows, highs) in other.items():
        known = found.get(axis, ((), ()))
        found[axis] = ((*known[0], *lows), (*known[1], *highs))
    return found
