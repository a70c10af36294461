"""What a rule asks of places: inside or outside of a zone, a template at a place, lines of sight."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence

from rulecheck.binding.bodies import bodies_of, has_shape
from rulecheck.binding.bound import BROKEN, Bound, Broken, Item, Items, Number, Place, kind_of
from rulecheck.binding.conditions import certain, open_part
from rulecheck.binding.names import as_place
from rulecheck.binding.parsing import parsed, parsed_each
from rulecheck.binding.scope import Scope
from rulecheck.binding.zones import BoundZone, checked, length_of, named_zone, place_at
from rulecheck.diagnostics import Span
from rulecheck.geometry import zones as geometry
from rulecheck.geometry.bodies import VIEWS, Body, Vector, in_view, point_body
from rulecheck.geometry.making import Maker
from rulecheck.geometry.polygons import Polygon, as_convex, cost, room_inside
from rulecheck.geometry.rooms import Room, least
from rulecheck.geometry.sightlines import clear_in_view, covered_in_view, cut_by_box
from rulecheck.geometry.zones import Every, Prism, Some, Zone
from rulecheck.graph.conditions import AllOf, AnyOf, Condition, Part
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import Ruleset
from rulecheck.model.zones import Fitting, Held, PlaceCondition, Sight, Template, ZoneRule
from rulecheck.operations.values import Reason
from rulecheck.quantity.dimension import LENGTH, PURE
from rulecheck.quantity.units import find_unit
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located

MOST_CUTS = 6000
"""What two outlines may take that are cut by each other: corners of the one, squared, times corners of the other."""
Built = Condition | Broken


def place_condition(scope: Scope, wanted: PlaceCondition, element: Bound | None, scale: Number | None) -> Built:
    """A condition on places, bound. `element` is what the rule is about where it names nothing itself."""
    size = scale.term if scale is not None and scale.dimension == LENGTH else None
    if isinstance(wanted, Held):
        return _held(scope, wanted, element, size)
    return _fitting(scope, wanted, size) if isinstance(wanted, Fitting) else _sight(scope, wanted, size)


# --- zones -----------------------------------------------------------------------------------------------------------


def _held(scope: Scope, wanted: Held, element: Bound | None, scale: Term | None) -> Built:
    zone = named_zone(scope, wanted.zone.text, wanted.zone.span)
    things = _things(scope, wanted, element)
    if isinstance(zone, Broken) or isinstance(things, Broken):
        return BROKEN
    parts: list[Built] = []
    for name, bound in things:
        room = zone_room(scope, zone, bound, wanted.word, wanted.span)
        text = f"{wanted.word} {wanted.zone.text}"
        if isinstance(room, Broken):
            parts.append(BROKEN)
        else:
            parts.append(_part(room, f"{name} {text}" if name else text, wanted.word, wanted.span, scale))
    return _joined(parts, AllOf)


def _things(scope: Scope, wanted: Held, element: Bound | None) -> list[tuple[str, Bound]] | Broken:
    if wanted.what:
        found: list[tuple[str, Bound]] = []
        for where in wanted.what:
            syntax = parsed(scope, where)
            found.append((where.text, scope.express(syntax) if syntax is not None else BROKEN))
        return BROKEN if any(isinstance(bound, Broken) for _, bound in found) else found
    if element is None:
        return scope.fault(
            "bad-structure", f"'{wanted.word}' does not say what: the rule has no single element", wanted.span,
            expected="each: s in aero_surfaces, or {zone: name, what: points.nose}",
        )  # fmt: skip
    return [("", element)]


def zone_room(scope: Scope, zone: BoundZone, bound: Bound, word: str, span: Span) -> Room | Broken:
    """The room of a thing inside of a zone, or clear of it: of all its bodies."""
    bodies = _bodies(scope, bound, span)
    if isinstance(bodies, Broken) or isinstance(zone.zone, Broken):
        return BROKEN
    if not _is_small(scope, zone.zone, bodies, word, span):
        return BROKEN
    make = Maker(scope.bank)
    measure: Callable[[Maker, Zone, Body], Room] = geometry.inside if word == "inside" else geometry.clear
    return _if_sound(scope, zone.sound, least(make, [measure(make, zone.zone, body) for body in bodies]), span)


def _bodies(scope: Scope, bound: Bound, span: Span) -> tuple[Body, ...] | Broken:
    bodies = bodies_of(scope, bound, span)
    if bodies is not None:
        return bodies
    place = as_place(scope, bound, span)
    if place is not None:
        return (point_body(_vector(place)),)
    return scope.fault(
        "kind-mismatch", f"{kind_of(bound)} has no place that could lie in a zone", span,
        expected="a point, or an item with a place, an outline or an extent",
    )  # fmt: skip


def _vector(place: Place) -> Vector:
    return place.x.term, place.y.term, place.z.term


def _is_small(scope: Scope, zone: Zone, bodies: Sequence[Body], word: str, span: Span) -> bool:
    make = Maker(scope.bank)
    for prism in _prisms(zone):
        for body in bodies:
            plain = body.is_point or (word == "inside" and as_convex(make, prism.polygon) is not None)
            cuts = 0 if plain else cost(prism.polygon, body.in_view(prism.view))
            if cuts > MOST_CUTS:
                told = f"these outlines may cut each other too often ({cuts} by corners of the zone, squared, and the other)"
                scope.fault("too-large", told, span, expected=f"at most {MOST_CUTS}", advice="take fewer corners")
                return False
    return True


def _prisms(zone: Zone) -> Iterable[Prism]:
    if isinstance(zone, Prism):
        yield zone
    elif isinstance(zone, (Every, Some)):
        for part in zone.parts:
            yield from _prisms(part)


def _if_sound(scope: Scope, sound: Sequence[Term], room: Room, span: Span) -> Room:
    """The room, not known where a polygon of formulas comes to cross itself."""
    flag = Maker(scope.bank).every(sound)
    reason = Reason("undefined", "a polygon of the zone crosses itself with these values", span)
    unknown = scope.bank.unknown
    return Room(
        scope.bank.branch(flag, room.margin, unknown(reason, "number", LENGTH)),
        scope.bank.branch(flag, room.holds, unknown(reason, "flag", PURE)),
    )


def _part(room: Room, text: str, sense: str, span: Span, scale: Term | None, *, strict: bool = False) -> Part:
    return Part("zone", text, room.holds, room.margin, strict, scale, find_unit("mm"), sense=sense, span=span)


def _joined(parts: Sequence[Built], join: type[AllOf] | type[AnyOf]) -> Built:
    whole = tuple(part for part in parts if not isinstance(part, Broken))
    if len(whole) < len(parts) or not whole:
        return BROKEN
    return whole[0] if len(whole) == 1 else join(whole)


# --- templates -------------------------------------------------------------------------------------------------------


def _fitting(scope: Scope, wanted: Fitting, scale: Term | None) -> Built:
    owner = scope.owner
    templates = owner.templates if isinstance(owner, Ruleset) else {}
    template = templates.get(wanted.template.text)
    place = place_at(scope, wanted.at)
    if template is None:
        return scope.fault(
            "unknown-name", f"there is no template '{wanted.template.text}'", wanted.template.span,
            expected=" or ".join(templates) or "templates: in this file", advice=nearest(wanted.template.text, templates),
        )  # fmt: skip
    scope.shared.memo[("template used", template.span)] = True
    outline = template_outline(scope, template)
    opening = _opening(scope, wanted.through, template.view)
    if isinstance(place, Broken) or isinstance(outline, Broken) or isinstance(opening, Broken):
        return BROKEN
    if opening is None:
        return open_part(scope, f"the outline of {wanted.through.text} in {template.view} view", wanted.span)
    make = Maker(scope.bank)
    foot = in_view(_vector(place), template.view)
    placed = tuple((make.plus(foot[0], a), make.plus(foot[1], b)) for a, b in outline)
    polygon, sound = opening
    if as_convex(make, polygon) is None and cost(polygon, placed) > MOST_CUTS:
        told = f"'{wanted.template.text}' and '{wanted.through.text}' have too many corners for each other"
        return scope.fault("too-large", told, wanted.span, expected="fewer corners")
    room = _if_sound(scope, sound, room_inside(make, polygon, placed), wanted.span)
    if not wanted.passes:
        room = Room(make.opposite(room.margin), make.opposite_flag(room.holds))
    word = "passes" if wanted.passes else "stops at"
    text = f"{wanted.template.text} {word} {wanted.through.text}, placed at {wanted.at.text} (static, {template.view} view)"
    return _part(room, text, "passes" if wanted.passes else "stops", wanted.span, scale, strict=not wanted.passes)


def template_outline(scope: Scope, template: Template) -> Polygon | Broken:
    """The corners of a template from the point at which it is placed."""
    corners = [(length_of(scope, a), length_of(scope, b)) for a, b in template.points]
    whole = [(a.term, b.term) for a, b in corners if isinstance(a, Number) and isinstance(b, Number)]
    if len(whole) < len(corners):
        return BROKEN
    sound: list[Term] = []
    return tuple(whole) if checked(scope, tuple(whole), [a.span for a, _ in template.points], sound) else BROKEN


def _opening(scope: Scope, where: Located, view: str) -> tuple[Polygon, Sequence[Term]] | Broken | None:
    """The outline that a template is held against: a polygon zone of the ruleset, or an outline of the design."""
    owner = scope.owner
    if isinstance(owner, Ruleset) and where.text in owner.zones:
        zone = named_zone(scope, where.text, where.span)
        if isinstance(zone, Broken):
            return BROKEN
        if isinstance(zone.zone, Prism) and zone.zone.view == view:
            return zone.zone.polygon, zone.sound
        told = f"zone '{where.text}' is no single polygon in {view} view"
        return scope.fault("kind-mismatch", told, where.span, expected=f"{{view: {view}, points: […]}}")
    syntax = parsed(scope, where)
    bound = scope.express(syntax) if syntax is not None else BROKEN
    bodies = bodies_of(scope, bound, where.span)
    if isinstance(bodies, Broken):
        return BROKEN
    if bodies is None:
        told = f"'{where.text}' is {kind_of(bound)}, and a template passes through an outline"
        return scope.fault("kind-mismatch", told, where.span, expected="an item of outlines, or a zone")
    outline = bodies[0].outlines.get(view)
    return None if outline is None else (outline, ())


# --- lines of sight --------------------------------------------------------------------------------------------------


def _sight(scope: Scope, wanted: Sight, scale: Term | None) -> Built:
    if not wanted.clear and not wanted.view:
        told = "'cover' is judged in a view"
        return scope.fault("missing-key", told, wanted.span, expected=f"view: {' or '.join(VIEWS)}")
    ends = [[(where.text, place_at(scope, where)) for where in places] for places in (wanted.origins, wanted.targets)]
    things = _obstacles(scope, wanted.past)
    if isinstance(things, Broken) or any(isinstance(place, Broken) for end in ends for _, place in end):
        return BROKEN
    if not things:
        return certain(scope, wanted.clear, "there is nothing that could cut it", wanted.span)
    lines: list[Built] = []
    for start_name, start in ends[0]:
        for end_name, end in ends[1]:
            assert isinstance(start, Place) and isinstance(end, Place)
            text = f"{start_name} to {end_name}"
            lines.append(_line(scope, wanted, text, (_vector(start), _vector(end)), things, scale))
    return _joined(lines, AllOf)


def _line(
    scope: Scope, wanted: Sight, text: str, line: tuple[Vector, Vector], things: list[tuple[str, Body | None]],
    scale: Term | None,
) -> Built:  # fmt: skip
    make = Maker(scope.bank)
    parts: list[Built] = []
    for name, body in things:
        if body is None:
            parts.append(open_part(scope, name, wanted.span))
        elif wanted.view:
            outline = body.in_view(wanted.view)
            start, end = (in_view(point, wanted.view) for point in line)
            measure = clear_in_view if wanted.clear else covered_in_view
            room = measure(make, outline, start, end)
            said = "clear of" if wanted.clear else "cut by"
            told = f"{text} {said} {name} (ray against outline, {wanted.view} view)"
            parts.append(_part(room, told, "sight", wanted.span, scale, strict=not wanted.clear))
        else:
            free = make.opposite_flag(cut_by_box(make, body, *line))
            parts.append(Part("flag", f"{text} clear of {name} (ray against box)", free, span=wanted.span))
    return _joined(parts, AllOf if wanted.clear else AnyOf)


def _obstacles(scope: Scope, past: Sequence[Located]) -> list[tuple[str, Body | None]] | Broken:
    """The things that may cut a line, by name; None in place of what a collection lacks."""
    found: list[tuple[str, Body | None]] = []
    for where in past:
        syntax = parsed(scope, where)
        bound = scope.express(syntax) if syntax is not None else BROKEN
        if isinstance(bound, Broken):
            return BROKEN
        items: Sequence[Bound] = bound.items or () if isinstance(bound, Items) else (bound,)
        if isinstance(bound, Items) and bound.lacking:
            found.append((bound.lacking, None))
        for item in items:
            if not isinstance(item, Item) or not has_shape(scope, item.path):
                told = f"'{where.text}' is {kind_of(item)} without an outline or extent"
                return scope.fault("kind-mismatch", told, where.span, expected="items of outlines or aero_surfaces")
            bodies = bodies_of(scope, item, where.span)
            if isinstance(bodies, Broken) or bodies is None:
                return BROKEN
            found.extend((item.name, body) for body in bodies)
    return found


# --- what no rule uses -----------------------------------------------------------------------------------------------


def check_unused_places(scope: Scope, ruleset: Ruleset) -> None:
    """Bind zones and templates that no rule uses, for an element that is not there, so that their faults are found."""
    for name, zone in ruleset.zones.items():
        if ("zone used", ruleset.file, name) not in scope.shared.memo:
            inner = scope.fresh(scope.view, ruleset, _stand_in(scope, zone))
            named_zone(inner, name, zone.span)
    for template in ruleset.templates.values():
        if ("template used", template.span) not in scope.shared.memo:
            template_outline(scope.fresh(scope.view, ruleset), template)


def _stand_in(scope: Scope, zone: ZoneRule) -> dict[str, Bound]:
    """An element of the collection that a zone is for."""
    head = parsed_each(scope, zone.loop) if zone.loop is not None else None
    items = scope.express(head.collection) if head is not None else None
    if head is None or not isinstance(items, Items):
        if head is not None and items is not None and not isinstance(items, Broken):
            scope.fault("kind-mismatch", f"this is {kind_of(items)}, not a collection", head.collection.span)
        return {}
    return {name: Item(f"{items.path}.*") for name in head.variables}
