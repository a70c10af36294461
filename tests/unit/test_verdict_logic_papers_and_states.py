"""Documents, judgements, states, presence, tables and lists: each on the point where it turns. Margins by hand."""

from __future__ import annotations

from datetime import date
from fractions import Fraction

import pytest
from small_files import DAY, margin, only, refused, require

LATER, LAST, OVER = date(2027, 2, 10), date(2027, 6, 30), date(2027, 7, 1)


def evidence(text: str = "kind: certificate, name: hoop") -> str:
    return f"rules:\n  it:\n    evidence: {{{text}}}\n"


def hoop(text: str) -> str:
    return f"evidence: {{hoop: {{{text}}}}}\n"


GOOD = "kind: certificate, issued: 2027-02-10, until: 2027-06-30"


@pytest.mark.parametrize(
    ("paper", "day", "verdict", "days"),
    [
        (GOOD, DAY, "complies", 121),
        (GOOD, LAST, "complies", 0),
        (GOOD, OVER, "breach", -1),
        (GOOD, LATER, "complies", 140),
        (GOOD, date(2027, 2, 9), "open", None),
        ("kind: certificate, until: 2027-06-30", LAST, "complies", 0),
        ("kind: certificate, issued: 2027-02-10", DAY, "open", None),
        ("kind: drawing, until: 2027-06-30", DAY, "open", None),
        ("until: 2027-06-30", DAY, "open", None),
        ("kind: certificate, issued: 2027-03-02, until: 2027-02-01", DAY, "open", None),
    ],
)
def test_the_days_of_a_document(paper: str, day: date, verdict: str, days: int | None) -> None:
    found = only(hoop(paper), evidence(), on=day)
    assert (found.verdict, margin(found)) == (verdict, days)
    if days is not None:
        (part,) = found.parts
        assert (part.kind, part.sense, found.relative_margin) == ("evidence", "until", None)
        assert (str(part.value), str(part.limit)) == (day.isoformat(), "2027-06-30")
        assert part.text == "certificate 'hoop'" + ("" if "issued" in paper else ", day of issue not stated")
        assert found.value_place is not None


@pytest.mark.parametrize(
    ("paper", "day", "verdict"),
    [
        (None, DAY, "open"),
        (None, LAST, "open"),
        (None, OVER, "breach"),
        ("none", OVER, "breach"),
        ("none", DAY, "open"),
        ("{kind: drawing}", OVER, "complies"),
        ("{kind: drawing}", DAY, "complies"),
        ("{kind: calculation}", OVER, "open"),
    ],
)
def test_the_day_on_which_a_document_is_due(paper: str | None, day: date, verdict: str) -> None:
    rule = evidence("kind: drawing, name: hoop, due: 2027-06-30")
    found = only("" if paper is None else f"evidence: {{hoop: {paper}}}\n", rule, on=day)
    assert (found.verdict, found.margin) == (verdict, None)
    assert all(part.kind == "evidence" for part in found.parts) or verdict == "open"


def test_a_due_day_may_rest_on_the_design() -> None:
    declared = "inputs: {first: {kind: date, meaning: First event}}\n"
    rule = declared + evidence('kind: drawing, name: hoop, due: "first + 10 days"')
    assert only("first: 2027-02-18\n", rule).verdict == "breach"
    assert only("first: 2027-02-19\n", rule).verdict == "open"
    assert only("", rule).verdict == "open"


@pytest.mark.parametrize(
    ("papers", "verdict"),
    [
        ("a: {proof: p}\nevidence: {p: {kind: inspection}}", "complies"),
        ("a: {proof: q}\nevidence: {p: {kind: inspection}}", "open"),
        ("a: {}\nevidence: {p: {kind: inspection}}", "open"),
        ("a: {proof: p}\nevidence: {p: {kind: inspection, until: 2027-02-28}}", "breach"),
    ],
)
def test_documents_named_by_an_element(papers: str, verdict: str) -> None:
    declared = (
        "inputs: {lamps: {kind: collection, meaning: Lamps, element: {proof: {kind: text, meaning: Its paper}}}}\n"
    )
    rule = f"{declared}rules:\n  it: {{each: l in lamps, evidence: {{kind: inspection, name: l.proof}}}}\n"
    assert only(f"lamps:\n  {papers}\n", rule).verdict == verdict
    by_name = rule.replace("l.proof", "l")
    assert only("lamps: {p: {}}\nevidence: {p: {kind: inspection}}\n", by_name).verdict == "complies"
    assert only("lamps: {r: {}}\nevidence: {p: {kind: inspection}}\n", by_name).verdict == "open"


# --- judgements ------------------------------------------------------------------------------------------------------

SLOT = {"verdict": "complies", "role": "scrutineer", "date": "2027-03-01", "reason": "felt by hand"}
FINISH = "rules:\n  it: {judgement: Is it smooth?}\n"


def slot(**changes: str | None) -> str:
    fields = {key: value for key, value in {**SLOT, **changes}.items() if value is not None}
    return "{" + ", ".join(f"{key}: {value}" for key, value in fields.items()) + "}"


@pytest.mark.parametrize(
    ("given", "verdict", "reason"),
    [
        (slot(), "complies", ""),
        (slot(verdict="breach"), "breach", ""),
        (slot(date="2027-03-02"), "open", "later day"),
        (slot(date="2027-02-28"), "complies", ""),
        (slot(verdict=None), "open", "(verdict)"),
        (slot(role=None), "open", "(role)"),
        (slot(reason=None), "open", "(reason)"),
        (slot(date=None), "open", "(date)"),
        (slot(role=None, date=None), "open", "(role, date)"),
    ],
)
def test_a_judgement(given: str, verdict: str, reason: str) -> None:
    found = only(f"judgements: {{it: {given}}}\n", FINISH)
    assert (found.verdict, found.margin) == (verdict, None)
    assert reason in found.reason
    (part,) = found.parts
    assert (part.kind, part.text, part.verdict) == ("judgement", "judgement: Is it smooth?", verdict)


def test_a_judgement_that_is_not_there_at_all() -> None:
    found = only("", FINISH)
    assert (found.verdict, "(" in found.reason) == ("open", False)


@pytest.mark.parametrize(
    ("given", "verdict"),
    [
        (f"{{lip: {slot()}, sill: {slot()}}}", "complies"),
        (f"{{lip: {slot()}, sill: {slot(verdict='breach')}}}", "breach"),
        (f"{{lip: {slot()}}}", "open"),
    ],
)
def test_judgements_by_element(given: str, verdict: str) -> None:
    rule = "rules:\n  it: {each: e in edges, judgement: Is it smooth?}\n"
    assert only(f"edges: {{lip: {{}}, sill: {{}}}}\njudgements: {{it: {given}}}\n", rule).verdict == verdict


# --- states ----------------------------------------------------------------------------------------------------------

MASSES = "masses: {tub: {mass: 100 kg}, fuel: {mass: 40 kg}, man: {mass: 70 kg}}\n"
STATES = "states: {fuel: {empty: {masses.fuel.mass: 0 kg}, full: {}}, crew: {light: {masses.man.mass: 60 kg}, heavy: {masses.man.mass: 90 kg}}}\n"


def weighed(states: str, needed: str = "fuel: [empty, full], crew: [light, heavy]", limit: str = ">= 150 kg") -> str:
    return (
        f"states_needed: {{{needed}}}\nrules:\n  it:\n    states: {states}\n"
        f'    require: "masses.tub.mass + masses.fuel.mass + masses.man.mass {limit}"\n'
    )


@pytest.mark.parametrize(
    ("states", "room", "count"),
    [
        ("every", 10, 4),
        ("{fuel: every}", 20, 2),
        ("{crew: every}", 50, 2),
        ("{crew: [heavy]}", 80, 1),
        ("{fuel: [full], crew: [heavy]}", 80, 1),
        ("{fuel: [empty, full], crew: [heavy]}", 40, 2),
    ],
)
def test_the_combinations_of_states(states: str, room: int, count: int) -> None:
    found = only(MASSES + STATES, weighed(states))
    assert (found.verdict, margin(found), len(found.parts)) == ("complies", room, count)
    worst = only(MASSES + STATES, weighed(states, limit="<= 100 kg"))
    assert worst.verdict == "breach"


@pytest.mark.parametrize(
    ("design", "states", "verdict", "reason"),
    [
        (MASSES, "every", "open", "state fuel: empty"),
        (MASSES + "states: {fuel: {empty: {masses.fuel.mass: 0 kg}}}\n", "{fuel: every}", "open", "state fuel: full"),
        (MASSES + "states: {fuel: {empty: {masses.fuel.mass: 0 kg}}}\n", "{fuel: [empty]}", "complies", ""),
        (MASSES + STATES, "{fuel: [empty, half]}", "open", "state fuel: half"),
        (MASSES + "states: {crew: {light: {}, heavy: {}}}\n", "{crew: every}", "complies", ""),
    ],
)
def test_states_that_are_missing(design: str, states: str, verdict: str, reason: str) -> None:
    found = only(design, weighed(states))
    assert found.verdict == verdict
    assert reason in found.reason
    assert bool(found.reason) == bool(reason)
    if verdict == "open" and "half" not in states:
        assert only(design, weighed(states, limit="<= 100 kg")).verdict == ("breach" if "states:" in design else "open")


@pytest.mark.parametrize(
    ("sets", "state", "verdict"),
    [
        ('"masses.fuel.mass"', "{masses.fuel.mass: 0 kg}", "complies"),
        ('"masses.fuel.mass"', "{}", "open"),
        ('"masses.fuel.mass"', "{masses.man.mass: 80 kg}", "open"),
        ('"masses.*.mass"', "{masses.fuel.mass: 0 kg}", "open"),
        ('"masses.*.mass"', "{masses.fuel.mass: 1 kg, masses.tub.mass: 90 kg, masses.man.mass: 70 kg}", "complies"),
        ('"masses.fuel.mass", "masses.man.mass"', "{masses.fuel.mass: 0 kg}", "open"),
        ('"masses.fuel"', "{masses.fuel.mass: 0 kg}", "open"),
        ('"masses.fuel"', "{masses.fuel: none}", "complies"),
        ('"edges.*.radius"', "{masses.fuel.mass: 0 kg}", "open"),
    ],
)
def test_what_a_state_has_to_set(sets: str, state: str, verdict: str) -> None:
    named = "masses.tub.mass + masses.fuel.mass + masses.man.mass"  # an item that is away has no mass to be named
    text = weighed("every", f"fuel: {{empty: {{sets: [{sets}]}}}}").replace(named, "sum(m.mass for m in masses)")
    found = only(f"{MASSES}states: {{fuel: {{empty: {state}}}}}\n", text)
    assert found.verdict == verdict
    assert ("sets no" in found.reason) == (verdict == "open")


@pytest.mark.parametrize(
    ("one", "other", "clash"),
    [
        ("masses.fuel.mass: 0 kg", "masses.fuel.mass: 1 kg", True),
        ("masses.fuel: none", "masses.fuel.mass: 1 kg", True),
        ("masses.fuel.mass: 1 kg", "masses.fuel: none", True),
        ("masses.fuel.mass: 1 kg", "masses.man.mass: 60 kg", False),
        ("masses.fuel.mass: 1 kg", "masses.fuel.at: 1 0 0 m", False),
        ("masses.fuel.mass: 1 kg", "masses.fuel.mass_of_no_use: 1 kg", None),
    ],
)
def test_states_that_set_one_path(one: str, other: str, clash: bool | None) -> None:
    design = f"{MASSES}states: {{fuel: {{empty: {{{one}}}}}, crew: {{light: {{{other}}}}}}}\n"
    text = weighed("every", "fuel: [empty], crew: [light]")
    if clash:
        assert "state-clash" in {item.code for item in refused(design, text)}
    elif clash is None:
        assert "state-clash" not in {item.code for item in refused(design, text)}
    else:
        assert only(design, text).verdict == "complies"


def test_one_axis_may_set_a_path_in_all_its_states() -> None:
    assert only(MASSES + STATES, weighed("{crew: every}")).verdict == "complies"


@pytest.mark.parametrize("states", ["{fule: every}", "{fuel: [emty]}", "{wings: every}"])
def test_states_that_nobody_knows_are_refused(states: str) -> None:
    assert {item.code for item in refused(MASSES + STATES, weighed(states))} == {"unknown-state"}


def test_exemptions_and_windows_hold_in_every_state() -> None:
    text = weighed("every") + "    unless: {when: masses.fuel.mass <= 0 kg, because: Dry}\n"
    assert margin(only(MASSES + STATES, text)) == 50
    idle = weighed("every") + "    standing: note\n"
    assert only(MASSES + STATES, idle).verdict == "not applicable"


# --- presence --------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("design", "verdict"),
    [
        ("aero_surfaces: {rear_wing: {kind: wing}}\n", "complies"),
        ("aero_surfaces: {rear_wing: none}\n", "breach"),
        ("aero_surfaces: {front_wing: {kind: wing}}\n", "open"),
        ("aero_surfaces: {complete: yes, front_wing: {kind: wing}}\n", "breach"),
        ("aero_surfaces: {complete: yes, rear_wing: {kind: wing}}\n", "complies"),
        ("aero_surfaces: none\n", "breach"),
        ("", "open"),
    ],
)
def test_presence(design: str, verdict: str) -> None:
    turned = {"complies": "breach", "breach": "complies"}
    assert require("present(aero_surfaces.rear_wing)", design).verdict == verdict
    assert require("not present(aero_surfaces.rear_wing)", design).verdict == turned.get(verdict, verdict)


@pytest.mark.parametrize(
    ("design", "verdict"),
    [
        ("recovery: {power: 1 kW}\n", "complies"),
        ("recovery: {power: none}\n", "breach"),
        ("recovery: {axle: rear}\n", "open"),
        ("", "open"),
        ("recovery: none\n", "breach"),
    ],
)
def test_presence_of_a_value(design: str, verdict: str) -> None:
    assert require("present(recovery.power)", design).verdict == verdict


def test_presence_of_a_field_of_an_element() -> None:
    rule = "rules:\n  it: {each: e in edges, require: present(e.radius)}\n"
    assert only("edges: {lip: {radius: 1 mm}}\n", rule).verdict == "complies"
    assert only("edges: {lip: {exposed: yes}}\n", rule).verdict == "open"
    assert only("edges: {lip: {radius: none}}\n", rule).verdict == "breach"
    assert require("present(masses)", MASSES).verdict == "complies"


@pytest.mark.parametrize("text", ["present(rear_wing)", "present(3)", "present(a, b)", "present(recovery.colour)"])
def test_presence_of_what_nothing_can_be_stated_under(text: str) -> None:
    assert {item.code for item in refused("", f"rules:\n  it: {{require: '{text}'}}\n")} <= {
        "unknown-name", "wrong-arguments",
    }  # fmt: skip


# --- tables and lists ------------------------------------------------------------------------------------------------

DECLARED = "inputs: {a: {unit: mm, meaning: a}, m: {unit: kg, meaning: m}, k: {choices: [front, rear], meaning: k}, f: {kind: flag, meaning: f}, w: {kind: text, meaning: w}}\n"


def table(text: str) -> str:
    return f"{DECLARED}tables:\n  least: {{{text}}}\n"


STEPS = table(
    "over: a, steps: [{up_to: 10 mm, value: 1 kg}, {below: 20 mm, value: 2 kg}, {up_to: 20 mm, value: 3 kg}, {otherwise: 4 kg}]"
)


@pytest.mark.parametrize(
    ("a", "room"), [("0", 9), ("10", 9), ("10.1", 8), ("19.9", 8), ("20", 7), ("20.1", 6), ("900", 6)]
)
def test_steps(a: str, room: int) -> None:
    found = require("m >= least", f"a: {a} mm\nm: 10 kg\n", STEPS)
    assert (found.verdict, margin(found)) == ("complies", room)
    assert found.margin is not None
    assert found.margin.unit == "kg"


@pytest.mark.parametrize(("key", "room"), [("a", 9), ("2 * a", 8), ("a + 15 mm", 6)])
def test_steps_for_another_key(key: str, room: int) -> None:
    assert margin(require(f"m >= least({key})", "a: 8 mm\nm: 10 kg\n", STEPS)) == room


def test_a_key_without_a_row() -> None:
    short = STEPS.replace(", {otherwise: 4 kg}", "")
    found = require("m >= least", "a: 21 mm\nm: 10 kg\n", short)
    assert (found.verdict, "least" in found.reason) == ("open", True)
    assert require("m >= least", "m: 10 kg\n", short).verdict == "open"
    assert require("m >= least", "m: 10 kg\n", STEPS).verdict == "open"


WORDS = table("over: k, steps: [{is: front, value: soft}, {is: rear, value: hard}]")


@pytest.mark.parametrize(
    ("design", "verdict"),
    [
        ("k: front\nw: soft\n", "complies"),
        ("k: rear\nw: soft\n", "breach"),
        ("k: rear\nw: hard\n", "complies"),
        ("w: hard\n", "open"),
    ],
)
def test_tables_of_words(design: str, verdict: str) -> None:
    assert require("w == least", design, WORDS).verdict == verdict


def test_a_word_of_a_table_stands_opposite_it() -> None:
    assert require("least == soft", "k: front\n", WORDS).verdict == "complies"
    assert require("least == hard", "k: front\n", WORDS).verdict == "breach"


GATED = table(
    "over: [a, k], steps: [{when: a <= 10 mm and k == front, value: 1 kg}, {when: f, value: 2 kg}, {otherwise: 3 kg}]"
)


@pytest.mark.parametrize(
    ("design", "room"),
    [
        ("a: 8 mm\nk: front\nf: no\n", 9),
        ("a: 8 mm\nk: rear\nf: yes\n", 8),
        ("a: 12 mm\nk: front\nf: no\n", 7),
        ("a: 12 mm\nf: no\n", 7),
        ("a: 8 mm\nf: yes\n", None),
        ("a: 8 mm\nk: rear\n", None),
    ],
)
def test_tables_with_a_condition_each(design: str, room: int | None) -> None:
    found = require("m >= least", design + "m: 10 kg\n", GATED)
    assert (found.verdict, margin(found)) == ("open" if room is None else "complies", room)


LINES = table("over: a, linear: [[0 mm, 1 kg], [10 mm, 3 kg], [30 mm, 2 kg]]")


@pytest.mark.parametrize(
    ("a", "room"),
    [
        ("-1", None), ("0", 9), ("5", 8), ("10", 7), ("15", Fraction(29, 4)), ("20", Fraction(15, 2)), ("30", 8), ("31", None),
    ],
)  # fmt: skip
def test_straight_lines(a: str, room: Fraction | int | None) -> None:
    found = require("m >= least", f"a: {a} mm\nm: 10 kg\n", LINES)
    assert (found.verdict, margin(found)) == ("open" if room is None else "complies", room)
    assert room is not None or "least" in found.reason
    assert margin(require("m >= least(2 * a)", "a: 5 mm\nm: 10 kg\n", LINES)) == 7


@pytest.mark.parametrize("unit", ["", ", unit: gram"])
def test_the_unit_of_a_table(unit: str) -> None:
    for text in (STEPS, LINES):
        found = require("m >= least", "a: 10 mm\nm: 10 kg\n", text.replace("over: a,", f"over: a{unit},"))
        assert found.limit is not None
        assert found.limit.unit == ("gram" if unit else "kg")


@pytest.mark.parametrize(
    "text",
    [
        "over: a, steps: [{up_to: 20 mm, value: 1 kg}, {up_to: 10 mm, value: 2 kg}]",
        "over: a, steps: [{up_to: 20 mm, value: 1 kg}, {below: 20 mm, value: 2 kg}]",
        "over: a, steps: [{up_to: 20 mm, value: 1 kg}, {up_to: 20 mm, value: 2 kg}]",
        "over: a, steps: [{below: 20 mm, value: 1 kg}, {up_to: 19 mm, value: 2 kg}]",
        "over: k, steps: [{is: front, value: 1 kg}, {is: front, value: 2 kg}]",
        "over: a, linear: [[0 mm, 1 kg], [0 mm, 3 kg]]",
        "over: a, linear: [[10 mm, 1 kg], [0 mm, 3 kg]]",
        "over: a, steps: [{up_to: 10 mm, value: 1 kg}, {up_to: 20 mm, value: 2 mm}]",
        "over: a, steps: [{up_to: 10 mm, value: 1 kg}, {up_to: 20 mm, value: soft}]",
        "over: a, linear: [[0 mm, 1 kg], [10 mm, 3 mm]]",
        "over: a, linear: [[0 kg, 1 kg], [10 kg, 3 kg]]",
        "over: a, unit: mm, steps: [{up_to: 10 mm, value: 1 kg}]",
        "over: [a, m], steps: [{up_to: 10 mm, value: 1 kg}]",
    ],
)
def test_tables_that_are_refused(text: str) -> None:
    assert refused("a: 8 mm\nm: 10 kg\n", f"{table(text)}rules:\n  it: {{require: m >= least}}\n")


@pytest.mark.parametrize(
    ("listed", "condition", "verdict"),
    [
        ("[2 mm, 8 mm]", "a in allowed", "complies"),
        ("[2 mm, 9 mm]", "a in allowed", "breach"),
        ("[-8 mm, 9 mm]", "-a in allowed", "complies"),
        ("[soft, hard]", "w in allowed", "complies"),
        ("[hard]", "w in allowed", "breach"),
        ('["25CrMo4", soft]', "w in allowed", "complies"),
        ('["8", soft]', "w in allowed", "complies"),
        ("[front, rear]", "k in allowed", "open"),
    ],
)
def test_lists(listed: str, condition: str, verdict: str) -> None:
    declared = f"{DECLARED}lists: {{allowed: {listed}}}\n"
    assert require(condition, "a: 8 mm\nw: soft\n", declared).verdict == verdict


def test_the_words_of_a_document_that_is_not_there() -> None:
    for design in ("", hoop("kind: drawing, until: 2027-06-30"), hoop("until: 2027-06-30"), "evidence: {hoop: none}\n"):
        (part,) = only(design, evidence()).parts
        assert part.text == "certificate 'hoop'"
    assert "is a drawing" in only(hoop("kind: drawing, until: 2027-06-30"), evidence()).reason
    assert "the kind of" in only(hoop("until: 2027-06-30"), evidence()).reason
    (absent,) = only("", evidence()).parts
    assert absent.kind == "evidence"
    (late,) = only("", evidence("kind: drawing, name: hoop, due: 2027-02-01")).parts
    assert (late.kind, late.text) == ("evidence", "drawing 'hoop' by its day")


def test_an_element_that_names_no_document_has_none() -> None:
    declared = (
        "inputs: {lamps: {kind: collection, meaning: Lamps, element: {proof: {kind: text, meaning: Its paper}}}}\n"
    )
    rule = f"{declared}rules:\n  it: {{each: l in lamps, evidence: {{kind: inspection, name: l.proof}}}}\n"
    assert only("lamps: {a: {}}\nevidence: {None: {kind: inspection}}\n", rule).verdict == "open"


@pytest.mark.parametrize(
    ("given", "verdict"),
    [
        (f"judgements: {{it: {slot()}}}\n", "open"),
        (f"judgements: {{it: {{lip: {slot()}}}}}\n", "complies"),
        ("judgements: {it: {lip: {verdict: complies}}}\n", "open"),
    ],
)
def test_a_judgement_of_a_rule_speaks_of_no_element(given: str, verdict: str) -> None:
    rule = "rules:\n  it: {each: e in edges, judgement: Is it smooth?}\n"
    assert only(f"edges: {{lip: {{}}}}\n{given}", rule).verdict == verdict


@pytest.mark.parametrize(
    ("design", "verdict"),
    [
        ("aero_surfaces: {complete: yes, front_wing: {kind: wing}}\n", "breach"),
        ("aero_surfaces: {front_wing: {kind: wing}}\n", "open"),
        ("aero_surfaces: {complete: yes, rear_wing: {kind: wing}}\n", "breach"),
        ("aero_surfaces: {complete: yes, rear_wing: {kind: wing, drag_area: 1 m^2}}\n", "complies"),
    ],
)
def test_presence_inside_a_collection_that_is_complete(design: str, verdict: str) -> None:
    assert require("present(aero_surfaces.rear_wing.drag_area)", design).verdict == verdict


@pytest.mark.parametrize("unit", ["", ", unit: kg"])
def test_tables_whose_rows_are_written_in_other_units(unit: str) -> None:
    steps = table(f"over: a{unit}, steps: [{{up_to: 10 mm, value: m * 0.1}}, {{otherwise: 4000 gram}}]")
    lines = table(f"over: a{unit}, linear: [[0 mm, 1000 gram], [10 mm, 2000 gram]]")
    for text in (steps, lines):
        found = require("m >= least", "a: 10 mm\nm: 10 kg\n", text)
        assert found.limit is not None
        assert found.verdict == "complies"
        assert found.limit.unit == ("kg" if unit or text == steps else "gram")


def test_states_named_without_being_needed() -> None:
    text = weighed("{fuel: [empty]}", "crew: [light, heavy]")
    found = only(MASSES + STATES, text)
    assert (found.verdict, margin(found)) == ("complies", 20)


def test_the_unit_of_a_table_is_that_of_the_first_row_that_has_one() -> None:
    for first in ("m * a / a", "1000 gram"):
        text = table(f"over: a, steps: [{{up_to: 10 mm, value: {first}}}, {{otherwise: 4000 gram}}]")
        found = require("m >= least", "a: 10 mm\nm: 10 kg\n", text)
        assert found.limit is not None
        assert found.limit.unit == "gram"


def test_a_line_needs_two_rows() -> None:
    for key in (9, 11):
        single = table("over: a, linear: [[10 mm, 2 kg]]")
        assert require("m >= least", f"a: {key} mm\nm: 10 kg\n", single).verdict == "open"


def test_a_text_that_is_not_stated_is_no_word_of_a_table() -> None:
    text = table("over: k, steps: [{is: front, value: w}, {is: rear, value: hard}]")
    assert refused("k: front\n", f"{text}rules:\n  it: {{require: least == None}}\n")
