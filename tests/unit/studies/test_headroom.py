"""Headroom: the first break is named, never jumped over; ends are exact where a margin is linear."""

from __future__ import annotations

from datetime import date
from fractions import Fraction
from pathlib import Path
from unittest import mock

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck import api
from rulecheck.diagnostics import Refused
from rulecheck.outcome.travel import Headroom, HeadroomReport

DAY = date(2027, 3, 1)


def write(folder: Path, rules: str, values: str, inputs: str = "") -> Path:
    declared = inputs or 'inputs:\n  v.x: {unit: "1", meaning: First}\n  v.y: {unit: "1", meaning: Second}\n'
    (folder / "cup.ruleset.yaml").write_text(f"ruleset: Dunmere Cup\n{declared}rules:\n{rules}", encoding="utf-8")
    design = folder / "car.design.yaml"
    design.write_text(f"design: Heron 4\nrulesets: [cup.ruleset.yaml]\n{values}", encoding="utf-8")
    return design


def found(folder: Path, rules: str, values: str, *names: str) -> HeadroomReport:
    return api.headroom(write(folder, rules, values), names, on=DAY)


def row(report: HeadroomReport, path: str) -> Headroom:
    return next(item for item in report.inputs if item.path == path)


def test_both_ways_of_a_range_exactly(tmp_path):
    rules = "  share: {require: 0.3 <= v.x <= 0.55}\n"
    item = row(found(tmp_path, rules, "v: {x: 0.4, y: 1}\n"), "v.x")
    assert (item.down.travel.exact, item.down.at.exact, item.down.rules, item.down.is_exact) == (
        "-0.1",
        "0.3",
        ("share",),
        True,
    )
    assert (item.up.travel.exact, item.up.at.exact, item.up.ending) == ("0.15", "0.55", "stops")


def test_the_first_of_several_rules_is_named(tmp_path):
    rules = "  far: {require: v.x <= 9}\n  near: {require: 2 * v.x + v.y <= 13}\n"
    item = row(found(tmp_path, rules, "v: {x: 4, y: 1}\n"), "v.x")
    assert (item.up.rules, item.up.travel.exact) == (("near",), "2")
    assert item.down.ending == "free"


def test_an_early_breach_is_not_jumped_over(tmp_path):
    # Broken only between 2 and 2.1: (x - 2)(x - 2.1) < 0 there; allowed again beyond.
    rules = "  gap: {require: (v.x - 2) * (v.x - 2.1) >= 0}\n"
    item = row(found(tmp_path, rules, "v: {x: 1, y: 1}\n"), "v.x")
    assert item.up.ending == "stops"
    assert item.up.travel.value == pytest.approx(1.0, abs=1e-6)


def test_a_strict_limit_stops_at_the_limit_itself(tmp_path):
    item = row(found(tmp_path, "  below: {require: v.x < 9}\n", "v: {x: 4, y: 1}\n"), "v.x")
    assert (item.up.travel.exact, item.up.rules) == ("5", ("below",))


def test_an_input_in_breach_says_what_mends_it(tmp_path):
    report = found(tmp_path, "  width: {require: v.x <= 9}\n", "v: {x: 12, y: 1}\n")
    item = row(report, "v.x")
    assert report.breached == ("width",)
    assert (item.down.ending, item.down.travel.exact, item.down.at.exact) == ("mends", "-3", "9")
    assert item.up.ending == "free"


def test_inputs_that_no_rule_reads_are_named_apart_and_advice_does_not_stop(tmp_path):
    rules = "  advice: {standing: should, require: v.y <= 2}\n  width: {require: v.x <= 9}\n"
    report = found(tmp_path, rules, "v: {x: 4, y: 1}\n")
    assert report.unread == ("v.y",)
    assert [item.path for item in report.inputs] == ["v.x"]


def test_an_unknown_input_is_refused_with_the_nearest(tmp_path):
    design = write(tmp_path, "  width: {require: v.x <= 9}\n", "v: {x: 4, y: 1}\n")
    with pytest.raises(Refused, match=r"unknown-name: the design gives no number under 'v\.z'; did you mean 'v\.[xy]'"):
        api.headroom(design, ["v.z"], on=DAY)


def test_a_declared_value_that_begins_to_contradict_ends_the_travel():
    # Declared 4670 mm agree with the parts that make them up as far as 1.5 mm apart, and rules are open beyond.
    demo = Path(__file__).parents[3] / "designs_demo" / "marram-p2.design.yaml"
    item = row(api.headroom(demo, ["dimensions.wheelbase"], on=DAY), "dimensions.wheelbase")
    for side in (item.down, item.up):
        assert side.ending == "opens"
        assert abs(side.travel.value) == pytest.approx(1.5, abs=1e-3)


def test_without_the_look_ahead_the_exact_reader_finds_the_same(tmp_path):
    rules = (
        "  far: {require: v.x * v.y <= 9}\n  near: {require: 'max(v.x, 2) / (1 + v.y * v.y) <= 3'}\n"
        "  kept: {require: (v.x if v.x > 5 else 5) <= 6}\n  stands: {require: v.y >= 1}\n"
    )
    design = write(tmp_path, rules, "v: {x: 4, y: 1}\n")
    quick = api.headroom(design, on=DAY)
    with mock.patch("rulecheck.studies.headroom._look_ahead"):
        assert api.headroom(design, on=DAY).inputs == quick.inputs
    assert [(item.path, item.up.rules, item.up.travel.exact) for item in quick.inputs] == [
        ("v.y", ("far",), "1.25"),
        ("v.x", ("near", "kept"), "2"),
    ]


def test_roots_and_degrees(tmp_path):
    inputs = "inputs:\n  v.a: {unit: deg, meaning: Angle}\n  v.r: {unit: mm, meaning: Radius}\n"
    rules = "  lean: {require: v.a <= 12 deg}\n  reach: {require: sqrt(v.r^2 + (3 m)^2) <= 5 m}\n"
    report = api.headroom(write(tmp_path, rules, "v: {a: 7 deg, r: 3500 mm}\n", inputs), on=DAY)
    angle, radius = row(report, "v.a"), row(report, "v.r")
    assert angle.up.travel.value == pytest.approx(5, rel=1e-7)
    assert angle.up.travel.unit == "deg"
    assert radius.up.travel.value == pytest.approx(500, rel=1e-6)


@settings(max_examples=25, deadline=None)
@given(st.lists(st.integers(-6, 6), min_size=3, max_size=3), st.fractions(-3, 3, max_denominator=8))
def test_no_point_within_the_travel_breaks_a_rule(tmp_path_factory, roots, start):
    """Random cubics against a dense independent sampling."""
    folder = tmp_path_factory.mktemp("cubic")
    a, b, c = roots
    formula = f"(v.x - ({a})) * (v.x - ({b})) * (v.x - ({c})) <= 5"
    # A fraction as a decimal: eighths end after three digits.
    report = found(folder, f"  cubic: {{require: {formula}}}\n", f"v: {{x: {float(start)}, y: 1}}\n", "v.x")
    if report.breached or not report.inputs:
        return
    item = report.inputs[0]
    for side, sign in ((item.down, -1), (item.up, 1)):
        reach = Fraction(repr(abs(side.travel.value))) if side.travel is not None else Fraction(50)
        for index in range(200):
            x = start + sign * reach * index / 200
            assert (x - a) * (x - b) * (x - c) <= 5 + Fraction(1, 10**6)
