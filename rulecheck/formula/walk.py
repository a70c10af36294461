"""Going through a tree: its parts in the order of the text."""

from __future__ import annotations

from collections.abc import Iterator

from rulecheck.formula.syntax import (
    Aggregate,
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


def parts(syntax: Syntax) -> tuple[Syntax, ...]:
    """The operands of a node, in the order of the text; none for a name or a constant."""
    match syntax:
        case Binary():
            return (syntax.left, syntax.right)
        case Comparison():
            return syntax.operands if syntax.within is None else (*syntax.operands, syntax.within)
        case Joined():
            return syntax.operands
        case Call():
            return syntax.arguments
        case Listing():
            return syntax.items
        case Negative() | Not():
            return (syntax.operand,)
        case Member():
            return (syntax.base,)
        case Conditional():
            return (syntax.then, syntax.condition, syntax.otherwise)
        case Aggregate():
            found = (syntax.expression, syntax.collection, syntax.where)
            return tuple(item for item in found if item is not None)
        case _:
            return ()


def walk(syntax: Syntax) -> Iterator[Syntax]:
    """The node and all below it, each before its parts, in the order of the text."""
    waiting = [syntax]
    while waiting:
        node = waiting.pop()
        yield node
        waiting.extend(reversed(parts(node)))


def names(syntax: Syntax) -> tuple[Name, ...]:
    """All names in a formula as often as they stand there, loop variables included.

    >>> from rulecheck.diagnostics import Span
    >>> from rulecheck.formula.parser import parse_formula
    >>> from rulecheck.reading.nodes import Located
    >>> tree = parse_formula(Located("max(a.b, c) * a.b", Span("a.yaml", 0, 17, 1, 1)))
    >>> [".".join(name.path) for name in names(tree)]
    ['a.b', 'c', 'a.b']
    """
    return tuple(node for node in walk(syntax) if isinstance(node, Name))
