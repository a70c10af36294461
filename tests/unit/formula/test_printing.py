from __future__ import annotations

import typing
from collections.abc import Callable

import pytest

from rulecheck.diagnostics import Span
from rulecheck.formula import printing
from rulecheck.formula.parser import parse_each, parse_formula
from rulecheck.formula.printing import show, show_with
from rulecheck.formula.syntax import Call, Name, Syntax
from rulecheck.reading.nodes import Located


def located(text: str) -> Located:
    return Located(text, Span("a.yaml", 0, len(text), 1, 1))


def parse(text: str) -> Syntax:
    return parse_formula(located(text))


def values(known: dict[str, str]) -> Callable[[Syntax], str | None]:
    return lambda node: known.get(".".join(node.path)) if isinstance(node, Name) else None


@pytest.mark.parametrize(
    ("text", "shown"),
    [
        ("((a))+((b))", "a + b"),
        ("(a+b)+c", "a + b + c"),
        ("a+(b+c)", "a + (b + c)"),
        ("(a*b)/(c*d)", "a * b / (c * d)"),
        ("(a^b)^(c^d)", "(a^b)^c^d"),
        ("(-a)^b", "(-a)^b"),
        ("-(a^b)", "-a^b"),
        ("-(a*b)", "-(a * b)"),
        ("(-a)*b", "-a * b"),
        ("a^(-b)", "a^-b"),
        ("a^(b+1)", "a^(b + 1)"),
        ("3 m ^ 2", "(3 m)^2"),
        ("a^(2 m)", "a^(2 m)"),
        ("(a<b)and(b<c)", "a < b and b < c"),
        ("(a<b)==(b<c)", "(a < b) == (b < c)"),
        ("not (a<b)", "not a < b"),
        ("not (a and b)", "not (a and b)"),
        ("(not a) == b", "(not a) == b"),
        ("a and (b and c)", "a and (b and c)"),
        ("a or (b and c)", "a or b and c"),
        ("(a if b else c) + d", "(a if b else c) + d"),
        ("a if b else (c if d else e)", "a if b else c if d else e"),
        ("a if (b if c else d) else e", "a if (b if c else d) else e"),
        ("(a<b) if (c<d) else (e<f)", "(a < b) if c < d else (e < f)"),
        ("(3) in x", "(3) in x"),
        ("(3 mm) in x", "3 mm in x"),
        ("(a+3) in x", "(a + 3) in x"),
        ("(a^2) in x", "(a^2) in x"),
        ("(-3) in x", "(-3) in x"),
        ("(1e+3) in x", "(1e+3) in x"),
        ("(a3) in x", "a3 in x"),
        ("f( a,b ) . x"[:9], "f(a, b)"),
        ("(f(a)).x", "f(a).x"),
        ("(a).x", "(a).x"),
        ("count( for a,b in pairs( c ) where(a.x<b.x) )", "count(for a, b in pairs(c) where a.x < b.x)"),
        ("sum((x if y else z) for x in (a))", "sum(x if y else z for x in a)"),
        ("1.50  mm", "1.50 mm"),
    ],
)
def test_least_parentheses(text: str, shown: str) -> None:
    assert show(parse(text)) == shown
    assert parse(shown) == parse(text)


@pytest.mark.parametrize("text", ["t in tyres", "a, b in pairs(lamps) where a.x < b.x", "t in [a, b]"])
def test_each_prints_as_written(text: str) -> None:
    each = parse_each(located(text))
    assert show(each) == text
    assert parse_each(located(show(each))) == each


@pytest.mark.parametrize(
    ("text", "known", "shown"),
    [
        ("a <= b", {"a": "1890 mm"}, "1890 mm <= b"),
        ("a^2 - b * c", {"a": "3 m", "b": "-2 m"}, "(3 m)^2 - (-2 m) * c"),
        ("a^2", {"a": "3"}, "3^2"),
        ("a^2", {"a": "-3"}, "(-3)^2"),
        ("-a", {"a": "-3 m"}, "-(-3 m)"),
        ("2^a", {"a": "-1"}, "2^(-1)"),
        ("a - b <= c", {"a": "-1 m", "b": "-2 m", "c": "-3 m"}, "-1 m - (-2 m) <= -3 m"),
        ("f(a)", {"a": "-1 m"}, "f(-1 m)"),
        ("a in [b, c]", {"a": "3", "b": "4"}, "(3) in [4, c]"),
        ("(a + b).x", {"a": "1 m"}, "(1 m + b).x"),
        ("sqrt(a * (b + c))", {"a": "2 m", "b": "3 m", "c": "4 m"}, "sqrt(2 m * (3 m + 4 m))"),
        ("sum(m.mass for m in masses)", {"masses": "..."}, "sum(m.mass for m in ...)"),
    ],
)
def test_formula_with_numbers(text: str, known: dict[str, str], shown: str) -> None:
    assert show_with(parse(text), values(known)) == shown


def test_any_node_may_be_replaced() -> None:
    tree = parse("2 * f(a) + f(b).x")
    assert show_with(tree, lambda node: "5 m" if isinstance(node, Call) else None) == "2 * 5 m + (5 m).x"
    assert show_with(tree, lambda node: "9 m" if node is tree else None) == "9 m"


def test_every_kind_of_node_has_a_printed_form() -> None:
    assert set(printing._PRINTERS) == set(typing.get_args(Syntax))
