from __future__ import annotations

import pytest

from rulecheck.diagnostics import Diagnostic, Refused
from rulecheck.reading.bounds import MAXIMUM_FAULTS
from rulecheck.reading.yaml_reader import parse_yaml


def refused(text: str) -> tuple[Diagnostic, ...]:
    with pytest.raises(Refused) as caught:
        parse_yaml(text, "a.yaml")
    return caught.value.diagnostics


def test_a_key_that_stands_twice_is_refused_with_both_lines() -> None:
    (item,) = refused('width: 1\nmass: 2\n"width": 3\n')
    assert item.code == "duplicate-key"
    assert item.message == "the key 'width' stands on line 1 and again on line 3"
    assert str(item.span) == "a.yaml:3:1"
    assert [str(related.span) for related in item.related] == ["a.yaml:1:1"]


def test_every_repetition_is_reported() -> None:
    assert [item.code for item in refused("a: {b: 1, b: 2}\nc: 1\nc: 2\nc: 3\n")] == ["duplicate-key"] * 3


def test_the_same_key_in_two_mappings_is_no_repetition() -> None:
    parse_yaml("a: {x: 1}\nb: {x: 1}\n", "a.yaml")


@pytest.mark.parametrize(
    ("text", "code", "column"),
    [
        ("<<: 1", "yaml-refused", 1),
        ("[a]: 1", "yaml-refused", 1),
        ("{a: 1}: 1", "yaml-refused", 1),
        ("? [a]\n: 1", "yaml-refused", 3),
        (": 1", "yaml-syntax", 1),
        ("{width:12 mm}", "yaml-syntax", 2),
        ("{a: 1, width:12 mm, b: 2}", "yaml-syntax", 8),
    ],
)
def test_keys_that_are_refused(text: str, code: str, column: int) -> None:
    (item,) = refused(text)
    assert (item.code, item.span.column if item.span else 0) == (code, column)


@pytest.mark.parametrize(
    "text", ['"<<": 1', '"": 1', "? a\n: 1", "12:30: 1", '{"x:y": 1}', "{a, b}", "{12:30}", "a : 1"]
)
def test_keys_that_are_allowed(text: str) -> None:
    parse_yaml(text, "a.yaml")


def test_so_many_repetitions_end_at_the_bound() -> None:
    assert len(refused("a: 1\n" * 9_000)) == MAXIMUM_FAULTS
