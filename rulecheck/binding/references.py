"""Other rules by reference: `rule(x)` and `margin(x)`."""

from __future__ import annotations

from rulecheck.binding.bound import BROKEN, Bound, Broken, Item, Truth, kind_of
from rulecheck.binding.comparing import all_of
from rulecheck.binding.meeting import met_by
from rulecheck.binding.rule_margins import margin_term
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.formula.syntax import Call, Name
from rulecheck.graph.conditions import BoundRule
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import Ruleset
from rulecheck.reading.nearest import nearest


def rule_reference(scope: Scope, syntax: Call) -> Bound:
    """`rule(x)`: whether another rule is met; `rule(x, item)`: whether it is met for one element."""
    rule = _referred(scope, syntax, most=2)
    if rule is None:
        return BROKEN
    if len(syntax.arguments) == 1:
        return Truth(rule.met)
    item = scope.express(syntax.arguments[1])
    if isinstance(item, Broken):
        return BROKEN
    if not isinstance(item, Item):
        return scope.fault(
            "kind-mismatch", f"'rule' takes an item behind the rule, and this is {kind_of(item)}", syntax.arguments[1].span,
            expected="rule(tyre_width, t)",
        )  # fmt: skip
    return Truth(_met_for(scope, rule, item, syntax.span))


def _met_for(scope: Scope, rule: BoundRule, item: Item, span: Span) -> Term:
    """The cases of one element; those that speak of none, such as a state that is missing, count for each."""
    if rule.permit is not None:
        return rule.met
    cases = [case for case in rule.cases if case.element in ("", item.name)]
    if not any(case.element for case in cases):
        gone = scope.missing(f"rule '{rule.name}' for '{item.name}'", "flag", span=span)
        return all_of(scope, [gone, met_by(scope, cases)])
    return met_by(scope, cases)


def margin_reference(scope: Scope, syntax: Call) -> Bound:
    """`margin(x)`: another rule's margin."""
    rule = _referred(scope, syntax)
    return BROKEN if rule is None else margin_term(scope, rule, syntax.span)


def _referred(scope: Scope, syntax: Call, most: int = 1) -> BoundRule | None:
    owner = scope.owner
    argument = syntax.arguments[0] if 1 <= len(syntax.arguments) <= most else None
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
