"""Rule books in layers: what extends laid over what is extended."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from datetime import date

from rulecheck.diagnostics import Faults, Related
from rulecheck.model.ruleset import Origin, Rule, Ruleset, Withdrawn
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node


def layered(
    bases: Sequence[Ruleset], top: Ruleset, withdrawn: Node | None, faults: Faults, day: date | None = None
) -> Ruleset:
    """`top` over all its bases, the first of them lowest, without the rules that it withdraws.

    On a day on which the bases are in force and `top` is not, nothing of it counts but its name.
    """
    if not bases:
        for key, _ in _withdrawals(withdrawn, faults):
            faults.add(
                "unknown-name", f"there is no rule '{key.text}' to withdraw", key.span,
                advice="name the rule book that has it under 'extends:'",
            )  # fmt: skip
        return top
    ground = bases[0]
    for base in bases[1:]:
        ground = _over(ground, base, faults)
    made = _without(_over(ground, top, faults), ground, top, withdrawn, faults)
    if day is None or top.valid.holds(day) or not (ground.idle or ground.valid.holds(day)):
        return made
    return replace(
        ground, file=top.file, name=top.name, edition=top.edition, note=top.note, valid=top.valid, span=top.span,
        books=made.books, idle=(*ground.idle, top.file),
    )  # fmt: skip


def _over(base: Ruleset, top: Ruleset, faults: Faults) -> Ruleset:
    """One rule book laid over another; replaced rules keep their origin."""
    gone = {(item.rule.ruleset, item.rule.span) for item in base.withdrawn}
    rules = dict(base.rules)
    for name, rule in top.rules.items():
        old = rules.get(name)
        if (rule.ruleset, rule.span) in gone or (old is not None and _is_older(rule, old)):
            continue  # both stand on one rule book, and the lower has changed or withdrawn this rule of it
        if old is not None and (old.ruleset, old.span) != (rule.ruleset, rule.span):
            rule = replace(rule, history=(*old.history, Origin(old.ruleset, old.span, "replaced", old.clause)))
        rules[name] = rule
    made = replace(
        top,
        units={**base.units, **top.units},
        inputs=(*base.inputs, *top.inputs),
        tables={**base.tables, **top.tables},
        lists={**base.lists, **top.lists},
        zones={**base.zones, **top.zones},
        templates={**base.templates, **top.templates},
        derived={**base.derived, **top.derived},
        needed={
            axis: {**base.needed.get(axis, {}), **top.needed.get(axis, {})} for axis in {**base.needed, **top.needed}
        },
        rules=rules,
        withdrawn=tuple(dict.fromkeys((*base.withdrawn, *top.withdrawn))),
        books=tuple(dict.fromkeys((*base.books, *top.books))),
        validity="required" if "required" in (base.validity, top.validity) else "noted",
        physics=(*base.physics, *top.physics),
        clauses={**base.clauses, **top.clauses},
        idle=(*base.idle, *top.idle),
    )
    _one_name_space(made, faults)
    return made


def _is_older(rule: Rule, old: Rule) -> bool:
    """True where `old` is what a rule book has made of `rule`."""
    return any((origin.ruleset, origin.span) == (rule.ruleset, rule.span) for origin in old.history)


def _one_name_space(made: Ruleset, faults: Faults) -> None:
    """A name must not mean a rule in one layer and a figure in another."""
    kinds = {
        "derived figure": {name: figure.span for name, figure in made.derived.items()},
        "table": {name: table.span for name, table in made.tables.items()},
        "list": {name: members[0].span for name, members in made.lists.items() if members},
        "zone": {name: zone.span for name, zone in made.zones.items()},
        "template": {name: template.span for name, template in made.templates.items()},
        "rule": {name: rule.span for name, rule in made.rules.items()},
    }
    seen: dict[str, str] = {}
    for kind, named in kinds.items():
        for name, span in named.items():
            other = seen.setdefault(name, kind)
            if other != kind:
                faults.add(
                    "name-taken", f"'{name}' is a {other} and a {kind}: they share one name space", span,
                    advice="give one of them another name",
                    related=(Related("the other one is here", kinds[other][name]),),
                )  # fmt: skip


def _withdrawals(node: Node | None, faults: Faults) -> list[tuple[Located, str]]:
    """The rules that are withdrawn, each with its reason."""
    found = []
    for entry in node if isinstance(node, Mapping) else ():
        if isinstance(entry.value, Located) and entry.value.text:
            found.append((entry.key, entry.value.text))
        else:
            faults.add(
                "quote-this",
                f"'{entry.key.text}' is withdrawn without a reason",
                entry.key.span,
                expected="rule: reason",
                advice="quote a reason that has a comma in it",
            )
    return found


def _without(made: Ruleset, ground: Ruleset, top: Ruleset, node: Node | None, faults: Faults) -> Ruleset:
    rules = dict(made.rules)
    withdrawn = list(made.withdrawn)
    known = {item.rule.name for item in ground.withdrawn}
    for key, reason in _withdrawals(node, faults):
        if key.text in top.rules:
            faults.add(
                "name-taken", f"rule '{key.text}' is withdrawn and defined in one file", key.span,
                advice="a rule of the same name replaces the older one; leave the withdrawal out",
            )  # fmt: skip
        elif key.text in ground.rules:
            withdrawn.append(Withdrawn(rules.pop(key.text), reason, key.span))
        elif key.text not in known:
            faults.add(
                "unknown-name", f"there is no rule '{key.text}' to withdraw", key.span,
                advice=nearest(key.text, ground.rules),
            )  # fmt: skip
    return replace(made, rules=rules, withdrawn=tuple(withdrawn))
