"""Sums, products, quotients and powers."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from functools import lru_cache
from typing import Any

from rulecheck.operations import bounds
from rulecheck.operations.balls import on_balls, quotient
from rulecheck.operations.dimensions import alike, product, pure, ratio, same
from rulecheck.operations.exact import to_ball
from rulecheck.operations.operation import Operation, Undefined
from rulecheck.operations.powers import (
    constant_power_partials,
    power_of_balls,
    power_of_exact,
    power_partials,
    rational_power_of_ball,
    rational_power_of_exact,
)
from rulecheck.operations.spaces import choose, over, quiet, raised

# Precedence of printed forms, weakest first.
OR, AND, NOT, COMPARISON, SUM, PRODUCT, NEGATIVE, POWER, CALL = 10, 20, 30, 40, 50, 60, 70, 80, 100


def _add(values: Sequence[Any]) -> Any:
    return values[0] + values[1]


def _subtract(values: Sequence[Any]) -> Any:
    return values[0] - values[1]


def _multiply(values: Sequence[Any]) -> Any:
    return values[0] * values[1]


def _negate(values: Sequence[Any]) -> Any:
    return -values[0]


def _absolute(values: Sequence[Any]) -> Any:
    return abs(values[0])


def _divide(values: Sequence[Any]) -> Any:
    return values[0] / values[1] if values[1] else Undefined("division by zero")


def _total(values: Sequence[Any]) -> Any:
    return sum(values[1:], values[0])


add = Operation(
    name="add",
    takes=("number", "number"),
    gives="number",
    dimension=alike("added"),
    exact=_add,
    ball=on_balls(lambda left, right: left + right),
    array=quiet(lambda space, values: values[0] + values[1]),
    symbolic=lambda sympy, values: sympy.Add(*values),
    script="({0} + {1})",
    partials=lambda space, values: (1.0, 1.0),
    bounds=bounds.by_ends(_add),
    meaning="sum of two numbers",
    sign="+",
    form="infix",
    precedence=SUM,
)

subtract = Operation(
    name="subtract",
    takes=("number", "number"),
    gives="number",
    dimension=alike("subtracted"),
    exact=_subtract,
    ball=on_balls(lambda left, right: left - right),
    array=quiet(lambda space, values: values[0] - values[1]),
    symbolic=lambda sympy, values: sympy.Add(values[0], -values[1]),
    script="({0} - {1})",
    partials=lambda space, values: (1.0, -1.0),
    bounds=bounds.by_corners(_subtract),
    meaning="difference of two numbers",
    sign="-",
    form="infix",
    precedence=SUM,
)

multiply = Operation(
    name="multiply",
    takes=("number", "number"),
    gives="number",
    dimension=product,
    exact=_multiply,
    ball=on_balls(lambda left, right: left * right),
    array=quiet(lambda space, values: values[0] * values[1]),
    symbolic=lambda sympy, values: sympy.Mul(*values),
    script="({0} * {1})",
    partials=lambda space, values: (values[1], values[0]),
    bounds=bounds.by_corners(_multiply),
    meaning="product of two numbers",
    sign="*",
    form="infix",
    precedence=PRODUCT,
)

divide = Operation(
    name="divide",
    takes=("number", "number"),
    gives="number",
    dimension=ratio,
    exact=_divide,
    ball=on_balls(quotient),
    array=lambda space, values: over(space, values[0], values[1]),
    symbolic=lambda sympy, values: values[0] / values[1],
    script="divide({0}, {1})",
    partials=lambda space, values: (
        over(space, 1.0, values[1]),
        over(space, -values[0], values[1] * values[1]),
    ),
    bounds=bounds.by_quotient(_divide),
    domain="the divisor is not zero",
    meaning="quotient of two numbers",
    sign="/",
    form="infix",
    precedence=PRODUCT,
)

negate = Operation(
    name="negate",
    takes=("number",),
    gives="number",
    dimension=same,
    exact=_negate,
    ball=on_balls(lambda value: -value),
    array=lambda space, values: -values[0],
    symbolic=lambda sympy, values: -values[0],
    script="(-{0})",
    partials=lambda space, values: (-1.0,),
    bounds=bounds.by_corners(_negate),
    meaning="the number with the other sign",
    sign="-",
    form="prefix",
    precedence=NEGATIVE,
)

absolute = Operation(
    name="abs",
    takes=("number",),
    gives="number",
    dimension=same,
    exact=_absolute,
    ball=on_balls(abs),
    array=lambda space, values: space.abs(values[0]),
    symbolic=lambda sympy, values: sympy.Abs(values[0]),
    script="Math.abs({0})",
    partials=lambda space, values: (choose(space, values[0] > 0, 1.0, choose(space, values[0] < 0, -1.0, 0.0)),),
    meaning="magnitude of a number",
)

total = Operation(
    name="total",
    takes=("number",),
    gives="number",
    dimension=alike("added"),
    exact=_total,
    ball=lambda values: sum(map(to_ball, values[1:]), to_ball(values[0])),
    array=quiet(lambda space, values: sum(values[1:], values[0])),
    symbolic=lambda sympy, values: sympy.Add(*values),
    script="total",
    partials=lambda space, values: (1.0,) * len(values),
    bounds=bounds.by_ends(_total),
    many=True,
    meaning="sum of one or more numbers",
    sign="sum",
)

power = Operation(
    name="power",
    takes=("number", "number"),
    gives="number",
    dimension=pure("a power with an exponent that is not constant"),
    exact=power_of_exact,
    ball=power_of_balls,
    array=lambda space, values: raised(space, values[0], values[1]),
    symbolic=lambda sympy, values: sympy.Pow(values[0], values[1]),
    script="power({0}, {1})",
    partials=power_partials,
    domain="a fractional power needs a base that is not negative, a negative power one that is not zero",
    meaning="a pure number raised to a pure number",
    sign="^",
    form="infix",
    precedence=POWER,
)


@lru_cache(maxsize=256)
def rational_power(exponent: Fraction) -> Operation:
    """The power with a constant rational exponent, for bases of any dimension; one operand.

    >>> rational_power(Fraction(-2)).name
    'power[-2]'
    """
    fixed = float(exponent)
    return Operation(
        name=f"power[{exponent}]",
        takes=("number",),
        gives="number",
        dimension=lambda dimensions: dimensions[0] ** exponent,
        exact=lambda values: rational_power_of_exact(values[0], exponent),
        ball=lambda values: rational_power_of_ball(to_ball(values[0]), exponent),
        array=lambda space, values: raised(space, values[0], int(exponent) if exponent.denominator == 1 else fixed),
        symbolic=lambda sympy, values: sympy.Pow(values[0], sympy.Rational(exponent.numerator, exponent.denominator)),
        script=f"power({{0}}, {exponent.numerator} / {exponent.denominator})",
        partials=lambda space, values: (constant_power_partials(space, values[0], exponent),),
        domain=_power_domain(exponent),
        meaning=f"a number raised to {exponent}",
        sign=f"^{exponent}",
        precedence=POWER,
    )


def _power_domain(exponent: Fraction) -> str:
    parts = [] if exponent.denominator == 1 else ["the base is not negative"]
    return " and ".join([*parts, "the base is not zero"] if exponent < 0 else parts)
