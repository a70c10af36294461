"""Rules over elements: when none takes part, when the rule as a whole does not apply, and what is stated `none`."""

from __future__ import annotations

import pytest
from small_files import check_texts, findings, only, refused

TYRES = "tyres: {front: {width: 300 mm}, rear: {width: 300 mm}}\n"


@pytest.mark.parametrize(
    ("empty", "said"),
    [("open", "open"), ("complies", "complies"), ("breach", "breach"), ("not applicable", "not applicable")],
)
@pytest.mark.parametrize("where", ["t.width > 400 mm", "1 > 2", "t.width > 299 mm and t.width < 300 mm"])
def test_nothing_left_behind_where_is_empty_whether_by_word_or_by_number(empty: str, said: str, where: str) -> None:
    rule = f"{{each: t in tyres where {where}, empty: {empty}, require: t.width <= 500 mm}}"
    assert only(TYRES, f"rules: {{it: {rule}}}\n").verdict == said


def test_left_out_means_open() -> None:
    rule = "{each: t in tyres where t.width > 400 mm, require: t.width <= 500 mm}"
    found = only(TYRES, f"rules: {{it: {rule}}}\n")
    assert (found.verdict, found.reason) == ("open", "missing: an element that the rule is about")


def test_one_that_takes_part_is_enough() -> None:
    rule = "{each: t in tyres where t.width > 299 mm, empty: breach, require: t.width <= 500 mm}"
    assert only(TYRES, f"rules: {{it: {rule}}}\n").verdict == "complies"


def test_unknown_whether_any_takes_part_is_open() -> None:
    rule = "{each: t in tyres where t.width > 299 mm, empty: complies, require: t.width <= 500 mm}"
    assert only("tyres: {front: {}, rear: {}}\n", f"rules: {{it: {rule}}}\n").verdict == "open"


@pytest.mark.parametrize("design", ["", "aero_surfaces: {}\n", "aero_surfaces: none\n"])
@pytest.mark.parametrize(("axle", "said"), [("rear", "not applicable"), ("front", "open"), ("none", "open")])
def test_a_condition_on_the_whole_car_holds_without_elements_too(design: str, axle: str, said: str) -> None:
    rule = "{when: options.driven_axle == front, each: s in aero_surfaces, require: s.drag_area <= 1 m^2}"
    assert only(f"options: {{driven_axle: {axle}}}\n{design}", f"rules: {{it: {rule}}}\n").verdict == said


def test_a_condition_on_elements_says_nothing_where_there_are_none() -> None:
    rule = "{when: s.kind == wing, each: s in aero_surfaces, empty: breach, require: s.drag_area <= 1 m^2}"
    assert only("aero_surfaces: {}\n", f"rules: {{it: {rule}}}\n").verdict == "breach"


def test_what_is_stated_none_is_no_element() -> None:
    design = "aero_surfaces: {wing: {kind: wing, drag_area: 1 m^2}, mirror: none}\n"
    ruleset = 'rules: {s: {require: "sum(s.drag_area for s in aero_surfaces) <= 2 m^2"}, it: {require: not present(aero_surfaces.mirror)}}\n'
    found = findings(check_texts(design, ruleset))
    assert [item.verdict for item in found.values()] == ["complies", "complies"]


def test_two_loops_have_two_variables() -> None:
    found = refused("", "rules: {it: {each: [t in tyres, t in corners], require: t.width <= 1 mm}}\n")
    assert "name-taken" in [item.code for item in found]


@pytest.mark.parametrize(
    ("claims", "said"), [("", "open"), ("claims: {it: judged}\n", "open"), ("claims: {it: paper}\n", "open")]
)
def test_branches_that_all_rest_on_papers_wait_for_a_claim(claims: str, said: str) -> None:
    branches = "{paper: {evidence: {kind: certificate, name: a}}, judged: {judgement: Is it sound?}}"
    found = only(claims, f"rules: {{it: {{branches: {branches}}}}}\n")
    assert found.verdict == said
    assert ("claims.it" in found.reason) == (claims == "")
