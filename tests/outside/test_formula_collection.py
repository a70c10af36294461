"""Sixty-five formulas of physics: values and units, as derived figures of one ruleset.

Source of formulas, units and ranges: the Feynman Symbolic Regression Database (S.-M. Udrescu, M. Tegmark, Science
Advances 6 (2020) eaay2631). Status: formulas and units read there; the points were drawn at random within the published
ranges, and the values computed in double precision by Python and their units confirmed with pint, apart from this
program. The formulas stand in `facts/formulas.csv` as text, and nothing here knows their dimensions but from there.
"""

from __future__ import annotations

import csv
import re
from dataclasses import dataclass
from pathlib import Path

import pytest
from writing import DAY, as_float, findings, write_design, write_ruleset

from rulecheck import check
from rulecheck.diagnostics import Diagnostic, Refused

FACTS = Path(__file__).parent / "facts" / "formulas.csv"
WORD = re.compile(r"[A-Za-z_]\w*")


@dataclass(frozen=True)
class Row:
    """One formula with its point; `label` is the name as the language allows it."""

    name: str
    label: str
    formula: str
    unit: str
    value: float
    variables: dict[str, tuple[str, str]]

    def written(self) -> str:
        """The formula with the row's own inputs: `m` of row 7 is `row7.m`."""
        return WORD.sub(lambda word: f"{self.label}.{word[0]}" if word[0] in self.variables else word[0], self.formula)


def _rows() -> list[Row]:
    found = []
    with FACTS.open(encoding="utf-8") as stream:
        for index, row in enumerate(csv.DictReader(stream, delimiter=";")):
            variables = {}
            for text in row["variables"].split(", "):
                variable, number, unit = re.fullmatch(r"(\w+) = (\S+) (\S+)", text).groups()  # type: ignore[union-attr]
                variables[variable] = (number, unit)
            found.append(Row(row["name"], f"row{index}", row["formula"], row["unit"], float(row["value"]), variables))
    return found


ROWS = _rows()
MOST_VARIABLES = max(len(row.variables) for row in ROWS)


def test_the_collection_is_whole():
    assert len(ROWS) == 65
    assert {row.name for row in ROWS} >= {"I.12.5", "II.36.38", "III.9.52", "test_20"}


def ruleset_of(rows, *, output="", changed=-1, by=""):
    """Each formula as a derived figure with a rule on it; units of the outputs or of one input changed where asked."""
    inputs, derived, rules = {}, {}, {}
    for row in rows:
        for index, (variable, (_, unit)) in enumerate(row.variables.items()):
            declared = f"{unit}*{by}" if index == changed else unit
            inputs[f"{row.label}.{variable}"] = {"unit": declared.removeprefix("1*"), "meaning": "Part of the formula"}
        unit = f"{row.unit}*{output}".removeprefix("1*") if output else row.unit
        derived[f"{row.label}_figure"] = {"formula": row.written(), "unit": unit, "meaning": row.name}
        rules[row.label] = {"require": f"{row.label}_figure >= 0 {'' if unit == '1' else unit}".strip()}
    return {"inputs": inputs, "derived": derived, "rules": rules}


def design_of(rows):
    return {row.label: {name: f"{value} {unit}" for name, (value, unit) in row.variables.items()} for row in rows}


@pytest.fixture(scope="module")
def found(tmp_path_factory):
    folder = tmp_path_factory.mktemp("collection")
    write_ruleset(folder, **ruleset_of(ROWS))
    write_design(folder, **design_of(ROWS))
    return findings(folder)


@pytest.mark.parametrize("row", ROWS, ids=[row.name for row in ROWS])
def test_value_unit_and_verdict(found, row):
    finding = found[row.label]
    assert as_float(finding.value) == pytest.approx(row.value, rel=1e-12)
    assert finding.value.unit == row.unit
    assert finding.verdict == ("complies" if row.value >= 0 else "breach")


def faults_by_row(folder: Path, rows) -> dict[str, list[Diagnostic]]:
    """The diagnostics by the row whose derived figure they point into, on a design that states nothing."""
    lines = (folder / "book.ruleset.yaml").read_text(encoding="utf-8").splitlines()
    write_design(folder)
    with pytest.raises(Refused) as refused:
        check(folder / "car.design.yaml", on=DAY)
    by_row: dict[str, list[Diagnostic]] = {row.label: [] for row in rows}
    for item in refused.value.diagnostics:
        assert item.span is not None
        above = [line for line in lines[: item.span.line] if line.startswith("  row")]
        by_row[above[-1].strip().removesuffix(":").removesuffix("_figure")].append(item)
    return by_row


@pytest.mark.parametrize("by", ["m", "kg", "s", "V", "K", "m^-1", "mol"])
def test_a_wrong_unit_of_the_figure_is_refused_for_every_row(tmp_path, by):
    """Each row is refused, all in one go, with the code that says so; the same ruleset with right units is not."""
    write_ruleset(tmp_path, **ruleset_of(ROWS, output=by))
    for label, faults in faults_by_row(tmp_path, ROWS).items():
        assert [fault.code for fault in faults] == ["wrong-dimension"], label


@pytest.mark.parametrize("index", range(MOST_VARIABLES))
def test_a_wrong_unit_of_one_input_is_refused(tmp_path, index):
    """No formula of the collection holds when one of its inputs, and it alone, gains a factor of mol."""
    rows = [row for row in ROWS if len(row.variables) > index]
    write_ruleset(tmp_path, **ruleset_of(rows, changed=index, by="mol"))
    dimensional = {"wrong-dimension", "dimension-mismatch", "kind-mismatch"}
    for label, faults in faults_by_row(tmp_path, rows).items():
        assert faults, label
        assert {fault.code for fault in faults} <= dimensional, (label, faults)


def test_right_units_are_not_refused(tmp_path):
    """The same design that states nothing passes with the right units: nothing known, nothing refused."""
    write_ruleset(tmp_path, **ruleset_of(ROWS))
    write_design(tmp_path)
    assert {finding.verdict for finding in findings(tmp_path).values()} == {"open"}
