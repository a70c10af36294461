"""Exact words and columns for text that is no piece of a formula."""

from __future__ import annotations

import pytest

from rulecheck.diagnostics import Refused, Span
from rulecheck.formula.parser import parse_formula
from rulecheck.reading.nodes import Located

WRONG = [
    # Numbers stay as the language writes them.
    ("007 <= x", 1, "bad-number: '007' is not a number; write the number without leading zeros"),
    (".5", 1, "bad-number: '.5' is not a number; write a digit before the point: 0.5"),
    ("5.", 1, "bad-number: '5.' is not a number; write a digit behind the point, or no point"),
    ("1_000", 1, "bad-number: '1_000' is not a number; write the digits without underscores"),
    ("0x1F", 1, "bad-number: '0x1F' is not a number; write the number in decimal digits"),
    (
        "1e9999",
        1,
        "too-large: the exponent of '1e9999' is out of bounds; write an exponent from -999 to 999",
    ),
    ("x + ٣", 5, "formula-syntax: '٣' is not a digit of the language; write the digits 0 to 9"),
    # A date is always a date.
    (
        "2027-03-011",
        1,
        "formula-syntax: '2027-03-011' begins with a date and goes on; "
        "write a date as year-month-day, with a blank behind it",
    ),
    # A blank between number and unit.
    (
        "x <= 1900mm",
        6,
        "formula-syntax: '1900mm' is neither a number nor a name; "
        "put a blank before a unit: '1900 mm'; write a product as '1900 * mm'",
    ),
    (
        "1e3mm",
        1,
        "formula-syntax: '1e3mm' is neither a number nor a name; "
        "put a blank before a unit: '1e3 mm'; write a product as '1e3 * mm'",
    ),
    ("5%", 1, "formula-syntax: '5%' is neither a number nor a name; put a blank before a unit: '5 %'"),
    (
        "2t.width",
        1,
        "formula-syntax: '2t.width' is neither a number nor a name; write a product as '2 * t.width'",
    ),
    # Nothing directly behind a unit.
    (
        "13 kN/h.strength",
        8,
        "formula-syntax: '.' stands directly behind the unit 'kN/h'; "
        "put a blank behind a unit, as in '13 kN / h.strength'",
    ),
    (
        "75 %*max(a, b)",
        9,
        "formula-syntax: '(' stands directly behind the unit '%*max'; put a blank behind a unit, as in '75 % * max(...)'",
    ),
    (
        "5 tyres.rear",
        8,
        "formula-syntax: '.' stands directly behind the unit 'tyres'; put a blank behind a unit, as in '5 * tyres.rear'",
    ),
    (
        "5 m^2.5",
        6,
        "formula-syntax: '.' stands directly behind the unit 'm^2'; "
        "a unit takes whole powers only; a broken one is written (5 m)^2.5",
    ),
    ("5 mm.", 5, "formula-syntax: '.' stands directly behind the unit 'mm'; put a blank behind the unit"),
    (
        "5 W/(m*K)(a)",
        10,
        "formula-syntax: '(' stands directly behind the unit 'W/(m*K)'; put a blank behind the unit",
    ),
    ("5 mm*(a)", 5, "formula-syntax: '*' stands directly behind the unit 'mm'; put a blank behind the unit"),
    ("5 m/2", 4, "formula-syntax: '/' stands directly behind the unit 'm'; put a blank behind the unit"),
    (
        "3 m^x",
        4,
        "formula-syntax: '^' stands directly behind the unit 'm'; put a blank behind the unit, or parentheses: (3 m)^2",
    ),
    ("5 m^2x", 6, "formula-syntax: 'x' stands directly behind the unit 'm^2'; put a blank behind the unit"),
    ("5 W/(m*K)2", 10, "formula-syntax: '2' stands directly behind the unit 'W/(m*K)'; put a blank behind the unit"),
    (
        "5 N/m/s",
        6,
        "formula-syntax: '/' stands directly behind the unit 'N/m'; "
        "a unit has one slash: write N/(m*s) for N/m/s, or put blanks round a division",
    ),
    # Fractions of a unit.
    (
        "x >= 3/8 in",
        6,
        "formula-syntax: a fraction of a unit is written as a decimal, not as '3/8 in'; write 0.375 in",
    ),
    (
        "1/3 in",
        1,
        "formula-syntax: a fraction of a unit is written as a decimal, not as '1/3 in'; write (1/3) * 1 in",
    ),
    (
        "1/0 in",
        1,
        "formula-syntax: a fraction of a unit is written as a decimal, not as '1/0 in'; a fraction is not over zero",
    ),
    (
        "1 3/8 in",
        3,
        "formula-syntax: a fraction of a unit is written as a decimal, not as '3/8 in'; write 1.375 in",
    ),
    (
        "1" * 5000 + "/8 in",
        1,
        "too-large: the number '1111111111111111111111111111111111111111...' has too many digits; "
        "write at most 400 digits",
    ),
    # Names.
    (
        "tyres.in.width",
        1,
        "formula-syntax: 'in' is a word of the language and cannot be part of a name; name the item otherwise",
    ),
    ("a.5", 2, "formula-syntax: a part of a name cannot begin with a digit: '.5'; begin each part with a letter"),
    (
        "a . b",
        3,
        "formula-syntax: '.' stands alone; "
        "write a name directly before and behind the dot, or a digit before a decimal point",
    ),
    # Signs of other languages.
    ("a && b", 3, "formula-syntax: '&&' is not a sign of the language; write 'and'"),
    ("a || b", 3, "formula-syntax: '||' is not a sign of the language; write 'or'"),
    ("!a", 1, "formula-syntax: '!' is not a sign of the language; write 'not', or '!=' for a difference"),
    ("a = b", 3, "formula-syntax: '=' is not a sign of the language; write '==' to compare"),
    ("a ** b", 3, "formula-syntax: '**' is not a sign of the language; write '^' for a power"),
    ("a <> b", 3, "formula-syntax: '<>' is not a sign of the language; write '!='"),
    ("a =< b", 3, "formula-syntax: '=<' is not a sign of the language; write '<='"),
    ("a => b", 3, "formula-syntax: '=>' is not a sign of the language; write '>='"),
    ("a // b", 3, "formula-syntax: '//' is not a sign of the language; write '/', or floor(a / b)"),
    ("a ≤ b", 3, "formula-syntax: '≤' is not a sign of the language; write '<='"),
    ("a ≥ b", 3, "formula-syntax: '≥' is not a sign of the language; write '>='"),
    ("a ≠ b", 3, "formula-syntax: '≠' is not a sign of the language; write '!='"),
    ("a \u00d7 b", 3, "formula-syntax: '\u00d7' is not a sign of the language; write '*'"),
    ("a · b", 3, "formula-syntax: '·' is not a sign of the language; write '*'"),
    ("a ÷ b", 3, "formula-syntax: '÷' is not a sign of the language; write '/'"),
    # Typography.
    (
        "a \u2212 b",
        3,
        "formula-syntax: '\u2212' is a typographic minus or dash; write the minus as the hyphen of the keyboard: '-'",
    ),
    (
        "5\u00a0mm",
        2,
        "formula-syntax: a special blank <U+00A0> stands in the formula; write an ordinary blank",
    ),
    ("x²", 2, "formula-syntax: '²' is a raised figure; write '^2', as in m^2"),
    ("5 m²", 4, "formula-syntax: '²' is a raised figure; write '^2', as in m^2"),
    (
        "x == 'a",
        6,
        'formula-syntax: \' is not the quotation mark of the language; write text in double quotes: "25CrMo4"',
    ),
    (
        "x == “",
        6,
        'formula-syntax: “ is not the quotation mark of the language; write text in double quotes: "25CrMo4"',
    ),
    ('x == "abc', 6, "formula-syntax: the quoted text is not closed; close it with another '\"'"),
    # What belongs to values.
    (
        "1895 +0/-2 mm",
        6,
        "formula-syntax: '+0/-2' is a tolerance, and tolerances stand in values only; "
        "leave it out, or put blanks round '+' and '/'",
    ),
    (
        "x +/- 3 mm",
        3,
        "formula-syntax: '+/-' is a tolerance, and tolerances stand in values only; "
        "leave it out, or put blanks round '+' and '/'",
    ),
    (
        "x ± 3 mm",
        3,
        "formula-syntax: '±' stands in values only, not in formulas; write the bound itself, or '== ... within ...'",
    ),
    # Named arguments do not exist.
    (
        "distance(p, q, view=side)",
        20,
        "formula-syntax: an argument is given by name, and named arguments do not exist; "
        "write the argument alone, in its place",
    ),
    (
        "distance(p, q, view: side)",
        20,
        "formula-syntax: ':' cannot stand in a formula; "
        "named arguments do not exist: write the argument alone, in its place",
    ),
    # The rest.
    (
        "x %",
        3,
        "formula-syntax: '%' stands without a number; write the number before it, with a blank between: 75 %",
    ),
    ("{a}", 1, "formula-syntax: '{' cannot stand in a formula; write '(' for a group and '[' for a list"),
    ("a ? b", 3, "formula-syntax: '?' cannot stand in a formula; write 'a if condition else b'"),
    ("a # b", 3, "formula-syntax: '#' cannot stand in a formula; put a note in the file beside the formula"),
    ("a; b", 2, "formula-syntax: ';' cannot stand in a formula; write ',' between arguments"),
    (
        "a @ b",
        3,
        "formula-syntax: '@' cannot stand in a formula; names are letters, digits and underscores; other text is quoted",
    ),
    (
        "a \x07",
        3,
        "formula-syntax: '<U+0007>' cannot stand in a formula; "
        "names are letters, digits and underscores; other text is quoted",
    ),
]


@pytest.mark.parametrize(("text", "column", "words"), WRONG, ids=[text[:40] for text, _, _ in WRONG])
def test_words_and_column(text: str, column: int, words: str) -> None:
    with pytest.raises(Refused) as refused:
        parse_formula(Located(text, Span("a.yaml", 0, len(text), 1, 1)))
    assert str(refused.value.diagnostics[0]) == f"a.yaml:1:{column}: {words}"


@pytest.mark.parametrize("text", ["13 kN/h.strength", "5 W/(m*K)2", "5 m/2", "5 tyres.rear"])
def test_one_fault_is_told_once(text: str) -> None:
    with pytest.raises(Refused) as refused:
        parse_formula(Located(text, Span("a.yaml", 0, len(text), 1, 1)))
    assert len(refused.value.diagnostics) == 1


@pytest.mark.parametrize(
    "text",
    [
        "x^2/8 in",
        "x^-2/8 in",
        "3 / 8 in",
        "(3/8) * 1 in",
        "3/8",
        "a.b/8 in",
        "x + 2 / -3",
        "2027-03-01",
        "5 in",
        "3/in_hand",
    ],
)
def test_what_looks_like_a_trap_and_is_none(text: str) -> None:
    parse_formula(Located(text, Span("a.yaml", 0, len(text), 1, 1)))
