"""What the parser's complaints become: the kind of mistake, its place, and words that say what to do."""

from __future__ import annotations

import pytest
import yaml

from rulecheck.diagnostics import Diagnostic, Refused
from rulecheck.reading import yaml_builder
from rulecheck.reading.yaml_reader import parse_yaml

WRONG = [
    ("a:\n\tb: 1\n", "2:1", "a tab stands where blanks indent a line"),
    ('a: "x\nb: 1\n', "1:4", "the quote that opens here is never closed"),
    ("a: 'it's'\nb: 1'\n", "1:4", "YAML ends the value before `s`"),
    ('a: "x\n---\ny"\n', "1:4", "the quote that opens here is never closed"),
    ('a: "\\q"\n', "1:5", "a backslash between double quotes begins an escape that YAML does not know"),
    ("a: |x\n", "1:5", "behind `|` the text begins on the next line"),
    ("a: !<x 1\n", "1:4", "tags are refused"),
    ("a: !x!y 1\n", "1:4", "tags are refused"),
]


def refused(text: str) -> Diagnostic:
    with pytest.raises(Refused) as caught:
        parse_yaml(text, "a.yaml")
    (item,) = caught.value.diagnostics
    return item


@pytest.mark.parametrize(("text", "place", "message"), WRONG)
def test_signs(text: str, place: str, message: str) -> None:
    item = refused(text)
    assert (str(item.span), item.message) == (f"a.yaml:{place}", message)
    assert item.advice


@pytest.mark.parametrize("text", ["%YAML 1.9\n---\na: 1\n", "%OTHER\n---\na: 1\n"])
def test_directives_are_refused(text: str) -> None:
    assert refused(text).code == "yaml-refused"


@pytest.mark.parametrize("text", [text for text, _, _ in WRONG if "\\q" not in text])
def test_the_other_parser_of_the_library_is_understood_too(text: str, monkeypatch: pytest.MonkeyPatch) -> None:
    fast = refused(text)
    monkeypatch.setattr(yaml_builder, "_LOADER", yaml.SafeLoader)
    slow = refused(text)
    assert (slow.code, slow.message, slow.span and slow.span.line) == (
        fast.code,
        fast.message,
        fast.span and fast.span.line,
    )
