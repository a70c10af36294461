from __future__ import annotations

import pytest

from rulecheck.diagnostics import Faults, Span
from rulecheck.quantity.value_parts import Pieces
from rulecheck.reading.nodes import Located


def pieces(text: str, *, missing_blank: bool = False) -> Pieces:
    return Pieces(Located(text, Span("a.yaml", 0, len(text), 1, 1)), Faults(), missing_blank=missing_blank)


@pytest.mark.parametrize(
    ("text", "sorts"),
    [
        ("1900 mm", ["number", "word"]),
        ("1895 mm ± 0.6 mm (k=2)", ["number", "word", "plus-minus", "number", "word", "coverage"]),
        ("5 W/(kg*K)±1 W/(kg*K)(k=2)", ["number", "word", "plus-minus", "number", "word", "coverage"]),
        ("1895 +0/-2 mm", ["number", "tolerance", "word"]),
        ("1895 +/-2 mm", ["number", "plus-minus", "number", "word"]),
        ("5 1/s", ["number", "word"]),
        ("5 1/4", ["number", "number"]),
    ],
)
def test_a_value_falls_into_parts(text: str, sorts: list[str]) -> None:
    found = pieces(text).waiting
    assert [piece.sort for piece in found] == sorts
    assert all(text[piece.start : piece.end] == piece.text for piece in found)


def test_number_and_unit_are_cut_apart_where_the_blank_may_be_missing() -> None:
    assert [piece.text for piece in pieces("250mm", missing_blank=True).waiting] == ["250", "mm"]
    assert [piece.text for piece in pieces("1e3mm", missing_blank=True).waiting] == ["1e3mm"]
    assert [piece.text for piece in pieces("-5km/h", missing_blank=True).waiting] == ["-5", "km/h"]
    assert [piece.text for piece in pieces("1895mm +0/-2mm", missing_blank=True).waiting][2:] == ["+0/-2mm"]
    assert [piece.text for piece in pieces("0x1F", missing_blank=True).waiting] == ["0x1F"]
    assert [piece.text for piece in pieces("250mm").waiting] == ["250mm"]
