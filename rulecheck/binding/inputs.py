"""Inputs: what a design gives under a path, by the kind that the vocabulary tells."""

from __future__ import annotations

from collections.abc import Mapping as MappingOf
from dataclasses import replace
from datetime import date
from typing import Any

from rulecheck.binding.bound import BROKEN, Bound, Date, Item, Items, Number, Truth, Words
from rulecheck.binding.implied import IMPLIED, implied
from rulecheck.binding.leaves import beside, leaf, scalar, without_basis
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Faults, Span
from rulecheck.graph.terms import Term
from rulecheck.model.design import NONE, LeafNode, holders
from rulecheck.model.vocabulary import Entry
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import PURE, Dimension
from rulecheck.quantity.quantity import Quantity
from rulecheck.quantity.reading_records import read_stated, read_stated_point
from rulecheck.quantity.reading_values import read_day
from rulecheck.quantity.units import Unit, UnitFault, find_unit
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Sequence

VALUE_KEYS = ("value", "uncertainty", "coverage", "shape", "tolerance", "basis", "reference", "definition")


def unit_of(entry: Entry, scope: Scope) -> Unit:
    """The unit in which an input is spoken of."""
    try:
        return find_unit(entry.unit or "1", scope_units(scope))
    except UnitFault as fault:
        scope.fault("unknown-unit", str(fault), entry.span, advice=fault.advice)
        return find_unit("1")


def scope_units(scope: Scope) -> MappingOf[str, Dimension]:
    """Base units that any ruleset in use, or named by the design, declares."""
    return scope.shared.units


def bind_input(scope: Scope, path: str, entry: Entry, span: Span) -> Bound:
    """The value of an input that is no point: a number leaf, or a constant that is settled here."""
    scope.touched.add(path)
    moved = scope.view.changes(path) or (path in IMPLIED and scope.view.changes_any(IMPLIED[path][:1]))
    key = ("input", path, scope.view.states if moved else ())
    bound: Bound | None = scope.shared.memo.get(key)
    if bound is None:
        bound = scope.shared.memo[key] = _bind_input(scope, path, entry, span)
    return bound


def _bind_input(scope: Scope, path: str, entry: Entry, span: Span) -> Bound:
    if entry.kind == "collection":
        return collection(scope, path, entry)
    node = stated(scope, path)
    bound = _of_kind(scope, path, entry, node, span)
    if path in scope.view.given:
        return bound  # its value does not come from the design
    gap = without_basis(scope, path, entry, node)
    if not gap or node is None or not isinstance(bound, (Number, Truth, Words, Date)):
        return bound
    return replace(bound, term=scope.missing(gap, bound.term.sort, bound.term.dimension, node.span))


def _of_kind(scope: Scope, path: str, entry: Entry, node: LeafNode | None, span: Span) -> Bound:
    if entry.kind == "number":
        return number_at(scope, path, entry, node, span)
    if entry.kind == "flag":
        return _flag(scope, path, entry, node, span)
    if entry.kind == "date":
        return _date(scope, path, node, span)
    if entry.kind == "item":
        return _item(scope, path, entry, node, span)
    if entry.kind in ("outline", "range"):
        what = "an outline" if entry.kind == "outline" else "an extent"
        told = f"'{path}' is {what}, and formulas calculate with numbers"
        return scope.fault("kind-mismatch", told, span, advice="hold it against a zone with 'inside' or 'outside'")
    return _words(scope, path, entry, node, span)


def stated(scope: Scope, path: str) -> LeafNode | None:
    """What the design states under a path in this state; None where nothing is, or `none`."""
    node = scope.view.design.leaves.get(path)
    return node


def quantity(scope: Scope, entry: Entry, node: LeafNode) -> Quantity | None:
    """A leaf as a quantity; read once."""
    # An alias lets one value stand in several places, which may ask for several units.
    key = (id(node), entry.unit)
    known = scope.shared.parsed.get(key)
    if known is not None:
        return known[1]  # type: ignore[no-any-return]
    value = _read(scope, entry, node)
    scope.shared.parsed[key] = (node, value)
    return value


def _read(scope: Scope, entry: Entry, node: LeafNode) -> Quantity | None:
    if isinstance(node, Sequence) or scalar(node) is None:
        scope.fault(
            "bad-value",
            f"'{entry.path}' is a number",
            node.span,
            expected=f"a value in {entry.unit}, such as '10 {entry.unit}'",
        )
        return None
    unit = unit_of(entry, scope)
    return read_stated(
        node, unit.dimension, own=scope_units(scope), missing_blank=node.span.file.startswith("--"), declared=unit,
        faults=scope.shared.faults,
    )  # fmt: skip


def number_at(scope: Scope, path: str, entry: Entry, node: LeafNode | None, span: Span) -> Bound:
    """A number as a leaf states it, whatever the leaf's own path."""
    unit = unit_of(entry, scope)
    if path in scope.view.given:
        return Number(scope.view.given[path], unit)
    if node is None and entry.default:
        node = _default(scope, entry)
    counted = entry.unit == "1"
    if node is None or (isinstance(node, Located) and node.text == NONE):
        return Number(_not_stated(scope, path, unit, span), unit, counted)
    read = quantity(scope, entry, node)
    if read is None:
        return BROKEN
    if entry.definition and beside(node, "definition") != entry.definition:
        found = beside(node, "definition") or "none"
        what = f"{path} by the definition '{entry.definition}' (stated: {found})"
        return Number(scope.missing(what, "number", unit.dimension, node.span), unit)
    rational, power = read.si()
    term = leaf(scope, path, node, Monomial(rational, power), unit, read.spread_si(), path in scope.view.set_paths)
    return Number(term, unit, counted)


def _not_stated(scope: Scope, path: str, unit: Unit, span: Span) -> Term:
    """An input without a value; in a state that takes it away, not the one that the design has otherwise."""
    if any(holder in scope.view.set_paths for holder in holders(path)):
        return scope.missing(path, "number", unit.dimension, span)
    return scope.bank.input(path, "number", unit.dimension, span)


def _default(scope: Scope, entry: Entry) -> Located:
    """The default as a leaf; one object an entry, so that it is read once."""
    key = ("default", entry.path)
    if key not in scope.shared.memo:
        scope.shared.memo[key] = Located(entry.default, Span("default", 0, len(entry.default), 1, 1))
    made: Located = scope.shared.memo[key]
    return made


def _flag(scope: Scope, path: str, entry: Entry, node: LeafNode | None, span: Span) -> Bound:
    if node is None and entry.default:
        node = _default(scope, entry)
    where = scalar(node)
    if node is None or (where and where.text == NONE):
        return Truth(scope.bank.input(path, "flag", PURE, span))
    if where is None or where.text not in ("yes", "no"):
        return scope.fault("bad-value", f"'{path}' is a flag", node.span, expected="yes or no")
    return Truth(scope.bank.flag(where.text == "yes"))


def _date(scope: Scope, path: str, node: LeafNode | None, span: Span) -> Bound:
    where = scalar(node)
    if node is None or (where and where.text == NONE):
        return Date(scope.bank.input(path, "date", PURE, span))
    if where is None:
        return scope.fault("bad-value", f"'{path}' is a date", node.span, expected="a date such as 2027-03-01")
    day = _day(where, scope.shared.faults)
    return Date(scope.bank.day(day)) if day else BROKEN


def _day(where: Located, faults: Faults) -> date | None:
    return read_day(where, faults)


def _item(scope: Scope, path: str, entry: Entry, node: LeafNode | None, span: Span) -> Bound:
    where = scalar(node)
    if where is None:
        # Nothing is said: its fields are looked up under a name that no item has.
        return Item(f"{entry.of}.*")
    if where.text not in (scope.view.design.names(entry.of) or ()):
        known = scope.view.design.names(entry.of) or ()
        return scope.fault(
            "unknown-name", f"'{where.text}' is no item of {entry.of}", where.span, advice=nearest(where.text, known)
        )
    return Item(f"{entry.of}.{where.text}")


def _words(scope: Scope, path: str, entry: Entry, node: LeafNode | None, span: Span) -> Bound:
    choices = entry.choices if entry.kind == "choice" else ()
    where = scalar(node)
    if where is None and node is None:
        answer = implied(scope, path, entry) or entry.default
        if answer:
            return Words(scope.bank.text(answer), choices)
    none_is_choice = NONE in choices
    if where is None or (where.text == NONE and not none_is_choice):
        return Words(scope.bank.input(path, "text", PURE, span), choices)
    if choices and where.text not in choices:
        return scope.fault(
            "unknown-choice",
            f"'{where.text}' is not a choice of '{path}'",
            where.span,
            expected=" or ".join(choices),
            advice=nearest(where.text, choices),
        )
    return Words(scope.bank.text(where.text), choices)


def collection(scope: Scope, path: str, entry: Entry) -> Items:
    """A collection with its items in order; required items that are not there stand as items without fields."""
    names = scope.view.design.names(path)
    if names is None and scope.view.design.states_none(path):
        names = ()
    base = scope.shared.base.design
    if names and base.names(path) is None and not base.states_none(path):
        names = None  # what a state sets of some items does not make known what the car has of them
    if names is None:
        return Items(path, None, lacking=path, missing=max(entry.at_least, len(entry.items), 1))
    gone = [name for name in entry.items if name not in names]
    items = tuple(Item(f"{path}.{name}") for name in (*names, *gone))
    absent = frozenset(f"{path}.{name}" for name in gone)
    short = entry.at_least - len(items)
    if short > 0:
        return Items(path, items, lacking=f"{path} (at least {entry.at_least} are needed)", missing=short, gone=absent)
    return Items(path, items, gone=absent)


def bind_point(scope: Scope, path: str, entry: Entry, span: Span) -> tuple[Number, Number, Number]:
    """The coordinates of a point as they are stated, before the datum is added."""
    scope.touched.add(path)
    unit = find_unit(entry.unit or "mm")
    node = stated(scope, path) or stated(scope, f"{path}.at")
    coordinates = _coordinates(scope, node)
    numbers = []
    for axis, given in zip("xyz", coordinates, strict=True):
        own = stated(scope, f"{path}.{axis}")
        single = axis_entry(scope, entry, axis)
        if own is None and given is not None and node is not None:
            numbers.append(Number(_coordinate(scope, path, axis, single, node, given, unit), unit))
        else:
            bound = number_at(scope, f"{path}.{axis}", single, own, span)
            numbers.append(
                bound
                if isinstance(bound, Number)
                else Number(scope.missing(f"{path}.{axis}", "number", unit.dimension, span), unit)
            )
    return numbers[0], numbers[1], numbers[2]


def axis_entry(scope: Scope, entry: Entry, axis: str) -> Entry:
    """One coordinate of a point as an input of its own; made once for each kind of point."""
    key = ("axis", entry.path, axis)
    if key not in scope.shared.memo:
        made = replace(entry, path=f"{entry.path}.{axis}", kind="number", unit=entry.unit or "mm", default="")
        scope.shared.memo[key] = made
    known: Entry = scope.shared.memo[key]
    return known


def _coordinate(scope: Scope, path: str, axis: str, entry: Entry, node: LeafNode, given: Quantity, unit: Unit) -> Any:
    rational, power = given.si()
    by_state = path in scope.view.set_paths or f"{path}.at" in scope.view.set_paths
    return leaf(scope, f"{path}.{axis}", node, Monomial(rational, power), unit, given.spread_si(), by_state)


def _coordinates(scope: Scope, node: LeafNode | None) -> tuple[Quantity | None, Quantity | None, Quantity | None]:
    where = scalar(node)
    if node is None or (where and where.text == NONE):
        return (None, None, None)
    known = scope.shared.parsed.get((id(node), "point"))
    if known is None:
        if where is None or isinstance(node, Sequence):
            scope.fault("bad-value", "this is a point", node.span, expected="three lengths, such as '1250 0 310 mm'")
            read = None
        else:
            read = read_stated_point(node, scope_units(scope), scope.shared.faults)
        known = (node, read)
        scope.shared.parsed[(id(node), "point")] = known
    return known[1] or (None, None, None)
