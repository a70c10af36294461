"""Figures defined by an equation, in files: values, states, what is missing, and physics figures inside."""

from __future__ import annotations

from fractions import Fraction

import pytest
from small_files import only

INPUTS = """\
inputs:
  v.power: {unit: kW, meaning: Power}
  v.drag: {unit: kg/m, meaning: Drag over the square of the speed}
"""
TOP = """\
derived:
  top:
    solve: vehicle.speed
    between: [1 m/s, 200 m/s]
    formula: v.power - resistance * vehicle.speed
    unit: km/h
    meaning: Top speed
  resistance: {formula: v.drag * vehicle.speed^2, unit: N, meaning: Drag}
"""
CAR = "v: {power: 125 kW, drag: 1 kg/m}\n"


def rules(require: str) -> str:
    return INPUTS + TOP + f"rules:\n  it: {{{require}}}\n"


def test_a_figure_is_the_solution_of_its_equation() -> None:
    """125 kW = 1 kg/m * (50 m/s)^3: exactly."""
    found = only(CAR, rules("require: top <= 50 m/s"))
    assert (found.verdict, found.margin.value) == ("complies", 0.0)
    assert only(CAR, rules("require: top < 50 m/s")).verdict == "breach"
    assert found.value.value == pytest.approx(50)


def test_the_input_that_by_solver_for_need_not_be_stated_and_does_not_count() -> None:
    stated = only(CAR + "vehicle: {speed: 7 m/s}\n", rules("require: top <= 50 m/s"))
    assert stated.verdict == "complies"
    beside = only(CAR + "vehicle: {speed: 7 m/s}\n", rules("require: resistance <= 49 N"))
    assert (beside.verdict, beside.margin.value) == ("complies", 0.0)


def test_what_is_missing_leaves_the_rule_open() -> None:
    found = only("v: {power: 125 kW}\n", rules("require: top <= 50 m/s"))
    assert (found.verdict, "v.drag" in found.reason) == ("open", True)


def test_no_solution_is_unproven_and_says_where_it_was_looked_for() -> None:
    found = only("v: {power: 125 kW, drag: 0.0001 kg/m}\n", rules("require: top <= 50 m/s"))
    assert found.verdict == "unproven"
    assert "there is no solution for vehicle.speed from 1 m/s to 200 m/s" in found.reason


def test_states_move_the_solution() -> None:
    car = CAR + "states: {power: {low: {v.power: 64 kW}, high: {v.power: 216 kW}}}\n"
    text = "states_needed: {power: [low, high]}\n" + rules("states: every, require: top >= 35 m/s")
    found = only(car, text)
    assert (found.verdict, found.margin.value) == ("complies", pytest.approx(5.0))
    assert found.binding is not None
    assert found.binding.state == {"power": "low"}


def test_a_state_that_sets_the_input_solved_for_does_not_move_the_solution() -> None:
    car = CAR + "states: {pace: {slow: {vehicle.speed: 3 m/s}, fast: {vehicle.speed: 90 m/s}}}\n"
    text = "states_needed: {pace: [slow, fast]}\n" + rules("states: every, require: top <= 50 m/s")
    assert only(car, text).verdict == "complies"


def test_a_solve_inside_a_solve() -> None:
    """The drag at which the top speed is 40 m/s: 125 kW / (40 m/s)^3."""
    more = """\
  needed:
    solve: v.drag
    between: [0.1 kg/m, 100 kg/m]
    formula: top - 40 m/s
    unit: kg/m
    meaning: Drag for 40 m/s
"""
    text = INPUTS + TOP + more + "rules:\n  it: {require: needed <= 2 kg/m}\n"
    found = only("v: {power: 125 kW}\n", text)
    assert found.verdict == "complies"
    assert Fraction(found.value.exact) == Fraction(125000, 64000)


def test_the_ends_may_be_figures() -> None:
    text = rules("require: top <= 50 m/s").replace("[1 m/s, 200 m/s]", '[1 m/s, "v.power / 1 kN"]')
    assert only(CAR, text).verdict == "complies"
    assert only(CAR.replace("1 kg/m", "0.01 kg/m"), text).verdict == "unproven"
