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
    Rational,
    exact_number,
    from_fraction,
    is_exact,
    to_ball,
    whole_below,
)
from rulecheck.operations.operation import UNDECIDED, Operation, Sort, Undecided
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


def flags(condition: Sampled, base: Base, limits: Sequence[Any]) -> list[bool] | Undecided:
    """Sample by sample, whether the condition holds; undecided where a ball holds a sample."""
    if isinstance(condition, Against):
        return _against(condition, base, limits[condition.limit])
    rows = [flags(part, base, limits) for part in condition.parts]
    known = [row for row in rows if not isinstance(row, Undecided)]
    if len(known) < len(rows):
        return UNDECIDED
    return [all(flag) if condition.every else any(flag) for flag in zip(*known, strict=True)]


def _against(condition: Against, base: Base, limit: Any) -> list[bool] | Undecided:
    order, values = condition.order, on_base(condition.samples, base)
    level = _level(limit, condition.samples, values)
    if level is None:
        return UNDECIDED
    below, whole = level
    if order in ("==", "!="):
        return [(whole and value == below) == (order == "==") for value in values]
    if order in (">", "<=") or not whole:
        above = order in (">", ">=")
        return [(value > below) == above for value in values]
    return [(value >= below) == (order == ">=") for value in values]


def _level(limit: Any, samples: Samples, values: Sequence[int]) -> tuple[int, bool] | None:
    """The limit on the samples' own scale: the whole number that is not above it, and whether it is that number.

    None where it is a ball that holds a sample; else any whole number that no sample parts from the limit.
    """
    scale = exact_number(Monomial(Fraction(samples.over), -samples.power))
    if is_exact(limit):
        level = limit * scale
        below = int(whole_below(level))
        return below, isinstance(level, Rational) and level == below
    ball = to_ball(limit) * to_ball(scale)
    ends = (ball.lower().floor().unique_fmpz(), ball.upper().ceil().unique_fmpz()) if ball.is_finite() else (None, None)
    if ends[0] is None or ends[1] is None:
        return None
    low, high = int(ends[0]), int(ends[1])
    first, last = low + 1 if ball > low else low, high - 1 if ball < high else high
    return None if any(first <= value <= last for value in values) else (low, False)


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
        return found if isinstance(found, Undecided) else from_fraction(measured(base, found))

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
        return nan if isinstance(found, Undecided) else float(measured(base, found))

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
