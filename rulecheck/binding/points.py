"""Points and what is measured between them, expanded to terms of their coordinates."""

from __future__ import annotations

from fractions import Fraction

from rulecheck.binding.bound import Line, Number, Place, Plane
from rulecheck.binding.inputs import bind_input, bind_point, stated
from rulecheck.binding.leaves import scalar
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.graph.terms import Term
from rulecheck.model.vocabulary import Entry
from rulecheck.operations.arithmetic import absolute, add, divide, multiply, rational_power, subtract, total
from rulecheck.operations.extremes import maximum, minimum
from rulecheck.operations.operation import Operation
from rulecheck.operations.roots_and_exponentials import sqrt
from rulecheck.operations.trigonometry import atan2
from rulecheck.quantity.dimension import LENGTH
from rulecheck.quantity.units import find_unit
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located

BUILT_IN_DATUMS = ("front_axle", "rear_axle", "ground")
VIEWS = {"side": "xz", "plan": "xy", "front": "yz"}
MOST_DATUMS = 50
"""So many datums may be counted one from the other."""
Vector = tuple[Term, ...]


def place_of(scope: Scope, path: str, entry: Entry, span: Span) -> Place:
    """A stated point, counted from the front axle and the reference plane whatever its datum."""
    key = ("place", path, scope.view.states)
    known: tuple[Place, set[str]] | None = scope.shared.memo.get(key)
    if known is None and scope.view.states:
        base = scope.shared.memo.get(("place", path, ()))
        known = base if base is not None and not scope.view.changes_any(base[1]) else None
    if known is None:
        apart = scope.apart()
        known = scope.shared.memo[key] = (_place(apart, path, entry, span), apart.touched)
    scope.touched.update(known[1])
    return known[0]


def _place(scope: Scope, path: str, entry: Entry, span: Span) -> Place:
    x, y, z = bind_point(scope, path, entry, span)
    datum = datum_of(scope, path)
    if datum is None and entry.datum_required and (stated(scope, path) or stated(scope, f"{path}.at")):
        gone = scope.missing(f"{path}.datum", "number", LENGTH, span)
        return Place(*(Number(gone, x.unit) for _ in range(3)))
    if datum is None:
        return Place(x, y, z)
    return from_datum(scope, Place(x, y, z), datum.text, datum.span, ())


def datum_of(scope: Scope, path: str) -> Located | None:
    """The datum stated for a point: below it, or beside it in the same item."""
    holder = path.rpartition(".")[0]
    for candidate in (f"{path}.datum", f"{holder}.datum"):
        entry = scope.shared.vocabulary.entry(candidate)
        if entry is None or entry.kind != "datum":
            continue  # a point may be called 'datum' too
        scope.touched.add(candidate)
        where = scalar(stated(scope, candidate))
        if where is not None:
            return where
    return None


def from_datum(scope: Scope, place: Place, datum: str, span: Span, above: tuple[str, ...]) -> Place:
    """A place given from a datum, counted from the front axle instead."""
    if datum == "front_axle":
        return place
    if datum == "ground":
        return _from_ground(scope, place, span)
    origin = _origin(scope, datum, span, above)
    return Place(*(_plus(scope, a, b) for a, b in zip((place.x, place.y, place.z), origin, strict=True)))


def _origin(scope: Scope, datum: str, span: Span, above: tuple[str, ...]) -> tuple[Number, Number, Number]:
    unit = find_unit("mm")
    zero = Number(scope.bank.number(0, LENGTH), unit)
    if datum == "rear_axle":
        return input_number(scope, "dimensions.wheelbase", span), zero, zero
    path = f"datums.{datum}"
    entry = scope.shared.vocabulary.entry(f"{path}.at")
    where = stated(scope, f"{path}.at")
    if datum in above or len(above) >= MOST_DATUMS:
        scope.fault("cycle", f"datums are counted from each other: {' from '.join((*above, datum))}", span)
        return zero, zero, zero
    if entry is None or (where is None and scope.view.design.names(path) is None):
        known = (*BUILT_IN_DATUMS, *(scope.view.design.names("datums") or ()))
        gone = scope.missing(f"datums.{datum}", "number", LENGTH, span)
        if scope.view.design.names("datums") is None or datum not in known:
            scope.fault(
                "unknown-name",
                f"there is no datum '{datum}'",
                span,
                expected=" or ".join(known),
                advice=nearest(datum, known),
            )
        return (Number(gone, unit),) * 3
    x, y, z = bind_point(scope, f"{path}.at", entry, span)
    scope.touched.add(f"{path}.from")
    held = scalar(stated(scope, f"{path}.from"))
    place = from_datum(scope, Place(x, y, z), held.text if held else "front_axle", span, (*above, datum))
    return place.x, place.y, place.z


def zero_place(scope: Scope) -> Place:
    """The origin of a datum."""
    zero = Number(scope.bank.number(0, LENGTH), find_unit("mm"))
    return Place(zero, zero, zero)


def _from_ground(scope: Scope, place: Place, span: Span) -> Place:
    """Heights from ground become heights from the reference plane: z less the plane's own height there."""
    height = plane_height(scope, place.x, span)
    return Place(place.x, place.y, Number(_make(scope, subtract, place.z.term, height), place.z.unit))


def plane_height(scope: Scope, x: Number, span: Span) -> Term:
    """Height of the reference plane above ground at x (a shear): h_f + (h_r - h_f) x / L."""
    front = input_number(scope, "dimensions.front_ride_height", span).term
    rear = input_number(scope, "dimensions.rear_ride_height", span).term
    wheelbase = input_number(scope, "dimensions.wheelbase", span).term
    slope = _make(scope, divide, _make(scope, subtract, rear, front), wheelbase)
    return _make(scope, add, front, _make(scope, multiply, slope, x.term))


def input_number(scope: Scope, path: str, span: Span) -> Number:
    """A number of the core vocabulary that the program itself needs."""
    entry = scope.shared.vocabulary.entry(path)
    bound = bind_input(scope, path, entry, span) if entry else None
    if isinstance(bound, Number):
        return bound
    return Number(scope.missing(path, "number", LENGTH, span), find_unit("mm"))


def _plus(scope: Scope, left: Number, right: Number) -> Number:
    if right.term.kind == "constant" and right.term is scope.bank.number(0, right.dimension):
        return left
    return Number(_make(scope, add, left.term, right.term), left.unit)


def _make(scope: Scope, operation: Operation, *arguments: Term) -> Term:
    """An operation whose dimensions are known to go together."""
    made = scope.apply(operation, arguments, None)
    assert made is not None
    return made


# --- vectors ---------------------------------------------------------------------------------------------------------


def _vector(place: Place, view: str) -> Vector:
    axes = {"x": place.x.term, "y": place.y.term, "z": place.z.term}
    return tuple(axes[axis] for axis in VIEWS.get(view, "xyz"))


def _from_to(scope: Scope, a: Place, b: Place, view: str = "") -> Vector:
    return tuple(_make(scope, subtract, q, p) for p, q in zip(_vector(a, view), _vector(b, view), strict=True))


def _dot(scope: Scope, u: Vector, v: Vector) -> Term:
    return _make(scope, total, *(_make(scope, multiply, a, b) for a, b in zip(u, v, strict=True)))


def _length(scope: Scope, u: Vector) -> Term:
    square = rational_power(Fraction(2))
    return _make(scope, sqrt, _make(scope, total, *(_make(scope, square, a) for a in u)))


def _cross(scope: Scope, u: Vector, v: Vector) -> Vector:
    """The vector product; in a view its one component."""
    pairs = ((1, 2), (2, 0), (0, 1)) if len(u) == 3 else ((0, 1),)
    return tuple(
        _make(scope, subtract, _make(scope, multiply, u[i], v[j]), _make(scope, multiply, u[j], v[i])) for i, j in pairs
    )


def _size(scope: Scope, u: Vector) -> Term:
    return _make(scope, absolute, u[0]) if len(u) == 1 else _length(scope, u)


# --- distances and angles --------------------------------------------------------------------------------------------


def distance_points(scope: Scope, p: Place, q: Place, view: str) -> Term:
    """Distance between points, never negative."""
    return _length(scope, _from_to(scope, p, q, view))


def distance_line(scope: Scope, p: Place, line: Line, view: str) -> Term:
    """Distance to a line (without ends) or a segment, never negative."""
    along, to = _from_to(scope, line.a, line.b, view), _from_to(scope, line.a, p, view)
    if not line.ends:
        return _make(scope, divide, _size(scope, _cross(scope, along, to)), _length(scope, along))
    share = _make(scope, divide, _dot(scope, along, to), _dot(scope, along, along))
    zero, one = scope.bank.number(0), scope.bank.number(1)
    held = _make(scope, minimum, _make(scope, maximum, share, zero), one)
    rest = tuple(_make(scope, subtract, t, _make(scope, multiply, held, a)) for t, a in zip(to, along, strict=True))
    return _length(scope, rest)


def distance_plane(scope: Scope, p: Place, plane: Plane) -> Term:
    """Signed: positive on the side from which a, b, c turn anticlockwise."""
    normal = _normal(scope, plane)
    return _make(scope, divide, _dot(scope, normal, _from_to(scope, plane.a, p)), _length(scope, normal))


def _normal(scope: Scope, plane: Plane) -> Vector:
    return _cross(scope, _from_to(scope, plane.a, plane.b), _from_to(scope, plane.a, plane.c))


def room_below(scope: Scope, p: Place, line: Line) -> Term:
    """Height of a line over a point in side view, signed."""
    a, b = line.a, line.b
    run = _make(scope, subtract, b.x.term, a.x.term)
    share = _make(scope, divide, _make(scope, subtract, p.x.term, a.x.term), run)
    rise = _make(scope, multiply, _make(scope, subtract, b.z.term, a.z.term), share)
    return _make(scope, subtract, _make(scope, add, a.z.term, rise), p.z.term)


def direction(scope: Scope, name: str) -> Line:
    """`vertical`, `horizontal` or `rearward` as a line of unit length through the origin."""
    unit = find_unit("mm")
    zero, one = Number(scope.bank.number(0, LENGTH), unit), Number(scope.bank.number(1, LENGTH), unit)
    origin = Place(zero, zero, zero)
    ends = {"vertical": Place(zero, zero, one), "rearward": Place(one, zero, zero), "horizontal": Place(one, one, zero)}
    return Line(origin, ends[name], direction=name)


def angle_lines(scope: Scope, first: Line, second: Line, view: str) -> Term:
    """0 to 90 deg between lines; without a view, `horizontal` is the level plane."""
    for line, other in ((first, second), (second, first)):
        if line.direction == "horizontal" and not view:
            return _to_level(scope, other)
    u, v = _from_to(scope, first.a, first.b, view), _from_to(scope, second.a, second.b, view)
    return _make(scope, atan2, _size(scope, _cross(scope, u, v)), _make(scope, absolute, _dot(scope, u, v)))


def _to_level(scope: Scope, line: Line) -> Term:
    u = _from_to(scope, line.a, line.b)
    return _make(scope, atan2, _make(scope, absolute, u[2]), _length(scope, u[:2]))


def angle_plane(scope: Scope, line: Line, plane: Plane) -> Term:
    """0 to 90 deg between a line and a plane."""
    u, normal = _from_to(scope, line.a, line.b), _normal(scope, plane)
    return _make(scope, atan2, _make(scope, absolute, _dot(scope, u, normal)), _size(scope, _cross(scope, u, normal)))


def turn_angle(scope: Scope, a: Place, b: Place, c: Place, view: str) -> Term:
    """0 to 180 deg at b between the ways to a and to c."""
    u, v = _from_to(scope, b, a, view), _from_to(scope, b, c, view)
    return _make(scope, atan2, _size(scope, _cross(scope, u, v)), _dot(scope, u, v))
