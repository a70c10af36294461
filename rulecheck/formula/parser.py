"""Formulas and the heads of `each` to syntax: a small parser that goes by how closely each sign binds.

It reads one token at a time and never goes back. Depth is bounded both ways: of what is still open while reading,
and of the tree that comes out, so that nothing downstream can run out of stack.
"""

from __future__ import annotations

from collections.abc import Callable
from functools import lru_cache
from typing import Literal, cast

from rulecheck.formula import precedence as rank
from rulecheck.formula.syntax import (
    Aggregate,
    Arithmetic,
    Binary,
    Call,
    Comparator,
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
from rulecheck.formula.syntax_advice import (
    BESIDE_CONDITIONAL,
    NO_CHAIN,
    NO_COLLECTION,
    NO_ELSE,
    NO_VARIABLE,
    NOT_BEHIND_OPERATOR,
    Fault,
    aggregate_fault,
    chain_fault,
    within_fault,
)
from rulecheck.formula.token_reader import TokenReader
from rulecheck.formula.tokens import Token
from rulecheck.quantity.numbers import NumberFault, read_number
from rulecheck.reading.nodes import Located

_value = lru_cache(maxsize=4096)(read_number)


def parse_formula(where: Located) -> Syntax:
    """The tree of a formula.

    Raises `Refused` where the text is no formula: `formula-syntax` for most faults, `bad-number` and `too-large` else,
    each with its place in the file. At most 10,000 characters and 100 levels.

    >>> from rulecheck.diagnostics import Span
    >>> tree = parse_formula(Located("t.width <= 356 mm", Span("a.yaml", 0, 17, 1, 1)))
    >>> tree.operators, tree.operands[0].path, tree.operands[1].unit
    (('<=',), ('t', 'width'), 'mm')
    """
    parser = _Parser(where)
    tree = parser.expression(rank.CONDITIONAL)
    parser.finish()
    return tree


def parse_each(where: Located) -> Each:
    """The head of an `each`: `t in tyres where t.axle == rear`, `a, b in pairs(lamps)`.

    Raises `Refused` as `parse_formula` does.

    >>> from rulecheck.diagnostics import Span
    >>> parse_each(Located("a, b in pairs(lamps)", Span("a.yaml", 0, 20, 1, 1))).variables
    ('a', 'b')
    """
    parser = _Parser(where)
    variables, collection, condition = parser.loop()
    parser.finish()
    return Each(variables, collection, condition, span=parser.places.span(0, len(where.text)))


class _Parser(TokenReader):
    """Reads one kind of part a method. An infix method is given what stands left of it, and where that starts."""

    __slots__ = ()

    # Expressions.

    def expression(self, least: int) -> Syntax:
        """What holds together at least as closely as `least`."""
        start = self.token.start
        self.enter()
        left = self.operand(least)
        while True:
            kind = self.token.kind
            closeness = rank.RANKS.get(kind, 0)
            if not closeness or closeness < least:
                break
            left = _INFIX[closeness](self, left, start)
            self.rank = closeness
        self.depth -= 1
        return left

    def operand(self, least: int) -> Syntax:
        """A value, a bracket, or one of the two with a sign or a word before it."""
        token = self.token
        read = _OPERANDS.get(token.kind)
        if read is None:
            self.refuse_operand()
        if token.kind == "not" and least > rank.NOT:
            self.refuse_here(NOT_BEHIND_OPERATOR)
        self.advance()
        self.height = 1
        self.rank = rank.WHOLE
        return read(self, token)

    def arithmetic(self, left: Syntax, start: int) -> Syntax:
        """`left + right` and its like, from the left."""
        height = self.height
        kind = self.advance().kind
        right = self.expression(rank.RANKS[kind] + 1)
        self.check_height(start, 1 + max(height, self.height))
        return Binary(cast(Arithmetic, kind), left, right, span=self.places.span(start, self.last))

    def power(self, left: Syntax, start: int) -> Syntax:
        """`left ^ right`, from the right."""
        height = self.height
        self.advance()
        right = self.expression(rank.POWER)
        self.check_height(start, 1 + max(height, self.height))
        return Binary("^", left, right, span=self.places.span(start, self.last))

    def comparison(self, left: Syntax, start: int) -> Syntax:
        """`a <= b < c`, `x in list`, `a == b within w`."""
        height = self.height
        operands, operators = [left], list[str]()
        while rank.RANKS.get(self.token.kind) == rank.COMPARISON:
            operators.append(self.token.kind)
            self.refuse_if(chain_fault(operators))
            self.advance()
            operands.append(self.expression(rank.SUM))
            height = max(height, self.height)
        within = None
        if self.token.kind == "within":
            self.refuse_if(within_fault(operators))
            self.advance()
            within = self.expression(rank.SUM)
            height = max(height, self.height)
            if rank.RANKS.get(self.token.kind) == rank.COMPARISON:
                self.refuse_here(NO_CHAIN)
        self.check_height(start, 1 + height)
        span = self.places.span(start, self.last)
        return Comparison(tuple(operands), cast(tuple[Comparator, ...], tuple(operators)), within, span=span)

    def joined(self, left: Syntax, start: int) -> Syntax:
        """`a and b and c`, `a or b`: all operands of one word side by side."""
        height = self.height
        word = self.token.kind
        operands = [left]
        while self.token.kind == word:
            self.advance()
            operands.append(self.expression(rank.RANKS[word] + 1))
            height = max(height, self.height)
        self.check_height(start, 1 + height)
        return Joined(cast(Literal["and", "or"], word), tuple(operands), span=self.places.span(start, self.last))

    def conditional(self, then: Syntax, start: int) -> Syntax:
        """`then if condition else otherwise`."""
        height = self.height
        self.check_arm(start)
        self.advance()
        condition = self.expression(rank.OR)
        height = max(height, self.height)
        if self.token.kind != "else":
            self.refuse_here(NO_ELSE)
        self.advance()
        behind = self.token.start
        otherwise = self.expression(rank.CONDITIONAL)
        if self.rank != rank.CONDITIONAL:
            self.check_arm(behind)
        self.check_height(start, 1 + max(height, self.height))
        return Conditional(then, condition, otherwise, span=self.places.span(start, self.last))

    def check_arm(self, start: int) -> None:
        """A comparison beside a conditional could be meant either way."""
        if self.rank <= rank.COMPARISON:
            self.refuse(start, self.last, BESIDE_CONDITIONAL)

    # Operands.

    def number(self, token: Token) -> Syntax:
        """`1900`, `1900 mm`."""
        try:
            value = _value(token.text)
        except NumberFault as fault:
            self.refuse(token.start, token.start + len(token.text), Fault(fault.message, "", fault.advice, fault.code))
        return Number(value, token.unit, token.text, span=self.places.span(token.start, token.end))

    def day(self, token: Token) -> Syntax:
        """`2027-03-01`."""
        return Day(token.text, span=self.places.span(token.start, token.end))

    def text(self, token: Token) -> Syntax:
        """`"25CrMo4"`."""
        return Text(token.text[1:-1], span=self.places.span(token.start, token.end))

    def flag(self, token: Token) -> Syntax:
        """`yes` and `no`."""
        return Flag(token.kind == "yes", span=self.places.span(token.start, token.end))

    def negative(self, token: Token) -> Syntax:
        """`-x`."""
        operand = self.expression(rank.NEGATIVE)
        self.check_height(token.start, 1 + self.height)
        self.rank = rank.NEGATIVE
        return Negative(operand, span=self.places.span(token.start, self.last))

    def negation(self, token: Token) -> Syntax:
        """`not x`."""
        operand = self.expression(rank.NOT)
        self.check_height(token.start, 1 + self.height)
        self.rank = rank.NOT
        return Not(operand, span=self.places.span(token.start, self.last))

    def group(self, token: Token) -> Syntax:
        """`(x)`, and a field behind it."""
        inner = self.expression(rank.CONDITIONAL)
        self.close(token, ")")
        return self.member(inner, token.start)

    def listing(self, token: Token) -> Syntax:
        """`[a, b]`."""
        items = self.arguments(token, "]")
        return Listing(items, span=self.places.span(token.start, self.last))

    def named(self, token: Token) -> Syntax:
        """A name, a call or an aggregate."""
        if self.token.kind != "(":
            return Name(tuple(token.text.split(".")), span=self.places.span(token.start, token.end))
        return self.member(self.call(token, self.advance()), token.start)

    def call(self, name: Token, opened: Token) -> Syntax:
        """`sqrt(x)`, or an aggregate, behind the opening bracket."""
        arguments: tuple[Syntax, ...] = ()
        first = None
        if self.token.kind not in (")", "for"):
            first = self.expression(rank.CONDITIONAL)
        if self.token.kind == "for":
            return self.aggregate(name, opened, first)
        if first is None:
            self.close(opened, ")")
        else:
            arguments = self.arguments(opened, ")", first)
        return Call(name.text, arguments, span=self.places.span(name.start, self.last))

    def arguments(self, opened: Token, closing: str, first: Syntax | None = None) -> tuple[Syntax, ...]:
        """Values with commas between, up to the closing bracket; `first` is one that was read already."""
        items = [self.expression(rank.CONDITIONAL) if first is None else first]
        height = self.height
        while self.token.kind == ",":
            self.advance()
            items.append(self.expression(rank.CONDITIONAL))
            height = max(height, self.height)
        self.close(opened, closing)
        self.check_height(opened.start, 1 + height)
        return tuple(items)

    def member(self, base: Syntax, start: int) -> Syntax:
        """`base.x`, where a field is named behind the bracket."""
        if self.token.kind != "member":
            return base
        path = tuple(self.advance().text[1:].split("."))
        self.check_height(start, 1 + self.height)
        return Member(base, path, span=self.places.span(start, self.last))

    # Loops.

    def aggregate(self, name: Token, opened: Token, expression: Syntax | None) -> Syntax:
        """`sum(x for x in collection where condition)`, from the `for` on."""
        height = self.height if expression is not None else 0
        fault = aggregate_fault(name.text, expression is not None)
        if fault:
            self.refuse(name.start, self.token.end, fault)
        self.advance()
        variables, collection, condition = self.loop()
        height = max(height, self.height)
        self.close(opened, ")")
        self.check_height(name.start, 1 + height)
        span = self.places.span(name.start, self.last)
        return Aggregate(name.text, expression, variables, collection, condition, span=span)

    def loop(self) -> tuple[tuple[str, ...], Syntax, Syntax | None]:
        """`a, b in collection where condition`. Afterwards `height` is that of the higher part."""
        variables = [self.variable(())]
        while self.token.kind == ",":
            self.advance()
            variables.append(self.variable(tuple(variables)))
        if self.token.kind != "in":
            self.refuse_here(NO_COLLECTION)
        self.advance()
        collection = self.expression(rank.SUM)
        if self.token.kind != "where":
            return tuple(variables), collection, None
        height = self.height
        self.advance()
        condition = self.expression(rank.CONDITIONAL)
        self.height = max(height, self.height)
        return tuple(variables), collection, condition

    def variable(self, taken: tuple[str, ...]) -> str:
        """A loop variable: a plain name, each once."""
        token = self.token
        if token.kind != "name" or "." in token.text:
            self.refuse_here(NO_VARIABLE)
        if token.text in taken:
            fault = Fault(f"the loop variable '{token.text}' is named twice", advice="give each its own name")
            self.refuse_here(fault)
        self.advance()
        return token.text


_OPERANDS: dict[str, Callable[[_Parser, Token], Syntax]] = {
    "number": _Parser.number,
    "name": _Parser.named,
    "(": _Parser.group,
    "-": _Parser.negative,
    "not": _Parser.negation,
    "text": _Parser.text,
    "yes": _Parser.flag,
    "no": _Parser.flag,
    "[": _Parser.listing,
    "day": _Parser.day,
}

_INFIX: dict[int, Callable[[_Parser, Syntax, int], Syntax]] = {
    rank.CONDITIONAL: _Parser.conditional,
    rank.OR: _Parser.joined,
    rank.AND: _Parser.joined,
    rank.COMPARISON: _Parser.comparison,
    rank.SUM: _Parser.arithmetic,
    rank.PRODUCT: _Parser.arithmetic,
    rank.POWER: _Parser.power,
}
