"""The least value of a number over a box of inputs, certified: by the signs of its slopes, else by bisection.

Where a slope keeps its sign all over the box, the least value lies at that end of the input; an input after the other
is settled like this, and the least value is then that at one corner, exactly. What is left is bisected, with a bound
on the number of boxes; what is not proved then is said.
"""

from __future__ import annotations

import heapq
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from itertools import count
from typing import Any

from rulecheck.graph.terms import Term
from rulecheck.operations.exact import Ball, from_fraction, to_ball
from rulecheck.readers.box import Box, BoxReader
from rulecheck.readers.certain import ZERO, Certain, Unsure
from rulecheck.readers.slopes import SlopeReader, Slopes

MOST_BOXES = 400
_CLOSE = 1e-6


@dataclass(frozen=True, slots=True)
class Least:
    """The least value over a box: never below `low`, and as low as `found` (at the point `at`); each is None where
    nothing is known."""

    low: Certain | None
    found: Certain | None
    proved: bool
    at: Mapping[str, Fraction] | None = None


def least(over: BoxReader, term: Term, box: Box) -> Least:
    """The least value of a number over a box."""
    search = _Search(over, term)
    start = search.settled(box)
    if not _free(start):
        return search.corner(start)
    return search.bisected(start)


def never_below(over: BoxReader, term: Term, box: Box) -> Certain | None:
    """What no value of a number over a box is below, from one look at it: exact where a corner has the least value."""
    search = _Search(over, term)
    settled = search.settled(box)
    if not _free(settled):
        return search.corner(settled).low
    bound = search.below(settled)
    return None if bound is None else Certain(bound)


def lowest_alone(over: BoxReader, term: Term, box: Box) -> Box | None:
    """The corner or side of a box on which a number is zero, where it certainly is above zero everywhere else; else None."""
    slopes = over.slopes(term, box)
    side = dict(box)
    for path in _free(box):
        slope = slopes.by_path.get(path, ZERO)
        try:
            if slope is None or not slope:
                side[path] = box[path]
                continue
            end = box[path][0] if slope > 0 else box[path][1]
            side[path] = (end, end)
        except Unsure:
            return None
    if side == dict(box) or any(slope is None for slope in slopes.by_path.values()):
        return None
    found = _Search(over, term).value_at({path: low for path, (low, _) in side.items()})
    return side if found is not None and found.is_exact and not found else None


def truth_over(over: BoxReader, flag: Term, box: Box) -> bool | None:
    """What a flag is all over a box, by bisection; None where it changes there or that is not proved."""
    waiting, found, boxes = [dict(box)], set(), 0
    while waiting:
        boxes += 1
        part = waiting.pop()
        truth = over.truth(flag, part)
        if truth is None:
            path = widest(part, box)
            if boxes > MOST_BOXES or path is None:
                return None
            waiting.extend(halves(part, path))
            continue
        found.add(truth)
        if len(found) > 1:
            return None
    return found.pop()


class _Search:
    """One number on the way to its least value."""

    def __init__(self, over: BoxReader, term: Term) -> None:
        self.over, self.term = over, term
        self.slopes = Slopes({})

    def settled(self, box: Box) -> dict[str, tuple[Fraction, Fraction]]:
        """The box with every input at the end where the number is least, as far as the signs of slopes say."""
        current = dict(box)
        while free := _free(current):
            self.slopes = self.over.slopes(self.term, current)
            ends = {path: _end(self.slopes.by_path.get(path, ZERO), *current[path]) for path in free}
            fixed = {path: (end, end) for path, end in ends.items() if end is not None}
            if not fixed:
                break
            current |= fixed
        return current

    def corner(self, box: Box) -> Least:
        point = {path: low for path, (low, _) in box.items()}
        found = self.value_at(point)
        return Least(found, found, found is not None, point)

    def value_at(self, point: dict[str, Fraction]) -> Certain | None:
        """The value at one point; None where it has none."""
        reader = self.over.at(point)
        try:
            return SlopeReader(self.over.bank, reader, ()).number(self.term)
        except Unsure:
            return None

    def below(self, box: Box) -> Any:
        """A ball without radius that no value over a box is below; None where nothing can be said."""
        plain = self.over.ball(self.term, box)
        bounds = [plain.lower()] if plain is not None else []
        free = _free(box)
        slopes = [self.slopes.by_path.get(path, ZERO) for path in free]
        centre = self.value_at(middle(box))
        if centre is not None and all(slope is not None for slope in slopes):
            fall = sum(
                (
                    abs(slope.ball()) * _radius(*box[path])
                    for path, slope in zip(free, slopes, strict=True)
                    if slope is not None
                ),
                Ball(0),
            )
            bounds.append((centre.ball() - fall).lower())
        finite = [bound for bound in bounds if bound.is_finite()]
        return max(finite) if finite else None

    def bisected(self, start: Box) -> Least:
        """Best box first; ends where what is left cannot lie much lower than what was met."""
        best: Certain | None = None
        at: dict[str, Fraction] | None = None
        number = count()
        heap: list[tuple[float, int, Any, dict[str, tuple[Fraction, Fraction]]]] = []
        floor: Any = None  # the least bound of boxes that are dealt with
        waiting = [dict(start)]
        for _ in range(MOST_BOXES):
            for box in waiting:
                settled = self.settled(box)
                point = middle(settled)
                met = self.value_at(point)
                if met is not None and (best is None or float(met) < float(best)):
                    best, at = met, point
                if not _free(settled):
                    floor = _lower(floor, met.ball().lower()) if met is not None else self._lost(heap, settled, number)
                    continue
                bound = self.below(settled)
                heapq.heappush(heap, (float("-inf") if bound is None else float(bound), next(number), bound, settled))
            if not heap or self._is_close(heap[0][0], best):
                break
            _, _, _, box = heapq.heappop(heap)
            path = widest(box, start)
            assert path is not None
            waiting = halves(box, path)
        else:
            left = [self.settled(box) for box in waiting]
            heap.extend((0.0, next(number), self.over.ball(self.term, box), box) for box in left)
        bounds = [None if bound is None else bound.lower() for _, _, bound, _ in heap]
        if any(bound is None for bound in bounds) or (not bounds and floor is None):
            return Least(None, best, False, at)
        for bound in bounds:
            floor = _lower(floor, bound)
        return Least(Certain(floor), best, False, at)

    def _lost(self, heap: Any, box: Box, number: Any) -> Any:
        """A corner without a value: nothing bounds the least value there."""
        heap.append((float("inf"), next(number), None, dict(box)))
        heapq.heapify(heap)
        return None

    def _is_close(self, bound: float, best: Certain | None) -> bool:
        return best is not None and bound >= float(best) - _CLOSE * abs(float(best))


def _lower(one: Any, other: Any) -> Any:
    return other if one is None or other < one else one


def _free(box: Box) -> list[str]:
    return [path for path, (low, high) in box.items() if low != high]


def _end(slope: Certain | None, low: Fraction, high: Fraction) -> Fraction | None:
    """The end at which a number with this slope is least; None where the slope changes its sign or is not known."""
    if slope is None:
        return None
    try:
        if slope >= 0:
            return low
        return high if slope <= 0 else None
    except Unsure:
        pass
    try:
        return high if slope <= 0 else None
    except Unsure:
        return None


def middle(box: Box) -> dict[str, Fraction]:
    """The point in the middle of a box."""
    return {path: (low + high) / 2 for path, (low, high) in box.items()}


def _radius(low: Fraction, high: Fraction) -> Ball:
    return to_ball(from_fraction((high - low) / 2))


def widest(box: Box, whole: Box) -> str | None:
    """The input that is least divided yet, against the whole box."""
    free = _free(box)
    if not free:
        return None
    return max(free, key=lambda path: (box[path][1] - box[path][0]) / (whole[path][1] - whole[path][0]))


def halves(box: Box, path: str) -> list[dict[str, tuple[Fraction, Fraction]]]:
    """A box cut in two along one input."""
    low, high = box[path]
    cut = (low + high) / 2
    return [{**box, path: (low, cut)}, {**box, path: (cut, high)}]
