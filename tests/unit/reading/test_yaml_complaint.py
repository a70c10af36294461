from __future__ import annotations

import pytest
import yaml

from rulecheck.diagnostics import Faults
from rulecheck.reading.yaml_complaint import Complaint, complaint_of, note_quote
from rulecheck.reading.yaml_syntax import explain


@pytest.mark.parametrize(
    ("line", "value"),
    [("a: b c", "b c"), ("  a: b c", "b c"), ("- b c", "b c"), ("- - b c", "b c"), ("- a: b c", "b c"), ("b c", "b c")],
)
def test_where_the_value_of_a_line_begins(line: str, value: str) -> None:
    text = f"x: 1\n{line}\n"
    complaint = Complaint("a.yaml", text, "", "", text.index(" c") + 1, 0, False)
    assert text[complaint.value_start() :].strip() == value


def test_a_complaint_without_a_place_stands_at_the_beginning() -> None:
    complaint = complaint_of(yaml.YAMLError("amiss"), "a.yaml", "text", False)
    assert (complaint.index, complaint.begin, complaint.wording) == (0, 0, "amiss")


def test_a_complaint_that_nobody_knows_is_still_a_diagnostic() -> None:
    faults = Faults()
    explain(yaml.YAMLError("amiss"), "a.yaml", "text", False, faults)
    assert [(item.code, str(item.span)) for item in faults.found] == [("yaml-syntax", "a.yaml:1:1")]
    assert faults.found[0].advice


def test_what_has_to_be_quoted_is_the_value_up_to_its_end() -> None:
    text = "a: {b: *x + 1, c: 2}"
    faults = Faults()
    assert note_quote(Complaint("a.yaml", text, "", "", 8, 7, True), faults, 7, "why")
    (item,) = faults.found
    assert item.span is not None
    assert text[item.span.start : item.span.end] == "*x + 1"
