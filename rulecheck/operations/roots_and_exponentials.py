"""Square root, exponential function, logarithms."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from fractions import Fraction
from typing import Any

from rulecheck.operations.balls import on_balls
from rulecheck.operations.dimensions import pure
from rulecheck.operations.exact import Ball, Exact, Rational, Whole, sign
from rulecheck.operations.operation import UNDECIDED, Operation, Undefined
from rulecheck.operations.powers import rational_power_of_exact
from rulecheck.operations.spaces import logarithm, over, quiet, root

HALF = Fraction(1, 2)
NEGATIVE_ROOT = Undefined("root of a negative number")
NO_LOGARITHM = Undefined("logarithm of a number that is not positive")


def _exact_root(values: Sequence[Any]) -> Any:
    return NEGATIVE_ROOT if sign(values[0]) < 0 else rational_power_of_exact(values[0], HALF)


def _root_of_ball(value: Ball) -> Any:
    if value < 0:
        return NEGATIVE_ROOT
    return value.sqrt() if value >= 0 else UNDECIDED


def _exact_exponential(values: Sequence[Any]) -> Any:
    return None if values[0] else Rational(1)


def _exact_logarithm(values: Sequence[Any]) -> Any:
    if sign(values[0]) <= 0:
        return NO_LOGARITHM
    return Rational(0) if values[0] == Rational(1) else None


def _exact_decimal_logarithm(values: Sequence[Any]) -> Any:
    value: Exact = values[0]
    if sign(value) <= 0:
        return NO_LOGARITHM
    if not isinstance(value, Rational):
        return None
    if value.denom() == 1:
        return _power_of_ten(value.numer())
    found = _power_of_ten(value.denom()) if value.numer() == 1 else None
    return None if found is None else -found


def _power_of_ten(value: Whole) -> Rational | None:
    """n where the value is 10^n, else None."""
    digits = len(str(value)) - 1 if value.height_bits() < 4096 else 0
    return Rational(digits) if Whole(10) ** digits == value else None


def _logarithm_of_ball(function: Callable[[Ball], Ball]) -> Callable[[Ball], Any]:
    def rule(value: Ball) -> Any:
        if value > 0:
            return function(value)
        return NO_LOGARITHM if value <= 0 else UNDECIDED

    return rule


sqrt = Operation(
    name="sqrt",
    takes=("number",),
    gives="number",
    dimension=lambda dimensions: dimensions[0] ** HALF,
    exact=_exact_root,
    ball=on_balls(_root_of_ball),
    array=quiet(lambda space, values: space.sqrt(values[0])),
    symbolic=lambda sympy, values: sympy.sqrt(values[0]),
    script="Math.sqrt({0})",
    partials=lambda space, values: (over(space, 0.5, root(space, values[0])),),
    domain="the operand is not negative",
    meaning="square root",
)

exp = Operation(
    name="exp",
    takes=("number",),
    gives="number",
    dimension=pure("exp"),
    exact=_exact_exponential,
    ball=on_balls(lambda value: value.exp()),
    array=quiet(lambda space, values: space.exp(values[0])),
    symbolic=lambda sympy, values: sympy.exp(values[0]),
    script="Math.exp({0})",
    partials=lambda space, values: (space.exp(values[0]),),
    meaning="exponential function",
)

ln = Operation(
    name="ln",
    takes=("number",),
    gives="number",
    dimension=pure("ln"),
    exact=_exact_logarithm,
    ball=on_balls(_logarithm_of_ball(lambda value: value.log())),
    array=quiet(lambda space, values: logarithm(space, values[0])),
    symbolic=lambda sympy, values: sympy.log(values[0]),
    script="logarithm({0})",
    partials=lambda space, values: (over(space, 1.0, values[0]),),
    domain="the operand is positive",
    meaning="natural logarithm",
)

log10 = Operation(
    name="log10",
    takes=("number",),
    gives="number",
    dimension=pure("log10"),
    exact=_exact_decimal_logarithm,
    ball=on_balls(_logarithm_of_ball(lambda value: value.log() / Ball.const_log10())),
    array=quiet(lambda space, values: logarithm(space, values[0]) / space.log(10.0)),
    symbolic=lambda sympy, values: sympy.log(values[0], 10),
    script="(logarithm({0}) / Math.LN10)",
    partials=lambda space, values: (over(space, 1.0, values[0] * space.log(10)),),
    domain="the operand is positive",
    meaning="logarithm to the base 10",
)
