"""`margin(x)` and `rule(x)`: what another rule comes to, with what is missing kept open. Margins are worked by hand."""

from __future__ import annotations

import pytest
from small_files import check_texts, findings, margin, refused

from rulecheck.outcome.results import Finding

TYRES = "tyres:\n  front: {width: 300 mm, diameter: 700 mm}\n  rear: {width: 340 mm, diameter: 600 mm}\n"
WIDE = "dimensions: {overall_width: 1890 mm}\n"


def second(design: str, first: str, asks: str, head: str = "") -> Finding:
    """The finding of a rule `m` that asks something of the rule `it`."""
    ruleset = f"{head}rules:\n  it: {{{first}}}\n  m: {{require: {asks}}}\n"
    return findings(check_texts(design, ruleset))["m"]


@pytest.mark.parametrize(
    ("first", "room"),
    [
        ("each: t in tyres, require: t.width <= 350 mm", 10),  # the rear tyre: 350 - 340
        ("each: t in tyres, when: t.diameter > 650 mm, require: t.width <= 350 mm", 50),  # the front one alone
        ("each: t in tyres where t.diameter > 650 mm, require: t.width <= 350 mm", 50),
        ("each: t in tyres, require: t.width >= 200 mm and t.width <= 350 mm", 10),
        ("each: t in tyres, require: t.width >= 400 mm or t.width <= 350 mm", 10),
        # Front 600 - 300 = 300 mm, 50 % of 600; rear 500 - 340 = 160 mm, 32 % of 500.
        ("each: t in tyres, require: t.width <= (t.diameter - 100 mm)", 160),
    ],
)
def test_the_margin_is_the_worst_of_the_cases_that_apply(first: str, room: int) -> None:
    found = second(TYRES, first, "margin(it) >= 0 mm")
    assert margin(found) == room


def test_a_flag_that_holds_adds_no_limit_and_one_that_fails_decides() -> None:
    first = "require: dimensions.overall_width <= 1900 mm and options.power_steering == yes"
    assert margin(second(WIDE + "options: {power_steering: yes}\n", first, "margin(it) >= 4 mm")) == 6
    assert second(WIDE + "options: {power_steering: no}\n", first, "margin(it) >= 4 mm").verdict == "unproven"
    assert second(WIDE, first, "margin(it) >= 4 mm").verdict == "open"


def test_a_flag_that_fails_drops_out_of_or_and_one_that_holds_decides() -> None:
    first = "require: dimensions.overall_width <= 1900 mm or options.power_steering == yes"
    assert margin(second(WIDE + "options: {power_steering: no}\n", first, "margin(it) >= 4 mm")) == 6
    assert second(WIDE + "options: {power_steering: yes}\n", first, "margin(it) >= 4 mm").verdict == "unproven"


@pytest.mark.parametrize(
    ("first", "design", "head"),
    [
        ("states: every, require: dimensions.overall_width <= 1900 mm", WIDE, "states_needed: {fuel: [empty]}\n"),
        ("each: s in aero_surfaces, require: s.span <= 1900 mm", "aero_surfaces: {}\n", ""),
        ("each: s in aero_surfaces, require: s.span <= 1900 mm", "", ""),
        ("require: dimensions.overall_width <= 1900 mm", "", ""),
        ("when: options.power_steering == yes, require: dimensions.overall_width <= 1900 mm", WIDE, ""),
    ],
    ids=["state", "empty", "absent", "value", "condition"],
)
@pytest.mark.parametrize("asks", ["margin(it) >= 5 mm", "rule(it)"])
def test_what_is_open_leaves_open_what_refers_to_it(first: str, design: str, head: str, asks: str) -> None:
    assert second(design, first, asks, head).verdict == "open"


@pytest.mark.parametrize(
    ("first", "said"),
    [
        ("require: dimensions.overall_width <= 1900 mm", "complies"),
        ("require: dimensions.overall_width <= 1800 mm", "breach"),
        ("when: 1 >= 2, require: dimensions.overall_width <= 1800 mm", "complies"),
        ("unless: {when: 1 <= 2}, require: dimensions.overall_width <= 1800 mm", "complies"),
    ],
)
def test_a_rule_is_met_where_it_complies_or_does_not_apply(first: str, said: str) -> None:
    assert second(WIDE, first, "rule(it)").verdict == said


def test_no_margin_where_there_is_no_number() -> None:
    ruleset = "rules: {it: {require: options.power_steering == yes}, m: {require: margin(it) >= 5 mm}}\n"
    assert [item.code for item in refused("", ruleset)] == ["kind-mismatch"]


def test_margins_of_several_dimensions_are_no_number() -> None:
    it = "{require: dimensions.overall_width <= 1900 mm and mass.total <= 900 kg}"
    found = refused("", f"rules: {{it: {it}, m: {{require: margin(it) >= 5 mm}}}}\n")
    assert [item.code for item in found] == ["dimension-mismatch"]


def test_a_long_chain_is_bound_and_a_longer_one_refused() -> None:
    def chain(count: int) -> str:
        links = "".join(f"  r{i}: {{require: rule(r{i - 1})}}\n" for i in range(count, 0, -1))
        return f"rules:\n{links}  r0: {{require: dimensions.overall_width <= 1900 mm}}\n"

    found = findings(check_texts(WIDE, chain(150)))
    assert found["r150"].verdict == "complies"
    assert {item.code for item in refused(WIDE, chain(300))} == {"too-large"}
