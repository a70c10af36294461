"""`whatif` and `headroom` as JSON."""

from __future__ import annotations

from typing import Any

from rulecheck.outcome.changes import FigureChange, Moved, RuleChange, WhatIf
from rulecheck.outcome.travel import HeadroomReport, Travel
from rulecheck.output.json_report import amount_json, heading, json_text
from rulecheck.output.marks import marks_json


def whatif_json(outcome: WhatIf) -> str:
    """The whole JSON form of `whatif`."""
    return json_text(
        {
            **heading("whatif", outcome),
            "changes": [{"name": name, "settings": list(settings)} for name, settings in outcome.columns],
            "verdict": outcome.verdict,
            "verdicts": list(outcome.verdicts),
            "unchanged": outcome.unchanged,
            "inputs": [
                {"path": item.path, "before": item.before, "after": list(item.after)} for item in outcome.inputs
            ],
            "limits": [
                {"name": item.name, "meaning": item.meaning, "before": item.before, "after": list(item.after)}
                for item in outcome.limits
            ],
            "rules": [_rule(change) for change in outcome.rules],
            "figures": [_figure(change) for change in outcome.figures],
            "marks": marks_json(outcome.marks),
            "cautions": list(outcome.cautions),
        }
    )


def _rule(change: RuleChange) -> dict[str, Any]:
    return {
        "name": change.name,
        "clause": change.clause,
        "title": change.title,
        "verdict": change.verdict,
        "before": amount_json(change.before),
        "binding": change.binding,
        "moved": [_moved(item) for item in change.moved],
    }


def _figure(change: FigureChange) -> dict[str, Any]:
    return {
        "name": change.name,
        "meaning": change.meaning,
        "before": amount_json(change.before),
        "moved": [_moved(item) for item in change.moved],
    }


def _moved(item: Moved) -> dict[str, Any]:
    return {
        "verdict": item.verdict,
        "after": amount_json(item.after),
        "difference": amount_json(item.difference),
        "foretold": amount_json(item.foretold),
        "binding": item.binding,
    }


def headroom_json(report: HeadroomReport) -> str:
    """The whole JSON form of `headroom`."""
    return json_text(
        {
            **heading("headroom", report),
            "breached": list(report.breached),
            "inputs": [
                {
                    "path": row.path,
                    "value": amount_json(row.value),
                    "basis": row.basis,
                    "restrained_by": row.restrained_by,
                    "down": _travel(row.down),
                    "up": _travel(row.up),
                }
                for row in report.inputs
            ],
            "unrestrained": list(report.unread),
            "marks": marks_json(report.marks),
            "left_out": [{"rule": rule, "inputs": list(paths)} for rule, paths in report.left_out],
            "cautions": list(report.cautions),
        }
    )


def _travel(travel: Travel) -> dict[str, Any]:
    return {
        "ending": travel.ending,
        "travel": amount_json(travel.travel),
        "at": amount_json(travel.at),
        "rules": list(travel.rules),
        "exact": travel.is_exact,
    }
