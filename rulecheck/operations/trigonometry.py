"""Circular and hyperbolic functions and their inverses; angles are pure numbers in radian."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

from rulecheck.operations import angles
from rulecheck.operations.balls import Rule, on_balls
from rulecheck.operations.dimensions import alike_to_pure, pure
from rulecheck.operations.exact import Ball, Rational
from rulecheck.operations.operation import UNDECIDED, Operation
from rulecheck.operations.spaces import ArrayRule, is_symbolic, over, quiet, root

Slope = Callable[[Any, Any], Any]


def _elementary(
    name: str,
    meaning: str,
    exact: Rule,
    ball: Callable[[Ball], Any],
    array: ArrayRule,
    slope: Slope,
    domain: str = "",
) -> Operation:
    """A function of one pure number whose word is the same in sympy and in JavaScript's `Math`."""
    return Operation(
        name=name,
        takes=("number",),
        gives="number",
        dimension=pure(name),
        exact=exact,
        ball=on_balls(ball),
        array=quiet(array),
        symbolic=lambda sympy, values: getattr(sympy, name)(values[0]),
        script=f"Math.{name}({{0}})",
        partials=lambda space, values: (slope(space, values[0]),),
        domain=domain,
        meaning=meaning,
    )


def _at_zero(result: int) -> Rule:
    def rule(values: Sequence[Any]) -> Any:
        return None if values[0] else Rational(result)

    return rule


def _tangent_of_ball(value: Ball) -> Any:
    found = value.tan()
    return found if found.is_finite() else UNDECIDED


def _within_one(function: Callable[[Ball], Ball]) -> Callable[[Ball], Any]:
    def rule(value: Ball) -> Any:
        if abs(value) > 1:
            return angles.OUTSIDE_ONE
        return function(value) if abs(value) <= 1 else UNDECIDED

    return rule


def _direction_of_balls(y: Ball, x: Ball) -> Any:
    if y.is_zero() and x.is_zero():
        return angles.NO_DIRECTION
    return UNDECIDED if y.contains(0) and x.contains(0) else Ball.atan2(y, x)


def _direction_of_arrays(space: Any, values: Sequence[Any]) -> Any:
    y, x = values
    return space.where((y == 0) & (x == 0), space.nan, space.arctan2(y, x))


def _direction_partials(space: Any, values: Sequence[Any]) -> Sequence[Any]:
    y, x = values
    square = x * x + y * y
    return over(space, x, square), over(space, -y, square)


def _arc_slope(factor: float) -> Slope:
    def slope(space: Any, value: Any) -> Any:
        sign = int(factor) if is_symbolic(space) else factor
        return over(space, sign, root(space, 1 - value * value))

    return slope


sin = _elementary(
    "sin", "sine of an angle", angles.sine, lambda value: value.sin(), lambda space, values: space.sin(values[0]),
    lambda space, value: space.cos(value),
)  # fmt: skip

cos = _elementary(
    "cos", "cosine of an angle", angles.cosine, lambda value: value.cos(), lambda space, values: space.cos(values[0]),
    lambda space, value: -space.sin(value),
)  # fmt: skip

tan = _elementary(
    "tan", "tangent of an angle", angles.tangent, _tangent_of_ball, lambda space, values: space.tan(values[0]),
    lambda space, value: 1 + space.tan(value) ** 2, "the angle is no odd multiple of a quarter turn",
)  # fmt: skip

asin = _elementary(
    "asin", "angle of a sine, from -90 to 90 deg", angles.arcsine, _within_one(lambda value: value.asin()),
    lambda space, values: space.arcsin(values[0]), _arc_slope(1.0), "the operand lies between -1 and 1",
)  # fmt: skip

acos = _elementary(
    "acos", "angle of a cosine, from 0 to 180 deg", angles.arccosine, _within_one(lambda value: value.acos()),
    lambda space, values: space.arccos(values[0]), _arc_slope(-1.0), "the operand lies between -1 and 1",
)  # fmt: skip

atan = _elementary(
    "atan", "angle of a tangent, from -90 to 90 deg", angles.arctangent, lambda value: value.atan(),
    lambda space, values: space.arctan(values[0]), lambda space, value: over(space, 1, 1 + value * value),
)  # fmt: skip

sinh = _elementary(
    "sinh", "hyperbolic sine", _at_zero(0), lambda value: value.sinh(), lambda space, values: space.sinh(values[0]),
    lambda space, value: space.cosh(value),
)  # fmt: skip

cosh = _elementary(
    "cosh", "hyperbolic cosine", _at_zero(1), lambda value: value.cosh(), lambda space, values: space.cosh(values[0]),
    lambda space, value: space.sinh(value),
)  # fmt: skip

tanh = _elementary(
    "tanh", "hyperbolic tangent", _at_zero(0), lambda value: value.tanh(), lambda space, values: space.tanh(values[0]),
    lambda space, value: 1 - space.tanh(value) ** 2,
)  # fmt: skip

atan2 = Operation(
    name="atan2",
    takes=("number", "number"),
    gives="number",
    dimension=alike_to_pure("put into one vector"),
    exact=angles.direction,
    ball=on_balls(_direction_of_balls),
    array=quiet(_direction_of_arrays),
    symbolic=lambda sympy, values: sympy.atan2(*values),
    script="direction({0}, {1})",
    partials=_direction_partials,
    domain="not both operands are zero",
    meaning="angle of the vector (x, y), operands y and x, above -180 up to 180 deg",
)
