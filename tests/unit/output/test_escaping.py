import unicodedata

from hypothesis import given
from hypothesis import strategies as st

from rulecheck.output.escaping import encodable, plain


def test_cursor_and_direction_characters_are_shown_by_number() -> None:
    assert plain("a\x1b]0;b\x07") == "a\\x1b]0;b\\x07"
    assert plain("x\u202ey\u2066z\u200f") == "x\\u202ey\\u2066z\\u200f"
    assert plain("\u2028\U000e0001") == "\\u2028\\U000e0001"


def test_letters_of_all_scripts_stay() -> None:
    assert plain("Öl 45° Ω 車") == "Öl 45° Ω 車"


def test_line_ends_become_blanks() -> None:
    assert plain("a\nb\tc\r") == "a b c "


@given(st.text())
def test_nothing_unseen_is_left(text: str) -> None:
    left = {unicodedata.category(character) for character in plain(text) if character not in "\u200c\u200d"}
    assert left.isdisjoint({"Cc", "Cf", "Cs", "Zl", "Zp"})


def test_what_a_stream_cannot_write_is_shown_by_number() -> None:
    assert encodable("┃ ok", "ascii") == "\\u2503 ok"
    assert encodable("┃ ok", "utf-8") == "┃ ok"
