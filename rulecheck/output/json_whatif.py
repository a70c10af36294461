"""`whatif` as JSON."""

from __future__ import annotations

from typing import Any

from rulecheck.outcome.changes import FigureChange, Moved, RuleChange, WhatIf
from rulecheck.output.json_report import amount_json, json_text


def whatif_json(outcome: WhatIf) -> str:
    """The whole JSON form of `whatif`."""
    return json_text(
        {
            "form": "whatif",
            "version": outcome.version,
            "design": outcome.design,
            "file": outcome.file,
            "date": outcome.date,
            "changes": [{"name": name, "settings": list(settings)} for name, settings in outcome.columns],
            "verdict": outcome.verdict,
            "verdicts": list(outcome.verdicts),
            "unchanged": outcome.unchanged,
            "rules": [_rule(change) for change in outcome.rules],
            "figures": [_figure(change) for change in outcome.figures],
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
