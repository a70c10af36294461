"""JSON Schema (draft 2020-12) of the spread of a rule."""

from __future__ import annotations

from rulecheck.output.schema_parts import Schema, list_of, object_of, or_null_of, text_of

_AMOUNT: Schema = {"$ref": "#/$defs/amount"}
_SHARE: Schema = {"type": ["number", "null"], "minimum": 0, "maximum": 1}


def spread_of() -> Schema:
    """The spread of what decides a rule."""
    return object_of(
        {
            "decision": {"description": "The decision rule in force", "enum": ["simple", "guarded", "worst case"]},
            "measured": or_null_of(object_of(_measured()), "Measurement uncertainty of the margin, to first order"),
            "guard": or_null_of(_AMOUNT, "Guard band on both sides of the limit, null where the rule is not guarded"),
            "probability": or_null_of(object_of(_probability())),
            "stack": or_null_of(object_of(_stack()), "Drawing tolerances alone, to first order"),
            "worst_case": or_null_of(object_of(_worst_case()), "Over the box of everything that is stated, certified"),
            "contributors": list_of(object_of(_contributor()), "The inputs that have a spread, largest share first"),
            "trials": or_null_of(object_of(_trials()), "Monte Carlo trials, where they were asked for"),
            "notes": list_of(text_of(), "What these figures leave out"),
        }
    )


def _measured() -> Schema:
    return {
        "standard": _AMOUNT,
        "expanded": _AMOUNT,
        "coverage": text_of("Coverage factor k: expanded over standard uncertainty"),
        "bound": {"description": "The margin has a kink here, and these are upper bounds", "type": "boolean"},
    }


def _probability() -> Schema:
    return {
        "conforms": {"description": "That the car conforms", **_SHARE},
        "fails": {"description": "That it does not", **_SHARE},
        "found_conforming": {"description": "That the scrutineer's reading conforms, with his leniency", **_SHARE},
        "scrutineer": text_of("What he measures with, empty where the rule does not say"),
    }


def _stack() -> Schema:
    return {
        "at_worst": {"description": "Margin with every tolerance at its worse end", **_AMOUNT},
        "low": {"description": "Lower end of the root-sum-square stack", **_AMOUNT},
        "high": {"description": "Upper end of the root-sum-square stack", **_AMOUNT},
    }


def _worst_case() -> Schema:
    return {
        "margin": or_null_of(_AMOUNT, "The margin is certainly nowhere below this; null where nothing is certain"),
        "proved": {"description": "It is just this at some point", "type": "boolean"},
        "found": or_null_of(_AMOUNT, "Where it is not proved: the least margin that was met"),
        "of": text_of("What the box is made of"),
    }


def _contributor() -> Schema:
    return {
        "path": text_of("Path of the input, with the state that sets it"),
        "kind": {"enum": ["uncertainty", "tolerance"]},
        "stated": text_of("The spread as it is stated"),
        "slope": text_of("How far the margin moves for one unit of the input"),
        "contribution": {"description": "Slope times standard uncertainty, or half the tolerance", **_AMOUNT},
        "share": {"description": "Of the variance, or of the worst-case stack", "type": ["number", "null"]},
        "share_of_squares": {"description": "Of the root-sum-square stack", "type": ["number", "null"]},
    }


def _trials() -> Schema:
    return {
        "trials": {"type": "integer", "minimum": 1},
        "seed": {"description": "Of the generator of random numbers", "type": "integer"},
        "mean": _AMOUNT,
        "standard": _AMOUNT,
        "low": {"description": "Lower end of the 95 % interval", **_AMOUNT},
        "high": {"description": "Upper end of the 95 % interval", **_AMOUNT},
        "conforms": {"description": "Share of trials that conform", **_SHARE},
        "agrees": {
            "description": "The first order agrees to two figures of the standard uncertainty; null: too few trials",
            "type": ["boolean", "null"],
        },
        "note": text_of(),
    }
