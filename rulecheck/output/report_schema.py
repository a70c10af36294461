"""JSON Schemas (draft 2020-12) of what `--form json` prints: the report of `check`, workings, diagnostics."""

from __future__ import annotations

from rulecheck.diagnostics import CODES
from rulecheck.outcome.results import VERDICTS

Schema = dict[str, object]

DRAFT = "https://json-schema.org/draft/2020-12/schema"


def report_schema() -> Schema:
    """The schema of the report that `check --form json` prints."""
    properties: Schema = {
        **_heading("report"),
        "revision": _text("Revision of the design, empty where it states none"),
        "verdict": _verdict("The total over all rules that bind"),
        "tightest": _text("Name of the binding rule with the least relative margin, empty where none has a number"),
        "counts": {
            "description": "Number of rules by verdict",
            "type": "object",
            "propertyNames": {"enum": list(VERDICTS)},
            "additionalProperties": {"type": "integer", "minimum": 0},
        },
        "rulesets": _list(_object(_ruleset()), "The rule books, in the order in which they were read"),
        "changes": _list(_text(), "What was laid over the design, in order"),
        "reserve": _text("The room that was kept beyond the limits, in words"),
        "rules": _list({"$ref": "#/$defs/rule"}, "Every rule, in the order of the rule books"),
        "notes": _list(_text(), "What has to be said beside the rules, such as values that contradict each other"),
        "cautions": _list(_text(), "What the report cannot decide"),
        "files": {
            "description": "SHA-256 of every file that was read, by its name",
            "type": "object",
            "additionalProperties": {"type": "string", "pattern": "^[0-9a-f]{64}$"},
        },
    }
    definitions = {**_shared(), "rule": _object(_rule())}
    return {"$schema": DRAFT, "title": "Report", **_object(properties), "$defs": definitions}


def workings_schema() -> Schema:
    """The schema of what `workings --form json` prints."""
    properties = {**_heading("workings"), "items": _list(_object(_working()), "One for each name that was asked for")}
    return {"$schema": DRAFT, "title": "Workings", **_object(properties), "$defs": _shared()}


def whatif_schema() -> Schema:
    """The schema of what `whatif --form json` prints."""
    change: Schema = {"name": _text("Name of the change"), "settings": _list(_text(), "What it sets")}
    moved: Schema = {
        "verdict": _or_null(_verdict("Verdict of the rule afterwards; null for figures")),
        "after": _or_null({"$ref": "#/$defs/amount"}),
        "difference": _or_null({"$ref": "#/$defs/amount"}),
        "foretold": _or_null({"$ref": "#/$defs/amount"}),
        "binding": _text("The part that decides afterwards"),
    }
    shared: Schema = {
        "name": _text(),
        "before": _or_null({"$ref": "#/$defs/amount"}),
        "moved": _list(_object(moved), "One for each change, in order"),
    }
    rule: Schema = {
        **shared,
        "clause": _text(),
        "title": _text(),
        "verdict": _verdict("Verdict before"),
        "binding": _text("The part that decides before"),
    }
    properties: Schema = {
        **_heading("whatif"),
        "changes": _list(_object(change), "The changes, side by side"),
        "verdict": _verdict("The total before"),
        "verdicts": _list(_verdict("The total with the change"), "One for each change"),
        "unchanged": {"description": "Rules that do not move", "type": "integer", "minimum": 0},
        "rules": _list(_object(rule), "Rules that move, most affected first"),
        "figures": _list(_object({**shared, "meaning": _text()}), "Figures that move, most affected first"),
        "cautions": _list(_text(), "What the answer cannot decide"),
    }
    return {"$schema": DRAFT, "title": "What if", **_object(properties), "$defs": _shared()}


def diagnostics_schema() -> Schema:
    """The schema of the array that `--form json` prints where the input cannot be used."""
    properties: Schema = {
        "code": {"description": "What kind of fault it is", "enum": sorted(CODES)},
        "message": _text("What is wrong"),
        "place": _or_null({"$ref": "#/$defs/span"}),
        "expected": _text("What was expected there, empty where nothing can be said"),
        "advice": _text("What to do, empty where nothing can be said"),
        "related": _list(_object({"message": _text(), "place": {"$ref": "#/$defs/span"}}), "Other places, and why"),
    }
    span = _object(
        {
            **_place(),
            "start": {"description": "Characters of the file before it", "type": "integer", "minimum": 0},
            "end": {"description": "Characters of the file before its end", "type": "integer", "minimum": 0},
        }
    )
    return {
        "$schema": DRAFT,
        "title": "Diagnostics",
        "type": "array",
        "minItems": 1,
        "items": _object(properties),
        "$defs": {"span": span},
    }


def _heading(form: str) -> Schema:
    return {
        "form": {"const": form},
        "version": _text("Version of the program"),
        "design": _text("Name of the design"),
        "file": _text("File of the design"),
        "date": {"description": "Evaluation date", "type": "string", "pattern": "^[0-9]{4}-[0-9]{2}-[0-9]{2}$"},
    }


def _shared() -> Schema:
    """The definitions that reports and workings have in common."""
    return {
        "amount": _object(_amount()),
        "margin": _object({**_amount(), "strict": {"description": "The limit itself is a breach", "type": "boolean"}}),
        "place": _object(_place()),
        "case": _object(
            {
                "state": {
                    "description": "The states in which it arises, by axis; empty for the design as written",
                    "type": "object",
                    "additionalProperties": {"type": "string"},
                }
            }
        ),
        "part": _object(_part()),
        "binding": _object(_binding()),
    }


def _binding() -> Schema:
    return {
        "part": _text("The condition that decides"),
        "element": _text("For which element, empty where the rule has none"),
        "branch": _text("On which branch, empty where the rule has none"),
        "case": {"$ref": "#/$defs/case"},
    }


def _amount() -> Schema:
    return {
        "value": {"description": "Nearest double, null for a range, a word or a list", "type": ["number", "null"]},
        "unit": _text("Unit of value, exact and shown; empty or 1 for a pure number"),
        "exact": {
            "description": "The same as a decimal or a fraction without any rounding, null where it is irrational",
            "type": ["string", "null"],
            "pattern": "^-?[0-9]",
        },
        "shown": _text("As the terminal shows it"),
    }


def _place() -> Schema:
    return {
        "file": _text("Relative to the root of the design's files"),
        "line": {"type": "integer", "minimum": 1},
        "column": {"type": "integer", "minimum": 1},
    }


def _ruleset() -> Schema:
    return {
        "name": _text(),
        "edition": _text(),
        "file": _text(),
        "withdrawn": _list(_text(), "Rules that it withdraws, with the reason"),
        "note": _text("Such as that it is not in force on the evaluation date"),
        "extends": _list(
            {"type": "object", "properties": {"name": _text(), "edition": _text(), "file": _text()}},
            "Rule books that it adds to",
        ),
    }


def _judged() -> Schema:
    """What rules and their parts have in common."""
    return {
        "verdict": _verdict("The verdict"),
        "reason": _text("What is missing, why it is not applicable, or what permits it"),
        "margin": _or_null({"$ref": "#/$defs/margin"}, "Room to the limit, negative in breach; null without a number"),
        "relative_margin": {
            "description": "Margin over the limit's magnitude or the rule's scale, as a share",
            "type": ["number", "null"],
        },
        "value": _or_null({"$ref": "#/$defs/amount"}),
        "limit": _or_null({"$ref": "#/$defs/amount"}),
        "sense": _text("How value and limit are held against each other"),
    }


def _rule() -> Schema:
    places = {
        "rule": {"$ref": "#/$defs/place"},
        "value": _or_null({"$ref": "#/$defs/place"}),
    }
    return {
        "name": _text(),
        "clause": _text(),
        "title": _text(),
        "standing": {"enum": ["shall", "should", "may", "note"]},
        "ruleset": _text("File of the rule book"),
        "ruleset_name": _text(),
        **_judged(),
        "counted": {"description": "Value and margin count whole things", "type": "boolean"},
        "binding": _or_null({"$ref": "#/$defs/binding"}, "What decides the rule"),
        "parts": _list({"$ref": "#/$defs/part"}, "Every condition, for every element, in every case"),
        "places": _object(places),
        "dispensation": _text("Reference and last day of the permission, empty without one"),
        "estimates": _list(_text(), "Paths of the estimated values that it rests on"),
        "outside_validity": _list(_text(), "Figures that are used outside their range of validity"),
        "notes": _list(_text(), "Such as a condition that is close to its own threshold"),
        "history": _list(_text(), "What the rule replaces"),
    }


def _part() -> Schema:
    return {
        "text": _text("The condition as the rule book writes it"),
        "kind": _text(),
        **_judged(),
        "element": _text(),
        "branch": _text(),
        "case": {"$ref": "#/$defs/case"},
        "place": _or_null({"$ref": "#/$defs/place"}),
    }


def _working() -> Schema:
    return {
        "name": _text("Name of the rule or figure"),
        "title": _text(),
        "clause": _text(),
        "verdict": {"description": "Empty for a figure", "enum": [*VERDICTS, ""]},
        "margin": _text("With its unit, empty where there is none"),
        "caution": _text(),
        "binding": _or_null({"$ref": "#/$defs/binding"}, "What decides a rule; null for a figure"),
        "conditions": _list({"$ref": "#/$defs/part"}, "The conditions of a rule"),
        "steps": _list(_object(_step()), "What comes first stands first"),
        "closed_form": _or_null(_object(_closed_form()), "Where it was asked for"),
    }


def _step() -> Schema:
    return {
        "name": _text(),
        "meaning": _text(),
        "formula": _text("Empty for an input"),
        "numbers": _text("The formula with its numbers put in"),
        "result": _text("With its unit"),
        "exact": _text("The result without any rounding, empty where it is irrational"),
        "source": _text(),
        "place": _or_null({"$ref": "#/$defs/place"}),
        "outside_validity": {"type": "boolean"},
        "depth": {"description": "How far below what was asked for", "type": "integer", "minimum": 0},
    }


def _closed_form() -> Schema:
    return {
        "formula": _text("The margin in SI units"),
        "derivatives": {"type": "object", "additionalProperties": {"type": "string"}},
        "solved": {"type": "object", "additionalProperties": _list(_text(), "Solutions on the limit")},
        "conditions": _list(_text(), "Where it holds"),
    }


def _text(description: str = "") -> Schema:
    return {"description": description, "type": "string"} if description else {"type": "string"}


def _verdict(description: str) -> Schema:
    return {"description": description, "enum": list(VERDICTS)}


def _list(items: Schema, description: str) -> Schema:
    return {"description": description, "type": "array", "items": items}


def _object(properties: Schema) -> Schema:
    """An object that has just these keys, all of them."""
    return {
        "type": "object",
        "properties": properties,
        "required": list(properties),
        "additionalProperties": False,
    }


def _or_null(schema: Schema, description: str = "") -> Schema:
    told: Schema = {"description": description} if description else {}
    return {**told, "oneOf": [schema, {"type": "null"}]}
