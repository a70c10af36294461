"""Stated numbers as terms: inputs of the graph with what is known of them, or constants."""

from __future__ import annotations

from rulecheck.binding.scope import Scope
from rulecheck.graph.figures import InputFact
from rulecheck.graph.terms import Term
from rulecheck.model.design import NONE, LeafNode, holders
from rulecheck.model.vocabulary import Entry
from rulecheck.operations.values import Monomial
from rulecheck.quantity.quantity import Tolerance, Uncertainty
from rulecheck.quantity.units import Unit
from rulecheck.reading.nodes import Located, Mapping


def scalar(node: LeafNode | None) -> Located | None:
    """The text of a leaf, also where it stands with what is known about it."""
    if isinstance(node, Mapping):
        inner = node.get("value")
        return inner if isinstance(inner, Located) else None
    return node if isinstance(node, Located) else None


def beside(node: LeafNode | None, key: str) -> str:
    """What a value says of itself: its basis, reference, definition."""
    inner = node.get(key) if isinstance(node, Mapping) else None
    return inner.text if isinstance(inner, Located) else ""


def leaf(
    scope: Scope,
    path: str,
    node: LeafNode,
    value: Monomial,
    unit: Unit,
    spread: Uncertainty | Tolerance | None,
    by_state: bool,
) -> Term:
    """The term of a stated number: an input of the graph, or a constant where a state or a default sets it.

    What a state sets with a spread is an input too, by its path and that state, so that the spread counts.
    """
    if node.span.file == "default" or (by_state and spread is None):
        return scope.bank.constant(value, "number", unit.dimension, node.span)
    setting = _setting(scope, path) if by_state else ""
    name = f"{path} ({setting})" if setting else path
    if name not in scope.shared.inputs:
        scope.shared.inputs[name] = value
        shown = scalar(node)
        scope.shared.facts[name] = InputFact(
            name, unit, node.span, basis_of(scope, path, node), beside(node, "reference"),
            shown.text if shown else "", setting, spread, _sign(scope, path),
        )  # fmt: skip
    return scope.bank.input(name, "number", unit.dimension, node.span)


def _sign(scope: Scope, path: str) -> str:
    entry = scope.shared.vocabulary.entry(path)
    return entry.sign if entry is not None else ""


def _setting(scope: Scope, path: str) -> str:
    """The state that sets a path, in words."""
    stated = scope.shared.base.design.states
    for axis, name in scope.view.states:
        state = stated.get(axis, {}).get(name)
        if state is not None and any(holder in state.overlay.paths for holder in holders(path)):
            return f"{axis} {name}"
    return ", ".join(f"{axis} {name}" for axis, name in scope.view.states)


def basis_of(scope: Scope, path: str, node: LeafNode) -> str:
    """Where a value comes from: said beside it, or by the item that it belongs to."""
    own = beside(node, "basis")
    if own:
        return own
    item = path.rpartition(".")[0]
    while item:
        shared = scope.view.design.leaves.get(f"{item}.basis")
        if isinstance(shared, Located):
            return shared.text
        entry = scope.shared.vocabulary.entry(f"{item}.basis")
        if entry is not None:
            return entry.default
        item = item.rpartition(".")[0]
    return ""


def without_basis(scope: Scope, path: str, entry: Entry, node: LeafNode | None) -> str:
    """What a stated value lacks of the basis that a ruleset asks for; empty where it lacks nothing."""
    if not entry.basis or node is None or (isinstance(node, Located) and node.text == NONE):
        return ""
    found = basis_of(scope, path, node)
    if found != entry.basis:
        return f"{path} with the basis '{entry.basis}' (stated: {found or 'none'})"
    if entry.basis == "supplier" and not beside(node, "reference").strip():
        return f"the reference of {path}, which is the maker's data sheet"
    return ""
