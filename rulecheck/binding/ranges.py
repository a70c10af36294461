"""Extents: least and greatest along an axis, as one value of two lengths or each end by itself."""

from __future__ import annotations

from dataclasses import replace

from rulecheck.binding.bound import Number
from rulecheck.binding.inputs import number_at, stated
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.model.design import NONE, LeafNode
from rulecheck.model.vocabulary import Entry
from rulecheck.operations.values import Monomial
from rulecheck.quantity.units import find_unit
from rulecheck.reading.nodes import Located, Mapping, Sequence


def bind_range(scope: Scope, path: str, entry: Entry, span: Span) -> tuple[Number, Number] | None:
    """Least and greatest of an extent as stated, before the datum is added; None where nothing is stated."""
    scope.touched.add(path)
    node = stated(scope, path)
    whole = _two_lengths(scope, path, node) if node is not None else None
    own = [stated(scope, f"{path}.{end}") for end in ("from", "to")]
    if (node is None or (isinstance(node, Located) and node.text == NONE)) and own == [None, None]:
        return None
    unit, ends = find_unit(entry.unit or "mm"), []
    for index, end in enumerate(("from", "to")):
        single = scope.shared.vocabulary.entry(f"{path}.{end}")
        assert single is not None
        given = whole[index] if whole is not None and own[index] is None else own[index]
        # A state that sets the whole extent sets both of its ends.
        held = replace(scope, view=replace(scope.view, set_paths=scope.view.set_paths | {f"{path}.{end}"}))
        bound = number_at(held if path in scope.view.set_paths else scope, f"{path}.{end}", single, given, span)
        ends.append(bound if isinstance(bound, Number) else Number(scope.missing(path, "number", unit.dimension), unit))
    _check_order(scope, path, ends, node or own[1] or own[0])
    return ends[0], ends[1]


def _check_order(scope: Scope, path: str, ends: list[Number], node: LeafNode | None) -> None:
    values = []
    for end in ends:
        known = scope.shared.inputs.get(end.term.path) if end.term.kind == "input" else end.term.value
        values.append(known.rational if isinstance(known, Monomial) else None)
    low, high = values
    if low is not None and high is not None and low > high:
        told = f"the extent '{path}' ends before it begins"
        scope.fault("bad-value", told, node.span if node is not None else None, expected="the lesser end first")


def _two_lengths(scope: Scope, path: str, node: LeafNode) -> tuple[LeafNode, LeafNode] | None:
    if isinstance(node, Located) and node.text == NONE:
        return None
    items = [item for item in node if isinstance(item, (Located, Mapping))] if isinstance(node, Sequence) else []
    if len(items) == 2:
        return items[0], items[1]
    scope.fault(
        "bad-value", f"'{path}' is an extent", node.span, expected="two lengths, such as [-40 mm, 310 mm]",
        advice=f"or set '{path}.from' and '{path}.to'",
    )  # fmt: skip
    return None
