"""`check` and `workings` as JSON, by the schemas of `report_schema`."""

from __future__ import annotations

import json
from collections.abc import Mapping
from dataclasses import fields, is_dataclass
from typing import Protocol

from rulecheck.outcome.results import (
    Amount,
    BindingPart,
    EnvelopeResult,
    Finding,
    PartResult,
    Place,
    RangeResult,
    Report,
    RuledResult,
    RulesetInfo,
    Workings,
)
from rulecheck.output.json_spread import amount_json, finite, spread_json
from rulecheck.output.marks import marks_json

__all__ = ["Json", "amount_json", "json_text", "report_json", "workings_json"]

Json = dict[str, object]


def report_json(report: Report) -> str:
    """The outcome of `check` as JSON text; the same outcome gives the same bytes."""
    return json_text(
        {
            **heading("report", report),
            "verdict": report.verdict,
            "tightest": report.tightest,
            "counts": dict(report.counts),
            "rulesets": [_ruleset(item) for item in report.rulesets],
            "changes": list(report.changes),
            "reserve": report.reserve,
            "rules": [_finding(item) for item in report.rules],
            "notes": list(report.notes),
            "marks": marks_json(report.marks),
            "cautions": list(report.cautions),
            "files": dict(report.files),
        }
    )


def workings_json(workings: Workings) -> str:
    """The outcome of `workings` as JSON text."""
    return json_text(
        {
            **heading("workings", workings),
            "items": [
                {
                    "name": item.name,
                    "title": item.title,
                    "clause": item.clause,
                    "verdict": item.verdict,
                    "margin": item.margin,
                    "caution": item.caution,
                    "binding": _binding(item.binding),
                    "conditions": [_part(part) for part in item.conditions],
                    "steps": [_record(step) for step in item.steps],
                    "closed_form": _record(item.closed_form) if item.closed_form else None,
                }
                for item in workings.items
            ],
        }
    )


class _Headed(Protocol):
    """What every outcome says of itself."""

    @property
    def version(self) -> str: ...
    @property
    def design(self) -> str: ...
    @property
    def file(self) -> str: ...
    @property
    def date(self) -> str: ...


def heading(form: str, outcome: _Headed) -> Json:
    """What stands first in every form: what it is, of which design, on which day; a report also says the revision."""
    revision: Json = {"revision": outcome.revision} if isinstance(outcome, Report) else {}
    return {
        "form": form, "version": outcome.version, "design": outcome.design, **revision, "file": outcome.file,
        "date": outcome.date,
    }  # fmt: skip


def json_text(value: Json) -> str:
    """A JSON object as text, with a line end."""
    return json.dumps(value, indent=2, ensure_ascii=False, allow_nan=False) + "\n"


def _ruleset(item: RulesetInfo) -> Json:
    return {
        "name": item.name,
        "edition": item.edition,
        "file": item.file,
        "withdrawn": list(item.withdrawn),
        "note": item.note,
        "extends": [{"name": book.name, "edition": book.edition, "file": book.file} for book in item.extends],
    }


def _finding(item: Finding) -> Json:
    return {
        "name": item.name,
        "clause": item.clause,
        "title": item.title,
        "standing": item.standing,
        "ruleset": item.ruleset,
        "ruleset_name": item.ruleset_name,
        "verdict": item.verdict,
        "reason": item.reason,
        "margin": _margin(item.margin, item.strict),
        "relative_margin": finite(item.relative_margin),
        "value": amount_json(item.value),
        "limit": amount_json(item.limit),
        "sense": item.sense,
        "counted": item.counted,
        "binding": _binding(item.binding),
        "parts": [_part(part) for part in item.parts],
        "places": {"rule": _place(item.rule_place), "value": _place(item.value_place)},
        "dispensation": item.dispensation,
        "estimates": list(item.estimates),
        "outside_validity": list(item.outside_validity),
        "notes": list(item.notes),
        "history": list(item.history),
        "spread": spread_json(item.spread),
        "ruled": _ruled(item.ruled),
        "consequence": item.consequence,
        "envelope": _envelope(item.envelope),
    }


def _binding(binding: BindingPart | None) -> Json | None:
    if binding is None:
        return None
    return {
        "part": binding.part,
        "element": binding.element,
        "branch": binding.branch,
        "case": _case(binding.state, binding.at),
    }


def _case(state: Mapping[str, str], at: Mapping[str, Amount]) -> Json:
    return {"state": dict(state), "at": {path: amount_json(value) for path, value in at.items()}}


def _envelope(item: EnvelopeResult | None) -> Json | None:
    if item is None:
        return None
    return {
        "ranges": [_range(found) for found in item.ranges],
        "least_margin": amount_json(item.bound),
        "undecided": [_range(found) for found in item.undecided],
    }


def _range(item: RangeResult) -> Json:
    return {"figure": item.figure, "from": amount_json(item.low), "to": amount_json(item.high)}


def _part(item: PartResult) -> Json:
    return {
        "text": item.text,
        "kind": item.kind,
        "verdict": item.verdict,
        "reason": item.reason,
        "margin": _margin(item.margin, item.strict),
        "relative_margin": finite(item.relative_margin),
        "value": amount_json(item.value),
        "limit": amount_json(item.limit),
        "sense": item.sense,
        "element": item.element,
        "branch": item.branch,
        "case": _case(item.state, item.at),
        "place": _place(item.place),
        "ruled": _ruled(item.ruled),
    }


def _ruled(item: RuledResult | None) -> Json | None:
    if item is None:
        return None
    return {
        "tolerance": item.tolerance,
        "rounding": item.rounding,
        "margin": amount_json(item.margin),
        "value": amount_json(item.value),
    }


def _margin(amount: Amount | None, strict: bool) -> Json | None:
    shown = amount_json(amount)
    return {**shown, "strict": strict} if shown is not None else None


def _place(place: Place | None) -> Json | None:
    return {"file": place.file, "line": place.line, "column": place.column} if place else None


def _record(value: object) -> object:
    """A flat result as it is: fields in their order."""
    if is_dataclass(value) and not isinstance(value, type):
        return {field.name: _record(getattr(value, field.name)) for field in fields(value)}
    if isinstance(value, tuple):
        return [_record(item) for item in value]
    if hasattr(value, "items"):
        return {key: _record(item) for key, item in value.items()}
    return value
