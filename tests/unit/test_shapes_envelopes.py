"""Envelopes: proved throughout, the worst point with its exact margin, and what is undecided. Margins by hand."""

from __future__ import annotations

from fractions import Fraction

import pytest
from small_files import check_texts, margin, only, refused

from rulecheck.outcome.results import Finding

LEAN = """\
inputs:
  test.load: {unit: kN, meaning: Load of a test}
  test.room: {unit: "1", meaning: A number}
  test.other: {unit: "1", meaning: Another number}
  test.tilt: {unit: deg, meaning: An angle}
"""
TEST = "test: {room: 4, other: 1}\n"


def rule(require: str, envelope: str = "{test.room: [1, 3]}", more: str = "") -> Finding:
    text = f'{LEAN}rules:\n  it:\n    envelope: {envelope}\n    require: "{require}"\n{more}'
    return only(TEST, text)


def place(found: Finding) -> dict[str, str]:
    assert found.binding is not None
    return {path: value.exact for path, value in found.binding.at.items()}


@pytest.mark.parametrize(
    ("require", "verdict", "room", "at"),
    [
        # Least at an end, by a slope of one sign.
        ("test.room <= 5", "complies", "2", "3"),
        ("test.room >= 1", "complies", "0", "1"),
        ("test.room > 1", "breach", "0", "1"),
        ("test.room <= 2", "breach", "-1", "3"),
        ("test.room * test.room <= 9", "complies", "0", "3"),
        ("test.room * test.room < 9", "breach", "0", "3"),
        ("sqrt(test.room) <= 2", "complies", None, "3"),
        # Least inside: x (4 - x) is 4 at x = 2.
        ("test.room * (4 - test.room) <= 4.5", "complies", "0.5", "2"),
        ("test.room * (4 - test.room) <= 3.5", "breach", "-0.5", "2"),
        # A figure with a corner, and both sides of a range.
        ("abs(test.room - 2) <= 1", "complies", "0", None),
        ("0.5 <= test.room <= 3.5", "complies", "0.5", None),
        ("min(test.room, 4 - test.room) >= 1", "complies", "0", None),
        # The value that the design states plays no part.
        ("test.room <= 3.9", "complies", "0.9", "3"),
    ],
)
def test_one_axis(require: str, verdict: str, room: str | None, at: str | None) -> None:
    found = rule(require)
    assert found.verdict == verdict, found.reason
    assert found.margin is not None
    if room is not None:
        assert found.margin.exact == room
    if at is not None:
        assert place(found) == {"test.room": at}
    assert found.envelope is not None
    assert found.envelope.undecided == ()


def test_the_least_margin_is_certified() -> None:
    found = rule("test.room * (4 - test.room) <= 4.5")
    assert found.envelope is not None
    assert found.envelope.bound is not None
    assert found.envelope.bound.value is not None
    assert 0.499 < found.envelope.bound.value <= 0.5


def test_two_axes_and_pi() -> None:
    found = rule("test.room + test.other <= 8", "{test.room: [1, 3], test.other: [-2, 5]}")
    assert (found.verdict, margin(found)) == ("complies", 0)
    assert place(found) == {"test.room": "3", "test.other": "5"}
    tilted = rule("tan(test.tilt) <= 1", "{test.tilt: [0 deg, 45 deg]}")
    assert (tilted.verdict, margin(tilted)) == ("complies", 0)
    assert place(tilted) == {"test.tilt": "45"}


def test_conditional_arms_when_and_unless_are_judged_at_each_point() -> None:
    require = "(test.room <= 2) if test.room < 2 else (test.room >= 2)"
    assert rule(require).verdict == "complies"
    assert rule("(test.room <= 1.5) if test.room < 2 else (test.room >= 2)").verdict == "breach"
    assert rule("test.room <= 2", more="    when: test.room <= 2\n").verdict == "complies"
    assert rule("test.room <= 2", more="    unless: {when: test.room > 2, because: fast}\n").verdict == "complies"
    assert rule("test.room <= 2", more="    unless: {when: test.room >= 2.5, because: fast}\n").verdict == "breach"
    assert rule("test.room <= 1", more="    when: test.room > 3\n").verdict == "not applicable"


def test_undefined_somewhere_says_where() -> None:
    found = rule("1 / (test.room - 2) <= 100")
    assert found.verdict == "breach"
    found = rule("1 / (test.room - 1) >= 0")
    assert found.verdict == "unproven"
    assert "division by zero" in found.reason
    assert "at test.room 1" in found.reason


def test_what_is_missing_is_open() -> None:
    found = rule("test.room * test.load <= 5 kN")
    assert (found.verdict, found.margin) == ("open", None)
    assert "test.load" in found.reason


def test_states_and_each_are_a_product_with_it() -> None:
    design = "test: {other: 1}\nstates: {fuel: {empty: {test.other: 3}, full: {test.other: 2}}}\n"
    book = f"states_needed: {{fuel: [empty, full]}}\n{LEAN}rules:\n  it:\n    states: every\n    envelope: {{test.room: [1, 3]}}\n"
    found = only(design, book + "    require: test.room + test.other <= 6.5\n")
    assert (found.verdict, margin(found), place(found)) == ("complies", Fraction(1, 2), {"test.room": "3"})
    assert found.binding is not None
    assert dict(found.binding.state) == {"fuel": "empty"}
    assert len(found.parts) == 2


def test_rule_of_an_envelope_can_be_asked_for() -> None:
    book = (
        LEAN + "rules:\n  it: {envelope: {test.room: [1, 3]}, require: test.room <= %s}\n  other: {require: rule(it)}\n"
    )
    for limit, verdict in (("3", "complies"), ("2.9", "breach")):
        assert [item.verdict for item in check_texts(TEST, book % limit).rules] == [verdict, verdict]


def test_thresholds_are_found_where_they_are() -> None:
    steps = "test.room <= (2.25 if test.room <= 2.25 else 3)"
    assert rule(steps).verdict == "complies"
    assert rule("test.room <= (7 if test.room < 2.3 else 3)").verdict == "complies"
    jump = "test.room * 3 <= (test.room * 2 + 2.3 if test.room < 2.3 else 9)"
    found = rule(jump)
    assert (found.verdict, margin(found)) == ("complies", 0)
    two = "{test.room: [1, 3], test.other: [0, 1]}"
    assert rule("test.room + test.other <= (3.3 if test.room < 2.3 else 4)", two).verdict == "complies"


def test_a_table_by_steps() -> None:
    table = (
        "tables: {most: {over: test.room, steps: [{up_to: 1.7, value: 2}, {below: 2.9, value: 3}, {otherwise: 3}]}}\n"
    )
    book = LEAN + table + "rules:\n  it: {envelope: {test.room: [1, 3]}, require: test.room <= most}\n"
    assert only(TEST, book).verdict == "complies"


def test_reserves_hold_throughout() -> None:
    book = LEAN + "rules:\n  it: {envelope: {test.room: [1, 3]}, require: test.room <= 3.3}\n"
    share = {Fraction(1, 10): "tight", Fraction(1, 11): "complies", Fraction(1, 20): "complies"}
    for reserve, verdict in share.items():
        assert only(TEST, book, reserve=reserve).verdict == verdict


def test_the_margin_of_such_a_rule_is_no_number_of_a_formula() -> None:
    book = LEAN + "rules:\n  it: {envelope: {test.room: [1, 3]}, require: test.room <= 4}\n"
    (fault,) = refused(TEST, book + "  other: {require: margin(it) >= 1}\n")
    assert fault.code == "kind-mismatch"


def test_the_budget_of_boxes_ends() -> None:
    # sin(1000 x) meets its limit hundreds of times, at no corner: nothing is said that is not proved.
    found = rule("test.room - test.room <= 1 - sin(1000 * test.room)")
    assert found.verdict == "unproven"
    assert "not proved for test.room from" in found.reason
    assert found.envelope is not None
    assert found.envelope.undecided


def test_tolerance_and_rounding_at_the_worst_point() -> None:
    found = rule("test.room <= 2.9", more="    tolerance: 0.2\n")
    assert (found.verdict, margin(found)) == ("complies", Fraction(1, 10))
    assert found.ruled is not None
    assert found.ruled.margin is not None
    assert found.ruled.margin.exact == "-0.1"
    rounded = rule("test.room * test.room <= 9", more="    rounding: {to: 1, how: nearest}\n")
    assert rounded.verdict in ("complies", "unproven")
