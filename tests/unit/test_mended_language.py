"""Corners of the language where the form of a value must not matter. Margins by hand."""

from __future__ import annotations

from datetime import date

import pytest
from small_files import margin, refused, require, verdict

# --- a table of one row ----------------------------------------------------------------------------------------------

ONE_ROW = 'tables:\n  thin: {over: air.altitude, unit: "%", linear: [[800 m, 98 %]]}\n'


@pytest.mark.parametrize(
    ("altitude", "said", "room"),
    [("800 m", "complies", 8), ("0.8 km", "complies", 8), ("799.999 m", "open", None), ("800.001 m", "open", None)],
)
def test_a_single_row_gives_its_value_on_its_key_alone(altitude: str, said: str, room: int | None) -> None:
    found = require("thin >= 90 %", f"air: {{altitude: {altitude}}}\n", ONE_ROW)
    assert (found.verdict, margin(found)) == (said, room)
    assert ("thin" in found.reason) == (said == "open")


# --- presence of what is empty ---------------------------------------------------------------------------------------


@pytest.mark.parametrize("collection", ["edges", "aero_surfaces", "ballast", "members", "masses", "points", "evidence"])
@pytest.mark.parametrize(
    ("stated", "said"), [("{}", "complies"), ("none", "breach"), (None, "open"), ("{complete: yes}", "complies")]
)
def test_an_empty_collection_is_stated(collection: str, stated: str | None, said: str) -> None:
    design = "" if stated is None else f"{collection}: {stated}\n"
    assert verdict(f"present({collection})", design) == said
    assert verdict(f"not present({collection})", design) == {"complies": "breach", "breach": "complies"}.get(said, said)


def test_an_item_without_fields_is_stated() -> None:
    assert verdict("present(aero_surfaces.wing)", "aero_surfaces: {wing: {}}\n") == "complies"
    assert verdict("present(aero_surfaces.fan)", "aero_surfaces: {wing: {}}\n") == "open"
    assert verdict("present(aero_surfaces.fan)", "aero_surfaces: {complete: yes, wing: {}}\n") == "breach"


# --- days are counted ------------------------------------------------------------------------------------------------

DAY = "inputs: {d: {kind: date, meaning: d}}\n"


@pytest.mark.parametrize(
    ("condition", "said"),
    [
        ("d - on == 3 days", "complies"),
        ("3 days == d - on", "complies"),
        ("on - d == 3 days", "breach"),
        ("abs(on - d) == 3 days", "complies"),
        ("d - on != 3 days", "breach"),
        ("d - on == 4 days", "breach"),
        ("d - on == d - on", "complies"),
        ("d == on + 3 days", "complies"),
    ],
)
def test_days_between_two_dates_are_counted(condition: str, said: str) -> None:
    assert verdict(condition, "d: 2027-03-04\n", DAY, on=date(2027, 3, 1)) == said


def test_a_date_that_is_missing_leaves_the_days_open() -> None:
    assert verdict("d - on == 3 days", "", DAY) == "open"


# --- a choice opposite an input of one word --------------------------------------------------------------------------

CHOICES = (
    "inputs: {k: {choices: [front, rear], meaning: k}, o: {choices: [rear, centre], meaning: o},\n"
    "  w: {kind: text, meaning: w}}\n"
)


@pytest.mark.parametrize(
    ("condition", "said"),
    [
        ("rear == k", "complies"),
        ("front == k", "breach"),
        ("k == rear", "complies"),
        ("rear != k", "breach"),
        ("not rear == k", "breach"),
        ("rear == o", "open"),
        ("k == o", "open"),
        ("w == k", "complies"),
        ("(1 if rear == k else 2) == 1", "complies"),
    ],
)
def test_a_choice_opposite_an_input_of_one_word(condition: str, said: str) -> None:
    assert verdict(condition, "k: rear\nw: rear\n", CHOICES) == said


def test_a_choice_wins_over_a_figure_only_opposite_an_input_that_declares_choices() -> None:
    named = CHOICES + "derived: {rear: {formula: 2 * 3}, front: {formula: w}}\n"
    assert verdict("rear == k", "k: rear\nw: rear\n", named) == "complies"
    assert verdict("rear == 6", "k: rear\nw: rear\n", named) == "complies"
    assert verdict("front == w", "k: rear\nw: rear\n", named) == "complies"


def test_a_word_that_is_no_choice_is_refused_with_its_name() -> None:
    found = refused("k: rear\n", CHOICES + "rules:\n  it: {require: reer == k}\n")
    assert [(item.code, "reer" in item.message) for item in found] == [("unknown-name", True)]


# --- the unit of a pure number ---------------------------------------------------------------------------------------

COUNT = 'inputs: {n: {unit: "1", meaning: n}, a: {unit: mm, meaning: a}}\n'


@pytest.mark.parametrize(
    ("condition", "said", "room"),
    [
        ("n >= 2 1", "complies", 1),
        ("n >= 0 1", "complies", 3),
        ("n == 3 1", "complies", None),
        ("n != 3 1", "breach", None),
        ("n <= 2.5 1", "breach", -0.5),
        ("0 1 <= n <= 4 1", "complies", 1),
        ("n * 2 1 <= 7 1", "complies", 1),
        ("(1 + 1 1) * 5 mm <= a", "complies", 2),
        ("a^2 1 <= 400 mm^2", "complies", 256),
        ("max(1 1, n) <= 3 1", "complies", 0),
        ("n in [1 1, 3 1]", "complies", None),
    ],
)
def test_the_unit_of_a_pure_number_may_be_written(condition: str, said: str, room: float | None) -> None:
    found = require(condition, "n: 3 1\na: 12 mm\n", COUNT)
    assert (found.verdict, margin(found)) == (said, room)
    assert found.margin is None or found.margin.unit in ("", "1", "mm", "mm^2", "m^2")


@pytest.mark.parametrize(
    "condition", ["n >= 3 1*2", "n >= 3 1/2", "n >= 3 1 mm", "n >= 3 1.0", "n >= 3 1e0", "n >= 3 10"]
)
def test_what_stands_behind_the_unit_of_a_pure_number(condition: str) -> None:
    found = refused("n: 3\n", COUNT + f"rules:\n  it: {{require: {condition}}}\n")
    assert [item.code for item in found] == ["formula-syntax"]
    assert found[0].advice or found[0].expected
