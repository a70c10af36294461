"""Comparisons of numbers and of texts."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

from rulecheck.operations import bounds
from rulecheck.operations.arithmetic import COMPARISON
from rulecheck.operations.balls import compared, never, on_balls
from rulecheck.operations.dimensions import alike_to_pure, none
from rulecheck.operations.exact import Ball
from rulecheck.operations.operation import Operation


def _compare(
    name: str, meaning: str, sign: str, exact: Callable[[Any, Any], bool], ball: Callable[[Ball, Ball], Any]
) -> Operation:
    def rule(values: Sequence[Any]) -> Any:
        return exact(values[0], values[1])

    def array(space: Any, values: Sequence[Any]) -> Any:
        return exact(space.asarray(values[0]), values[1])

    def symbolic(sympy: Any, values: Sequence[Any]) -> Any:
        return {"<=": sympy.Le, "<": sympy.Lt, "==": sympy.Eq}[sign](*values)

    return Operation(
        name=name,
        takes=("number", "number"),
        gives="flag",
        dimension=alike_to_pure("compared"),
        exact=rule,
        ball=on_balls(ball),
        array=array,
        symbolic=symbolic,
        script=f"{name}({{0}}, {{1}})",
        bounds=bounds.apart if sign == "==" else bounds.decided_by_corners(rule),
        meaning=meaning,
        sign=sign,
        form="infix",
        precedence=COMPARISON,
    )


at_most = _compare(
    "at_most", "true where the first number is not above the second", "<=", lambda left, right: left <= right,
    lambda left, right: compared(left <= right, left > right),
)  # fmt: skip

below = _compare(
    "below", "true where the first number is below the second", "<", lambda left, right: left < right,
    lambda left, right: compared(left < right, left >= right),
)  # fmt: skip

equal = _compare(
    "equal", "true where two numbers are equal", "==", lambda left, right: left == right,
    # Two exact balls may be equal; else only that they differ can be certain.
    lambda left, right: compared(left == right, left != right),
)  # fmt: skip


def _same_symbol(sympy: Any, values: Sequence[Any]) -> Any:
    if all(isinstance(value, str) for value in values):
        return sympy.true if values[0] == values[1] else sympy.false
    return sympy.Eq(*(sympy.Symbol(value) if isinstance(value, str) else value for value in values))


same_text = Operation(
    name="same_text",
    takes=("text", "text"),
    gives="flag",
    dimension=none,
    exact=lambda values: values[0] == values[1],
    ball=never,
    array=lambda space, values: space.asarray(values[0]) == space.asarray(values[1]),
    symbolic=_same_symbol,
    script="same_text({0}, {1})",
    meaning="true where two texts or choices are the same",
    sign="==",
    form="infix",
    precedence=COMPARISON,
)
