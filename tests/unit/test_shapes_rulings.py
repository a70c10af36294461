"""The rule book's tolerance on a limit, its rounding of a value, consequences of a breach. Margins by hand."""

from __future__ import annotations

import json
from datetime import date
from fractions import Fraction

import pytest
from small_files import check_texts, findings, margin, only

from rulecheck.output.json_report import report_json
from rulecheck.output.terminal import report_text

INPUTS = "inputs: {a: {unit: mm, meaning: a}, m: {unit: kg, meaning: m}, s: {unit: '%', meaning: s}, w: {unit: deg, meaning: w}, d: {kind: date, meaning: d}}\n"


def ruling(require: str, said: str, design: str):  # type: ignore[no-untyped-def]
    return only(design, f"{INPUTS}rules:\n  it: {{require: '{require}', {said}}}\n")


@pytest.mark.parametrize(
    ("require", "said", "design", "verdict", "room", "raw"),
    [
        ("a <= 100 mm", "tolerance: 3 mm", "a: 103 mm", "complies", 0, -3),
        ("a <= 100 mm", "tolerance: 3 mm", "a: 103.001 mm", "breach", Fraction(-1, 1000), Fraction(-3001, 1000)),
        ("a < 100 mm", "tolerance: 3 mm", "a: 103 mm", "breach", 0, -3),
        ("a >= 100 mm", "tolerance: 3 mm", "a: 97 mm", "complies", 0, -3),
        ("100 mm >= a", "tolerance: 3 mm", "a: 102 mm", "complies", 1, -2),
        ("not a > 100 mm", "tolerance: 3 mm", "a: 102 mm", "complies", 1, -2),
        ("a <= 100 mm", "tolerance: 3 %", "a: 103 mm", "complies", 0, -3),
        ("a >= 100 mm", "tolerance: 3 %", "a: 96 mm", "breach", -1, -4),
        ("a <= 100 mm", "tolerance: +0/-5 mm", "a: 101 mm", "breach", -1, -1),
        ("a >= 100 mm", "tolerance: +0/-5 mm", "a: 95 mm", "complies", 0, -5),
        ("90 mm <= a <= 100 mm", "tolerance: +2/-1 mm", "a: 102 mm", "complies", 0, -2),
        ("90 mm <= a <= 100 mm", "tolerance: +2/-1 mm", "a: 88 mm", "breach", -1, -2),
        ("a == 100 mm within 1 mm", "tolerance: 2 mm", "a: 103 mm", "complies", 0, -2),
        ("w <= 7 deg", "tolerance: +1/-0 deg", "w: 8 deg", "complies", 0, -1),
        ("s <= 60 %", "tolerance: 0.015", "s: 61 %", "complies", Fraction(1, 2), -1),
        ("m >= 80 kg", "'rounding': {to: 1 kg, how: up}", "m: 79.2 kg", "complies", 0, Fraction(-4, 5)),
        ("m >= 80 kg", "'rounding': {to: 1 kg, how: down}", "m: 80.9 kg", "complies", 0, Fraction(9, 10)),
        ("m <= 80 kg", "'rounding': {to: 1 kg, how: down}", "m: 80.9 kg", "complies", 0, Fraction(-9, 10)),
        ("m <= 80 kg", "'rounding': {to: 1 kg, how: nearest}", "m: 80.5 kg", "breach", -1, Fraction(-1, 2)),
        ("m <= 80 kg", "'rounding': {to: 1 kg, how: even}", "m: 80.5 kg", "complies", 0, Fraction(-1, 2)),
        ("m >= 80 kg", "'rounding': {to: 500 gram, how: down}", "m: 80.7 kg", "complies", Fraction(1, 2), Fraction(7, 10)),
        ("m >= 80 kg", "'rounding': {to: 1 kg, how: down}, tolerance: 0.5 kg", "m: 79.9 kg", "breach", Fraction(-1, 2), Fraction(-1, 10)),
        ("a == 100 mm within 1 mm", "'rounding': {to: 1 mm, how: nearest}", "a: 101.4 mm", "complies", 0, Fraction(-2, 5)),
    ],
)  # fmt: skip
def test_the_ruled_margin_decides_and_the_raw_one_stands_beside_it(
    require: str, said: str, design: str, verdict: str, room: Fraction, raw: Fraction
) -> None:
    found = ruling(require, said, design + "\n")
    assert (found.verdict, margin(found)) == (verdict, room)
    assert found.ruled is not None
    assert found.ruled.margin is not None
    assert Fraction(found.ruled.margin.exact) == raw


def test_parts_of_other_dimensions_are_left_as_they_are() -> None:
    found = ruling("a <= 100 mm and m <= 80 kg", "tolerance: 3 mm", "a: 102 mm\nm: 81 kg\n")
    assert (found.verdict, margin(found), found.ruled) == ("breach", -1, None)
    assert [part.verdict for part in found.parts] == ["complies", "breach"]
    assert found.parts[0].ruled is not None


def test_a_branch_has_its_own_tolerance_or_that_of_the_rule() -> None:
    rules = (
        "rules:\n  it:\n    tolerance: 1 mm\n    branches:\n"
        "      own: {require: a <= 90 mm, tolerance: 12 mm}\n      other: {require: a <= 100 mm}\n"
    )
    found = only("a: 102 mm\n", INPUTS + rules)
    assert (found.verdict, margin(found)) == ("complies", 0)
    assert [part.verdict for part in found.parts] == ["complies", "breach"]


def test_a_missing_value_stays_open_and_margins_of_others_are_ruled_ones() -> None:
    rules = "rules:\n  it: {require: a <= 100 mm, tolerance: 3 mm}\n  other: {require: margin(it) >= 1 mm}\n"
    assert only("", INPUTS + rules).verdict == "open"
    found = findings(check_texts("a: 102 mm\n", INPUTS + rules))["other"]
    assert (found.verdict, margin(found)) == ("complies", 0)


def test_a_tolerance_of_a_zone_and_of_a_date() -> None:
    zone = "zones: {box: {x: [0 mm, 100 mm]}}\nrules:\n  it: {inside: {zone: box, what: points.p}, tolerance: 5 mm}\n"
    found = only("points: {p: 104 0 0 mm}\n", zone)
    assert (found.verdict, margin(found)) == ("complies", 1)
    found = ruling("on <= d", "tolerance: 3 days", "d: 2027-02-27\n")
    assert (found.verdict, margin(found)) == ("complies", 1)


def test_json_and_terminal_show_both_margins() -> None:
    report = check_texts("a: 102 mm\n", f"{INPUTS}rules:\n  it: {{require: a <= 100 mm, tolerance: 3 mm}}\n")
    rule = json.loads(report_json(report))["rules"][0]
    assert rule["margin"]["shown"] == "1"
    assert rule["ruled"] == rule["parts"][0]["ruled"]
    assert (rule["ruled"]["tolerance"], rule["ruled"]["margin"]["shown"]) == ("3 mm", "-2")
    assert "it: tolerance 3 mm on the limit; margin without it: -2 mm" in report_text(report)


def test_a_consequence_stands_beside_the_verdict() -> None:
    ruleset = (
        f"{INPUTS}rules:\n  it: {{require: a <= 100 mm, consequence: {{kind: penalty, points: 20, text: each time}}}}\n"
    )
    found = only("a: 101 mm\n", ruleset)
    assert (found.verdict, found.consequence) == ("breach", "penalty (20 points): each time")
    report = check_texts("a: 101 mm\n", ruleset)
    assert "consequence in the rule book: penalty (20 points): each time" in report_text(report)
    without = only("a: 101 mm\n", f"{INPUTS}rules:\n  it: {{require: a <= 100 mm}}\n")
    assert (without.verdict, without.margin) == (found.verdict, found.margin)


@pytest.mark.parametrize(
    ("day", "said"),
    [
        (date(2027, 1, 31), "not applicable"),
        (date(2027, 2, 1), "breach"),
        (date(2027, 6, 30), "breach"),
        (date(2027, 7, 1), "not applicable"),
    ],
)
def test_a_rule_holds_from_its_first_to_its_last_day(day: date, said: str) -> None:
    rules = f"{INPUTS}rules:\n  it: {{require: a <= 100 mm, valid: {{from: 2027-02-01, until: 2027-06-30}}}}\n"
    assert only("a: 101 mm\n", rules, on=day).verdict == said
    states = rules.replace("require", "states: every, require").replace(
        "inputs:", "states_needed: {s: [x, y]}\ninputs:"
    )
    assert only("a: 101 mm\nstates: {s: {x: {}, y: {a: 99 mm}}}\n", states, on=day).verdict == said
    each = (
        "rules:\n  it: {each: t in tyres, require: t.width <= 300 mm, valid: {from: 2027-02-01, until: 2027-06-30}}\n"
    )
    assert only("tyres: {front: {width: 301 mm}, rear: {width: 290 mm}}\n", each, on=day).verdict == said


@pytest.mark.parametrize(("day", "said"), [(date(2027, 3, 31), "dispensed"), (date(2027, 4, 1), "breach")])
def test_a_dispensation_is_good_on_its_last_day(day: date, said: str) -> None:
    design = "a: 101 mm\ndispensations: {one: {rule: it, reference: L1, until: 2027-03-31}}\n"
    found = only(design, f"{INPUTS}rules:\n  it: {{require: a <= 100 mm}}\n", on=day)
    assert (found.verdict, margin(found)) == (said, -1)


@pytest.mark.parametrize(("day", "said"), [(date(2026, 12, 31), 120), (date(2027, 1, 1), 110)])
def test_a_limit_by_the_day_of_approval(day: date, said: int) -> None:
    table = "tables: {limit: {over: d, steps: [{below: 2027-01-01, value: 120 mm}, {otherwise: 110 mm}]}}\n"
    found = only(f"a: 100 mm\nd: {day}\n", f"{INPUTS}{table}rules:\n  it: {{require: a <= limit}}\n")
    assert margin(found) == said - 100
