"""Rules that no car can meet, rules that clash, and rules that others make idle; only what is shown is told."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from itertools import combinations, pairwise

from rulecheck.binding.bind import stand_in
from rulecheck.binding.scope import Shared
from rulecheck.graph.conditions import Case
from rulecheck.model.ruleset import Rule, Ruleset
from rulecheck.outcome.proofreading import Proof, ProofPlace, Weight
from rulecheck.readers.refuting import Claim, Key, Refuter
from rulecheck.studies.amounts import place

MOST_TOGETHER = 40
"""So many rules on one sum of figures are held against each other pair by pair; of more, the neighbours in order."""


@dataclass(frozen=True, slots=True)
class _Asked:
    """A rule as flags: `applies` is when it asks, `holds` what it asks; `about` is what it is asked of."""

    rule: Rule
    applies: Claim
    exempt: Claim
    holds: Claim
    about: tuple[object, ...]

    @property
    def fails(self) -> Claim:
        """The rule is not met."""
        return self.holds[0], False


def refuter_of(shared: Shared) -> Refuter:
    """A refuter that knows the words of every choice."""

    def choices(path: str) -> tuple[str, ...]:
        entry = shared.vocabulary.entry(path)
        return entry.choices if entry is not None and entry.kind == "choice" else ()

    return Refuter(shared.bank, choices)


def contradictions(shared: Shared, ruleset: Ruleset) -> Iterator[Proof]:
    """What can be shown of the rules in force that bind or advise, each alone and by pairs."""
    refuter = refuter_of(shared)
    sound: list[_Asked] = []
    for rule in ruleset.rules.values():
        case = stand_in(shared, ruleset, rule.name)
        if case is None or rule.standing not in ("shall", "should") or not rule.valid.holds(shared.day):
            continue
        asked = _asked(refuter, rule, case)
        alone = list(_alone(refuter, asked))
        yield from alone
        if not alone and rule.standing == "shall":
            sound.append(asked)
    yield from _by_pairs(refuter, sound)


def _asked(refuter: Refuter, rule: Rule, case: Case) -> _Asked:
    heads = tuple(head.text.partition(" where ")[0].partition(" in ")[2] for head in rule.each)
    states = None if rule.states is None else tuple((axis, tuple(n.text for n in names)) for axis, names in rule.states)
    holds = refuter.term_of(case.condition)
    return _Asked(rule, (case.applies, True), (case.exempt, True), (holds, True), (heads, states))


# --- one rule --------------------------------------------------------------------------------------------------------


def _alone(refuter: Refuter, asked: _Asked) -> Iterator[Proof]:
    rule, applies = asked.rule, asked.applies
    if refuter.refuted([applies]):
        told = f"rule '{rule.name}' never applies: no car meets its condition"
        yield _about(rule, "never-applies", "fault", told, "mend 'when' or 'where', or withdraw the rule")
        return
    if applies[0].kind != "constant" and refuter.refuted([(applies[0], False)]):
        told = f"the condition of rule '{rule.name}' holds for every car"
        yield _about(rule, "always-applies", "question", told, "leave the condition out, or mend it")
    if refuter.refuted([applies, asked.holds]):
        told = f"rule '{rule.name}' is never met: no value satisfies all that it asks"
        yield _about(rule, "never-met", "fault", told, "mend one of its limits")
    elif refuter.refuted([applies, asked.fails]):
        told = f"rule '{rule.name}' is always met: no value breaks it"
        yield _about(rule, "always-met", "question", told, "mend its limit, or leave the rule out")
    if rule.unless is not None and refuter.refuted([applies, asked.exempt]):
        told = f"the exemption of rule '{rule.name}' never holds where the rule applies"
        yield _about(rule, "never-exempt", "question", told, "mend 'unless', or leave it out")
    elif rule.unless is not None and refuter.refuted([applies, (asked.exempt[0], False)]):
        told = f"rule '{rule.name}' is always exempt where it applies"
        yield _about(rule, "always-exempt", "fault", told, "mend 'unless', or withdraw the rule")


def _names(rule: Rule, other: Rule) -> bool:
    """True where a rule refers to another: that it asks for it too is meant."""
    said = rule.own.require.text if rule.own.require is not None else ""
    return re.search(rf"\b(?:rule|margin)\({re.escape(other.name)}\b", said) is not None


def _about(rule: Rule, code: str, weight: Weight, told: str, advice: str, other: Rule | None = None) -> Proof:
    related = (ProofPlace(f"rule '{other.name}' is here", place(other.span)),) if other is not None else ()
    return Proof(code, weight, rule.name, rule.clause, told, advice, place(rule.span), related)


# --- two rules -------------------------------------------------------------------------------------------------------


def _by_pairs(refuter: Refuter, rules: Iterable[_Asked]) -> Iterator[Proof]:
    """Only rules that bound the same sum of figures, of the same elements and in the same states, are compared."""
    together: dict[tuple[Key, tuple[object, ...]], list[_Asked]] = {}
    for asked in rules:
        for key in refuter.sums_of([asked.holds]):
            together.setdefault((key, asked.about), []).append(asked)
    seen: set[tuple[str, str]] = set()
    for found in together.values():
        pairs = combinations(found, 2) if len(found) <= MOST_TOGETHER else pairwise(found)
        for one, other in pairs:
            if (one.rule.name, other.rule.name) not in seen:
                seen.add((one.rule.name, other.rule.name))
                yield from _pair(refuter, one, other)


def _pair(refuter: Refuter, one: _Asked, other: _Asked) -> Iterator[Proof]:
    """The two are compared where each car that the one is asked of is also one of the other's."""
    within = refuter.refuted([other.applies, (one.applies[0], False)])
    around = refuter.refuted([one.applies, (other.applies[0], False)])
    if not within and not around:
        return
    narrow = other if within else one
    if refuter.refuted([narrow.applies, one.holds, other.holds]):
        if one.rule.unless is None and other.rule.unless is None:
            told = f"rules '{one.rule.name}' and '{other.rule.name}' contradict each other: no value meets both"
            yield _about(other.rule, "contradiction", "fault", told, "mend one of the limits", one.rule)
        return
    yields = one.rule.unless is None and other.rule.unless is None
    stronger = yields and within and refuter.refuted([other.applies, one.holds, other.fails])
    weaker = yields and around and refuter.refuted([one.applies, other.holds, one.fails])
    if stronger and weaker:
        told = f"rules '{one.rule.name}' and '{other.rule.name}' ask the same"
        yield _about(other.rule, "duplicate-rule", "question", told, "leave one of them out", one.rule)
    elif stronger or weaker:
        idle, strict = (other, one) if stronger else (one, other)
        if _names(strict.rule, idle.rule):
            return
        told = f"rule '{idle.rule.name}' is implied: what meets '{strict.rule.name}' meets it too"
        yield _about(idle.rule, "implied-rule", "question", told, "leave it out, or mend its limit", strict.rule)
