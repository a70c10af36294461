"""Values between rows, as terms: straight lines over one key, over several keys at once, or steps.

Between two rows of one key the value runs straight; over several keys it is the multilinear one of the cell: straight
along each key while the others stand. Outside the rows there is no value. Exact, since sums, products and quotients are.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise

from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.graph.terms import Term
from rulecheck.operations.arithmetic import add, divide, multiply, subtract
from rulecheck.operations.comparison import at_most, below
from rulecheck.operations.operation import Operation
from rulecheck.operations.values import Monomial, Reason


@dataclass(frozen=True, slots=True)
class Axis:
    """The rows along one key: their keys, rising, and why there is no value before the first and beyond the last."""

    keys: tuple[Term, ...]
    before: Reason
    beyond: Reason


def between(
    scope: Scope, axes: Sequence[Axis], values: Sequence[Term], at: Sequence[Term], span: Span | None, *, steps: bool
) -> Term:
    """The value at the keys `at`; `values` stand in the order of the axes, the last one running fastest.

    With `steps` the value of a row holds from its key to the next one.
    """
    if not axes:
        return values[0]
    axis, rest = axes[0], axes[1:]
    size = len(values) // len(axis.keys)
    slices = [
        between(scope, rest, values[start : start + size], at[1:], span, steps=steps)
        for start in range(0, len(values), size)
    ]
    # Each stretch is tried from the first on; a key that lies between two of them belongs to both.
    made = scope.bank.unknown(axis.beyond, "number", slices[0].dimension)
    if steps or len(axis.keys) == 1:  # a row gives its value on its own key, where no line begins
        made = scope.bank.branch(_do(scope, at_most, at[0], axis.keys[-1]), slices[-1], made, span)
    for (low, first), (high, second) in reversed(list(pairwise(zip(axis.keys, slices, strict=True)))):
        within = _do(scope, below if steps else at_most, at[0], high)
        height = first if steps else _straight(scope, at[0], (low, first), (high, second))
        made = scope.bank.branch(within, height, made, span)
    before = scope.bank.unknown(axis.before, "number", slices[0].dimension)
    return scope.bank.branch(_do(scope, below, at[0], axis.keys[0]), before, made, span)


def _straight(scope: Scope, at: Term, low: tuple[Term, Term], high: tuple[Term, Term]) -> Term:
    share = _do(scope, divide, _do(scope, subtract, at, low[0]), _difference(scope, high[0], low[0]))
    rise = _do(scope, multiply, share, _difference(scope, high[1], low[1]))
    return _do(scope, add, low[1], rise)


def _difference(scope: Scope, left: Term, right: Term) -> Term:
    """`left - right`; of two constants a constant."""
    high, low = left.value, right.value
    if isinstance(high, Monomial) and isinstance(low, Monomial) and high.power == low.power:
        return scope.bank.number(high.rational - low.rational, left.dimension, high.power)
    return _do(scope, subtract, left, right)


def _do(scope: Scope, operation: Operation, *terms: Term) -> Term:
    made = scope.apply(operation, terms, None)
    assert made is not None, "the caller has compared dimensions"
    return made
