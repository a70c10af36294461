"""Dispensations: written permissions to depart from one rule, good until their last day."""

from __future__ import annotations

from rulecheck.binding.leaves import scalar
from rulecheck.binding.scope import Scope
from rulecheck.graph.conditions import Permit
from rulecheck.quantity.reading_values import read_day


def dispensation(scope: Scope, rule: str) -> Permit | None:
    """The dispensation that is good for a rule on the evaluation date, or None."""
    design = scope.shared.base.design
    for name in design.names("dispensations") or ():
        base = f"dispensations.{name}"
        named = scalar(design.leaves.get(f"{base}.rule"))
        if named is None or named.text != rule:
            continue
        reference, until = scalar(design.leaves.get(f"{base}.reference")), scalar(design.leaves.get(f"{base}.until"))
        last = read_day(until, scope.shared.faults) if until is not None else None
        if reference is not None and last is not None and scope.shared.day <= last:
            return Permit(reference.text, last, design.keys.get(base))
    return None
