"""Samples of a logged channel, exact: whole numbers over common denominators, so that a hundred thousand stay quick.

Sample and hold: a sample holds from its own time up to the next one. The last sample ends the record and holds for no
time; it counts in a peak, and in no duration.
"""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from itertools import accumulate, pairwise
from math import lcm

from rulecheck.operations.values import Monomial


@dataclass(frozen=True, slots=True, eq=False)
class Base:
    """The times of samples, rising: `ticks[i] / per` in seconds."""

    ticks: tuple[int, ...]
    per: int

    @property
    def length(self) -> Fraction:
        """From the first sample to the last, in seconds."""
        return Fraction(self.ticks[-1] - self.ticks[0], self.per)

    @property
    def widest(self) -> Fraction:
        """The longest time from a sample to the next, in seconds; zero where there is one sample."""
        return Fraction(max((later - sooner for sooner, later in pairwise(self.ticks)), default=0), self.per)


@dataclass(frozen=True, slots=True, eq=False)
class Samples:
    """A channel in SI: sample i is `values[i] / over * pi^power` from time i on."""

    base: Base
    values: tuple[int, ...]
    over: int = 1
    power: int = 0

    @property
    def is_zero(self) -> bool:
        """True where every sample is zero."""
        return not any(self.values)


def base_of(times: Sequence[Fraction]) -> Base:
    """A time base from seconds.

    >>> base_of([Fraction(0), Fraction(1, 2)]).widest
    Fraction(1, 2)
    """
    per = lcm(*(time.denominator for time in times))
    return Base(tuple(time.numerator * (per // time.denominator) for time in times), per)


def samples_of(base: Base, values: Sequence[Fraction], power: int = 0) -> Samples:
    """Samples from SI values, one for each time.

    >>> samples_of(base_of([Fraction(0), Fraction(1)]), [Fraction(1, 2), Fraction(3)]).values
    (1, 6)
    """
    over = lcm(*(value.denominator for value in values))
    return Samples(base, tuple(value.numerator * (over // value.denominator) for value in values), over, power)


# --- arithmetic ------------------------------------------------------------------------------------------------------


def linear(samples: Samples, factor: Fraction, offset: Fraction = Fraction(0), power: int = 0) -> Samples:
    """`factor * pi^power * samples + offset`; an offset goes with the power that the samples have then."""
    over = samples.over * factor.denominator * offset.denominator
    slope, height = factor.numerator * offset.denominator, offset.numerator * samples.over * factor.denominator
    values = tuple(value * slope + height for value in samples.values)
    return Samples(samples.base, values, over, samples.power + power)


def magnitude(samples: Samples) -> Samples:
    """Sample by sample without sign."""
    return Samples(samples.base, tuple(map(abs, samples.values)), samples.over, samples.power)


def added(left: Samples, right: Samples, sign: int = 1) -> Samples | None:
    """The sum, or with `sign` -1 the difference; None where the one has pi in it and the other has not."""
    if left.power != right.power and not left.is_zero and not right.is_zero:
        return None
    base, first, second = together(left, right)
    over = lcm(left.over, right.over)
    up, down = over // left.over, sign * (over // right.over)
    values = tuple(a * up + b * down for a, b in zip(first, second, strict=True))
    return Samples(base, values, over, right.power if left.is_zero else left.power)


def multiplied(left: Samples, right: Samples) -> Samples:
    """The product, sample by sample."""
    base, first, second = together(left, right)
    values = tuple(a * b for a, b in zip(first, second, strict=True))
    return Samples(base, values, left.over * right.over, left.power + right.power)


def together(left: Samples, right: Samples) -> tuple[Base, tuple[int, ...], tuple[int, ...]]:
    """Both on one time base: where their records overlap, at the times of either. Empty where they do not."""
    if left.base is right.base:
        return left.base, left.values, right.values
    base = shared_base([left.base, right.base])
    return base, on_base(left, base), on_base(right, base)


def shared_base(bases: Sequence[Base]) -> Base:
    """The times of all, where all records overlap; without times where they do not."""
    first = bases[0]
    if all(base is first for base in bases):
        return first
    per = lcm(*(base.per for base in bases))
    ticks = [[tick * (per // base.per) for tick in base.ticks] for base in bases]
    start, end = max(row[0] for row in ticks), min(row[-1] for row in ticks)
    return Base(tuple(sorted({tick for row in ticks for tick in row if start <= tick <= end})), per)


def on_base(samples: Samples, base: Base) -> tuple[int, ...]:
    """The values that hold at the times of another base that lies within this one."""
    if samples.base is base:
        return samples.values
    own, scale = samples.base.ticks, base.per // samples.base.per
    found, index = [], 0
    for tick in base.ticks:
        while index + 1 < len(own) and own[index + 1] * scale <= tick:
            index += 1
        found.append(samples.values[index])
    return tuple(found)


# --- what is asked of them -------------------------------------------------------------------------------------------


def greatest(samples: Samples) -> Monomial:
    """The greatest sample; the last one counts too."""
    return Monomial(Fraction(max(samples.values), samples.over), samples.power)


def time_of_peak(samples: Samples) -> Fraction:
    """When the greatest sample stands for the first time, in seconds."""
    return Fraction(samples.base.ticks[samples.values.index(max(samples.values))], samples.base.per)


def integral(samples: Samples) -> Monomial:
    """Over the record, each sample held up to the next.

    >>> integral(samples_of(base_of([Fraction(0), Fraction(2), Fraction(3)]), [Fraction(5), Fraction(1), Fraction(9)]))
    Monomial(rational=Fraction(11, 1), power=0)
    """
    ticks = samples.base.ticks
    area = sum(
        value * (later - sooner) for value, (sooner, later) in zip(samples.values, pairwise(ticks), strict=False)
    )
    return Monomial(Fraction(area, samples.over * samples.base.per), samples.power)


def rolling_mean(samples: Samples, window: Fraction) -> Samples | None:
    """The mean over the window that ends at each time; None where no full window fits the record.

    The mean of a held signal is straight between the times at which a sample enters or leaves the window, so it is
    given at all of these: its extremes are among them.
    """
    base = samples.base
    per = lcm(base.per, window.denominator)
    ticks = [tick * (per // base.per) for tick in base.ticks]
    width = int(window * per)
    first, last = ticks[0] + width, ticks[-1]
    if first > last:
        return None
    areas = list(
        accumulate((v * (b - a) for v, (a, b) in zip(samples.values, pairwise(ticks), strict=False)), initial=0)
    )
    ends = sorted({tick for tick in ticks if tick >= first} | {tick + width for tick in ticks if tick + width <= last})
    upper = _areas_to(ends, ticks, areas, samples.values)
    lower = _areas_to([end - width for end in ends], ticks, areas, samples.values)
    values = tuple(high - low for high, low in zip(upper, lower, strict=True))
    return Samples(Base(tuple(ends), per), values, samples.over * width, samples.power)


def _areas_to(ends: Iterable[int], ticks: Sequence[int], areas: Sequence[int], values: Sequence[int]) -> list[int]:
    found, index = [], 0
    for end in ends:
        while index + 1 < len(ticks) and ticks[index + 1] <= end:
            index += 1
        found.append(areas[index] + values[index] * (end - ticks[index]))
    return found


def within(samples: Samples, start: Fraction, end: Fraction) -> Samples:
    """The record from one time to another, both within it; the value that holds at the end ends the piece."""
    base = samples.base
    per = lcm(base.per, start.denominator, end.denominator)
    scale, first, last = per // base.per, int(start * per), int(end * per)
    ticks = [tick * scale for tick in base.ticks]
    kept = [first, *ticks[bisect_right(ticks, first) : bisect_right(ticks, last - 1)], last]
    piece = Base(tuple(kept), per)
    return Samples(piece, on_base(samples, piece), samples.over, samples.power)


Flags = Sequence[bool]


def duration(base: Base, flags: Flags) -> Fraction:
    """How long the flags hold altogether, in seconds.

    >>> duration(base_of([Fraction(0), Fraction(1), Fraction(3)]), [False, True, True])
    Fraction(2, 1)
    """
    spans = pairwise(base.ticks)
    return Fraction(sum(later - sooner for (sooner, later), flag in zip(spans, flags, strict=False) if flag), base.per)


def longest(base: Base, flags: Flags) -> Fraction:
    """The longest time for which they hold without a break, in seconds.

    >>> longest(base_of([Fraction(n) for n in range(5)]), [True, False, True, True, False])
    Fraction(2, 1)
    """
    best = run = 0
    for (sooner, later), flag in zip(pairwise(base.ticks), flags, strict=False):
        run = run + later - sooner if flag else 0
        if run > best:
            best = run
    return Fraction(best, base.per)


MEASURES: dict[str, Callable[[Base, Flags], Fraction]] = {"duration": duration, "longest": longest}
