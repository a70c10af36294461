"""Aggregates over the elements of a collection that a condition keeps.

Operands come in pairs, flag and number; only numbers whose flag holds count. A flag that is not known
makes the result unknown; of an element that is left out, nothing need be known.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

from rulecheck.operations.dimensions import alike, none
from rulecheck.operations.exact import Rational, all_exact, to_ball
from rulecheck.operations.extremes import binding, fold_balls, one_hot
from rulecheck.operations.operation import UNDECIDED, Operation, Undecided, Undefined
from rulecheck.operations.powers import rational_power_of_ball, rational_power_of_exact
from rulecheck.operations.roots_and_exponentials import HALF
from rulecheck.operations.spaces import choose, is_arrays, is_symbolic, over, quiet, root
from rulecheck.operations.values import Bounds, Unknown, merged

Rule = Callable[[Sequence[Any]], Any]
NOTHING_LEFT = Undefined("no element is left")
TOO_FEW = Undefined("a deviation needs two elements")


def kept(values: Sequence[Any]) -> list[Any] | Unknown | Undecided:
    """The numbers whose flag holds; unknown or undecided where one that counts is."""
    numbers: list[Any] = []
    doubtful: list[Any] = []
    for flag, number in zip(values[::2], values[1::2], strict=True):
        if flag is True:
            (doubtful if isinstance(number, (Unknown, Undecided, Bounds)) else numbers).append(number)
        elif flag is not False:
            doubtful.append(flag)
    if any(isinstance(value, (Unknown, Bounds)) for value in doubtful):
        return merged(doubtful)
    return UNDECIDED if doubtful else numbers


def _over_kept(rule: Rule) -> Rule:
    """The rule on what is kept, while that is exact; None where it is not."""

    def run(values: Sequence[Any]) -> Any:
        numbers = kept(values)
        if not isinstance(numbers, list):
            return numbers
        return rule(numbers) if all_exact(numbers) else None

    return run


def _balls_over_kept(rule: Rule) -> Rule:
    def run(values: Sequence[Any]) -> Any:
        numbers = kept(values)
        return rule([to_ball(number) for number in numbers]) if isinstance(numbers, list) else numbers

    return run


def _total(numbers: Sequence[Any]) -> Any:
    return sum(numbers[1:], numbers[0]) if numbers else Rational(0)


def _mean(numbers: Sequence[Any]) -> Any:
    return _total(numbers) / Rational(len(numbers)) if numbers else NOTHING_LEFT


def _variance(numbers: Sequence[Any]) -> Any:
    if len(numbers) < 2:
        return TOO_FEW
    mean = _mean(numbers)
    return _total([(number - mean) * (number - mean) for number in numbers]) / Rational(len(numbers) - 1)


def _deviation(numbers: Sequence[Any]) -> Any:
    found = _variance(numbers)
    return found if isinstance(found, Undefined) else rational_power_of_exact(found, HALF)


def _deviation_of_balls(numbers: Sequence[Any]) -> Any:
    found = _variance(numbers)
    # A sum of squares is not negative, whatever its ball says.
    return found if isinstance(found, Undefined) else rational_power_of_ball(found.nonnegative_part(), HALF)


def _or_nothing(rule: Rule) -> Rule:
    return lambda numbers: rule(numbers) if numbers else NOTHING_LEFT


def _weights(space: Any, values: Sequence[Any]) -> list[Any]:
    one, zero = (1, 0) if is_symbolic(space) else (1.0, 0.0)
    return [choose(space, flag, one, zero) for flag in values[::2]]


def _counted(space: Any, values: Sequence[Any]) -> list[Any]:
    """The numbers, with zero for those that are left out, so that what is not known there does no harm."""
    return [choose(space, flag, number, 0) for flag, number in zip(values[::2], values[1::2], strict=True)]


def _sum_form(space: Any, values: Sequence[Any]) -> Any:
    return sum(_counted(space, values))


def _mean_form(space: Any, values: Sequence[Any]) -> Any:
    return over(space, _sum_form(space, values), sum(_weights(space, values)))


def _deviation_form(space: Any, values: Sequence[Any]) -> Any:
    weights, mean = _weights(space, values), _mean_form(space, values)
    squares = sum(
        choose(space, flag, (number - mean) ** 2, 0) for flag, number in zip(values[::2], values[1::2], strict=True)
    )
    return root(space, over(space, squares, _positive(space, sum(weights) - 1)))


def _positive(space: Any, count: Any) -> Any:
    """Zero in place of a negative count, so that the quotient by it is not a number."""
    return count if is_symbolic(space) else choose(space, count > 0, count, 0)


def _paired(partials: Sequence[Any]) -> tuple[Any, ...]:
    """A zero for every flag before the partial of its number."""
    return tuple(part for partial in partials for part in (0.0, partial))


def _mean_partials(space: Any, values: Sequence[Any]) -> Sequence[Any]:
    weights = _weights(space, values)
    return _paired([over(space, weight, sum(weights)) for weight in weights])


def _deviation_partials(space: Any, values: Sequence[Any]) -> Sequence[Any]:
    """(x - mean) / ((n - 1) s) for what is kept."""
    weights, mean, spread = _weights(space, values), _mean_form(space, values), _deviation_form(space, values)
    below = (sum(weights) - 1) * spread
    return _paired(
        [
            choose(space, flag, over(space, number - mean, below), 0.0)
            for flag, number in zip(values[::2], values[1::2], strict=True)
        ]
    )


def _aggregate(name: str, meaning: str, word: str, exact: Rule, ball: Rule, form: Any, **facts: Any) -> Operation:
    return Operation(
        name=name,
        takes=("flag", "number"),
        gives="number",
        dimension=alike("put into one aggregate", step=2),
        exact=_over_kept(exact),
        ball=_balls_over_kept(ball),
        array=quiet(form),
        symbolic=form,
        script=name,
        strict=False,
        many=True,
        repeats=2,
        meaning=meaning,
        sign=word,
        **facts,
    )


total_where = _aggregate(
    "total_where", "sum of the numbers whose flag holds", "sum", _total, _total, _sum_form,
    partials=lambda space, values: _paired(_weights(space, values)),
)  # fmt: skip

mean_where = _aggregate(
    "mean_where", "mean of the numbers whose flag holds", "mean", _mean, _mean, _mean_form,
    partials=_mean_partials, domain="an element is left",
)  # fmt: skip

deviation_where = _aggregate(
    "deviation_where", "standard deviation (n - 1) of the numbers whose flag holds", "deviation",
    _deviation, _deviation_of_balls, _deviation_form,
    partials=_deviation_partials, domain="two elements are left",
)  # fmt: skip


def _extreme_where(name: str, meaning: str, word: str, worst: float) -> Operation:
    exact = min if word == "min" else max
    better: Callable[[Any, Any], bool] = (lambda a, b: a < b) if word == "min" else (lambda a, b: a > b)
    find = binding(better)

    def replaced(space: Any, values: Sequence[Any]) -> list[Any]:
        lost = (space.oo if word == "min" else -space.oo) if is_symbolic(space) else worst
        return [choose(space, flag, number, lost) for flag, number in zip(values[::2], values[1::2], strict=True)]

    def form(space: Any, values: Sequence[Any]) -> Any:
        candidates = replaced(space, values)
        if is_symbolic(space):
            return (space.Min if word == "min" else space.Max)(*candidates)
        found = candidates[0]
        for other in candidates[1:]:
            found = space.minimum(found, other) if word == "min" else space.maximum(found, other)
        return space.where(space.equal(found, worst), space.nan, found)

    def binds(floats: Sequence[float]) -> int:
        return 2 * find([number if flag else worst for flag, number in zip(floats[::2], floats[1::2], strict=True)]) + 1

    def partials(space: Any, values: Sequence[Any]) -> Sequence[Any]:
        best = form(space, values) if is_arrays(space) or is_symbolic(space) else None
        return _paired(one_hot(space, replaced(space, values), best, find))

    ball = fold_balls((lambda a, b: a.min(b)) if word == "min" else (lambda a, b: a.max(b)))
    return _aggregate(
        name, meaning, word, _or_nothing(exact), _or_nothing(ball), form,
        partials=partials, binds=binds, domain="an element is left",
    )  # fmt: skip


least_where = _extreme_where("least_where", "least of the numbers whose flag holds", "min", float("inf"))
greatest_where = _extreme_where("greatest_where", "greatest of the numbers whose flag holds", "max", float("-inf"))


def _count(values: Sequence[Any]) -> Any:
    if UNDECIDED in values:
        return UNDECIDED
    low = Rational(sum(value is True for value in values))
    unknown = sum(isinstance(value, Unknown) for value in values)
    return Bounds(low, low + unknown, merged(values).reasons) if unknown else low


def _count_form(space: Any, values: Sequence[Any]) -> Any:
    one, zero = (1, 0) if is_symbolic(space) else (1.0, 0.0)
    return sum(choose(space, flag, one, zero) for flag in values)


count_where = Operation(
    name="count_where",
    takes=("flag",),
    gives="number",
    dimension=none,
    exact=_count,
    ball=_count,
    array=_count_form,
    symbolic=_count_form,
    script="count_where",
    partials=lambda space, values: (0.0,) * len(values),
    strict=False,
    many=True,
    meaning="how many flags hold; between bounds where some are not known",
    sign="count",
)
