"""The house reserve: what is tight, in which element, and reserves that no margin can be held against."""

from __future__ import annotations

from fractions import Fraction

import pytest
from small_files import CAR, RULES, check_files, findings

from rulecheck.diagnostics import Refused
from rulecheck.outcome.results import Finding

TYRES = "tyres: {front: {width: 9 mm}, rear: {width: 995 mm}}\n"
BY_AXLE = "each: t in tyres, require: t.width <= (10 mm if t.axle == front else 1000 mm)"


def kept(reserve: str, design: str, rule: str) -> Finding:
    """The finding of the rule `it` with a reserve of the house file."""
    files = {
        "car.design.yaml": CAR + design,
        "cup.ruleset.yaml": f"{RULES}rules: {{it: {{{rule}}}}}\n",
        "rulecheck.yaml": f"house: Heron office\nreserves: {{it: {reserve}}}\n",
    }
    return findings(check_files(files))["it"]


@pytest.mark.parametrize(
    ("width", "reserve", "said"),
    [
        ("1898 mm", "2 mm", "complies"),  # 2 mm of room are 2 mm
        ("1898 mm", "2.001 mm", "tight"),
        ("1898 mm", "1 mm", "complies"),
        ("1900 mm", "0 mm", "complies"),
        ("1900 mm", "0.001 mm", "tight"),
        ("1901 mm", "2 mm", "breach"),
        ("1898 mm", "0.3 cm", "tight"),
    ],
)
def test_a_margin_inside_the_reserve_is_tight(width: str, reserve: str, said: str) -> None:
    design = f"dimensions: {{overall_width: {width}}}\n"
    assert kept(reserve, design, "require: dimensions.overall_width <= 1900 mm").verdict == said


@pytest.mark.parametrize(
    ("reserve", "said", "reason"),
    [
        # The front has 1 mm of 10 (10 %), the rear 5 mm of 1000 (0.5 %), which binds.
        ("1 mm", "complies", ""),
        ("2 mm", "tight", "inside the house reserve: front"),
        ("6 mm", "tight", "inside the house reserve"),
    ],
)
def test_every_element_keeps_the_reserve_not_only_the_one_that_binds(reserve: str, said: str, reason: str) -> None:
    found = kept(reserve, TYRES, BY_AXLE)
    assert (found.verdict, found.reason) == (said, reason)


def test_one_alternative_that_keeps_the_reserve_is_enough() -> None:
    design = "dimensions: {overall_width: 1899 mm, overall_length: 4000 mm}\n"
    rule = "require: dimensions.overall_width <= 1900 mm or dimensions.overall_length <= 4500 mm"
    assert kept("2 mm", design, rule).verdict == "complies"
    assert kept("2 mm", design, rule.replace(" or ", " and ")).verdict == "tight"


def test_an_element_to_which_the_rule_does_not_apply_keeps_no_reserve() -> None:
    assert kept("2 mm", TYRES, f"when: t.axle == rear, {BY_AXLE}").verdict == "complies"


def test_a_share_for_one_run_holds_for_every_rule() -> None:
    files = {
        "car.design.yaml": CAR + "dimensions: {overall_width: 1890 mm}\n",
        "cup.ruleset.yaml": RULES + "rules: {it: {require: dimensions.overall_width <= 1900 mm}}\n",
    }
    # 10 mm of 1900 mm are 1 in 190.
    assert findings(check_files(files, reserve=Fraction(1, 190)))["it"].verdict == "complies"
    assert findings(check_files(files, reserve=Fraction(1, 189)))["it"].verdict == "tight"


@pytest.mark.parametrize(("reserve", "code"), [("5 kg", "wrong-dimension"), ("x", "bad-value"), ("", "bad-value")])
def test_a_reserve_that_nothing_can_be_held_against(reserve: str, code: str) -> None:
    with pytest.raises(Refused) as caught:
        kept(reserve, TYRES, BY_AXLE)
    assert [item.code for item in caught.value.diagnostics] == [code]
    assert str(caught.value.diagnostics[0].span).startswith("rulecheck.yaml:2:")


WIDTH = "rules: {it: {require: dimensions.overall_width <= 1900 mm}}\n"


def house(reserves: str, more: str = "", **files: str) -> Finding:
    """The finding of a car in a repository whose house file keeps reserves."""
    return findings(
        check_files(
            {
                "car.design.yaml": CAR + "dimensions: {overall_width: 1890 mm}\n",
                "cup.ruleset.yaml": RULES + WIDTH,
                "rulecheck.yaml": f"house: Heron office\nreserves: {reserves}\n{more}",
                **{name.replace("__", ".") + ".yaml": text for name, text in files.items()},
            }
        )
    )["it"]


def test_a_reserve_for_a_rule_that_no_rule_book_has_is_refused_with_the_nearest_name() -> None:
    with pytest.raises(Refused) as caught:
        house("{it: 20 mm, itt: 2 mm}")
    (found,) = caught.value.diagnostics
    assert (found.code, "'itt'" in found.message, "it" in found.advice) == ("unknown-name", True, True)
    assert str(found.span).startswith("rulecheck.yaml:2:")


OTHER = (
    RULES.replace("Dunmere Cup", "Dunmere Trophy") + "rules: {height: {require: dimensions.overall_height <= 1 m}}\n"
)


def test_a_reserve_for_a_rule_of_another_ruleset_of_the_house_is_fine() -> None:
    assert (
        house("{it: 20 mm, height: 2 mm}", "rulesets: [trophy.ruleset.yaml]\n", trophy__ruleset=OTHER).verdict
        == "tight"
    )


def test_a_reserve_for_a_rule_of_another_design_of_the_house_is_fine() -> None:
    files = {"trophy__ruleset": OTHER, "other__design": CAR.replace("cup.", "trophy.")}
    assert house("{it: 20 mm, height: 2 mm}", 'designs: ["*.design.yaml"]\n', **files).verdict == "tight"
    with pytest.raises(Refused):
        house("{it: 20 mm, height: 2 mm}", 'designs: ["car.*.yaml"]\n', **files)


@pytest.mark.parametrize("broken", ["ruleset: [", RULES.replace("ruleset", "rulset")])
def test_nothing_is_said_of_names_where_a_rule_book_cannot_be_read(broken: str) -> None:
    assert (
        house("{it: 20 mm, height: 2 mm}", "rulesets: [trophy.ruleset.yaml]\n", trophy__ruleset=broken).verdict
        == "tight"
    )


@pytest.mark.parametrize("pattern", ["../*.design.yaml", "/*.design.yaml", ""])
def test_designs_outside_the_repository_are_not_looked_for(pattern: str) -> None:
    assert house("{it: 20 mm, height: 2 mm}", f'designs: ["{pattern}"]\n').verdict == "tight"


def test_a_reserve_for_a_rule_that_is_withdrawn_is_no_slip() -> None:
    book = f"{RULES}extends: trophy.ruleset.yaml\nwithdrawn: {{height: bulletin 2}}\n{WIDTH}"
    files = {
        "trophy.ruleset.yaml": OTHER,
        "cup.ruleset.yaml": book,
        "car.design.yaml": CAR + "dimensions: {overall_width: 1890 mm}\n",
    }
    report = check_files({**files, "rulecheck.yaml": "house: Heron office\nreserves: {it: 20 mm, height: 2 mm}\n"})
    assert findings(report)["it"].verdict == "tight"
