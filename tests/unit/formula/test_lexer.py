from __future__ import annotations

import pytest

from rulecheck.diagnostics import Refused, Span
from rulecheck.formula.lexer import MAXIMUM_FAULTS, MAXIMUM_LENGTH, check_length, lex
from rulecheck.formula.places import Places
from rulecheck.formula.tokens import RESERVED, Token
from rulecheck.reading.nodes import Located


def located(text: str) -> Located:
    return Located(text, Span("a.yaml", 0, len(text), 1, 1))


def tokens(text: str) -> list[Token]:
    where = located(text)
    return lex(where, Places(where))


def kinds(text: str) -> list[str]:
    return [token.kind for token in tokens(text)]


def units(text: str) -> list[str | None]:
    return [token.unit for token in tokens(text) if token.kind == "number"]


def test_tokens_know_where_they_stand() -> None:
    assert tokens(" t.width <= 356 mm ") == [
        Token("name", "t.width", 1, 8),
        Token("<=", "<=", 9, 11),
        Token("number", "356", 12, 18, "mm"),
        Token("end", "", 19, 19),
    ]


def test_a_date_goes_before_a_number() -> None:
    assert kinds("2027-03-01") == ["day", "end"]
    assert kinds("2027 - 3 - 1") == ["number", "-", "number", "-", "number", "end"]
    assert kinds("2027-3-1") == ["number", "-", "number", "-", "number", "end"]


@pytest.mark.parametrize(
    ("text", "unit"),
    [
        ("1900 mm", "mm"),
        ("1900\tmm", "mm"),
        ("1900   mm", "mm"),
        ("320 km/h", "km/h"),
        ("3 m^2", "m^2"),
        ("3 m^-2", "m^-2"),
        ("9.81 m/s^2", "m/s^2"),
        ("90 N*m", "N*m"),
        ("5 W/(m^2*K)", "W/(m^2*K)"),
        ("5 m/(s)", "m/(s)"),
        ("5 kg*m^-1*s^-2", "kg*m^-1*s^-2"),
        ("5 1/s", "1/s"),
        ("5 1/(m*s)", "1/(m*s)"),
        ("2000 cm3", "cm3"),
        ("75 %", "%"),
        ("7 °", "°"),
        ("5 Ω", "Ω"),
        ("0.375 in", "in"),
        ("5 lbf/in^2", "lbf/in^2"),
        ("5 gal_us", "gal_us"),
        ("1e3 mm", "mm"),
        ("5 notch", "notch"),
        ("5 inches", "inches"),
    ],
)
def test_number_blank_unit_is_one_literal(text: str, unit: str) -> None:
    assert units(text) == [unit]
    assert kinds(text) == ["number", "end"]


@pytest.mark.parametrize("word", sorted(RESERVED - {"in"}))
def test_reserved_words_are_no_units(word: str) -> None:
    assert kinds(f"5 {word}") == ["number", word, "end"]
    assert units(f"5 {word}") == [None]


def test_in_right_behind_a_number_is_the_inch_and_else_membership() -> None:
    assert kinds("3 in list") == ["number", "name", "end"]
    assert kinds("(3) in list") == ["(", "number", ")", "in", "name", "end"]
    assert kinds("3 mm in list") == ["number", "in", "name", "end"]
    assert kinds("3 in in list") == ["number", "in", "name", "end"]


def test_the_two_micro_signs_are_one() -> None:
    assert units("5 \u00b5m") == units("5 \u03bcm") == ["\u00b5m"]


def test_a_unit_takes_no_more_than_it_may() -> None:
    assert kinds("75 % * max(a, b)")[:4] == ["number", "*", "name", "("]
    assert kinds("13 kN / h.strength") == ["number", "/", "name", "end"]
    assert kinds("3 m ^ 2") == ["number", "^", "number", "end"]
    assert kinds("2 m*s - 1") == ["number", "-", "number", "end"]
    assert kinds("(5 m)/x") == ["(", "number", ")", "/", "name", "end"]


def test_names_join_by_dots_and_fields_stand_behind_brackets() -> None:
    assert kinds("tyres.rear.width") == ["name", "end"]
    assert kinds("point(a).x.y")[-2:] == ["member", "end"]
    assert kinds("größe_2.x1") == ["name", "end"]


def test_quoted_text_keeps_all_but_its_quotes() -> None:
    assert tokens("x == \"a + 'b' ≤ 5mm\"")[2] == Token("text", "\"a + 'b' ≤ 5mm\"", 5, 20)


def test_signs() -> None:
    text = "a <= b < c >= d > e == f != g + h - i * j / k ^ l , [ ] ( )"
    signs = [part for part in text.split() if not part.isalpha()]
    assert [kind for kind in kinds(text.replace(" ", "")) if kind not in ("name", "end")] == signs
    assert kinds("a<-5") == ["name", "<", "-", "number", "end"]


def test_all_lexical_faults_are_told_at_once_in_order() -> None:
    with pytest.raises(Refused) as refused:
        tokens("a && 5mm ≤ 007")
    assert [(item.code, item.span.column if item.span else 0) for item in refused.value.diagnostics] == [
        ("formula-syntax", 3),
        ("formula-syntax", 6),
        ("formula-syntax", 10),
        ("bad-number", 12),
    ]


@pytest.mark.parametrize("text", ["!" * 1000, "5 a*" * 1000, "a.in + " * 1000])
def test_many_faults_are_cut(text: str) -> None:
    with pytest.raises(Refused) as refused:
        tokens(text)
    assert len(refused.value.diagnostics) == MAXIMUM_FAULTS


def test_length_is_bounded() -> None:
    check_length(located("x" * MAXIMUM_LENGTH))
    with pytest.raises(Refused) as refused:
        check_length(located("x" * (MAXIMUM_LENGTH + 1)))
    assert str(refused.value) == (
        "a.yaml:1:1: too-large: the formula has 10001 characters, more than 10000; split it into derived figures"
    )
