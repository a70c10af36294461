"""What the scrutineer measures with, held against the margins of its rule."""

from __future__ import annotations

from collections.abc import Iterable

from rulecheck.binding.scope import Scope
from rulecheck.graph.conditions import Case, numeric_parts
from rulecheck.model.ruleset import Rule
from rulecheck.quantity.dimension_names import name_of


def check_scrutineer(scope: Scope, rule: Rule, cases: Iterable[Case]) -> None:
    """Note a fault where a width of the scrutineer's is of another dimension than every margin of the rule."""
    said = rule.scrutineer
    if said is None:
        return
    margins = [part.margin for case in cases for part in numeric_parts(case.condition)]
    dimensions = {margin.dimension for margin in margins if margin is not None}
    leniency = said.tolerance.unit if said.tolerance is not None else None
    for what, unit in (("uncertainty", said.unit), ("tolerance", leniency)):
        if unit is not None and dimensions and unit.dimension not in dimensions:
            told = f"the scrutineer's {what} of rule '{rule.name}' is {name_of(unit.dimension)}, and its margin is not"
            expected = " or ".join(sorted(name_of(dimension) for dimension in dimensions))
            scope.fault("wrong-dimension", told, said.span, expected=expected)
