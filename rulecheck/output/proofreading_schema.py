"""JSON Schema of what `proofread` prints."""

from __future__ import annotations

from rulecheck.model.clauses import CLAUSE_KINDS
from rulecheck.outcome.proofreading import COVERS, WEIGHTS
from rulecheck.output.schema_parts import DRAFT, Schema, list_of, object_of, or_null_of, text_of


def proofreading_schema() -> Schema:
    """The schema of what `proofread --form json` prints."""
    book = object_of(
        {
            "name": text_of("Name of the rule book"),
            "edition": text_of(),
            "file": text_of(),
            "window": text_of("First and last day in force, as text"),
            "layers": list_of(text_of(), "The files that it is made of, the most general first"),
            "findings": list_of(_finding(), "The heaviest first, then by place"),
            "coverage": object_of(
                {
                    "totals": object_of({cover: _count("Clauses covered so") for cover in COVERS}),
                    "clauses": list_of(_clause(), "In the order of the register"),
                }
            ),
            "rules": list_of(_rule(), "The effective rule book, then what is withdrawn; empty without --listing"),
        }
    )
    properties: Schema = {
        "form": {"const": "proofreading"},
        "version": text_of("Version of rulecheck"),
        "date": text_of("Evaluation date"),
        "counts": object_of({weight: _count("Findings of this weight") for weight in WEIGHTS}),
        "rulesets": list_of(book, "In the order in which they were given"),
        "cautions": list_of(text_of(), "What the answer cannot decide"),
        "files": {"description": "SHA-256 of every file read", "type": "object", "additionalProperties": text_of()},
    }
    return {"$schema": DRAFT, "title": "Proofreading", **object_of(properties), "$defs": {"place": _place()}}


def _count(description: str) -> Schema:
    return {"description": description, "type": "integer", "minimum": 0}


def _place() -> Schema:
    line: Schema = {"type": "integer", "minimum": 1}
    return object_of({"file": text_of(), "line": line, "column": line})


_PLACE: Schema = {"$ref": "#/$defs/place"}


def _finding() -> Schema:
    other = object_of({"message": text_of(), "place": or_null_of(_PLACE)})
    return object_of(
        {
            "code": text_of("What kind of finding it is"),
            "weight": {"description": "How much it weighs", "enum": list(WEIGHTS)},
            "subject": text_of("The rule, table or name that it is about; empty where there is none"),
            "clause": text_of(),
            "message": text_of("What is wrong or doubtful"),
            "advice": text_of("What to do"),
            "place": or_null_of(_PLACE),
            "related": list_of(other, "Other places that it speaks of"),
        }
    )


def _clause() -> Schema:
    return object_of(
        {
            "number": text_of(),
            "title": text_of(),
            "kind": {"description": "What the register says it is", "enum": list(CLAUSE_KINDS)},
            "covered_by": {"type": "array", "items": {"enum": list(COVERS)}, "minItems": 1},
            "rules": list_of(text_of(), "The rules that stand for it"),
            "place": _PLACE,
        }
    )


def _rule() -> Schema:
    answer = object_of({"reference": text_of(), "date": text_of(), "text": text_of()})
    return object_of(
        {
            "name": text_of(),
            "clause": text_of(),
            "title": text_of(),
            "standing": {"enum": ["shall", "should", "may", "note"]},
            "asks": list_of(text_of(), "What it asks for, as the file writes it"),
            "applies": list_of(text_of(), "When and for what it asks"),
            "place": _PLACE,
            "replaced": list_of(text_of(), "The files whose rule of this name it took the place of, oldest first"),
            "withdrawn": text_of("Why it no longer holds; empty where it does"),
            "in_force": {"description": "In force on the evaluation date", "type": "boolean"},
            "window": text_of("First and last day of this rule, as text"),
            "answers": list_of(answer, "What officials answered about it"),
        }
    )
