"""What stands beside a finding: conditions that are about to turn, and why no margin stands for a rule."""

from __future__ import annotations

from collections.abc import Iterable
from fractions import Fraction

from rulecheck.graph.conditions import Case, Condition, Either, Part, every_part
from rulecheck.studies.judging import Judge

NEAR = Fraction(1, 100)
NO_MEASURE = (
    "no margin stands for the rule: those that could decide have no common measure, since a limit comes to zero "
    "or is of another kind; 'scale' gives one"
)


def near_turning(judge: Judge, cases: Iterable[Case]) -> Iterable[str]:
    """Conditions that are close to their own threshold: a small change would turn whether the rule applies."""
    seen = set()
    for case in cases:
        for gate in (*case.gates, *choices_of(case.condition)):
            for part in every_part(gate):
                if part.margin is None or part.text in seen or part.scale is None:
                    continue
                seen.add(part.text)
                room = judge.room(part)
                if room is not None and -NEAR <= room <= NEAR:
                    yield f"its condition '{part.text}' is within 1 % of turning"


def choices_of(condition: Condition) -> Iterable[Condition]:
    """The conditions that choose between the arms of conditionals."""
    if isinstance(condition, Either):
        yield condition.gate
        yield from (*choices_of(condition.then), *choices_of(condition.otherwise))
    elif not isinstance(condition, Part):
        for part in condition.parts:
            yield from choices_of(part)
