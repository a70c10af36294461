"""Solvers as readers meet them: a ball around what was found, or why there is none; slopes by central differences."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any

from rulecheck.graph.terms import External, Term, cone
from rulecheck.model.solver import Argument, Estimate, NoAnswer
from rulecheck.operations.exact import Ball, PiNumber, Rational, to_ball, to_fraction
from rulecheck.operations.operation import UNDECIDED, Undecided
from rulecheck.operations.values import Bounds, Reason, Unknown, merged

_WIDEST = 1e-12
"""An argument that is known less closely than this, against itself or one, is a stretch and not a number."""
_ROUNDING = 1e-9
"""What the doubles inside of a solver may be off by, against the value; added to the bound that it gives."""
_STEP = 1e-3


def answered(term: Term, values: Sequence[Any]) -> Any:
    """What a solver gives for values of the exact reader: a ball, a word, unknown with the reason, or UNDECIDED."""
    asked = term.value
    assert isinstance(asked, External)
    needed = [value for value, needs in zip(values, asked.needs, strict=True) if needs]
    if any(isinstance(value, (Unknown, Bounds)) for value in needed):
        return merged(needed)
    if any(isinstance(value, Undecided) or _is_stretch(value) for value in needed):
        return UNDECIDED
    found = asked.question.answer(asked.output, tuple(map(_plain, values)))
    if isinstance(found, NoAnswer):
        return Unknown((Reason("undefined", found.text),))
    if isinstance(found, Estimate):
        return Ball(found.value, found.bound + _ROUNDING * abs(found.value))
    return found


def slopes(term: Term, values: Sequence[Argument]) -> tuple[float, ...]:
    """The slope by each argument, from central differences of quick runs; 0 by what is no number or stays.

    `values` are doubles, words and flags in the order of the arguments, None where one is not known.
    """
    asked = term.value
    assert isinstance(asked, External)
    found = []
    for place, (argument, value) in enumerate(zip(term.arguments, values, strict=True)):
        still = argument.kind == "constant" or isinstance(value, (str, bool)) or value is None
        found.append(0.0 if still or not asked.needs[place] else _difference(asked, list(values), place))
    return tuple(found)


def _difference(asked: External, values: list[Argument], place: int) -> float:
    middle = values[place]
    assert isinstance(middle, float)
    step = _STEP * (abs(middle) or 1.0)
    ends = []
    for end in (middle - step, middle + step):
        values[place] = end
        answer = asked.question.answer(asked.output, tuple(values), quick=True)
        ends.append(answer.value if isinstance(answer, Estimate) else math.nan)
    return (ends[1] - ends[0]) / (2 * step)


def operands(term: Term) -> Sequence[Term]:
    """What a term rests on: its arguments, of a solver's output only those that it needs."""
    if not isinstance(term.value, External):
        return term.arguments
    return [argument for argument, needs in zip(term.arguments, term.value.needs, strict=True) if needs]


def solver_behind(term: Term) -> str:
    """The name of a solver that a term rests on; empty where it rests on none."""
    for part in cone([term]):
        if isinstance(part.value, External):
            return part.value.question.solver.name
    return ""


def _is_stretch(value: Any) -> bool:
    return isinstance(value, Ball) and not float(value.rad()) <= _WIDEST * max(1.0, abs(float(value.mid())))


def _plain(value: Any) -> Argument:
    """A value as the solver takes it; None where it is not known."""
    if isinstance(value, (bool, str)):
        return value
    if isinstance(value, Rational):
        return float(to_fraction(value))
    if isinstance(value, (Ball, PiNumber)):
        # The same double at every precision, so that the solver is not run anew for each.
        return float(f"{float(to_ball(value).mid()):.13g}")
    return None
