"""Outcomes made by hand for the tests of the printed forms."""

from __future__ import annotations

from dataclasses import replace

from rulecheck.outcome.results import VERDICTS, Amount, BindingPart, Finding, PartResult, Place, Report, RulesetInfo

PLACE = Place("cup.ruleset.yaml", 7, 14)


def finding(name: str = "overall_width", **changed: object) -> Finding:
    """A rule that complies with 10 mm of 1900 mm, with changes."""
    made = Finding(
        name=name,
        ruleset="cup.ruleset.yaml",
        clause="3.1",
        title="Overall width",
        standing="shall",
        verdict="complies",
        reason="",
        margin=Amount("10", "mm", 10.0, "10"),
        strict=False,
        relative_margin=10 / 1900,
        value=Amount("1890", "mm", 1890.0, "1890"),
        limit=Amount("1900", "mm", 1900.0, "1900"),
        sense="at most",
        binding=BindingPart("dimensions.overall_width <= 1900 mm", "", {}),
        parts=(part(),),
        rule_place=PLACE,
        value_place=Place("car.design.yaml", 9, 18),
        ruleset_name="Cup",
    )
    return replace(made, **changed)  # type: ignore[arg-type]


def part(**changed: object) -> PartResult:
    """The one condition of that rule, with changes."""
    made = PartResult(
        "dimensions.overall_width <= 1900 mm",
        "comparison",
        "complies",
        "",
        Amount("10", "mm", 10.0, "10"),
        False,
        10 / 1900,
        Amount("1890", "mm", 1890.0, "1890"),
        Amount("1900", "mm", 1900.0, "1900"),
        "at most",
        "",
        {},
        PLACE,
    )
    return replace(made, **changed)  # type: ignore[arg-type]


def report(*findings: Finding, **changed: object) -> Report:
    """A report of these findings, with changes."""
    said = [item.verdict for item in findings]
    made = Report(
        design="Plover T4",
        revision="B",
        file="car.design.yaml",
        date="2027-03-01",
        verdict="complies",
        rulesets=(RulesetInfo("Cup", "7", "cup.ruleset.yaml"),),
        rules=findings,
        counts={verdict: said.count(verdict) for verdict in VERDICTS},
        tightest="",
        notes=(),
        cautions=(),
        changes=(),
        reserve="",
        version="0",
        files={"car.design.yaml": "0" * 64},
    )
    return replace(made, **changed)  # type: ignore[arg-type]
