import json
from dataclasses import fields

import pytest
from jsonschema import Draft202012Validator, ValidationError
from output_samples import finding, part, report

from rulecheck.diagnostics import Diagnostic, Related, Span
from rulecheck.outcome.results import (
    Amount,
    BindingPart,
    ClosedFormResult,
    Finding,
    PartResult,
    Place,
    Report,
    Step,
    Working,
    Workings,
)
from rulecheck.output.diagnostics_json import diagnostics_json
from rulecheck.output.json_report import report_json, workings_json
from rulecheck.output.report_schema import diagnostics_schema, report_schema, workings_schema

STEP = Step("a", "input", "", "", "3 mm", "3", "", Place("f", 1, 1))
BINDING = BindingPart("a <= b", "rear", {"fuel": "full"})
CLOSED = ClosedFormResult("a", {"a": "1"}, {"a": ("3",)}, ())
WORKING = Working("w", "W", "1", "breach", "-1 mm", BINDING, (part(),), (STEP,), CLOSED)


@pytest.mark.parametrize("schema", [report_schema(), workings_schema(), diagnostics_schema()])
def test_the_schemas_are_schemas(schema: dict[str, object]) -> None:
    Draft202012Validator.check_schema(schema)


def test_a_report_meets_its_schema() -> None:
    bare = finding("bare", margin=None, relative_margin=None, value=None, limit=None, binding=None, value_place=None)
    text = report_json(report(finding(), bare, finding(verdict="breach", strict=True)))
    Draft202012Validator(report_schema()).validate(json.loads(text))


def test_workings_meet_their_schema() -> None:
    text = workings_json(Workings("D", "f", "2027-03-01", (WORKING,), "0"))
    Draft202012Validator(workings_schema()).validate(json.loads(text))


def test_diagnostics_meet_their_schema() -> None:
    span = Span("f", 0, 1, 1, 1)
    text = diagnostics_json([Diagnostic("usage", "m"), Diagnostic("cycle", "m", span, related=(Related("r", span),))])
    Draft202012Validator(diagnostics_schema()).validate(json.loads(text))


def test_a_missing_key_and_a_strange_one_break_the_schema() -> None:
    validator = Draft202012Validator(report_schema())
    made = json.loads(report_json(report(finding())))
    with pytest.raises(ValidationError):
        validator.validate({key: value for key, value in made.items() if key != "verdict"})
    with pytest.raises(ValidationError):
        validator.validate({**made, "mood": "good"})


def test_every_field_of_an_outcome_is_in_the_json() -> None:
    made = json.loads(report_json(report(finding())))
    assert {field.name for field in fields(Report)} <= set(made)
    rule = made["rules"][0]
    # A margin carries whether it is strict; the two places stand together.
    assert {field.name for field in fields(Finding)} - {"strict", "rule_place", "value_place"} <= set(rule)
    # The states and the point of an envelope stand under the case.
    assert {field.name for field in fields(PartResult)} - {"strict", "state", "at"} <= set(rule["parts"][0])
    working = json.loads(workings_json(Workings("D", "f", "2027-03-01", (WORKING,), "0")))["items"][0]
    assert {field.name for field in fields(Working)} == set(working)
    assert {field.name for field in fields(Step)} == set(working["steps"][0])


def test_numbers() -> None:
    third = Amount("0.333333", "mm", 1 / 3, "1/3")
    ball = Amount("1 to 2", "mm", float("inf"))
    made = json.loads(report_json(report(finding(margin=third, value=ball))))["rules"][0]
    assert made["margin"] == {"value": 1 / 3, "unit": "mm", "exact": "1/3", "shown": "0.333333", "strict": False}
    assert made["value"] == {"value": None, "unit": "mm", "exact": None, "shown": "1 to 2"}


def test_the_same_outcome_gives_the_same_bytes() -> None:
    assert report_json(report(finding())) == report_json(report(finding()))
