"""Curves and maps: values between rows by hand and by their definition, outside them, at steps, in states and from files."""

from __future__ import annotations

from fractions import Fraction
from itertools import product

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from small_files import CAR, RULES, check_files, findings, margin, only

from rulecheck.binding.lookup import Axis, between
from rulecheck.graph.terms import Bank
from rulecheck.operations.values import Monomial, Reason
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.gradient import GradientReader

INPUTS = """\
inputs:
  rig.speed: {unit: rpm, meaning: Speed}
  rig.height: {unit: mm, meaning: Height}
  rig.torque: {kind: curve, over: rpm, unit: N*m, meaning: Torque}
  rig.lift: {kind: map, over: [mm, mm], unit: m^2, meaning: Lift}
"""
ROWS = "[[2000 rpm, 300 N*m], [4000 rpm, 380 N*m], [6000 rpm, 300 N*m]]"
CALLED = INPUTS + "rules:\n  it: {require: rig.torque(rig.speed) <= 400 N*m}\n"
OWN = INPUTS + "rules:\n  it: {require: rig.torque() <= 400 N*m}\n"


def rig(speed: str, more: str = "", rows: str = ROWS) -> str:
    return f"rig: {{speed: {speed}, torque: {{over: rig.speed, rows: {rows}{more}}}}}\n"


@pytest.mark.parametrize(
    ("speed", "room"),
    [("2000 rpm", 100), ("3000 rpm", 60), ("4000 rpm", 20), ("5500 rpm", 80), ("6000 rpm", 100), ("2500 rpm", 80)],
)
def test_straight_between_rows(speed: str, room: int) -> None:
    for rules in (CALLED, OWN):
        assert margin(only(rig(speed), rules)) == room


@pytest.mark.parametrize(("speed", "room"), [("2000 rpm", 100), ("3999 rpm", 100), ("4000 rpm", 20), ("6000 rpm", 100)])
def test_steps_hold_up_to_the_next_key(speed: str, room: int) -> None:
    assert margin(only(rig(speed, ", interpolation: steps"), CALLED)) == room


@pytest.mark.parametrize(
    ("speed", "said"),
    [
        ("1999.999 rpm", "missing: rig.torque below 2000 rpm, where its rows begin"),
        ("6000.001 rpm", "missing: rig.torque beyond 6000 rpm, where its rows end"),
    ],
)
@pytest.mark.parametrize("more", ["", ", interpolation: steps"])
def test_nothing_is_continued_outside_the_rows(speed: str, said: str, more: str) -> None:
    found = only(rig(speed, more), CALLED)
    assert (found.verdict, found.reason) == ("open", said)


def test_a_curve_that_is_not_stated_is_open() -> None:
    found = only("rig: {speed: 3000 rpm}\n", CALLED)
    assert (found.verdict, found.reason) == ("open", "missing: rig.torque")
    assert only("rig: {speed: 3000 rpm, torque: none}\n", CALLED).verdict == "open"


def test_rows_in_several_units_of_one_kind() -> None:
    rows = "[[33.5 1/s, 300 N*m], [66.5 1/s, 0.38 kN*m]]"
    found = only(f"rig: {{speed: 50 1/s, torque: {{rows: {rows}}}}}\n", CALLED.replace("rpm", "1/s"))
    assert margin(found) == 400 - 340


FILE = {"torque.csv": "# rig\nspeed [rpm];torque [N*m];note\n2000;300,5;a\n4000;380;b\n"}


@pytest.mark.parametrize("column", ["", ", column: torque"])
def test_rows_from_a_file(column: str) -> None:
    design = f"rig: {{speed: 3000 rpm, torque: {{over: rig.speed, file: torque.csv, delimiter: ';', decimal: ','{column}}}}}\n"
    report = check_files({"car.design.yaml": CAR + design, "cup.ruleset.yaml": RULES + OWN, **FILE})
    assert margin(findings(report)["it"]) == 400 - Fraction("340.25")


def test_rows_from_a_file_in_a_state_and_in_a_change() -> None:
    base = rig("3000 rpm") + "states: {map: {wet: {rig.torque: {file: wet.csv}}}}\n"
    rules = CALLED.replace("{require", "{states: {map: [wet]}, require") + "states_needed: {map: [wet]}\n"
    files = {
        "car.design.yaml": CAR + base,
        "cup.ruleset.yaml": RULES + rules,
        "wet.csv": "speed [rpm],torque [N*m]\n2000,200\n4000,280\n",
        "dry.csv": "speed [rpm],torque [N*m]\n2000,100\n4000,180\n",
        "dry.change.yaml": "set: {rig.torque: {file: dry.csv, over: rig.speed}}\n",
    }
    assert margin(findings(check_files(files))["it"]) == 160
    files["cup.ruleset.yaml"] = RULES + CALLED
    assert margin(findings(check_files(files))["it"]) == 60
    assert margin(findings(check_files(files, changes=["dry.change.yaml"]))["it"]) == 260


def test_a_curve_of_an_item_in_a_loop() -> None:
    rules = """\
inputs:
  springs:
    kind: collection
    element:
      force: {kind: curve, over: mm, unit: N, meaning: Force over travel}
rules:
  it: {each: s in springs, require: s.force(30 mm) <= 1000 N}
"""
    rows = "{rows: [[0 mm, 0 N], [40 mm, %s]]}"
    design = f"springs: {{a: {{force: {rows % '800 N'}}}, b: {{force: {rows % '1200 N'}}}}}\n"
    assert margin(only(design, rules)) == 100  # the stiffer of the two: 1200 N * 30 / 40


def test_a_map_over_a_physics_figure_of_the_car() -> None:
    rows = ", ".join(f"[{front} mm, {width} mm, {area} m^2]" for front, width, area in GRID)
    design = f"""\
dimensions: {{front_ride_height: 25 mm, front_track: 1500 mm}}
tyres: {{front: {{width: 300 mm}}}}
rig: {{lift: {{over: [dimensions.front_ride_height, platform.width_over_front_tyres], rows: [{rows}]}}}}
"""
    assert margin(only(design, INPUTS + "rules:\n  it: {require: rig.lift() <= 3 m^2}\n")) == 1


GRID = [(20, 1700, 1), (30, 1700, 2), (20, 1900, 2), (30, 1900, 3)]


# --- several keys, against the definition ----------------------------------------------------------------------------

AXIS = st.lists(st.integers(-50, 50), min_size=2, max_size=4, unique=True).map(sorted)


def multilinear(axes: list[list[int]], values: dict[tuple[int, ...], int], at: list[Fraction]) -> Fraction:
    """The sum over the corners of the cell, each weighed by the volume opposite to it."""
    cell = []
    for axis, key in zip(axes, at, strict=True):
        low = max(place for place, step in enumerate(axis[:-1]) if step <= key)
        share = (key - axis[low]) / Fraction(axis[low + 1] - axis[low])
        cell.append(((axis[low], 1 - share), (axis[low + 1], share)))
    total = Fraction(0)
    for corner in product(*cell):
        weight = Fraction(1)
        for _, share in corner:
            weight *= share
        total += weight * values[tuple(key for key, _ in corner)]
    return total


@settings(max_examples=25, deadline=None)
@given(st.data())
def test_maps_are_multilinear(data: st.DataObject) -> None:
    axes = data.draw(st.lists(AXIS, min_size=2, max_size=3))
    keys = list(product(*axes))
    values = dict(
        zip(keys, data.draw(st.lists(st.integers(-9, 9), min_size=len(keys), max_size=len(keys))), strict=True)
    )
    at = [axis[0] + (axis[-1] - axis[0]) * data.draw(st.fractions(0, 1, max_denominator=12)) for axis in axes]
    names = [f"rig.k{place}" for place in range(len(axes))]
    rows = ", ".join(
        "[" + ", ".join(f"{cell} mm" for cell in (*key, values[key])) + "]" for key in data.draw(st.permutations(keys))
    )
    told = "; ".join(names)
    declared = "".join(f"  {name}: {{unit: mm, meaning: key}}\n" for name in names)
    units = ", ".join(["mm"] * len(axes))
    rules = f"inputs:\n{declared}  rig.map: {{kind: map, over: [{units}], unit: mm, meaning: {told}}}\nrules:\n  it: {{require: rig.map() <= 0 mm, scale: 1 mm}}\n"
    # keys that are no decimals are called in the formula, where they can be written as quotients
    call = ", ".join(f"{key.numerator} mm / {key.denominator}" for key in map(Fraction, at))
    rules = rules.replace("rig.map()", f"'rig.map({call})'").replace("' <= 0 mm", " <= 0 mm'")
    found = only(f"rig: {{map: {{over: [{', '.join(names)}], rows: [{rows}]}}}}\n", rules)
    assert margin(found) == -multilinear(axes, values, [Fraction(key) for key in at])


def test_tables_of_a_ruleset_over_two_keys() -> None:
    rows = ", ".join(f"[{speed} km/h, {mass} kg, {force} kN]" for speed, mass, force in SQUARE)
    rules = f"tables: {{least: {{over: [vehicle.speed, ballasting.mass], linear: [{rows}]}}}}\nrules:\n  it: {{require: least <= 100 kN}}\n  there: {{require: 'least(150 km/h, 25 kg) <= 100 kN'}}\n"
    design = "vehicle: {speed: 120 km/h}\nballasting: {mass: 10 kg}\n"
    report = check_files({"car.design.yaml": CAR + design, "cup.ruleset.yaml": RULES + rules})
    found = findings(report)
    assert margin(found["it"]) == 100 - (
        Fraction("0.8") * (Fraction("0.6") * 4 + Fraction("0.4") * 14)
        + Fraction("0.2") * (Fraction("0.6") * 8 + Fraction("0.4") * 34)
    )
    assert margin(found["there"]) == 100 - Fraction(14 + 34, 2)
    assert only("vehicle: {speed: 120 km/h}\nballasting: {mass: 51 kg}\n", rules).verdict == "open"


SQUARE = [(100, 0, 4), (100, 25, 14), (200, 0, 8), (200, 25, 34)]


def test_slopes_through_a_curve() -> None:
    """The gradient is that of the stretch: 30 over 60."""
    bank, at = Bank(), Fraction(100)
    speed = bank.input("rig.speed", "number", PURE)
    keys = tuple(bank.number(key) for key in (0, 90, 150))
    why = Reason("missing", "rows")
    scope = type("Bare", (), {"bank": bank, "apply": lambda self, op, args, span: bank.apply(op, args, PURE, span)})()
    term = between(scope, [Axis(keys, why, why)], [bank.number(n) for n in (0, 9, 39)], [speed], None, steps=False)
    reader = ExactReader(bank, {"rig.speed": Monomial(at)})
    assert GradientReader(bank, reader).gradient(term).slopes == {"rig.speed": pytest.approx(30 / 60)}
    assert float(reader.approximate(term)) == pytest.approx(9 + 5)
