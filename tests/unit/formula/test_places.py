from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rulecheck.diagnostics import Span
from rulecheck.formula.places import Places
from rulecheck.reading.nodes import Located

SPAN = Span("a.yaml", 40, 90, 3, 7)
TEXTS = st.text(alphabet='ab ("\n\\', max_size=12)


def test_plain_text_counts_from_the_span() -> None:
    assert Places(Located("a <= 5 mm", SPAN)).span(5, 9) == Span("a.yaml", 45, 49, 3, 12)


def test_quoted_text_begins_behind_its_quote() -> None:
    assert Places(Located("a <= 5 mm", SPAN, '"a <= 5 mm"', True)).span(5, 9) == Span("a.yaml", 46, 50, 3, 13)


def test_folded_text_counts_lines() -> None:
    where = Located("a <= b", SPAN, "a <=\n    b")
    assert Places(where).span(5, 6) == Span("a.yaml", 49, 50, 4, 5)


@given(TEXTS, st.none() | TEXTS, st.data())
def test_the_same_as_the_located_part(text: str, raw: str | None, data: st.DataObject) -> None:
    where = Located(text, SPAN, raw)
    start = data.draw(st.integers(0, len(text)))
    end = data.draw(st.integers(start, len(text)))
    assert Places(where).span(start, end) == where.part(start, end)


@pytest.mark.parametrize(
    ("text", "raw"),
    [
        ('"a" == b', "'\"a\" == b'"),
        ('"a" == b', '"\\"a\\" == b"'),
        ("a\nb", "|\n  a\n  b"),
        ("a b", ">\n  a\n  b"),
        ("", '""'),
    ],
)
def test_the_same_as_the_located_part_for_each_style(text: str, raw: str) -> None:
    where = Located(text, SPAN, raw, True)
    places = Places(where)
    for start in range(len(text) + 1):
        for end in range(start, len(text) + 1):
            assert places.span(start, end) == where.part(start, end)


def test_many_escapes_end_at_once() -> None:
    # Looking for each character to the end of the file's text, one by one, would take minutes.
    text = "\u00e9" * 10_000
    where = Located(text, SPAN, '"' + "\\u00e9" * 10_000 + '"')
    assert Places(where).span(0, 1) == where.part(0, 1)
