"""Rules as a whole: what applies, exemptions, standing, reserves, references, empty loops, branches. Margins by hand."""

from __future__ import annotations

from datetime import date
from fractions import Fraction
from pathlib import Path

import pytest
from small_files import CAR, DAY, RULES, check_files, check_texts, findings, margin, only, refused, write_files

from rulecheck.api import headroom
from rulecheck.outcome.results import Finding

DECLARED = """\
inputs:
  a: {unit: mm, meaning: a}
  b: {unit: mm, meaning: b}
  c: {unit: kg, meaning: c}
  f: {kind: flag, meaning: f}
  g: {kind: flag, meaning: g}
"""


def rule(text: str) -> str:
    return f"{DECLARED}rules:\n  it: {{{text}}}\n"


def said(found: Finding) -> tuple[str, Fraction | None]:
    return found.verdict, margin(found)


# --- when and unless -------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("design", "when", "verdict", "room"),
    [
        ("a: 8 mm\nf: yes\n", "f", "complies", 2),
        ("a: 8 mm\nf: no\n", "f", "not applicable", 2),
        ("a: 8 mm\n", "f", "open", None),
        ("a: 12 mm\nf: yes\n", "f", "breach", -2),
        ("a: 12 mm\nf: no\n", "f", "not applicable", -2),
        ("a: 12 mm\n", "f", "open", None),
        ("f: yes\n", "f", "open", None),
        ("f: no\n", "f", "not applicable", None),
        ("a: 12 mm\nf: no\n", "not f", "breach", -2),
        ("a: 12 mm\nb: 1 mm\n", "b < 1 mm", "not applicable", -2),
        ("a: 12 mm\nb: 1 mm\n", "b <= 1 mm", "breach", -2),
        ("a: 12 mm\nb: 0 mm\n", "1 mm / b >= 1", "unproven", None),
        ("a: 12 mm\nf: no\n", "f and g", "not applicable", -2),
        ("a: 12 mm\nf: yes\n", "f and g", "open", None),
        ("a: 12 mm\nf: yes\n", "f or g", "breach", -2),
    ],
)
def test_when(design: str, when: str, verdict: str, room: int | None) -> None:
    found = only(design, rule(f'require: a <= 10 mm, when: "{when}"'))
    assert said(found) == (verdict, room)
    if verdict == "not applicable":
        assert found.reason == "its condition does not hold"
        assert found.parts == ()
    else:
        assert len(found.parts) == 1
        assert bool(found.reason) == (verdict in ("open", "unproven"))


UNLESS = "require: a <= 10 mm, unless: {when: f, because: It is a show car}"


@pytest.mark.parametrize(
    ("design", "verdict", "room", "reason"),
    [
        ("a: 8 mm\nf: no\n", "complies", 2, ""),
        ("a: 12 mm\nf: no\n", "breach", -2, ""),
        ("a: 8 mm\nf: yes\n", "not applicable", 2, "It is a show car"),
        ("a: 12 mm\nf: yes\n", "not applicable", -2, "It is a show car"),
        ("a: 8 mm\n", "complies", 2, ""),
        ("a: 12 mm\n", "open", None, "f"),
        ("f: yes\n", "not applicable", None, "It is a show car"),
        ("f: no\n", "open", None, "a"),
        ("", "open", None, "f"),
    ],
)
def test_unless(design: str, verdict: str, room: int | None, reason: str) -> None:
    found = only(design, rule(UNLESS))
    assert said(found) == (verdict, room)
    assert reason in found.reason
    assert bool(found.reason) == bool(reason)


def test_an_exemption_without_a_reason() -> None:
    found = only("a: 12 mm\nf: yes\n", rule("require: a <= 10 mm, unless: {when: f}"))
    assert (found.verdict, found.reason) == ("not applicable", "exempt")


def test_an_undefined_exemption_is_unproven() -> None:
    found = only("a: 12 mm\nb: 0 mm\n", rule('require: a <= 10 mm, unless: {when: "1 mm / b >= 1", because: So}'))
    assert found.verdict == "unproven"
    assert found.reason


def test_when_is_asked_before_unless() -> None:
    both = UNLESS + ", when: g"
    assert only("a: 12 mm\nf: yes\ng: no\n", rule(both)).reason == "its condition does not hold"
    assert only("a: 12 mm\nf: yes\n", rule(both)).verdict == "open"
    assert only("a: 12 mm\nf: yes\ng: yes\n", rule(both)).reason == "It is a show car"


EDGES = "edges:\n  sill: {radius: 3 mm, exposed: no}\n  lip: {radius: 1 mm, exposed: yes}\n  vane: {radius: 2 mm}\n"


def each(text: str) -> str:
    return f"rules:\n  it: {{each: e in edges, {text}}}\n"


def test_exemptions_are_judged_for_each_element() -> None:
    exempt = "require: e.radius >= 1.5 mm, unless: {when: e.exposed == yes, because: It is taped}"
    assert said(only(EDGES, each(exempt))) == ("complies", Fraction(1, 2))
    # The vane fails now, and it is unknown whether it is exempt; the sill complies.
    found = only(EDGES, each(exempt.replace("1.5 mm", "2.5 mm")))
    assert found.verdict == "open"
    assert "vane" in found.reason
    assert found.binding is not None
    assert found.binding.element == "vane"


def test_conditions_are_judged_for_each_element() -> None:
    when = "require: e.radius >= 1.5 mm, when: e.exposed == yes"
    assert said(only(EDGES, each(when))) == ("breach", Fraction(-1, 2))
    assert only(EDGES, each(when.replace("1.5 mm", "0.5 mm"))).verdict == "open"
    none = only(EDGES.replace("exposed: yes", "exposed: no").replace("vane: {", "vane: {exposed: no, "), each(when))
    # Nothing applies: the worst of all margins is shown, with the first reason.
    assert said(none) == ("not applicable", Fraction(-1, 2))
    assert none.reason == "its condition does not hold"
    assert none.binding is not None
    assert none.binding.element == "lip"


def test_reasons_of_all_open_elements_are_given_four_at_most() -> None:
    names = ["one", "two", "three", "four", "five"]
    found = only("edges:\n" + "".join(f"  {name}: {{}}\n" for name in names), each("require: e.radius >= 1 mm"))
    assert [f"edges.{name}.radius" in found.reason for name in names] == [True, True, True, True, False]
    assert found.reason.count("; ") == 3
    twice = only("edges: {one: {radius: 1 mm}, two: {radius: 1 mm}}\n", f"{DECLARED}{each('require: e.radius >= a')}")
    assert "; " not in twice.reason


def test_open_outweighs_unproven_and_both_outweigh_what_complies() -> None:
    undefined = f"{DECLARED}{each('require: 1 mm / e.radius <= 10')}"
    assert only("edges: {one: {radius: 0 mm}, two: {}, three: {radius: 1 mm}}\n", undefined).verdict == "open"
    found = only("edges: {three: {radius: 1 mm}, one: {radius: 0 mm}}\n", undefined)
    assert found.verdict == "unproven"
    assert found.margin is None
    assert found.binding is not None
    assert found.binding.element == "one"
    assert only("edges: {one: {radius: 0 mm}, two: {radius: 1 nm}}\n", undefined).verdict == "breach"


# --- standing, validity, dispensation --------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("standing", "good", "bad", "lacking"),
    [
        ("shall", "complies", "breach", "open"),
        ("should", "complies", "not followed", "open"),
        ("may", "not applicable", "not applicable", "not applicable"),
        ("note", "not applicable", "not applicable", "not applicable"),
    ],
)
def test_standing(standing: str, good: str, bad: str, lacking: str) -> None:
    advice = rule(f"require: a <= 10 mm, standing: {standing}")
    for design, verdict in (("a: 8 mm\n", good), ("a: 12 mm\n", bad), ("", lacking)):
        found = only(design, advice)
        assert found.verdict == verdict
        if standing in ("may", "note"):
            assert (found.reason, found.margin, found.parts) == ("it binds nothing", None, ())
    if standing == "should":
        assert margin(only("a: 12 mm\n", advice)) == -2


@pytest.mark.parametrize(
    ("day", "verdict"),
    [
        (date(2027, 1, 31), "not applicable"),
        (date(2027, 2, 1), "breach"),
        (date(2027, 3, 31), "breach"),
        (date(2027, 4, 1), "not applicable"),
    ],
)
def test_the_window_of_a_rule(day: date, verdict: str) -> None:
    found = only("a: 12 mm\n", rule("require: a <= 10 mm, valid: {from: 2027-02-01, until: 2027-03-31}"), on=day)
    assert found.verdict == verdict
    assert ("in force" in found.reason) == (verdict == "not applicable")


def letter(until: str = "2027-12-31", of: str = "it") -> str:
    return f"dispensations: {{x: {{rule: {of}, reference: L-1, until: {until}}}}}\n"


@pytest.mark.parametrize(
    ("design", "text", "verdict"),
    [
        ("a: 12 mm\n", "require: a <= 10 mm", "dispensed"),
        ("a: 8 mm\n", "require: a <= 10 mm", "complies"),
        ("", "require: a <= 10 mm", "dispensed"),
        ("a: 0 mm\n", "require: 1 mm / a <= 10", "dispensed"),
        ("a: 12 mm\n", "require: a <= 10 mm, standing: should", "dispensed"),
        ("a: 12 mm\nf: no\n", "require: a <= 10 mm, when: f", "not applicable"),
    ],
)
def test_a_dispensation_covers_what_does_not_comply(design: str, text: str, verdict: str) -> None:
    found = only(design + letter(), rule(text))
    assert found.verdict == verdict
    assert found.dispensation == ("L-1, until 2027-12-31" if verdict == "dispensed" else "")
    assert (found.reason == "dispensation L-1, until 2027-12-31") == (verdict == "dispensed")


@pytest.mark.parametrize(("until", "verdict"), [("2027-02-28", "breach"), ("2027-03-01", "dispensed")])
def test_the_last_day_of_a_dispensation(until: str, verdict: str) -> None:
    assert only("a: 12 mm\n" + letter(until), rule("require: a <= 10 mm")).verdict == verdict


@pytest.mark.parametrize("of", ["that", "this"])
def test_a_dispensation_is_for_one_rule(of: str) -> None:
    two = rule("require: a <= 10 mm") + "  that: {require: a <= 11 mm}\n  this: {require: a <= 9 mm}\n"
    found = findings(check_texts("a: 12 mm\n" + letter(of=of), two))
    assert {name: finding.verdict for name, finding in found.items()} == {
        name: "dispensed" if name == of else "breach" for name in ("it", "that", "this")
    }


def test_of_several_dispensations_one_that_is_good_counts() -> None:
    several = (
        "dispensations:\n  one: {rule: that, reference: L-1, until: 2027-12-31}\n"
        "  two: {rule: it, reference: L-2, until: 2027-02-01}\n  three: {rule: it, reference: L-3, until: 2027-04-01}\n"
    )
    two = rule("require: a <= 10 mm") + "  that: {require: a <= 20 mm}\n"
    assert only("a: 12 mm\n" + several, two).dispensation == "L-3, until 2027-04-01"


# --- the reserve of the house ----------------------------------------------------------------------------------------


def with_house(design: str, ruleset: str, reserves: str) -> Finding:
    files = {
        "car.design.yaml": CAR + design,
        "cup.ruleset.yaml": RULES + ruleset,
        "rulecheck.yaml": f"house: Dunmere office\nreserves: {{{reserves}}}\n",
    }
    return findings(check_files(files))["it"]


@pytest.mark.parametrize(
    ("reserve", "verdict"),
    [("1 mm", "complies"), ("2 mm", "complies"), ("2.001 mm", "tight"), ("0.3 cm", "tight"), ("0 mm", "complies")],
)
def test_a_reserve_in_the_unit_of_the_margin(reserve: str, verdict: str) -> None:
    found = with_house("a: 8 mm\n", rule("require: a <= 10 mm"), f"it: {reserve}")
    assert said(found) == (verdict, 2)
    assert (found.reason == "inside the house reserve") == (verdict == "tight")
    assert with_house("a: 12 mm\n", rule("require: a <= 10 mm"), f"it: {reserve}").verdict == "breach"
    assert (
        with_house(
            "a: 8 mm\n", rule("require: a <= 10 mm") + "  that: {require: a <= 8 mm}\n", f"that: {reserve}"
        ).verdict
        == "complies"
    )


@pytest.mark.parametrize(
    ("share", "verdict"), [("1/5", "complies"), ("201/1000", "tight"), ("1/10", "complies"), ("1/2", "tight")]
)
@pytest.mark.parametrize("condition", ["a <= 10 mm", "a <= 10 mm and g", "g and a <= 10 mm"])
def test_a_reserve_as_a_share(share: str, verdict: str, condition: str) -> None:
    found = only("a: 8 mm\ng: yes\n", rule(f"require: {condition}"), reserve=Fraction(share))
    assert said(found) == (verdict, 2)
    assert only("a: 12 mm\ng: yes\n", rule(f"require: {condition}"), reserve=Fraction(share)).verdict == "breach"
    assert only("g: yes\n", rule(f"require: {condition}"), reserve=Fraction(share)).verdict == "open"


@pytest.mark.parametrize("condition", ["a - 8 mm <= 0 mm", "g", "g or a <= 8 mm"])
def test_a_share_of_what_has_no_measure_is_kept(condition: str) -> None:
    assert only("a: 8 mm\ng: yes\n", rule(f"require: {condition}"), reserve=Fraction(1, 2)).verdict == "complies"


@pytest.mark.parametrize(
    ("condition", "verdict"),
    [
        ("a <= 8.1 mm or a <= 20 mm", "complies"),
        ("a <= 8.1 mm or a <= 8.2 mm", "tight"),
        ("a <= 7 mm or a <= 8.2 mm", "tight"),
        ("a <= 20 mm and a <= 8.2 mm", "tight"),
        ("a <= 20 mm and a <= 40 mm", "complies"),
        ("b <= 1 mm or a <= 20 mm", "complies"),
        ("b <= 1 mm or a <= 8.2 mm", "tight"),
    ],
)
def test_a_reserve_is_kept_where_the_rule_would_still_hold(condition: str, verdict: str) -> None:
    assert only("a: 8 mm\n", rule(f"require: {condition}"), reserve=Fraction(1, 10)).verdict == verdict


def test_a_reserve_does_not_touch_what_does_not_apply() -> None:
    close = "a: 9.9 mm\nf: {}\n"
    share = {"reserve": Fraction(1, 10)}
    assert only(close.format("no"), rule("require: a <= 10 mm, when: f"), **share).verdict == "not applicable"
    assert only(close.format("yes"), rule("require: a <= 10 mm, when: f"), **share).verdict == "tight"
    assert only(close.format("yes"), rule(UNLESS), **share).verdict == "not applicable"
    assert only(close.format("no"), rule(UNLESS), **share).verdict == "tight"
    assert only("a: 9.9 mm\n", rule(UNLESS), **share).verdict == "tight"
    exposed = "edges: {lip: {radius: 1.01 mm, exposed: no}, sill: {radius: 2 mm, exposed: yes}}\n"
    gate = each("require: e.radius >= 1 mm, when: e.exposed == yes")
    assert only(exposed, gate, **share).verdict == "complies"
    exempt = each("require: e.radius >= 1 mm, unless: {when: e.exposed == no, because: So}")
    assert only(exposed, exempt, **share).verdict == "complies"
    assert only(exposed, each("require: e.radius >= 1 mm"), **share).verdict == "tight"


def test_a_reserve_is_no_matter_for_advice_that_is_not_followed() -> None:
    advice = rule("require: a <= 10 mm, standing: should")
    assert only("a: 9.9 mm\n", advice, reserve=Fraction(1, 10)).verdict == "tight"
    assert only("a: 11 mm\n", advice, reserve=Fraction(1, 10)).verdict == "not followed"


# --- references ------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("design", "other", "verdict"),
    [
        ("a: 8 mm\n", "require: a <= 10 mm", "complies"),
        ("a: 12 mm\n", "require: a <= 10 mm", "breach"),
        ("", "require: a <= 10 mm", "open"),
        ("a: 12 mm\nf: no\n", "require: a <= 10 mm, when: f", "complies"),
        ("a: 12 mm\nf: yes\n", "require: a <= 10 mm, when: f", "breach"),
        ("a: 12 mm\n", "require: a <= 10 mm, when: f", "open"),
        ("a: 8 mm\n", "require: a <= 10 mm, when: f", "open"),
        ("a: 12 mm\nf: yes\n", UNLESS, "complies"),
        ("a: 12 mm\nf: no\n", UNLESS, "breach"),
        ("a: 12 mm\n", UNLESS, "open"),
        ("a: 8 mm\n", UNLESS, "complies"),
        ("f: yes\n", UNLESS, "complies"),
        ("a: 12 mm\n", "require: a <= 10 mm, standing: note", "complies"),
        ("a: 12 mm\n" + letter(of="other"), "require: a <= 10 mm", "complies"),
        (letter(of="other"), "require: a <= 10 mm", "complies"),
        ("a: 12 mm\nb: 1 mm\n", "require: a <= 10 mm or b <= 2 mm", "complies"),
        ("a: 12 mm\nb: 3 mm\n", "require: a <= 10 mm or b <= 2 mm", "breach"),
        ("a: 8 mm\nb: 3 mm\n", "require: a <= 10 mm and b <= 2 mm", "breach"),
        ("a: 8 mm\nb: 1 mm\n", "require: a <= 10 mm and b <= 2 mm", "complies"),
        (
            "a: 8 mm\nb: 1 mm\n",
            "require: a <= 10 mm, branches: {p: {require: b <= 0 mm}, q: {require: b <= 2 mm}}",
            "complies",
        ),
        (
            "a: 8 mm\nb: 3 mm\n",
            "require: a <= 10 mm, branches: {p: {require: b <= 0 mm}, q: {require: b <= 2 mm}}",
            "breach",
        ),
    ],
)
def test_a_rule_that_is_referred_to(design: str, other: str, verdict: str) -> None:
    scale = ", scale: 1 mm" if "b <= 0 mm" in other else ""
    text = rule("require: rule(other)") + f"  other: {{{other}{scale}}}\n"
    assert only(design, text).verdict == verdict
    turned = {"complies": "breach", "breach": "complies"}
    assert only(design, text.replace("rule(other)", "not rule(other)")).verdict == turned.get(verdict, verdict)


def test_a_rule_for_each_element_that_is_referred_to() -> None:
    text = "rules:\n  it: {require: rule(other)}\n  other: {each: e in edges, require: e.radius >= 1.5 mm}\n"
    assert only(EDGES, text).verdict == "breach"
    assert only(EDGES.replace("1 mm", "2 mm"), text).verdict == "complies"
    assert only(EDGES.replace("radius: 2 mm", ""), text).verdict == "breach"
    assert only(EDGES.replace("radius: 2 mm", "").replace("1 mm", "2 mm"), text).verdict == "open"


def test_rules_that_share_a_name_stem_are_bound_once_each() -> None:
    report = check_texts("a: 8 mm\n", rule("require: a <= 10 mm") + "  that: {require: rule(it) and rule(it)}\n")
    assert [finding.verdict for finding in report.rules] == ["complies", "complies"]


# --- each ------------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("empty", "verdict"),
    [("open", "open"), ("complies", "complies"), ("breach", "breach"), ("not applicable", "not applicable")],
)
def test_an_empty_loop(empty: str, verdict: str) -> None:
    text = each(f"require: e.radius >= 1 mm, empty: {empty}")
    found = only("edges: {}\n", text)
    assert (found.verdict, found.margin) == (verdict, None)
    assert ("no element" in found.reason) == (empty == "not applicable")
    assert ("element" in found.reason) == (empty in ("open", "not applicable"))
    assert said(only("edges: {lip: {radius: 3 mm}}\n", text)) == ("complies", 2)
    assert only("edges: {lip: {radius: 3 mm}}\n", text).binding.element == "lip"  # type: ignore[union-attr]
    assert only("", text).verdict == "open"


@pytest.mark.parametrize(
    ("empty", "verdict"),
    [("open", "open"), ("complies", "open"), ("breach", "open"), ("not applicable", "open")],
)
def test_a_loop_of_which_it_is_unknown_whether_it_is_empty(empty: str, verdict: str) -> None:
    text = f"rules:\n  it: {{each: e in edges where e.exposed == yes, require: e.radius >= 1 mm, empty: {empty}}}\n"
    assert only("edges: {lip: {radius: 3 mm}}\n", text).verdict == verdict
    sure = "edges: {lip: {radius: 3 mm}, sill: {radius: 3 mm, exposed: yes}, vane: {radius: 0 mm, exposed: no}}\n"
    found = only(sure.replace("lip: {radius: 3 mm}, ", ""), text)
    assert said(found) == ("complies", 2)
    assert only(sure, text).verdict == "open"
    assert only(sure.replace("radius: 3 mm, exposed: yes", "radius: 0 mm, exposed: yes"), text).verdict == "breach"


@pytest.mark.parametrize(
    ("design", "verdict"),
    [
        ("f: yes\nedges: {}\n", "breach"),
        ("f: no\nedges: {}\n", "not applicable"),
        ("edges: {}\n", "open"),
        ("f: no\n", "not applicable"),
        ("f: yes\n", "open"),
    ],
)
def test_an_empty_loop_under_a_condition(design: str, verdict: str) -> None:
    text = DECLARED + each("require: e.radius >= 1 mm, empty: breach, when: f")
    assert only(design, text).verdict == verdict


def test_a_condition_on_the_element_is_left_out_where_there_is_none() -> None:
    text = (
        DECLARED
        + "groups: {dry: {when: f, rules: [it]}}\n"
        + each("require: e.radius >= 1 mm, empty: breach, when: e.exposed == yes")
    )
    assert only("f: yes\nedges: {}\n", text).verdict == "breach"
    assert only("f: no\nedges: {}\n", text).verdict == "not applicable"


@pytest.mark.parametrize(("points", "verdict"), [("{}", "breach"), ("{p: 0 0 1 mm}", "complies")])
def test_a_product_with_an_empty_loop_is_empty(points: str, verdict: str) -> None:
    text = 'rules:\n  it: {each: ["e in edges", "p in points"], require: "e.radius + p.z <= 9 mm", empty: breach}\n'
    assert only(f"edges: {{lip: {{radius: 3 mm}}}}\npoints: {points}\n", text).verdict == verdict
    assert only(f"edges: {{}}\npoints: {points}\n", text).verdict == "breach"
    assert only(f"points: {points}\n", text).verdict in ("open", "breach")


def test_the_element_is_named_with_all_its_names() -> None:
    design = "edges: {lip: {radius: 3 mm}}\npoints: {p: 0 0 1 mm, q: 0 0 2 mm}\n"
    text = 'rules:\n  it: {each: ["e in edges", "p in points"], require: "e.radius + p.z <= 9 mm"}\n'
    found = only(design, text)
    assert margin(found) == 4
    assert found.binding is not None
    assert found.binding.element == "lip with q"
    assert [part.element for part in found.parts] == ["lip with p", "lip with q"]


def test_a_variable_stands_for_one_loop() -> None:
    text = 'rules:\n  it: {each: ["e in edges", "e in edges"], require: e.radius >= 1 mm}\n'
    assert [item.code for item in refused("edges: {}\n", text)] == ["name-taken"]


@pytest.mark.parametrize("text", ["require: e.radius <= 1 kg", "require: e.breadth <= 1 mm"])
def test_a_rule_about_no_element_is_checked_all_the_same(text: str) -> None:
    for design in ("edges: {}\n", "edges: {lip: {radius: 1 mm}}\n", ""):
        assert refused(design, each(text))


# --- estimates, closeness --------------------------------------------------------------------------------------------


def test_a_rule_that_rests_on_estimates_says_so() -> None:
    design = "a: {value: 8 mm, basis: estimated}\nb: {value: 1 mm, basis: measured}\n"
    assert only(design, rule("require: a + b <= 10 mm")).estimates == ("a",)
    assert only(design, rule("require: b <= 10 mm")).estimates == ()
    assert only(design, rule("require: b <= 10 mm, when: a <= 20 mm")).estimates == ("a",)
    assert only("b: 1 mm\n", rule("require: a + b <= 10 mm")).estimates == ()


# --- branches --------------------------------------------------------------------------------------------------------

BRANCHES = """\
    branches:
      thin: {require: a <= 10 mm}
      light: {require: c <= 4 kg}
"""


def branched(text: str = BRANCHES) -> str:
    return f"{DECLARED}rules:\n  it:\n{text}"


@pytest.mark.parametrize(
    ("design", "verdict", "room", "branch"),
    [
        ("a: 8 mm\nc: 5 kg\n", "complies", 2, "thin"),
        ("a: 8 mm\nc: 3 kg\n", "complies", 1, "light"),
        ("a: 12 mm\nc: 5 kg\n", "breach", -2, "thin"),
        ("a: 8 mm\n", "complies", 2, "thin"),
        ("a: 12 mm\n", "open", None, "light"),
        ("c: 3 kg\n", "complies", 1, "light"),
        ("", "open", None, "thin"),
        ("a: 8 mm\nc: 5 kg\nclaims: {it: light}\n", "breach", -1, "light"),
        ("a: 8 mm\nc: 3 kg\nclaims: {it: thin}\n", "complies", 2, "thin"),
        ("a: 8 mm\nclaims: {it: light}\n", "open", None, "light"),
    ],
)
def test_branches(design: str, verdict: str, room: int | None, branch: str) -> None:
    found = only(design, branched())
    assert said(found) == (verdict, room)
    assert found.binding is not None
    assert found.binding.branch == branch
    if "claims" not in design:
        assert [part.branch for part in found.parts] == ["thin", "light"]
    else:
        assert [part.branch for part in found.parts] == [branch]


def test_a_branch_may_be_open_only_to_some() -> None:
    gated = BRANCHES.replace("{require: c <= 4 kg}", "{when: f, require: c <= 4 kg}")
    good = "a: 12 mm\nc: 3 kg\n"
    assert said(only(good + "f: yes\n", branched(gated))) == ("complies", 1)
    assert only(good + "f: no\n", branched(gated)).verdict == "breach"
    assert only(good, branched(gated)).verdict == "open"
    assert only(good + "f: no\nclaims: {it: light}\n", branched(gated)).verdict == "breach"


PAPERS = """\
    branches:
      thin: {require: a <= 10 mm}
      proven: {evidence: {kind: certificate, name: hoop}}
      seen: {judgement: Is it sound?}
"""
PROOF = "evidence: {hoop: {kind: certificate, until: 2027-03-11}}\n"
SEEN = "judgements: {it: {verdict: complies, role: scrutineer, date: 2027-02-01, reason: looked}}\n"


@pytest.mark.parametrize(
    ("design", "verdict", "room"),
    [
        ("a: 8 mm\n", "complies", 2),
        ("a: 12 mm\n" + PROOF + SEEN, "breach", -2),
        (PROOF + SEEN, "open", None),
        ("a: 12 mm\nclaims: {it: proven}\n" + PROOF, "complies", 10),
        ("a: 12 mm\nclaims: {it: proven}\n", "open", None),
        ("a: 12 mm\nclaims: {it: seen}\n" + SEEN, "complies", None),
        ("a: 8 mm\nclaims: {it: seen}\n" + PROOF, "open", None),
    ],
)
def test_branches_that_rest_on_papers_count_where_they_are_claimed(design: str, verdict: str, room: int | None) -> None:
    found = only(design, branched(PAPERS))
    assert found.verdict == verdict
    if verdict != "breach":
        assert margin(found) == room


def test_where_all_branches_rest_on_papers_one_has_to_be_claimed() -> None:
    all_papers = PAPERS.replace("      thin: {require: a <= 10 mm}\n", "")
    found = only(PROOF + SEEN, branched(all_papers))
    assert found.verdict == "open"
    assert "claims.it" in found.reason
    assert only(PROOF + SEEN + "claims: {it: proven}\n", branched(all_papers)).verdict == "complies"
    mixed = PAPERS.replace("{require: a <= 10 mm}", "{require: a <= 10 mm, evidence: {kind: drawing, name: sheet}}")
    sheet = "evidence: {sheet: {kind: drawing}}\n"
    assert only("a: 8 mm\n" + sheet, branched(mixed)).verdict == "open"
    assert only("a: 8 mm\nclaims: {it: thin}\n" + sheet, branched(mixed)).verdict == "complies"
    assert only("a: 12 mm\nclaims: {it: thin}\n" + sheet, branched(mixed)).verdict == "breach"


def test_own_conditions_are_joined_with_the_branches() -> None:
    joined = "    require: b <= 5 mm\n" + BRANCHES
    assert only("a: 8 mm\nb: 6 mm\nc: 3 kg\n", branched(joined)).verdict == "breach"
    assert only("a: 8 mm\nb: 4 mm\nc: 5 kg\n", branched(joined)).verdict == "complies"
    assert only("a: 12 mm\nb: 4 mm\nc: 5 kg\n", branched(joined)).verdict == "breach"
    assert only("a: 12 mm\nb: 4 mm\n", branched(joined)).verdict == "open"


@pytest.mark.parametrize("scale", ["0 mm", "-1 mm", "1 kg"])
def test_a_scale_has_to_measure(scale: str) -> None:
    assert refused("a: 8 mm\n", rule(f"require: a <= 10 mm, scale: {scale}"))


def test_the_day_of_these_tests_is_fixed() -> None:
    assert date(2027, 3, 1) == DAY


# --- what is shown where nothing applies -----------------------------------------------------------------------------


def test_the_worst_margin_of_what_does_not_apply_is_one_with_a_number() -> None:
    text = DECLARED + each("require: e.radius >= 1 mm, when: f")
    for edges in ("one: {}, two: {radius: 3 mm}, three: {radius: 2 mm}", "two: {radius: 2 mm}, one: {}"):
        found = only(f"f: no\nedges: {{{edges}}}\n", text)
        assert said(found) == ("not applicable", 1)
    none = only("f: no\nedges: {one: {}}\n", text)
    assert said(none) == ("not applicable", None)


@pytest.mark.parametrize(
    ("condition", "reserve", "verdict"),
    [
        ("g and a <= 10 mm", "3 mm", "tight"),
        ("g and a <= 10 mm", "1 mm", "complies"),
        ("a <= 10 mm and c >= 4 kg", "1 mm", "complies"),
        ("a <= 10 mm and c >= 4 kg", "3 mm", "tight"),
        ("a <= 10 mm and c >= 4 kg", "2 kg", "tight"),
        ("a <= 10 mm and c >= 4.9999 kg", "1 mm", "complies"),
        ("a <= 10 mm or c >= 4.9999 kg", "3 mm", "complies"),
    ],
)
def test_a_reserve_is_held_against_margins_of_its_dimension(condition: str, reserve: str, verdict: str) -> None:
    # The margin in kilograms is 0.0001: as a bare number it would be less than 1 mm in metres.
    design = "a: 8 mm\nc: 5 kg\ng: yes\n"
    assert with_house(design, rule(f"require: {condition}"), f"it: {reserve}").verdict == verdict


@pytest.mark.parametrize(
    ("when", "design", "verdict"),
    [
        ("f and e.exposed == yes", "f: no\nedges: {}\n", "breach"),
        ("e.exposed == yes and f", "f: no\nedges: {}\n", "breach"),
        ("f and g", "f: no\nedges: {}\n", "not applicable"),
        ("f and g", "f: yes\ng: yes\nedges: {}\n", "breach"),
    ],
)
def test_a_condition_that_speaks_of_an_element_in_part(when: str, design: str, verdict: str) -> None:
    text = DECLARED + each(f'require: e.radius >= 1 mm, empty: breach, when: "{when}"')
    assert only(design, text).verdict == verdict


def test_two_loops_of_which_one_lacks_what_is_required() -> None:
    text = 'rules:\n  it: {each: ["t in tyres", "e in edges"], require: t.width >= e.radius, empty: breach}\n'
    both = "tyres: {front: {width: 300 mm}, rear: {width: 300 mm}}\n"
    one = "tyres: {front: {width: 300 mm}}\n"
    edge = "edges: {lip: {radius: 3 mm}}\n"
    assert only(both + edge, text).verdict == "complies"
    assert only(one + edge, text).verdict == "open"
    assert only(both + "edges: {}\n", text).verdict == "breach"
    assert only(one + "edges: {}\n", text).verdict == "breach"


@pytest.mark.parametrize("without", ["rule: it, ", "reference: L-1, ", ", until: 2027-12-31"])
def test_a_dispensation_that_lacks_a_field_is_none(without: str) -> None:
    assert without in letter()
    assert only("a: 12 mm\n" + letter().replace(without, ""), rule("require: a <= 10 mm")).verdict == "breach"


def test_parts_of_a_loop_that_is_empty_or_lacks_something() -> None:
    text = each("require: e.radius >= 1 mm, empty: open")
    (part,) = only("edges: {}\n", text).parts
    assert (part.verdict, part.text) == ("open", "an element that the rule is about")
    (wanting,) = only("", text).parts
    assert (wanting.verdict, wanting.text) == ("open", "edges")


def test_what_binds_is_told_to_the_other_studies(tmp_path: Path) -> None:
    text = rule("require: a <= 10 mm") + "  advice: {require: a <= 9 mm, standing: should}\n"
    write_files(tmp_path, {"car.design.yaml": CAR + "a: 12 mm\n", "cup.ruleset.yaml": RULES + text})
    assert headroom(tmp_path / "car.design.yaml", on=DAY).breached == ("it",)


@pytest.mark.parametrize(
    "text",
    [
        "require: a <= 10 mm, unless: {when: a, because: So}",
        "require: a <= 10 mm, scale: f",
        "require: a <= 10 mm, scale: 2027-03-01",
        "branches: {p: {when: a, require: a <= 10 mm}, q: {require: a <= 9 mm}}",
        "require: a <= 10 mm, when: a",
    ],
)
def test_what_is_of_another_kind_is_refused(text: str) -> None:
    assert {item.code for item in refused("a: 8 mm\nf: yes\n", rule(text))} == {"kind-mismatch"}


@pytest.mark.parametrize(
    ("lamps", "edges", "verdict"),
    [
        ("{l: {area: 3 cm^2}}", "{}", "open"),
        ("{l: {area: 3 cm^2}, r: {area: 3 cm^2}}", "{}", "breach"),
        ("{l: {area: 3 cm^2}, r: {area: 3 cm^2}}", "{lip: {radius: 1 mm}}", "complies"),
        ("{l: {area: 3 cm^2}}", "{lip: {radius: 1 mm}}", "open"),
    ],
)
def test_where_something_is_lacking_nothing_is_empty(lamps: str, edges: str, verdict: str) -> None:
    text = (
        "inputs: {lamps: {kind: collection, meaning: Lamps, at_least: 2, element: {area: {unit: cm^2, meaning: a}}}}\n"
        'rules:\n  it: {each: ["l in lamps", "e in edges"], require: "l.area >= e.radius * 1 mm", empty: breach}\n'
    )
    assert only(f"lamps: {lamps}\nedges: {edges}\n", text).verdict == verdict
