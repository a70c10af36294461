"""Rules for each element: what is judged, what an empty collection means, what decides a count. Margins by hand."""

from __future__ import annotations

from fractions import Fraction

import pytest
from small_files import check_texts, margin, only, refused, require

EDGES = "edges:\n  sill: {radius: 3 mm, exposed: yes}\n  lip: {radius: 1.4 mm, exposed: yes}\n  vane: {radius: 0.2 mm, exposed: no}\n"
EXPOSED = 'rules:\n  it:\n    each: "e in edges where e.exposed == yes"\n    require: e.radius >= 1.5 mm\n'

ANCHORS = """\
inputs:
  anchors:
    kind: collection
    meaning: Anchors of the harness
    element:
      strength: {unit: kN, meaning: Proof load}
"""


def test_the_worst_element_is_named() -> None:
    # 1.4 mm - 1.5 mm = -0.1 mm; the vane takes no part.
    found = only(EDGES, EXPOSED)
    assert (found.verdict, margin(found)) == ("breach", Fraction(-1, 10))
    assert found.binding is not None
    assert found.binding.element == "lip"
    assert {part.element for part in found.parts} == {"sill", "lip"}


def test_the_worst_element_is_the_one_with_the_least_relative_margin() -> None:
    # 10 mm of 400 mm is less than 5 mm of 100 mm: 2.5 % against 5 %.
    declared = "inputs: {bars: {kind: collection, meaning: Bars, element: {length: {unit: mm, meaning: l}, most: {unit: mm, meaning: m}}}}\n"
    rule = 'rules:\n  it: {each: b in bars, require: "b.length <= b.most"}\n'
    found = only(
        "bars:\n  short: {length: 95 mm, most: 100 mm}\n  long: {length: 390 mm, most: 400 mm}\n", declared + rule
    )
    assert (found.verdict, margin(found)) == ("complies", 10)
    assert found.binding is not None
    assert found.binding.element == "long"


@pytest.mark.parametrize(
    ("empty", "said"),
    [
        ("", "open"),
        ("    empty: open\n", "open"),
        ("    empty: complies\n", "complies"),
        ("    empty: breach\n", "breach"),
        ("    empty: not applicable\n", "not applicable"),
    ],
)
@pytest.mark.parametrize("design", ["edges: {}\n", "edges:\n  vane: {radius: 0.2 mm, exposed: no}\n"])
def test_what_an_empty_collection_means(empty: str, said: str, design: str) -> None:
    assert only(design, EXPOSED + empty).verdict == said


@pytest.mark.parametrize("empty", ["", "    empty: complies\n", "    empty: not applicable\n", "    empty: breach\n"])
def test_an_absent_collection_is_open_whatever_empty_says(empty: str) -> None:
    found = only("", EXPOSED + empty)
    assert found.verdict == "open"
    assert "edges" in found.reason


def test_a_collection_stated_none_is_an_empty_one() -> None:
    assert only("edges: none\n", EXPOSED + "    empty: complies\n").verdict == "complies"


@pytest.mark.parametrize("radius", ["2 mm", "1 mm"], ids=["it would hold", "it would fail"])
def test_an_element_of_which_it_is_unknown_whether_it_takes_part_is_open(radius: str) -> None:
    design = f"edges:\n  sill: {{radius: 3 mm, exposed: yes}}\n  lip: {{radius: {radius}}}\n"
    assert only(design, EXPOSED).verdict == "open"


def test_a_breach_outweighs_an_element_that_is_open() -> None:
    design = "edges:\n  sill: {radius: 1 mm, exposed: yes}\n  lip: {exposed: yes}\n"
    assert only(design, EXPOSED).verdict == "breach"


def test_pairs_take_each_two_once() -> None:
    design = "points:\n  a: 0 0 0 mm\n  b: 300 400 0 mm\n  c: 300 0 0 mm\n"
    found = only(design, 'rules:\n  it: {each: "p, q in pairs(points)", require: "distance(p, q) >= 250 mm"}\n')
    # a-b 500 mm, a-c 300 mm, b-c 400 mm: the nearest leaves 50 mm.
    assert (found.verdict, margin(found)) == ("complies", 50)
    assert len(found.parts) == 3


def test_two_loops_are_a_product() -> None:
    design = "points:\n  a: 0 0 0 mm\n  b: 0 0 10 mm\nedges:\n  sill: {radius: 3 mm}\n  lip: {radius: 2 mm}\n"
    rule = 'rules:\n  it: {each: ["e in edges", "p in points"], require: "e.radius + p.z <= 20 mm"}\n'
    found = only(design, rule)
    assert (found.verdict, margin(found), len(found.parts)) == ("complies", 7, 4)


def test_a_list_of_items_is_a_collection_too() -> None:
    rule = 'rules:\n  it: {each: "t in [corners.front_left, corners.front_right]", require: "t.width <= 300 mm"}\n'
    design = "corners:\n  front_left: {width: 290 mm}\n  front_right: {width: 295 mm}\n"
    found = only(design, rule)
    assert (found.verdict, margin(found)) == ("complies", 5)


def test_a_required_item_that_is_not_there_is_open() -> None:
    rule = "rules:\n  it: {each: t in tyres, require: t.width <= 356 mm}\n"
    assert only("tyres:\n  front: {width: 300 mm}\n", rule).verdict == "open"
    assert only("tyres:\n  front: {width: 300 mm}\n  rear: {width: 350 mm}\n", rule).verdict == "complies"
    assert only("tyres:\n  front: {width: 360 mm}\n", rule).verdict == "breach"


LAMPS = "inputs: {lamps: {kind: collection, meaning: Lamps, items: [left, right], element: {area: {unit: cm^2, meaning: a}}}}\n"


@pytest.mark.parametrize(
    ("lamps", "least", "most"),
    [
        ("{left: {area: 3 cm^2}, right: {area: 3 cm^2}}", "complies", "breach"),
        ("{left: {area: 3 cm^2}}", "open", "open"),
        ("{left: {area: 3 cm^2}, right: none}", "open", "open"),
        ("{left: {area: 3 cm^2}, middle: {area: 3 cm^2}}", "complies", "breach"),
        ("{}", "open", "open"),
        ("none", "open", "open"),
    ],
)
def test_a_required_item_that_is_not_there_is_not_counted_as_there(lamps: str, least: str, most: str) -> None:
    assert require("count(for l in lamps) >= 2", f"lamps: {lamps}\n", LAMPS).verdict == least
    assert require("count(for l in lamps) <= 1", f"lamps: {lamps}\n", LAMPS).verdict == most


def test_at_least_so_many_items() -> None:
    declared = ANCHORS.replace("    element:", "    at_least: 3\n    element:")
    rule = "rules:\n  it: {each: a in anchors, require: a.strength >= 10 kN}\n"
    two = "anchors:\n  l: {strength: 12 kN}\n  r: {strength: 12 kN}\n"
    assert only(two, declared + rule).verdict == "open"
    assert only(two + "  m: {strength: 11 kN}\n", declared + rule).verdict == "complies"


# --- counts ----------------------------------------------------------------------------------------------------------


def anchors(*strengths: str) -> str:
    lines = [f"  a{n}: {{{f'strength: {text}' if text else ''}}}" for n, text in enumerate(strengths)]
    return "anchors:\n" + "\n".join(lines) + "\n"


@pytest.mark.parametrize(
    ("strengths", "condition", "said"),
    [
        (("13 kN", "13 kN", ""), ">= 2", "complies"),
        (("13 kN", "13 kN", ""), ">= 3", "open"),
        (("13 kN", "13 kN", ""), ">= 4", "breach"),
        (("13 kN", "13 kN", ""), "<= 3", "complies"),
        (("13 kN", "13 kN", ""), "<= 2", "open"),
        (("13 kN", "13 kN", ""), "<= 1", "breach"),
        (("13 kN", "13 kN", ""), "== 2", "open"),
        (("13 kN", "13 kN", ""), "== 5", "breach"),
        (("13 kN", "12 kN", "14 kN"), "== 2", "complies"),
    ],
)
def test_a_count_with_unknown_elements_decides_where_its_interval_does(
    strengths: tuple[str, ...], condition: str, said: str
) -> None:
    found = require(f"count(for a in anchors where a.strength >= 13 kN) {condition}", anchors(*strengths), ANCHORS)
    assert found.verdict == said


def test_the_margin_of_a_count_is_a_number() -> None:
    strong = anchors("13 kN", "14 kN", "15 kN", "9 kN")
    found = require("count(for a in anchors where a.strength >= 13 kN) >= 2", strong, ANCHORS)
    assert (found.verdict, margin(found)) == ("complies", 1)


@pytest.mark.parametrize(
    ("condition", "design", "said"),
    [
        ("sum(b.mass for b in ballast) <= 20 kg", "ballast:\n  a: {mass: 12 kg}\n  b: {mass: 7.5 kg}\n", "complies"),
        ("sum(b.mass for b in ballast) <= 20 kg", "ballast:\n  a: {mass: 12 kg}\n  b: {sealed: yes}\n", "open"),
        ("sum(b.mass for b in ballast) <= 20 kg", "ballast:\n  a: {mass: 21 kg}\n  b: {sealed: yes}\n", "open"),
        ("sum(b.mass for b in ballast) <= 20 kg", "ballast: {}\n", "complies"),
        ("sum(b.mass for b in ballast) <= 20 kg", "", "open"),
        ("count(for b in ballast) <= 2", "", "open"),
        ("count(for b in ballast) <= 2", "ballast: {}\n", "complies"),
        ("count(for b in ballast) <= 2", "ballast: none\n", "complies"),
        ("max(b.mass for b in ballast) <= 20 kg", "ballast: {}\n", "unproven"),
        ("every(b.sealed for b in ballast)", "ballast: {}\n", "complies"),
        ("every(b.sealed for b in ballast)", "ballast:\n  a: {sealed: yes}\n  b: {sealed: no}\n", "breach"),
        ("every(b.sealed for b in ballast)", "ballast:\n  a: {mass: 1 kg}\n  b: {sealed: no}\n", "breach"),
        ("every(b.sealed for b in ballast)", "ballast:\n  a: {mass: 1 kg}\n  b: {sealed: yes}\n", "open"),
        ("some(b.sealed for b in ballast)", "ballast:\n  a: {mass: 1 kg}\n  b: {sealed: yes}\n", "complies"),
        ("some(b.sealed for b in ballast)", "ballast:\n  a: {mass: 1 kg}\n  b: {sealed: no}\n", "open"),
        ("some(b.sealed for b in ballast)", "ballast: {}\n", "breach"),
    ],
)
def test_aggregates_over_what_is_missing_or_empty(condition: str, design: str, said: str) -> None:
    assert require(condition, design).verdict == said


def test_mean_and_deviation_by_hand() -> None:
    # 1, 2, 4 and 5 kg: mean 3 kg; sample deviation sqrt((4 + 1 + 1 + 4) / 3) kg = sqrt(10/3) kg, about 1.826 kg.
    design = "ballast:\n  a: {mass: 1 kg}\n  b: {mass: 2 kg}\n  c: {mass: 4 kg}\n  d: {mass: 5 kg}\n"
    assert margin(require("mean(b.mass for b in ballast) <= 3.5 kg", design)) == Fraction(1, 2)
    assert require("deviation(b.mass for b in ballast) <= 1.826 kg", design).verdict == "complies"
    assert require("deviation(b.mass for b in ballast) <= 1.825 kg", design).verdict == "breach"
    assert margin(require("share(for b in ballast where b.mass > 3 kg) >= 40 %", design)) == 10


# --- when, groups, unless --------------------------------------------------------------------------------------------

WIDE = "    require: dimensions.overall_width <= 1900 mm\n"


@pytest.mark.parametrize(
    ("design", "said"),
    [
        ("powertrain: {kind: electric}\ndimensions: {overall_width: 1950 mm}\n", "breach"),
        ("powertrain: {kind: hybrid}\ndimensions: {overall_width: 1950 mm}\n", "not applicable"),
        ("dimensions: {overall_width: 1950 mm}\n", "open"),
        ("dimensions: {overall_width: 1850 mm}\n", "open"),
        ("powertrain: {kind: electric}\n", "open"),
        ("powertrain: {kind: hybrid}\n", "not applicable"),
    ],
)
@pytest.mark.parametrize(
    "rule",
    [
        f"rules:\n  it:\n    when: powertrain.kind == electric\n{WIDE}",
        f"groups: {{volts: {{when: powertrain.kind == electric, rules: [it]}}}}\nrules:\n  it:\n{WIDE}",
    ],
    ids=["when", "group"],
)
def test_a_condition_of_a_rule_or_its_group(rule: str, design: str, said: str) -> None:
    assert only(design, rule).verdict == said


def test_a_group_and_a_condition_of_its_own_are_both_asked() -> None:
    rule = (
        "groups: {volts: {when: powertrain.kind == electric, rules: [it]}}\n"
        f"rules:\n  it:\n    when: powertrain.power >= 100 kW\n{WIDE}"
    )
    wide = "dimensions: {overall_width: 1950 mm}\n"
    assert only(wide + "powertrain: {kind: electric, power: 120 kW}\n", rule).verdict == "breach"
    assert only(wide + "powertrain: {kind: electric, power: 90 kW}\n", rule).verdict == "not applicable"
    assert only(wide + "powertrain: {power: 90 kW}\n", rule).verdict == "not applicable"
    assert only(wide + "powertrain: {power: 120 kW}\n", rule).verdict == "open"


def test_a_condition_near_its_threshold_is_noted() -> None:
    rule = f"rules:\n  it:\n    when: powertrain.power >= 100 kW\n{WIDE}"
    near = only("dimensions: {overall_width: 1850 mm}\npowertrain: {power: 99.5 kW}\n", rule)
    far = only("dimensions: {overall_width: 1850 mm}\npowertrain: {power: 50 kW}\n", rule)
    assert near.verdict == far.verdict == "not applicable"
    assert (len(near.notes), len(far.notes)) == (1, 0)


UNLESS = f"rules:\n  it:\n    unless: {{when: options.power_steering == yes, because: Steering is powered}}\n{WIDE}"


@pytest.mark.parametrize(
    ("design", "said"),
    [
        ("options: {power_steering: yes}\ndimensions: {overall_width: 1950 mm}\n", "not applicable"),
        ("options: {power_steering: no}\ndimensions: {overall_width: 1950 mm}\n", "breach"),
        ("options: {power_steering: no}\ndimensions: {overall_width: 1850 mm}\n", "complies"),
        ("dimensions: {overall_width: 1950 mm}\n", "open"),
        ("dimensions: {overall_width: 1850 mm}\n", "complies"),
        ("options: {power_steering: no}\n", "open"),
        ("options: {power_steering: yes}\n", "not applicable"),
    ],
)
def test_an_exemption(design: str, said: str) -> None:
    assert only(design, UNLESS).verdict == said


def test_an_exempt_rule_still_shows_its_margin() -> None:
    found = only("options: {power_steering: yes}\ndimensions: {overall_width: 1950 mm}\n", UNLESS)
    assert (found.reason, margin(found)) == ("Steering is powered", -50)


def test_an_exemption_is_judged_for_each_element() -> None:
    rule = (
        'rules:\n  it:\n    each: e in edges\n    unless: {when: "e.exposed == no", because: Nobody meets it}\n'
        "    require: e.radius >= 1.5 mm\n"
    )
    found = only(EDGES, rule)
    assert (found.verdict, margin(found)) == ("breach", Fraction(-1, 10))
    only_vane = only("edges:\n  vane: {radius: 0.2 mm, exposed: no}\n", rule)
    assert (only_vane.verdict, only_vane.reason) == ("not applicable", "Nobody meets it")


@pytest.mark.parametrize(
    ("standing", "width", "said", "total"),
    [
        ("shall", "1950 mm", "breach", "breach"),
        ("should", "1950 mm", "not followed", "not applicable"),
        ("should", "1850 mm", "complies", "not applicable"),
        ("may", "1950 mm", "not applicable", "not applicable"),
        ("note", "1950 mm", "not applicable", "not applicable"),
    ],
)
def test_standing(standing: str, width: str, said: str, total: str) -> None:
    report = check_texts(
        f"dimensions: {{overall_width: {width}}}\n", f"rules:\n  it:\n    standing: {standing}\n{WIDE}"
    )
    assert (report.rules[0].verdict, report.verdict) == (said, total)


def test_a_fault_of_the_condition_is_found_though_there_is_no_element() -> None:
    found = refused("edges: {}\n", "rules:\n  it: {each: e in edges, require: e.radiuss >= 1 mm}\n")
    assert [item.code for item in found] == ["unknown-name"]
