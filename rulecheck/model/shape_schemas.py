"""JSON Schemas (2020-12) of rulesets and house files, from the shapes at the edge."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from rulecheck.model.clauses import CLAUSE_KINDS
from rulecheck.model.decisions import DECISIONS
from rulecheck.model.declarations import KINDS
from rulecheck.model.edge import HouseShape, PhysicsShape, RulesetShape, Shape
from rulecheck.model.examples import EXPECTED
from rulecheck.model.ruleset_reader import EMPTY, STANDINGS, VALIDITIES
from rulecheck.model.rulings import HOW
from rulecheck.model.track_reader import DIRECTIONS, SegmentShape, TrackShape
from rulecheck.model.track_reader import KINDS as TRACK_KINDS
from rulecheck.model.zone_schemas import PLACES, TEMPLATES, ZONE, ZONES
from rulecheck.quantity.quantity import SHAPES

Schema = dict[str, Any]

DIALECT = "https://json-schema.org/draft/2020-12/schema"
DAY: Schema = {"type": "string", "pattern": r"^[0-9]{4}-[0-9]{2}-[0-9]{2}$"}
TEXT: Schema = {"type": ["string", "number", "boolean"]}

_WINDOW: Schema = {
    "type": "object",
    "properties": {
        "from": {**DAY, "description": "First day, included"},
        "until": {**DAY, "description": "Last day, included"},
    },
    "additionalProperties": False,
}
_UNLESS: Schema = {
    "type": "object",
    "properties": {
        "when": {**TEXT, "description": "Condition"},
        "because": {**TEXT, "description": "Reason, for the report"},
    },
    "required": ["when"],
    "additionalProperties": False,
}
_STEPS: Schema = {
    "type": "array",
    "items": {
        "type": "object",
        "properties": {test: TEXT for test in ("up_to", "below", "is", "when", "otherwise", "value")},
        "additionalProperties": False,
        "oneOf": [{"required": [test, "value"]} for test in ("up_to", "below", "is", "when")]
        + [{"required": ["otherwise"], "maxProperties": 1}],
    },
}
_ROWS: Schema = {"type": "array", "items": {"type": "array", "items": TEXT, "minItems": 2}}
_GROUPS: Schema = {
    "type": "object",
    "additionalProperties": {
        "type": "object",
        "properties": {"when": TEXT, "rules": {"anyOf": [TEXT, {"type": "array", "items": TEXT}]}},
        "required": ["when", "rules"],
        "additionalProperties": False,
    },
}
_DECISION: Schema = {
    "anyOf": [
        {"enum": list(DECISIONS)},
        {
            "type": "object",
            "properties": {
                "rule": {"enum": list(DECISIONS)},
                "coverage": {**TEXT, "description": "Factor k of the guard band k times u; 2 where nothing is said"},
            },
            "required": ["rule"],
            "additionalProperties": False,
        },
    ]
}
_SCRUTINEER: Schema = {
    "type": "object",
    "properties": {
        "uncertainty": {**TEXT, "description": "Half width of what the instrument may be off by"},
        "coverage": {**TEXT, "description": "Coverage factor k of the uncertainty"},
        "shape": {"enum": list(SHAPES), "description": "Shape of its distribution"},
        "tolerance": {**TEXT, "description": "Leniency that is given beyond the limit"},
    },
    "additionalProperties": False,
}
_CLAUSES: Schema = {
    "type": "object",
    "additionalProperties": {
        "anyOf": [
            TEXT,
            {
                "type": "object",
                "properties": {
                    "title": {**TEXT, "description": "A few words on what it says"},
                    "kind": {"enum": list(CLAUSE_KINDS), "description": "What it is; rule where left out"},
                    "note": {**TEXT, "description": "A remark"},
                },
                "additionalProperties": False,
            },
        ]
    },
}
_ANSWERS: Schema = {
    "type": "array",
    "items": {
        "type": "object",
        "properties": {
            "reference": {**TEXT, "description": "Number of the answer"},
            "date": {**DAY, "description": "Day of the answer"},
            "text": {**TEXT, "description": "What it says"},
        },
        "required": ["reference", "text"],
        "additionalProperties": False,
    },
}
_ROUNDING: Schema = {
    "type": "object",
    "properties": {
        "to": {**TEXT, "description": "Step, such as 1 kg"},
        "how": {
            "enum": list(HOW),
            "description": "up, down, to the nearest (ties away from zero), ties to the even one",
        },
    },
    "required": ["to", "how"],
    "additionalProperties": False,
}
_RECORD: Schema = {
    "type": "object",
    "properties": {
        "name": {**TEXT, "description": "Name under records: in the design; under each, a field such as o.proof"},
        "of": {**TEXT, "description": "In the place of a name: variable of each whose own records are meant"},
        "setup": {**TEXT, "description": "Condition on the set-up; a run that does not meet it is void"},
        "require": {**TEXT, "description": "Condition on the result"},
        "runs": {"type": ["integer", "string"], "description": "How many valid runs there must be; 1 where left out"},
        "tolerance": {**TEXT, "description": "The rule book's tolerance on the limit of the result"},
        "rounding": {**_ROUNDING, "description": "How the result is rounded before it is compared"},
    },
    "required": ["require"],
    "oneOf": [{"required": ["name"]}, {"required": ["of"]}],
    "additionalProperties": False,
}
_CONSEQUENCE: Schema = {
    "type": "object",
    "properties": {
        "kind": {**TEXT, "description": "Such as penalty or not admitted"},
        "points": {"type": ["number", "string"], "description": "How many points"},
        "amount": {**TEXT, "description": "A sum of money"},
        "time": {**TEXT, "description": "Time that is added"},
        "text": {**TEXT, "description": "In the words of the rule book"},
    },
    "required": ["kind"],
    "additionalProperties": False,
}
_EXAMPLES: Schema = {
    "type": "array",
    "items": {
        "type": "object",
        "properties": {
            "given": {"type": "object", "description": "Values by path: the whole design of the example"},
            "margin": {**TEXT, "description": "Margin that must come of them, with its unit"},
            "verdict": {"enum": list(EXPECTED), "description": "Verdict that must come of them"},
            "on": {**DAY, "description": "Evaluation date"},
        },
        "anyOf": [{"required": ["margin"]}, {"required": ["verdict"]}],
        "additionalProperties": False,
    },
}
_FROZEN: Schema = {
    "type": "object",
    "properties": {
        "baseline": {**TEXT, "description": "Name under baselines: in the design"},
        "since": {**DAY, "description": "Day from which on it is frozen"},
        "paths": {
            "anyOf": [TEXT, {"type": "array", "items": TEXT, "minItems": 1}],
            "description": "What is frozen; * for any name, ** for all below",
        },
        "tolerance": {**TEXT, "description": "By how much a number of its kind may change"},
        "changes_allowed": {"type": ["integer", "string"], "description": "How many values may change"},
    },
    "required": ["baseline", "paths"],
    "additionalProperties": False,
}
_ENVELOPE: Schema = {
    "type": "object",
    "minProperties": 1,
    "additionalProperties": {"type": "array", "items": TEXT, "minItems": 2, "maxItems": 2},
}
_NARROWER: Mapping[tuple[str, str], Schema] = {
    ("RuleShape", "standing"): {"enum": list(STANDINGS)},
    ("RuleShape", "empty"): {"enum": list(EMPTY)},
    ("RuleShape", "valid"): _WINDOW,
    ("RuleShape", "unless"): _UNLESS,
    ("RuleShape", "envelope"): _ENVELOPE,
    ("EvidenceShape", "expires"): {"enum": ["yes", "no", True, False]},
    ("TableShape", "steps"): _STEPS,
    ("TableShape", "linear"): _ROWS,
    ("InputShape", "kind"): {"enum": list(KINDS)},
    ("InputShape", "at_least"): {"type": ["integer", "string"]},
    ("RulesetShape", "validity"): {"enum": list(VALIDITIES)},
    ("HouseShape", "validity"): {"enum": list(VALIDITIES)},
    ("RulesetShape", "valid"): _WINDOW,
    ("RulesetShape", "groups"): _GROUPS,
    ("RulesetShape", "zones"): ZONES,
    ("RulesetShape", "templates"): TEMPLATES,
    **{(shape, word): schema for word, schema in PLACES.items() for shape in ("RuleShape", "BranchShape")},
    (TrackShape.__name__, "kind"): {"enum": list(TRACK_KINDS)},
    (SegmentShape.__name__, "direction"): {"enum": list(DIRECTIONS)},
    ("HouseShape", "decision"): _DECISION,
    ("RulesetShape", "decision"): _DECISION,
    ("RuleShape", "decision"): _DECISION,
    ("RuleShape", "answers"): _ANSWERS,
    ("RulesetShape", "clauses"): _CLAUSES,
    ("RuleShape", "scrutineer"): _SCRUTINEER,
    ("RuleShape", "consequence"): _CONSEQUENCE,
    ("RuleShape", "examples"): _EXAMPLES,
    **{
        (shape, word): schema
        for word, schema in (("record", _RECORD), ("rounding", _ROUNDING), ("frozen", _FROZEN))
        for shape in ("RuleShape", "BranchShape")
    },
}
"""What the readers hold beyond the shapes, by shape and key."""


def ruleset_schema() -> Schema:
    """The schema of a ruleset file."""
    made = _of(RulesetShape, "Ruleset")
    return {**made, "$defs": {**made["$defs"], "zone": ZONE}}


def track_schema() -> Schema:
    """The schema of a track file."""
    return _of(TrackShape, "Track")


def house_schema() -> Schema:
    """The schema of a house file, `rulecheck.yaml`."""
    return _of(HouseShape, "House file")


def physics_schema() -> Schema:
    """The schema of a physics module."""
    return _of(PhysicsShape, "Physics module")


def _of(shape: type[Shape], title: str) -> Schema:
    made = shape.model_json_schema()
    inner = {name: _tidy(name, part) for name, part in made.pop("$defs", {}).items()}
    return {"$schema": DIALECT, **_tidy(shape.__name__, made), "title": title, "$defs": inner}


def _tidy(name: str, made: Schema) -> Schema:
    """A shape without what only Python needs, narrowed to what its reader takes."""
    properties = {key: _property(name, key, part) for key, part in made.get("properties", {}).items()}
    kept = {key: part for key, part in made.items() if key != "title"}
    return {**kept, "properties": properties}


def _property(name: str, key: str, made: Schema) -> Schema:
    narrower = _NARROWER.get((name, key))
    forms = [form for form in made.get("anyOf", ()) if form != {"type": "null"}]
    if narrower is not None:
        form = narrower
    elif forms:
        form = forms[0] if len(forms) == 1 else {"anyOf": forms}
    else:
        form = {word: part for word, part in made.items() if word not in ("title", "default", "description")}
    said = made.get("description")
    return {**form, **({"description": said} if said else {})}
