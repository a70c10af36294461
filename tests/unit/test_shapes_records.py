"""Records of tests: the set-up comes first, a void run proves nothing, every valid run counts. Margins by hand."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest
from small_files import check_texts, findings, margin, only

from rulecheck.api import proofread

INPUTS = (
    "inputs:\n"
    "  records.*.setup.mass: {unit: kg, meaning: Mass of the sledge}\n"
    "  records.*.result.pull: {unit: kN, meaning: Greatest pull}\n"
    "  anchors: {kind: collection, meaning: Anchors, element: {proof: {kind: text, meaning: Its test}}}\n"
)
NOSE = "rules:\n  it: {record: {name: nose, setup: setup.mass >= 300 kg, require: result.pull <= 20 kN}}\n"
PAPERS = "date: 2027-01-10, report: T1"


def nose(fields: str, rules: str = NOSE, **options: date):  # type: ignore[no-untyped-def]
    return only(f"records: {{nose: {{{fields}}}}}\n", INPUTS + rules, **options)


@pytest.mark.parametrize(
    ("fields", "verdict", "room"),
    [
        (f"{PAPERS}, setup: {{mass: 300 kg}}, result: {{pull: 18 kN}}", "complies", 2),
        (f"{PAPERS}, setup: {{mass: 300 kg}}, result: {{pull: 21 kN}}", "breach", -1),
        (f"{PAPERS}, setup: {{mass: 299 kg}}, result: {{pull: 18 kN}}", "open", None),
        (f"{PAPERS}, setup: {{mass: 299 kg}}, result: {{pull: 21 kN}}", "open", None),
        (f"{PAPERS}, result: {{pull: 21 kN}}", "open", None),
        (f"{PAPERS}, setup: {{mass: 300 kg}}", "open", None),
        ("date: 2027-01-10, setup: {mass: 300 kg}, result: {pull: 18 kN}", "open", None),
        ("report: T1, setup: {mass: 300 kg}, result: {pull: 18 kN}", "open", None),
    ],
)
def test_the_set_up_is_checked_first(fields: str, verdict: str, room: int | None) -> None:
    found = nose(fields)
    assert (found.verdict, margin(found)) == (verdict, room)


def test_what_is_missing_is_said() -> None:
    found = nose(f"{PAPERS}, setup: {{mass: 299 kg}}, result: {{pull: 18 kN}}")
    assert "a valid test 'nose': its set-up (setup.mass >= 300 kg) is not met" in found.reason
    assert only("", INPUTS + NOSE).reason.endswith("the record of test 'nose'")
    assert nose("report: T1, setup: {mass: 300 kg}, result: {pull: 18 kN}").reason.endswith("date of records.nose")


@pytest.mark.parametrize(("day", "said"), [(date(2027, 1, 9), "open"), (date(2027, 1, 10), "complies")])
def test_a_test_of_a_later_day_is_none_yet(day: date, said: str) -> None:
    assert nose(f"{PAPERS}, setup: {{mass: 300 kg}}, result: {{pull: 18 kN}}", on=day).verdict == said


def test_the_set_up_has_no_margin_and_the_result_has_the_tolerance() -> None:
    rules = NOSE.replace("20 kN}", "20 kN, tolerance: 500 N, rounding: {to: 1 kN, how: down}}")
    found = nose(f"{PAPERS}, setup: {{mass: 300 kg}}, result: {{pull: 20.9 kN}}", rules)
    assert (found.verdict, str(found.margin)) == ("complies", "0.5 kN")
    assert [(part.kind, part.margin is None) for part in found.parts] == [("record", True), ("comparison", False)]
    assert found.ruled is not None
    assert str(found.ruled.margin) == "-0.9 kN"


RUNS = "rules:\n  it: {record: {name: nose, setup: setup.mass >= 300 kg, require: result.pull <= 20 kN, runs: 2}}\n"


@pytest.mark.parametrize(
    ("runs", "verdict", "room"),
    [
        ({"a": (300, 18), "b": (305, 19)}, "complies", 1),
        ({"a": (300, 18), "b": (305, 22)}, "breach", -2),
        ({"a": (300, 18), "b": (290, 19)}, "open", None),
        ({"a": (300, 18), "b": (290, 25), "c": (301, 19)}, "complies", 1),
        ({"a": (300, 22), "b": (290, 19)}, "breach", -2),
        ({"a": (300, 18)}, "open", None),
    ],
)
def test_every_valid_run_must_meet_and_void_ones_do_not_count(
    runs: dict[str, tuple[int, int]], verdict: str, room: int | None
) -> None:
    said = ", ".join(f"{k}: {{setup: {{mass: {m} kg}}, result: {{pull: {p} kN}}}}" for k, (m, p) in runs.items())
    found = nose(f"{PAPERS}, runs: {{{said}}}", RUNS)
    assert (found.verdict, margin(found)) == (verdict, room)


def test_a_run_may_have_papers_of_its_own() -> None:
    run = "setup: {mass: 300 kg}, result: {pull: 18 kN}"
    own = f"a: {{{run}, date: 2027-01-02, report: A}}"
    assert nose(f"runs: {{{own}, b: {{{run}, {PAPERS}}}}}", RUNS).verdict == "complies"
    assert nose(f"runs: {{{own}, b: {{{run}}}}}", RUNS).verdict == "open"
    assert nose("runs: {}", RUNS).verdict == "open"


EACH = "rules:\n  it: {each: a in anchors, record: {of: a, require: result.pull >= 13 kN}}\n  named: {each: a in anchors, record: {name: a.proof, require: result.pull >= 13 kN}}\n"
ANCHORS = "anchors: {left: {proof: one}, right: {proof: two}}\n"


def test_records_of_each_element_by_name_and_by_what_was_tested() -> None:
    one = f"records:\n  one: {{of: left, {PAPERS}, result: {{pull: 14 kN}}}}\n"
    both = f"{one}  two: {{of: right, {PAPERS}, result: {{pull: 13.5 kN}}}}\n"
    found = findings(check_texts(ANCHORS + both, INPUTS + EACH))
    assert {name: (f.verdict, str(f.margin)) for name, f in found.items()} == {
        "it": ("complies", "0.5 kN"), "named": ("complies", "0.5 kN"),
    }  # fmt: skip
    found = findings(check_texts(ANCHORS + one, INPUTS + EACH))
    assert {name: f.verdict for name, f in found.items()} == {"it": "open", "named": "open"}
    worse = f"{both}  again: {{of: right, {PAPERS}, result: {{pull: 12 kN}}}}\n"
    found = findings(check_texts(ANCHORS + worse, INPUTS + EACH))
    assert {name: f.verdict for name, f in found.items()} == {"it": "breach", "named": "complies"}


def test_a_branch_that_rests_on_a_test_counts_where_it_is_claimed() -> None:
    rules = "rules:\n  it:\n    branches:\n      wide: {require: dimensions.wheelbase >= 3 m}\n      tested: {record: {name: nose, require: result.pull <= 20 kN}}\n"
    car = f"dimensions: {{wheelbase: 2 m}}\nrecords: {{nose: {{{PAPERS}, result: {{pull: 18 kN}}}}}}\n"
    assert only(car, INPUTS + rules).verdict == "breach"
    assert only(f"{car}claims: {{it: tested}}\n", INPUTS + rules).verdict == "complies"


def test_a_declaration_for_one_record_leaves_the_fields_of_every_record() -> None:
    inputs = "inputs: {records.nose.result.pull: {unit: kN, meaning: Pull}}\n"
    found = only(
        f"records: {{nose: {{{PAPERS}, basis: measured, result: {{pull: 18 kN}}}}}}\n",
        inputs + NOSE.replace("setup: setup.mass >= 300 kg, ", ""),
    )
    assert (found.verdict, margin(found)) == ("complies", 2)


def test_what_every_record_has_is_not_an_unused_input_of_the_rule_book() -> None:
    book = Path(__file__).parents[2] / "rulesets_demo" / "homologation.ruleset.yaml"
    assert [item for part in proofread([book]).books for item in part.findings if item.code == "unused-name"] == []
