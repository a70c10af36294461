"""Whole curves in rules: what rises, how steep it is, how far it lies over another, and where that is."""

from __future__ import annotations

from fractions import Fraction as F

import pytest
from small_files import only

from rulecheck.outcome.results import Finding

INPUTS = """\
inputs:
  rig.torque: {kind: curve, over: rpm, unit: N*m, meaning: Torque}
  rig.least: {kind: curve, over: rpm, unit: N*m, meaning: Least torque}
  rig.turn: {kind: curve, over: rad/s, unit: N*m, meaning: Torque over rad/s}
"""
DESIGN = """\
rig:
  torque: {rows: [[2000 rpm, 300 N*m], [4000 rpm, 380 N*m], [6000 rpm, 340 N*m]]}
  least: {rows: [[1000 rpm, 200 N*m], [5000 rpm, 350 N*m], [7000 rpm, 250 N*m]]}
  turn: {rows: [[100 rad/s, 1 N*m], [200 rad/s, 2 N*m]]}
"""


def asked(condition: str, design: str = DESIGN) -> Finding:
    return only(design, INPUTS + f'rules:\n  it: {{require: "{condition}"}}\n')


@pytest.mark.parametrize(
    ("condition", "left", "where"),
    [
        ("slope(rig.torque, 2000 rpm, 4000 rpm) <= 0.05 N*m/rpm", F(1, 100), "closest from 2000 rpm to 4000 rpm"),
        ("slope(rig.torque, 2000 rpm, 6000 rpm) <= 0.05 N*m/rpm", F(1, 100), "closest from 2000 rpm to 4000 rpm"),
        ("slope(rig.torque, 2000 rpm, 6000 rpm) >= 0.05 N*m/rpm", F(-7, 100), "closest from 4000 rpm to 6000 rpm"),
        ("0.05 N*m/rpm >= slope(rig.torque, 2000 rpm, 6000 rpm)", F(1, 100), "closest from 2000 rpm to 4000 rpm"),
        ("not slope(rig.torque, 2000 rpm, 6000 rpm) >= 0.05 N*m/rpm", F(7, 100), "closest from 4000 rpm to 6000 rpm"),
        ("slope(rig.torque, 4000 rpm, 6000 rpm) < 0.05 N*m/rpm", F(7, 100), "closest from 4000 rpm to 6000 rpm"),
        ("slope(rig.turn, 150 rad/s, 200 rad/s) <= 1 N*m*s", F(99, 100), "closest from 100 rad/s to 200 rad/s"),
        ("over(rig.torque, 300 N*m, 2000 rpm, 6000 rpm) >= 10 N*m", F(-10), "closest at 2000 rpm"),
        ("over(rig.torque, 0 N*m, 2500 rpm, 3000 rpm) >= 10 N*m", F(310), "closest at 2500 rpm"),
        ("over(rig.torque, rig.least, 2000 rpm, 6000 rpm) >= 10 N*m", F(0), "closest at 5000 rpm"),
        ("over(rig.least, rig.torque, 2000 rpm, 6000 rpm) >= 10 N*m", F(-155, 2) , "closest at 4000 rpm"),
        ("over(rig.torque, 50 % * 600 N*m, 2500 rpm, 6000 rpm) >= 10 N*m", F(10), "closest at 2500 rpm"),
    ],
)  # fmt: skip
def test_margins_and_places(condition: str, left: F, where: str) -> None:
    finding = asked(condition)
    assert finding.margin is not None, finding.reason
    assert finding.notes == (where,)
    if "over" in condition:
        assert F(finding.margin.exact) == left
    else:
        assert finding.margin.value == pytest.approx(float(left))


def test_what_rises() -> None:
    assert asked("rising(rig.least)").notes == ("does not rise from 5000 rpm to 7000 rpm",)
    assert asked("rising(rig.least)").verdict == "breach"
    assert asked("rising(rig.turn)").verdict == "complies"
    level = "rig: {torque: {rows: [[1 rpm, 1 N*m], [2 rpm, 1 N*m]]}}\n"
    assert asked("rising(rig.torque)", level).verdict == "breach"


@pytest.mark.parametrize(
    ("condition", "design", "missing"),
    [
        ("rising(rig.torque)", "", "rig.torque"),
        ("slope(rig.torque, 1 rpm, 2 rpm) <= 1 N*m/rpm", "", "rig.torque"),
        ("over(rig.torque, rig.least, 1 rpm, 2 rpm) >= 1 N*m", "", "rig.torque and rig.least"),
        ("slope(rig.torque, 1000 rpm, 4000 rpm) <= 1 N*m/rpm", DESIGN, "rig.torque below 2000 rpm"),
        ("over(rig.torque, rig.least, 3000 rpm, 7000 rpm) >= 1 N*m", DESIGN, "rig.torque beyond 6000 rpm"),
    ],
)
def test_what_is_missing_leaves_a_rule_open(condition: str, design: str, missing: str) -> None:
    finding = asked(condition, design)
    assert finding.verdict == "open"
    assert missing in finding.reason
