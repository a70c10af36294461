"""How closely signs hold together, held against Python's own parser.

Source: The Python Language Reference, section 6.17, "Operator precedence", by way of the standard library's `ast`. It
ranks power (from the right), minus, product, sum, comparison, not, and, or, conditional in the order of our language,
and a minus may stand behind the power sign in both. Where ours is stricter it refuses and is not compared.
"""

from __future__ import annotations

import ast
import random

import pytest

from rulecheck.diagnostics import Refused, Span
from rulecheck.formula.parser import parse_formula
from rulecheck.formula.syntax import (
    Binary,
    Call,
    Comparison,
    Conditional,
    Joined,
    Listing,
    Member,
    Name,
    Negative,
    Not,
    Syntax,
)
from rulecheck.reading.nodes import Located

SPAN = Span("a.yaml", 0, 0, 1, 1)
SIGNS: dict[type, str] = {
    ast.Add: "+",
    ast.Sub: "-",
    ast.Mult: "*",
    ast.Div: "/",
    ast.Pow: "^",
    ast.Lt: "<",
    ast.LtE: "<=",
    ast.Gt: ">",
    ast.GtE: ">=",
    ast.Eq: "==",
    ast.NotEq: "!=",
    ast.In: "in",
    ast.And: "and",
    ast.Or: "or",
}
ARITHMETIC = ("+", "-", "*", "/", "^")
ANY = (*ARITHMETIC, *ARITHMETIC, "<", "<=", ">", ">=", "==", "!=", "in", "and", "or")


def from_python(node: ast.expr) -> Syntax:
    """Python's tree in our nodes."""
    match node:
        case ast.BinOp():
            sign = SIGNS[type(node.op)]
            return Binary(sign, from_python(node.left), from_python(node.right), span=SPAN)  # type: ignore[arg-type]
        case ast.BoolOp():
            word = SIGNS[type(node.op)]
            return Joined(word, tuple(map(from_python, node.values)), span=SPAN)  # type: ignore[arg-type]
        case ast.UnaryOp(op=ast.USub()):
            return Negative(from_python(node.operand), span=SPAN)
        case ast.UnaryOp(op=ast.Not()):
            return Not(from_python(node.operand), span=SPAN)
        case ast.Compare():
            operands = (from_python(node.left), *map(from_python, node.comparators))
            signs = tuple(SIGNS[type(sign)] for sign in node.ops)
            return Comparison(operands, signs, span=SPAN)  # type: ignore[arg-type]
        case ast.IfExp():
            return Conditional(from_python(node.body), from_python(node.test), from_python(node.orelse), span=SPAN)
        case ast.Name():
            return Name((node.id,), span=SPAN)
        case ast.Call(func=ast.Name(id=function)):
            return Call(function, tuple(map(from_python, node.args)), span=SPAN)
        case ast.Attribute():
            return Member(from_python(node.value), (node.attr,), span=SPAN)
        case ast.List():
            return Listing(tuple(map(from_python, node.elts)), span=SPAN)
    raise AssertionError(ast.dump(node))


def text_at_random(source: random.Random, signs: tuple[str, ...], depth: int) -> str:
    """Operands and signs in a row: what holds together is for the two parsers to say."""
    pieces = [operand_at_random(source, signs, depth)]
    for _ in range(source.randint(0, 6)):
        pieces += [source.choice(signs), operand_at_random(source, signs, depth)]
    row = " ".join(pieces)
    if signs is ANY and depth and source.random() < 0.2:
        row += f" if {text_at_random(source, signs, depth - 1)} else {text_at_random(source, signs, depth - 1)}"
    return row


def operand_at_random(source: random.Random, signs: tuple[str, ...], depth: int) -> str:
    before = "-" if source.random() < 0.2 else "not " if signs is ANY and source.random() < 0.15 else ""
    if depth and source.random() < 0.3:
        inner = text_at_random(source, signs, depth - 1)
        return before + source.choice((f"({inner})", f"f({inner}, a)", f"f({inner}).x", f"[{inner}]"))
    return before + source.choice("abcde")


@pytest.mark.parametrize(("signs", "least"), [(ARITHMETIC, 1000), (ANY, 150)], ids=["arithmetic", "any"])
def test_the_same_tree_as_python(signs: tuple[str, ...], least: int) -> None:
    source = random.Random(11)
    compared = 0
    for _ in range(1000):
        text = text_at_random(source, signs, 2)
        try:
            tree = parse_formula(Located(text, SPAN))
        except Refused:
            continue
        assert tree == from_python(ast.parse(text.replace("^", "**"), mode="eval").body), text
        compared += 1
    assert compared >= least


@pytest.mark.parametrize(
    "text",
    ["a <= b < c", "a > b >= c", "not a == b", "a == b and c or not d", "-a ^ -b ^ c", "a if b else c if d else e"],
)
def test_the_same_tree_as_python_for_the_forms_of_the_language(text: str) -> None:
    python = ast.parse(text.replace("^", "**"), mode="eval").body
    assert parse_formula(Located(text, SPAN)) == from_python(python)
