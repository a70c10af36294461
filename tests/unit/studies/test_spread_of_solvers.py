"""The spread of what a solver gives: said, and not searched at the cost of hundreds of runs."""

from __future__ import annotations

from datetime import date
from pathlib import Path

from rulecheck import api

ROOT = Path(__file__).resolve().parents[3]


def test_a_lap_is_not_driven_for_every_box_of_a_search() -> None:
    report = api.check(ROOT / "designs_demo" / "marram-p2-lap.design.yaml", on=date(2027, 3, 1))
    spread = next(finding for finding in report.rules if finding.name == "lap_time").spread
    assert spread is not None
    assert (spread.measured, spread.worst_case) == (None, None)
    assert spread.notes == ("the margin rests on a solver: neither first-order figures nor a worst case are given",)
