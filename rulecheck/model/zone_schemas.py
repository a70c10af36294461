"""JSON Schemas of zones, templates and what rules hold against them."""

from __future__ import annotations

from typing import Any

from rulecheck.model.zone_reader import MOST_CORNERS, MOST_PARTS
from rulecheck.model.zones import RANGES, SIDES, VIEW_NAMES

Schema = dict[str, Any]
_TEXT: Schema = {"type": ["string", "number", "boolean"]}
_PAIR: Schema = {"type": "array", "items": _TEXT, "minItems": 2, "maxItems": 2}
_ENDS: Schema = {
    "type": "object", "properties": {"from": _TEXT, "to": _TEXT}, "minProperties": 1, "additionalProperties": False,
}  # fmt: skip
_RANGE: Schema = {"anyOf": [_PAIR, _ENDS]}
_VIEW: Schema = {"enum": list(VIEW_NAMES), "description": "View in which a line, or the corners, are given"}
_SEVERAL: Schema = {"anyOf": [_TEXT, {"type": "array", "items": _TEXT, "minItems": 1}]}
_PART: Schema = {"anyOf": [{"type": "string"}, {"$ref": "#/$defs/zone"}]}
_PARTS: Schema = {"type": "array", "items": _PART, "minItems": 1, "maxItems": MOST_PARTS}

ZONE: Schema = {
    "type": "object",
    "minProperties": 1,
    "properties": {
        "meaning": {"type": "string", "description": "One line on what it is"},
        "for": {"type": "string", "description": "t in tyres: the zone names t, the element of the rule that uses it"},
        **{axis: {**_RANGE, "description": f"Range of {axis}: [a, b], {{from: a}} or {{to: b}}"} for axis in RANGES},
        **{side: {"type": "string", "description": "plane(a, b, c), or line(a, b) in a view"} for side in SIDES},
        "view": _VIEW,
        "points": {
            "type": "array", "items": {"anyOf": [{"type": "string"}, _PAIR]}, "minItems": 3, "maxItems": MOST_CORNERS,
            "description": "Corners of a polygon in the view, in order around it",
        },
        "all": {**_PARTS, "description": "Common part of these"},
        "any": {**_PARTS, "description": "These together"},
    },
    "dependentRequired": {"points": ["view"]},
    "additionalProperties": False,
}  # fmt: skip
ZONES: Schema = {"type": "object", "additionalProperties": _PART}
TEMPLATES: Schema = {
    "type": "object",
    "additionalProperties": {
        "type": "object",
        "properties": {
            "meaning": {"type": "string", "description": "One line on what it is"},
            "view": _VIEW,
            "points": {"type": "array", "items": _PAIR, "minItems": 3, "maxItems": MOST_CORNERS},
        },
        "required": ["view", "points"],
        "additionalProperties": False,
    },
}
HELD: Schema = {
    "anyOf": [
        {"type": "string"},
        {
            "type": "object", "properties": {"zone": {"type": "string"}, "what": _SEVERAL}, "required": ["zone"],
            "additionalProperties": False,
        },
    ],
}  # fmt: skip
FITTING: Schema = {
    "type": "object",
    "properties": {name: {"type": "string"} for name in ("template", "through", "at")},
    "required": ["template", "through", "at"],
    "additionalProperties": False,
}
SIGHT: Schema = {
    "type": "object",
    "properties": {"from": _SEVERAL, "to": _SEVERAL, "past": _SEVERAL, "view": _VIEW},
    "required": ["from", "to", "past"],
    "additionalProperties": False,
}
PLACES: dict[str, Schema] = {
    "inside": HELD, "outside": HELD, "passes": FITTING, "stops": FITTING, "sight": SIGHT, "cover": SIGHT,
}  # fmt: skip
