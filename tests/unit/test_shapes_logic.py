"""Conditions joined by `and`, `or`, `not`: what is unknown, which part binds, which margin is shown. Margins by hand."""

from __future__ import annotations

from fractions import Fraction

import pytest
from small_files import check_texts, findings, margin, only, refused, require

INPUTS = "inputs: {a: {unit: mm, meaning: a}, b: {unit: mm, meaning: b}, c: {unit: kg, meaning: c}, f: {kind: flag, meaning: f}, n: {unit: '1', meaning: n}}\n"


def said(condition: str, design: str) -> str:
    return require(condition, design, INPUTS).verdict


HOLDS, FAILS, MISSING = "a <= 10 mm", "a <= 1 mm", "b <= 10 mm"


@pytest.mark.parametrize(
    ("condition", "expected"),
    [
        (f"{HOLDS} and {MISSING}", "open"),
        (f"{FAILS} and {MISSING}", "breach"),
        (f"{HOLDS} or {MISSING}", "complies"),
        (f"{FAILS} or {MISSING}", "open"),
        (f"not {MISSING}", "open"),
        (f"not ({FAILS} and {MISSING})", "complies"),
        (f"not ({HOLDS} or {MISSING})", "breach"),
        (f"not (not {HOLDS} or not {MISSING})", "open"),
        (f"({FAILS} or {MISSING}) and {FAILS}", "breach"),
        ("b <= b", "open"),
        ("b - b <= 0 mm", "open"),
        ("0 * b <= 0 mm", "open"),
        ("(a if f else b) <= 10 mm", "open"),
        ("(a if a > 1 mm else b) <= 10 mm", "complies"),
        ("(b if a > 1 mm else a) <= 10 mm", "open"),
        ("min(a, b) <= 10 mm", "open"),
        ("f or a <= 10 mm", "complies"),
        ("f and a <= 1 mm", "breach"),
        ("f == f", "open"),
    ],
)
def test_unknown_is_a_value(condition: str, expected: str) -> None:
    assert said(condition, "a: 5 mm\n") == expected


@pytest.mark.parametrize(
    "condition",
    ["1 mm / (a - 5 mm) <= 1", "sqrt(a / 1 mm - 6) <= 3", "ln(a / 1 mm - 5) <= 3", "acos(a / 1 mm) <= 3 rad"],
)
def test_what_is_undefined_is_unproven_with_its_reason(condition: str) -> None:
    found = require(condition, "a: 5 mm\n", INPUTS)
    assert found.verdict == "unproven"
    assert found.reason


def test_missing_outweighs_undefined() -> None:
    assert said("1 mm / (a - 5 mm) <= 1 and b <= 1 mm", "a: 5 mm\n") == "open"


# --- which margin ----------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("condition", "room", "unit"),
    [
        ("30 mm <= a <= 60 mm", 10, "mm"),  # 40 is 10 above the one limit and 20 below the other
        ("a <= 50 mm and c >= 4 kg", 1, "kg"),  # 20 % against 25 %... see below: c = 5 kg gives 25 %
        ("a <= 4.2 cm and c >= 4 kg", Fraction(2, 10), "cm"),
        ("a <= 80 mm or c >= 4 kg", 40, "mm"),
        ("a >= 80 mm or c >= 6 kg", -1, "kg"),
        ("50 mm >= a", 10, "mm"),
        ("not a > 50 mm", 10, "mm"),
        ("not a >= 50 mm", 10, "mm"),
        ("a == 41 mm within 3 mm", 2, "mm"),
        ("a != 41 mm within 0.25 mm", Fraction(3, 4), "mm"),
    ],
)
def test_the_margin_that_binds(condition: str, room: int, unit: str) -> None:
    design = "a: 40 mm\nc: 5 kg\n"
    if condition == "a <= 50 mm and c >= 4 kg":
        design = "a: 30 mm\nc: 5 kg\n"  # 40 % against 25 %
    found = require(condition, design, INPUTS)
    assert found.margin is not None
    assert (margin(found), found.margin.unit) == (room, unit)


def test_the_nearer_side_of_a_range_governs_though_its_limit_is_small() -> None:
    # 8 mm above 2 mm and 90 mm below 100 mm: of one scale, 100 mm, that is 8 % and 90 %.
    found = require("2 mm <= a <= 100 mm", "a: 10 mm\n", INPUTS)
    assert (margin(found), found.relative_margin) == (8, pytest.approx(0.08))


def test_a_limit_is_the_side_without_inputs() -> None:
    found = require("1900 mm >= a", "a: 1.8 m\n", INPUTS)
    assert found.value is not None
    assert found.limit is not None
    assert (found.value.exact, found.limit.exact, found.sense, margin(found)) == ("1800", "1900", "at most", 100)
    turned = require("a >= b", "a: 12 mm\nb: 10 mm\n", INPUTS)
    assert turned.limit is not None
    assert (turned.limit.exact, turned.sense, turned.relative_margin) == ("10", "at least", pytest.approx(0.2))


def test_flags_beside_numbers() -> None:
    design = "a: 8 mm\nf: yes\n"
    assert margin(require("f and a <= 10 mm", design, INPUTS)) == 2
    assert require("f or a <= 10 mm", design, INPUTS).margin is None
    assert require("not f and a <= 10 mm", design, INPUTS).margin is None
    assert margin(require("not f or a <= 10 mm", design, INPUTS)) == 2
    assert margin(require("not f or a <= 5 mm", design, INPUTS)) == -3


def test_a_strict_limit_at_zero_is_worse_than_one_that_is_met() -> None:
    found = require("a <= 10 mm and a < 10 mm", "a: 10 mm\n", INPUTS)
    assert (found.verdict, margin(found), found.strict) == ("breach", 0, True)


def test_counts_need_no_width() -> None:
    assert said("n == 3", "n: 3\n") == "complies"
    assert said("n != 3", "n: 3\n") == "breach"
    assert [item.code for item in refused("a: 3 mm\n", INPUTS + "rules:\n  it: {require: a == 3 mm}\n")] == [
        "formula-syntax"
    ]


def test_a_limit_of_zero_needs_a_scale_for_a_relative_margin() -> None:
    found = require("a - b >= 0 mm", "a: 5 mm\nb: 3 mm\n", INPUTS)
    assert (margin(found), found.relative_margin) == (2, None)
    scaled = only("a: 5 mm\nb: 3 mm\n", f"{INPUTS}rules:\n  it: {{require: a - b >= 0 mm, scale: 10 mm}}\n")
    assert scaled.relative_margin == pytest.approx(0.2)


def test_margins_without_a_common_measure_are_refused() -> None:
    rule = f"{INPUTS}rules:\n  it: {{require: a - b >= 0 mm and c >= 1 kg}}\n"
    assert [item.code for item in refused("a: 5 mm\nb: 3 mm\nc: 2 kg\n", rule)] == ["scale-needed"]


@pytest.mark.parametrize(
    ("room", "said", "share"),
    [("8 mm", "complies", "1/10"), ("9.5 mm", "tight", "1/10"), ("9.5 mm", "complies", "1/20")],
)
def test_the_reserve_of_the_house(room: str, said: str, share: str) -> None:
    found = only(f"a: {room}\n", f"{INPUTS}rules:\n  it: {{require: a <= 10 mm}}\n", reserve=Fraction(share))
    assert found.verdict == said


# --- references between rules ----------------------------------------------------------------------------------------

WIDTH = """\
rules:
  width: {require: a <= 1900 mm}
  it: {require: rule(width)}
"""


@pytest.mark.parametrize(
    ("design", "expected"), [("a: 1890 mm\n", "complies"), ("a: 1910 mm\n", "breach"), ("", "open")]
)
def test_a_rule_that_refers_to_another(design: str, expected: str) -> None:
    assert only(design, INPUTS + WIDTH).verdict == expected


@pytest.mark.parametrize(("kind", "expected"), [("hybrid", "complies"), ("electric", "breach")])
def test_a_rule_that_does_not_apply_counts_as_met(kind: str, expected: str) -> None:
    rule = WIDTH.replace("a <= 1900 mm}", "a <= 1900 mm, when: powertrain.kind == electric}")
    assert only(f"a: 1910 mm\npowertrain: {{kind: {kind}}}\n", INPUTS + rule).verdict == expected


def test_a_dispensed_rule_counts_as_met() -> None:
    letter = "dispensations: {d: {rule: width, reference: L-1, until: 2027-12-31}}\n"
    assert only("a: 1910 mm\n" + letter, INPUTS + WIDTH).verdict == "complies"


def test_the_margin_of_another_rule() -> None:
    rule = INPUTS + WIDTH.replace("rule(width)", "margin(width) >= 10 mm")
    found = only("a: 1885 mm\n", rule)
    assert (found.verdict, margin(found)) == ("complies", 5)
    assert only("a: 1895 mm\n", rule).verdict == "breach"
    assert only("", rule).verdict == "open"


def test_the_margin_of_a_rule_for_each_element_is_that_of_its_worst() -> None:
    rules = "rules:\n  radii: {each: e in edges, require: e.radius >= 2 mm}\n  it: {require: margin(radii) >= 0.5 mm}\n"
    found = findings(check_texts("edges: {sill: {radius: 4 mm}, lip: {radius: 2.7 mm}}\n", rules))
    assert margin(found["radii"]) == Fraction(7, 10)
    assert (found["it"].verdict, margin(found["it"])) == ("complies", Fraction(2, 10))


@pytest.mark.parametrize(
    "rules",
    [
        "rules:\n  it: {require: rule(it)}\n",
        "rules:\n  it: {require: rule(other)}\n  other: {require: not rule(it)}\n",
        "rules:\n  it: {require: margin(other) >= 1 mm}\n  other: {require: a <= 1 mm + 0 * margin(it)}\n",
        "rules:\n  it: {require: a <= 1 mm, when: rule(it)}\n",
    ],
)
def test_circles_of_rules_are_refused(rules: str) -> None:
    assert "cycle" in {item.code for item in refused("a: 1 mm\n", INPUTS + rules)}


def test_circles_of_derived_figures_are_refused() -> None:
    rules = "derived: {p: {formula: q + 1 mm, unit: mm}, q: {formula: p - 1 mm, unit: mm}}\nrules:\n  it: {require: p <= 1 mm}\n"
    assert "cycle" in {item.code for item in refused("a: 1 mm\n", INPUTS + rules)}


# --- totals ----------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("design", "total"),
    [
        ("a: 1 mm\nb: 1 mm\n", "complies"),
        ("a: 99 mm\n", "breach"),
        ("a: 1 mm\n", "open"),
        ("a: 1 mm\nb: 0 mm\n", "unproven"),
        ("a: 99 mm\nb: 0 mm\n", "breach"),
    ],
)
def test_totals(design: str, total: str) -> None:
    rules = "rules:\n  one: {require: a <= 10 mm}\n  two: {require: 1 mm / b <= 10}\n"
    assert check_texts(design, INPUTS + rules).verdict == total
