"""Rules for numbers that are known between bounds only: counts with unknown elements."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from itertools import product
from typing import Any

from rulecheck.operations.exact import sign
from rulecheck.operations.operation import Undefined
from rulecheck.operations.values import Bounds, merged

Rule = Callable[[Sequence[Any]], Any]


def by_corners(exact: Rule) -> Rule:
    """For operations of two operands at most that are monotone in each: the corners span the result."""

    def rule(values: Sequence[Any]) -> Any:
        return _spanned([exact(corner) for corner in product(*map(_ends, values))], values)

    return rule


def by_ends(exact: Rule) -> Rule:
    """For operations that grow with every operand: the two ends span the result."""

    def rule(values: Sequence[Any]) -> Any:
        ends = [_ends(value) for value in values]
        return _spanned([exact([pair[0] for pair in ends]), exact([pair[-1] for pair in ends])], values)

    return rule


def by_quotient(exact: Rule) -> Rule:
    """Division: as by corners, where the divisor keeps one sign."""
    corners = by_corners(exact)

    def rule(values: Sequence[Any]) -> Any:
        signs = {sign(end) for end in _ends(values[1])}
        return corners(values) if len(signs) == 1 and 0 not in signs else None

    return rule


def decided_by_corners(exact: Rule) -> Rule:
    """Comparisons by order: decided where all corners agree."""

    def rule(values: Sequence[Any]) -> Any:
        found = {exact(corner) for corner in product(*map(_ends, values))}
        return found.pop() if len(found) == 1 else None

    return rule


def apart(values: Sequence[Any]) -> Any:
    """Equality: fails where the two ranges lie apart, else cannot be said."""
    left, right = _ends(values[0]), _ends(values[1])
    return False if left[-1] < right[0] or right[-1] < left[0] else None


def _ends(value: Any) -> tuple[Any, ...]:
    return (value.low, value.high) if isinstance(value, Bounds) else (value,)


def _spanned(results: list[Any], values: Sequence[Any]) -> Any:
    if any(result is None or isinstance(result, Undefined) for result in results):
        return None
    low, high = min(results), max(results)
    return low if low == high else Bounds(low, high, merged(values).reasons)
