"""What JSON Schemas (draft 2020-12) of answers are made of."""

from __future__ import annotations

from rulecheck.outcome.results import VERDICTS

Schema = dict[str, object]

DRAFT = "https://json-schema.org/draft/2020-12/schema"


def text_of(description: str = "") -> Schema:
    """A text."""
    return {"description": description, "type": "string"} if description else {"type": "string"}


def verdict_of(description: str) -> Schema:
    """One of the verdicts."""
    return {"description": description, "enum": list(VERDICTS)}


def list_of(items: Schema, description: str) -> Schema:
    """A list of items of one kind."""
    return {"description": description, "type": "array", "items": items}


def object_of(properties: Schema) -> Schema:
    """An object that has just these keys, all of them."""
    return {
        "type": "object",
        "properties": properties,
        "required": list(properties),
        "additionalProperties": False,
    }


def or_null_of(schema: Schema, description: str = "") -> Schema:
    """A value, or null where there is none."""
    told: Schema = {"description": description} if description else {}
    return {**told, "oneOf": [schema, {"type": "null"}]}
