"""Things of a design as bodies: a point, an outline by view, a measured extent by axis; on both sides where mirrored."""

from __future__ import annotations

from collections.abc import Iterable, Mapping

from rulecheck.binding.bound import BROKEN, Bound, Broken, Item, Number, Place, Truth
from rulecheck.binding.inputs import bind_input, scope_units, stated
from rulecheck.binding.leaves import scalar
from rulecheck.binding.points import datum_of, from_datum, plane_height
from rulecheck.binding.ranges import bind_range
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.geometry.bodies import AXES, VIEWS, Body, point_body
from rulecheck.geometry.making import Maker
from rulecheck.geometry.outlines import Corner, read_closed
from rulecheck.geometry.polygons import Polygon
from rulecheck.graph.figures import InputFact
from rulecheck.graph.terms import Term
from rulecheck.quantity.dimension import LENGTH
from rulecheck.quantity.units import find_unit
from rulecheck.reading.nodes import Located, Sequence
from rulecheck.reading.nodes import Mapping as NodeMapping

Spans = Mapping[str, tuple[Term, Term]]


def bodies_of(scope: Scope, bound: Bound, span: Span) -> tuple[Body, ...] | Broken | None:
    """The bodies that a thing offers: one, or two where it is mirrored. None where it is no thing with a place."""
    if isinstance(bound, Broken):
        return BROKEN
    if isinstance(bound, Place):
        return (point_body((bound.x.term, bound.y.term, bound.z.term)),)
    if not isinstance(bound, Item) or not has_shape(scope, bound.path):
        return None
    key = ("body", bound.path, scope.view.states)
    known = scope.shared.memo.get(key)
    if known is None and scope.view.states:
        base = scope.shared.memo.get(("body", bound.path, ()))
        known = base if base is not None and not scope.view.changes_any(base[1]) else None
    if known is None:
        apart = scope.apart()
        known = scope.shared.memo[key] = (_bodies(apart, bound.path, span), apart.touched)
    scope.touched.update(known[1])
    found: tuple[Body, ...] | Broken = known[0]
    return found


def has_shape(scope: Scope, path: str) -> bool:
    """True where a design may state an outline or an extent of an item."""
    return scope.shared.vocabulary.entry(f"{path}.extent.x") is not None or bool(_outline_paths(scope, path))


def _outline_paths(scope: Scope, path: str) -> dict[str, str]:
    """Where the outlines of an item may stand, by view."""
    found = {}
    for view in VIEWS:
        for candidate in (f"{path}.{view}", f"{path}.outline.{view}"):
            entry = scope.shared.vocabulary.entry(candidate)
            if entry is not None and entry.kind == "outline":
                found[view] = candidate
    return found


def _bodies(scope: Scope, path: str, span: Span) -> tuple[Body, ...] | Broken:
    before = len(scope.shared.faults.found)
    outlines = {}
    for view, where in _outline_paths(scope, path).items():
        polygon = outline_at(scope, where, span, view)
        if polygon is not None:
            outlines[view] = polygon
    spans = _spans(scope, path, outlines, span)
    if len(scope.shared.faults.found) > before:
        return BROKEN
    body = Body(spans, outlines)
    mirrored = [_is_mirrored(scope, where, span) for where in (f"{path}.mirror", f"{path}.outline.mirror")]
    return (body, _mirrored(scope, body)) if any(mirrored) else (body,)


def _is_mirrored(scope: Scope, path: str, span: Span) -> bool:
    entry = scope.shared.vocabulary.entry(path)
    bound = bind_input(scope, path, entry, span) if entry is not None and entry.kind == "flag" else None
    return isinstance(bound, Truth) and bound.term.value is True


def _mirrored(scope: Scope, body: Body) -> Body:
    make = Maker(scope.bank)
    low, high = body.spans["y"]
    spans = {**body.spans, "y": (make.opposite(high), make.opposite(low))}
    outlines = {}
    for view, polygon in body.outlines.items():
        across = VIEWS[view].find("y")
        outlines[view] = tuple(
            (make.opposite(a) if across == 0 else a, make.opposite(b) if across == 1 else b) for a, b in polygon
        )
    return Body(spans, outlines)


def end_of_extent(scope: Scope, path: str, end: str, span: Span) -> Bound:
    """`from` or `to` of an extent as a number, counted from the front axle and the reference plane."""
    item, _, axis = path.rpartition(".")
    bodies = bodies_of(scope, Item(item.removesuffix(".extent")), span)
    if bodies is None or isinstance(bodies, Broken):
        return BROKEN
    return Number(bodies[0].spans[axis][end == "to"], find_unit("mm"))


# --- outlines --------------------------------------------------------------------------------------------------------


def corners_of(scope: Scope, path: str) -> tuple[Corner, ...] | None:
    """The corners of an outline as stated (m, from its own datum); None where there is none, or it is at fault."""
    scope.touched.add(path)
    node = stated(scope, path)
    where = scalar(node)
    if node is None or (where is not None and where.text == "none"):
        return None
    key = (id(node), "outline")
    if key not in scope.shared.parsed:
        if where is None:
            scope.fault(
                "bad-value", f"'{path}' is an outline", node.span, expected="corners such as '0 0, 9 0, 9 9 mm'"
            )
            read = None
        else:
            read = read_closed(where, scope_units(scope), scope.shared.faults)
            _note(scope, path, node, where)
        scope.shared.parsed[key] = (node, read)
    found: tuple[Corner, ...] | None = scope.shared.parsed[key][1]
    return found


def _note(scope: Scope, path: str, node: Located | NodeMapping | Sequence, where: Located) -> None:
    """Keep where an outline stands and what it rests on, for reports."""
    basis = node.get("basis") if isinstance(node, NodeMapping) else None
    said = basis.text if isinstance(basis, Located) else ""
    scope.shared.facts.setdefault(path, InputFact(path, find_unit("mm"), where.span, said, "", where.text))


def outline_at(scope: Scope, path: str, span: Span, view: str) -> Polygon | None:
    """An outline counted from the front axle and the reference plane; None where the design states none."""
    corners = corners_of(scope, path)
    if corners is None:
        return None
    unit = find_unit("mm")
    rest = Number(scope.missing(f"the place of {path} across its view", "number", LENGTH, span), unit)
    datum = datum_of(scope, path) or datum_of(scope, path.rpartition(".")[0])
    found = []
    for corner in corners:
        by_axis = dict(
            zip(VIEWS[view], (Number(scope.bank.number(value, LENGTH), unit) for value in corner), strict=True)
        )
        place = Place(*(by_axis.get(axis, rest) for axis in AXES))
        if datum is not None:
            place = from_datum(scope, place, datum.text, datum.span, ())
        found.append((getattr(place, VIEWS[view][0]).term, getattr(place, VIEWS[view][1]).term))
    return tuple(found)


# --- extents ---------------------------------------------------------------------------------------------------------


def _spans(scope: Scope, path: str, outlines: Mapping[str, Polygon], span: Span) -> Spans:
    """Least and greatest along each axis: as measured, else of the outlines, else not known."""
    measured = _measured(scope, path, span)
    found = {}
    for axis in AXES:
        if axis in measured:
            found[axis] = measured[axis]
            continue
        found[axis] = _of_outlines(scope, outlines, axis) or _unknown(scope, path, axis, span)
    return found


def _unknown(scope: Scope, path: str, axis: str, span: Span) -> tuple[Term, Term]:
    scope.touched.add(f"{path}.extent.{axis}")
    gone = scope.missing(f"{path}.extent.{axis}", "number", LENGTH, span)
    return gone, gone


def _of_outlines(scope: Scope, outlines: Mapping[str, Polygon], axis: str) -> tuple[Term, Term] | None:
    """What the first outline that shows an axis reaches over."""
    make = Maker(scope.bank)
    for view, polygon in outlines.items():
        place = VIEWS[view].find(axis)
        if place >= 0:
            values = [corner[place] for corner in polygon]
            return make.least(values), make.greatest(values)
    return None


def _measured(scope: Scope, path: str, span: Span) -> Spans:
    ends = dict(_ranges(scope, path, span))
    datum = datum_of(scope, f"{path}.extent")
    if datum is None or datum.text == "front_axle":
        return {axis: (low.term, high.term) for axis, (low, high) in ends.items()}
    unit = find_unit("mm")
    gone = Number(scope.missing(f"{path}.extent", "number", LENGTH, span), unit)
    if datum.text == "ground":
        return _from_ground(scope, path, ends, span)
    found = {}
    for axis, pair in ends.items():
        places = [Place(*(end if axis == own else gone for own in AXES)) for end in pair]
        moved = [getattr(from_datum(scope, place, datum.text, datum.span, ()), axis).term for place in places]
        found[axis] = (moved[0], moved[1])
    return found


def _from_ground(scope: Scope, path: str, ends: dict[str, tuple[Number, Number]], span: Span) -> Spans:
    """Heights above ground as heights from the reference plane, at whichever end is the farther."""
    make = Maker(scope.bank)
    found = {axis: (low.term, high.term) for axis, (low, high) in ends.items()}
    if "z" in found:
        along = ends.get("x")
        whole = along or (Number(_unknown(scope, path, "x", span)[0], find_unit("mm")),) * 2
        heights = [plane_height(scope, x, span) for x in whole]
        low, high = found["z"]
        found["z"] = (make.minus(low, make.greatest(heights)), make.minus(high, make.least(heights)))
    return found


def _ranges(scope: Scope, path: str, span: Span) -> Iterable[tuple[str, tuple[Number, Number]]]:
    for axis in AXES:
        where = f"{path}.extent.{axis}"
        entry = scope.shared.vocabulary.entry(where)
        ends = bind_range(scope, where, entry, span) if entry is not None and entry.kind == "range" else None
        if ends is not None:
            yield axis, ends
