from __future__ import annotations

from rulecheck.diagnostics import Span
from rulecheck.reading.nodes import Entry, Located, Mapping, Sequence


def at(text: str, raw: str | None = None, line: int = 3, column: int = 5) -> Located:
    return Located(text, Span("a.yaml", 100, 100 + len(raw or text), line, column), raw)


def slice_of(located: Located, start: int, end: int) -> str:
    span = located.part(start, end)
    raw = located.raw if located.raw is not None else located.text
    return raw[span.start - located.span.start : span.end - located.span.start]


def test_a_part_of_plain_text() -> None:
    part = at("1900 mm").part(5, 7)
    assert (part.start, part.end, part.line, part.column) == (105, 107, 3, 10)


def test_a_part_behind_quotes_and_doubled_quotes() -> None:
    located = at("it's 3 mm", "'it''s 3 mm'")
    assert slice_of(located, 5, 9) == "3 mm"


def test_a_part_behind_an_escape() -> None:
    located = at("± 3 mm", r'"\u00b1 3 mm"')
    assert slice_of(located, 4, 6) == "mm"


def test_a_part_on_a_later_line_of_a_folded_text() -> None:
    located = at("max(a, b)", "max(a,\n    b)")
    part = located.part(7, 8)
    assert (part.line, part.column) == (4, 5)
    assert slice_of(located, 7, 8) == "b"


def test_a_part_never_ends_behind_the_raw_text() -> None:
    located = at("12.5 kg", "12,5")
    assert located.part(0, 7).end == located.span.end
    assert slice_of(located, 3, 4) == "5"


def test_places_do_not_count_in_equality() -> None:
    assert at("x") == at("x", line=9)
    assert at("x") != at("y")


def test_a_mapping_gives_values_and_keys_by_name() -> None:
    mapping = Mapping((Entry(at("a"), at("1")), Entry(at("b"), Sequence((), at("").span))), at("").span)
    assert mapping.get("a") == at("1")
    assert mapping.get("c") is None
    assert mapping.key("b") == at("b")
    assert mapping.key("c") is None
    assert len(mapping) == 2
    assert [entry.key.text for entry in mapping] == ["a", "b"]
