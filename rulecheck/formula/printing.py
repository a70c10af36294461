"""A tree as text, with the least parentheses that give the tree again."""

from __future__ import annotations

import re
from collections.abc import Callable
from typing import NamedTuple

from rulecheck.formula import precedence as rank
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
from rulecheck.quantity.numbers import NUMBER_PATTERN

Replace = Callable[[Syntax], str | None]


def show(syntax: Syntax | Each) -> str:
    """The canonical text of a tree, or of the head of an `each`.

    Parsing it gives the tree again. Numbers stand as they were written.

    >>> from rulecheck.diagnostics import Span
    >>> from rulecheck.formula.parser import parse_formula
    >>> from rulecheck.reading.nodes import Located
    >>> show(parse_formula(Located("((a)+b)*75 %  <=(c)", Span("a.yaml", 0, 19, 1, 1))))
    '(a + b) * 75 % <= c'
    """
    return show_with(syntax, lambda node: None)


def show_with(syntax: Syntax | Each, replace: Replace) -> str:
    """The text of a tree in which `replace` may give the text that stands for a node, such as `1900 mm`.

    The text is taken as a number with its unit. It gets parentheses beside `^`, and with a minus behind any sign.

    >>> from rulecheck.diagnostics import Span
    >>> from rulecheck.formula.parser import parse_formula
    >>> from rulecheck.reading.nodes import Located
    >>> tree = parse_formula(Located("a^2 - b", Span("a.yaml", 0, 7, 1, 1)))
    >>> show_with(tree, lambda node: "-3 m" if isinstance(node, Name) else None)
    '(-3 m)^2 - (-3 m)'
    """
    printer = _Printer(replace)
    if isinstance(syntax, Each):
        return printer.loop(syntax)
    return printer.show(syntax).text


class _Shown(NamedTuple):
    """Text and how closely it holds together."""

    text: str
    rank: int


_WITH_BLANK = re.compile(r"\s")
_BARE_END = re.compile(rf"(?<![\w.]){NUMBER_PATTERN}\Z")


class _Printer:
    """Prints each kind of node; the text of a part is put in parentheses where it holds less closely than is due."""

    __slots__ = ("replace",)

    def __init__(self, replace: Replace) -> None:
        self.replace = replace

    def show(self, node: Syntax) -> _Shown:
        given = self.replace(node)
        if given is not None:
            return _Shown(given, rank.SUM if given.startswith("-") else rank.WHOLE)
        return _PRINTERS[type(node)](self, node)

    def part(self, node: Syntax, least: int) -> str:
        shown = self.show(node)
        return shown.text if shown.rank >= least else f"({shown.text})"

    def parts(self, nodes: tuple[Syntax, ...], between: str, least: int) -> str:
        return between.join([self.part(node, least) for node in nodes])

    def number(self, node: Number) -> _Shown:
        return _Shown(node.text if node.unit is None else f"{node.text} {node.unit}", rank.WHOLE)

    def word(self, node: Day) -> _Shown:
        return _Shown(node.text, rank.WHOLE)

    def text(self, node: Text) -> _Shown:
        return _Shown(f'"{node.text}"', rank.WHOLE)

    def flag(self, node: Flag) -> _Shown:
        return _Shown("yes" if node.value else "no", rank.WHOLE)

    def name(self, node: Name) -> _Shown:
        return _Shown(".".join(node.path), rank.WHOLE)

    def member(self, node: Member) -> _Shown:
        base = self.show(node.base)
        closed = isinstance(node.base, Call | Aggregate) and base.text.endswith(")")
        return _Shown(".".join((base.text if closed else f"({base.text})", *node.path)), rank.WHOLE)

    def call(self, node: Call) -> _Shown:
        return _Shown(f"{node.function}({self.parts(node.arguments, ', ', rank.CONDITIONAL)})", rank.WHOLE)

    def listing(self, node: Listing) -> _Shown:
        return _Shown(f"[{self.parts(node.items, ', ', rank.CONDITIONAL)}]", rank.WHOLE)

    def negative(self, node: Negative) -> _Shown:
        return _Shown(f"-{self.part(node.operand, rank.NEGATIVE)}", rank.NEGATIVE)

    def binary(self, node: Binary) -> _Shown:
        if node.operator == "^":
            return _Shown(f"{self.base(node.left)}^{self.exponent(node.right)}", rank.POWER)
        own = rank.RANKS[node.operator]
        return _Shown(f"{self.part(node.left, own)} {node.operator} {self.part(node.right, own + 1)}", own)

    def base(self, node: Syntax) -> str:
        shown = self.show(node)
        plain = shown.rank > rank.POWER and not (self.is_number(node) and _WITH_BLANK.search(shown.text))
        return shown.text if plain else f"({shown.text})"

    def exponent(self, node: Syntax) -> str:
        shown = self.show(node)
        plain = shown.rank >= rank.NEGATIVE and not (self.is_number(node) and _WITH_BLANK.search(shown.text))
        return shown.text if plain else f"({shown.text})"

    def is_number(self, node: Syntax) -> bool:
        return isinstance(node, Number) or self.replace(node) is not None

    def comparison(self, node: Comparison) -> _Shown:
        text = self.part(node.operands[0], rank.SUM)
        if node.operators[0] == "in" and _BARE_END.search(text):
            text = f"({text})"  # else "in" would be the inch
        for operator, operand in zip(node.operators, node.operands[1:], strict=True):
            text += f" {operator} {self.part(operand, rank.SUM)}"
        if node.within is not None:
            text += f" within {self.part(node.within, rank.SUM)}"
        return _Shown(text, rank.COMPARISON)

    def negation(self, node: Not) -> _Shown:
        return _Shown(f"not {self.part(node.operand, rank.NOT)}", rank.NOT)

    def joined(self, node: Joined) -> _Shown:
        own = rank.RANKS[node.word]
        return _Shown(self.parts(node.operands, f" {node.word} ", own + 1), own)

    def conditional(self, node: Conditional) -> _Shown:
        then = self.part(node.then, rank.SUM)
        condition = self.part(node.condition, rank.OR)
        otherwise = self.show(node.otherwise)
        alone = otherwise.rank == rank.CONDITIONAL or otherwise.rank >= rank.SUM
        last = otherwise.text if alone else f"({otherwise.text})"
        return _Shown(f"{then} if {condition} else {last}", rank.CONDITIONAL)

    def aggregate(self, node: Aggregate) -> _Shown:
        before = "" if node.expression is None else f"{self.part(node.expression, rank.CONDITIONAL)} "
        return _Shown(f"{node.function}({before}for {self.loop(node)})", rank.WHOLE)

    def loop(self, node: Aggregate | Each) -> str:
        text = f"{', '.join(node.variables)} in {self.part(node.collection, rank.SUM)}"
        if node.where is not None:
            text += f" where {self.part(node.where, rank.CONDITIONAL)}"
        return text


_PRINTERS: dict[type, Callable[..., _Shown]] = {
    Number: _Printer.number,
    Day: _Printer.word,
    Text: _Printer.text,
    Flag: _Printer.flag,
    Name: _Printer.name,
    Member: _Printer.member,
    Call: _Printer.call,
    Listing: _Printer.listing,
    Negative: _Printer.negative,
    Binary: _Printer.binary,
    Comparison: _Printer.comparison,
    Not: _Printer.negation,
    Joined: _Printer.joined,
    Conditional: _Printer.conditional,
    Aggregate: _Printer.aggregate,
}
