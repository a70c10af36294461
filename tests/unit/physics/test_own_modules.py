"""Modules that rulesets name or that are installed: they add figures, replace those that they say, and run no code."""

from __future__ import annotations

import sys
from pathlib import Path

import pytest
from small_files import CAR, DAY, RULES, check_files, findings, margin, write_files

from rulecheck import check, headroom, whatif, workings
from rulecheck.api import Change
from rulecheck.diagnostics import Refused

MODULE = """\
module: our_aero
meaning: Drag with cooling
sources: {sheet: Track test sheet 9}
figures:
  cooling: {formula: 30 cm^2, unit: cm^2, meaning: Drag of the cooling, source: sheet}
  share: {formula: cooling / aero.drag_area, unit: "%", meaning: Cooling over all drag, source: sheet}
"""
REPLACING = MODULE.replace("figures:\n", "replaces: {aero.drag_area: Track test sheet 9}\nfigures:\n") + (
    "  drag_area: {formula: aero.drag_area + cooling, unit: m^2, meaning: Drag with cooling, source: sheet}\n"
)
SURFACES = "aero_surfaces: {wing: {at: 3 0 1 m, downforce_area: 1 m^2, drag_area: 0.297 m^2}}\n"
RULE = "physics: [our.physics.yaml]\nrules:\n  it: {require: aero.drag_area <= 1 m^2}\n"
RATIO = RULE + "  ratio: {require: aero.downforce_to_drag >= 1}\n  own: {require: our_aero.cooling <= 1 m^2}\n"


def files(module: str, rules: str = RATIO, design: str = SURFACES) -> dict[str, str]:
    return {"car.design.yaml": CAR + design, "cup.ruleset.yaml": RULES + rules, "our.physics.yaml": module}


def test_a_module_adds_figures() -> None:
    found = findings(check_files(files(MODULE)))
    assert margin(found["it"]) * 1000 == 703
    assert margin(found["own"]) * 1000 == 997


def test_a_figure_is_replaced_wherever_it_is_read() -> None:
    report = check_files(files(REPLACING))
    found = findings(report)
    assert margin(found["it"]) * 10 == 7
    assert margin(found["ratio"]) * 3 == 7  # 1 / 0.3 - 1
    (mark,) = [mark for mark in report.marks if mark.figure == "aero.drag_area"]
    assert mark.replaced == "replaced by our.physics.yaml: Track test sheet 9"
    assert mark.rules == ("it", "ratio")


def test_everything_that_shows_it_says_so(tmp_path: Path) -> None:
    write_files(tmp_path, files(REPLACING))
    place = tmp_path / "car.design.yaml"
    steps = {step.name: step for step in workings(place, ["it", "our_aero"], on=DAY).items[0].steps}
    assert steps["aero.drag_area"].replaced == "replaced by our.physics.yaml: Track test sheet 9"
    assert steps["aero.drag_area as it was"].result == "0.297 m^2"
    said = [item.name for item in workings(place, ["our_aero"], on=DAY).items]
    assert said == ["our_aero.cooling", "our_aero.share", "our_aero.drag_area"]
    moved = whatif(place, [Change((), (("aero_surfaces.wing.drag_area", "0.4 m^2"),))], on=DAY)
    assert [mark.figure for mark in moved.marks if mark.replaced] == ["aero.drag_area"]
    assert "our_aero.share" in {figure.name for figure in moved.figures}
    assert [mark.figure for mark in headroom(place, on=DAY).marks] == ["aero.drag_area"]


def test_a_rule_book_hands_its_modules_on() -> None:
    more = files(REPLACING) | {
        "cup.ruleset.yaml": RULES + "extends: base/base.ruleset.yaml\nrules: {}\n",
        "base/base.ruleset.yaml": RULES + RATIO,
        "base/our.physics.yaml": REPLACING,
    }
    del more["our.physics.yaml"]
    assert margin(findings(check_files(more))["it"]) * 10 == 7


def test_a_figure_for_each_item_is_replaced() -> None:
    module = (
        "module: house_mass\nmeaning: Margins on masses\nsources: {policy: House policy}\n"
        "replaces: {mass.of: House policy}\nfigures:\n"
        "  of: {for: m in masses, formula: 1.1 * mass.of(m), unit: kg, meaning: With margin, source: policy}\n"
    )
    rules = "physics: our.physics.yaml\nrules:\n  it: {require: mass.total <= 1000 kg}\n"
    found = findings(check_files(files(module, rules, "masses: {car: {mass: 800 kg}, driver: {mass: 80 kg}}\n")))
    assert margin(found["it"]) == 1000 - 968


# --- installed -------------------------------------------------------------------------------------------------------


@pytest.fixture
def site(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A place where a package `marsh` is installed that would stop the program if it were imported."""
    place = tmp_path / "site"
    write_files(
        place,
        {
            "marsh/__init__.py": "raise SystemExit('imported')\n",
            "marsh/tides.physics.yaml": MODULE.replace("our_aero", "tides"),
            "marsh-1.0.dist-info/METADATA": "Metadata-Version: 2.1\nName: marsh\nVersion: 1.0\n",
            "marsh-1.0.dist-info/entry_points.txt": "[rulecheck.physics]\ntides = marsh\nebb = marsh\nwrong = marsh\n",
        },
    )
    monkeypatch.syspath_prepend(str(place))
    return place


TIDES = "rules:\n  it: {require: tides.cooling <= 40 cm^2}\n"


def test_an_installed_module_is_read_and_not_imported(site: Path) -> None:
    found = findings(check_files(files(MODULE, TIDES)))
    assert margin(found["it"]) == 10
    assert "marsh" not in sys.modules


def test_an_installed_module_without_its_file(site: Path) -> None:
    with pytest.raises(Refused) as refused:
        check_files(files(MODULE, TIDES.replace("tides", "ebb")))
    assert "bad-physics: the installed physics module 'ebb' has no file ebb.physics.yaml in its package marsh" in str(
        refused.value
    )


def test_an_installed_module_replaces_nothing_and_has_its_name(site: Path) -> None:
    (site / "marsh/wrong.physics.yaml").write_text(MODULE)
    with pytest.raises(Refused, match="the installed physics module 'wrong' calls itself 'our_aero'"):
        check_files(files(MODULE, TIDES.replace("tides", "wrong")))
    (site / "marsh/tides.physics.yaml").write_text(REPLACING.replace("our_aero", "tides"))
    with pytest.raises(Refused, match=r"'tides' replaces 'aero\.drag_area'"):
        check_files(files(MODULE, TIDES))


def test_packages_are_looked_through_for_unknown_names_only(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    asked: list[str] = []
    monkeypatch.setattr("rulecheck.api._installed", lambda name: asked.append(name))
    write_files(tmp_path, files(REPLACING))
    check(tmp_path / "car.design.yaml", on=DAY)
    assert asked == []


# --- figures outside their range -------------------------------------------------------------------------------------

SMALL = (
    "dimensions: {wheelbase: 3 m, front_ride_height: 0 mm, rear_ride_height: 0 mm}\n"
    "aero_surfaces: {wing: {at: 1 0 0 m, downforce_area: %s, drag_area: 1 m^2}}\n"
)
SHARES = "rules:\n  it: {require: 10 % <= aero.front_share <= 90 %}\n  either: {require: aero.front_share <= 90 % or dimensions.wheelbase <= 4 m}\n  next: {require: rule(it)}\n"


@pytest.mark.parametrize(
    ("said", "area", "verdict"),
    [
        ("", "0.01 m^2", "complies"),
        ("validity: noted\n", "0.01 m^2", "complies"),
        ("validity: required\n", "0.01 m^2", "open"),
        ("validity: required\n", "2 m^2", "complies"),
    ],
)
def test_a_figure_outside_its_range_is_marked_and_may_be_made_to_fail(said: str, area: str, verdict: str) -> None:
    report = check_files({"car.design.yaml": CAR + SMALL % area, "cup.ruleset.yaml": RULES + said + SHARES})
    found = findings(report)
    assert (found["it"].verdict, found["next"].verdict) == (verdict, verdict)
    assert found["either"].verdict == "complies"  # one of its alternatives holds whatever the figure is
    outside = area == "0.01 m^2"
    assert [mark.figure for mark in report.marks if any(mark.outside_validity)] == ["aero.front_share"] * outside
    if verdict == "open":
        assert found["it"].reason == "missing: aero.front_share within its range of validity"


def test_the_house_may_ask_for_validity_too() -> None:
    made = {"car.design.yaml": CAR + SMALL % "0.01 m^2", "cup.ruleset.yaml": RULES + SHARES}
    house = {"rulecheck.yaml": "house: Office\nvalidity: required\n"}
    assert findings(check_files(made | house))["it"].verdict == "open"


def test_a_breach_outside_the_range_is_open_too() -> None:
    """What is not known is not known to be in breach; it does not comply either way."""
    rules = "validity: required\n" + SHARES.replace("10 %", "80 %")
    made = {"car.design.yaml": CAR + SMALL % "0.01 m^2", "cup.ruleset.yaml": RULES + rules}
    assert findings(check_files(made))["it"].verdict == "open"


def test_what_if_says_under_which_change(tmp_path: Path) -> None:
    write_files(tmp_path, {"car.design.yaml": CAR + SMALL % "2 m^2", "cup.ruleset.yaml": RULES + SHARES})
    change = Change((), (("aero_surfaces.wing.downforce_area", "0.01 m^2"),))
    found = whatif(tmp_path / "car.design.yaml", [change], on=DAY)
    marks = {mark.figure: mark.outside_validity for mark in found.marks}
    assert marks["aero.front_share"] == (False, True)
