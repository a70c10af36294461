from hypothesis import given
from hypothesis import strategies as st

from rulecheck.diagnostics import Diagnostic, Related, Span
from rulecheck.output.diagnostics_text import diagnostics_text

FILE = "car.design.yaml"


def _at(text: str, mark: str, line: int = 1) -> Span:
    row = text.splitlines()[line - 1]
    start = text.index(mark)
    return Span(FILE, start, start + len(mark), line, row.index(mark) + 1)


def _shown(text: str, mark: str, line: int = 1, width: int = 80) -> list[str]:
    item = Diagnostic("unknown-key", "no such key", _at(text, mark, line))
    return diagnostics_text([item], {FILE: text}, width).splitlines()


def test_carets_stand_under_the_span() -> None:
    _, quoted, carets, *_ = _shown("design: A\nwdith: 3 mm\n", "wdith", 2)
    assert quoted == "    wdith: 3 mm"
    assert carets == "    ^^^^^"


def test_a_long_line_is_cut_around_the_span() -> None:
    text = "x: [" + "1, " * 200 + "oops, " + "2, " * 200 + "]"
    _, quoted, carets, *_ = _shown(text, "oops")
    assert len(quoted) <= 80
    assert quoted[carets.index("^") : carets.rindex("^") + 1] == "oops"


def test_wide_characters_keep_the_carets_below() -> None:
    _, quoted, carets, *_ = _shown("車車: 3 mn", "mn")
    # Two columns for each of the two wide characters.
    assert carets == "    " + " " * (4 + len(": 3 ")) + "^^"
    assert quoted.endswith("mn")


def test_a_span_over_lines_ends_with_its_first_line() -> None:
    text = "a: [1,\n 2]\n"
    item = Diagnostic("bad-value", "a list", Span(FILE, 3, len(text) - 1, 1, 4))
    assert diagnostics_text([item], {FILE: text}).splitlines()[2] == "       ^^^"


def test_an_end_of_line_still_gets_a_caret() -> None:
    item = Diagnostic("yaml-syntax", "something is missing", Span(FILE, 2, 2, 1, 3))
    assert diagnostics_text([item], {FILE: "a:\n"}).splitlines()[2] == "      ^"


def test_a_place_in_a_file_without_text_is_named_only() -> None:
    item = Diagnostic("no-such-file", "gone", Span("gone.yaml", 0, 0, 9, 1))
    assert diagnostics_text([item], {}) == "gone.yaml:9:1: no-such-file: gone\n\n1 fault\n"


def test_expected_advice_and_related_places() -> None:
    text = "a: 1\na: 2\n"
    other = Related("it stands here first", Span(FILE, 0, 1, 1, 1))
    item = Diagnostic("duplicate-key", "'a' twice", Span(FILE, 5, 6, 2, 1), "one 'a'", "remove one", (other,))
    assert (
        diagnostics_text([item, item], {FILE: text})
        == (
            2
            * "car.design.yaml:2:1: duplicate-key: 'a' twice\n    a: 2\n    ^\n    expected: one 'a'\n    do: remove one\n"
            "    see car.design.yaml:1:1: it stands here first\n    a: 1\n    ^\n\n"
        )
        + "2 faults\n"
    )


def test_control_characters_never_reach_the_screen() -> None:
    text = "a: \x1b[2J\u202e 3"
    shown = diagnostics_text([Diagnostic("bad-value", "\x1b[2J", _at(text, "3"))], {FILE: text})
    assert "\x1b" not in shown
    assert "\u202e" not in shown


@given(st.text(), st.integers(1, 5), st.integers(1, 400), st.integers(0, 400))
def test_any_span_in_any_text_is_shown(text: str, line: int, column: int, length: int) -> None:
    span = Span(FILE, column - 1, column - 1 + length, line, column)
    assert diagnostics_text([Diagnostic("bad-value", "m", span)], {FILE: text}).endswith("1 fault\n")
