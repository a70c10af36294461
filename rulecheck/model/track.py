"""A track as a chain of segments, in SI units and doubles: what drives on it is no exact figure."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Literal

from rulecheck.diagnostics import Span

TrackKind = Literal["circuit", "hill"]


@dataclass(frozen=True, slots=True)
class Segment:
    """A piece of the driven line on which nothing changes but place and height.

    `length` in m along the road; `curvature` in 1/m of the line seen from above, positive to the right, 0 where it is
    straight; `slope` in rad, positive uphill; `banking` in rad, positive where it leans into the corner; `dip` in 1/m,
    the vertical curvature, positive in a dip and negative over a crest.
    """

    name: str
    length: float
    curvature: float = 0.0
    slope: float = 0.0
    banking: float = 0.0
    dip: float = 0.0
    span: Span | None = field(default=None, compare=False)


@dataclass(frozen=True, slots=True)
class Track:
    """A `circuit` is closed and driven with a flying start; a `hill` begins at rest and ends open.

    `altitude` in m at the start; `step` in m is the greatest step of a lap that is computed.
    """

    name: str
    file: str
    kind: TrackKind
    altitude: float
    step: float
    segments: tuple[Segment, ...]

    @property
    def length(self) -> float:
        """Along the road, in m."""
        return sum(segment.length for segment in self.segments)
