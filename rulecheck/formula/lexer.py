"""Formula text to tokens. All lexical faults of a formula are told at once."""

from __future__ import annotations

from typing import Final

from rulecheck.diagnostics import Diagnostic, Faults, Refused
from rulecheck.formula.lexical_advice import Wrong, advise
from rulecheck.formula.places import Places
from rulecheck.formula.tokens import BEHIND_UNIT, RESERVED, TOKEN, Token
from rulecheck.reading.nodes import Located

MAXIMUM_LENGTH: Final = 10_000
"""Characters in one formula."""

MAXIMUM_FAULTS: Final = 10
"""Lexical faults told of one formula; more would hide the first."""

_WRONG: Final = frozenset(("bad_day", "fraction", "trap", "bad_number", "unclosed", "strange"))
_DOTTED: Final = frozenset(("name", "member"))
_LAST: Final = frozenset(("end", "unclosed"))


def check_length(where: Located) -> None:
    """Raise `Refused` with `too-large` where the formula is too long; this comes before all else."""
    length = len(where.text)
    if length > MAXIMUM_LENGTH:
        message = f"the formula has {length} characters, more than {MAXIMUM_LENGTH}"
        raise Refused([Diagnostic("too-large", message, where.part(0, 1), advice="split it into derived figures")])


def lex(where: Located, places: Places) -> list[Token]:
    """The tokens of a formula, with `end` as the last.

    Raises `Refused` with all lexical faults, up to ten.
    """
    text = where.text
    faults = Faults()
    tokens: list[Token] = []
    stuck = -1
    for found in TOKEN.finditer(text):
        group = found.lastgroup or ""
        start, end = found.span(group)
        piece = found[group]
        if group == "unit":
            tokens.append(Token("number", found["number"], found.start("number"), end, _one_micro(piece)))
            if BEHIND_UNIT.match(text, end):
                stuck = end
                advise(Wrong(text, end, end + 1, tokens), "stuck", places, faults)
        elif group == "sign" or piece in RESERVED:
            tokens.append(Token(piece, piece, start, end))
        elif group not in _WRONG:
            tokens.append(Token(group, piece, start, end))
            if "." in piece and group in _DOTTED and not RESERVED.isdisjoint(piece.split(".")):
                advise(Wrong(text, start, end, tokens), "reserved", places, faults)
        elif start != stuck:  # else the same fault once more
            advise(Wrong(text, start, end, tokens), group, places, faults)
        if group in _LAST or len(faults.found) >= MAXIMUM_FAULTS:
            break
    faults.settle()
    return tokens


def _one_micro(unit: str) -> str:
    """The Greek letter and the micro sign are one."""
    return unit.replace("\u03bc", "\u00b5")
