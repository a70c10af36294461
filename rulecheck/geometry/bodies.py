"""What a thing offers to be measured by: its least and greatest coordinates, and its outlines by view."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from rulecheck.geometry.convex import Corner
from rulecheck.geometry.polygons import Polygon
from rulecheck.graph.terms import Term

AXES = "xyz"
VIEWS = {"side": "xz", "plan": "xy", "front": "yz"}
"""The axes of each view, across the paper first."""
Span = tuple[Term, Term]
Vector = tuple[Term, Term, Term]


@dataclass(frozen=True, slots=True)
class Body:
    """One body. It is judged as all that its spans and outlines allow: the common part of what they hold.

    `spans` has least and greatest of x, y and z (m, from the front axle and the reference plane); one that the design
    does not offer is an unknown term. `is_point` marks a body without size.
    """

    spans: Mapping[str, Span]
    outlines: Mapping[str, Polygon] = field(default_factory=dict)
    is_point: bool = False

    @property
    def point(self) -> Vector:
        """The least corner; of a point the point itself."""
        return self.spans["x"][0], self.spans["y"][0], self.spans["z"][0]

    def in_view(self, view: str) -> Polygon:
        """Its outline in a view; where it offers none, the rectangle of its spans."""
        own = self.outlines.get(view)
        if own is not None:
            return own
        (left, right), (low, high) = (self.spans[axis] for axis in VIEWS[view])
        return ((left, low), (right, low), (right, high), (left, high))

    def corners(self) -> list[Vector]:
        """Points whose hull holds the body: corners of an outline at both ends of the axis across its view."""
        if self.is_point:
            return [self.point]
        view = next((view for view in VIEWS if view in self.outlines), "side")
        axes = VIEWS[view]
        rest = next(axis for axis in AXES if axis not in axes)
        found = []
        for corner in self.in_view(view):
            for end in dict.fromkeys(self.spans[rest]):
                by_axis = {axes[0]: corner[0], axes[1]: corner[1], rest: end}
                found.append((by_axis["x"], by_axis["y"], by_axis["z"]))
        return found


def point_body(point: Vector) -> Body:
    """A body without size."""
    return Body({axis: (value, value) for axis, value in zip(AXES, point, strict=True)}, is_point=True)


def in_view(point: Vector, view: str) -> Corner:
    """A point as it is seen in a view.

    >>> in_view(("x", "y", "z"), "plan")
    ('x', 'y')
    """
    first, second = (point[AXES.index(axis)] for axis in VIEWS[view])
    return first, second
