"""The schema of a signal as a design states it."""

from __future__ import annotations

from rulecheck.model.shape_schemas import TEXT, Schema
from rulecheck.quantity.reading_records import BASES

SIGNAL: Schema = {
    "type": "object",
    "properties": {
        "file": {"type": "string", "description": "A CSV log, beside this file; read when a rule asks for it"},
        "time": {"type": "string", "description": "Column of the times; time where not stated"},
        "column": {"type": "string", "description": "Column of the samples; the signal's own name where not stated"},
        "time_unit": {**TEXT, "description": "Unit of the times, where the heading has none"},
        "unit": {**TEXT, "description": "Unit of the samples, where the heading has none"},
        "delimiter": {"description": "What parts cells", "enum": ["comma", "semicolon", "tab", ",", ";", "|"]},
        "decimal": {"description": "What parts decimals", "enum": ["comma", ".", ","]},
        "rows": {
            "type": "array",
            "items": {"type": "array", "items": TEXT, "minItems": 2, "maxItems": 2},
            "description": "Time and value, in place of a file",
        },
        "basis": {"enum": list(BASES), "description": "Where the samples come from"},
        "reference": {**TEXT, "description": "Sheet or document that they stand on"},
        "note": {**TEXT, "description": "A remark"},
    },
    "oneOf": [{"required": ["rows"]}, {"required": ["file"]}],
    "additionalProperties": False,
}
"""A log with its columns, or a few rows."""
