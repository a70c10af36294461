"""Exact words and columns for tokens in the wrong place."""

from __future__ import annotations

import pytest

from rulecheck.diagnostics import Refused, Span
from rulecheck.formula.parser import parse_each, parse_formula
from rulecheck.reading.nodes import Located

VALUE = "expected a number, a name, a function or '('"

WRONG = [
    ("", 1, f"the formula is empty; {VALUE}; write one, such as dimensions.wheelbase >= 1525 mm"),
    ("   ", 4, f"the formula is empty; {VALUE}; write one, such as dimensions.wheelbase >= 1525 mm"),
    ("x +", 4, f"the formula ends behind '+'; {VALUE}; write what follows '+', or leave it out"),
    ("* x", 1, f"the formula begins with '*'; {VALUE}"),
    ("+x", 1, f"a plus sign stands before a value; {VALUE}; leave the plus out"),
    ("a * * b", 5, f"'*' stands behind '*', where a value is due; {VALUE}"),
    (
        "a < > b",
        5,
        f"'>' stands behind '<', where a value is due; {VALUE}; the comparisons are <, <=, >, >=, == and !=",
    ),
    # Operators are due.
    (
        "a b",
        3,
        "'b' stands behind 'a' without an operator between; expected an operator; "
        "write an operator between them, or leave one out",
    ),
    (
        "f(a b)",
        5,
        "'b' stands behind 'a' without an operator between; expected an operator, ',' or ')'; "
        "write an operator between them, or leave one out",
    ),
    (
        "[a b]",
        4,
        "'b' stands behind 'a' without an operator between; expected an operator, ',' or ']'; "
        "write an operator between them, or leave one out",
    ),
    (
        "a AND b",
        3,
        "'AND' stands behind 'a' without an operator between; expected an operator; write 'and' in small letters",
    ),
    (
        "NOT a",
        5,
        "'a' stands behind 'NOT' without an operator between; expected an operator; write 'not' in small letters",
    ),
    ("x is 5 mm", 3, "'is' stands behind 'x' without an operator between; expected an operator; write '==' to compare"),
    (
        "2(x)",
        2,
        "'(' stands behind '2' without an operator between; expected an operator; a product is written with '*'",
    ),
    (
        "(a)(b)",
        4,
        "'(' stands behind ')' without an operator between; expected an operator; a product is written with '*'",
    ),
    (
        "5 mm x",
        6,
        "'x' stands behind '5 mm' without an operator between; expected an operator; a product is written '5 mm * x'",
    ),
    (
        "3 in list",
        6,
        "'list' stands behind '3 in' without an operator between; expected an operator; "
        "'in' right behind a number is the inch; membership of a bare number is written (3) in ...",
    ),
    (
        "x not in y",
        3,
        "'not' stands behind 'x' without an operator between; expected an operator; "
        "write 'not x in list', with 'not' in front",
    ),
    (
        '"a" "b"',
        5,
        "the text 'b' stands behind the text 'a' without an operator between; expected an operator; "
        "write '==' to compare",
    ),
    # Brackets and commas.
    ("((a)", 1, "the bracket '(' is not closed; expected ')'; close it with ')'"),
    ("[a, b", 1, "the bracket '[' is not closed; expected ']'; close it with ']'"),
    ("max(a, b", 4, "the bracket '(' is not closed; expected ')'; close it with ')'"),
    ("(a]", 3, "']' cannot close '('; expected ')'; close with ')'"),
    ("a)", 2, "')' closes no bracket; expected an operator or the end; leave it out, or open the bracket"),
    ("f(a,)", 5, f"')' stands behind ',', where a value is due; {VALUE}; leave the last comma out"),
    ("[]", 2, f"']' stands behind '[', where a value is due; {VALUE}; name at least one item"),
    (
        "1,900 <= x",
        2,
        "',' stands outside the brackets of a function or list; expected an operator; "
        "write the decimal mark as a point and thousands without a mark",
    ),
    (
        "x in (a, b)",
        8,
        "',' stands outside the brackets of a function or list; expected an operator; "
        "a list is written in square brackets: [a, b]",
    ),
    ("a, b", 2, "',' stands outside the brackets of a function or list; expected an operator; leave it out"),
    (
        "a (b).x .y",
        9,
        "'.' stands alone; write a name directly before and behind the dot, or a digit before a decimal point",
    ),
    # Comparisons.
    (
        "a < b > c",
        7,
        "a chain of comparisons goes in one direction, not '< ... >'; join two comparisons by 'and'",
    ),
    (
        "a == b == c",
        8,
        "'==', '!=' and 'in' do not chain; join two comparisons by 'and', or put parentheses round one",
    ),
    (
        "a < b != c",
        7,
        "'==', '!=' and 'in' do not chain; join two comparisons by 'and', or put parentheses round one",
    ),
    (
        "a in b < c",
        8,
        "'==', '!=' and 'in' do not chain; join two comparisons by 'and', or put parentheses round one",
    ),
    (
        "a == b within 1 mm < c",
        20,
        "'==', '!=' and 'in' do not chain; join two comparisons by 'and', or put parentheses round one",
    ),
    (
        "a <= b within 1 mm",
        8,
        "'within' follows '<='; expected 'within' behind '==', '!=' or 'in'; add an allowance to the limit itself",
    ),
    ("x within 1 mm", 3, "'within' follows no comparison; expected an operator; write 'a == b within 1 mm'"),
    ("a == not b", 6, "'not' stands behind an operator; put parentheses round it: (not ...)"),
    ("-not b", 2, "'not' stands behind an operator; put parentheses round it: (not ...)"),
    # Conditionals.
    (
        "x <= a if c else b",
        1,
        "a comparison stands beside 'if ... else' without parentheses; "
        "write 'x <= (a if c else b)', or '(x <= a) if c else (x <= b)'",
    ),
    (
        "a if c else b <= x",
        13,
        "a comparison stands beside 'if ... else' without parentheses; "
        "write 'x <= (a if c else b)', or '(x <= a) if c else (x <= b)'",
    ),
    ("a if b", 7, "a conditional has no 'else'; expected 'else'; write 'a if condition else b'"),
    (
        "a else b",
        3,
        "'else' stands without 'if'; expected an operator; a conditional is written 'a if condition else b'",
    ),
    ("if(a, b, c)", 1, f"the formula begins with 'if'; {VALUE}; a conditional is written 'a if condition else b'"),
    # Words of the language.
    ("in", 1, f"the formula begins with 'in'; {VALUE}; 'in' is a word of the language and cannot be a name"),
    (
        "not in y",
        5,
        f"'in' stands behind 'not', where a value is due; {VALUE}; write 'not x in list'",
    ),
    # Aggregates.
    ("count(x for x in y)", 1, "'count' takes no expression; write count(for x in collection where condition)"),
    ("share(x for x in y)", 1, "'share' takes no expression; write share(for x in collection where condition)"),
    ("sum(for x in y)", 1, "'sum' lacks an expression; write sum(x.field for x in collection)"),
    (
        "sqrt(x for x in y)",
        1,
        "'sqrt' does not go over a collection; "
        "expected one of count, deviation, every, max, mean, min, share, some, sum",
    ),
    (
        "sum(a.x for a.b in y)",
        13,
        "a loop variable is a plain name; expected a name without dots; write 'x in collection'",
    ),
    (
        "sum(a for if in y)",
        11,
        "a loop variable is a plain name; expected a name without dots; write 'x in collection'",
    ),
    ("sum(x for x, x in y)", 14, "the loop variable 'x' is named twice; give each its own name"),
    (
        "sum(x for x of y)",
        13,
        "a loop names no collection; expected 'in'; write 'x in collection' or 'a, b in pairs(collection)'",
    ),
    (
        "sum(x, y for x in z)",
        10,
        "'for' stands outside an aggregate; expected an operator, ',' or ')'; "
        "an aggregate is written f(expression for x in collection where condition)",
    ),
    (
        "sum(x for x in y if z)",
        18,
        "'if' stands behind 'y' without an operator between; expected an operator, ',' or ')'; "
        "a condition in a loop begins with 'where'; a conditional here needs parentheses",
    ),
    (
        "x where y",
        3,
        "'where' stands outside an aggregate; expected an operator; "
        "an aggregate is written f(expression for x in collection where condition)",
    ),
    (
        "for x in y",
        1,
        f"the formula begins with 'for'; {VALUE}; an aggregate is written f(expression for x in collection)",
    ),
]


@pytest.mark.parametrize(("text", "column", "words"), WRONG, ids=[text for text, _, _ in WRONG])
def test_words_and_column(text: str, column: int, words: str) -> None:
    with pytest.raises(Refused) as refused:
        parse_formula(Located(text, Span("a.yaml", 0, len(text), 1, 1)))
    assert [str(item) for item in refused.value.diagnostics] == [f"a.yaml:1:{column}: formula-syntax: {words}"]


@pytest.mark.parametrize(
    ("text", "column", "words"),
    [
        (
            "tyres",
            6,
            "a loop names no collection; expected 'in'; write 'x in collection' or 'a, b in pairs(collection)'",
        ),
        ("a, a in pairs(b)", 4, "the loop variable 'a' is named twice; give each its own name"),
        ("for a in b", 1, "a loop variable is a plain name; expected a name without dots; write 'x in collection'"),
        (
            "t in tyres where",
            17,
            f"the formula ends behind 'where'; {VALUE}; write what follows 'where', or leave it out",
        ),
        (
            "t in tyres, front",
            11,
            "',' stands outside the brackets of a function or list; expected an operator; leave it out",
        ),
    ],
)
def test_words_and_column_in_each(text: str, column: int, words: str) -> None:
    with pytest.raises(Refused) as refused:
        parse_each(Located(text, Span("a.yaml", 0, len(text), 1, 1)))
    assert [str(item) for item in refused.value.diagnostics] == [f"a.yaml:1:{column}: formula-syntax: {words}"]


def test_the_opening_bracket_is_shown_beside() -> None:
    with pytest.raises(Refused) as refused:
        parse_formula(Located("max(a b)", Span("a.yaml", 0, 8, 1, 1)))
    (related,) = refused.value.diagnostics[0].related
    assert (str(related.span), related.message) == ("a.yaml:1:4", "the bracket opens here")
