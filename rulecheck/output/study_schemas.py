"""JSON Schemas of what `whatif` and `headroom` print."""

from __future__ import annotations

from rulecheck.output.marks import marks_schema
from rulecheck.output.report_schema import (
    DRAFT,
    Schema,
    heading_of,
    list_of,
    object_of,
    or_null_of,
    shared_of,
    text_of,
    verdict_of,
)


def whatif_schema() -> Schema:
    """The schema of what `whatif --form json` prints."""
    change: Schema = {"name": text_of("Name of the change"), "settings": list_of(text_of(), "What it sets")}
    moved: Schema = {
        "verdict": or_null_of(verdict_of("Verdict of the rule afterwards; null for figures")),
        "after": or_null_of({"$ref": "#/$defs/amount"}),
        "difference": or_null_of({"$ref": "#/$defs/amount"}),
        "foretold": or_null_of({"$ref": "#/$defs/amount"}),
        "binding": text_of("The part that decides afterwards"),
    }
    shared: Schema = {
        "name": text_of(),
        "before": or_null_of({"$ref": "#/$defs/amount"}),
        "moved": list_of(object_of(moved), "One for each change, in order"),
    }
    rule: Schema = {
        **shared,
        "clause": text_of(),
        "title": text_of(),
        "verdict": verdict_of("Verdict before"),
        "binding": text_of("The part that decides before"),
    }
    after = list_of(text_of(), "One for each change; empty where it is not stated or not known")
    put: Schema = {"path": text_of(), "before": text_of("As stated, empty where it is not"), "after": after}
    limit: Schema = {
        "name": text_of(),
        "meaning": text_of(),
        "before": text_of("Empty where not known"),
        "after": after,
    }
    properties: Schema = {
        **heading_of("whatif"),
        "inputs": list_of(object_of(put), "Inputs that are not as they were"),
        "limits": list_of(
            object_of(limit), "Figures that are words, such as the limit that binds; also where they stay"
        ),
        "changes": list_of(object_of(change), "The changes, side by side"),
        "verdict": verdict_of("The total before"),
        "verdicts": list_of(verdict_of("The total with the change"), "One for each change"),
        "unchanged": {"description": "Rules that do not move", "type": "integer", "minimum": 0},
        "rules": list_of(object_of(rule), "Rules that move, most affected first"),
        "figures": list_of(object_of({**shared, "meaning": text_of()}), "Figures that move, most affected first"),
        "marks": marks_schema(),
        "cautions": list_of(text_of(), "What the answer cannot decide"),
    }
    return {"$schema": DRAFT, "title": "What if", **object_of(properties), "$defs": shared_of()}


def headroom_schema() -> Schema:
    """The schema of what `headroom --form json` prints."""
    amount: Schema = {"$ref": "#/$defs/amount"}
    travel = object_of(
        {
            "ending": {"description": "What is met there", "enum": ["stops", "opens", "mends", "free", "unsure"]},
            "travel": or_null_of(amount),
            "at": or_null_of(amount),
            "rules": list_of(text_of(), "The rules that turn there"),
            "exact": {"description": "The end itself, and not a point just before it", "type": "boolean"},
        }
    )
    row = object_of(
        {
            "path": text_of("The input"),
            "value": amount,
            "basis": text_of("Where its value comes from"),
            "restrained_by": {"description": "Rules that read it", "type": "integer", "minimum": 1},
            "down": travel,
            "up": travel,
        }
    )
    properties: Schema = {
        **heading_of("headroom"),
        "breached": list_of(text_of(), "Rules in breach as it stands"),
        "inputs": list_of(row, "The least travel first"),
        "unrestrained": list_of(text_of(), "Inputs that no rule reads"),
        "marks": marks_schema(),
        "left_out": list_of(
            object_of({"rule": text_of(), "inputs": list_of(text_of(), "Inputs that move it")}),
            "Rules that rest on a solver, along which nothing is certain",
        ),
        "cautions": list_of(text_of(), "What the answer cannot decide"),
    }
    return {"$schema": DRAFT, "title": "Headroom", **object_of(properties), "$defs": shared_of()}
