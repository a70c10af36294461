"""Formulas as syntax, each read once."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Refused
from rulecheck.formula.parser import parse_each, parse_formula
from rulecheck.formula.syntax import Each, Syntax
from rulecheck.reading.nodes import Located


def parsed(scope: Scope, where: Located) -> Syntax | None:
    """A formula as syntax, read once; None with the faults noted."""
    syntax: Syntax | None = _once(scope, "syntax", where, parse_formula)
    return syntax


def parsed_each(scope: Scope, where: Located) -> Each | None:
    """A loop head as syntax; None with the faults noted."""
    head: Each | None = _once(scope, "each", where, parse_each)
    return head


def _once(scope: Scope, kind: str, where: Located, parse: Callable[[Located], Any]) -> Any:
    key = (kind, where.span, where.text)
    if key not in scope.shared.memo:
        try:
            scope.shared.memo[key] = parse(where)
        except Refused as refused:
            scope.shared.faults.take(refused)
            scope.shared.memo[key] = None
    return scope.shared.memo[key]
