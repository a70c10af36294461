"""The verbs as a program calls them: what they take, what they give, and what they refuse."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest
from small_files import CAR, RULES

import rulecheck
from rulecheck.api import Session, check, load_design, load_ruleset, workings
from rulecheck.diagnostics import Refused

DAY = date(2027, 3, 1)
BODY = "dimensions: {overall_width: 1890 mm}\nmasses: {fuel: {mass: 50 kg, at: 0 0 0 mm}}\nstates: {fuel: {empty: {masses.fuel.mass: 0 kg}}}\n"
BOOK = "rules:\n  width: {require: dimensions.overall_width <= 1900 mm}\n  mass: {require: mass.total >= 40 kg}\n"


@pytest.fixture
def car(tmp_path: Path) -> Path:
    (tmp_path / "cup.ruleset.yaml").write_text(RULES + BOOK, encoding="utf-8")
    (tmp_path / "wide.change.yaml").write_text("set: {dimensions.overall_width: 1950 mm}\n", encoding="utf-8")
    place = tmp_path / "car.design.yaml"
    place.write_text(CAR + BODY, encoding="utf-8")
    return place


def margins(report: rulecheck.Report) -> dict[str, str]:
    return {finding.name: str(finding.margin) for finding in report.rules}


def test_check_takes_paths_as_text_or_path(car: Path) -> None:
    for given in (car, str(car)):
        report = check(given, on=DAY)
        assert (report.verdict, report.date, report.design) == ("complies", "2027-03-01", "Heron 4")
        assert margins(report) == {"width": "10 mm", "mass": "10 kg"}


def test_settings_come_after_changes_and_states_last(car: Path) -> None:
    wide = car.with_name("wide.change.yaml")
    assert margins(check(car, on=DAY, changes=[wide]))["width"] == "-50 mm"
    report = check(
        car, on=DAY, changes=[wide], settings={"dimensions.overall_width": "1899 mm"}, states={"fuel": "empty"}
    )
    assert margins(report) == {"width": "1 mm", "mass": "-40 kg"}
    assert report.changes == ("change wide.change.yaml", "dimensions.overall_width = 1899 mm", "state fuel: empty")
    assert margins(check(car, on=DAY))["width"] == "10 mm"


def test_later_settings_win(car: Path) -> None:
    settings = [("dimensions.overall_width", "1 mm"), ("dimensions.overall_width", "2 mm")]
    assert margins(check(car, on=DAY, settings=settings))["width"] == "1898 mm"


def test_rules_replace_those_that_the_design_names(car: Path) -> None:
    other = car.with_name("other.ruleset.yaml")
    other.write_text("ruleset: Other\nrules: {only: {require: 1 <= 2}}\n", encoding="utf-8")
    assert list(margins(check(car, on=DAY, rules=[other]))) == ["only"]


def test_a_session_knows_what_was_read(car: Path) -> None:
    session = Session()
    report = check(car, on=DAY, session=session)
    assert set(session.texts) == {"car.design.yaml", "cup.ruleset.yaml"}
    assert report.files == session.digests
    assert all(len(digest) == 64 for digest in report.files.values())


def test_loading_gives_frozen_values(car: Path) -> None:
    assert load_design(car).names("masses") == ("fuel",)
    assert list(load_ruleset(car.with_name("cup.ruleset.yaml")).rules) == ["width", "mass"]


def test_workings_show_the_formula_with_its_numbers(car: Path) -> None:
    found = workings(car, ["width", "mass.total"], on=DAY)
    assert [item.name for item in found.items] == ["width", "mass.total"]
    assert found.items[1].steps[-1].result == "50 kg" or any(step.result == "50 kg" for step in found.items[1].steps)


@pytest.mark.parametrize(
    ("options", "code"),
    [
        ({"settings": {"a b": "5 mm"}}, "bad-name"),
        ({"settings": {"dimensions.overall_widht": "5 mm"}}, "unknown-key"),
        ({"settings": {"dimensions.overall_width": "5 kg"}}, "wrong-dimension"),
        ({"settings": {"dimensions.overall_width": "["}}, "yaml-syntax"),
        ({"settings": {"revision": "D"}}, "unknown-key"),
        ({"settings": {"dimensions": "5 mm"}}, "bad-structure"),
        ({"states": {"fuel": "half"}}, "unknown-state"),
        ({"states": {"tyres": "worn"}}, "unknown-state"),
        ({"rules": ["no-such.ruleset.yaml"]}, "no-such-file"),
        ({"changes": ["no-such.change.yaml"]}, "no-such-file"),
    ],
)
def test_what_is_refused(car: Path, options: dict[str, object], code: str) -> None:
    with pytest.raises(Refused) as caught:
        check(car, on=DAY, **options)  # type: ignore[arg-type]
    assert [item.code for item in caught.value.diagnostics] == [code]


def test_all_faults_of_all_files_are_told_at_once(car: Path) -> None:
    car.write_text(CAR + "dimensions: {overall_width: 5 kg, zorg: 5}\n", encoding="utf-8")
    car.with_name("cup.ruleset.yaml").write_text(RULES + "rules: {a: {require: zorg <= 5 mm}}\n", encoding="utf-8")
    with pytest.raises(Refused) as caught:
        check(car, on=DAY)
    assert sorted(item.code for item in caught.value.diagnostics) == ["unknown-key", "unknown-name", "wrong-dimension"]
