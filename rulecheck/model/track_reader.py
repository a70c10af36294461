"""Track files: a chain of segments to `Track`."""

from __future__ import annotations

import math

from pydantic import Field

from rulecheck.diagnostics import Faults, Span
from rulecheck.model.edge import Leaf, Shape, shaped
from rulecheck.model.ruleset_reader import text
from rulecheck.model.track import Segment, Track, TrackKind
from rulecheck.quantity.reading_values import read_quantity
from rulecheck.quantity.units import find_unit
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located
from rulecheck.reading.workspace import Workspace
from rulecheck.reading.yaml_reader import read_yaml

KINDS = ("circuit", "hill")
DIRECTIONS = ("left", "right")
MOST_SEGMENTS = 2_000
MOST_STEPS = 100_000
"""So many steps may a lap take: the length of the track over its step."""
STEP = 2.0
"""Step in m of a lap, where the track states none."""
_STEEPEST = math.radians(45)
_CLOSES_WITHIN = 1.0
_TURNS_WITHIN = math.radians(10)


class SegmentShape(Shape):
    """A piece of the driven line."""

    name: Leaf | None = Field(None, description="What it is called, such as the name of a corner")
    length: Leaf = Field(description="Length along the road")
    radius: Leaf | None = Field(None, description="Radius of the driven line; left out where it is straight")
    direction: Leaf | None = Field(None, description="left or right; needed where there is a radius")
    grade: Leaf | None = Field(None, description="Rise over level length, positive uphill")
    banking: Leaf | None = Field(None, description="Angle across the road, positive where it leans into the corner")
    dip: Leaf | None = Field(None, description="Vertical radius of a dip")
    crest: Leaf | None = Field(None, description="Vertical radius of a crest")


class TrackShape(Shape):
    """A track file."""

    track: Leaf = Field(description="Name of the track")
    kind: Leaf = Field(description="circuit (closed, flying start) or hill (standing start, open finish)")
    note: Leaf | None = Field(None, description="A remark")
    altitude: Leaf = Field(description="Altitude at the start")
    step: Leaf | None = Field(None, description="Greatest step of a lap that is computed; 2 m where it is left out")
    segments: list[SegmentShape] = Field(description="The driven line from the start, piece by piece")


def read_track(workspace: Workspace, file: str, asked: Span | None = None) -> Track:
    """Read a track file. Raises `Refused` with every fault."""
    root = read_yaml(workspace, file, asked)
    faults = Faults()
    shape = shaped(TrackShape, root, faults)
    faults.settle()
    assert shape is not None
    reading = _Reading(faults)
    kind = reading.word(shape.kind, KINDS, "kind of track")
    altitude = reading.number(shape.altitude, "m")
    step = reading.number(shape.step, "m", least=0.01) if shape.step is not None else STEP
    segments = tuple(
        reading.segment(item, place) for place, item in enumerate(shape.segments[: MOST_SEGMENTS + 1], start=1)
    )
    faults.settle()
    kept: TrackKind = "hill" if kind == "hill" else "circuit"
    track = Track(shape.track.text, file, kept, altitude, step, segments)
    _can_be_driven(track, shape, faults)
    faults.settle()
    return track


class _Reading:
    """Reads values and notes their faults."""

    def __init__(self, faults: Faults) -> None:
        self.faults = faults

    def number(self, where: Located, unit: str, least: float | None = None) -> float:
        """A value in SI units; 0 with the fault noted where it cannot be read or is too small."""
        declared = find_unit(unit)
        read = read_quantity(where, declared.dimension, declared=declared, faults=self.faults)
        if read is None:
            return 0.0
        rational, power = read.si()
        value = float(rational) * math.pi**power
        if least is not None and value < least:
            self.faults.add(
                "bad-track", f"'{where.text}' is too small", where.span, expected=f"at least {least:g} {unit}"
            )
        return value

    def word(self, where: Located, known: tuple[str, ...], what: str) -> str:
        """One of some words."""
        if where.text not in known:
            advice = nearest(where.text, known)
            self.faults.add(
                "unknown-choice", f"'{where.text}' is no {what}", where.span, expected=" or ".join(known), advice=advice
            )
        return where.text

    def segment(self, shape: SegmentShape, place: int) -> Segment:
        """One piece of the line."""
        return Segment(
            name=text(shape.name) or f"segment {place}",
            length=self.number(shape.length, "m", least=0.1),
            curvature=self._curvature(shape),
            slope=math.atan(self._angle(shape.grade, "%")),
            banking=self._angle(shape.banking, "deg"),
            dip=self._vertical(shape),
            span=shape.length.span,
        )

    def _curvature(self, shape: SegmentShape) -> float:
        if shape.radius is None:
            if shape.direction is not None:
                told = "a straight has no direction"
                self.faults.add("bad-track", told, shape.direction.span, advice="add its radius, or take the key out")
            return 0.0
        radius = self.number(shape.radius, "m", least=1.0)
        if shape.direction is None:
            self.faults.add("missing-key", "'direction:' is missing here", shape.radius.span, expected="left or right")
            return 0.0
        direction = self.word(shape.direction, DIRECTIONS, "direction")
        return 0.0 if radius <= 0 else (1 if direction == "right" else -1) / radius

    def _angle(self, where: Located | None, unit: str) -> float:
        if where is None:
            return 0.0
        value = self.number(where, unit)
        if abs(value) >= _STEEPEST:
            told = f"'{where.text}' is steeper than a road can be"
            self.faults.add("bad-track", told, where.span, expected="less than 45 deg, a grade of 78 %")
        return value

    def _vertical(self, shape: SegmentShape) -> float:
        if shape.dip is not None and shape.crest is not None:
            self.faults.add("bad-track", "a segment is a dip or a crest, not both", shape.crest.span)
            return 0.0
        where = shape.dip or shape.crest
        if where is None:
            return 0.0
        radius = self.number(where, "m", least=1.0)
        return 0.0 if radius <= 0 else (1 if where is shape.dip else -1) / radius


def _can_be_driven(track: Track, shape: TrackShape, faults: Faults) -> None:
    """Note what no lap can be driven on: no segments, too many steps, a circuit that does not close."""
    count, place = len(track.segments), shape.track.span
    if not count or count > MOST_SEGMENTS:
        faults.add("bad-track", f"the track has {count or 'no'} segments", place, expected=f"1 to {MOST_SEGMENTS}")
    elif track.length > MOST_STEPS * track.step:
        told = f"{track.length:.0f} m in steps of {track.step:g} m are more than {MOST_STEPS} steps"
        faults.add("too-large", told, shape.step.span if shape.step else place, advice="state a larger step")
    if track.kind != "circuit":
        return
    rise = sum(segment.length * math.sin(segment.slope) for segment in track.segments)
    if abs(rise) > _CLOSES_WITHIN:
        told = f"the circuit ends {abs(rise):.1f} m {'above' if rise > 0 else 'below'} its start"
        faults.add("bad-track", told, place, expected="the height of the start, within 1 m", advice="mend the grades")
    turned = sum(segment.length * segment.curvature for segment in track.segments)
    if abs(math.remainder(turned, 2 * math.pi)) > _TURNS_WITHIN:
        told = f"the circuit turns by {math.degrees(turned):.0f} deg in all"
        faults.add("bad-track", told, place, expected="whole turns of 360 deg, within 10 deg", advice="mend the radii")
