"""Shapes of rulesets and designs that say nothing, or two things: each is told with its place, and never passes."""

from __future__ import annotations

import pytest
from small_files import refused

RULE = "rules: {it: {require: 1 <= 2}}\n"


def rule(body: str) -> str:
    return f"rules:\n  it: {{{body}, require: 1 <= 2}}\n"


@pytest.mark.parametrize(
    ("ruleset", "code", "place"),
    [
        ("rules: {}\n", "no-rules", "1:10"),
        ("rules:\n", "bad-structure", "3:7"),
        ("rules: []\n", "bad-structure", "3:8"),
        ("extends: {}\n" + RULE, "bad-structure", "3:10"),
        ("extends: [[a]]\n" + RULE, "bad-structure", "3:10"),
        ("extends: cup.ruleset.yaml\n" + RULE, "cycle", "3:10"),
        (rule("states: {}"), "bad-structure", "4:3"),
        (rule("states: {fuel: []}"), "bad-structure", "4:3"),
        (rule("states: {fuel: {a: b}}"), "bad-structure", "4:16"),
        (rule("each: []"), "bad-structure", "4:3"),
        (rule("unless: {}"), "bad-structure", "4:16"),
        (rule("valid: {from: 2028-01-01, until: 2027-12-31}"), "bad-date", "4:41"),
        (rule("scale: 0"), "bad-value", "4:15"),
        (rule("scale: -5"), "bad-value", "4:15"),
        (rule("scale: 5 kg"), "wrong-dimension", "4:15"),
        ("rules: {it: {branches: {a: {}}}}\n", "missing-key", "3:25"),
        ("rules: {it: {branches: {a: {when: 1 <= 2}}}}\n", "missing-key", "3:25"),
        ("rules: {it: {evidence: {kind: certificate, name: }}}\n", "bad-value", "3:50"),
        ("rules: {it: {judgement: }}\n", "bad-value", "3:25"),
        ("groups: {g: {when: yes, rules: it, rule: 5}}\n" + RULE, "unknown-key", "3:36"),
        ("groups: {g: {when: yes, rules: [oil]}}\n" + RULE, "unknown-name", "3:33"),
        ("states_needed: {fuel: []}\n" + RULE, "bad-structure", "3:17"),
        ("states_needed: {fuel: [[a]]}\n" + RULE, "bad-structure", "3:24"),
        ("states_needed: {fuel: {a: {sets: {}}}}\n" + RULE, "bad-structure", "3:34"),
        ("states_needed: {fuel: {a: {sets: 5}}}\n" + RULE, "bad-structure", "3:34"),
        ("lists: {l: []}\n" + RULE, "bad-structure", "3:9"),
        ("lists: {l: [5 zorg]}\n" + RULE, "unknown-unit", "3:13"),
        ("lists: {pi: [a]}\n" + RULE, "name-taken", "3:14"),
    ],
)  # fmt: skip
def test_wrong_rulesets(ruleset: str, code: str, place: str) -> None:
    found = refused("", ruleset)
    assert [(item.code, str(item.span).removeprefix("cup.ruleset.yaml:")) for item in found] == [(code, place)]


@pytest.mark.parametrize(
    ("declared", "code"),
    [
        ("{a: {unit: zorg}}", "unknown-unit"),
        ("{a: {kind: number}}", "missing-key"),
        ("{a: {choices: []}}", "missing-key"),
        ("{a: {kind: item}}", "missing-key"),
        ("{a: {kind: item, of: dimensions.wheelbase}}", "unknown-name"),
        ("{'*': {unit: mm}}", "bad-name"),
        ("{states: {unit: mm}}", "bad-name"),
        ("{dimensions: {unit: mm}}", "name-taken"),
        ("{dimensions.wheelbase: {unit: kg}}", "wrong-dimension"),
        ("{dimensions.wheelbase: {kind: flag}}", "kind-mismatch"),
        ("{tyres.rear.width: {unit: kg}}", "wrong-dimension"),
        ("{tyres: {unit: kg}}", "kind-mismatch"),
    ],
)
def test_wrong_declarations_are_found_though_nothing_uses_them(declared: str, code: str) -> None:
    found = refused("", f"inputs: {declared}\n{RULE}")
    assert [item.code for item in found] == [code]
    assert found[0].span is not None
    assert found[0].span.line == 3


def test_a_definition_that_there_is_not() -> None:
    inputs = "inputs: {dimensions.rear_track: {definition: contact centers}}\n"
    found = refused("", "definitions: {track: [contact centres, wheel planes]}\n" + inputs + RULE)
    assert [(item.code, item.advice) for item in found] == [("unknown-choice", "did you mean 'contact centres'?")]


@pytest.mark.parametrize("unit", ["mm", "kg", "kPa"])
def test_a_unit_of_its_own_may_not_be_one_of_the_table(unit: str) -> None:
    assert [item.code for item in refused("", f"units: {{{unit}: mine}}\n{RULE}")] == ["name-taken"]


@pytest.mark.parametrize("name", ["pi", "on", "vertical", "tyres", "masses"])
def test_a_figure_may_not_hide_what_has_a_meaning(name: str) -> None:
    found = refused("", f"derived: {{{name}: {{formula: 5 mm, unit: mm}}}}\n{RULE}")
    assert [(item.code, str(item.span)) for item in found] == [("name-taken", "cup.ruleset.yaml:3:11")]


def test_a_figure_of_an_item_may_not_hide_a_function() -> None:
    formula = "{for: t in tyres, formula: t.width, unit: mm}"
    assert [item.code for item in refused("", f"derived: {{sqrt: {formula}}}\n{RULE}")] == ["name-taken"]


@pytest.mark.parametrize(
    ("design", "code", "place"),
    [
        ("dimensions: []\n", "bad-structure", "4:13"),
        ("dimensions: {overall_width: {}}\n", "bad-value", "4:14"),
        ("tyres: []\n", "bad-structure", "4:8"),
        ("tyres: {front: 5}\n", "bad-structure", "4:16"),
        ("options: {driven_axle: [rear]}\n", "bad-value", "4:24"),
        ("options: {driven_axle: {value: rear, basic: measured}}\n", "unknown-key", "4:38"),
        ("changes: [car.design.yaml]\n", "bad-structure", "4:10"),
        ("points: {a: {at: 1 2 3 mm, datum: zorg}}\n", "unknown-name", "4:35"),
        ("datums: {d: {from: d, at: 1 0 0 mm}}\n", "cycle", "4:10"),
        ("states: {fuel: {empty: {masses.fuel.masss: 0 kg}}}\n", "unknown-key", "4:44"),
        ("states: {fuel: {empty: {dimensions.wheelbase: 5 kg}}}\n", "wrong-dimension", "4:49"),
    ],
)
def test_wrong_designs_are_found_though_no_rule_reads_them(design: str, code: str, place: str) -> None:
    found = refused(design, RULE)
    assert [(item.code, str(item.span).removeprefix("car.design.yaml:")) for item in found] == [(code, place)]
