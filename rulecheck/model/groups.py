"""Groups of a ruleset: rules that share a condition."""

from __future__ import annotations

from collections.abc import Collection

from rulecheck.diagnostics import Faults
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Entry, Located, Mapping, Node

_KEYS = ("when", "rules")


def group_conditions(node: Node | None, rules: Collection[str], faults: Faults) -> dict[str, tuple[Located, ...]]:
    """Conditions that groups lay on rules, by rule."""
    conditions: dict[str, tuple[Located, ...]] = {}
    for entry in node if isinstance(node, Mapping) else ():
        when, members = _group(entry, faults)
        if when is None:
            continue
        for rule in members:
            if isinstance(rule, Located) and rule.text in rules:
                conditions[rule.text] = (*conditions.get(rule.text, ()), when)
            else:
                name = rule.text if isinstance(rule, Located) else ""
                faults.add(
                    "unknown-name", f"there is no rule '{name}' in this file", rule.span, advice=nearest(name, rules)
                )
    return conditions


def _group(entry: Entry, faults: Faults) -> tuple[Located | None, tuple[Node, ...]]:
    group = entry.value
    when = group.get("when") if isinstance(group, Mapping) else None
    rules = group.get("rules") if isinstance(group, Mapping) else None
    for inner in group if isinstance(group, Mapping) else ():
        if inner.key.text not in _KEYS:
            faults.add(
                "unknown-key", f"a group has no '{inner.key.text}'", inner.key.span, expected=" or ".join(_KEYS),
                advice=nearest(inner.key.text, _KEYS),
            )  # fmt: skip
    if not isinstance(when, Located) or rules is None or isinstance(rules, Mapping):
        faults.add(
            "bad-structure",
            f"group '{entry.key.text}' needs a condition and its rules",
            entry.key.span,
            expected="{when: condition, rules: [names]}",
        )
        return None, ()
    return when, (rules,) if isinstance(rules, Located) else tuple(rules)
