"""Mistakes of layout: colons, brackets, indentation."""

from __future__ import annotations

import pytest
import yaml

from rulecheck.diagnostics import Diagnostic, Refused
from rulecheck.reading import yaml_builder
from rulecheck.reading.yaml_reader import parse_yaml

CLOSED_UP = "the blank behind the colon is missing"
SECOND = "a second `: ` stands on this line, so YAML cannot tell key from value"
NEITHER = "this line is neither a key with its value nor an item of a list"
DEEPER = "this key is indented deeper than the keys that it follows"
OTHERWISE = "this line is indented otherwise than the keys before it"
COMMA = "a comma stands where a value is due"

WRONG = [
    ("a:1\nb: 2\n", "1:2", CLOSED_UP),
    ("a: 1\nb:2\nc: 3\n", "2:2", CLOSED_UP),
    ("a:\n  - b:2\n    c: 3\n", "2:6", CLOSED_UP),
    ("title: Part 3: wheels\n", "1:14", SECOND),
    ("a: b: c\n", "1:5", SECOND),
    ("a\nb: c\n", "1:1", NEITHER),
    ("a: 1\nword\nc: 3\n", "2:1", NEITHER),
    ("a: 1\n b: 2\n", "2:2", DEEPER),
    ("a:\n  b: 1\n c: 2\n", "3:2", OTHERWISE),
    ("a: 1\n- b\n", "2:1", "an item of a list stands among the keys of a mapping"),
    ("- a\nb: 1\n", "2:1", "a line among the items of a list is no item"),
    ("a: [1, 2\nb: 3\n", "1:4", "the bracket `[` that opens here is never closed"),
    ("a: {b: 1\nc: 2\n", "1:4", "the bracket `{` that opens here is never closed"),
    ("a: [1, 2", "1:4", "the bracket `[` that opens here is never closed"),
    ("a: 1\n}\n", "2:1", "the bracket `}` closes nothing"),
    ("a: {b: 1}}\n", "1:10", "the bracket `}` closes nothing"),
    ("a: ]\n", "1:4", "the bracket `]` closes nothing"),
    ("a: , b\n", "1:4", COMMA),
    ("a: [1, , 2]\n", "1:8", COMMA),
    ("{a: 1, : 2}", "1:8", "`:` stands where a value is due"),
    ("a: 1\n...\nb: 2\n", "3:1", "a second document begins here"),
    ("x" * 1100 + ": 1\n", "1:1", "a key is longer than 1024 characters"),
]


def refused(text: str) -> Diagnostic:
    with pytest.raises(Refused) as caught:
        parse_yaml(text, "a.yaml")
    (item,) = caught.value.diagnostics
    return item


@pytest.mark.parametrize(("text", "place", "message"), WRONG)
def test_layout(text: str, place: str, message: str) -> None:
    item = refused(text)
    assert (str(item.span), item.message) == (f"a.yaml:{place}", message)
    assert item.advice


@pytest.mark.parametrize("text", [text for text, _, _ in WRONG])
def test_the_other_parser_of_the_library_is_understood_too(text: str, monkeypatch: pytest.MonkeyPatch) -> None:
    fast = refused(text)
    monkeypatch.setattr(yaml_builder, "_LOADER", yaml.SafeLoader)
    slow = refused(text)
    assert (slow.code, slow.message, slow.span) == (fast.code, fast.message, fast.span)
