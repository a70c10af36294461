"""`workings --vary` as JSON, and its schema."""

from __future__ import annotations

from rulecheck.outcome.varied import Axis, Varied, VariedFigure, VariedPoint
from rulecheck.output.json_report import Json, amount_json, heading, json_text
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


def varied_json(varied: Varied) -> str:
    """The whole JSON form of `workings --vary`."""
    return json_text(
        {
            **heading("varied", varied),
            "changes": list(varied.changes),
            "along": _axis(varied.along),
            "curves": _axis(varied.curves) if varied.curves else None,
            "figures": [_figure(figure) for figure in varied.figures],
            "cautions": list(varied.cautions),
        }
    )


def _axis(axis: Axis) -> Json:
    return {"path": axis.path, "step": axis.step, "values": [amount_json(value) for value in axis.values]}


def _figure(figure: VariedFigure) -> Json:
    return {
        "name": figure.name,
        "clause": figure.clause,
        "title": figure.title,
        "unit": figure.unit,
        "margin": figure.is_rule,
        "curves": [[_point(point) for point in curve] for curve in figure.curves],
    }


def _point(point: VariedPoint) -> Json:
    return {
        "amount": amount_json(point.amount),
        "verdict": point.verdict,
        "reason": point.reason,
        "binding": point.binding,
        "outside_validity": point.outside,
    }


def varied_schema() -> Schema:
    """The schema of what `workings --vary … --form json` prints."""
    amount: Schema = {"$ref": "#/$defs/amount"}
    axis = object_of(
        {
            "path": text_of("The input that runs through the values"),
            "step": text_of("Step of a range with its unit, empty for a list"),
            "values": list_of(amount, "The values in order"),
        }
    )
    point = object_of(
        {
            "amount": or_null_of(amount, "The margin or the figure; null where there is no number or word"),
            "verdict": or_null_of(verdict_of("The verdict of a rule"), "Null for figures"),
            "reason": text_of("Why there is no number, what is missing"),
            "binding": text_of("The part that decides a rule"),
            "outside_validity": {"description": "Outside a range of validity", "type": "boolean"},
        }
    )
    figure = object_of(
        {
            "name": text_of("Name of the rule or figure"),
            "clause": text_of(),
            "title": text_of(),
            "unit": text_of("Unit of its numbers, empty where it has none"),
            "margin": {"description": "A rule with its margin, and no figure", "type": "boolean"},
            "curves": list_of(list_of(point, "A point for each value"), "One, or one for each value of `curves`"),
        }
    )
    properties: Schema = {
        **heading_of("varied"),
        "changes": list_of(text_of(), "What was laid over the design, in order"),
        "along": axis,
        "curves": or_null_of(axis, "A second input, with a curve for each value"),
        "figures": list_of(figure, "In the order in which they were asked for"),
        "cautions": list_of(text_of(), "What the answer cannot decide"),
    }
    return {"$schema": DRAFT, "title": "Varied", **object_of(properties), "$defs": shared_of()}
