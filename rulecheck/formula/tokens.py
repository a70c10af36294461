"""The smallest pieces of a formula and the one pattern that finds them."""

from __future__ import annotations

import re
from typing import Final, NamedTuple

from rulecheck.quantity.numbers import NUMBER_PATTERN

RESERVED: Final = frozenset(("and", "or", "not", "if", "else", "for", "in", "where", "within", "yes", "no"))
"""Words that cannot be names. None but `in` is a unit."""

AGGREGATES: Final = frozenset(("sum", "min", "max", "mean", "deviation", "count", "share", "every", "some"))
"""Functions over the elements of a collection."""

WITHOUT_EXPRESSION: Final = frozenset(("count", "share"))
"""Aggregates that look at the elements alone."""


class Token(NamedTuple):
    """A piece of a formula: characters `start` to `end`.

    `kind` is `number`, `day`, `name`, `text`, `member` (a field behind a bracket), `end`, or the sign or reserved
    word itself. A number keeps its numeral as text and its unit apart.
    """

    kind: str
    text: str
    start: int
    end: int
    unit: str | None = None


# Superscripts and fractions count as letters in patterns, but are none in names and units.
_NO_LETTERS = "\u00b2\u00b3\u00b9\u00bc-\u00be\u2070-\u209c\u2150-\u218b"
_FIRST = rf"[^\W\d{_NO_LETTERS}]"
_NEXT = rf"[^\W{_NO_LETTERS}]"
_BLANK = r"[ \t\r\n]"
_NAME = rf"{_FIRST}{_NEXT}*"
_NOT_RESERVED = rf"(?!(?:{'|'.join(sorted(RESERVED - {'in'}))})(?!{_NEXT}))"
_SYMBOL = rf"{_NOT_RESERVED}(?:{_FIRST}|[%\u00b0])(?:{_NEXT}|[%\u00b0])*"
_FACTOR = rf"{_SYMBOL}(?:\^-?[0-9]+)?"
_FACTORS = rf"{_FACTOR}(?:\*{_FACTOR})*"
_BELOW = rf"/(?:{_FACTOR}|\({_FACTORS}\))"
_STUCK = r"[\w.%\u00b0]"
_PURE = rf"1(?!{_STUCK}|/[0-9])"
_UNIT = rf"(?:{_FACTORS}(?:{_BELOW})?|1{_BELOW}|{_PURE})"

TOKEN: Final = re.compile(
    rf"""{_BLANK}*(?:
      (?P<name>{_NAME}(?:\.{_NAME})*)
    | (?P<trap>&&|\|\||\*\*|//|<>|=<|=>|\+/-|\+[0-9.]+/-[0-9])
    | (?P<sign><=|>=|==|!=|[-+*/^()\[\],<>])
    | (?P<day>[0-9]{{4}}-[0-9]{{2}}-[0-9]{{2}}(?!{_STUCK}))
    | (?P<bad_day>[0-9]{{4}}-[0-9]{{2}}-[0-9]{{2}}{_STUCK}+)
    | (?P<fraction>(?<!\^)(?<!\^-){NUMBER_PATTERN}/{NUMBER_PATTERN}(?={_BLANK}+{_UNIT}))
    | (?P<number>{NUMBER_PATTERN})(?!{_STUCK})(?:{_BLANK}+(?P<unit>{_UNIT}))?
    | (?P<text>"[^"]*")
    | (?P<member>(?<=\))(?:\.{_NAME})+)
    | (?P<bad_number>\.?[0-9](?:[eE][+-](?=[0-9])|{_STUCK})*)
    | (?P<unclosed>".*)
    | (?P<end>\Z)
    | (?P<strange>.)
    )""",
    re.VERBOSE | re.DOTALL,
)
"""Blanks, then one piece, named by its group; a number with unit ends in group `unit`. It matches at every place."""

STUCK_NUMBER: Final = re.compile(
    rf"({NUMBER_PATTERN})(?![eE][0-9+-]|_|(?<=\b0)[xXbBoO])({_NAME}(?:\.{_NAME})*|[%\u00b0]{_NEXT}*)"
)
"""A number with a unit or name directly behind it, which wants a blank."""

BEHIND_UNIT: Final = re.compile(rf"[*/^.(]|{_NEXT}")
"""What may not stand directly behind a unit."""
