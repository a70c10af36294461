"""Room of an outline clear of what has straight sides and no corner that points inward: a box, or a convex polygon.

An edge of the outline passes through where it is on the right side of every side at once, for a stretch of its length
(clipping by half-planes, Cyrus and Beck 1978). Along it the depth is concave.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

from rulecheck.geometry.making import Maker
from rulecheck.geometry.rooms import Room
from rulecheck.graph.terms import Term

Corner = tuple[Term, Term]


@dataclass(frozen=True, slots=True)
class Side:
    """A side: how far a point is inward of it, times `length` (None: as it is)."""

    inward: Callable[[Corner], Term]
    length: Term | None = None

    def depth(self, make: Maker, inward: Term) -> Term:
        """A value of `inward` as a distance."""
        return inward if self.length is None else make.over(inward, self.length)


def clear_of_sides(
    make: Maker,
    sides: Sequence[Side],
    outline: Sequence[Corner],
    away: Term,
    middle: tuple[Corner, Term] | None,
) -> Room:
    """The room of an outline clear of the common part of some sides.

    `away` is the squared distance while they are apart; `middle` a point inside and whether it lies in the outline,
    None where the common part has no end. Where they overlap, the depth is that of the deepest corner, or of the middle
    of an edge's stretch inside: the deepest point may lie deeper.
    """
    values = [[side.inward(corner) for side in sides] for corner in outline]
    deep: list[tuple[Term, Term]] = []
    meets: list[Term] = []
    for index, here in enumerate(values):
        passes, depth = _passage(make, sides, here, values[(index + 1) % len(values)])
        meets.append(passes)
        deep.append((passes, depth))
        deep.append((make.every(map(make.is_above_zero, here)), _depth(make, sides, here)))
    if middle is not None:
        point, covered = middle
        inward = [side.inward(point) for side in sides]
        covered = make.every([covered, *map(make.is_above_zero, inward)])
        meets.append(covered)
        deep.append((covered, _depth(make, sides, inward)))
    holds = make.opposite_flag(make.some(meets))
    return Room(make.choose(holds, make.root(away), make.opposite(make.greatest_where(deep))), holds)


def _depth(make: Maker, sides: Sequence[Side], inward: Sequence[Term]) -> Term:
    return make.least([side.depth(make, value) for side, value in zip(sides, inward, strict=True)])


def _passage(make: Maker, sides: Sequence[Side], start: Sequence[Term], end: Sequence[Term]) -> tuple[Term, Term]:
    """Whether an edge passes through, and the depth in the middle of its passage."""
    yes = make.bank.flag(True)
    begins, ends = [(yes, make.number(0))], [(yes, make.number(1))]
    reaches = []
    for first, second in zip(start, end, strict=True):
        inside, stays = make.is_above_zero(first), make.is_above_zero(second)
        share = make.over(first, make.minus(first, second))
        begins.append((make.every([make.opposite_flag(inside), stays]), share))
        ends.append((make.every([make.opposite_flag(stays), inside]), share))
        reaches.append(make.some([inside, stays]))
    begin, finish = make.greatest_where(begins), make.least_where(ends)
    passes = make.every([*reaches, make.below(begin, finish)])
    half = make.middle(begin, finish)
    inward = [make.plus(a, make.times(half, make.minus(b, a))) for a, b in zip(start, end, strict=True)]
    return passes, _depth(make, sides, inward)
