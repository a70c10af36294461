"""Zones of a ruleset to borders in terms, with the formulas of their corners bound in the rule that uses them."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from fractions import Fraction

from rulecheck.binding.bound import BROKEN, Broken, Line, Number, Place, Plane, kind_of
from rulecheck.binding.names import as_place
from rulecheck.binding.parsing import parsed, parsed_each
from rulecheck.binding.points import plane_height
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.geometry.bodies import VIEWS, Vector, in_view
from rulecheck.geometry.convex import Corner
from rulecheck.geometry.making import Maker, constant
from rulecheck.geometry.outlines import fault_of
from rulecheck.geometry.polygons import Polygon, is_simple
from rulecheck.geometry.zones import Every, Half, Prism, Range, Some, Zone
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import Ruleset
from rulecheck.model.zones import SIDES, JoinedPart, NamedPart, PolygonPart, RangePart, SidePart, ZonePart
from rulecheck.quantity.dimension import LENGTH
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.units import find_unit
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located


@dataclass(slots=True)
class BoundZone:
    """A zone in terms. `sound` are flags without which it is none: a polygon of formulas may come to cross itself."""

    zone: Zone | Broken
    sound: list[Term] = field(default_factory=list)


def named_zone(scope: Scope, name: str, span: Span) -> BoundZone | Broken:
    """A zone of the scope's ruleset by its name, bound here; a fault where there is none."""
    owner = scope.owner
    zones = owner.zones if isinstance(owner, Ruleset) else {}
    if name not in zones:
        known = tuple(zones)
        expected = " or ".join(known) or "zones: in this file"
        return scope.fault(
            "unknown-name", f"there is no zone '{name}'", span, expected=expected, advice=nearest(name, known)
        )
    scope.shared.memo[("zone used", owner.file, name)] = True
    loop = zones[name].loop
    head = parsed_each(scope, loop) if loop is not None else None
    lacking = [word for word in head.variables if word not in scope.variables] if head is not None else []
    if loop is not None and lacking:
        told = f"zone '{name}' is of an element '{lacking[0]}', and here is none"
        return scope.fault("wrong-arguments", told, span, expected=f"each: {loop.text}")
    if not scope.shared.enter(f"zone({name})", span, "zones are made of each other"):
        return BROKEN
    made = BoundZone(BROKEN)
    made.zone = _part(scope, zones[name].whole, made.sound)
    scope.shared.leave()
    return BROKEN if isinstance(made.zone, Broken) else made


def _part(scope: Scope, part: ZonePart, sound: list[Term]) -> Zone | Broken:
    if isinstance(part, NamedPart):
        found = named_zone(scope, part.name.text, part.name.span)
        if isinstance(found, Broken):
            return BROKEN
        sound.extend(found.sound)
        return found.zone
    if isinstance(part, JoinedPart):
        parts = [_part(scope, inner, sound) for inner in part.parts]
        whole = tuple(inner for inner in parts if not isinstance(inner, Broken))
        if len(whole) < len(parts):
            return BROKEN
        return Every(whole) if part.word == "all" else Some(whole)
    if isinstance(part, RangePart):
        return _range(scope, part)
    return _side(scope, part) if isinstance(part, SidePart) else _polygon(scope, part, sound)


# --- ranges ----------------------------------------------------------------------------------------------------------


def _range(scope: Scope, part: RangePart) -> Zone | Broken:
    ends = [None if end is None else length_of(scope, end) for end in (part.low, part.high)]
    if any(isinstance(end, Broken) for end in ends):
        return BROKEN
    low, high = (end if isinstance(end, Number) else None for end in ends)
    if low is not None and high is not None and part.high is not None:
        values = constant(low.term), constant(high.term)
        if values[0] is not None and values[1] is not None and values[0] > values[1]:
            told = f"this range of {part.axis} ends before it begins: nothing lies in it"
            return scope.fault("bad-value", told, part.high.span, expected="the lesser end first")
    lift = None
    if part.axis == "above_ground":
        place = (part.low or part.high or Located("", Span("", 0, 0, 1, 1))).span

        def lift(x: Term) -> Term:
            return plane_height(scope, Number(x, find_unit("mm")), place)

    return Range(part.axis, low.term if low else None, high.term if high else None, lift)


def length_of(scope: Scope, where: Located) -> Number | Broken:
    """A formula that has to be a length."""
    syntax = parsed(scope, where)
    bound = scope.express(syntax) if syntax is not None else BROKEN
    if isinstance(bound, Broken):
        return BROKEN
    if not isinstance(bound, Number):
        return scope.fault("kind-mismatch", f"this is {kind_of(bound)}", where.span, expected="a length such as 340 mm")
    if bound.dimension != LENGTH:
        found = name_of(bound.dimension)
        advice = "give the bare number a unit" if bound.bare else ""
        return scope.fault(
            "wrong-dimension", f"'{where.text}' is {found}", where.span, expected="a length", advice=advice
        )
    return bound


# --- planes and lines ------------------------------------------------------------------------------------------------


def _side(scope: Scope, part: SidePart) -> Zone | Broken:
    syntax = parsed(scope, part.border)
    bound = scope.express(syntax) if syntax is not None else BROKEN
    axis, sense = SIDES[part.side]
    if isinstance(bound, Plane) and not part.view:
        a, b, c = (_vector(place) for place in (bound.a, bound.b, bound.c))
        return _half(scope, part, "xyz", a, _across(Maker(scope.bank), a, b, c), axis, sense)
    if isinstance(bound, Line) and part.view and not bound.direction and axis in VIEWS[part.view]:
        make = Maker(scope.bank)
        start, end = (in_view(_vector(place), part.view) for place in (bound.a, bound.b))
        normal = (make.minus(start[1], end[1]), make.minus(end[0], start[0]))
        return _half(scope, part, VIEWS[part.view], start, normal, axis, sense)
    if isinstance(bound, Broken):
        return BROKEN
    shown = f"{kind_of(bound)} in {part.view} view" if part.view else kind_of(bound)
    views = " or ".join(view for view in VIEWS if axis in VIEWS[view])
    return scope.fault(
        "kind-mismatch", f"'{part.side}' does not go with {shown}", part.border.span,
        expected=f"plane(a, b, c), or line(a, b) with view: {views}",
    )  # fmt: skip


def _half(
    scope: Scope, part: SidePart, axes: str, foot: Sequence[Term], normal: Sequence[Term], axis: str, sense: int
) -> Zone | Broken:
    make = Maker(scope.bank)
    toward = normal[axes.index(axis)]
    if constant(toward) == 0:
        told = f"nothing lies '{part.side}' this border: it runs along {axis}, or its points do not span it"
        return scope.fault("bad-value", told, part.border.span, advice="take another word, or other points")
    facing = make.times(make.number(sense), make.over(toward, make.size(toward)))
    return Half(axes, tuple(foot), tuple(normal), facing)


def _vector(place: Place) -> Vector:
    return place.x.term, place.y.term, place.z.term


def _across(make: Maker, a: Vector, b: Vector, c: Vector) -> Vector:
    """The normal of a plane through three points."""
    u, v = ([make.minus(q, p) for p, q in zip(a, other, strict=True)] for other in (b, c))
    found = [make.minus(make.times(u[i], v[j]), make.times(u[j], v[i])) for i, j in ((1, 2), (2, 0), (0, 1))]
    return found[0], found[1], found[2]


# --- polygons --------------------------------------------------------------------------------------------------------


def _polygon(scope: Scope, part: PolygonPart, sound: list[Term]) -> Zone | Broken:
    corners = [_corner(scope, point, part.view) for point in part.points]
    whole = tuple(corner for corner in corners if not isinstance(corner, Broken))
    if len(whole) < len(corners):
        return BROKEN
    spans = [point.span if isinstance(point, Located) else point[0].span for point in part.points]
    return Prism(part.view, whole) if checked(scope, whole, spans, sound) else BROKEN


def checked(scope: Scope, polygon: Polygon, spans: Sequence[Span], sound: list[Term]) -> bool:
    """False, with the fault noted, where settled corners make no outline; corners of formulas are asked when they are."""
    values = [(constant(across), constant(up)) for across, up in polygon]
    settled: list[tuple[Fraction, Fraction]] = [(a, b) for a, b in values if a is not None and b is not None]
    if len(settled) < len(values):
        sound.append(is_simple(Maker(scope.bank), polygon))
        return True
    fault = fault_of(settled)
    if fault is None:
        return True
    what, corner = fault
    scope.fault("bad-value", what, spans[min(corner, len(spans) - 1)], advice="give the corners in order around it")
    return False


def _corner(scope: Scope, point: Located | tuple[Located, Located], view: str) -> Corner | Broken:
    if isinstance(point, tuple):
        across, up = length_of(scope, point[0]), length_of(scope, point[1])
        if isinstance(across, Broken) or isinstance(up, Broken):
            return BROKEN
        return across.term, up.term
    place = place_at(scope, point)
    return BROKEN if isinstance(place, Broken) else in_view(_vector(place), view)


def place_at(scope: Scope, where: Located) -> Place | Broken:
    """A formula that has to be a point."""
    syntax = parsed(scope, where)
    bound = scope.express(syntax) if syntax is not None else BROKEN
    if isinstance(bound, Broken):
        return BROKEN
    place = as_place(scope, bound, where.span)
    if place is None:
        return scope.fault(
            "kind-mismatch", f"this is {kind_of(bound)}", where.span, expected="a point such as points.nose"
        )
    return place
