"""How far intervals of doubles are certain along many inputs at once, each to either side.

The travel of an input is cut into cells. From the value outwards runs of wide cells are asked; at the first that is not
certain the cells become narrower, where all are certain wider, until the first of the narrowest is not. Loads numpy.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

import numpy

from rulecheck.graph.terms import Inputs, Term
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.intervals import Interval, add, multiply
from rulecheck.readers.stretches import Flag, Movement, Stretches, in_doubles

# The narrowest cells: a billionth of the travel and less.
CELLS = 2**30
# So many cells of one width are asked of each in a round at least and at most, and of all together about so many.
LEAST_RUN, MOST_RUN, LANES = 16, 1024, 2048
WIDER = 16
MOST_ROUNDS = 150
INPUTS_AT_ONCE = 64


@dataclass(frozen=True, slots=True)
class Ask:
    """One input to one side: its place among the inputs, its value times a power of pi, the width of a cell with its
    sign (SI), the flags that are to stay as they are, and from which cell on."""

    place: int
    start: Fraction
    power: int
    step: Fraction
    flags: tuple[Term, ...]
    holds: bool
    since: int = 0


@dataclass(frozen=True, slots=True)
class Sure:
    """So many cells from the value on are certain; in the next the flags at the places `doubtful` were not."""

    cells: int
    doubtful: tuple[int, ...]


def certain_stretches(
    inputs: Inputs, base: ExactReader, movement: Movement, paths: Sequence[str], asks: Sequence[Ask]
) -> list[Sure]:
    """For each ask how far its flags are certain; `paths` are the inputs at the places of the movement."""
    found: list[Sure] = []
    for some in _batches(asks):
        places = sorted({ask.place for ask in some})
        flags = list({flag.index: flag for ask in some for flag in ask.flags}.values())
        over = Stretches(inputs, base, movement, places, flags)
        found.extend(_Batch(over, flags, [paths[place] for place in places], some).settled())
    return found


def _batches(asks: Sequence[Ask]) -> Iterator[Sequence[Ask]]:
    """Asks that follow one another, with so many inputs at most."""
    for first in range(0, len(asks), 2 * INPUTS_AT_ONCE):
        yield asks[first : first + 2 * INPUTS_AT_ONCE]


class _Batch:
    """The search for some asks together."""

    def __init__(self, over: Stretches, flags: Sequence[Term], paths: Sequence[str], asks: Sequence[Ask]) -> None:
        self._over, self._flags, self._paths, self._asks = over, flags, paths, asks
        places = sorted({ask.place for ask in asks})
        rows = {flag.index: row for row, flag in enumerate(self._flags)}
        self._asked = numpy.zeros((len(self._flags), len(asks)), dtype=bool)
        for column, ask in enumerate(asks):
            self._asked[[rows[flag.index] for flag in ask.flags], column] = True
        self._holds = numpy.array([ask.holds for ask in asks])
        self._lanes = numpy.array([places.index(ask.place) for ask in asks])
        self._starts = numpy.array([in_doubles(ask.start, ask.power) for ask in asks])
        self._steps = numpy.array([in_doubles(ask.step, ask.power) for ask in asks])
        self._inner = numpy.array([ask.since for ask in asks])
        self._width = numpy.full(len(asks), CELLS // LEAST_RUN)
        self._found: dict[int, Sure] = {}

    def settled(self) -> list[Sure]:
        """As far as each is certain."""
        active = numpy.arange(len(self._asks))
        for turn in range(MOST_ROUNDS):
            active = active[self._inner[active] < CELLS]
            if not active.size:
                break
            active = self._moved(active, is_last=turn == MOST_ROUNDS - 1)
        return [self._found.get(place, Sure(CELLS, ())) for place in range(len(self._asks))]

    def _moved(self, active: Any, *, is_last: bool) -> Any:
        """One round; gives those that go on."""
        run = min(MOST_RUN, max(LEAST_RUN, LANES // active.size))
        edges = self._inner[active, None] + self._width[active, None] * numpy.arange(run + 1)
        doubtful = self._doubtful(active, numpy.minimum(edges, CELLS))
        doubts = doubtful.any(axis=0)
        first = numpy.where(doubts.any(axis=1), doubts.argmax(axis=1), run)
        self._inner[active] = numpy.minimum(edges[numpy.arange(active.size), first], CELLS)
        stuck = first < run
        for row in numpy.nonzero(stuck & ((self._width[active] == 1) | is_last))[0]:
            self._end(int(active[row]), doubtful[:, row, first[row]])
        ended = stuck & (self._width[active] == 1)
        width = numpy.where(stuck, self._width[active] // run, self._width[active] * WIDER)
        self._width[active] = numpy.clip(width, 1, CELLS // LEAST_RUN)
        return active[~ended]

    def _end(self, column: int, doubtful: Any) -> None:
        names = {self._flags[row].index for row in numpy.nonzero(doubtful)[0].tolist()}
        flags = self._asks[column].flags
        places = tuple(place for place, flag in enumerate(flags) if flag.index in names)
        self._found[column] = Sure(int(self._inner[column]), places)

    def _doubtful(self, active: Any, edges: Any) -> Any:
        """For each flag, ask and cell, whether it is asked and not certain there."""
        shape = (active.size, edges.shape[1] - 1)
        lanes = numpy.repeat(self._lanes[active], shape[1])
        found = self._over.flags(self._paths, lanes, self._moved_over(active, edges))
        holds = self._holds[active, None]
        doubtful = numpy.zeros((len(self._flags), *shape), dtype=bool)
        for row, flag in enumerate(self._flags):
            asked = self._asked[row, active]
            if asked.any():
                certain = _reshaped(found[flag.index], shape)
                doubtful[row] = asked[:, None] & ~numpy.where(holds, *certain)
        return doubtful

    def _moved_over(self, active: Any, edges: Any) -> Interval:
        """The ends between which the input of each lane runs, rounded outwards."""
        shape = (active.size, edges.shape[1] - 1)
        start, step = (
            (
                numpy.broadcast_to(ends[active, 0, None], shape).ravel(),
                numpy.broadcast_to(ends[active, 1, None], shape).ravel(),
            )
            for ends in (self._starts, self._steps)
        )
        near, far = edges[:, :-1].ravel().astype(float), edges[:, 1:].ravel().astype(float)
        ends = [add((multiply(((cells, cells), step)), start)) for cells in (near, far)]
        return numpy.minimum(ends[0][0], ends[1][0]), numpy.maximum(ends[0][1], ends[1][1])


def _reshaped(flag: Flag, shape: tuple[int, int]) -> tuple[Any, Any]:
    return tuple(numpy.broadcast_to(side, (shape[0] * shape[1],)).reshape(shape) for side in (flag.holds, flag.fails))  # type: ignore[return-value]
