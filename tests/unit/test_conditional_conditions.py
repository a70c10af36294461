"""Conditionals as conditions: the arm that is taken binds, with its margin. Margins by hand."""

from __future__ import annotations

from fractions import Fraction

import pytest
from small_files import check_texts, findings, margin, only, refused, require

INPUTS = (
    "inputs: {a: {unit: mm, meaning: a}, b: {unit: mm, meaning: b}, c: {unit: kg, meaning: c},\n"
    "  f: {kind: flag, meaning: f}, g: {kind: flag, meaning: g}, d: {kind: date, meaning: d}}\n"
)


@pytest.mark.parametrize(
    ("condition", "said", "room"),
    [
        ("((a <= 10 mm) if f else (c <= 4 kg))", "complies", 5),
        ("((a <= 10 mm) if not f else (c <= 4 kg))", "breach", -2),
        ("((a >= 10 mm) if f else (c <= 4 kg))", "breach", -5),
        ("not ((a <= 10 mm) if f else (c <= 4 kg))", "breach", -5),
        ("not ((a >= 10 mm) if f else (c <= 4 kg))", "complies", 5),
        ("((a <= 10 mm) if a > 1 mm else (b <= 1 mm))", "complies", 5),
        ("((a <= 10 mm) if a > 7 mm else (b <= 1 mm))", "open", None),
        ("((b <= 10 mm) if f else (a <= 10 mm))", "open", None),
        ("((a <= 10 mm) if b > 1 mm else (a <= 10 mm))", "open", None),
        ("((a <= 1 mm) if b > 1 mm else (a <= 2 mm))", "open", None),
        ("(((a <= 6 mm) if f else (a <= 7 mm)) if f else (a <= 8 mm))", "complies", 1),
        ("((a <= 10 mm) if f else (c <= 4 kg)) and c <= 9 kg", "complies", 3),
        ("((a <= 10 mm) if f else (c <= 4 kg)) or c <= 24 kg", "complies", 18),
        ("(g if f else (a <= 10 mm))", "open", None),
        ("(f if f else (a <= 10 mm))", "complies", None),
        ("((30 mm >= a >= 3 mm) if f else (a <= 10 mm))", "complies", 2),
    ],
)
def test_the_arm_that_is_taken_binds(condition: str, said: str, room: int | None) -> None:
    found = require(condition, "a: 5 mm\nc: 6 kg\nf: yes\n", INPUTS)
    assert (found.verdict, margin(found)) == (said, room)


def test_only_the_arm_that_is_taken_is_shown() -> None:
    found = require("((a <= 10 mm) if f else (c <= 4 kg))", "a: 5 mm\nc: 6 kg\nf: yes\n", INPUTS)
    assert [part.text for part in found.parts] == ["a <= 10 mm"]
    assert found.binding is not None
    assert found.binding.part == "a <= 10 mm"
    unsettled = require("((a <= 10 mm) if g else (c <= 4 kg))", "a: 5 mm\nc: 6 kg\nf: yes\n", INPUTS)
    assert [part.text for part in unsettled.parts] == ["g"]
    assert "g" in unsettled.reason


def test_a_choice_close_to_its_threshold_is_noted() -> None:
    found = require("((a <= 10 mm) if a < 5.01 mm else (a <= 3 mm))", "a: 5 mm\n", INPUTS)
    assert found.verdict == "complies"
    assert any("a < 5.01 mm" in note for note in found.notes)


def test_each_element_takes_its_own_arm() -> None:
    rule = (
        "rules:\n  it:\n    each: e in edges\n"
        "    require: ((e.radius >= 3 mm) if e.exposed == yes else (e.radius >= 1 mm))\n"
    )
    edges = "edges: {sill: {radius: 3.3 mm, exposed: yes}, lip: {radius: 1.2 mm, exposed: no}}\n"
    found = only(edges, rule)  # 0.3 / 3 = 10 % is less than 0.2 / 1 = 20 %
    assert (found.verdict, margin(found)) == ("complies", Fraction(3, 10))
    assert found.binding is not None
    assert found.binding.element == "sill"


def test_its_margin_may_be_referred_to() -> None:
    rules = (
        f"{INPUTS}rules:\n"
        "  other: {require: ((a <= 10 mm) if f else (b <= 4 mm))}\n"
        "  it: {require: margin(other) >= 2 mm}\n"
        "  met: {require: rule(other)}\n"
    )
    found = only("a: 5 mm\nf: yes\n", rules)
    assert (found.verdict, margin(found)) == ("complies", 3)
    assert only("a: 5 mm\nb: 1 mm\nf: no\n", rules).verdict == "complies"
    assert only("a: 5 mm\n", rules).verdict == "open"
    assert findings(check_texts("a: 11 mm\nf: yes\n", rules))["met"].verdict == "breach"
    kinds = f"{INPUTS}rules:\n  other: {{require: ((a <= 10 mm) if f else (c <= 4 kg))}}\n  it: {{require: margin(other) >= 2 mm}}\n"
    assert [item.code for item in refused("a: 5 mm\nf: yes\n", kinds)] == ["dimension-mismatch"]


def test_a_house_reserve_is_held_against_the_arm_that_is_taken() -> None:
    condition = "((a <= 10 mm) if f else (c <= 4 kg))"
    for share, said in ((Fraction(1, 2), "complies"), (Fraction(51, 100), "tight")):
        assert require(condition, "a: 5 mm\nc: 6 kg\nf: yes\n", INPUTS, reserve=share).verdict == said


def test_its_arms_are_not_compared_with_each_other() -> None:
    condition = "((on <= d) if f else (a <= 10 mm))"
    assert margin(require(condition, "a: 4 mm\nf: no\nd: 2027-03-05\n", INPUTS)) == 6
    assert margin(require(condition, "a: 4 mm\nf: yes\nd: 2027-03-05\n", INPUTS)) == 4
    together = f"{INPUTS}rules:\n  it: {{require: {condition} and c <= 3 kg}}\n"
    assert [item.code for item in refused("a: 4 mm\n", together)] == ["scale-needed"]


@pytest.mark.parametrize("condition", ["(a if f else (a <= 3 mm))", "((a <= 3 mm) if a else (a <= 3 mm))"])
def test_its_parts_are_conditions(condition: str) -> None:
    found = refused("a: 4 mm\n", f"{INPUTS}rules:\n  it: {{require: {condition}}}\n")
    assert [item.code for item in found] == ["kind-mismatch"]


# --- limits that come to zero ----------------------------------------------------------------------------------------

MIXED = "common measure"


@pytest.mark.parametrize(
    ("condition", "said", "room", "is_mixed"),
    [
        ("a <= 10 mm and c >= 4 kg", "complies", 5, False),
        ("a >= b and a <= 10 mm", "complies", None, True),  # 5 mm above 0 mm has no share; 5 mm below 10 mm has one
        ("a >= b and c >= 4 kg", "complies", None, True),
        ("a >= b and a >= 2 * b", "complies", 5, False),  # both limits come to zero: the margins themselves
        ("a <= b and a <= 10 mm", "breach", -5, False),  # the only part that fails
        ("a <= b and a <= 4 mm", "breach", None, True),
        ("a >= b or a <= 10 mm", "complies", None, True),
        ("a <= b or a <= 10 mm", "complies", 5, False),
        ("a >= b and (a <= 10 mm or a <= b)", "complies", None, True),
        ("a >= b and f", "complies", 5, False),
        ("a <= b and not f", "breach", None, False),
        ("b <= a <= 10 mm", "complies", 5, False),  # a range has one scale
    ],
)
def test_margins_without_a_common_measure_are_not_ordered(
    condition: str, said: str, room: int | None, is_mixed: bool
) -> None:
    found = require(condition, "a: 5 mm\nb: 0 mm\nc: 6 kg\nf: yes\n", INPUTS)
    assert (found.verdict, margin(found)) == (said, room)
    assert any(MIXED in note for note in found.notes) == is_mixed
    assert all(part.margin is not None for part in found.parts if " " in part.text and "f" not in part.text)


def test_a_scale_gives_the_common_measure() -> None:
    rules = f"{INPUTS}rules:\n  it: {{require: a >= b and a <= 9 mm, scale: 10 mm}}\n"
    found = only("a: 5 mm\nb: 0 mm\n", rules)
    assert (found.verdict, margin(found), found.notes) == ("complies", 4, ())


def test_elements_of_which_one_has_a_limit_of_zero() -> None:
    rule = (
        "inputs: {stays: {kind: collection, meaning: Stays, element: {gap: {unit: mm, meaning: Gap}, least: {unit: mm, meaning: Least}}}}\n"
        "rules:\n  it: {each: s in stays, require: s.gap >= s.least}\n"
    )
    found = only("stays: {left: {gap: 3 mm, least: 0 mm}, right: {gap: 5 mm, least: 1 mm}}\n", rule)
    assert (found.verdict, found.margin) == ("complies", None)
    assert any(MIXED in note for note in found.notes)
    breach = only("stays: {left: {gap: -3 mm, least: 0 mm}, right: {gap: 0 mm, least: 1 mm}}\n", rule)
    assert (breach.verdict, breach.margin) == ("breach", None)
    assert any(MIXED in note for note in breach.notes)
