"""Small invented designs and rulesets, written to a folder of their own and checked through the public verbs."""

from __future__ import annotations

import tempfile
from collections.abc import Mapping
from datetime import date
from fractions import Fraction
from pathlib import Path
from typing import Any

from rulecheck.api import check
from rulecheck.diagnostics import Diagnostic, Refused
from rulecheck.outcome.results import Finding, Report

DAY = date(2027, 3, 1)

RULES = """\
ruleset: Dunmere Cup
edition: "1"
"""

CAR = """\
design: Heron 4
revision: A
rulesets: [cup.ruleset.yaml]
"""


def write_files(folder: Path, files: Mapping[str, str | bytes]) -> None:
    """Write files below a folder."""
    for name, content in files.items():
        place = folder / name
        place.parent.mkdir(parents=True, exist_ok=True)
        place.write_bytes(content if isinstance(content, bytes) else content.encode("utf-8"))


def check_files(
    files: Mapping[str, str | bytes], *, on: date = DAY, design: str = "car.design.yaml", **options: Any
) -> Report:
    """Check a design among files that are written for this one call."""
    with tempfile.TemporaryDirectory() as folder:
        write_files(Path(folder), files)
        options["rules"] = [Path(folder, name) for name in options.get("rules", ())]
        options["changes"] = [Path(folder, name) for name in options.get("changes", ())]
        return check(Path(folder, design), on=on, **options)


def check_texts(design: str, ruleset: str, *, on: date = DAY, **options: Any) -> Report:
    """Check what stands below the header of a design against what stands below the header of a ruleset."""
    return check_files({"car.design.yaml": CAR + design, "cup.ruleset.yaml": RULES + ruleset}, on=on, **options)


def findings(report: Report) -> dict[str, Finding]:
    """The findings of a report by rule."""
    return {finding.name: finding for finding in report.rules}


def only(design: str, ruleset: str, *, on: date = DAY, **options: Any) -> Finding:
    """The finding of the rule called `it`."""
    return findings(check_texts(design, ruleset, on=on, **options))["it"]


def require(condition: str, design: str = "", declarations: str = "", **options: Any) -> Finding:
    """The finding of one rule that asks for a condition, written as a folded text."""
    return only(design, f"{declarations}rules:\n  it:\n    require: >-\n      {condition}\n", **options)


def verdict(condition: str, design: str = "", declarations: str = "", **options: Any) -> str:
    """The verdict of one rule that asks for a condition."""
    return require(condition, design, declarations, **options).verdict


def margin(finding: Finding) -> Fraction | None:
    """The exact margin in its unit, or None where it has none."""
    if finding.margin is None:
        return None
    assert finding.margin.exact, f"the margin of '{finding.name}' is not exact: {finding.margin}"
    return Fraction(finding.margin.exact)


def refused(design: str, ruleset: str, *, on: date = DAY, **options: Any) -> tuple[Diagnostic, ...]:
    """The diagnostics with which a check is refused."""
    try:
        report = check_texts(design, ruleset, on=on, **options)
    except Refused as error:
        return error.diagnostics
    raise AssertionError(f"not refused: {[(f.name, f.verdict) for f in report.rules]}")
