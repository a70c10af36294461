"""What holds for every formula: printing and parsing are inverse, places are right, nothing but `Refused` comes out."""

from __future__ import annotations

import random
from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.diagnostics import Refused, Span
from rulecheck.formula.parser import parse_each, parse_formula
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import (
    Aggregate,
    Binary,
    Call,
    Comparison,
    Conditional,
    Day,
    Each,
    Flag,
    Joined,
    Listing,
    Member,
    Name,
    Negative,
    Not,
    Number,
    Syntax,
    Text,
)
from rulecheck.formula.walk import walk
from rulecheck.reading.nodes import Located

SPAN = Span("a.yaml", 0, 0, 1, 1)
NUMERALS = ("0", "3", "1900", "0.375", "1e3", "1.5e-6", "2e+2", "1.50")
UNITS = (
    None,
    None,
    "1",
    "mm",
    "%",
    "in",
    "km/h",
    "m^2",
    "W/(m^2*K)",
    "1/s",
    "cm3",
    "kg*m^-1*s^-2",
    "°",
    "µm",
    "gal_us",
)
PATHS = ("a", "b2", "on", "pi", "t.width", "tyres.rear.width", "mm", "not_so", "größe", "e", "e5")
AGGREGATES = ("sum", "min", "max", "mean", "deviation", "every", "some")


def parse(text: str) -> Syntax:
    return parse_formula(Located(text, SPAN))


class Grower:
    """Grows trees from a source of choices, which is `random.Random` or hypothesis."""

    def __init__(self, source: random.Random) -> None:
        self.source = source

    def tree(self, depth: int) -> Syntax:
        if depth <= 0 or self.source.random() < 0.1:
            return self.leaf()
        return self.source.choice(self.GROWN)(self, depth - 1)

    def trees(self, depth: int, least: int, most: int) -> tuple[Syntax, ...]:
        return tuple(self.tree(depth) for _ in range(self.source.randint(least, most)))

    def leaf(self) -> Syntax:
        choose = self.source.choice
        numeral = choose(NUMERALS)
        return choose(
            (
                Number(Fraction(numeral), choose(UNITS), numeral, span=SPAN),
                Name(tuple(choose(PATHS).split(".")), span=SPAN),
                Name(tuple(choose(PATHS).split(".")), span=SPAN),
                Day("2027-03-01", span=SPAN),
                Text(choose(("", "25CrMo4", "a 'b' + 5mm ≤ #")), span=SPAN),
                Flag(choose((True, False)), span=SPAN),
            )
        )

    def binary(self, depth: int) -> Syntax:
        operator = self.source.choice(("+", "-", "*", "/", "^"))
        return Binary(operator, self.tree(depth), self.tree(depth), span=SPAN)  # type: ignore[arg-type]

    def negative(self, depth: int) -> Syntax:
        return Negative(self.tree(depth), span=SPAN)

    def negation(self, depth: int) -> Syntax:
        return Not(self.tree(depth), span=SPAN)

    def order(self, depth: int) -> Syntax:
        signs = self.source.choice((("<", "<="), (">", ">=")))
        operands = self.trees(depth, 2, 4)
        operators = tuple(self.source.choice(signs) for _ in operands[1:])
        return Comparison(operands, operators, span=SPAN)  # type: ignore[arg-type]

    def equality(self, depth: int) -> Syntax:
        within = self.tree(depth) if self.source.random() < 0.5 else None
        operator = self.source.choice(("==", "!=", "in"))
        return Comparison((self.tree(depth), self.tree(depth)), (operator,), within, span=SPAN)  # type: ignore[arg-type]

    def joined(self, depth: int) -> Syntax:
        return Joined(self.source.choice(("and", "or")), self.trees(depth, 2, 4), span=SPAN)

    def conditional(self, depth: int) -> Syntax:
        return Conditional(self.tree(depth), self.tree(depth), self.tree(depth), span=SPAN)

    def call(self, depth: int) -> Syntax:
        function = self.source.choice(("sqrt", "max", "count", "minimum_mass", "engine.torque"))
        return Call(function, self.trees(depth, 0, 3), span=SPAN)

    def member(self, depth: int) -> Syntax:
        return Member(self.tree(depth), self.source.choice((("x",), ("edge", "y"))), span=SPAN)

    def listing(self, depth: int) -> Syntax:
        return Listing(self.trees(depth, 1, 3), span=SPAN)

    def aggregate(self, depth: int) -> Syntax:
        each = self.each(depth)
        bare = self.source.random() < 0.3
        function = self.source.choice(("count", "share") if bare else AGGREGATES)
        expression = None if bare else self.tree(depth)
        return Aggregate(function, expression, each.variables, each.collection, each.where, span=SPAN)

    def each(self, depth: int) -> Each:
        where = self.tree(depth) if self.source.random() < 0.5 else None
        return Each(self.source.choice((("t",), ("a", "b"))), self.tree(depth), where, span=SPAN)

    GROWN = (
        binary,
        binary,
        binary,
        negative,
        negation,
        order,
        equality,
        joined,
        conditional,
        call,
        member,
        listing,
        aggregate,
    )


@given(st.randoms(use_true_random=False), st.integers(0, 4))
@settings(max_examples=300, deadline=None)
def test_parsing_the_print_gives_the_tree(source: random.Random, depth: int) -> None:
    tree = Grower(source).tree(depth)
    assert parse(show(tree)) == tree


@given(st.randoms(use_true_random=False))
@settings(max_examples=50, deadline=None)
def test_parsing_the_print_of_a_loop_gives_the_loop(source: random.Random) -> None:
    each = Grower(source).each(2)
    assert parse_each(Located(show(each), SPAN)) == each


@pytest.mark.long
@pytest.mark.parametrize("seed", range(20))
def test_twenty_thousand_trees_go_through_print_and_parse(seed: int) -> None:
    grower = Grower(random.Random(seed))
    for _ in range(1000):
        tree = grower.tree(5)
        text = show(tree)
        if len(text) <= 10_000:
            assert parse(text) == tree


@given(st.randoms(use_true_random=False))
@settings(max_examples=100, deadline=None)
def test_the_place_of_each_part_holds_the_part(source: random.Random) -> None:
    text = show(Grower(source).tree(3))
    for node in walk(parse(text)):
        assert parse(text[node.span.start : node.span.end]) == node


@given(st.randoms(use_true_random=False))
@settings(max_examples=100, deadline=None)
def test_no_parentheses_are_needless(source: random.Random) -> None:
    """Without any one pair the print is another formula or none, but for pairs kept for the eye."""
    tree = Grower(source).tree(2)
    text = show(tree)
    for start, end in groups(text):
        eye = text[start - 1 : start] == "/" or isinstance(parse(text[start + 1 : end]), Number)
        if eye or text[end + 1 :].startswith(" in "):
            continue  # a unit, a number as base or exponent, and what could end in an inch
        without = f"{text[:start]} {text[start + 1 : end]} {text[end + 1 :]}"
        try:
            assert parse(without) != tree
        except Refused:
            continue


def groups(text: str) -> list[tuple[int, int]]:
    """Where the pairs of parentheses stand that open no call."""
    found, opened = [], []
    for index, character in enumerate(text):
        if character == "(":
            opened.append(index)
        elif character == ")":
            start = opened.pop()
            if not (start and (text[start - 1].isalnum() or text[start - 1] == "_")):
                found.append((start, index))
    return found


PIECES = (
    *"+-*/^()[],<>.=!&|%°'\"#:;{}?@ \t\n",
    *("<=", ">=", "==", "!=", "and", "or", "not", "if", "else", "for", "in", "where", "within", "yes", "no"),
    *(
        "a",
        "t.width",
        "sum",
        "count",
        "5",
        "5 mm",
        "1e3",
        "3/8 in",
        "2027-03-01",
        "0.5",
        "007",
        "²",
        "≤",
        "\u00a0",
        "٣",
    ),
)


def refused_or_read(text: str) -> None:
    where = Located(text, Span("a.yaml", 10, 10 + len(text), 2, 5))
    for read in (parse_formula, parse_each):
        try:
            tree = read(where)
        except Refused as refused:
            check_diagnostics(refused, 10, 10 + len(text))
        else:
            assert read(Located(show(tree), SPAN)) == tree


def check_diagnostics(refused: Refused, start: int, end: int) -> None:
    """Each fault has a place within the formula, and says what is wrong and what to write."""
    assert refused.diagnostics
    for item in refused.diagnostics:
        assert item.span is not None
        assert start <= item.span.start <= item.span.end <= end
        assert item.message
        assert item.expected or item.advice


@given(st.lists(st.sampled_from(PIECES), max_size=25), st.sampled_from(("", " ")))
@settings(max_examples=300, deadline=None)
def test_pieces_in_any_order_are_read_or_refused(pieces: list[str], between: str) -> None:
    refused_or_read(between.join(pieces))


@given(st.text(max_size=30))
@settings(max_examples=200, deadline=None)
def test_any_text_is_read_or_refused(text: str) -> None:
    refused_or_read(text)


@given(st.randoms(use_true_random=False), st.data())
@settings(max_examples=200, deadline=None)
def test_a_formula_with_one_change_is_read_or_refused(source: random.Random, data: st.DataObject) -> None:
    text = show(Grower(source).tree(3))
    place = data.draw(st.integers(0, len(text)))
    piece = data.draw(st.sampled_from(("", *PIECES)))
    skipped = data.draw(st.integers(0, 2))
    refused_or_read(text[:place] + piece + text[place + skipped :])


@pytest.mark.long
def test_a_hundred_thousand_texts_are_read_or_refused() -> None:
    source = random.Random(7)
    for _ in range(100_000):
        pieces = source.choices(PIECES, k=source.randint(0, 30))
        refused_or_read(source.choice(("", " ")).join(pieces))
