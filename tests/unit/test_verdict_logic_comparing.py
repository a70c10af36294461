"""Comparisons in rules: strictness, which side is the limit, margins, senses and scales. Margins by hand."""

from __future__ import annotations

from fractions import Fraction

import pytest
from small_files import margin, only, refused, require

DECLARED = """\
inputs:
  a: {unit: mm, meaning: a}
  b: {unit: m, meaning: b}
  c: {unit: kg, meaning: c}
  n: {unit: "1", meaning: n}
  t: {unit: degC, meaning: t}
  f: {kind: flag, meaning: f}
  g: {kind: flag, meaning: g}
  w: {kind: text, meaning: w}
  v: {kind: text, meaning: v}
  k: {choices: [front, rear, both], meaning: k}
  o: {choices: [rear, centre], meaning: o}
  d: {kind: date, meaning: d}
  e: {kind: date, meaning: e}
lists:
  steels: [S1, "25CrMo4"]
  gauges: [2 mm, 3 mm]
"""
DESIGN = (
    "a: 40 mm\nb: 0.05 m\nc: 5 kg\nn: 3\nt: 80 degC\nrecovery: {axle: rear}\nf: yes\nk: rear\nw: S1\nd: 2027-03-04\n"
)


@pytest.mark.parametrize(
    ("operator", "low", "level", "high"),
    [
        ("<=", "complies", "complies", "breach"),
        ("<", "complies", "breach", "breach"),
        (">=", "breach", "complies", "complies"),
        (">", "breach", "breach", "complies"),
    ],
)
@pytest.mark.parametrize("negated", [False, True])
@pytest.mark.parametrize("turned", [False, True])
def test_strictness(operator: str, low: str, level: str, high: str, negated: bool, turned: bool) -> None:
    opposite = {"complies": "breach", "breach": "complies"}
    across = {"<": ">", ">": "<", "<=": ">=", ">=": "<="}
    rule = f"40 mm {across[operator]} a" if turned else f"a {operator} 40 mm"
    strict = (operator in ("<", ">")) != negated
    upper = (operator in ("<", "<=")) != negated
    for value, said in ((39, low), (40, level), (41, high)):
        found = require(f"not ({rule})" if negated else rule, f"a: {value} mm\n", DECLARED)
        assert found.verdict == (opposite[said] if negated else said)
        assert margin(found) == (40 - value if upper else value - 40)
        assert (found.strict, found.sense) == (strict, "at most" if upper else "at least")
        assert found.value is not None
        assert found.limit is not None
        assert (found.value.exact, found.limit.exact) == (str(value), "40")
        assert found.relative_margin == pytest.approx((40 - value if upper else value - 40) / 40)


@pytest.mark.parametrize(
    ("condition", "value", "limit", "sense"),
    [
        ("a <= b", "0.04", "0.05", "at most"),
        ("b >= a", "50", "40", "at least"),
        ("45 mm <= b", "50", "45", "at least"),
        ("45 mm >= a", "40", "45", "at most"),
        ("a + b <= 100 mm", "90", "100", "at most"),
        ("30 mm <= 60 mm", "30", "60", "at most"),
    ],
)
def test_which_side_is_the_limit(condition: str, value: str, limit: str, sense: str) -> None:
    found = require(condition, DESIGN, DECLARED)
    assert found.verdict == "complies"
    assert found.value is not None
    assert found.limit is not None
    assert (found.value.exact, found.limit.exact, found.sense) == (value, limit, sense)


@pytest.mark.parametrize(
    ("condition", "said", "room", "sense"),
    [
        ("a == 41 mm within 1 mm", "complies", 0, "within"),
        ("a == 41 mm within 0.9 mm", "breach", Fraction(-1, 10), "within"),
        ("41 mm == a within 3 mm", "complies", 2, "within"),
        ("a == 39 mm within 3 mm", "complies", 2, "within"),
        ("a != 41 mm within 1 mm", "breach", 0, "within"),
        ("a != 41 mm within 0.9 mm", "complies", Fraction(1, 10), "within"),
        ("not a == 41 mm within 1 mm", "breach", 0, "within"),
        ("not a != 41 mm within 1 mm", "complies", 0, "within"),
        ("n == 3", "complies", None, ""),
        ("n != 3", "breach", None, ""),
        ("n == 4", "breach", None, ""),
        ("not n == 4", "complies", None, ""),
        ("not n != 4", "breach", None, ""),
        ("3 == n", "complies", None, ""),
    ],
)
def test_equality(condition: str, said: str, room: Fraction | int | None, sense: str) -> None:
    found = require(condition, DESIGN, DECLARED)
    assert (found.verdict, margin(found), found.sense) == (said, room, sense)
    assert found.strict is (room is not None and ("!=" in condition) != ("not " in condition))
    assert found.value is not None
    assert found.limit is not None
    assert found.value.exact in ("40", "3")
    assert found.limit.exact in ("41", "39", "3", "4")


def test_the_relative_margin_of_an_equality_is_over_its_width() -> None:
    found = require("a == 41 mm within 4 mm", DESIGN, DECLARED)
    assert found.relative_margin == pytest.approx(0.75)
    assert found.margin is not None
    assert found.margin.unit == "mm"
    assert require("a == 41 mm within 0.2 cm", DESIGN, DECLARED).margin.unit == "cm"  # type: ignore[union-attr]


@pytest.mark.parametrize(
    ("condition", "said"),
    [
        ("k == rear", "complies"),
        ("rear == recovery.axle", "complies"),
        ("front == recovery.axle", "breach"),
        ("k == front", "breach"),
        ("k != front", "complies"),
        ("k != rear", "breach"),
        ("not k == front", "complies"),
        ("not k != rear", "complies"),
        ("k in [front, both]", "breach"),
        ("k in [front, rear]", "complies"),
        ("not k in [front, rear]", "breach"),
        ("o == rear", "open"),
        ('w == "S1"', "complies"),
        ('w != "S1"', "breach"),
        ("w in steels", "complies"),
        ("not w in steels", "breach"),
        ("v in steels", "open"),
        ('"S1" in steels', "complies"),
        ('"S3" in steels', "breach"),
        ("(2 mm) in gauges", "complies"),
        ("(2.5 mm) in gauges", "breach"),
        ("(a / 20) in gauges", "complies"),
        ("a in gauges", "breach"),
        ("not a in gauges", "complies"),
        ("f == yes", "complies"),
        ("f == no", "breach"),
        ("f != yes", "breach"),
        ("f != no", "complies"),
        ("g == yes", "open"),
        ("f == f", "complies"),
        ("f == (a <= 50 mm)", "complies"),
        ("f == (a <= 30 mm)", "breach"),
        ("(a <= 30 mm) == (b <= 30 mm)", "complies"),
        ("(a <= 50 mm) == (b <= 30 mm)", "breach"),
        ("(a <= 50 mm) == (b <= 60 mm)", "complies"),
        ("(a <= 30 mm) == (b <= 60 mm)", "breach"),
        ("(a <= 30 mm) == g", "open"),
        ("f == g", "open"),
    ],
)
def test_what_has_no_order(condition: str, said: str) -> None:
    found = require(condition, DESIGN, DECLARED)
    assert (found.verdict, found.margin, found.strict) == (said, None, False)
    assert found.sense == ("one of" if " in " in condition else "")


@pytest.mark.parametrize(
    ("condition", "said", "room"),
    [
        ("d >= 2027-03-04", "complies", 0),
        ("d > 2027-03-04", "breach", 0),
        ("d <= 2027-03-10", "complies", 6),
        ("2027-03-10 >= d", "complies", 6),
        ("d == 2027-03-04", "complies", None),
        ("d == 2027-03-05", "breach", None),
        ("d != 2027-03-05", "complies", None),
        ("on <= d", "complies", 3),
        ("on >= d", "breach", -3),
        ("e <= d", "open", None),
        ("d in [2027-03-04, 2027-03-05]", "complies", None),
        ("d in [2027-03-06, 2027-03-05]", "breach", None),
        ("d - on <= 3 days", "complies", 0),
        ("3 days >= d - on", "complies", 0),
        ("d - on < 3 days", "breach", 0),
        ("2 days <= d - on", "complies", 1),
    ],
)
def test_days(condition: str, said: str, room: int | None) -> None:
    found = require(condition, DESIGN, DECLARED)
    assert (found.verdict, margin(found)) == (said, room)
    assert found.relative_margin is None


def test_days_are_shown_as_dates() -> None:
    found = require("d <= 2027-03-10", DESIGN, DECLARED)
    assert (str(found.value), str(found.limit)) == ("2027-03-04", "2027-03-10")
    turned = require("2027-03-10 >= d", DESIGN, DECLARED)
    assert (str(turned.value), str(turned.limit)) == ("2027-03-04", "2027-03-10")
    for condition in ("d == 2027-03-04", "2027-03-04 == d", "not d != 2027-03-04"):
        same = require(condition, DESIGN, DECLARED)
        assert (same.verdict, str(same.value), str(same.limit)) == ("complies", "2027-03-04", "2027-03-04")
    other = require("2027-03-05 != d", DESIGN, DECLARED)
    assert (str(other.value), str(other.limit)) == ("2027-03-04", "2027-03-05")
    lengths = require("d - on <= 5 days", DESIGN, DECLARED)
    assert lengths.value is not None
    assert lengths.limit is not None
    assert (lengths.value.exact, lengths.limit.exact) == ("3", "5")


@pytest.mark.parametrize(
    ("condition", "room", "relative"),
    [
        ("20 mm <= a <= 50 mm", 10, 0.2),
        ("35 mm <= a <= 400 mm", 5, 0.0125),
        ("20 mm < a < 40 mm", 0, 0.0),
        ("not (50 mm <= a <= 60 mm)", 10, 1 / 6),
        ("not (30 mm <= a <= 60 mm)", -10, -1 / 6),
        ("-50 mm <= a <= 45 mm", 5, 0.1),
    ],
)
def test_ranges_have_one_scale(condition: str, room: int, relative: float) -> None:
    found = require(condition, DESIGN, DECLARED)
    assert margin(found) == room
    assert found.relative_margin == pytest.approx(relative)
    assert len(found.parts) == 2
    assert {part.kind for part in found.parts} == {"comparison"}


@pytest.mark.parametrize("condition", ["50 mm <= a", "not a < 50 mm"])
def test_a_part_says_what_it_is(condition: str) -> None:
    (part,) = require(condition, DESIGN, DECLARED).parts
    assert (part.kind, part.verdict, part.sense) == ("comparison", "breach", "at least")
    assert part.margin is not None
    assert part.margin.exact == "-10"


@pytest.mark.parametrize(
    ("condition", "relative"),
    [
        ("t <= 100 degC", None),
        ("a - b <= 0 mm", None),
        ("a <= b", 0.2),
        ("c <= 10 kg", 0.5),
        ("d <= 2027-03-10", None),
        ("-10 kg <= c", 1.5),
        ("a - b >= -10 mm", 0.0),
        ("a <= 0 * b + 50 mm", 0.2),
    ],
)
def test_which_limits_measure(condition: str, relative: float | None) -> None:
    found = require(condition, DESIGN, DECLARED)
    assert found.relative_margin == (None if relative is None else pytest.approx(relative))
    assert found.margin is not None


def test_a_limit_that_comes_to_zero_measures_nothing() -> None:
    found = require("a <= a - 40 mm", DESIGN, DECLARED)
    assert (margin(found), found.relative_margin) == (-40, None)
    assert require("a - 40 mm <= b - 50 mm", DESIGN, DECLARED).relative_margin is None


@pytest.mark.parametrize(("scale", "relative"), [("20 mm", 0.5), ("0.1 m", 0.1), ("2 * a", 0.125)])
def test_the_scale_of_a_rule_measures(scale: str, relative: float) -> None:
    rule = f"{DECLARED}rules:\n  it: {{require: a <= 50 mm, scale: {scale}}}\n"
    assert only(DESIGN, rule).relative_margin == pytest.approx(relative)
    wide = f"{DECLARED}rules:\n  it: {{require: 0 mm <= a <= 50 mm, scale: {scale}}}\n"
    assert only(DESIGN, wide).relative_margin == pytest.approx(relative)
    width = f"{DECLARED}rules:\n  it: {{require: a == 41 mm within 2 mm, scale: {scale}}}\n"
    assert only(DESIGN, width).relative_margin == pytest.approx(0.5)


def test_the_scale_of_a_rule_measures_parts_of_its_dimension_only() -> None:
    rule = f"{DECLARED}rules:\n  it: {{require: a - b <= 0 mm and c >= 4 kg, scale: 100 mm}}\n"
    found = only(DESIGN, rule)
    assert (margin(found), found.relative_margin) == (10, pytest.approx(0.1))
    assert sorted(part.relative_margin or 0 for part in found.parts) == [pytest.approx(0.1), pytest.approx(0.25)]


@pytest.mark.parametrize(
    "condition",
    [
        "a - b >= 0 mm and c >= 1 kg",
        "t <= 90 degC and a <= 50 mm",
        "a - b >= 0 mm or c <= 0 kg",
        "d >= on and c >= 1 kg",
    ],
)
def test_margins_without_a_common_measure(condition: str) -> None:
    assert [item.code for item in refused(DESIGN, f"{DECLARED}rules:\n  it:\n    require: {condition}\n")] == [
        "scale-needed"
    ]


@pytest.mark.parametrize(
    ("condition", "room"),
    [
        ("a - b >= -20 mm and b - a >= 0 mm", 10),
        ("a - b <= 0 mm and 2 * a - b <= 0 mm", -30),
        ("a - b <= 0 mm or 2 * a - b <= 0 mm", 10),
        ("f and a - b <= 0 mm", 10),
        ("t <= 90 degC and t >= 75 degC", 5),
    ],
)
def test_margins_of_one_dimension_need_no_scale(condition: str, room: int) -> None:
    if ">= -20 mm" in condition:
        assert [i.code for i in refused(DESIGN, f"{DECLARED}rules:\n  it:\n    require: {condition}\n")] == [
            "scale-needed"
        ]
        return
    found = require(condition, DESIGN, DECLARED)
    assert (margin(found), found.relative_margin) == (room, None)


@pytest.mark.parametrize(
    ("condition", "unit", "room"),
    [
        ("a <= 5 cm", "cm", 1),
        ("b <= 60 mm", "mm", 10),
        ("a <= b", "m", Fraction(1, 100)),
        ("b >= a", "mm", 10),
        ("a * a <= 0.1 m^2", "m^2", Fraction(984, 10000)),
        ("n <= 5", "1", 2),
        ("n * 100 % <= 500 %", "%", 200),
        ("c <= 2 * c", "kg", 5),
        ("2 * b >= 40 mm + 20 mm", "mm", 40),
    ],
)
def test_the_unit_of_a_margin(condition: str, unit: str, room: Fraction | int) -> None:
    found = require(condition, DESIGN, DECLARED)
    assert found.margin is not None
    assert (found.margin.unit, margin(found)) == (unit, room)


@pytest.mark.parametrize(
    ("condition", "said"),
    [
        ("a <= 50 mm and g", "open"),
        ("a <= 30 mm and g", "breach"),
        ("a <= 50 mm or g", "complies"),
        ("a <= 30 mm or g", "open"),
        ("not (a <= 30 mm or g)", "open"),
        ("not (a <= 50 mm and g)", "open"),
        ("not (a <= 30 mm and g)", "complies"),
        ("not (a <= 50 mm or g)", "breach"),
        ("not (a <= 50 mm and c <= 6 kg)", "breach"),
        ("not (a <= 50 mm and c <= 4 kg)", "complies"),
        ("not (a <= 30 mm or c <= 4 kg)", "complies"),
        ("not (a <= 30 mm or c <= 6 kg)", "breach"),
        ("not not a <= 50 mm", "complies"),
        ("not f", "breach"),
        ("not g", "open"),
        ("f", "complies"),
        ("f and a <= 50 mm and c <= 6 kg", "complies"),
        ("f and a <= 50 mm and c <= 4 kg", "breach"),
        ("not f or a <= 30 mm or c <= 6 kg", "complies"),
        ("not f or a <= 30 mm or c <= 4 kg", "breach"),
        ("(f or g) and not (g and not f)", "complies"),
        ("yes", "complies"),
        ("no", "breach"),
        ("yes and g", "open"),
        ("no and g", "breach"),
        ("yes or g", "complies"),
        ("no or g", "open"),
        ("f == (yes and no)", "breach"),
        ("f == (yes or no)", "complies"),
        ("f == (yes and g)", "open"),
        ("f == (no and g)", "breach"),
        ("f == (no or g)", "open"),
        ("f == (yes or g)", "complies"),
        ("f == (yes and yes)", "complies"),
        ("f == (no or no)", "breach"),
        ("f == (not g)", "open"),
        ("f == (not no)", "complies"),
        ("f == (20 mm < a < 50 mm)", "complies"),
        ("f == (20 mm < a < 40 mm)", "breach"),
    ],
)
def test_kleene_logic_in_rules(condition: str, said: str) -> None:
    assert require(condition, DESIGN, DECLARED).verdict == said


def test_flags_are_shown_as_flags() -> None:
    (part,) = require("not f", DESIGN, DECLARED).parts
    assert (part.kind, part.text, part.verdict, part.margin) == ("flag", "not f", "breach", None)
    (plain,) = require("f", DESIGN, DECLARED).parts
    assert plain.text == "f"
    (counted,) = require("n == 3", DESIGN, DECLARED).parts
    assert counted.kind == "flag"


def test_counts_say_so() -> None:
    assert require("count(for e in edges) <= 2", "edges: {}\n", DECLARED).counted
    assert not require("a <= 50 mm", DESIGN, DECLARED).counted


@pytest.mark.parametrize(
    ("condition", "said", "room"),
    [
        ("every(e.radius >= 1 mm for e in edges)", "complies", 1),
        ("every(e.radius >= 3 mm for e in edges)", "breach", -1),
        ("some(e.radius >= 3 mm for e in edges)", "complies", 1),
        ("some(e.radius >= 5 mm for e in edges)", "breach", -1),
        ("not every(e.radius >= 3 mm for e in edges)", "complies", 1),
        ("not some(e.radius >= 3 mm for e in edges)", "breach", -1),
        ("every(e.radius >= 3 mm for e in edges where e.exposed == yes)", "complies", 1),
        ("some(e.radius >= 3 mm for e in edges where e.exposed == no)", "breach", -1),
    ],
)
def test_every_and_some_keep_their_margins(condition: str, said: str, room: int) -> None:
    edges = "edges:\n  lip: {radius: 2 mm, exposed: no}\n  sill: {radius: 4 mm, exposed: yes}\n"
    found = require(condition, edges)
    assert (found.verdict, margin(found)) == (said, room)
    assert all(part.text.startswith(("lip: ", "sill: ")) for part in found.parts)


@pytest.mark.parametrize(
    ("edges", "every", "some"),
    [
        ("edges: {}\n", "complies", "breach"),
        ("", "open", "open"),
        ("edges: {lip: {radius: 2 mm}, sill: {radius: 4 mm, exposed: yes}}\n", "open", "complies"),
        ("edges: {lip: {radius: 2 mm}, sill: {radius: 4 mm, exposed: no}}\n", "open", "breach"),
        ("edges: {lip: {radius: 3 mm}, sill: {radius: 2 mm, exposed: no}}\n", "complies", "open"),
        ("edges: {lip: {radius: 3 mm}, sill: {radius: 4 mm, exposed: yes}}\n", "complies", "complies"),
    ],
)
def test_every_and_some_where_it_is_not_certain_who_takes_part(edges: str, every: str, some: str) -> None:
    taking = "(e.radius >= 3 mm for e in edges where e.exposed == yes)"
    assert require(f"every{taking}", edges).verdict == every
    assert require(f"some{taking}", edges).verdict == some


def test_margins_are_ordered_exactly() -> None:
    # 1/2 and a little more than 1/2, less apart than doubles can tell.
    found = require("2 * a <= 80.000000000000000000000000000001 mm and a <= 40 mm", "a: 20 mm\n", DECLARED)
    assert margin(found) == 20
    either = require("a <= 40 mm or 2 * a <= 80.000000000000000000000000000001 mm", "a: 20 mm\n", DECLARED)
    assert margin(either) == 40 + Fraction(1, 10**30)


@pytest.mark.parametrize(
    ("condition", "said", "part"),
    [
        ("a <= 200 mm and sqrt(2) * a <= 100 mm", "complies", "sqrt(2) * a <= 100 mm"),
        ("sqrt(2) * a <= 1 m and a <= 200 mm", "complies", "a <= 200 mm"),
        ("a <= 39 mm and sqrt(2) * a <= 10 mm", "breach", "sqrt(2) * a <= 10 mm"),
        ("sqrt(2) * a <= 56 mm and a <= 30 mm", "breach", "a <= 30 mm"),
        ("sqrt(2) * a <= 57 mm or a <= 200 mm", "complies", "a <= 200 mm"),
    ],
)
def test_margins_with_roots_are_ordered_among_the_others(condition: str, said: str, part: str) -> None:
    # 40 mm * sqrt(2) = 56.57 mm.
    found = require(condition, DESIGN, DECLARED)
    assert found.binding is not None
    assert (found.verdict, found.binding.part) == (said, part)


# --- kinds -----------------------------------------------------------------------------------------------------------

KINDS = {
    "number": "a",
    "mass": "c",
    "flag": "f",
    "text": "w",
    "date": "d",
    "days": "3 days",
    "months": "2 months",
    "item": "tyres.front",
}
MATES = {("date", "date"), ("days", "days")}


@pytest.mark.parametrize("one", KINDS)
@pytest.mark.parametrize("other", KINDS)
@pytest.mark.parametrize("operator", ["<=", "==", "!="])
def test_unlike_kinds_are_refused(one: str, other: str, operator: str) -> None:
    alike = one == other
    condition = f"{KINDS[one]} {operator} {KINDS[other]}"
    if operator != "<=" and alike and one in ("flag", "text", "date", "item"):
        assert require(condition, DESIGN, DECLARED).verdict == ("complies" if operator == "==" else "breach")
    elif operator == "<=" and alike and one in ("number", "mass", "date"):
        assert require(condition, DESIGN, DECLARED).verdict == "complies"
    else:
        faults = refused(DESIGN, f"{DECLARED}rules:\n  it:\n    require: {condition}\n")
        assert {item.code for item in faults} <= {"kind-mismatch", "dimension-mismatch", "formula-syntax"}


@pytest.mark.parametrize(
    "condition",
    [
        "f in steels", "c in gauges", "w in gauges", "d in gauges", "a in steels", "a in w", "a in [yes, no]",
        "a == 3 mm within 1 kg", "a == 3 mm within f", "a <= 3 mm within 1 mm", "a == 3 mm",
        "a", "w", "sum(e.radius for e in edges)", "count(for e in edges)", "d - on <= 2 months", "d - on <= 3 mm",
    ],
)  # fmt: skip
def test_conditions_that_are_refused(condition: str) -> None:
    assert refused(f"{DESIGN}edges: {{}}\n", f'{DECLARED}rules:\n  it:\n    require: "{condition}"\n')


@pytest.mark.parametrize(
    ("condition", "said"),
    [
        ("p == q", "breach"),
        ("p != q", "complies"),
        ("p == p", "complies"),
        ("not p == q", "complies"),
    ],
)
def test_items_are_the_same_where_they_are_one(condition: str, said: str) -> None:
    rule = f'rules:\n  it: {{each: "p, q in pairs(edges)", require: "{condition}"}}\n'
    assert only("edges: {lip: {}, sill: {}}\n", rule).verdict == said


@pytest.mark.parametrize(
    ("condition", "value", "limit"),
    [
        ("a == b within 20 mm", "40", "50"),
        ("b == a within 20 mm", "50", "40"),
        ("45 mm == a within 20 mm", "40", "45"),
        ("a == 45 mm within 20 mm", "40", "45"),
        ("30 mm == 40 mm within 20 mm", "30", "40"),
        ("n == 3", "3", "3"),
        ("4 != n", "3", "4"),
        ("3 == 3", "3", "3"),
        ("3 != 4", "3", "4"),
    ],
)
def test_which_side_is_the_limit_of_an_equality(condition: str, value: str, limit: str) -> None:
    found = require(condition, DESIGN, DECLARED)
    assert found.verdict == "complies"
    assert found.value is not None
    assert found.limit is not None
    assert (found.value.exact, found.limit.exact) == (value, limit)


@pytest.mark.parametrize(
    ("condition", "text"),
    [
        ("a <= 50 mm", "a <= 50 mm"),
        ("not a <= 30 mm", "not a <= 30 mm"),
        ("a == 41 mm within 3 mm", "a == 41 mm within 3 mm"),
        ("not a == 41 mm within 0.5 mm", "not a == 41 mm within 0.5 mm"),
        ("not not a <= 50 mm", "a <= 50 mm"),
    ],
)
def test_the_words_of_a_part(condition: str, text: str) -> None:
    (part,) = require(condition, DESIGN, DECLARED).parts
    assert (part.text, part.verdict) == (text, "complies")


@pytest.mark.parametrize(
    ("condition", "unit"),
    [
        ("a == 41 mm within 0.1 * b", "m"),
        ("a == 41 mm within a * a / b", "mm"),
        ("a == b within b * b / b", "m"),
        ("b >= a * b / b", "m"),
        ("a * a <= b * b", "m^2"),
        ("a * a <= 1 m^2", "m^2"),
        ("p <= 0.5", "%"),
        ("p <= 0.25 * 2", "%"),
        ("p <= 50 %", "%"),
        ("n <= 0.5 * 10", "1"),
        ("n <= 600 %", "%"),
        ("a / b <= 3", "1"),
        ("c * a <= c * b", "kg*m"),
    ],
)
def test_the_unit_of_a_margin_that_no_limit_states(condition: str, unit: str) -> None:
    declared = DECLARED.replace("lists:", '  p: {unit: "%", meaning: p}\nlists:')
    found = require(condition, f"{DESIGN}p: 40 %\n", declared)
    assert found.margin is not None
    assert (found.verdict, found.margin.unit) == ("complies", unit)


@pytest.mark.parametrize(
    ("condition", "counted"),
    [
        ("n <= 5", True),
        ("n <= 5.5", False),
        ("n / 2 <= 5", False),
        ("n <= 3 * n", True),
        ("5 >= n", True),
        ("5.5 >= n", False),
        ("5 >= n / 2", False),
    ],
)
def test_a_count_is_held_against_a_count(condition: str, counted: bool) -> None:
    assert require(condition, DESIGN, DECLARED).counted is counted


@pytest.mark.parametrize(
    ("condition", "relative"),
    [
        ("0 mm <= a <= 50 mm", 0.2),
        ("-10 mm <= a - 40 mm <= 0 mm", 0.0),
        ("70 degC <= t <= 90 degC", None),
        ("343.15 K <= t <= 90 degC", None),
        ("70 degC <= t <= 363.15 K", None),
        ("158 degF <= t", None),
        ("l <= 100 dB", None),
        ("t <= 363.15 K", pytest.approx(10 / 363.15)),
    ],
)
def test_what_measures_a_range(condition: str, relative: object) -> None:
    declared = DECLARED.replace("lists:", "  l: {unit: dB, meaning: l}\nlists:")
    found = require(condition, f"{DESIGN}l: 90 dB\n", declared)
    assert found.verdict == "complies"
    assert found.relative_margin == (relative if not isinstance(relative, float) else pytest.approx(relative))


@pytest.mark.parametrize(
    ("condition", "said", "unit", "room"),
    [
        ("a <= 50 mm and c >= 4.9 kg", "complies", "kg", Fraction(1, 10)),
        ("a <= 40.1 mm and c >= 1 kg", "complies", "mm", Fraction(1, 10)),
        ("c >= 4 kg and a <= 45 mm", "complies", "mm", 5),
        ("a <= 80 mm or c >= 4 kg", "complies", "mm", 40),
        ("c >= 4 kg or a <= 45 mm", "complies", "kg", 1),
        ("a <= 20 mm and c >= 6 kg", "breach", "mm", -20),
        ("a <= 20 mm or c >= 6 kg", "breach", "kg", -1),
    ],
)
def test_parts_are_ordered_by_relative_margin(condition: str, said: str, unit: str, room: Fraction | int) -> None:
    found = require(condition, DESIGN, DECLARED)
    assert found.margin is not None
    assert (found.verdict, found.margin.unit, margin(found)) == (said, unit, room)


def test_parts_without_a_measure_are_ordered_by_their_margin() -> None:
    found = require("t <= 90 degC and t <= 85 degC and t <= 95 degC", DESIGN, DECLARED)
    assert margin(found) == 5
    assert margin(require("t <= 90 degC or t <= 85 degC or t <= 95 degC", DESIGN, DECLARED)) == 15


@pytest.mark.parametrize(
    ("condition", "said"),
    [
        ("count(for e in edges where e.exposed == yes) >= 1", "complies"),
        ("count(for e in edges where e.exposed == yes) >= 2", "open"),
        ("count(for e in edges where e.exposed == yes) >= 3", "breach"),
        ("count(for e in edges where e.exposed == yes) >= 1 and a <= 50 mm", "complies"),
        ("a <= 30 mm or count(for e in edges where e.exposed == yes) <= 2", "complies"),
        ("a <= 30 mm and count(for e in edges where e.exposed == yes) >= 3", "breach"),
        ("1 <= count(for e in edges where e.exposed == yes) <= 2", "complies"),
        ("count(for e in edges where e.exposed == yes) == 1", "open"),
        ("count(for e in edges where e.exposed == yes) == 3", "breach"),
        ("count(for e in edges where e.exposed == yes) != 3", "complies"),
    ],
)
def test_counts_between_bounds(condition: str, said: str) -> None:
    design = f"{DESIGN}edges: {{lip: {{exposed: yes}}, sill: {{}}, vane: {{exposed: no}}}}\n"
    assert require(condition, design, DECLARED).verdict == said


@pytest.mark.parametrize(
    ("condition", "said", "texts"),
    [
        ("e.radius >= 1 mm and e.radius <= 9 mm", "complies", ["e.radius >= 1 mm", "e.radius <= 9 mm"]),
        ("e.radius >= 3 mm and e.radius <= 9 mm", "breach", ["e.radius >= 3 mm", "e.radius <= 9 mm"]),
        ("e.radius >= 3 mm or e.radius <= 2 mm", "complies", ["e.radius >= 3 mm", "e.radius <= 2 mm"]),
        ("e.radius >= 5 mm or e.radius <= 1 mm", "breach", ["e.radius >= 5 mm", "e.radius <= 1 mm"]),
        ("(e.radius >= 5 mm or e.radius <= 2 mm) and e.radius >= 1 mm", "breach", None),
    ],
)
def test_joined_conditions_of_every_element(condition: str, said: str, texts: list[str] | None) -> None:
    edges = "edges: {lip: {radius: 2 mm}, sill: {radius: 4 mm}}\n"
    found = require(f"every({condition} for e in edges)", edges)
    assert found.verdict == said
    if texts is not None:
        assert [part.text for part in found.parts] == [f"{name}: {text}" for name in ("lip", "sill") for text in texts]


def test_every_keeps_its_margins_where_a_choice_settles_who_takes_part() -> None:
    wings = "aero_surfaces: {front: {kind: wing, drag_area: 1 m^2}, floor: {kind: floor, drag_area: 3 m^2}}\n"
    found = require("every(s.drag_area <= 2 m^2 for s in aero_surfaces where s.kind == wing)", wings)
    assert (found.verdict, margin(found)) == ("complies", 1)


def test_every_waits_for_what_is_required() -> None:
    lamps = (
        "inputs: {lamps: {kind: collection, meaning: Lamps, at_least: 2, element: {area: {unit: cm^2, meaning: a}}}}\n"
    )
    every = "every(l.area >= 2 cm^2 for l in lamps)"
    assert require(every, "lamps: {a: {area: 3 cm^2}}\n", lamps).verdict == "open"
    assert require(every, "lamps: {a: {area: 1 cm^2}}\n", lamps).verdict == "breach"
    assert require(every, "lamps: {a: {area: 3 cm^2}, b: {area: 3 cm^2}}\n", lamps).verdict == "complies"
    one = "tyres: {front: {width: 300 mm}}\n"
    assert require("every(t.width <= 310 mm for t in tyres)", one).verdict == "open"
    assert require("every(t.width <= 290 mm for t in tyres)", one).verdict == "breach"
    assert require("some(t.width <= 310 mm for t in tyres)", one).verdict == "complies"
    assert require("some(t.width <= 290 mm for t in tyres)", one).verdict == "open"
