"""Whole numbers and whole steps: down, up, to the nearest. Their slope is zero but at the jumps."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

from rulecheck.operations.balls import whole
from rulecheck.operations.dimensions import alike, pure
from rulecheck.operations.exact import Rational, Whole, all_exact, sign, to_ball, whole_below
from rulecheck.operations.operation import UNDECIDED, Operation, Undefined
from rulecheck.operations.spaces import is_symbolic

NO_STEP = Undefined("a step that is not positive")
_HALF = Rational(1, 2)

# A way to make a whole number of an exact number or a ball; UNDECIDED where a ball straddles a jump.
Way = Callable[[Any], Any]


def _down(value: Any) -> Any:
    return whole_below(value) if all_exact([value]) else whole(value)


def _up(value: Any) -> Any:
    found = _down(-value)
    return -found if isinstance(found, Whole) else found


def _nearest(value: Any) -> Any:
    """To the nearest, ties away from zero."""
    if all_exact([value]):
        return -whole_below(_HALF - value) if sign(value) < 0 else whole_below(value + _HALF)
    if value >= 0:
        return whole(value + _HALF)
    return _up(value - _HALF) if value < 0 else _undecided_zero(value)


def _undecided_zero(value: Any) -> Any:
    return Rational(0) if abs(value) < _HALF else UNDECIDED


def _even(value: Any) -> Any:
    """To the nearest, ties to the even number."""
    shifted = value + _HALF
    if all_exact([value]):
        found = whole_below(shifted)
        return found - 1 if shifted == Rational(found) and found % 2 else found
    found = whole(shifted)
    return UNDECIDED if isinstance(found, Whole) and shifted.contains_integer() else found


def _exact_whole(way: Way) -> Callable[[Sequence[Any]], Any]:
    return lambda values: Rational(way(values[0]))


def _ball_whole(way: Way) -> Callable[[Sequence[Any]], Any]:
    return lambda values: _rational(way(to_ball(values[0])))


def _exact_steps(way: Way) -> Callable[[Sequence[Any]], Any]:
    def rule(values: Sequence[Any]) -> Any:
        value, step = values
        return NO_STEP if sign(step) <= 0 else step * Rational(way(value / step))

    return rule


def _ball_steps(way: Way) -> Callable[[Sequence[Any]], Any]:
    def rule(values: Sequence[Any]) -> Any:
        step = to_ball(values[1])
        if not step > 0:
            return NO_STEP if step <= 0 else UNDECIDED
        found = _rational(way(to_ball(values[0]) / step))
        # An exact step keeps the result exact.
        return values[1] * found if isinstance(found, Rational) else found

    return rule


def _rational(found: Any) -> Any:
    return Rational(found) if isinstance(found, (Whole, Rational)) else found


def _array_nearest(space: Any, value: Any) -> Any:
    return space.trunc(value + space.copysign(0.5, value))


def _symbolic_nearest(sympy: Any, value: Any) -> Any:
    return sympy.sign(value) * sympy.floor(sympy.Abs(value) + sympy.Rational(1, 2))


def _symbolic_even(sympy: Any, value: Any) -> Any:
    shifted = value + sympy.Rational(1, 2)
    tied = sympy.And(sympy.Eq(shifted, sympy.floor(shifted)), sympy.Ne(sympy.Mod(shifted, 2), 0))
    return sympy.floor(shifted) - sympy.Piecewise((1, tied), (0, True))


def _whole(name: str, meaning: str, way: Way, array: Any, symbolic: Any, script: str) -> Operation:
    return Operation(
        name=name,
        takes=("number",),
        gives="number",
        dimension=pure(name),
        exact=_exact_whole(way),
        ball=_ball_whole(way),
        array=lambda space, values: array(space, values[0]),
        symbolic=lambda sympy, values: symbolic(sympy, values[0]),
        script=f"{script}({{0}})",
        partials=lambda space, values: (0.0 * values[0],),
        jumps=True,
        meaning=meaning,
    )


def _steps(name: str, meaning: str, way: Way, array: Any, symbolic: Any, script: str) -> Operation:
    def on_arrays(space: Any, values: Sequence[Any]) -> Any:
        with space.errstate(all="ignore"):
            step = space.where(space.greater(values[1], 0), values[1], space.nan)
            return step * array(space, values[0] / step)

    def partials(space: Any, values: Sequence[Any]) -> Sequence[Any]:
        # The count of steps is constant but at the jumps, so the result grows with the step alone.
        if is_symbolic(space):
            return 0, symbolic(space, values[0] / values[1])
        count = round_count(space, values)
        return 0.0 * values[0], count

    def round_count(space: Any, values: Sequence[Any]) -> Any:
        if hasattr(space, "errstate"):
            return on_arrays(space, values) / values[1]
        return float(way(Rational(*float(values[0] / values[1]).as_integer_ratio())))

    return Operation(
        name=name,
        takes=("number", "number"),
        gives="number",
        dimension=alike(f"used in one {name.removesuffix('_to')}"),
        exact=_exact_steps(way),
        ball=_ball_steps(way),
        array=on_arrays,
        symbolic=lambda sympy, values: values[1] * symbolic(sympy, values[0] / values[1]),
        script=f"steps({script}, {{0}}, {{1}})",
        partials=partials,
        jumps=True,
        domain="the step is positive",
        meaning=meaning,
    )


_DOWN: tuple[Any, ...] = (
    _down, lambda space, value: space.floor(value), lambda sympy, value: sympy.floor(value), "Math.floor",
)  # fmt: skip
_UP: tuple[Any, ...] = (
    _up, lambda space, value: space.ceil(value), lambda sympy, value: sympy.ceiling(value), "Math.ceil",
)  # fmt: skip
_NEAREST: tuple[Any, ...] = (_nearest, _array_nearest, _symbolic_nearest, "nearest")
_EVEN: tuple[Any, ...] = (_even, lambda space, value: space.rint(value), _symbolic_even, "nearest_even")

floor = _whole("floor", "the largest whole number that is not above", *_DOWN)
ceil = _whole("ceil", "the smallest whole number that is not below", *_UP)
round = _whole("round", "the nearest whole number, ties away from zero", *_NEAREST)
floor_to = _steps("floor_to", "down to a whole number of steps; operands value, step", *_DOWN)
ceil_to = _steps("ceil_to", "up to a whole number of steps; operands value, step", *_UP)
round_to = _steps("round_to", "to the nearest step, ties away from zero; operands value, step", *_NEAREST)
even_to = _steps("even_to", "to the nearest step, ties to the even one; operands value, step", *_EVEN)
