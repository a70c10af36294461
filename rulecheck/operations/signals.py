"""How long a condition on samples holds, against limits that may be figures: operations made for one record each.

A condition is a comparison of samples with a limit, or several joined. The samples are part of the operation; the
limits are its operands, so a record of any length is one term of the graph.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from itertools import count
from math import isfinite, nan
from typing import Any, Literal

from rulecheck.operations.exact import (
    Ball,
    Rational,
    exact_number,
    from_fraction,
    is_exact,
    to_ball,
    whole_below,
)
from rulecheck.operations.operation import UNDECIDED, Operation, Sort
from rulecheck.operations.samples import MEASURES, Base, Samples, on_base, shared_base
from rulecheck.operations.spaces import quiet
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import TIME

Order = Literal["<", "<=", ">", ">=", "==", "!="]


@dataclass(frozen=True, slots=True, eq=False)
class Against:
    """Samples held against the limit with this number."""

    samples: Samples
    order: Order
    limit: int


@dataclass(frozen=True, slots=True, eq=False)
class Joint:
    """Conditions that hold together: all of them, or any."""

    parts: tuple[Sampled, ...]
    every: bool


Sampled = Against | Joint


def leaves(condition: Sampled) -> Iterator[Against]:
    """The comparisons of a condition."""
    if isinstance(condition, Against):
        yield condition
    else:
        for part in condition.parts:
            yield from leaves(part)


def base_of(condition: Sampled) -> Base:
    """The time base on which a condition is decided."""
    return shared_base([leaf.samples.base for leaf in leaves(condition)])


def flags(condition: Sampled, base: Base, limits: Sequence[Any], doubtful: bool | None = None) -> list[bool] | None:
    """Sample by sample, whether the condition holds.

    Where a limit is a ball that holds a sample, the sample's comparison is taken as `doubtful`; without it there is
    no answer, and None is given.
    """
    if isinstance(condition, Against):
        return _against(condition, base, limits[condition.limit], doubtful)
    rows = [flags(part, base, limits, doubtful) for part in condition.parts]
    known = [row for row in rows if row is not None]
    if len(known) < len(rows):
        return None
    return [all(flag) if condition.every else any(flag) for flag in zip(*known, strict=True)]


def _against(condition: Against, base: Base, limit: Any, doubtful: bool | None) -> list[bool] | None:
    order, values = condition.order, on_base(condition.samples, base)
    level = _level(limit, condition.samples)
    if level is None:
        return None if doubtful is None else [doubtful] * len(values)
    first, last, whole = level
    if first <= last and not whole and any(first <= value <= last for value in values):
        return None if doubtful is None else _doubted(values, order, first, last, doubtful)
    if order in ("==", "!="):
        return [(whole and value == first) == (order == "==") for value in values]
    if order in (">", "<="):
        return [(value > last) == (order == ">") for value in values]
    return [(value >= first) == (order == ">=") for value in values]


def _doubted(values: Sequence[int], order: Order, first: int, last: int, doubtful: bool) -> list[bool]:
    above, below = order in (">", ">=", "!="), order in ("<", "<=", "!=")
    return [above if value > last else below if value < first else doubtful for value in values]


def _level(limit: Any, samples: Samples) -> tuple[int, int, bool] | None:
    """The limit on the samples' own scale: whole numbers from first to last may be the limit, those below are below it
    and those above are above it; and whether it certainly is the first. None where it is a ball without end.

    A limit between two whole numbers has none that may be it: the first is then above the last.
    """
    scale = exact_number(Monomial(Fraction(samples.over), -samples.power))
    if is_exact(limit):
        level = limit * scale
        below = int(whole_below(level))
        if isinstance(level, Rational) and level == below:
            return below, below, True
        return below + 1, below, False
    ball = to_ball(limit) * to_ball(scale)
    ends = (ball.lower().floor().unique_fmpz(), ball.upper().ceil().unique_fmpz()) if ball.is_finite() else (None, None)
    if ends[0] is None or ends[1] is None:
        return None
    low, high = int(ends[0]), int(ends[1])
    if low == high:
        return low, high, True
    return low + 1 if ball > low else low, high - 1 if ball < high else high, False


_WIDE_BITS = 24
"""A ball of less relative accuracy is wide on purpose: a range of a limit, and no limit that is not yet known well."""
MOST_KEPT = 256
"""So many limits with their times are remembered for one condition: each may cost a walk over all samples."""
_MADE = count(1)


def held_time(measure: str, condition: Sampled, many: int) -> Operation:
    """The operation that gives how long a condition holds, in seconds; its operands are the `many` limits.

    `measure` is `duration` or `longest`. Each has a name of its own, so that two records make two terms. In a limit
    the time jumps where the limit passes a sample, and does not change between.
    """
    base = base_of(condition)
    measured = MEASURES[measure]

    known: dict[tuple[Any, ...], Any] = {}

    def rule(values: Sequence[Any]) -> Any:
        found = flags(condition, base, values)
        if found is not None:
            return from_fraction(measured(base, found))
        if not any(isinstance(value, Ball) and value.rel_accuracy_bits() < _WIDE_BITS for value in values):
            return UNDECIDED
        # More samples for which a condition may hold make no time shorter.
        ends = [flags(condition, base, values, doubtful) for doubtful in (False, True)]
        least, most = (to_ball(from_fraction(measured(base, end))) for end in ends if end is not None)
        return least.union(most)

    def exact(values: Sequence[Any]) -> Any:
        if not all(map(is_exact, values)):
            return None
        key = tuple(values)
        if key not in known:
            if len(known) >= MOST_KEPT:
                known.clear()
            known[key] = rule(values)
        return known[key]

    def on_floats(*values: float) -> float:
        if not all(map(isfinite, values)):
            return nan
        found = flags(condition, base, [from_fraction(Fraction(value)) for value in values])
        return nan if found is None else float(measured(base, found))

    def array(space: Any, values: Sequence[Any]) -> Any:
        return space.vectorize(on_floats, otypes=[float])(*values) if values else space.asarray(on_floats())

    number: Sort = "number"
    return Operation(
        name=f"{measure} {next(_MADE)}",
        takes=(number,) * many,
        gives="number",
        dimension=lambda dimensions: TIME,
        exact=exact,
        ball=rule,
        array=quiet(array),
        symbolic=lambda sympy, values: sympy.Function(measure)(*values),
        script="NaN",
        partials=lambda space, values: (0,) * many,
        jumps=True,
        meaning=f"{measure} of a condition on a signal, in seconds",
    )
