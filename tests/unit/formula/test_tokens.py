from __future__ import annotations

import string

from rulecheck.formula.precedence import RANKS
from rulecheck.formula.tokens import AGGREGATES, RESERVED, TOKEN, WITHOUT_EXPRESSION


def test_the_reserved_words_are_those_of_the_language() -> None:
    assert " ".join(sorted(RESERVED)) == "and else for if in no not or where within yes"


def test_the_aggregates_are_those_of_the_language() -> None:
    assert " ".join(sorted(AGGREGATES)) == "count deviation every max mean min share some sum"
    assert {"count", "share"} == WITHOUT_EXPRESSION


def test_the_pattern_matches_at_every_place() -> None:
    text = string.printable + "\u00a0²½µ°Ω√'\"" + string.printable
    ends = [0]
    for found in TOKEN.finditer(text):
        assert found.start() == ends[-1]
        assert found.lastgroup
        ends.append(found.end())
    assert ends[-1] == len(text)


def test_looser_signs_have_lower_ranks() -> None:
    order = ["if", "or", "and", "<=", "+", "*", "^"]
    assert sorted(order, key=RANKS.__getitem__) == order
    assert len({RANKS[sign] for sign in ("<", "<=", ">", ">=", "==", "!=", "in")}) == 1
