from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from rulecheck import check, proofread

SERIES = """\
ruleset: Series
valid: {from: 2027-01-01, until: 2027-12-31}
tables: {least: {over: dimensions.wheelbase, steps: [{otherwise: 700 kg}]}}
rules:
  width: {clause: "1", title: Width, require: dimensions.overall_width <= 1900 mm}
  height: {clause: "2", title: Height, require: dimensions.overall_height <= 1100 mm}
"""
BULLETIN = """\
ruleset: Bulletin
valid: {from: 2027-07-01, until: 2027-09-30}
extends: series.ruleset.yaml
withdrawn: {height: bulletin 1}
tables: {least: {over: dimensions.wheelbase, steps: [{otherwise: 720 kg}]}}
rules:
  width: {clause: "1", title: Width, require: dimensions.overall_width <= 1800 mm}
  mass: {clause: "3", title: Mass, require: dimensions.wheelbase >= 1 m}
"""
LATER = """\
ruleset: Later bulletin
valid: {from: 2027-08-01}
extends: bulletin.ruleset.yaml
rules: {width: {clause: "1", title: Width, require: dimensions.overall_width <= 1700 mm}}
"""
CAR = """\
design: Heron
rulesets: [later.ruleset.yaml]
dimensions: {overall_width: 1850 mm, overall_height: 1050 mm, wheelbase: 2600 mm}
"""


@pytest.fixture(autouse=True)
def _files(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    for name, text in (("series", SERIES), ("bulletin", BULLETIN), ("later", LATER)):
        (tmp_path / f"{name}.ruleset.yaml").write_text(text, encoding="utf-8")
    (tmp_path / "car.design.yaml").write_text(CAR, encoding="utf-8")
    (tmp_path / "rulecheck.yaml").write_text("house: Heath office\n", encoding="utf-8")
    monkeypatch.chdir(tmp_path)


@pytest.mark.parametrize(
    ("day", "limit", "rules"),
    [
        (date(2027, 6, 30), 1900, {"width", "height"}),
        (date(2027, 7, 1), 1800, {"width", "mass"}),
        (date(2027, 7, 31), 1800, {"width", "mass"}),
        (date(2027, 8, 1), 1700, {"width", "mass"}),
    ],
)
def test_each_layer_holds_on_its_days(day: date, limit: int, rules: set[str]) -> None:
    report = check("car.design.yaml", on=day)
    found = {finding.name: finding for finding in report.rules}
    assert set(found) == rules
    margin = found["width"].margin
    assert margin is not None
    assert margin.value == limit - 1850
    listed = proofread(["later.ruleset.yaml"], on=day, listed=True).books[0].rules
    assert {rule.name for rule in listed if not rule.withdrawn} == rules


def test_where_nothing_below_is_in_force_all_is_read_as_it_stands() -> None:
    report = check("car.design.yaml", on=date(2026, 6, 1))
    assert {finding.name for finding in report.rules} == {"width", "mass"}


def test_the_answer_says_what_is_not_in_force() -> None:
    report = check("car.design.yaml", on=date(2027, 6, 30))
    assert report.rulesets[0].note == "not in force on 2027-06-30"
    assert proofread(["later.ruleset.yaml"], on=date(2027, 6, 30)).books[0].layers == (
        "series.ruleset.yaml",
        "bulletin.ruleset.yaml (not in force on 2027-06-30)",
        "later.ruleset.yaml (not in force on 2027-06-30)",
    )
