"""Kleene's logic of flags, and what contradiction does to a declared value.

A flag may be true, false, unknown, or undecided at the precision in force. What is decided whichever
way the others fall is decided; then undecided comes before unknown, since more precision may help.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

from rulecheck.operations.arithmetic import AND, NOT, OR
from rulecheck.operations.dimensions import none
from rulecheck.operations.exact import to_ball
from rulecheck.operations.operation import UNDECIDED, Operation, Undefined
from rulecheck.operations.values import Bounds, Unknown, merged
from rulecheck.quantity.dimension import Dimension

CONTRADICTION = Undefined("declared and computed values contradict each other", "contradiction")


def _joined(decides: bool) -> Callable[[Sequence[Any]], Any]:
    """The rule of `and` (a false operand decides) and of `or` (a true one does)."""

    def rule(values: Sequence[Any]) -> Any:
        if any(value is decides for value in values):
            return decides
        if UNDECIDED in values:
            return UNDECIDED
        return merged(values) if any(isinstance(value, Unknown) for value in values) else not decides

    return rule


def _fold(word: str) -> Callable[[Any, Sequence[Any]], Any]:
    def rule(space: Any, values: Sequence[Any]) -> Any:
        found = space.asarray(values[0], dtype=bool)
        for value in values[1:]:
            found = getattr(space, word)(found, value)
        return found

    return rule


both = Operation(
    name="both",
    takes=("flag",),
    gives="flag",
    dimension=none,
    exact=_joined(False),
    ball=_joined(False),
    array=_fold("logical_and"),
    symbolic=lambda sympy, values: sympy.And(*values),
    script="both",
    strict=False,
    many=True,
    meaning="true where all flags are",
    sign="and",
    form="infix",
    precedence=AND,
)

either = Operation(
    name="either",
    takes=("flag",),
    gives="flag",
    dimension=none,
    exact=_joined(True),
    ball=_joined(True),
    array=_fold("logical_or"),
    symbolic=lambda sympy, values: sympy.Or(*values),
    script="either",
    strict=False,
    many=True,
    meaning="true where one flag is",
    sign="or",
    form="infix",
    precedence=OR,
)

negation = Operation(
    name="negation",
    takes=("flag",),
    gives="flag",
    dimension=none,
    exact=lambda values: not values[0],
    ball=lambda values: not values[0],
    array=lambda space, values: space.logical_not(values[0]),
    symbolic=lambda sympy, values: sympy.Not(values[0]),
    script="negation({0})",
    meaning="true where the flag is false",
    sign="not",
    form="prefix",
    precedence=NOT,
)


def _reconcile(values: Sequence[Any]) -> Any:
    declared, agrees = values
    if isinstance(declared, Unknown):
        return declared
    if agrees is False:
        return CONTRADICTION
    if isinstance(agrees, Unknown) and any(reason.kind == "tie" for reason in agrees.reasons):
        return agrees  # not decided, as where a stretch holds both: that is no agreement
    # Another unknown flag counts as agreement: nothing is known that contradicts.
    return UNDECIDED if declared is UNDECIDED or agrees is UNDECIDED else declared


def _reconcile_balls(values: Sequence[Any]) -> Any:
    found = _reconcile(values)
    return found if isinstance(found, (Unknown, Undefined, Bounds)) or found is UNDECIDED else to_ball(found)


def _first(dimensions: Sequence[Dimension]) -> Dimension:
    return dimensions[0]


reconcile = Operation(
    name="reconcile",
    takes=("number", "flag"),
    gives="number",
    dimension=_first,
    exact=_reconcile,
    ball=_reconcile_balls,
    array=lambda space, values: space.where(values[1], values[0], space.nan),
    symbolic=lambda sympy, values: sympy.Piecewise((values[0], values[1]), (sympy.nan, True)),
    script="({1} === false ? NaN : {0})",
    partials=lambda space, values: (1.0, 0.0),
    strict=False,
    domain="the declared value agrees with what is computed",
    meaning="a declared value, unless it is known to contradict what is computed; operands value, agrees",
)
