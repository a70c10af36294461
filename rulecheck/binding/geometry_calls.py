"""Points, lines and planes as functions of the language."""

from __future__ import annotations

from collections.abc import Callable

from rulecheck.binding import figures
from rulecheck.binding.bound import BROKEN, Bound, Broken, Line, Number, Place, Plane, kind_of
from rulecheck.binding.depth import USAGE, depth
from rulecheck.binding.names import as_place
from rulecheck.binding.points import (
    VIEWS,
    angle_lines,
    angle_plane,
    distance_line,
    distance_plane,
    distance_points,
    room_below,
    turn_angle,
)
from rulecheck.binding.scope import Scope
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import Call, Name, Syntax
from rulecheck.graph.terms import Term
from rulecheck.operations.arithmetic import negate
from rulecheck.quantity.dimension import LENGTH
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.units import find_unit

_USAGE = {
    "point": "point(x, y, z)",
    "line": "line(a, b)",
    "segment": "segment(a, b)",
    "plane": "plane(a, b, c)",
    "distance": "distance(p, q), distance(p, line(a, b)) or distance(p, plane(a, b, c))",
    "below": "below(p, line(a, b))",
    "above": "above(p, line(a, b))",
    "angle": "angle(line(a, b), vertical, side)",
    "turn_angle": "turn_angle(a, b, c)",
    "above_ground": "above_ground(p)",
    "depth": USAGE,
    "hull": "depth(p, hull([a, b, c]), side)",
}
GEOMETRY = tuple(_USAGE)


def geometry(scope: Scope, syntax: Call) -> Bound:
    """Bind a call of this family."""
    if syntax.function == "depth":
        return depth(scope, syntax)
    if syntax.function == "hull":
        told = "a hull is what 'depth' measures against"
        return scope.fault("wrong-arguments", told, syntax.span, expected=_USAGE["hull"])
    made: dict[str, Callable[[Scope, Call, list[Bound], str], Bound | None]] = {
        "point": _point,
        "line": _line,
        "segment": _line,
        "plane": _plane,
        "distance": _distance,
        "below": _room,
        "above": _room,
        "angle": _angle,
        "turn_angle": _turn,
        "above_ground": _above_ground,
    }
    given, view = _view(scope, syntax)
    bound = [_geometric(scope, argument) for argument in given]
    if any(isinstance(item, Broken) for item in bound):
        return BROKEN
    result = made[syntax.function](scope, syntax, bound, view)
    if result is not None:
        return result
    kinds = ", ".join(kind_of(item) for item in bound) or "nothing"
    return scope.fault(
        "wrong-arguments", f"'{syntax.function}' does not take {kinds}", syntax.span, expected=_USAGE[syntax.function]
    )


def _view(scope: Scope, syntax: Call) -> tuple[tuple[Syntax, ...], str]:
    """The last argument may name a view."""
    last = syntax.arguments[-1] if syntax.arguments else None
    if isinstance(last, Name) and len(last.path) == 1 and last.path[0] in VIEWS and last.path[0] not in scope.variables:
        return syntax.arguments[:-1], last.path[0]
    return syntax.arguments, ""


def _geometric(scope: Scope, syntax: Syntax) -> Bound:
    bound = scope.express(syntax)
    place = as_place(scope, bound, syntax.span)
    return place if place is not None else bound


def _length(scope: Scope, term: Term | None) -> Bound:
    return Number(term, find_unit("mm")) if term is not None else BROKEN


def _point(scope: Scope, syntax: Call, given: list[Bound], view: str) -> Bound | None:
    if len(given) != 3 or view or not all(isinstance(item, Number) for item in given):
        return None
    for item, argument in zip(given, syntax.arguments, strict=True):
        assert isinstance(item, Number)
        if item.dimension != LENGTH:
            return scope.fault(
                "wrong-dimension",
                f"'{show(argument)}' is {name_of(item.dimension)}",
                argument.span,
                expected="a length",
            )
    x, y, z = given
    assert isinstance(x, Number) and isinstance(y, Number) and isinstance(z, Number)
    return Place(x, y, z)


def _line(_scope: Scope, syntax: Call, given: list[Bound], view: str) -> Bound | None:
    match given:
        case [Place() as a, Place() as b] if not view:
            return Line(a, b, ends=syntax.function == "segment")
    return None


def _plane(_scope: Scope, _syntax: Call, given: list[Bound], view: str) -> Bound | None:
    match given:
        case [Place() as a, Place() as b, Place() as c] if not view:
            return Plane(a, b, c)
    return None


def _distance(scope: Scope, _syntax: Call, given: list[Bound], view: str) -> Bound | None:
    match given:
        case [Place() as p, Place() as q]:
            return _length(scope, distance_points(scope, p, q, view))
        case [Place() as p, Line() as line] if not line.direction:
            return _length(scope, distance_line(scope, p, line, view))
        case [Place() as p, Plane() as plane] if not view:
            return _length(scope, distance_plane(scope, p, plane))
    return None


def _room(scope: Scope, syntax: Call, given: list[Bound], view: str) -> Bound | None:
    match given:
        case [Place() as p, Line() as line] if not view and not line.direction:
            room = room_below(scope, p, line)
            return _length(scope, room if syntax.function == "below" else scope.apply(negate, [room], syntax.span))
    return None


def _angle(scope: Scope, _syntax: Call, given: list[Bound], view: str) -> Bound | None:
    match given:
        case [Line() as first, Line() as second]:
            return Number(angle_lines(scope, first, second, view), find_unit("deg"))
        case [Line() as line, Plane() as plane] if not view:
            return Number(angle_plane(scope, line, plane), find_unit("deg"))
    return None


def _turn(scope: Scope, _syntax: Call, given: list[Bound], view: str) -> Bound | None:
    match given:
        case [Place() as a, Place() as b, Place() as c]:
            return Number(turn_angle(scope, a, b, c, view), find_unit("deg"))
    return None


def _above_ground(scope: Scope, syntax: Call, given: list[Bound], view: str) -> Bound | None:
    match given:
        case [Place() as p] if not view:
            return figures.module_call(scope, "platform", "height_above_ground", p, syntax.span)
    return None
