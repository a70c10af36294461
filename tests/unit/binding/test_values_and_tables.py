"""Values that stand in two places, states that meet, and tables whose rows are out of order."""

from __future__ import annotations

import pytest
from small_files import check_files, only, refused

RULE = "rules: {it: {require: 1 <= 2}}\n"


def test_an_alias_is_read_anew_for_each_unit() -> None:
    """5 mm is no mass, wherever else it is a length."""
    design = "dimensions: {overall_width: &a 5 mm}\nmasses: {x: {mass: *a, at: 0 0 0 mm}}\n"
    found = refused(design, "rules: {it: {require: mass.total <= 1 kg}}\n")
    assert {item.code for item in found} == {"wrong-dimension"}


@pytest.mark.parametrize(
    ("one", "two"),
    [
        ("masses.d.at.x: 5 mm", "masses.d.at: 4 5 6 mm"),
        ("masses.d.at: 4 5 6 mm", "masses.d.at.x: 5 mm"),
        ("masses.d.mass: 5 kg", "masses.d.mass: 6 kg"),
        ("masses.d: none", "masses.d.mass: 6 kg"),
    ],
)
def test_two_states_that_set_one_thing_clash_whichever_holds_the_other(one: str, two: str) -> None:
    states = f"masses: {{d: {{mass: 5 kg, at: 1 2 3 mm}}}}\nstates: {{a: {{x: {{{one}}}}}, b: {{y: {{{two}}}}}}}\n"
    ruleset = "states_needed: {a: [x], b: [y]}\nrules: {it: {states: every, require: mass.total <= 10 kg}}\n"
    assert "state-clash" in [item.code for item in refused(states, ruleset)]


def table(rows: str, over: str = "dimensions.wheelbase", form: str = "steps") -> str:
    return f"tables: {{t: {{over: {over}, {form}: {rows}}}}}\n{RULE}"


@pytest.mark.parametrize(
    ("ruleset", "code"),
    [
        (table("[]"), "bad-structure"),
        (table("[]", form="linear"), "bad-structure"),
        (table("[{otherwise: 5 mm}]", over="[]"), "bad-structure"),
        (table("[{up_to: 3 m, value: 1 kg}, {up_to: 2 m, value: 2 kg}]"), "bad-structure"),
        (table("[{up_to: 3 m, value: 1 kg}, {up_to: 3000 mm, value: 2 kg}]"), "bad-structure"),
        (table("[{up_to: 3 m, value: 1 kg}, {below: 3 m, value: 2 kg}]"), "bad-structure"),
        (table("[{otherwise: 1 kg}, {up_to: 2 m, value: 2 kg}]"), "bad-structure"),
        (table("[{is: rear, value: 1 kg}, {is: rear, value: 2 kg}]", over="options.driven_axle"), "bad-structure"),
        (table("[[1 m, 2 kg], [0.5 m, 3 kg]]", form="linear"), "bad-structure"),
        (table("[[1 m, 2 kg], [1 m, 3 kg]]", form="linear"), "bad-structure"),
        (table("[{otherwise: 5 mm}], unit: kg"), "wrong-dimension"),
        (table("[{otherwise: t}]"), "cycle"),
        (table("[{otherwise: 5 mm}]", over="t"), "cycle"),
    ],
)
def test_tables_that_cannot_be_read_as_they_stand(ruleset: str, code: str) -> None:
    found = refused("", ruleset)
    assert [item.code for item in found] == [code]
    assert found[0].span is not None
    assert found[0].span.line == 3


@pytest.mark.parametrize(("length", "said"), [("2999 mm", "1 kg"), ("3000 mm", "2 kg"), ("3001 mm", "3 kg")])
def test_a_row_for_just_its_own_key_is_in_order(length: str, said: str) -> None:
    rows = "[{below: 3 m, value: 1 kg}, {up_to: 3 m, value: 2 kg}, {otherwise: 3 kg}]"
    ruleset = f"tables: {{t: {{over: dimensions.wheelbase, steps: {rows}}}}}\nrules: {{it: {{require: t <= 9 kg}}}}\n"
    assert str(only(f"dimensions: {{wheelbase: {length}}}\n", ruleset).value) == said


def test_a_table_of_a_table_is_no_circle() -> None:
    rows = "[[0 kg, 1 kg], [10 kg, 21 kg]]"
    ruleset = f"tables: {{t: {{over: mass.total, linear: {rows}}}}}\nrules: {{it: {{require: t(t(1 kg)) <= 9 kg}}}}\n"
    # t(1 kg) = 1 + 2 = 3 kg, and t(3 kg) = 1 + 6 = 7 kg.
    assert str(only("", ruleset).value) == "7 kg"


def test_dates_in_a_list() -> None:
    design = "evidence: {a: {kind: certificate, issued: 2027-01-01, until: 2028-01-01}}\n"
    lists = "lists: {days: [2026-01-01, 2027-01-01]}\n"
    assert only(design, lists + "rules: {it: {require: evidence.a.issued in days}}\n").verdict == "complies"
    assert only(design, lists + "rules: {it: {require: evidence.a.until in days}}\n").verdict == "breach"


def test_a_point_may_be_called_datum() -> None:
    ruleset = "rules: {it: {require: points.nose.x <= 5 mm}}\n"
    assert only("points: {datum: 0 0 0 mm, nose: 1 2 3 mm}\n", ruleset).verdict == "complies"


def test_a_unit_of_the_rule_book_that_the_design_names_holds_with_another_book_too() -> None:
    files = {
        "car.design.yaml": "design: Heron\nrulesets: [own.ruleset.yaml]\ncost.total: 5 EUR\n".replace(
            "cost.total: 5 EUR", "cost: {total: 5 EUR}"
        ),
        "own.ruleset.yaml": "ruleset: Own\nunits: {EUR: currency}\ninputs: {cost.total: {unit: EUR, meaning: Cost}}\n"
        + RULE,
        "other.ruleset.yaml": "ruleset: Other\n" + RULE,
    }
    assert check_files(files, rules=["other.ruleset.yaml"]).verdict == "complies"


def test_a_rule_may_be_called_as_a_collection_is() -> None:
    ruleset = 'rules: {masses: {require: "sum(m.mass for m in masses) <= 6 kg"}, it: {require: rule(masses)}}\n'
    assert only("masses: {a: {mass: 5 kg, at: 0 0 0 mm}}\n", ruleset).verdict == "complies"
