"""Decision rules through the whole program: what guard bands and worst cases make of a verdict."""

from __future__ import annotations

from fractions import Fraction

import pytest
from small_files import RULES, Report, check_files, check_texts, findings, margin, only, require

from rulecheck.outcome.results import Finding

HOUSE = "house: Fen office\ndecision: {rule: guarded, coverage: 3}\n"


def decided(decision: str, condition: str, width: str, more: str = "") -> Finding:
    """The finding of one rule on the overall width under a decision rule."""
    rules = f"rules:\n  it:\n    decision: {decision}\n    require: {condition}\n{more}"
    return only(f"dimensions: {{overall_width: {width}}}\n", rules)


@pytest.mark.parametrize(
    ("width", "verdict"),
    [
        ("1899 mm ± 1 mm (k=2)", "complies"),
        ("1899 mm ± 1.0000000001 mm (k=2)", "unproven"),
        ("1900 mm ± 1 mm (k=2)", "unproven"),
        ("1900.9 mm ± 1 mm (k=2)", "unproven"),
        ("1901 mm ± 1 mm (k=2)", "breach"),
        ("1899.999 mm", "complies"),
        ("1900.001 mm", "breach"),
        ("1899 mm +0.5/-3 mm", "complies"),
    ],
)
def test_the_guard_band_is_exact(width: str, verdict: str) -> None:
    found = decided("guarded", "dimensions.overall_width <= 1900 mm", width)
    assert found.verdict == verdict


def test_a_margin_inside_the_guard_band_is_shown_with_the_reason() -> None:
    found = decided("guarded", "dimensions.overall_width <= 1900 mm", "1899.5 mm ± 1 mm (k=2)")
    assert found.verdict == "unproven"
    assert found.reason.startswith("within uncertainty: the margin is less than its guard band")
    assert margin(found) == Fraction(1, 2)
    assert found.spread is not None
    assert found.spread.guard is not None
    assert found.spread.guard.exact == "1"


@pytest.mark.parametrize(("coverage", "verdict"), [("1.8", "complies"), ("2", "complies"), ("2.001", "unproven")])
def test_the_coverage_of_a_guard_band_is_the_rules(coverage: str, verdict: str) -> None:
    found = decided(
        f"{{rule: guarded, coverage: {coverage}}}", "dimensions.overall_width <= 1900 mm", "1899 mm ± 1 mm (k=2)"
    )
    assert found.verdict == verdict


def test_a_measured_value_without_uncertainty_is_open_and_a_breach_stays_one() -> None:
    silent = "{value: %s, basis: measured}"
    found = decided("guarded", "dimensions.overall_width <= 1900 mm", silent % "1890 mm")
    assert (found.verdict, found.reason) == ("open", "missing: uncertainty of dimensions.overall_width")
    assert decided("guarded", "dimensions.overall_width <= 1900 mm", silent % "1910 mm").verdict == "breach"
    assert decided("worst case", "dimensions.overall_width <= 1900 mm", silent % "1890 mm").verdict == "complies"


@pytest.mark.parametrize(
    ("width", "verdict"),
    [
        ("1898 mm +2/-1 mm", "complies"),
        ("1898 mm +2.001/-1 mm", "breach"),
        ("1901 mm +0/-2 mm", "breach"),
        ("1899 mm ± 1 mm", "complies"),
        ("1899 mm ± 1.001 mm", "unproven"),
        ("1900.5 mm ± 1 mm", "unproven"),
        ("1902 mm ± 1 mm", "breach"),
    ],
)
def test_the_worst_case_decides(width: str, verdict: str) -> None:
    assert decided("worst case", "dimensions.overall_width <= 1900 mm", width).verdict == verdict


def test_a_breach_by_tolerance_says_so() -> None:
    found = decided("worst case", "dimensions.overall_width <= 1900 mm", "1899 mm +2/-1 mm")
    assert (found.verdict, found.reason) == ("breach", "its tolerances allow a breach: the least margin is -1 mm")
    assert margin(found) == 1


def test_the_limit_itself_under_a_strict_comparison() -> None:
    assert decided("worst case", "dimensions.overall_width < 1900 mm", "1898 mm +2/-1 mm").verdict == "breach"
    assert decided("guarded", "dimensions.overall_width < 1900 mm", "1899 mm ± 1 mm (k=2)").verdict == "complies"


def test_uncertain_conditions_leave_it_unproven_whether_a_rule_applies() -> None:
    rules = (
        "rules:\n  it:\n    decision: guarded\n    when: dimensions.overall_width >= 1800 mm\n"
        "    require: dimensions.wheelbase >= 2 m\n"
    )
    inside = only("dimensions: {overall_width: 1800.5 mm ± 1 mm (k=2), wheelbase: 3 m}\n", rules)
    beyond = only("dimensions: {overall_width: 1802 mm ± 1 mm (k=2), wheelbase: 3 m}\n", rules)
    below = only("dimensions: {overall_width: 1798 mm ± 1 mm (k=2), wheelbase: 3 m}\n", rules)
    assert [item.verdict for item in (inside, beyond, below)] == ["unproven", "complies", "not applicable"]


def test_alternatives_need_but_one_that_is_proved() -> None:
    condition = "dimensions.overall_width <= 1900 mm or dimensions.overall_width <= 1950 mm"
    assert decided("guarded", condition, "1899.9 mm ± 1 mm (k=2)").verdict == "complies"
    both = "dimensions.overall_width <= 1900 mm and dimensions.overall_width <= 1950 mm"
    assert decided("guarded", both, "1899.9 mm ± 1 mm (k=2)").verdict == "unproven"


def test_a_rule_that_refers_to_another_is_not_proved_by_it_within_uncertainty() -> None:
    rules = (
        "decision: guarded\nrules:\n  width: {decision: simple, require: dimensions.overall_width <= 1900 mm}\n"
        "  it: {require: rule(width)}\n"
    )
    found = findings(check_texts("dimensions: {overall_width: 1899.9 mm ± 1 mm (k=2)}\n", rules))
    assert (found["width"].verdict, found["it"].verdict) == ("complies", "unproven")


@pytest.mark.parametrize(
    ("of_rule", "of_book", "of_house", "verdict"),
    [
        ("", "", HOUSE, "unproven"),
        ("", "decision: guarded\n", HOUSE, "complies"),
        ("", "decision: simple\n", HOUSE, "complies"),
        ("decision: {rule: guarded, coverage: 4}, ", "decision: simple\n", "", "unproven"),
        ("decision: simple, ", "decision: {rule: guarded, coverage: 4}\n", HOUSE, "complies"),
        ("", "", "", "complies"),
    ],
)
def test_rule_before_rule_book_before_house(of_rule: str, of_book: str, of_house: str, verdict: str) -> None:
    files = {
        "car.design.yaml": "design: Heron 4\nrulesets: [cup.ruleset.yaml]\ndimensions: {overall_width: 1899 mm ± 1 mm (k=2)}\n",
        "cup.ruleset.yaml": f"{RULES}{of_book}rules:\n  it: {{{of_rule}require: dimensions.overall_width <= 1900 mm}}\n",
    }
    report: Report = check_files({**files, **({"rulecheck.yaml": of_house} if of_house else {})})
    assert findings(report)["it"].verdict == verdict


def test_the_decision_of_a_rule_book_holds_for_what_it_extends() -> None:
    files = {
        "car.design.yaml": "design: H\nrulesets: [top.ruleset.yaml]\ndimensions: {overall_width: 1899.9 mm ± 1 mm (k=2)}\n",
        "top.ruleset.yaml": "ruleset: Top\nextends: low.ruleset.yaml\ndecision: guarded\n",
        "low.ruleset.yaml": (
            "ruleset: Low\nrules:\n  mine: {decision: simple, require: dimensions.overall_width <= 1900 mm}\n"
            "  theirs: {require: dimensions.overall_width <= 1900 mm}\n"
        ),
    }
    found = findings(check_files(files))
    assert (found["mine"].verdict, found["theirs"].verdict) == ("complies", "unproven")


def test_kinks_and_jumps_are_decided_over_the_box() -> None:
    car = "dimensions: {front_track: 1500 mm ± 1 mm (k=2), rear_track: 1500 mm ± 1 mm (k=2)}\n"
    near = "decision: guarded\nrules:\n  it: {require: abs(dimensions.front_track - dimensions.rear_track) <= %s mm}\n"
    assert [only(car, near % width).verdict for width in ("2", "1.9")] == ["complies", "unproven"]
    jump = "decision: guarded\nrules:\n  it: {require: 'floor(dimensions.front_track, 10 mm) <= %s mm'}\n"
    away = "dimensions: {front_track: 1505 mm ± 1 mm (k=2)}\n"
    assert [only(away, jump % limit).verdict for limit in ("1500", "1490")] == ["complies", "breach"]
    assert only(car, jump % "1500").verdict == "unproven"


def test_spread_of_a_value_that_a_state_sets_counts() -> None:
    car = (
        "dimensions: {overall_width: 1800 mm}\n"
        "states: {ride: {low: {dimensions.overall_width: 1899.5 mm ± 1 mm (k=2)}, high: {dimensions.overall_width: 1899 mm}}}\n"
    )
    rules = (
        "states_needed: {ride: [low, high]}\ndecision: guarded\n"
        "rules:\n  it: {states: every, require: dimensions.overall_width <= 1900 mm}\n"
    )
    found = only(car, rules)
    assert (found.verdict, dict(found.binding.state) if found.binding else None) == ("unproven", {"ride": "low"})
    assert found.spread is not None
    assert [item.path for item in found.spread.contributors] == ["dimensions.overall_width (ride low)"]


def test_without_spread_every_decision_rule_says_the_same() -> None:
    for decision in ("simple", "guarded", "worst case"):
        found = decided(decision, "dimensions.overall_width <= 1900 mm", "1900 mm")
        assert (found.verdict, found.spread) == ("complies", None)
    assert require("dimensions.overall_width <= 1900 mm").verdict == "open"
