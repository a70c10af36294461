"""The changes that are made to one node of a syntax tree, each with its name."""

from __future__ import annotations

import ast
from collections.abc import Iterator

Change = tuple[ast.AST, str]

_COMPARED: dict[type[ast.cmpop], tuple[type[ast.cmpop], ...]] = {
    ast.Lt: (ast.LtE, ast.GtE),
    ast.LtE: (ast.Lt, ast.Gt),
    ast.Gt: (ast.GtE, ast.LtE),
    ast.GtE: (ast.Gt, ast.Lt),
    ast.Eq: (ast.NotEq,),
    ast.NotEq: (ast.Eq,),
    ast.Is: (ast.IsNot,),
    ast.IsNot: (ast.Is,),
    ast.In: (ast.NotIn,),
    ast.NotIn: (ast.In,),
}

_COUNTED: dict[type[ast.operator], type[ast.operator]] = {
    ast.Add: ast.Sub,
    ast.Sub: ast.Add,
    ast.Mult: ast.Add,
    ast.Div: ast.Mult,
}

_WORDS = {
    # verdicts, standings, reasons
    "complies": "breach", "breach": "complies", "open": "unproven", "unproven": "open", "tight": "complies",
    "dispensed": "complies", "not applicable": "complies", "not followed": "breach",
    "shall": "should", "should": "shall", "may": "shall", "note": "shall",
    "missing": "undefined", "contradiction": "undefined", "undefined": "missing",
    # comparisons and logic
    "<": "<=", "<=": "<", ">": ">=", ">=": ">", "==": "!=", "!=": "==", "in": "==",
    "and": "or", "or": "and", "every": "some", "some": "every",
    "at most": "at least", "at least": "at most", "within": "at most", "one of": "at most", "until": "at most",
    # kinds
    "constant": "apply", "comparison": "flag", "evidence": "flag", "judgement": "flag",
    "days": "min", "day": "h", "degC": "degF", "degF": "degC", "dB": "dBA",
    # rows of tables, fields of a judgement
    "up_to": "below", "below": "up_to", "is": "below", "when": "is",
    "verdict": "role", "role": "reason", "reason": "role", "date": "role",
}  # fmt: skip

_NAMES = {
    "min": "max", "max": "min", "any": "all", "all": "any",
    "all_of": "any_of", "any_of": "all_of", "AllOf": "AnyOf", "AnyOf": "AllOf",
    "_least": "_greatest", "_greatest": "_least", "both": "either", "either": "both",
    "below": "at_most", "at_most": "below", "low": "high", "high": "low",
    "small": "large", "large": "small", "near": "far", "far": "near",
    "x0": "x1", "x1": "x0", "y0": "y1", "y1": "y0", "add": "subtract", "subtract": "add",
    "multiply": "divide", "divide": "multiply", "maximum": "minimum",
}  # fmt: skip

_FIELDS = {
    "low": "high", "high": "low", "first": "last", "last": "first", "applies": "exempt", "exempt": "applies",
}  # fmt: skip

_ORDERED = ("subtract", "divide", "below", "at_most")
"""Operations whose operands are exchanged; with the others the order makes no difference."""


def changes(node: ast.AST) -> Iterator[Change]:
    """All changes of one node: what stands there instead, and the name of the change."""
    for change, said in _made(node):
        yield change, said or f"{_text(node)} -> {_text(change)}"


def _made(node: ast.AST) -> Iterator[tuple[ast.AST, str]]:
    match node:
        case ast.stmt():
            yield from _statements(node)
        case ast.comprehension(ifs=[_, *_]):
            yield ast.comprehension(node.target, node.iter, [], node.is_async), f"all taken: {_text(node)}"
        case ast.Name(id=name, ctx=ast.Load()) if name in _NAMES:
            yield ast.Name(_NAMES[name], ast.Load()), ""
        case ast.Attribute(value=value, attr=attr, ctx=ast.Load()) if attr in _FIELDS:
            yield ast.Attribute(value, _FIELDS[attr], ast.Load()), ""
        case ast.Constant():
            yield from _constants(node)
        case ast.expr():
            yield from _expressions(node)


def _expressions(node: ast.expr) -> Iterator[tuple[ast.AST, str]]:
    match node:
        case ast.Compare():
            yield from _comparisons(node)
        case ast.BoolOp():
            yield from _joined(node)
        case ast.UnaryOp(op=ast.Not() | ast.USub(), operand=operand):
            yield operand, ""
        case ast.BinOp(op=op) if type(op) in _COUNTED:
            yield ast.BinOp(node.left, _COUNTED[type(op)](), node.right), ""
        case ast.Call():
            yield from _exchanged(node)
        case ast.IfExp():
            yield node.body, ""
            yield node.orelse, ""


def _exchanged(node: ast.Call) -> Iterator[tuple[ast.AST, str]]:
    match node.args:
        case [ast.expr() as operation, ast.List(elts=[one, other]), *rest] if _is_ordered(operation):
            yield ast.Call(node.func, [operation, ast.List([other, one], ast.Load()), *rest], node.keywords), ""
        case [ast.expr() as scope, ast.expr() as operation, one, other] if _is_ordered(operation):
            yield ast.Call(node.func, [scope, operation, other, one], node.keywords), ""
        case [ast.Name(id="scope") as scope, one, other] if getattr(node.func, "id", "") == "_ordinals":
            yield ast.Call(node.func, [scope, other, one], node.keywords), ""


def _is_ordered(operation: ast.expr) -> bool:
    words = {part.id for part in ast.walk(operation) if isinstance(part, ast.Name)}
    return not words.isdisjoint(_ORDERED)


def _comparisons(node: ast.Compare) -> Iterator[tuple[ast.AST, str]]:
    for index, op in enumerate(node.ops):
        for other in _COMPARED[type(op)]:
            ops = [*node.ops[:index], other(), *node.ops[index + 1 :]]
            yield ast.Compare(node.left, ops, node.comparators), ""


def _joined(node: ast.BoolOp) -> Iterator[tuple[ast.AST, str]]:
    yield ast.BoolOp(ast.Or() if isinstance(node.op, ast.And) else ast.And(), node.values), ""
    for index in range(len(node.values)):
        rest = [*node.values[:index], *node.values[index + 1 :]]
        yield rest[0] if len(rest) == 1 else ast.BoolOp(node.op, rest), ""


def _constants(node: ast.Constant) -> Iterator[tuple[ast.AST, str]]:
    value = node.value
    if isinstance(value, bool):
        yield ast.Constant(not value), ""
    elif isinstance(value, int):
        yield ast.Constant(value + 1), ""
    elif isinstance(value, str) and value in _WORDS:
        yield ast.Constant(_WORDS[value]), ""


def _statements(node: ast.stmt) -> Iterator[tuple[ast.AST, str]]:
    match node:
        case ast.If(test=test):
            yield ast.If(ast.Constant(True), node.body, node.orelse), f"always: if {_text(test)}"
            yield ast.If(ast.Constant(False), node.body, node.orelse), f"never: if {_text(test)}"
        case ast.Return(value=ast.expr() as value) if not _says_nothing(value):
            yield ast.Return(ast.Constant(None)), ""
        case ast.Expr() | ast.Assign() | ast.AugAssign() | ast.Continue() | ast.Break():
            yield ast.Pass(), f"dropped: {_text(node)}"


def _says_nothing(value: ast.expr) -> bool:
    """None, and what is as good as None for whoever only asks whether there is something."""
    if isinstance(value, (ast.Tuple, ast.List)):
        return not value.elts
    return isinstance(value, ast.Constant) and not value.value


def _text(node: ast.AST) -> str:
    """A node as text on one line, cut where it is long."""
    if isinstance(node, ast.comprehension):
        return ast.unparse(ast.ListComp(ast.Constant(0), [node]))[3:-1]
    text = " ".join(ast.unparse(ast.fix_missing_locations(node)).split())
    return text if len(text) <= 110 else f"{text[:107]}..."
