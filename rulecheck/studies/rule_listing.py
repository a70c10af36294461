"""The effective rule book: each rule with its limit as text, the file that it is from, and what it took the place of."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import date

from rulecheck.model.ruleset import Alternative, Rule, Ruleset, Window
from rulecheck.model.zones import Fitting, Held, PlaceCondition
from rulecheck.outcome.proofreading import ListedAnswer, ListedRule
from rulecheck.studies.amounts import place


def listing(ruleset: Ruleset, day: date) -> tuple[ListedRule, ...]:
    """Rules in the order of the rule book, then those that are withdrawn."""
    rules = [_listed(rule, day) for rule in ruleset.rules.values()]
    gone = [_listed(item.rule, day, f"{item.reason} ({item.span})") for item in ruleset.withdrawn]
    return (*rules, *gone)


def window_text(window: Window) -> str:
    """`from 2027-01-01 until 2027-12-31`, or what there is of it."""
    first = f"from {window.first.isoformat()}" if window.first else ""
    last = f"until {window.last.isoformat()}" if window.last else ""
    return " ".join(text for text in (first, last) if text)


def _listed(rule: Rule, day: date, withdrawn: str = "") -> ListedRule:
    where = place(rule.span)
    assert where is not None
    return ListedRule(
        name=rule.name,
        clause=rule.clause,
        title=rule.title,
        standing=rule.standing,
        asks=tuple(_asks(rule)),
        applies=tuple(_applies(rule)),
        place=where,
        replaced=tuple(f"{origin.ruleset}, line {origin.span.line}" for origin in rule.history),
        withdrawn=withdrawn,
        in_force=not withdrawn and rule.valid.holds(day),
        window=window_text(rule.valid),
        answers=tuple(
            ListedAnswer(item.reference, item.day.isoformat() if item.day else "", item.text) for item in rule.answers
        ),
    )


def _asks(rule: Rule) -> Iterator[str]:
    """What it asks for, as the file writes it."""
    yield from _of_alternative(rule.own)
    for branch in rule.branches:
        yield f"{branch.name}: {' and '.join(_of_alternative(branch))}"


def _of_alternative(alternative: Alternative) -> Iterator[str]:
    if alternative.require is not None:
        yield " ".join(alternative.require.text.split())
    yield from (_of_place(wanted) for wanted in alternative.places)
    if alternative.evidence is not None:
        wanted = alternative.evidence
        yield f"{wanted.kind.text}: {wanted.name.text}" + (f", due {wanted.due.text}" if wanted.due else "")
    if alternative.record is not None:
        yield f"record {alternative.record.called.text}: {' '.join(alternative.record.require.text.split())}"
    if alternative.judgement is not None:
        yield f"judgement: {alternative.judgement.text}"


def _of_place(wanted: PlaceCondition) -> str:
    if isinstance(wanted, Held):
        what = ", ".join(item.text for item in wanted.what)
        return f"{what} {wanted.word} {wanted.zone.text}".strip()
    if isinstance(wanted, Fitting):
        word = "passes" if wanted.passes else "does not pass"
        return f"{wanted.template.text} {word} through {wanted.through.text} at {wanted.at.text}"
    seen = "clear" if wanted.clear else "covered"
    ends = (", ".join(item.text for item in wanted.origins), ", ".join(item.text for item in wanted.targets))
    return f"sight from {ends[0]} to {ends[1]} {seen}"


def _applies(rule: Rule) -> Iterator[str]:
    """When and for what it asks."""
    yield from (f"each {head.text}" for head in rule.each)
    yield from (f"when {' '.join(gate.text.split())}" for gate in rule.when)
    if rule.unless is not None:
        yield f"unless {rule.unless.when.text}" + (f" ({rule.unless.because})" if rule.unless.because else "")
    if rule.states == ():
        yield "in every state"
    for axis, names in rule.states or ():
        yield f"in {axis}: {', '.join(name.text for name in names) or 'every'}"
