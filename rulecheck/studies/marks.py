"""Figures that a reader must know something of: used outside their range of validity, or put in the place of others."""

from __future__ import annotations

from collections.abc import Sequence

from rulecheck.outcome.results import Mark
from rulecheck.studies.check import Checker


def marks(checkers: Sequence[Checker], *, whole: bool = False) -> tuple[Mark, ...]:
    """The marks of figures, for the design as it stands and under each change.

    Of the figures that rules rest on, or, with `whole`, of every figure that was bound.
    """
    first = checkers[0].graph
    rules: dict[str, list[str]] = {}
    for rule in first.rules:
        for name in rule.figures:
            rules.setdefault(name, []).append(rule.name)
    names = dict.fromkeys((*rules, *first.figures)) if whole else dict.fromkeys(rules)
    found = []
    for name in names:
        outside = tuple(_outside(checker, name) for checker in checkers)
        replaced = first.replaced.get(name, "")
        if replaced or any(outside):
            found.append(Mark(name, outside, replaced, tuple(rules.get(name, ()))))
    return tuple(found)


def _outside(checker: Checker, name: str) -> bool:
    figure = checker.graph.figures.get(name)
    return figure is not None and figure.valid is not None and checker.reader.truth(figure.valid) is False
