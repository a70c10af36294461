"""Zones, templates and what rules hold against them: nodes to frozen values."""

from __future__ import annotations

from collections.abc import Iterable

from rulecheck.diagnostics import Faults, Span
from rulecheck.model.zones import (
    RANGES,
    SIDES,
    VIEW_NAMES,
    Fitting,
    Held,
    JoinedPart,
    NamedPart,
    PlaceCondition,
    PolygonPart,
    RangePart,
    SidePart,
    Sight,
    Template,
    ZonePart,
    ZoneRule,
)
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence

_KEYS = (*RANGES, *SIDES, "view", "points", "all", "any")
MOST_CORNERS = 60
"""Corners of one polygon of a zone."""
MOST_PARTS = 60
"""Parts that one zone joins directly."""


def read_zone(name: str, key: Located, node: Node, faults: Faults) -> ZoneRule | None:
    """A zone under its name, or None with the faults noted."""
    inner: Node = node
    said: dict[str, Located] = {}
    if isinstance(node, Mapping):
        inner = Mapping(tuple(entry for entry in node if entry.key.text not in _HEAD), node.span)
        for word in _HEAD:
            value = node.get(word)
            if isinstance(value, Located):
                said[word] = value
            elif value is not None:
                faults.add("bad-structure", f"'{word}' of a zone is a single text", value.span)
    whole = _part(inner, key.span, faults)
    if whole is None:
        return None
    return ZoneRule(name, key.span, whole, said["meaning"].text if "meaning" in said else "", said.get("for"))


_HEAD = ("meaning", "for")


def _part(node: Node, place: Span, faults: Faults) -> ZonePart | None:
    if isinstance(node, Located):
        return NamedPart(node)
    if not isinstance(node, Mapping) or not len(node):
        faults.add("bad-structure", "a zone has borders", place, expected=_SAMPLE)
        return None
    before = len(faults.found)
    _only(node, _KEYS, "a zone", faults)
    parts = [part for part in _parts(node, faults) if part is not None]
    if len(faults.found) > before:
        return None
    if not parts:
        faults.add("bad-structure", "this zone has a view and no border", node.span, expected=_SAMPLE)
        return None
    return parts[0] if len(parts) == 1 else JoinedPart("all", tuple(parts))


_SAMPLE = (
    "{x: [a, b], z: {to: c}}, {behind: plane(a, b, c)}, {view: side, points: [[x, z], …]}, {all: […]} or {any: […]}"
)


def _parts(node: Mapping, faults: Faults) -> Iterable[ZonePart | None]:
    view = _view(node, faults)
    used = False
    for entry in node:
        key = entry.key.text
        if key in RANGES:
            yield _range(entry.key, entry.value, faults)
        elif key in SIDES:
            used = used or bool(view)
            yield _side(entry.key, entry.value, view, faults)
        elif key == "points":
            used = True
            yield _polygon(entry.value, entry.key.span, view, faults)
        elif key in ("all", "any"):
            yield _joined(key, entry.value, entry.key.span, faults)
    if view and not used:
        place = node.key("view")
        told = "'view' stands without points, plane or line"
        faults.add(
            "bad-structure", told, place.span if place else node.span, expected="view: side, points: [[x, z], …]"
        )


def _view(node: Mapping, faults: Faults) -> str:
    view = node.get("view")
    if view is None:
        return ""
    if isinstance(view, Located) and view.text in VIEW_NAMES:
        return view.text
    said = view.text if isinstance(view, Located) else "this"
    advice = nearest(said, VIEW_NAMES)
    faults.add("unknown-choice", f"'{said}' is not a view", view.span, expected=" or ".join(VIEW_NAMES), advice=advice)
    return VIEW_NAMES[0]  # with the fault noted, so that nothing more is said of a view that is missing


def _range(key: Located, node: Node, faults: Faults) -> RangePart | None:
    ends: list[Node | None] = [None, None]
    if isinstance(node, Sequence) and len(node.items) == 2:
        ends = list(node.items)
    elif isinstance(node, Mapping) and len(node) and all(entry.key.text in ("from", "to") for entry in node):
        ends = [node.get("from"), node.get("to")]
    low, high = (end if isinstance(end, Located) else None for end in ends)
    if any(end is not None and not isinstance(end, Located) for end in ends) or (low is None and high is None):
        told = f"'{key.text}' of a zone is a range"
        faults.add("bad-structure", told, node.span, expected="[a, b], {from: a} or {to: b}")
        return None
    return RangePart(key.text, low, high)


def _side(key: Located, node: Node, view: str, faults: Faults) -> SidePart | None:
    if isinstance(node, Located):
        return SidePart(key.text, node, view)
    faults.add("bad-structure", f"'{key.text}' takes one plane or line", node.span, expected='"plane(a, b, c)"')
    return None


def _polygon(node: Node, place: Span, view: str, faults: Faults) -> PolygonPart | None:
    if not view:
        faults.add("missing-key", "'points' stand without a view", place, expected="view: side, plan or front")
    found: list[Located | tuple[Located, Located]] = []
    for item in node if isinstance(node, Sequence) else ():
        if isinstance(item, Located):
            found.append(item)
        elif (pair := _pair(item)) is not None:
            found.append(pair)
        else:
            faults.add("bad-structure", "a corner is a point, or two lengths", item.span, expected=_CORNER)
            return None
    if not 3 <= len(found) <= MOST_CORNERS:
        told = f"a polygon has 3 to {MOST_CORNERS} corners, and this has {len(found)}"
        faults.add("bad-structure", told, place, expected="points: [[x, z], [x, z], [x, z]]")
        return None
    return PolygonPart(view, tuple(found), place)


_CORNER = '[340 mm, 880 mm] or "points.nose"'


def _pair(node: Node) -> tuple[Located, Located] | None:
    items = node.items if isinstance(node, Sequence) else ()
    lengths = [item for item in items if isinstance(item, Located)]
    return (lengths[0], lengths[1]) if len(lengths) == len(items) == 2 else None


def _joined(word: str, node: Node, place: Span, faults: Faults) -> JoinedPart | None:
    items = list(node) if isinstance(node, Sequence) else []
    if not 1 <= len(items) <= MOST_PARTS:
        faults.add(
            "bad-structure", f"'{word}' takes a list of zones", place, expected=f"{word}: [a_zone, {{x: [a, b]}}]"
        )
        return None
    parts = [_part(item, item.span, faults) for item in items]
    return JoinedPart(word, tuple(part for part in parts if part is not None))


# --- templates -------------------------------------------------------------------------------------------------------


def read_template(name: str, key: Located, node: Node, faults: Faults) -> Template | None:
    """A template under its name, or None with the faults noted."""
    if not isinstance(node, Mapping):
        faults.add(
            "bad-structure", "a template is an outline in a view", key.span, expected="{view: side, points: […]}"
        )
        return None
    _only(node, ("view", "points", "meaning"), "a template", faults)
    points = node.get("points")
    polygon = _polygon(points, key.span, _view(node, faults), faults) if points is not None else None
    if points is None:
        faults.add("missing-key", f"template '{name}' has no points", key.span, expected="points: [[x, z], …]")
    if polygon is None:
        return None
    bare = [point for point in polygon.points if isinstance(point, Located)]
    for point in bare:
        faults.add("bad-structure", "a corner of a template is two lengths", point.span, expected="[340 mm, 880 mm]")
    pairs = tuple(point for point in polygon.points if isinstance(point, tuple))
    meaning = node.get("meaning")
    said = meaning.text if isinstance(meaning, Located) else ""
    return None if bare else Template(name, key.span, polygon.view, pairs, said)


# --- what rules ask --------------------------------------------------------------------------------------------------


def read_held(key: Located, node: Node, faults: Faults) -> Held | None:
    """`inside:` or `outside:` of a rule: a zone, or `{zone, what}`."""
    if isinstance(node, Located):
        return Held(key.text, node, (), node.span)
    zone = node.get("zone") if isinstance(node, Mapping) else None
    if isinstance(node, Mapping):
        _only(node, ("zone", "what"), f"'{key.text}'", faults)
    if not isinstance(zone, Located) or not isinstance(node, Mapping):
        expected = "a zone, or {zone: name, what: points.nose}"
        faults.add("bad-structure", f"'{key.text}' names a zone", key.span, expected=expected)
        return None
    return Held(key.text, zone, _several(node.get("what"), f"'what' of '{key.text}'", faults), key.span)


def place_conditions(node: Node | None, faults: Faults) -> tuple[PlaceCondition, ...]:
    """What a rule or branch asks of places: `inside`, `outside`, `passes`, `stops`, `sight`, `cover`."""
    found: list[PlaceCondition | None] = []
    for entry in node if isinstance(node, Mapping) else ():
        word = entry.key.text
        if word in ("inside", "outside"):
            found.append(read_held(entry.key, entry.value, faults))
        elif word in ("passes", "stops"):
            found.append(read_fitting(entry.key, entry.value, faults))
        elif word in ("sight", "cover"):
            found.append(read_sight(entry.key, entry.value, faults))
    return tuple(item for item in found if item is not None)


def read_fitting(key: Located, node: Node, faults: Faults) -> Fitting | None:
    """`passes:` or `stops:` of a rule."""
    expected = "{template: a, through: b, at: points.c}"
    found = _leaves(key, node, ("template", "through", "at"), expected, faults)
    if found is None:
        return None
    return Fitting(found["template"], found["through"], found["at"], key.text == "passes", key.span)


def read_sight(key: Located, node: Node, faults: Faults) -> Sight | None:
    """`sight:` or `cover:` of a rule."""
    expected = "{from: points.eye, to: points.lamp, past: [aero_surfaces.rear_wing], view: side}"
    if not isinstance(node, Mapping) or any(node.get(part) is None for part in ("from", "to", "past")):
        faults.add("bad-structure", f"'{key.text}' is a line of sight", key.span, expected=expected)
        return None
    _only(node, ("from", "to", "past", "view"), f"'{key.text}'", faults)
    origins, targets, past = (
        _several(node.get(part), f"'{part}' of '{key.text}'", faults) for part in ("from", "to", "past")
    )
    return Sight(origins, targets, past, _view(node, faults), key.text == "sight", key.span)


def _leaves(
    key: Located, node: Node, names: tuple[str, ...], expected: str, faults: Faults
) -> dict[str, Located] | None:
    found: dict[str, Located] = {}
    for name in names:
        inner = node.get(name) if isinstance(node, Mapping) else None
        if isinstance(inner, Located):
            found[name] = inner
    if isinstance(node, Mapping):
        _only(node, names, f"'{key.text}'", faults)
    if len(found) == len(names):
        return found
    lacking = " and ".join(f"'{name}:'" for name in names if name not in found)
    faults.add("missing-key", f"'{key.text}' lacks {lacking}", key.span, expected=expected)
    return None


def _several(node: Node | None, what: str, faults: Faults) -> tuple[Located, ...]:
    if node is None:
        return ()
    items = (node,) if isinstance(node, Located) else tuple(node) if isinstance(node, Sequence) else ()
    found = tuple(item for item in items if isinstance(item, Located))
    if not found or len(found) < len(items):
        faults.add(
            "bad-structure", f"{what} is one thing, or a list of them", node.span, expected="[points.a, points.b]"
        )
    return found


def _only(node: Mapping, known: tuple[str, ...], what: str, faults: Faults) -> None:
    for entry in node:
        if entry.key.text not in known:
            told = f"{what} has no key '{entry.key.text}'"
            advice = nearest(entry.key.text, known)
            faults.add("unknown-key", told, entry.key.span, expected=" or ".join(known), advice=advice)
