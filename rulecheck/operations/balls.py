"""What ball rules share: conversion of operands, and the cases that a precision cannot tell."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

from rulecheck.operations.exact import BITS, Ball, to_ball
from rulecheck.operations.operation import UNDECIDED, Undecided, Undefined

TOO_LARGE = Undefined("a number too large to be rounded")
_LARGEST_WHOLE = Ball(2) ** BITS

Rule = Callable[[Sequence[Any]], Any]


def on_balls(function: Callable[..., Any]) -> Rule:
    """The rule that makes balls of all operands and hands them to `function`."""

    def rule(values: Sequence[Any]) -> Any:
        return function(*map(to_ball, values))

    return rule


def quotient(top: Ball, bottom: Ball) -> Any:
    """`top / bottom`: undefined by zero, undecided where zero cannot be ruled out."""
    if bottom.is_zero():
        return Undefined("division by zero")
    return UNDECIDED if bottom.contains(0) else top / bottom


def whole(ball: Ball) -> Any:
    """The whole number below a ball, or undecided where the ball lies on both sides of one."""
    if not abs(ball) < _LARGEST_WHOLE:
        # Writing it out would take more memory than there is; a wide ball may yet shrink.
        return TOO_LARGE if abs(ball) >= _LARGEST_WHOLE else UNDECIDED
    found = ball.floor().unique_fmpz()
    return UNDECIDED if found is None else found


def compared(holds: bool, fails: bool) -> bool | Undecided:
    """A comparison of balls: what certainly holds or fails, else undecided."""
    if holds:
        return True
    return False if fails else UNDECIDED


def never(values: Sequence[Any]) -> Any:
    """The ball rule of operations that know exact values only."""
    return UNDECIDED
