"""Everything that a design states, held against the vocabulary: no key unknown, every value of its kind."""

from __future__ import annotations

from dataclasses import replace

from rulecheck.binding.bodies import corners_of
from rulecheck.binding.bound import Broken
from rulecheck.binding.curves import bind_curve
from rulecheck.binding.external import TRACK, track_of
from rulecheck.binding.inputs import VALUE_KEYS, bind_input, quantity
from rulecheck.binding.leaves import scalar
from rulecheck.binding.points import from_datum, place_of, zero_place
from rulecheck.binding.ranges import bind_range
from rulecheck.binding.scope import Scope
from rulecheck.binding.signals import check_statement
from rulecheck.binding.states import combined_view
from rulecheck.diagnostics import Span
from rulecheck.model.design import NONE, LeafNode
from rulecheck.model.vocabulary import Entry
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Sequence

READ_BY_THEMSELVES = ("number", "point", "outline", "range")
"""Kinds whose reading notes every fault of a value."""


def validate(scope: Scope) -> None:
    """Note every fault of the design as it stands, and of its states."""
    design = scope.view.design
    track_of(scope)
    for path, node in design.leaves.items():
        _leaf(scope, path, node)
    for path, names in design.items.items():
        if path and not names:
            _nothing_inside(scope, path, design.keys.get(path))
    for name in design.names("datums") or ():
        span = design.keys.get(f"datums.{name}")
        if span is not None:
            from_datum(scope.apart(), zero_place(scope), name, span, ())
    for axis in design.states.values():
        for state in axis.values():
            inner = replace(scope, view=combined_view(scope.shared, [state]))
            if TRACK in state.overlay.paths:
                track_of(inner)
            for path, node in state.overlay.settings:
                _leaf(inner, path, node)


def _nothing_inside(scope: Scope, path: str, span: Span | None) -> None:
    entry, vocabulary = scope.shared.vocabulary.entry(path), scope.shared.vocabulary
    if entry is None and not vocabulary.knows_inside(path):
        _unknown(scope, path, span)
    elif entry is not None and entry.kind != "collection":
        scope.fault("bad-value", f"'{path}' has no value", span, advice="give it one, or take the key out")


def _leaf(scope: Scope, path: str, node: LeafNode) -> None:
    entry = scope.shared.vocabulary.entry(path)
    holder, _, last = path.rpartition(".")
    above = scope.shared.vocabulary.entry(holder) if holder else None
    if (entry is None and above is not None and above.kind == "point" and last in ("x", "y", "z")) or (
        entry is None and above is not None and above.kind == "point" and last in ("at", "datum")
    ):
        place_of(scope, holder, above, node.span)
    elif entry is not None:
        _value(scope, path, entry, node)
    elif _is_absent_item(scope, path, node):
        return
    elif scope.shared.vocabulary.knows_inside(path):
        inside = " or ".join(scope.shared.vocabulary.below(path)[:12])
        scope.fault("bad-structure", f"'{path}' holds other keys, not a value", node.span, expected=inside)
    else:
        _unknown(scope, path, scope.view.design.keys.get(path) or node.span)


def _is_absent_item(scope: Scope, path: str, node: LeafNode) -> bool:
    return isinstance(node, Located) and node.text == NONE and scope.shared.vocabulary.knows_inside(path)


def _unknown(scope: Scope, path: str, span: Span | None) -> None:
    vocabulary = scope.shared.vocabulary
    holder = path.rpartition(".")[0]
    here = vocabulary.below(holder)
    known = [f"{holder}.{name}" if holder else name for name in here] or [entry.path for entry in vocabulary]
    advice = nearest(path, known) or nearest(path, [entry.path for entry in vocabulary])
    scope.fault("unknown-key", f"no input is called '{path}'", span, expected=" or ".join(here[:12]), advice=advice)


def _value(scope: Scope, path: str, entry: Entry, node: LeafNode) -> None:
    if entry.kind == "collection":
        if not (isinstance(node, Located) and node.text == NONE):
            scope.fault(
                "bad-structure", f"'{path}' is a collection", node.span, expected="{name: {field: value}}, or none"
            )
        return
    if entry.kind in ("curve", "map"):
        bind_curve(scope, path, entry)
        return
    if entry.kind == "signal":
        check_statement(scope, path, node)
        return
    if entry.kind not in READ_BY_THEMSELVES and not _is_single(scope, path, node):
        return
    if isinstance(node, Located) and node.text == NONE:
        return
    if entry.kind == "point":
        place_of(scope, path, entry, node.span)
    elif entry.kind == "outline":
        corners_of(scope, path)
    elif entry.kind == "range":
        bind_range(scope, path, entry, node.span)
    elif not isinstance(bind_input(scope, path, entry, node.span), Broken):
        _definition(scope, path, entry, node)
        _sign(scope, path, entry, node)


def _sign(scope: Scope, path: str, entry: Entry, node: LeafNode) -> None:
    """A mass below zero, a wheelbase of zero: a slip that might even mend a rule."""
    read = quantity(scope, entry, node) if entry.sign and entry.kind == "number" else None
    if read is None:
        return
    size = read.si()[0]
    if size < 0 or (size == 0 and entry.sign == "more than 0"):
        shown = scalar(node)
        said = "is below zero" if size < 0 else "is zero"
        told = f"'{path}' {said}" + (f": {shown.text}" if shown else "")
        scope.fault("bad-value", told, node.span, expected=f"a value that is {entry.sign}")


def _is_single(scope: Scope, path: str, node: LeafNode) -> bool:
    """False, with the faults noted, where a word, flag or date is not written as one."""
    if isinstance(node, Sequence):
        scope.fault("bad-value", f"'{path}' is a single value, not a list", node.span)
        return False
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
        if not isinstance(node.get("value"), Located):
            scope.fault("bad-value", f"'{path}' is a single value", node.span)
            return False
    return True


def _definition(scope: Scope, path: str, entry: Entry, node: LeafNode) -> None:
    said = node.get("definition") if isinstance(node, Mapping) else None
    if isinstance(said, Located) and entry.definitions and said.text not in entry.definitions:
        scope.fault(
            "unknown-choice", f"'{said.text}' is not a definition of '{path}'", said.span,
            expected=" or ".join(entry.definitions), advice=nearest(said.text, entry.definitions),
        )  # fmt: skip
