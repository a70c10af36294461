"""States: which are judged, what a missing one means, how two axes go together. Margins by hand."""

from __future__ import annotations

import pytest
from small_files import check_texts, findings, margin, only, refused

CAR = """\
masses:
  tub: {mass: 700 kg, at: 1000 0 300 mm}
  fuel: {mass: 50 kg, at: 1600 0 270 mm}
  driver: {mass: 75 kg, at: 1100 0 330 mm}
"""
FUEL = "  fuel:\n    empty: {masses.fuel.mass: 0 kg}\n    full: {}\n"
DRIVER = "  driver:\n    light: {masses.driver.mass: 60 kg}\n    heavy: {masses.driver.mass: 90 kg}\n"
BOTH = f"states:\n{FUEL}{DRIVER}"
NEEDED = "states_needed: {fuel: [empty, full], driver: [light, heavy]}\n"


def mass(states: str, limit: str = ">= 760 kg") -> str:
    said = f"    states: {states}\n" if states else ""
    return f'{NEEDED}rules:\n  it:\n{said}    require: "sum(m.mass for m in masses) {limit}"\n'


@pytest.mark.parametrize(
    ("states", "room", "state"),
    [
        # As written: 700 + 50 + 75 = 825 kg; least: 700 + 0 + 60 = 760 kg; fuel empty alone: 700 + 0 + 75 = 775 kg.
        ("", 65, {}),
        ("every", 0, {"fuel": "empty", "driver": "light"}),
        ("{fuel: every}", 15, {"fuel": "empty"}),
        ("{fuel: [full], driver: every}", 50, {"fuel": "full", "driver": "light"}),
        ("{fuel: full}", 65, {"fuel": "full"}),
        ("{driver: [heavy], fuel: [empty]}", 30, {"fuel": "empty", "driver": "heavy"}),
    ],
)
def test_which_states_are_judged(states: str, room: int, state: dict[str, str]) -> None:
    found = only(CAR + BOTH, mass(states))
    assert (found.verdict, margin(found)) == ("complies", room)
    assert found.binding is not None
    assert dict(found.binding.state) == state


def test_every_combination_is_a_part_of_its_own() -> None:
    found = only(CAR + BOTH, mass("every"))
    assert len(found.parts) == 4
    assert {tuple(sorted(part.state.items())) for part in found.parts} == {
        (("driver", driver), ("fuel", fuel)) for driver in ("light", "heavy") for fuel in ("empty", "full")
    }


def test_states_of_the_design_that_nobody_needs_are_not_judged() -> None:
    more = BOTH + "    giant: {masses.driver.mass: 10 kg}\n"
    assert margin(only(CAR + more, mass("every"))) == 0


def test_a_named_state_that_only_the_design_has_is_judged() -> None:
    more = BOTH + "    giant: {masses.driver.mass: 10 kg}\n"
    # 700 + 50 + 10 = 760 kg.
    assert margin(only(CAR + more, mass("{driver: [giant]}"))) == 0


@pytest.mark.parametrize(
    ("design", "states", "said"),
    [
        (CAR, "every", "open"),
        (f"{CAR}states:\n{FUEL}", "every", "open"),
        (f"{CAR}states:\n{FUEL}", "{fuel: every}", "complies"),
        (f"{CAR}states:\n{FUEL.replace('    full: {}', '')}", "{fuel: every}", "open"),
        (f"{CAR}states:\n{FUEL.replace('    full: {}', '')}", "{fuel: [empty]}", "complies"),
        (f"{CAR}states:\n{FUEL}", "", "complies"),
    ],
)
def test_a_missing_state_is_open(design: str, states: str, said: str) -> None:
    found = only(design, mass(states))
    assert found.verdict == said
    assert ("state " in found.reason) == (said == "open")


def test_a_breach_in_one_state_outweighs_a_state_that_is_missing() -> None:
    design = f"{CAR}states:\n{FUEL.replace('    full: {}', '')}"
    assert only(design, mass("{fuel: every}", ">= 780 kg")).verdict == "breach"


def test_what_a_state_must_set() -> None:
    needed = 'states_needed: {fuel: {empty: {sets: ["masses.fuel.mass"]}, full: {}}}\n'
    rule = needed + 'rules:\n  it:\n    states: every\n    require: "sum(m.mass for m in masses) >= 760 kg"\n'
    assert only(f"{CAR}states:\n{FUEL}", rule).verdict == "complies"
    hollow = only(f"{CAR}states:\n  fuel: {{empty: {{}}, full: {{}}}}\n", rule)
    assert hollow.verdict == "open"
    assert "masses.fuel.mass" in hollow.reason


def test_what_a_state_must_set_for_every_item() -> None:
    needed = 'states_needed: {load: {full: {sets: ["tyres.*.loaded_radius"]}}}\n'
    rule = needed + "rules:\n  it:\n    states: every\n    each: t in tyres\n    require: t.loaded_radius >= 300 mm\n"
    tyres = "tyres:\n  front: {loaded_radius: 330 mm}\n  rear: {loaded_radius: 340 mm}\n"
    half = "states: {load: {full: {tyres.front.loaded_radius: 320 mm}}}\n"
    whole = "states: {load: {full: {tyres.front.loaded_radius: 320 mm, tyres.rear.loaded_radius: 325 mm}}}\n"
    assert only(tyres + half, rule).verdict == "open"
    found = only(tyres + whole, rule)
    assert (found.verdict, margin(found)) == ("complies", 20)


def test_two_axes_that_set_one_path_are_refused() -> None:
    clash = "states:\n  fuel: {empty: {masses.fuel.mass: 0 kg}, full: {}}\n  driver: {light: {masses.fuel.mass: 1 kg}, heavy: {}}\n"
    assert [item.code for item in refused(CAR + clash, mass("every"))] == ["state-clash"]


@pytest.mark.parametrize("states", ["every", "{load: every}"])
def test_states_that_the_ruleset_does_not_need_are_refused(states: str) -> None:
    rule = f"rules:\n  it:\n    states: {states}\n    require: dimensions.wheelbase >= 1 mm\n"
    assert [item.code for item in refused(CAR + BOTH, rule)] == ["unknown-state"]


def test_a_condition_is_judged_in_each_state() -> None:
    rule = (
        NEEDED + 'rules:\n  it:\n    states: every\n    when: "masses.fuel.mass > 10 kg"\n'
        '    require: "sum(m.mass for m in masses) >= 815 kg"\n'
    )
    # Only with fuel: 700 + 50 + 60 = 810 kg and 700 + 50 + 90 = 840 kg.
    found = only(CAR + BOTH, rule)
    assert (found.verdict, margin(found)) == ("breach", -5)
    dry = rule.replace("> 10 kg", "> 60 kg")
    assert only(CAR + BOTH, dry).verdict == "not applicable"


def test_an_item_may_be_absent_in_a_state() -> None:
    design = f"{CAR}states:\n  driver: {{absent: {{masses.driver: none}}}}\n"
    rule = 'states_needed: {driver: [absent]}\nrules:\n  it:\n    states: every\n    require: "sum(m.mass for m in masses) <= 750 kg"\n'
    found = only(design, rule)
    assert (found.verdict, margin(found)) == ("complies", 0)


def test_a_state_does_not_make_an_absent_collection_known() -> None:
    light = mass("{fuel: [empty], driver: [light]}", "<= 100 kg")
    assert only(BOTH, light).verdict == "open"
    assert only("masses: {}\n" + BOTH, light).verdict == "complies"


def test_figures_are_computed_anew_in_a_state() -> None:
    rule = (
        f'{NEEDED}derived: {{all_mass: {{formula: "sum(m.mass for m in masses)", unit: kg}}}}\n'
        "rules:\n  it: {states: every, require: all_mass >= 760 kg}\n  written: {require: all_mass <= 825 kg}\n"
    )
    found = findings(check_texts(CAR + BOTH, rule))
    assert (margin(found["it"]), margin(found["written"])) == (0, 0)


def test_one_state_may_be_laid_over_the_design_for_a_question() -> None:
    found = findings(check_texts(CAR + BOTH, mass("", "<= 800 kg"), states={"fuel": "empty"}))["it"]
    assert (found.verdict, margin(found)) == ("complies", 25)


@pytest.mark.parametrize(
    ("states", "chosen", "room", "state"),
    [
        # Written: 700 + 50 + 75 kg; empty takes 50 kg away, light 15 kg; heavy adds 15 kg.
        ("", {"fuel": "empty"}, 15, {}),
        ("", {"fuel": "empty", "driver": "light"}, 0, {}),
        ("{fuel: [full]}", {"fuel": "empty"}, 65, {"fuel": "full"}),
        ("{fuel: [full]}", {"fuel": "empty", "driver": "heavy"}, 80, {"fuel": "full"}),
        ("{driver: [light]}", {"fuel": "empty"}, 0, {"driver": "light"}),
        ("{driver: [heavy]}", {"driver": "light"}, 80, {"driver": "heavy"}),
        ("every", {"fuel": "empty"}, 0, {"fuel": "empty", "driver": "light"}),
        ("every", {"fuel": "full", "driver": "heavy"}, 0, {"fuel": "empty", "driver": "light"}),
        (
            "{driver: every, fuel: [full]}",
            {"fuel": "empty", "driver": "heavy"},
            50,
            {"fuel": "full", "driver": "light"},
        ),
    ],
)
def test_the_axes_that_a_rule_names_win_over_a_state_of_the_whole_run(
    states: str, chosen: dict[str, str], room: int, state: dict[str, str]
) -> None:
    found = only(CAR + BOTH, mass(states), states=chosen)
    assert (found.verdict, margin(found)) == ("complies", room)
    assert found.binding is not None
    assert dict(found.binding.state) == state


def test_what_only_the_state_of_the_whole_run_states_is_gone_in_another() -> None:
    design = "states: {wing: {fitted: {dimensions.overall_height: 900 mm}, none_fitted: {}}}\n"
    rule = (
        "states_needed: {wing: [fitted, none_fitted]}\n"
        "rules:\n  it: {states: {wing: [none_fitted]}, require: dimensions.overall_height <= 950 mm}\n"
        "  other: {require: dimensions.overall_height <= 950 mm}\n"
    )
    found = findings(check_texts(design, rule, states={"wing": "fitted"}))
    assert (found["it"].verdict, found["other"].verdict) == ("open", "complies")


@pytest.mark.parametrize("order", [1, -1])
def test_a_value_that_a_state_takes_away_is_not_that_of_the_design(order: int) -> None:
    design = (
        "dimensions: {overall_height: 900 mm}\npoints: {top: 0 0 900 mm}\n"
        "states: {roof: {off: {dimensions.overall_height: none, points.top: none}}}\n"
    )
    rules = [
        "  it: {states: {roof: [off]}, require: dimensions.overall_height <= 950 mm}\n",
        "  at: {states: {roof: [off]}, require: points.top.z <= 950 mm}\n",
        "  other: {require: dimensions.overall_height <= 950 mm and points.top.z <= 950 mm}\n",
    ]
    text = "states_needed: {roof: [off]}\nrules:\n" + "".join(rules[::order])
    found = findings(check_texts(design, text))
    assert {name: found[name].verdict for name in ("it", "at", "other")} == {
        "it": "open",
        "at": "open",
        "other": "complies",
    }
