"""Formulas as syntax, each read once."""

from __future__ import annotations

from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Refused
from rulecheck.formula.parser import parse_each, parse_formula
from rulecheck.formula.syntax import Each, Syntax
from rulecheck.reading.nodes import Located


def parsed(scope: Scope, where: Located) -> Syntax | None:
    """A formula as syntax, read once; None with the faults noted."""
    key = ("syntax", where.span, where.text)
    if key not in scope.shared.memo:
        try:
            scope.shared.memo[key] = parse_formula(where)
        except Refused as refused:
            scope.shared.faults.take(refused)
            scope.shared.memo[key] = None
    syntax: Syntax | None = scope.shared.memo[key]
    return syntax


def parsed_each(scope: Scope, where: Located) -> Each | None:
    """A loop head as syntax; None with the faults noted."""
    key = ("each", where.span, where.text)
    if key not in scope.shared.memo:
        try:
            scope.shared.memo[key] = parse_each(where)
        except Refused as refused:
            scope.shared.faults.take(refused)
            scope.shared.memo[key] = None
    head: Each | None = scope.shared.memo[key]
    return head
