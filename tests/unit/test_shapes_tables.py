"""Tables, lists, flags and definitions: which row holds, and what no row means. Margins by hand."""

from __future__ import annotations

from fractions import Fraction

import pytest
from small_files import margin, only, refused, require

TABLE = """\
tables:
  least:
    over: powertrain.displacement
    steps:
      - {up_to: 2000 cm^3, value: 780 kg}
      - {below: 3000 cm^3, value: 860 kg}
      - {up_to: 3500 cm^3, value: 900 kg}
"""
MASS = "rules:\n  it: {require: ballast.a.mass >= least}\n"


def engine(displacement: str, mass: str = "1000 kg") -> str:
    return f"powertrain: {{displacement: {displacement}}}\nballast: {{a: {{mass: {mass}}}}}\n"


@pytest.mark.parametrize(
    ("displacement", "room"),
    [
        ("1 cm^3", 220),
        ("2000 cm^3", 220),
        ("2 L", 220),
        ("2000.001 cm^3", 140),
        ("2999.999 cm^3", 140),
        ("3000 cm^3", 100),
        ("3500 cm^3", 100),
    ],
)
def test_the_first_row_that_holds(displacement: str, room: int) -> None:
    found = only(engine(displacement), TABLE + MASS)
    assert (found.verdict, margin(found)) == ("complies", room)


def test_a_key_that_meets_no_row_is_open() -> None:
    found = only(engine("3500.1 cm^3"), TABLE + MASS)
    assert found.verdict == "open"
    assert "least" in found.reason
    more = TABLE + "      - {otherwise: 950 kg}\n" + MASS
    assert margin(only(engine("3500.1 cm^3"), more)) == 50


def test_an_unknown_key_is_open() -> None:
    assert only("ballast: {a: {mass: 1000 kg}}\n", TABLE + MASS).verdict == "open"


def test_a_table_for_another_key() -> None:
    rule = "rules:\n  it: {require: ballast.a.mass >= least(2 * powertrain.displacement)}\n"
    assert margin(only(engine("1250 cm^3"), TABLE + rule)) == 140


LINES = """\
tables:
  thin_air:
    over: air.altitude
    unit: "%"
    linear: [[0 m, 100 %], [800 m, 98 %], [1600 m, 95 %]]
"""


@pytest.mark.parametrize(
    ("altitude", "room"),
    [("0 m", 10), ("400 m", 9), ("800 m", 8), ("1 km", Fraction(29, 4)), ("1600 m", 5)],
)
def test_straight_lines_between_rows(altitude: str, room: Fraction | int) -> None:
    # At 1000 m: 98 % - 3 % * 200/800 = 97.25 %.
    found = require("thin_air >= 90 %", f"air: {{altitude: {altitude}}}\n", LINES)
    assert (found.verdict, margin(found)) == ("complies", room)


@pytest.mark.parametrize("altitude", ["-0.001 m", "1600.001 m"])
def test_left_of_the_first_row_and_right_of_the_last_there_is_nothing(altitude: str) -> None:
    found = require("thin_air >= 90 %", f"air: {{altitude: {altitude}}}\n", LINES)
    assert found.verdict == "open"
    assert "thin_air" in found.reason


CHOICES = """\
tables:
  most_power:
    over: recovery.axle
    steps: [{is: front, value: 90 kW}, {is: rear, value: 115 kW}]
"""


@pytest.mark.parametrize(
    ("axle", "said"),
    [("axle: rear, ", "complies"), ("axle: front, ", "breach"), ("axle: both, ", "open"), ("", "open")],
)
def test_a_table_over_a_choice(axle: str, said: str) -> None:
    assert require("recovery.power <= most_power", f"recovery: {{{axle}power: 100 kW}}\n", CHOICES).verdict == said


TWO_KEYS = """\
tables:
  most_tank:
    over: [powertrain.kind, powertrain.aspiration]
    steps:
      - {when: powertrain.kind == hybrid and powertrain.aspiration == forced, value: 76 L}
      - {when: powertrain.kind == hybrid, value: 80 L}
"""


@pytest.mark.parametrize(
    ("design", "said"),
    [
        ("kind: hybrid, aspiration: forced", "breach"),
        ("kind: hybrid, aspiration: natural", "complies"),
        ("kind: combustion, aspiration: natural", "open"),
        ("kind: hybrid", "open"),
        ("aspiration: natural", "open"),
    ],
)
def test_a_table_over_two_keys(design: str, said: str) -> None:
    found = require("powertrain.tank_volume <= most_tank", f"powertrain: {{{design}, tank_volume: 78 L}}\n", TWO_KEYS)
    assert found.verdict == said


def test_a_table_over_a_date() -> None:
    declared = (
        "inputs: {tub.approved: {kind: date, meaning: d}, tub.load: {unit: kN, meaning: l}}\n"
        "tables: {due: {over: tub.approved, steps: [{below: 2024-01-01, value: 26 kN}, {otherwise: 33 kN}]}}\n"
    )
    old, new = "tub: {approved: 2023-12-31, load: 30 kN}\n", "tub: {approved: 2024-01-01, load: 30 kN}\n"
    assert margin(require("tub.load >= due", old, declared)) == 4
    assert margin(require("tub.load >= due", new, declared)) == -3
    assert require("tub.load >= due", "tub: {load: 40 kN}\n", declared).verdict == "open"


# --- lists and flags -------------------------------------------------------------------------------------------------

STEELS = 'lists: {steels: ["25CrMo4", "30CrMo4"]}\n'


@pytest.mark.parametrize(
    ("material", "inside", "outside"),
    [('material: "25CrMo4"', "complies", "breach"), ('material: "E355"', "breach", "complies"), ("", "open", "open")],
)
def test_an_allowed_list(material: str, inside: str, outside: str) -> None:
    design = f"members: {{hoop: {{{material}}}}}\n"
    found = require("members.hoop.material in steels", design, STEELS)
    assert (found.verdict, found.margin) == (inside, None)
    assert require("not members.hoop.material in steels", design, STEELS).verdict == outside


def test_a_list_of_sizes_and_a_list_in_the_formula() -> None:
    design = "members: {hoop: {wall: 2.5 mm}}\npowertrain: {kind: hybrid}\n"
    sizes = "lists: {walls: [2 mm, 0.0025 m, 3 mm]}\n"
    assert require("members.hoop.wall in walls", design, sizes).verdict == "complies"
    assert require("powertrain.kind in [hybrid, electric]", design).verdict == "complies"
    assert require("powertrain.kind in [combustion, electric]", design).verdict == "breach"


@pytest.mark.parametrize(
    ("stated", "yes", "no"),
    [("power_steering: yes", "complies", "breach"), ("power_steering: no", "breach", "complies"), ("", "open", "open")],
)
def test_a_flag(stated: str, yes: str, no: str) -> None:
    design = f"options: {{{stated}}}\n"
    assert require("options.power_steering == yes", design).verdict == yes
    assert require("options.power_steering", design).verdict == yes
    assert require("options.power_steering == no", design).verdict == no
    assert require("not options.power_steering", design).verdict == no


@pytest.mark.parametrize(
    ("design", "there", "banned"),
    [
        ("aero_surfaces: {wing: {kind: wing}}\n", "complies", "breach"),
        ("aero_surfaces: {wing: none}\n", "breach", "complies"),
        ("aero_surfaces: {other: {kind: wing}}\n", "open", "open"),
        ("aero_surfaces: {complete: yes, other: {kind: wing}}\n", "breach", "complies"),
        ("aero_surfaces: none\n", "breach", "complies"),
        ("", "open", "open"),
    ],
)
def test_presence(design: str, there: str, banned: str) -> None:
    assert require("present(aero_surfaces.wing)", design).verdict == there
    assert require("not present(aero_surfaces.wing)", design).verdict == banned


# --- definitions -----------------------------------------------------------------------------------------------------

TRACK = """\
definitions: {track: [contact centres, wheel planes]}
inputs: {dimensions.rear_track: {unit: mm, definition: contact centres, meaning: Track}}
"""


@pytest.mark.parametrize(
    ("stated", "said"),
    [
        ("{value: 1560 mm, definition: contact centres}", "complies"),
        ("{value: 1660 mm, definition: contact centres}", "breach"),
        ("{value: 1560 mm, definition: wheel planes}", "open"),
        ("{value: 1660 mm, definition: wheel planes}", "open"),
        ("1560 mm", "open"),
    ],
)
def test_a_value_of_another_definition_is_open(stated: str, said: str) -> None:
    design = f"dimensions: {{rear_track: {stated}}}\n"
    assert require("dimensions.rear_track <= 1600 mm", design, TRACK).verdict == said


def test_a_definition_that_nobody_declares_is_refused() -> None:
    design = "dimensions: {rear_track: {value: 1560 mm, definition: hub faces}}\n"
    found = refused(design, TRACK + "rules:\n  it: {require: dimensions.rear_track <= 1600 mm}\n")
    assert [item.code for item in found] == ["unknown-choice"]


# --- a declared value beside a computed one --------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("declared", "said"),
    [("", "complies"), ("mass: {total: 100 kg}\n", "complies"), ("mass: {total: 103 kg}\n", "open")],
)
def test_a_declared_value_that_the_parts_contradict_is_open(declared: str, said: str) -> None:
    parts = (
        "masses:\n  tub: {mass: 60 kg, at: 0 0 0 mm}\n  wheel: {mass: 10 kg, quantity: 2, mirror: yes, at: 0 1 0 m}\n"
    )
    assert require("mass.total >= 90 kg", parts + declared).verdict == said
