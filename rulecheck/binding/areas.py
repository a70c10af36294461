"""`front_area(outlines)`: the area that the front outlines of things cover together, each spot counted once."""

from __future__ import annotations

from collections.abc import Iterator

from rulecheck.binding.bodies import corners_of
from rulecheck.binding.bound import BROKEN, Bound, Items, Number, Truth, kind_of
from rulecheck.binding.inputs import bind_input, stated
from rulecheck.binding.leaves import scalar
from rulecheck.binding.points import datum_of
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.formula.syntax import Call
from rulecheck.geometry.outlines import Corner
from rulecheck.geometry.union_area import MOST_EDGES, union_area
from rulecheck.model.design import NONE
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.units import find_unit

_SQUARE = find_unit("m^2")
_UPRIGHT = ("", "front_axle", "rear_axle")
"""Datums that leave a front outline where it is."""


def front_area(scope: Scope, syntax: Call) -> Bound:
    """The area of the union of front outlines, mirrored ones on both sides; unknown where one is missing.

    An item whose front outline is `none` covers nothing. Outlines do not move with the ride heights: the area is that
    of the car seen along its reference plane.
    """
    if not syntax.arguments:
        told = "'front_area' takes one collection or more"
        return scope.fault("wrong-arguments", told, syntax.span, expected="front_area(outlines)")
    outlines: list[tuple[Corner, ...]] = []
    lacking: list[str] = []
    before = len(scope.shared.faults.found)
    for argument in syntax.arguments:
        bound = scope.express(argument)
        if isinstance(bound, Items):
            _collect(scope, bound, syntax.span, outlines, lacking)
        elif bound is not BROKEN:
            told = f"'front_area' takes collections, and this is {kind_of(bound)}"
            scope.fault("kind-mismatch", told, argument.span, expected="outlines, or aero_surfaces")
    edges = sum(len(outline) for outline in outlines)
    if edges > MOST_EDGES:
        told = f"the front outlines have {edges} edges together"
        scope.fault("too-large", told, syntax.span, expected=f"at most {MOST_EDGES}")
    if len(scope.shared.faults.found) > before:
        return BROKEN
    dimension: Dimension = _SQUARE.dimension
    if lacking:
        return Number(scope.missing(", ".join(lacking[:4]), "number", dimension, syntax.span), _SQUARE)
    return Number(scope.bank.number(union_area(outlines), dimension), _SQUARE)


def _collect(scope: Scope, items: Items, span: Span, outlines: list[tuple[Corner, ...]], lacking: list[str]) -> None:
    if items.items is None or items.lacking:
        lacking.append(items.lacking or items.path)
    for item in items.items or ():
        path = next(iter(_paths(scope, item.path)), None)
        if path is None:
            told = f"the items of '{items.path}' have no front outline"
            scope.fault("kind-mismatch", told, span, expected="outlines, or aero_surfaces")
            return
        where = scalar(stated(scope, path))
        corners = corners_of(scope, path)
        datum = datum_of(scope, path) or datum_of(scope, path.rpartition(".")[0])
        if where is not None and where.text == NONE:
            continue
        if corners is None or (datum is not None and datum.text not in _UPRIGHT):
            lacking.append(path if corners is None else f"{path} from a datum at the axles")
            continue
        outlines.append(corners)
        if _mirrored(scope, path.removesuffix(".front"), span):
            outlines.append(tuple((-across, up) for across, up in corners))


def _paths(scope: Scope, item: str) -> Iterator[str]:
    for candidate in (f"{item}.front", f"{item}.outline.front"):
        entry = scope.shared.vocabulary.entry(candidate)
        if entry is not None and entry.kind == "outline":
            yield candidate


def _mirrored(scope: Scope, holder: str, span: Span) -> bool:
    path = f"{holder}.mirror"
    entry = scope.shared.vocabulary.entry(path)
    bound = bind_input(scope, path, entry, span) if entry is not None else None
    return isinstance(bound, Truth) and bound.term.value is True
