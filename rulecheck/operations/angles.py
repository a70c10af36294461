"""The exact values of circular functions: at rational multiples of pi, and of their inverses."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from rulecheck.operations.exact import Exact, Rational, magnitude, pi_multiple, pi_times, sign
from rulecheck.operations.operation import Undefined

POLE = Undefined("the tangent of a quarter turn")
OUTSIDE_ONE = Undefined("the inverse sine or cosine of a number beyond one")
NO_DIRECTION = Undefined("the direction of a vector without length")

_HALF = Rational(1, 2)
# Sine by sixths of half a turn, where it is rational (Niven's theorem: no others are).
_SINES: dict[int, int | Rational] = {0: 0, 1: _HALF, 3: 1, 5: _HALF, 6: 0, 7: -_HALF, 9: -1, 11: -_HALF}
_ARCSINES: dict[int | Rational, tuple[int, int]] = {-1: (-1, 2), -_HALF: (-1, 6), 0: (0, 1), _HALF: (1, 6), 1: (1, 2)}


def sine(values: Sequence[Any]) -> Any:
    """Zero, a half or one where the angle is a fit multiple of pi, else None."""
    return _sine_of(pi_multiple(values[0]))


def cosine(values: Sequence[Any]) -> Any:
    """The sine a quarter turn on."""
    multiple = pi_multiple(values[0])
    return None if multiple is None else _sine_of(multiple + _HALF)


def tangent(values: Sequence[Any]) -> Any:
    """Zero, one or minus one at eighths of a turn; undefined at quarter turns."""
    multiple = pi_multiple(values[0])
    if multiple is None or (multiple * 4).denom() != 1:
        return None
    eighth = int((multiple * 4).numer()) % 4
    return POLE if eighth == 2 else Rational((0, 1, 0, -1)[eighth])


def arcsine(values: Sequence[Any]) -> Any:
    """A multiple of pi for zero, halves and ones; undefined beyond one."""
    value: Exact = values[0]
    if sign(magnitude(value) - 1) > 0:
        return OUTSIDE_ONE
    found = _ARCSINES.get(value) if isinstance(value, Rational) else None
    return None if found is None else pi_times(Rational(*found))


def arccosine(values: Sequence[Any]) -> Any:
    """A quarter turn less the arcsine."""
    found = arcsine(values)
    return found if found is None or isinstance(found, Undefined) else pi_times(_HALF) - found


def arctangent(values: Sequence[Any]) -> Any:
    """A multiple of pi for zero and ones."""
    value: Exact = values[0]
    if not isinstance(value, Rational) or abs(value) not in (0, 1):
        return None
    return pi_times(value / 4)


def direction(values: Sequence[Any]) -> Any:
    """The angle of the vector (x, y) on the axes and the diagonals, else None; operands y, x."""
    y, x = values
    up, right = sign(y), sign(x)
    if up and right and abs(y) != abs(x):
        return None
    if not up and not right:
        return NO_DIRECTION
    quarters = {(0, 1): 0, (1, 1): 1, (1, 0): 2, (1, -1): 3, (0, -1): 4, (-1, 1): -1, (-1, 0): -2, (-1, -1): -3}
    return pi_times(Rational(quarters[up, right], 4))


def _sine_of(multiple: Rational | None) -> Rational | None:
    if multiple is None or (multiple * 6).denom() != 1:
        return None
    found = _SINES.get(int((multiple * 6).numer()) % 12)
    return None if found is None else Rational(found)
