"""Going through the tokens of one formula, and refusing what stands in the wrong place."""

from __future__ import annotations

from typing import Final, NoReturn

from rulecheck.diagnostics import Diagnostic, Refused, Related
from rulecheck.formula import precedence as rank
from rulecheck.formula.lexer import check_length, lex
from rulecheck.formula.places import Places
from rulecheck.formula.syntax_advice import Fault, not_closed, operand_due, operator_due, too_deep
from rulecheck.formula.tokens import Token
from rulecheck.reading.nodes import Located

MAXIMUM_DEPTH: Final = 100
"""Levels of a formula: brackets in brackets, and operations in operations, a long sum included."""


class TokenReader:
    """Stands at one token. `rank` and `height` say of the value read last how closely it holds and how high it is."""

    __slots__ = ("depth", "height", "index", "last", "places", "rank", "token", "tokens")

    def __init__(self, where: Located) -> None:
        check_length(where)
        self.places = Places(where)
        self.tokens = lex(where, self.places)
        self.index = 0
        self.token = self.tokens[0]
        self.last = 0
        self.depth = 0
        self.height = 0
        self.rank = rank.WHOLE

    def advance(self) -> Token:
        """Step over the token that the reader stands at; the last one is never stepped over."""
        token = self.token
        self.last = token.end
        self.index += 1
        self.token = self.tokens[self.index]
        return token

    def close(self, opened: Token, closing: str) -> None:
        """Step over the closing bracket."""
        if self.token.kind != closing:
            self.refuse_operator(opened)
        self.advance()
        self.rank = rank.WHOLE

    def finish(self) -> None:
        """Nothing may follow."""
        if self.token.kind != "end":
            self.refuse_operator()

    def check_height(self, start: int, height: int) -> None:
        """Note how high the tree has grown; refuse one that is too high."""
        self.height = height
        if height > MAXIMUM_DEPTH:
            self.refuse(start, self.last, too_deep(MAXIMUM_DEPTH))

    def enter(self) -> None:
        """Note that one more value is open; refuse too many of them."""
        self.depth += 1
        if self.depth > MAXIMUM_DEPTH:
            self.refuse_here(too_deep(MAXIMUM_DEPTH))

    def refuse(self, start: int, end: int, fault: Fault, related: tuple[Related, ...] = ()) -> NoReturn:
        """Raise one fault of the characters from `start` to `end`."""
        place = self.places.span(start, end)
        raise Refused([Diagnostic(fault.code, fault.message, place, fault.expected, fault.advice, related)])

    def refuse_here(self, fault: Fault) -> NoReturn:
        """Raise one fault of the token that the reader stands at."""
        self.refuse(self.token.start, self.token.end, fault)

    def refuse_if(self, fault: Fault | None) -> None:
        """Raise a fault of the token that the reader stands at, where there is one."""
        if fault is not None:
            self.refuse_here(fault)

    def refuse_operand(self) -> NoReturn:
        """The token cannot begin a value."""
        self.refuse_here(operand_due(self.tokens, self.index))

    def refuse_operator(self, opened: Token | None = None) -> NoReturn:
        """The token cannot follow a value, which stands behind the bracket `opened`."""
        fault = operator_due(self.tokens, self.index, opened)
        if opened is None:
            self.refuse_here(fault)
        if self.token.kind == "end":
            self.refuse(opened.start, opened.end, not_closed(opened))
        related = Related("the bracket opens here", self.places.span(opened.start, opened.end))
        self.refuse(self.token.start, self.token.end, fault, (related,))
