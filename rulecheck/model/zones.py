"""Zones and templates of a ruleset as written: borders by axis, planes and lines, polygons in a view, joined."""

from __future__ import annotations

from dataclasses import dataclass

from rulecheck.diagnostics import Span
from rulecheck.reading.nodes import Located

SIDES = {
    "behind": ("x", 1), "ahead_of": ("x", -1), "right_of": ("y", 1), "left_of": ("y", -1), "above": ("z", 1),
    "below": ("z", -1),
}  # fmt: skip
"""The side of a plane or line that a word means, by an axis and its sense."""
RANGES = ("x", "y", "z", "above_ground")
VIEW_NAMES = ("side", "plan", "front")


@dataclass(frozen=True, slots=True)
class RangePart:
    """From `low` to `high` along an axis, or in height above ground; None where it is free."""

    axis: str
    low: Located | None
    high: Located | None


@dataclass(frozen=True, slots=True)
class SidePart:
    """One side of a plane, or of a line in a view."""

    side: str
    border: Located
    view: str


@dataclass(frozen=True, slots=True)
class PolygonPart:
    """A polygon in a view: corners as points, or as two lengths each."""

    view: str
    points: tuple[Located | tuple[Located, Located], ...]
    span: Span


@dataclass(frozen=True, slots=True)
class NamedPart:
    """Another zone by its name."""

    name: Located


@dataclass(frozen=True, slots=True)
class JoinedPart:
    """Parts together: all of them, or any."""

    word: str
    parts: tuple[ZonePart, ...]


ZonePart = RangePart | SidePart | PolygonPart | NamedPart | JoinedPart


@dataclass(frozen=True, slots=True)
class ZoneRule:
    """A named zone; `loop` says of which elements it is, where it names one."""

    name: str
    span: Span
    whole: ZonePart
    meaning: str
    loop: Located | None = None


@dataclass(frozen=True, slots=True)
class Template:
    """A named outline that is placed at a point: corners as two lengths each, from that point."""

    name: str
    span: Span
    view: str
    points: tuple[tuple[Located, Located], ...]
    meaning: str


@dataclass(frozen=True, slots=True)
class Held:
    """What is held against a zone, `inside` or `outside`: `what` are formulas, empty for the element of the rule."""

    word: str
    zone: Located
    what: tuple[Located, ...]
    span: Span


@dataclass(frozen=True, slots=True)
class Fitting:
    """A template at a point, against an opening: `passes` says whether it should lie inside."""

    template: Located
    through: Located
    at: Located
    passes: bool
    span: Span


@dataclass(frozen=True, slots=True)
class Sight:
    """Lines of sight from points to points past things, in a view or in space; `clear` says whether none may be cut."""

    origins: tuple[Located, ...]
    targets: tuple[Located, ...]
    past: tuple[Located, ...]
    view: str
    clear: bool
    span: Span


PlaceCondition = Held | Fitting | Sight
"""What a rule asks of places."""
