"""Other rules by reference: `rule(x)` and `margin(x)`."""

from __future__ import annotations

from rulecheck.binding.bound import BROKEN, Bound, Truth
from rulecheck.binding.rule_margins import margin_term
from rulecheck.binding.scope import Scope
from rulecheck.formula.syntax import Call, Name
from rulecheck.graph.conditions import BoundRule
from rulecheck.model.ruleset import Ruleset
from rulecheck.reading.nearest import nearest


def rule_reference(scope: Scope, syntax: Call) -> Bound:
    """`rule(x)`: whether another rule is met."""
    rule = _referred(scope, syntax)
    return BROKEN if rule is None else Truth(rule.met)


def margin_reference(scope: Scope, syntax: Call) -> Bound:
    """`margin(x)`: another rule's margin."""
    rule = _referred(scope, syntax)
    return BROKEN if rule is None else margin_term(scope, rule, syntax.span)


def _referred(scope: Scope, syntax: Call) -> BoundRule | None:
    owner = scope.owner
    argument = syntax.arguments[0] if len(syntax.arguments) == 1 else None
    if not isinstance(argument, Name) or len(argument.path) != 1 or not isinstance(owner, Ruleset):
        scope.fault(
            "wrong-arguments",
            f"'{syntax.function}' takes the name of a rule",
            syntax.span,
            expected=f"{syntax.function}(overall_width)",
        )
        return None
    name = argument.path[0]
    if name not in owner.rules:
        scope.fault("unknown-name", f"there is no rule '{name}'", argument.span, advice=nearest(name, owner.rules))
        return None
    rule = scope.shared.bind_rule(scope.shared, owner, name, syntax.span)
    if rule is not None:
        scope.touched.update(rule.inputs)
    return rule
