"""JSON Schemas (draft 2020-12) of what `--form json` prints: the report of `check`, workings, diagnostics."""

from __future__ import annotations

from rulecheck.diagnostics import CODES
from rulecheck.outcome.results import VERDICTS
from rulecheck.output.marks import marks_schema
from rulecheck.output.schema_parts import DRAFT, Schema, list_of, object_of, or_null_of, text_of, verdict_of
from rulecheck.output.spread_schema import spread_of

__all__ = [
    "DRAFT",
    "Schema",
    "diagnostics_schema",
    "heading_of",
    "list_of",
    "object_of",
    "or_null_of",
    "report_schema",
    "shared_of",
    "text_of",
    "verdict_of",
    "workings_schema",
]


def report_schema() -> Schema:
    """The schema of the report that `check --form json` prints."""
    properties: Schema = {
        **heading_of("report"),
        "revision": text_of("Revision of the design, empty where it states none"),
        "verdict": verdict_of("The total over all rules that bind"),
        "tightest": text_of("Name of the binding rule with the least relative margin, empty where none has a number"),
        "counts": {
            "description": "Number of rules by verdict",
            "type": "object",
            "propertyNames": {"enum": list(VERDICTS)},
            "additionalProperties": {"type": "integer", "minimum": 0},
        },
        "rulesets": list_of(object_of(_ruleset()), "The rule books, in the order in which they were read"),
        "changes": list_of(text_of(), "What was laid over the design, in order"),
        "reserve": text_of("The room that was kept beyond the limits, in words"),
        "rules": list_of({"$ref": "#/$defs/rule"}, "Every rule, in the order of the rule books"),
        "notes": list_of(text_of(), "What has to be said beside the rules, such as values that contradict each other"),
        "marks": marks_schema(),
        "cautions": list_of(text_of(), "What the report cannot decide"),
        "files": {
            "description": "SHA-256 of every file that was read, by its name",
            "type": "object",
            "additionalProperties": {"type": "string", "pattern": "^[0-9a-f]{64}$"},
        },
    }
    definitions = {**shared_of(), "rule": object_of(_rule())}
    return {"$schema": DRAFT, "title": "Report", **object_of(properties), "$defs": definitions}


def workings_schema() -> Schema:
    """The schema of what `workings --form json` prints."""
    properties = {
        **heading_of("workings"),
        "items": list_of(object_of(_working()), "One for each name that was asked for"),
    }
    return {"$schema": DRAFT, "title": "Workings", **object_of(properties), "$defs": shared_of()}


def diagnostics_schema() -> Schema:
    """The schema of the array that `--form json` prints where the input cannot be used."""
    properties: Schema = {
        "code": {"description": "What kind of fault it is", "enum": sorted(CODES)},
        "message": text_of("What is wrong"),
        "place": or_null_of({"$ref": "#/$defs/span"}),
        "expected": text_of("What was expected there, empty where nothing can be said"),
        "advice": text_of("What to do, empty where nothing can be said"),
        "related": list_of(
            object_of({"message": text_of(), "place": {"$ref": "#/$defs/span"}}), "Other places, and why"
        ),
    }
    span = object_of(
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
        "items": object_of(properties),
        "$defs": {"span": span},
    }


def heading_of(form: str) -> Schema:
    """What every answer begins with."""
    return {
        "form": {"const": form},
        "version": text_of("Version of the program"),
        "design": text_of("Name of the design"),
        "file": text_of("File of the design"),
        "date": {"description": "Evaluation date", "type": "string", "pattern": "^[0-9]{4}-[0-9]{2}-[0-9]{2}$"},
    }


def shared_of() -> Schema:
    """The definitions that reports and workings have in common."""
    return {
        "amount": object_of(_amount()),
        "margin": object_of(
            {**_amount(), "strict": {"description": "The limit itself is a breach", "type": "boolean"}}
        ),
        "place": object_of(_place()),
        "case": object_of(
            {
                "state": {
                    "description": "The states in which it arises, by axis; empty for the design as written",
                    "type": "object",
                    "additionalProperties": {"type": "string"},
                },
                "at": {
                    "description": "The point of an envelope at which it arises, by input; empty where there is none",
                    "type": "object",
                    "additionalProperties": {"$ref": "#/$defs/amount"},
                },
            }
        ),
        "part": object_of(_part()),
        "binding": object_of(_binding()),
    }


def _binding() -> Schema:
    return {
        "part": text_of("The condition that decides"),
        "element": text_of("For which element, empty where the rule has none"),
        "branch": text_of("On which branch, empty where the rule has none"),
        "case": {"$ref": "#/$defs/case"},
    }


def _amount() -> Schema:
    return {
        "value": {"description": "Nearest double, null for a range, a word or a list", "type": ["number", "null"]},
        "unit": text_of("Unit of value, exact and shown; empty or 1 for a pure number"),
        "exact": {
            "description": "The same as a decimal or a fraction without any rounding, null where it is irrational",
            "type": ["string", "null"],
            "pattern": "^-?[0-9]",
        },
        "shown": text_of("As the terminal shows it"),
    }


def _place() -> Schema:
    return {
        "file": text_of("Relative to the root of the design's files"),
        "line": {"type": "integer", "minimum": 1},
        "column": {"type": "integer", "minimum": 1},
    }


def _ruleset() -> Schema:
    return {
        "name": text_of(),
        "edition": text_of(),
        "file": text_of(),
        "withdrawn": list_of(text_of(), "Rules that it withdraws, with the reason"),
        "note": text_of("Such as that it is not in force on the evaluation date"),
        "extends": list_of(
            {"type": "object", "properties": {"name": text_of(), "edition": text_of(), "file": text_of()}},
            "Rule books that it adds to",
        ),
    }


def _judged() -> Schema:
    """What rules and their parts have in common."""
    return {
        "verdict": verdict_of("The verdict"),
        "reason": text_of("What is missing, why it is not applicable, or what permits it"),
        "margin": or_null_of(
            {"$ref": "#/$defs/margin"}, "Room to the limit, negative in breach; null without a number"
        ),
        "relative_margin": {
            "description": "Margin over the limit's magnitude or the rule's scale, as a share",
            "type": ["number", "null"],
        },
        "value": or_null_of({"$ref": "#/$defs/amount"}),
        "limit": or_null_of({"$ref": "#/$defs/amount"}),
        "sense": text_of("How value and limit are held against each other"),
        "ruled": or_null_of(
            object_of(_ruled()), "What the rule book's tolerance and rounding did; null where nothing was done"
        ),
    }


def _ruled() -> Schema:
    return {
        "tolerance": text_of("The tolerance on the limit as the rule book writes it, empty without one"),
        "rounding": text_of("How the value was rounded, empty where it was not"),
        "margin": or_null_of({"$ref": "#/$defs/amount"}, "The margin without either"),
        "value": or_null_of({"$ref": "#/$defs/amount"}, "The rounded value"),
    }


def _rule() -> Schema:
    places = {
        "rule": {"$ref": "#/$defs/place"},
        "value": or_null_of({"$ref": "#/$defs/place"}),
    }
    return {
        "name": text_of(),
        "clause": text_of(),
        "title": text_of(),
        "standing": {"enum": ["shall", "should", "may", "note"]},
        "ruleset": text_of("File of the rule book"),
        "ruleset_name": text_of(),
        **_judged(),
        "counted": {"description": "Value and margin count whole things", "type": "boolean"},
        "binding": or_null_of({"$ref": "#/$defs/binding"}, "What decides the rule"),
        "parts": list_of({"$ref": "#/$defs/part"}, "Every condition, for every element, in every case"),
        "places": object_of(places),
        "dispensation": text_of("Reference and last day of the permission, empty without one"),
        "estimates": list_of(text_of(), "Paths of the estimated values that it rests on"),
        "outside_validity": list_of(text_of(), "Figures that are used outside their range of validity"),
        "notes": list_of(text_of(), "Such as a condition that is close to its own threshold"),
        "history": list_of(text_of(), "What the rule replaces"),
        "consequence": text_of("What the rule book says follows a breach; it is no part of the verdict"),
        "spread": or_null_of(spread_of(), "What the spread of its inputs does to it; null where none has one"),
        "envelope": or_null_of(
            object_of(_envelope()), "The ranges throughout which it must hold; null where it has none"
        ),
    }


def _envelope() -> Schema:
    ranges = {
        "figure": text_of("Path of the input"),
        "from": {"$ref": "#/$defs/amount"},
        "to": {"$ref": "#/$defs/amount"},
    }
    return {
        "ranges": list_of(object_of(ranges), "Each input with its ends"),
        "least_margin": or_null_of(
            {"$ref": "#/$defs/amount"}, "What the margin is certainly not below; null where that is not certain"
        ),
        "undecided": list_of(
            object_of(ranges), "The part of the ranges on which nothing was proved; empty where all is"
        ),
    }


def _part() -> Schema:
    return {
        "text": text_of("The condition as the rule book writes it"),
        "kind": text_of(),
        **_judged(),
        "element": text_of(),
        "branch": text_of(),
        "case": {"$ref": "#/$defs/case"},
        "place": or_null_of({"$ref": "#/$defs/place"}),
    }


def _working() -> Schema:
    return {
        "name": text_of("Name of the rule or figure"),
        "title": text_of(),
        "clause": text_of(),
        "verdict": {"description": "Empty for a figure", "enum": [*VERDICTS, ""]},
        "margin": text_of("With its unit, empty where there is none"),
        "caution": text_of(),
        "binding": or_null_of({"$ref": "#/$defs/binding"}, "What decides a rule; null for a figure"),
        "conditions": list_of({"$ref": "#/$defs/part"}, "The conditions of a rule"),
        "steps": list_of(object_of(_step()), "What comes first stands first"),
        "closed_form": or_null_of(object_of(_closed_form()), "Where it was asked for"),
    }


def _step() -> Schema:
    return {
        "name": text_of(),
        "meaning": text_of(),
        "formula": text_of("Empty for an input"),
        "numbers": text_of("The formula with its numbers put in"),
        "result": text_of("With its unit"),
        "exact": text_of("The result without any rounding, empty where it is irrational"),
        "source": text_of(),
        "place": or_null_of({"$ref": "#/$defs/place"}),
        "outside_validity": {"type": "boolean"},
        "replaced": text_of("By which file it stands in the place of another figure, and why"),
        "depth": {"description": "How far below what was asked for", "type": "integer", "minimum": 0},
    }


def _closed_form() -> Schema:
    return {
        "formula": text_of("The margin in SI units"),
        "derivatives": {"type": "object", "additionalProperties": {"type": "string"}},
        "solved": {"type": "object", "additionalProperties": list_of(text_of(), "Solutions on the limit")},
        "conditions": list_of(text_of(), "Where it holds"),
    }
