"""Characters and places: bytes to text, what a text file may hold, and spans from offsets."""

from __future__ import annotations

import re

from rulecheck.diagnostics import Faults, Refused, Span

_BYTE_ORDER_MARKS = {b"\xff\xfe": "UTF-16", b"\xfe\xff": "UTF-16"}

# Control characters, stray byte order marks, halves of surrogate pairs, and the line separators that
# YAML counts as line ends and editors do not: each would move places or hide text from a reader.
_FORBIDDEN = re.compile("[\x00-\x08\x0b-\x1f\x7f-\x9f\u2028\u2029\ufeff\ud800-\udfff\ufffe\uffff]")

_MOST_CHARACTERS = 20


def span_at(file: str, text: str, start: int, end: int) -> Span:
    """The span of characters `start` to `end` of a text.

    >>> str(span_at("a.yaml", "one\\ntwo", 5, 7))
    'a.yaml:2:2'
    """
    start = max(0, min(start, len(text)))
    line = text.count("\n", 0, start) + 1
    return Span(file, start, max(start, min(end, len(text))), line, start - text.rfind("\n", 0, start))


def line_at(text: str, index: int) -> str:
    """The line, without its end, in which character `index` stands.

    >>> line_at("one\\ntwo", 4)
    'two'
    """
    end = text.find("\n", index)
    return text[text.rfind("\n", 0, index) + 1 : end if end >= 0 else len(text)]


def decode(content: bytes, file: str) -> str:
    """The text of a file: UTF-8, with or without a byte order mark, every line end as a line feed.

    A carriage return, alone or before a line feed, counts as one line end. Raises `Refused` with
    `not-utf8` where the bytes are not UTF-8 or hold a character that text files do not hold.

    >>> decode(b"width: 1900 mm\\r\\n", "a.yaml")
    'width: 1900 mm\\n'
    """
    encoding = _BYTE_ORDER_MARKS.get(content[:2])
    faults = Faults()
    if encoding:
        faults.add(
            "not-utf8", f"{file} is {encoding} text", Span(file, 0, 0, 1, 1), expected="UTF-8", advice=_SAVE_AS_UTF8
        )
        faults.settle()
    try:
        text = _normalised(content.decode("utf-8"))
    except UnicodeDecodeError as error:
        before = _normalised(content[: error.start].decode("utf-8"))
        byte = content[error.start]
        faults.add(
            "not-utf8",
            f"byte {error.start + 1} of {file} is 0x{byte:02X}, which is not UTF-8 there",
            span_at(file, before, len(before), len(before)),
            expected="UTF-8 text",
            advice=_SAVE_AS_UTF8,
        )
        raise Refused(faults.found) from None
    refuse_characters(text, file, faults)
    faults.settle()
    return text


def refuse_characters(text: str, file: str, faults: Faults) -> None:
    """Note each character that a text file may not hold (the first twenty of them)."""
    for count, match in enumerate(_FORBIDDEN.finditer(text)):
        if count == _MOST_CHARACTERS:
            return
        faults.add(
            "not-utf8",
            f"the character U+{ord(match[0]):04X} does not belong in a text file",
            span_at(file, text, match.start(), match.end()),
            expected="printable characters, blanks, tabs and line ends",
            advice="delete it",
        )


def _normalised(text: str) -> str:
    return text.removeprefix("\ufeff").replace("\r\n", "\n").replace("\r", "\n")


_SAVE_AS_UTF8 = "save the file as UTF-8"
