"""The clauses of a rule book against its rules: what each is covered by, and what neither of them says."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Mapping

from rulecheck.model.clauses import Clause
from rulecheck.model.ruleset import Alternative, Rule, Ruleset
from rulecheck.outcome.proofreading import COVERS, ClauseCover, Cover, Proof, ProofPlace
from rulecheck.studies.amounts import place

JUDGING = re.compile(
    r"\b(?:adequate(?:ly)?|appropriate(?:ly)?|suitabl[ey]|sufficient(?:ly)?|reasonabl[ey]|satisfactor(?:y|ily)|"
    r"acceptabl[ey]|properly|in the opinion of|at the discretion of|to the satisfaction of|as far as possible)\b",
    re.IGNORECASE,
)
"""Words that no formula decides: a person has to."""


def coverage(ruleset: Ruleset) -> tuple[ClauseCover, ...]:
    """Each clause of the register with what covers it, in the order of the register."""
    rules: dict[str, list[Rule]] = {}
    for rule in ruleset.rules.values():
        # A rule that takes the place of another stands for the clause of that one too.
        for clause in dict.fromkeys((rule.clause, *(origin.clause for origin in rule.history))):
            rules.setdefault(clause, []).append(rule)
    gone = {item.rule.clause for item in ruleset.withdrawn}
    return tuple(_cover(clause, rules.get(clause.number, []), gone) for clause in ruleset.clauses.values())


def totals(covered: Iterable[ClauseCover]) -> dict[str, int]:
    """How many clauses are covered in each way; one that is covered in several ways counts in each."""
    said = [cover for clause in covered for cover in clause.covers]
    return {cover: said.count(cover) for cover in COVERS}


def _cover(clause: Clause, rules: list[Rule], gone: set[str]) -> ClauseCover:
    found: set[Cover] = {cover for rule in rules for cover in _covers(rule)}
    if not found and clause.kind != "rule":
        found = {"not a rule"}
    if not found:
        found = {"withdrawn" if clause.number in gone else "missing"}
    ways = tuple(cover for cover in COVERS if cover in found)
    where = place(clause.span)
    assert where is not None
    return ClauseCover(clause.number, clause.title, clause.kind, ways, tuple(rule.name for rule in rules), where)


def _covers(rule: Rule) -> Iterator[Cover]:
    """What a rule asks for, in the words of coverage."""
    if rule.standing in ("may", "note"):
        yield "note"
        return
    if rule.standing == "should":
        yield "advice"
        return
    for alternative in (rule.own, *rule.branches):
        if alternative.require is not None or alternative.places:
            yield "computed"
        if alternative.evidence is not None:
            yield "evidence"
        if alternative.record is not None:
            yield "record"
        if alternative.judgement is not None:
            yield "judgement"


# --- findings --------------------------------------------------------------------------------------------------------


def register_findings(ruleset: Ruleset, covered: Iterable[ClauseCover]) -> Iterator[Proof]:
    """Clauses without a rule, rules without a clause or a title, and clauses that the register does not have."""
    for clause in covered:
        if clause.covers == ("missing",):
            yield Proof(
                "clause-without-rule", "question", "", clause.number,
                f"clause {clause.number}, {clause.title or 'without a title'}, has no rule",
                "write its rule, or say what it is: kind: definition, procedure, information or heading", clause.place,
            )  # fmt: skip
        if not clause.title:
            told = f"clause {clause.number} has no title"
            yield Proof("no-title", "remark", "", clause.number, told, "add a few words", clause.place)
    registered = {clause.span.file for clause in ruleset.clauses.values()}
    for rule in ruleset.rules.values():
        yield from _of_rule(rule, ruleset.clauses, rule.ruleset in registered)


def _of_rule(rule: Rule, clauses: Mapping[str, Clause], registered: bool) -> Iterator[Proof]:
    """What a rule says of its clause; `registered` where the file of the rule has a register of its own."""
    where = place(rule.span)
    if not rule.clause:
        told = f"rule '{rule.name}' names no clause"
        yield Proof(
            "no-clause", "question", rule.name, "", told, "say which clause it stands for: clause: number", where
        )
    elif registered and rule.clause not in clauses:
        told = f"rule '{rule.name}' names clause {rule.clause}, which the register does not have"
        advice = "enter it under 'clauses:', or mend the number"
        yield Proof("unknown-clause", "fault", rule.name, rule.clause, told, advice, where)
    elif rule.clause in clauses and clauses[rule.clause].kind in ("definition", "information", "heading"):
        kind = clauses[rule.clause].kind
        if rule.standing in ("shall", "should"):
            told = f"rule '{rule.name}' asks something, and clause {rule.clause} is a {kind}"
            other = ProofPlace("the clause is here", place(clauses[rule.clause].span))
            advice = "make the clause a rule, or name the clause that asks"
            yield Proof("not-a-rule", "question", rule.name, rule.clause, told, advice, where, (other,))
    if not rule.title:
        told = f"rule '{rule.name}' has no title"
        yield Proof("no-title", "remark", rule.name, rule.clause, told, "say in a few words what is limited", where)
    yield from _judging(rule, clauses.get(rule.clause))


def _judging(rule: Rule, clause: Clause | None) -> Iterator[Proof]:
    """Words that ask for a judgement where the rule has no slot for one."""
    if rule.standing in ("may", "note") or any(_asks_a_person(part) for part in (rule.own, *rule.branches)):
        return
    texts = (rule.title, rule.note, *((clause.title, clause.note) if clause is not None else ()))
    said = dict.fromkeys(word.lower() for text in texts for word in JUDGING.findall(text))
    if said:
        told = f"rule '{rule.name}' says {' and '.join(repr(word) for word in said)}, and asks no person"
        advice = "add 'judgement: question', or say in the note what decides it"
        yield Proof("judgement-word", "question", rule.name, rule.clause, told, advice, place(rule.span))


def _asks_a_person(alternative: Alternative) -> bool:
    return alternative.judgement is not None or alternative.evidence is not None
