"""Signals in rules: what functions give, what is missing, what is too coarse, and what limits that move do."""

from __future__ import annotations

from fractions import Fraction as F

import pytest
from small_files import CAR, RULES, check_files, check_texts, findings, only

from rulecheck.outcome.results import Finding

INPUTS = """\
inputs:
  signals.a: {kind: signal, unit: V, meaning: One}
  signals.b: {kind: signal, unit: V, meaning: Another}
  signals.turn: {kind: signal, unit: rpm, meaning: Speed}
  signals.gear: {kind: signal, unit: "1", meaning: Gear}
  signals.heat: {kind: signal, unit: degC, meaning: Coolant}
  limits.level: {unit: V, meaning: Level}
  limits.time: {unit: s, meaning: Time}
"""
CARS = """\
limits: {level: 3 V, time: 2 s}
signals:
  a: {rows: [[0 s, 1 V], [1 s, 4 V], [3 s, 2 V], [4 s, 5 V], [5 s, 9 V]]}
  b: {rows: [[0.5 s, 1 V], [2.5 s, 3 V], [6 s, 0 V]]}
  turn: {rows: [[0 s, 3000 rpm], [1 s, 6000 rpm], [2 s, 0 rpm]]}
  gear: {rows: [[0 s, 1], [1 s, 2], [2 s, 3], [3 s, 2], [4 s, 0]]}
  heat: {rows: [[0 s, 90 degC], [1 s, 104.5 degC], [2 s, 80 degC]]}
"""


def room(finding: Finding) -> F:
    """The exact margin in the unit of the limit."""
    assert finding.margin is not None, finding.reason
    return F(finding.margin.exact)


def margin(condition: str, design: str = CARS) -> F:
    """The margin of one rule."""
    return room(only(design, INPUTS + f'rules:\n  it: {{require: "{condition}"}}\n'))


@pytest.mark.parametrize(
    ("condition", "left"),
    [
        ("peak(signals.a) <= 10 V", F(1)),
        ("-peak(-signals.a) >= 1 V", F(0)),
        ("peak(abs(signals.a - signals.b)) <= 5 V", F(-1)),
        ("peak(2 * signals.a - 1 V) <= 20 V", F(3)),
        ("peak(signals.a / 2) <= 5 V", F(1, 2)),
        ("peak(10 V - signals.a) <= 10 V", F(1)),
        ("duration(signals.a > 3 V) <= 4 s", F(1)),
        ("duration(signals.a >= 4 V) <= 4 s", F(1)),
        ("duration(signals.a > 4 V) <= 4 s", F(3)),
        ("duration(not signals.a <= 3 V) <= 4 s", F(1)),
        ("duration(3 V < signals.a) <= 4 s", F(1)),
        ("duration(2 V <= signals.a < 5 V) <= 4 s", F(1)),
        ("duration(not 2 V <= signals.a < 5 V) <= 4 s", F(2)),
        ("longest(signals.a > 3 V) <= 4 s", F(2)),
        ("longest(signals.a > signals.b) <= 4 s", F(2)),
        ("longest(signals.a > 3 V and signals.b < 2 V) <= 4 s", F(5, 2)),
        ("longest(signals.a > 3 V or signals.b < 2 V) <= 4 s", F(3, 2)),
        ("longest(signals.gear == 2) <= 4 s", F(3)),
        ("duration(signals.gear == 2) <= 4 s", F(2)),
        ("duration(signals.gear != 2) <= 4 s", F(2)),
        ("integral(signals.a) <= 20 V*s", F(4)),
        ("integral(signals.a * signals.b) <= 30 V^2*s", F(30) - (F(1, 2) + F(4) * F(3, 2) + F(12) * F(1, 2) + 6 + 15)),
        ("peak(rolling_mean(signals.a, 2 s)) <= 5 V", F(1)),
        ("peak(signals.turn) <= 7000 rpm", F(1000)),
        ("longest(signals.turn >= 6000 rpm) <= 4 s", F(3)),
        ("longest(signals.turn >= 600 rad/s) <= 4 s", F(3)),
        ("longest(signals.turn >= 2 rad/s * sqrt(100000)) <= 4 s", F(4)),
        ("peak(signals.heat) <= 105 degC", F(1, 2)),
        ("longest(signals.heat > 100 degC) <= 4 s", F(3)),
        ("duration(signals.a > limits.level) <= 4 s", F(1)),
        ("duration(signals.a > sqrt(9 V^2)) <= 4 s", F(1)),
        ("duration(signals.a > sqrt(2) * 1 V) <= 4 s", F(0)),
        ("2 * duration(signals.a > 3 V) <= 8 s", F(2)),
    ],
)
def test_what_functions_give(condition: str, left: F) -> None:
    assert margin(condition) == left


@pytest.mark.parametrize(
    ("condition", "design", "missing"),
    [
        ("peak(signals.a) <= 1 V", "", "signals.a"),
        ("peak(signals.a) <= 1 V", "signals: {a: none}\n", "signals.a"),
        ("longest(signals.a > 3 V and signals.b > 3 V) <= 1 s", "", "signals.a and signals.b"),
        ("peak(rolling_mean(signals.b, 3 s)) <= 1 V", CARS, "at most 3 s apart (the widest step is 3.5 s)"),
        ("peak(rolling_mean(signals.a, 6 s)) <= 1 V", CARS, "of 6 s at least (it is 5 s long)"),
        ("duration(signals.a > 3 V) <= 1 s", CARS, "at most 1 s apart (the widest step is 2 s)"),
        ("1 s >= 2 * duration(signals.a > 3 V)", CARS, "at most 1 s apart"),
        ("duration(signals.a > 3 V) <= limits.time - 1 s", CARS, "closer samples of signals.a"),
        ("duration(signals.a > limits.level) <= 4 s", CARS.replace("level: 3 V, ", ""), "limits.level"),
        (
            "peak(signals.a - signals.b) <= 4 V",
            "signals: {a: {rows: [[0 s, 1 V], [1 s, 1 V]]}, b: {rows: [[2 s, 1 V], [3 s, 1 V]]}}\n",
            "records of signals.a and signals.b that overlap",
        ),
    ],
)
def test_what_is_missing_leaves_a_rule_open(condition: str, design: str, missing: str) -> None:
    finding = only(design, INPUTS + f'rules:\n  it: {{require: "{condition}"}}\n')
    assert finding.verdict == "open"
    assert missing in finding.reason


def test_a_limit_of_zero_speaks_of_the_samples() -> None:
    assert margin("duration(signals.a > 9 V) <= 0 s") == 0


def test_a_limit_that_a_state_sets_moves_the_time() -> None:
    design = CARS + "states: {set: {low: {limits.level: 1.5 V}, high: {limits.level: 4 V}}}\n"
    ruleset = INPUTS + (
        "states_needed: {set: [low, high]}\n"
        "rules:\n  it: {require: duration(signals.a > limits.level) <= 4.5 s, states: every}\n"
    )
    finding = only(design, ruleset)
    assert room(finding) == F(1, 2)


def test_a_state_may_have_a_log_of_its_own() -> None:
    design = CARS + "states: {run: {one: {}, two: {signals.a: {rows: [[0 s, 1 V], [1 s, 8 V]]}}}}\n"
    ruleset = (
        INPUTS + "states_needed: {run: [one, two]}\nrules:\n  it: {require: peak(signals.a) <= 10 V, states: [PART]}\n"
    )
    one = only(design, ruleset.replace("states: [PART]", "states: {run: [one]}"))
    two = only(design, ruleset.replace("states: [PART]", "states: {run: [two]}"))
    assert (room(one), room(two)) == (1, 2)


# --- logs ------------------------------------------------------------------------------------------------------------

FILES = {
    "car.design.yaml": CAR
    + "signals: {a: {file: logs/run.csv, time: t, delimiter: semicolon, decimal: comma, time_unit: ms}}\n",
    "cup.ruleset.yaml": RULES
    + INPUTS
    + "rules:\n  it: {require: peak(signals.a) <= 5 V}\n  long: {require: longest(signals.a > 1 V) <= 5 s}\n",
    "logs/run.csv": "# of the second day\nt;a [mV];other\n0;1500,25;yes\n\n100;-2e3;no\n2500;+4,5E3;\n",
}


def test_a_log_with_signs_of_its_own() -> None:
    report = check_files(FILES)
    found = findings(report)
    assert room(found["it"]) == F(1, 2)
    assert room(found["long"]) == F("4.9")
    assert "logs/run.csv" in report.files


def test_a_log_that_no_rule_asks_for_is_not_read() -> None:
    files = {**FILES, "cup.ruleset.yaml": RULES + INPUTS + "rules:\n  it: {require: 1 V <= 2 V}\n"}
    del files["logs/run.csv"]
    report = check_files(files)
    assert findings(report)["it"].verdict == "complies"


def test_a_log_of_many_rows_is_read_exactly() -> None:
    rows = "\n".join(f"{index / 1000:.3f},{index % 7}.{index % 10}" for index in range(100_001))
    files = {
        "car.design.yaml": CAR + "signals: {a: {file: run.csv}}\n",
        "cup.ruleset.yaml": RULES + INPUTS + "rules:\n  it: {require: integral(signals.a) <= 500 V*s}\n",
        "run.csv": f"time [s],a [V]\n{rows}\n",
    }
    finding = findings(check_files(files))["it"]
    held = sum(F(index % 7) + F(index % 10, 10) for index in range(100_000)) / 1000
    assert room(finding) == 500 - held


def test_two_rules_on_one_condition_share_it() -> None:
    ruleset = INPUTS + (
        "rules:\n  one: {require: duration(signals.a > 3 V) <= 4 s}\n  two: {require: duration(signals.a > 3 V) <= 3 s}\n"
    )
    found = findings(check_texts(CARS, ruleset))
    assert (room(found["one"]), room(found["two"])) == (1, 0)
