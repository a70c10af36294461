"""What partial derivatives need from a name space beyond its functions: choices and safe quotients.

A space is `math` (floats), `numpy` (arrays), `sympy` (expressions), or that of numbers which are certain. Handed in,
never imported.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from typing import Any

ArrayRule = Callable[[Any, Sequence[Any]], Any]


def is_arrays(space: Any) -> bool:
    """True for numpy."""
    return hasattr(space, "ndarray")


def is_symbolic(space: Any) -> bool:
    """True for sympy."""
    return hasattr(space, "Piecewise")


def is_certain(space: Any) -> bool:
    """True for numbers that are exact or balls, for which a double in place of a fraction will not do."""
    return hasattr(space, "certain")


def choose(space: Any, condition: Any, then: Any, otherwise: Any) -> Any:
    """`then` where the condition holds, else `otherwise`; both are values already."""
    if is_arrays(space):
        return space.where(condition, then, otherwise)
    if is_symbolic(space):
        return space.Piecewise((then, condition), (otherwise, True))
    return then if condition else otherwise


def over(space: Any, top: Any, bottom: Any) -> Any:
    """`top / bottom`, not a number where `bottom` is zero.

    >>> over(math, 1.0, 0.0)
    nan
    """
    if is_arrays(space):
        with space.errstate(all="ignore"):
            return top / space.where(space.equal(bottom, 0), space.nan, bottom)
    if is_symbolic(space):
        # Partials write constants as floats; in a form they stay exact.
        return (space.Rational(top) if isinstance(top, float) else top) / bottom
    return top / bottom if bottom else math.nan


def root(space: Any, value: Any) -> Any:
    """The square root, not a number where `value` is negative."""
    return _guarded(space, space.sqrt, value, lambda number: number >= 0)


def logarithm(space: Any, value: Any) -> Any:
    """The natural logarithm, not a number where `value` is not positive."""
    return _guarded(space, space.log, value, lambda number: number > 0)


def raised(space: Any, base: Any, exponent: Any) -> Any:
    """`base ** exponent`, not a number where that is no real number."""
    if is_arrays(space):
        with space.errstate(all="ignore"):
            result = space.power(space.asarray(base, dtype=float), exponent)
            return space.where(space.isfinite(result), result, space.nan)
    if is_symbolic(space):
        return base**exponent
    try:
        result = base**exponent
    except (ZeroDivisionError, OverflowError):
        return math.nan
    return math.nan if isinstance(result, complex) else result


def quiet(rule: ArrayRule) -> ArrayRule:
    """An array rule that gives nan or infinity without a warning."""

    def run(space: Any, values: Sequence[Any]) -> Any:
        with space.errstate(all="ignore"):
            return rule(space, values)

    return run


def _guarded(space: Any, function: Callable[[Any], Any], value: Any, holds: Callable[[Any], Any]) -> Any:
    if is_symbolic(space):
        return function(value)
    if is_arrays(space):
        return function(space.where(holds(value), value, space.nan))
    return function(value) if holds(value) else math.nan
