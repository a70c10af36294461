"""Masses, lengths and the like below zero are slips, told with their place wherever they are stated."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from rulecheck import api
from rulecheck.diagnostics import Refused
from rulecheck.model.core_table import CORE
from rulecheck.model.value_signs import AT_LEAST_ZERO, MORE_THAN_ZERO

DAY = date(2027, 3, 1)
RULES = "ruleset: Dunmere Cup\nrules:\n  ballast: {require: sum(b.mass for b in ballast) <= 20 kg}\n  base: {require: dimensions.wheelbase <= 3 m}\n"
CAR = "design: Heron 4\nrulesets: [cup.ruleset.yaml]\ndimensions: {wheelbase: 2 m}\nballast: {a: {mass: 18 kg}, b: {mass: 5 kg}}\n"


def car(folder: Path, more: str = "") -> Path:
    (folder / "cup.ruleset.yaml").write_text(RULES, encoding="utf-8")
    design = folder / "car.design.yaml"
    design.write_text(CAR + more, encoding="utf-8")
    return design


def refused(design: Path, **settings: str) -> list[str]:
    with pytest.raises(Refused) as caught:
        api.check(design, settings=[(path.replace("__", "."), text) for path, text in settings.items()], on=DAY)
    return [str(item) for item in caught.value.diagnostics]


def test_every_path_with_a_sign_is_a_number_of_the_vocabulary() -> None:
    numbers = {entry.path for entry in CORE if entry.kind == "number"}
    assert numbers >= MORE_THAN_ZERO | AT_LEAST_ZERO
    assert not MORE_THAN_ZERO & AT_LEAST_ZERO


def test_a_negative_mass_that_would_mend_a_rule_is_refused(tmp_path: Path) -> None:
    assert api.check(car(tmp_path), on=DAY).verdict == "breach"
    (said,) = refused(car(tmp_path), ballast__b__mass="-5 kg")
    assert "'ballast.b.mass' is below zero: -5 kg" in said
    assert "expected a value that is 0 or more" in said


def test_no_wheelbase_is_refused_and_an_empty_piece_is_not(tmp_path: Path) -> None:
    (said,) = refused(car(tmp_path), dimensions__wheelbase="0 mm")
    assert "'dimensions.wheelbase' is zero: 0 mm; expected a value that is more than 0" in said
    assert api.check(car(tmp_path), settings={"ballast.b.mass": "0 kg"}, on=DAY).verdict == "complies"


def test_what_a_state_sets_is_looked_at_too(tmp_path: Path) -> None:
    design = car(tmp_path, "states:\n  load: {light: {ballast.a.mass: -1 kg}}\n")
    (said,) = refused(design)
    assert said.startswith("car.design.yaml:6:34: bad-value: 'ballast.a.mass' is below zero: -1 kg")


def test_a_ledger_row_below_zero_is_told_with_its_row(tmp_path: Path) -> None:
    design = car(tmp_path, "ledger: [parts.csv]\n")
    (tmp_path / "parts.csv").write_text("item,mass [kg],x [mm],y [mm],z [mm]\ntub,-96,1,2,3\n", encoding="utf-8")
    (said,) = refused(design)
    assert "parts.csv:2:" in said
    assert "'masses.tub.mass' is below zero" in said


def test_headroom_ends_where_values_end(tmp_path: Path) -> None:
    report = api.headroom(car(tmp_path, "").with_name("car.design.yaml"), ["dimensions.wheelbase"],
                          settings={"ballast.a.mass": "1 kg"}, on=DAY)  # fmt: skip
    (row,) = report.inputs
    assert (row.down.ending, row.up.travel.exact if row.up.travel else "") == ("free", "1000")
