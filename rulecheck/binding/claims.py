"""Branches of a rule that a design claims: which alternative of the rule book the car is built to."""

from __future__ import annotations

from rulecheck.binding.bound import Broken
from rulecheck.binding.scope import Scope
from rulecheck.model.ruleset import Alternative, Rule
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located


def claimed(scope: Scope, rule: Rule) -> tuple[tuple[Alternative, ...], Located | None] | Broken:
    """The branch that the design claims, and where it does; without a claim every branch."""
    claim = scope.view.design.leaves.get(f"claims.{rule.name}")
    if not isinstance(claim, Located):
        return rule.branches, None
    scope.touched.add(f"claims.{rule.name}")
    names = tuple(branch.name for branch in rule.branches)
    if claim.text not in names:
        return scope.fault(
            "unknown-choice",
            f"rule '{rule.name}' has no branch '{claim.text}'",
            claim.span,
            expected=" or ".join(names),
            advice=nearest(claim.text, names),
        )
    return tuple(branch for branch in rule.branches if branch.name == claim.text), claim


def rests_on_papers(branch: Alternative) -> bool:
    """True for a branch that counts only where the design claims it."""
    return any(asked is not None for asked in (branch.evidence, branch.judgement, branch.record))
