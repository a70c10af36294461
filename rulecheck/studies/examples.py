"""The examples of rules, run: each is a small check of its own with the given values as the whole design.

Only the rule itself is judged, and what it refers to. States play no part: the given values are those of the state.
"""

from __future__ import annotations

import math
from dataclasses import replace
from datetime import date
from decimal import Decimal
from fractions import Fraction

from rulecheck.binding.bind import bind
from rulecheck.diagnostics import Faults, Refused
from rulecheck.graph.conditions import Part
from rulecheck.model.design import Design
from rulecheck.model.examples import Example
from rulecheck.model.ruleset import Rule, Ruleset
from rulecheck.outcome.examples import ExampleResult
from rulecheck.outcome.results import Finding, Place
from rulecheck.physics.library import Library
from rulecheck.quantity.quantity import Quantity
from rulecheck.quantity.reading_values import read_quantity
from rulecheck.studies.check import Checker


def run_examples(ruleset: Ruleset, physics: Library, day: date) -> tuple[ExampleResult, ...]:
    """Every example of every rule, in the order of the rule book.

    `day` is the evaluation date of examples that name none, moved into the time in which their rule is in force. A
    value that cannot be used is no fault of the caller's: it is what was found.
    """
    rules = ruleset.rules.values()
    return tuple(_run(ruleset, rule, example, physics, day) for rule in rules for example in rule.examples)


def _run(ruleset: Ruleset, rule: Rule, example: Example, physics: Library, day: date) -> ExampleResult:
    place = Place(example.span.file, example.span.line, example.span.column)
    faults = Faults()
    wanted = read_quantity(example.margin, None, own=ruleset.units, faults=faults) if example.margin else None
    expected = _words(example.verdict, example.margin.text if example.margin else "")
    made = ExampleResult(rule.name, rule.clause, place, expected, "", False)
    try:
        faults.settle()
        return _judged(made, _alone(ruleset, rule), rule, example, wanted, physics, _day(rule, example, day))
    except Refused as refused:
        told = "; ".join(dict.fromkeys(item.message for item in refused.diagnostics))
        return replace(made, found="values that cannot be used", reason=told)


def _judged(
    made: ExampleResult,
    ruleset: Ruleset,
    rule: Rule,
    example: Example,
    wanted: Quantity | None,
    physics: Library,
    day: date,
) -> ExampleResult:
    graph = bind(_design(example), [ruleset], day=day, physics=physics, only=(rule.name,))
    checker = Checker(graph)
    bound = graph.rules[0]
    finding = checker.finding(bound, replace(rule, states=None), with_spread=False)
    judged = checker.binding(bound)
    part = judged.part if judged is not None else None
    agrees = not example.verdict or finding.verdict == example.verdict
    if wanted is not None and example.margin is not None:
        is_known = finding.margin is not None
        agrees = agrees and is_known and _is_margin(checker, part, wanted, example.margin.text)
    found = _words(finding.verdict, str(finding.margin) if finding.margin else "")
    return replace(made, found=found, agrees=agrees, reason=_reason(finding))


def _reason(finding: Finding) -> str:
    return finding.reason if finding.margin is None else ""


def _words(verdict: str, margin: str) -> str:
    return ", ".join(filter(None, (verdict, f"margin {margin}" if margin else "")))


def _alone(ruleset: Ruleset, rule: Rule) -> Ruleset:
    """The rule book with the rule judged as written, whatever states it asks for."""
    return replace(ruleset, rules={**ruleset.rules, rule.name: replace(rule, states=None)})


def _day(rule: Rule, example: Example, day: date) -> date:
    """The day of an example: its own, else one on which the rule is in force."""
    if example.on is not None or rule.valid.holds(day):
        return example.on or day
    return rule.valid.first or rule.valid.last or day


def _design(example: Example) -> Design:
    """The given values as a whole design."""
    empty = Design(
        file=example.span.file, name="example", revision="", note="", rulesets=(), leaves={}, items={},
        complete=frozenset(), absent=frozenset(), states={}, keys={},
    )  # fmt: skip
    return empty.with_overlay(example.given)


def _is_margin(checker: Checker, part: Part | None, wanted: Quantity, wanted_text: str) -> bool:
    """Equal where the margin is rational; else equal to half of the last digit that the example writes."""
    if part is None or part.margin is None or part.margin.dimension != wanted.dimension:
        return False
    rational, power = wanted.unit.width_in_si(wanted.value)
    expected = checker.bank.number(rational, part.margin.dimension, power)
    found, asked = checker.reader.exact_fraction(part.margin), checker.reader.exact_fraction(expected)
    if found is not None and asked is not None:
        return found == asked
    near, aim = checker.reader.approximate(part.margin), checker.reader.approximate(expected)
    half, _ = wanted.unit.width_in_si(_last_digit(wanted_text) / 2)
    return near is not None and aim is not None and abs(near - aim) <= float(half) * math.pi**power


def _last_digit(text: str) -> Fraction:
    """One of the last digit that a number writes.

    >>> _last_digit("12.50 mm"), _last_digit("3e2 mm")
    (Fraction(1, 100), Fraction(100, 1))
    """
    exponent = Decimal(text.split()[0]).as_tuple().exponent
    assert isinstance(exponent, int)
    return Fraction(10) ** exponent
