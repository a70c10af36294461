"""What-if: what moves and by how much, with the first-order prediction beside it."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from rulecheck import api
from rulecheck.api import Change
from rulecheck.diagnostics import Refused
from rulecheck.output.screen import Screen
from rulecheck.output.terminal_whatif import whatif_text

DAY = date(2027, 3, 1)
BOOK = """\
ruleset: Dunmere Cup
inputs:
  v.x: {unit: mm, meaning: First}
  v.y: {unit: mm, meaning: Second}
  v.kind: {choices: [open, closed], meaning: Cockpit}
derived:
  area: {formula: v.x * v.y, unit: mm^2, meaning: Area}
rules:
  x: {clause: "1", title: Width, require: v.x <= 300 mm}
  area_limit: {clause: "2", title: Area, require: area <= 40000 mm^2}
  y: {clause: "3", title: Height, require: v.y <= 900 mm}
  closed: {clause: "4", title: Closed, when: v.kind == closed, require: v.y <= 100 mm}
"""
CAR = "design: Heron 4\nrulesets: [cup.ruleset.yaml]\nv: {x: 200 mm, y: 150 mm, kind: open}\n"


@pytest.fixture
def car(tmp_path: Path) -> Path:
    (tmp_path / "cup.ruleset.yaml").write_text(BOOK, encoding="utf-8")
    (tmp_path / "car.design.yaml").write_text(CAR, encoding="utf-8")
    (tmp_path / "wide.change.yaml").write_text("set: {v.x: 280 mm}\n", encoding="utf-8")
    (tmp_path / ".git").mkdir()
    return tmp_path / "car.design.yaml"


def test_nothing_moves_without_a_change(car):
    outcome = api.whatif(car, [Change()], on=DAY)
    assert (outcome.rules, outcome.figures, outcome.unchanged) == ((), (), 4)


def test_a_change_moves_what_rests_on_it_and_no_more(car):
    outcome = api.whatif(car, [Change((), (("v.x", "280mm"), ("v.y", "160 mm")))], on=DAY)
    moved = {change.name: change for change in outcome.rules}
    assert set(moved) == {"x", "area_limit", "y"}
    assert (str(moved["x"].before), str(moved["x"].moved[0].after), str(moved["x"].moved[0].difference)) == (
        "100 mm",
        "20 mm",
        "-80 mm",
    )
    area = moved["area_limit"].moved[0]
    assert (area.verdict, str(area.after), str(area.difference)) == ("breach", "-4800 mm^2", "-14800 mm^2")
    # First order: y dx + x dy = 150 * 80 + 200 * 10 = 14000, less room; the product of the steps is what is missing.
    assert area.foretold.value == pytest.approx(-14000)
    assert outcome.rules[0].name == "area_limit"
    assert (outcome.verdict, outcome.verdicts) == ("complies", ("breach",))


def test_figures_move_too(car):
    outcome = api.whatif(car, [Change((), (("v.x", "210mm"),))], on=DAY)
    assert [(change.name, str(change.before), str(change.moved[0].after)) for change in outcome.figures] == [
        ("area", "30000 mm^2", "31500 mm^2")
    ]


def test_changes_stand_side_by_side(car):
    columns = [Change((car.parent / "wide.change.yaml",)), Change((), (("v.y", "151 mm"),))]
    outcome = api.whatif(car, columns, on=DAY)
    assert [name for name, _ in outcome.columns] == ["wide", "change"]
    area = next(change for change in outcome.rules if change.name == "area_limit")
    assert [str(moved.difference) for moved in area.moved] == ["-12000 mm^2", "-200 mm^2"]


def test_a_choice_has_no_slope(car):
    outcome = api.whatif(car, [Change((), (("v.kind", "closed"), ("v.x", "201 mm")))], on=DAY)
    moved = {change.name: change for change in outcome.rules}
    assert moved["closed"].moved[0].verdict == "breach"
    assert all(change.moved[0].foretold is None for change in outcome.rules)


def test_a_kept_variant_reads_back_to_the_same_design(car):
    session = api.Session()
    change = Change((car.parent / "wide.change.yaml",), (("v.y", "151 mm"),))
    target = car.parent / "kept" / "wide.design.yaml"
    text = api.kept_variant(car, [change], target, session)
    target.parent.mkdir()
    target.write_text(text, encoding="utf-8")
    kept = api.check(target, on=DAY)
    tried = api.check(car, changes=change.changes, settings=change.settings, on=DAY)
    assert [(rule.name, rule.verdict, rule.margin) for rule in kept.rules] == [
        (rule.name, rule.verdict, rule.margin) for rule in tried.rules
    ]


def test_only_one_change_can_be_kept(car):
    with pytest.raises(Refused, match="--keep writes one change, and there are 2"):
        api.kept_variant(car, [Change(), Change()], car.parent / "kept.design.yaml", api.Session())


def test_what_lies_inside_a_reserve_of_the_house_is_tight(car):
    (car.parent / "rulecheck.yaml").write_text("house: Heron office\nreserves: {x: 30 mm}\n", encoding="utf-8")
    outcome = api.whatif(car, [Change((), (("v.x", "280mm"),)), Change((), (("v.x", "260mm"),))], on=DAY)
    (moved,) = [change for change in outcome.rules if change.name == "x"]
    assert (moved.verdict, [item.verdict for item in moved.moved]) == ("complies", ["tight", "complies"])
    assert outcome.verdicts == ("breach", "complies")  # 280 mm makes the area too large: 42000 of 40000 mm^2
    checked = api.check(car, settings={"v.x": "280mm"}, on=DAY)
    assert {finding.name: finding.verdict for finding in checked.rules}["x"] == "tight"


def test_a_design_that_is_tight_already(car):
    (car.parent / "rulecheck.yaml").write_text("house: Heron office\nreserves: {x: 100.1 mm}\n", encoding="utf-8")
    outcome = api.whatif(car, [Change((), (("v.x", "199mm"),))], on=DAY)
    assert outcome.verdict == "tight"
    assert outcome.rules[0].name == "x"
    assert (outcome.rules[0].verdict, outcome.rules[0].moved[0].verdict) == ("tight", "complies")


def test_inputs_that_change_are_told_with_what_they_were(car: Path) -> None:
    settings = (("v.x", "280mm"), ("masses.fuel.at", "1 2 3 mm"))
    car.write_text(CAR + "masses: {fuel: {mass: 1 kg, at: {x: 1 mm, y: 0 mm, z: 5 mm}}}\n", encoding="utf-8")
    outcome = api.whatif(car, [Change((), settings), Change((), (("v.y", "160 mm"),))], on=DAY)
    assert [(item.path, item.before, item.after) for item in outcome.inputs] == [
        ("v.x", "200 mm", ("280mm", "200 mm")),
        ("v.y", "150 mm", ("150 mm", "160 mm")),
        ("masses.fuel.at", "1 mm 0 mm 5 mm", ("1 2 3 mm", "1 mm 0 mm 5 mm")),
    ]


def test_what_binds_is_named_before_and_after_and_where_it_stays(car: Path) -> None:
    book = BOOK.replace(
        "rules:\n",
        '  limit: {formula: \'"width" if v.x > v.y else "height"\', meaning: What binds}\n'
        '  other: {formula: \'"tall" if v.y > 10 mm else "flat"\', meaning: Shape}\n'
        "rules:\n",
    )
    car.with_name("cup.ruleset.yaml").write_text(book, encoding="utf-8")
    outcome = api.whatif(car, [Change((), (("v.x", "100mm"),))], on=DAY)
    assert [(item.name, item.before, item.after) for item in outcome.limits] == [
        ("limit", "width", ("height",)),
        ("other", "tall", ("tall",)),
    ]
    assert "limit" not in {figure.name for figure in outcome.figures}
    text = whatif_text(outcome)
    assert "  limit: width → height\n" in text
    assert "  other: tall, as before\n" in text
    assert "  limit: width -> height\n" in whatif_text(outcome, Screen(unicode=False, encoding="ascii"))


def test_without_a_slope_no_column_is_kept_for_it(car: Path) -> None:
    numbers = whatif_text(api.whatif(car, [Change((), (("v.y", "160mm"),))], on=DAY))
    choice = whatif_text(api.whatif(car, [Change((), (("v.kind", "closed"),))], on=DAY))
    assert "foretold" in numbers
    assert "foretold" not in choice


def test_the_move_of_the_machine_names_what_binds() -> None:
    """The demonstration: grip of the rear axle gives way to the power of the machine that the rule allows in front."""
    root = Path(__file__).parents[3]
    change = root / "designs_demo" / "front-recovery.change.yaml"
    outcome = api.whatif(root / "designs_demo" / "marram-p2.design.yaml", [Change((str(change),))], on=DAY)
    limits = {item.name: (item.before, *item.after) for item in outcome.limits}
    assert limits["recovery.limit"] == ("grip", "machine power")
    assert limits["braking.locks_first"] == ("rear", "rear")
    moved = {figure.name: figure.moved[0].difference for figure in outcome.figures}
    # At a given width over the tyres a rear tyre that is 20 mm narrower frees twice that.
    assert str(moved["diffuser.width_between_tyres"]) == "+40 mm"
    assert {"mass.front_share", "aero.centre_of_pressure", "recovery.bus_power"} <= set(moved)
    assert outcome.verdicts == ("complies",)
