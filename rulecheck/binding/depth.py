"""`depth(p, zone)` and `depth(p, hull(points))`: signed distance to a border as a number, positive inside."""

from __future__ import annotations

from collections.abc import Iterable

from rulecheck.binding.bound import BROKEN, Bound, Broken, Items, Number, Place, kind_of
from rulecheck.binding.names import as_place
from rulecheck.binding.placing import zone_room
from rulecheck.binding.scope import Scope
from rulecheck.binding.zones import named_zone
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import Call, Listing, Name, Syntax
from rulecheck.geometry.bodies import VIEWS, in_view
from rulecheck.geometry.hulls import MOST_POINTS, in_hull, in_hull_of_view
from rulecheck.geometry.making import Maker
from rulecheck.model.ruleset import Ruleset
from rulecheck.quantity.dimension import LENGTH
from rulecheck.quantity.units import find_unit

USAGE = "depth(p, a_zone), depth(p, hull([a, b, c])) or depth(p, hull(points), side)"


def depth(scope: Scope, syntax: Call) -> Bound:
    """Bind a call of `depth`."""
    given, view = syntax.arguments, ""
    last = given[-1] if given else None
    if isinstance(last, Name) and len(last.path) == 1 and last.path[0] in VIEWS and len(given) == 3:
        given, view = given[:2], last.path[0]
    if len(given) != 2:
        return scope.fault(
            "wrong-arguments", "'depth' takes a thing, and a zone or a hull", syntax.span, expected=USAGE
        )
    thing, border = given
    bound = scope.express(thing)
    if isinstance(bound, Broken):
        return BROKEN
    if isinstance(border, Call) and border.function == "hull":
        return _in_hull(scope, bound, thing, border, view)
    if isinstance(border, Name) and len(border.path) == 1 and not view and isinstance(scope.owner, Ruleset):
        zone = named_zone(scope, border.path[0], border.span)
        room = BROKEN if isinstance(zone, Broken) else zone_room(scope, zone, bound, "inside", syntax.span)
        return BROKEN if isinstance(room, Broken) else Number(room.margin, find_unit("mm"))
    return scope.fault("wrong-arguments", f"'{show(border)}' is no zone and no hull", border.span, expected=USAGE)


def _in_hull(scope: Scope, bound: Bound, thing: Syntax, border: Call, view: str) -> Bound:
    place = as_place(scope, bound, thing.span)
    if place is None:
        return scope.fault("kind-mismatch", f"'{show(thing)}' is {kind_of(bound)}", thing.span, expected="a point")
    points = [item for argument in border.arguments for item in _points(scope, argument)]
    whole = [item for item in points if isinstance(item, Place)]
    if len(whole) < len(points):
        return BROKEN
    least = 3 if view else 4
    if not least <= len(whole) <= MOST_POINTS:
        told = f"a hull {'in a view' if view else 'in space'} has {least} to {MOST_POINTS} points, and this has {len(whole)}"
        return scope.fault("wrong-arguments", told, border.span, expected="hull([points.a, points.b, …])")
    make, unit = Maker(scope.bank), find_unit("mm")
    vectors = [(item.x.term, item.y.term, item.z.term) for item in whole]
    point = (place.x.term, place.y.term, place.z.term)
    if view:
        corners = [in_view(vector, view) for vector in vectors]
        return Number(in_hull_of_view(make, corners, in_view(point, view)).margin, unit)
    return Number(in_hull(make, vectors, point).margin, unit)


def _points(scope: Scope, syntax: Syntax) -> Iterable[Place | Broken]:
    """The points of an argument: one, a list of them, or a collection."""
    for inner in syntax.items if isinstance(syntax, Listing) else (syntax,):
        bound = scope.express(inner)
        if isinstance(bound, Items) and not bound.items:
            gone = Number(scope.missing(bound.lacking or bound.path, "number", LENGTH, inner.span), find_unit("mm"))
            yield from (Place(gone, gone, gone),) * 4
            continue
        for item in bound.items or () if isinstance(bound, Items) else (bound,):
            place = BROKEN if isinstance(item, Broken) else as_place(scope, item, inner.span)
            yield place or scope.fault(
                "kind-mismatch", f"'{show(inner)}' is {kind_of(item)}", inner.span, expected="a point"
            )
