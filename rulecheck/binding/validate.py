"""Everything that a design states, held against the vocabulary: no key unknown, every value of its kind."""

from __future__ import annotations

from rulecheck.binding.bound import Broken
from rulecheck.binding.inputs import VALUE_KEYS, bind_input, bind_point
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.model.design import NONE, LeafNode
from rulecheck.model.vocabulary import Entry
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Sequence


def validate(scope: Scope) -> None:
    """Note every fault of the design as it stands."""
    design = scope.view.design
    for path, node in design.leaves.items():
        _leaf(scope, path, node)
    for path, names in design.items.items():
        vocabulary = scope.shared.vocabulary
        if path and not names and vocabulary.entry(path) is None and not vocabulary.knows_inside(path):
            _unknown(scope, path, design.keys.get(path))


def _leaf(scope: Scope, path: str, node: LeafNode) -> None:
    entry = scope.shared.vocabulary.entry(path)
    holder, _, last = path.rpartition(".")
    above = scope.shared.vocabulary.entry(holder) if holder else None
    if (entry is None and above is not None and above.kind == "point" and last in ("x", "y", "z")) or (
        entry is None and above is not None and above.kind == "point" and last in ("at", "datum")
    ):
        bind_point(scope, holder, above, node.span)
    elif entry is None:
        if not _is_absent_item(scope, path, node):
            _unknown(scope, path, scope.view.design.keys.get(path) or node.span)
    else:
        _value(scope, path, entry, node)


def _is_absent_item(scope: Scope, path: str, node: LeafNode) -> bool:
    return isinstance(node, Located) and node.text == NONE and scope.shared.vocabulary.knows_inside(path)


def _unknown(scope: Scope, path: str, span: Span | None) -> None:
    vocabulary = scope.shared.vocabulary
    holder = path.rpartition(".")[0]
    here = vocabulary.below(holder)
    known = [f"{holder}.{name}" for name in here] if here else [entry.path for entry in vocabulary]
    advice = nearest(path, known) or nearest(path, [entry.path for entry in vocabulary])
    scope.fault("unknown-key", f"no input is called '{path}'", span, expected=" or ".join(here[:12]), advice=advice)


def _value(scope: Scope, path: str, entry: Entry, node: LeafNode) -> None:
    if isinstance(node, Sequence):
        scope.fault("bad-value", f"'{path}' is a single value, not a list", node.span)
        return
    if isinstance(node, Mapping):
        for item in node:
            if item.key.text not in VALUE_KEYS:
                scope.fault(
                    "unknown-key",
                    f"a value has no '{item.key.text}'",
                    item.key.span,
                    expected=" or ".join(VALUE_KEYS),
                    advice=nearest(item.key.text, VALUE_KEYS),
                )
    if isinstance(node, Located) and node.text == NONE:
        return
    if entry.kind == "point":
        bind_point(scope, path, entry, node.span)
    elif entry.kind == "collection":
        scope.fault("bad-structure", f"'{path}' is a collection", node.span, expected="{name: {field: value}}, or none")
    else:
        bound = bind_input(scope, path, entry, node.span)
        if isinstance(bound, Broken):
            return
        _definition(scope, path, entry, node)


def _definition(scope: Scope, path: str, entry: Entry, node: LeafNode) -> None:
    said = node.get("definition") if isinstance(node, Mapping) else None
    if isinstance(said, Located) and entry.definitions and said.text not in entry.definitions:
        scope.fault(
            "unknown-choice", f"'{said.text}' is not a definition of '{path}'", said.span,
            expected=" or ".join(entry.definitions), advice=nearest(said.text, entry.definitions),
        )  # fmt: skip
