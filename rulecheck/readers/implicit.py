"""How the solution of an equation moves with what the equation takes from outside, in double precision.

By the implicit function theorem: where `F(x, p) = 0`, the slope of x by p is `-F_p / F_x`. All slopes of one solve come
from one sweep backwards over its formula.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from typing import Any

from rulecheck.graph.terms import Term
from rulecheck.operations.exact import Ball, PiNumber, Rational, to_ball
from rulecheck.readers.enclosing import Enclosing


def local_partials(term: Term, values: Sequence[float]) -> tuple[float, ...]:
    """The partial derivatives of one term by its arguments; of a branch, of the arm that is taken."""
    if term.kind == "branch":
        taken = values[0]
        return (0.0, float(taken), 1.0 - float(taken))
    operation = term.operation
    if operation is None or operation.partials is None:
        return (0.0,) * len(term.arguments)
    return tuple(float(partial) for partial in operation.partials(math, values))


def implicit_partials(term: Term, x: Ball, enclosing: Enclosing) -> tuple[float, ...]:
    """The slopes of a solution by the arguments of its solve; not a number where the formula has no slope there.

    The ends of the range have none: the solution does not move with them.
    """
    found = enclosing.values(x)
    slopes = swept(enclosing, found)
    by_variable = slopes.get(enclosing.equation.variable.index, 0.0)
    moved = [slopes.get(part.index, 0.0) for part in term.arguments[2:]]
    return (0.0, 0.0, *(-slope / by_variable if by_variable else math.nan for slope in moved))


def swept(enclosing: Enclosing, found: Mapping[int, Any]) -> dict[int, float]:
    """The slopes of the formula by each of its terms and by what it takes from outside."""
    equation = enclosing.equation
    slopes = {equation.body.index: 1.0}
    for term in reversed(equation.moving):
        slope = slopes.get(term.index, 0.0)
        if not slope or term is equation.variable:
            continue
        for part, partial in zip(term.arguments, _partials(term, enclosing, found), strict=True):
            if partial:
                slopes[part.index] = slopes.get(part.index, 0.0) + slope * partial
    return slopes


def _partials(term: Term, enclosing: Enclosing, found: Mapping[int, Any]) -> tuple[float, ...]:
    if term.kind == "solve":
        inside = enclosing.inside(term, [found[part.index] for part in term.arguments])
        return implicit_partials(term, to_ball(found[term.index]), inside)
    return local_partials(term, [as_float(found[part.index]) for part in term.arguments])


def as_float(value: Any) -> float:
    """A value as a double; flags are 0 and 1; what has none is not a number."""
    if isinstance(value, (Rational, PiNumber, Ball)):
        return float(to_ball(value).mid())
    return float(value) if isinstance(value, bool) else math.nan
