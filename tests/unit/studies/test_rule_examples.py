"""The examples of rules, run: what agrees, what does not, and what is missing of the values given."""

from __future__ import annotations

import tempfile
from datetime import date
from pathlib import Path

import pytest
from small_files import RULES, refused, write_files

from rulecheck.api import load_ruleset
from rulecheck.outcome.examples import ExampleResult
from rulecheck.physics.library import Library
from rulecheck.studies.examples import run_examples

DAY = date(2027, 3, 1)
INPUTS = "inputs: {a: {unit: mm, meaning: a}, b: {unit: mm, meaning: b}}\n"


def run(ruleset: str, day: date = DAY) -> list[ExampleResult]:
    with tempfile.TemporaryDirectory() as folder:
        write_files(Path(folder), {"cup.ruleset.yaml": RULES + ruleset})
        return list(run_examples(load_ruleset(Path(folder, "cup.ruleset.yaml")), Library(), day))


def one(example: str, rule: str = "require: a <= 10 mm") -> ExampleResult:
    (found,) = run(f"{INPUTS}rules:\n  it:\n    {rule}\n    examples: [{example}]\n")
    return found


@pytest.mark.parametrize(
    ("example", "agrees", "found"),
    [
        ("{given: {a: 4 mm}, margin: 6 mm}", True, "complies, margin 6 mm"),
        ("{given: {a: 4 mm}, margin: 0.6 cm}", True, "complies, margin 6 mm"),
        ("{given: {a: 4.0001 mm}, margin: 6 mm}", False, "complies, margin 5.9999 mm"),
        ("{given: {a: 4 mm}, margin: 6 kg}", False, "complies, margin 6 mm"),
        ("{given: {a: 12 mm}, verdict: breach}", True, "breach, margin -2 mm"),
        ("{given: {a: 12 mm}, verdict: complies, margin: -2 mm}", False, "breach, margin -2 mm"),
        ("{given: {a: 10 mm}, verdict: complies, margin: 0 mm}", True, "complies, margin 0 mm"),
        ("{given: {b: 10 mm}, verdict: open}", True, "open"),
        ("{given: {b: 10 mm}, margin: 0 mm}", False, "open"),
        ("{verdict: open}", True, "open"),
    ],
)
def test_an_example_agrees_or_says_what_was_found(example: str, agrees: bool, found: str) -> None:
    result = one(example)
    assert (result.agrees, result.found) == (agrees, found)


def test_what_is_missing_and_what_cannot_be_used_is_said() -> None:
    assert "a" in one("{given: {b: 10 mm}, margin: 0 mm}").reason
    wrong = one("{given: {a: 10 kg}, margin: 0 mm}")
    assert (wrong.agrees, wrong.found) == (False, "values that cannot be used")
    assert wrong.reason
    assert one("{given: {nowhere: 1 mm}, margin: 0 mm}").reason == "no input is called 'nowhere'"


def test_the_place_and_what_is_expected_are_told() -> None:
    found = one("{given: {a: 4 mm}, margin: 6 mm, verdict: complies}")
    assert str(found.place) == "cup.ruleset.yaml:7:16"
    assert (found.rule, found.expected) == ("it", "complies, margin 6 mm")


def test_a_margin_that_is_not_rational_agrees_to_its_last_digit() -> None:
    rule = "require: sqrt(a * b) <= 10 mm"
    assert one("{given: {a: 2 mm, b: 3 mm}, margin: 7.5505 mm}", rule).agrees
    assert not one("{given: {a: 2 mm, b: 3 mm}, margin: 7.5506 mm}", rule).agrees


def test_states_play_no_part_and_other_rules_are_left_alone() -> None:
    found = run(
        f"states_needed: {{fuel: [empty, full]}}\n{INPUTS}rules:\n  other: {{require: b <= 1 mm}}\n"
        "  it: {states: every, require: a <= 10 mm and rule(other), examples: [{given: {a: 4 mm, b: 1 mm}, margin: 6 mm}]}\n"
    )
    assert [(item.rule, item.agrees) for item in found] == [("it", True)]


def test_an_example_is_judged_on_a_day_on_which_its_rule_is_in_force() -> None:
    rules = f"{INPUTS}rules:\n  it:\n    require: a <= 10 mm\n    valid: {{from: 2028-01-01}}\n    examples: [{{given: {{a: 4 mm}}, margin: 6 mm}}, {{given: {{a: 4 mm}}, verdict: not applicable, on: 2027-12-31}}]\n"
    assert [item.agrees for item in run(rules)] == [True, True]


def test_examples_of_the_demonstration_agree() -> None:
    book = load_ruleset(Path(__file__).parents[3] / "rulesets_demo" / "general.ruleset.yaml")
    found = run_examples(book, Library(), DAY)
    assert len(found) >= 2
    assert [item for item in found if not item.agrees] == []


def test_examples_at_fault_are_refused() -> None:
    said = refused(
        "a: 1 mm\n",
        f"{INPUTS}rules:\n  it: {{require: a <= 10 mm, examples: [{{given: {{a: 1 mm}}}}, {{marg: 1}}, {{verdict: fine}}, {{given: 3, margin: 1 mm}}, 4]}}\n",
    )
    assert [(item.code, item.message) for item in said] == [
        ("missing-key", "an example says what must come of its values"),
        ("unknown-key", "an example has no key 'marg'"),
        ("unknown-choice", "no example can expect 'fine'"),
        ("bad-structure", "values are given by path"),
        ("bad-structure", "an example has values and what must come of them"),
    ]
