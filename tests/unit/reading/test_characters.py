from __future__ import annotations

import pytest

from rulecheck.diagnostics import Refused
from rulecheck.reading.characters import decode, line_at, span_at


def only(refused: pytest.ExceptionInfo[Refused]) -> str:
    assert len(refused.value.diagnostics) == 1
    return str(refused.value.diagnostics[0])


@pytest.mark.parametrize(
    "content",
    [b"\xef\xbb\xbfa: 1\nb: 2\n", b"a: 1\r\nb: 2\r\n", b"a: 1\rb: 2\r", b"\xef\xbb\xbfa: 1\r\nb: 2\n"],
)
def test_byte_order_mark_and_line_ends_do_not_count(content: bytes) -> None:
    assert decode(content, "a.yaml") == "a: 1\nb: 2\n"


def test_latin_1_is_refused_with_the_place_of_the_byte() -> None:
    content = "width: 3 mm\r\nmass: 1 kg ± 2 g\n".encode("latin-1")
    with pytest.raises(Refused) as refused:
        decode(content, "a.yaml")
    assert only(refused) == (
        "a.yaml:2:12: not-utf8: byte 25 of a.yaml is 0xB1, which is not UTF-8 there; "
        "expected UTF-8 text; save the file as UTF-8"
    )


@pytest.mark.parametrize("encoding", ["utf-16", "utf-16-le", "utf-16-be"])
def test_utf_16_is_refused(encoding: str) -> None:
    with pytest.raises(Refused) as refused:
        decode("width: 3 mm".encode(encoding), "a.yaml")
    assert {item.code for item in refused.value.diagnostics} == {"not-utf8"}


@pytest.mark.parametrize("character", ["\x00", "\x1b", "\x7f", "\x85", "\u2028", "\ufeff"])
def test_characters_that_do_not_belong_in_text_are_refused(character: str) -> None:
    with pytest.raises(Refused) as refused:
        decode(f"a: 1\nb: {character}".encode(), "a.yaml")
    assert f"a.yaml:2:4: not-utf8: the character U+{ord(character):04X}" in only(refused)


def test_at_most_twenty_such_characters_are_listed() -> None:
    with pytest.raises(Refused) as refused:
        decode(b"\x01" * 100_000, "a.yaml")
    assert len(refused.value.diagnostics) == 20


@pytest.mark.parametrize(
    ("start", "end", "line", "column"), [(0, 1, 1, 1), (3, 4, 1, 4), (4, 6, 2, 1), (6, 99, 2, 3), (99, 99, 2, 4)]
)
def test_span_at(start: int, end: int, line: int, column: int) -> None:
    span = span_at("a.yaml", "one\ntwo", start, end)
    assert (span.line, span.column) == (line, column)
    assert 0 <= span.start <= span.end <= 7


def test_line_at() -> None:
    assert [line_at("one\ntwo\n", index) for index in (0, 3, 4, 7, 8)] == ["one", "one", "two", "two", ""]
