"""What a name stands for: a variable, a constant, a figure, an input, an item or a collection."""

from __future__ import annotations

from typing import Any

from rulecheck.binding import figures
from rulecheck.binding.bodies import end_of_extent
from rulecheck.binding.bound import BROKEN, Bound, Date, Item, Items, Number, Place, Truth, Words
from rulecheck.binding.curves import bind_curve
from rulecheck.binding.inputs import bind_input
from rulecheck.binding.points import direction, place_of
from rulecheck.binding.reconciling import reconciled, states_value
from rulecheck.binding.scope import Scope
from rulecheck.binding.signals import bind_signal
from rulecheck.diagnostics import Span
from rulecheck.formula.syntax import Member, Name
from rulecheck.graph.conditions import Use
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import PhysicsModule
from rulecheck.model.vocabulary import Entry
from rulecheck.physics.declared import DECLARED
from rulecheck.quantity.dimension import PURE
from rulecheck.quantity.units import find_unit
from rulecheck.reading.nearest import nearest

DIRECTIONS = ("vertical", "horizontal", "rearward")


def bind_name(scope: Scope, syntax: Name) -> Bound:
    """Bind a dotted name, and note it as used by the formula that is being bound."""
    bound = _bind(scope, syntax.path, syntax.span)
    if not isinstance(bound, (Number, Truth, Words, Date)):
        return bound
    inner = syntax.path[0] in scope.variables
    if not inner or not scope.loop:
        text = ".".join(syntax.path)
        scope.uses.setdefault(text, Use(text, _target(scope, syntax.path), bound.term, getattr(bound, "unit", None)))
    return bound


def _target(scope: Scope, path: tuple[str, ...]) -> str:
    """The full name of what a name stands for, with loop variables written out."""
    variable = scope.variables.get(path[0])
    owner = scope.owner
    if variable is None and isinstance(owner, PhysicsModule) and len(path) == 1 and path[0] in owner.figures:
        return figures.standing(scope, owner, path[0])[2]
    module = figures.replaced_module(scope, path) if variable is None else None
    if module is not None:
        return figures.standing(scope, module, path[1])[2]
    return ".".join((variable.path, *path[1:])) if isinstance(variable, Item) else ".".join(path)


def _bind(scope: Scope, path: tuple[str, ...], span: Span) -> Bound:
    if path[0] in scope.variables:
        return _variable(scope, scope.variables[path[0]], path, span)
    if len(path) == 1:
        single = _single(scope, path[0], span)
        if single is not None:
            return single
    found = _path(scope, ".".join(path), span)
    if found is not None:
        return found
    figure = figures.physics_figure(scope, path, span)
    if figure is not None:
        return figure
    return _unknown(scope, ".".join(path), span)


def _single(scope: Scope, name: str, span: Span) -> Bound | None:
    if name == "pi":
        return Number(scope.bank.number(1, power=1), find_unit("1"))
    if name == "on" and scope.shared.stand_ins:
        return Date(scope.bank.input("on", "date", PURE, span))  # what holds on one day says nothing of others
    if name == "on":
        return Date(scope.bank.day(scope.shared.day))
    if name in DIRECTIONS:
        return direction(scope, name)
    return figures.own_figure(scope, name, span)


def _variable(scope: Scope, bound: Bound, path: tuple[str, ...], span: Span) -> Bound:
    if len(path) == 1:
        return bound
    return member(scope, bound, path[1:], span, path[0])


def member(scope: Scope, bound: Bound, path: tuple[str, ...], span: Span, said: str) -> Bound:
    """A field of an item, or a coordinate of a point."""
    if isinstance(bound, Item):
        whole = f"{bound.path}.{'.'.join(path)}"
        found = _path(scope, whole, span)
        if found is not None:
            return found
        place = as_place(scope, bound, span)
        if place is None:
            known = scope.shared.vocabulary.below(bound.path)
            return scope.fault(
                "unknown-name",
                f"'{said}' has no field '{'.'.join(path)}'",
                span,
                expected=" or ".join(known[:12]),
                advice=nearest(path[0], known),
            )
        bound = place
    if isinstance(bound, Place) and len(path) == 1 and path[0] in ("x", "y", "z"):
        coordinate: Number = getattr(bound, path[0])
        return coordinate
    return scope.fault(
        "unknown-name",
        f"'{said}' has no field '{'.'.join(path)}'",
        span,
        expected="x, y or z of a point, or a field of an item",
    )


def bind_member(scope: Scope, syntax: Member) -> Bound:
    """`point(a, b, c).x`."""
    base = scope.express(syntax.base)
    return base if base is BROKEN else member(scope, base, syntax.path, syntax.span, "this")


def as_place(scope: Scope, bound: Bound, span: Span) -> Place | None:
    """A point, or an item that is one or has a place."""
    if isinstance(bound, Place):
        return bound
    if isinstance(bound, Item):
        for path in (bound.path, f"{bound.path}.at"):
            entry = scope.shared.vocabulary.entry(path)
            if entry is not None and entry.kind == "point":
                return place_of(scope, bound.path if path == bound.path else path, entry, span)
    return None


def _path(scope: Scope, path: str, span: Span) -> Bound | None:
    """An input, a coordinate of a point, an item or a collection; None where the vocabulary has no such path."""
    vocabulary = scope.shared.vocabulary
    entry = vocabulary.entry(path)
    if entry is not None and not entry.computed:
        return _guarded(scope, path, entry, span)
    if entry is not None:
        return None  # a declared value beside a computed figure: the figure is what is read
    holder, _, last = path.rpartition(".")
    point = vocabulary.entry(holder) if holder else None
    if point is not None and point.kind == "point" and last in ("x", "y", "z"):
        coordinate: Number = getattr(place_of(scope, holder, point, span), last)
        return coordinate
    if point is not None and point.kind == "collection":
        return Item(path)
    return _through_item(scope, path, span)


def _through_item(scope: Scope, path: str, span: Span) -> Bound | None:
    """A field of the item that an input of kind `item` names: `lamps.left.carrier.material`."""
    parts = path.split(".")
    for index in range(len(parts) - 1, 0, -1):
        holder = ".".join(parts[:index])
        entry = scope.shared.vocabulary.entry(holder)
        if entry is not None and entry.kind == "item":
            item = bind_input(scope, holder, entry, span)
            return member(scope, item, tuple(parts[index:]), span, holder) if isinstance(item, Item) else BROKEN
    return None


def _guarded(scope: Scope, path: str, entry: Entry, span: Span) -> Bound:
    if entry.kind == "point":
        return place_of(scope, path, entry, span)
    if entry.kind in ("curve", "map"):
        return bind_curve(scope, path, entry)
    if entry.kind == "signal":
        return bind_signal(scope, path, entry, span)
    holder, _, end = path.rpartition(".")
    above = scope.shared.vocabulary.entry(holder) if holder else None
    if above is not None and above.kind == "range":
        return end_of_extent(scope, holder, end, span)
    bound = bind_input(scope, path, entry, span)
    if isinstance(bound, Number):
        return _checked(scope, path, bound, span)
    return bound


def _checked(scope: Scope, path: str, bound: Number, span: Span) -> Number:
    """A declared input beside what the car's own parts give."""
    declared = DECLARED.get(path)
    if declared is None or not states_value(scope, path):
        return bound
    apart = scope.fresh(scope.view, scope.owner)
    return reconciled(scope, path, bound, figures.physics_figure(apart, (declared.module, declared.figure), span))


def _unknown(scope: Scope, name: str, span: Span) -> Bound:
    known: list[str] = [entry.path for entry in scope.shared.vocabulary if "*" not in entry.path]
    known.extend(figures.known_names(scope))
    known.extend(scope.variables)
    return scope.fault("unknown-name", f"nothing is called '{name}'", span, advice=nearest(name, known))


def term_of(bound: Any) -> Term | None:
    """The term of a bound value that has one."""
    return bound.term if isinstance(bound, (Number, Truth, Words, Date)) else None


def is_collection(bound: Bound) -> bool:
    """True for a collection."""
    return isinstance(bound, Items)
