"""The track cut into pieces of equal steps, with what the road does to the loads on each of them."""

from __future__ import annotations

import math
from dataclasses import dataclass

from rulecheck.model.track import Segment, Track
from rulecheck.physics.lap.car import GRAVITY, Car

LAPSE = 0.0065
"""Fall of the temperature with altitude in K/m (ISO 2533)."""
_EXPONENT = GRAVITY / (LAPSE * 287.05287) - 1
_MOST_RISE = 5.0
"""A piece rises by no more than this in m, so that the air on it is that of its middle."""


@dataclass(frozen=True, slots=True)
class Piece:
    """A stretch of `count` steps of `step` m on which nothing changes but the speed.

    Loads over mass are `normal + normal_rate * u` and lateral acceleration in the plane of the road is
    `lateral + lateral_rate * u`, u the square of the speed; `along` is the part of gravity along the road, positive
    uphill; `density` is that of the air. `curved` is set where the line bends.
    """

    segment: int
    name: str
    count: int
    step: float
    normal: float
    normal_rate: float
    lateral: float
    lateral_rate: float
    along: float
    density: float
    curved: bool

    @property
    def length(self) -> float:
        """In m."""
        return self.count * self.step


def pieces_of(track: Track, car: Car, step: float, halvings: int = 0) -> list[Piece]:
    """The track in pieces whose steps are at most `step` m long, each then halved so many times."""
    found: list[Piece] = []
    altitude = track.altitude
    for number, segment in enumerate(track.segments):
        rise = segment.length * math.sin(segment.slope)
        parts = max(1, math.ceil(abs(rise) / _MOST_RISE))
        for _ in range(parts):
            middle = altitude + rise / parts / 2
            found.append(_piece(number, segment, segment.length / parts, step, halvings, air_at(car, middle)))
            altitude += rise / parts
    return found


def air_at(car: Car, altitude: float) -> float:
    """Density of the air in kg/m³ at an altitude in m, from that of the car's weather by the lapse of ISO 2533."""
    ratio = 1 - LAPSE * (altitude - car.altitude) / car.temperature
    if ratio <= 0:
        raise ValueError("the track lies above the air")
    return float(car.density * ratio**_EXPONENT)


def _piece(number: int, segment: Segment, length: float, step: float, halvings: int, density: float) -> Piece:
    count = max(1, math.ceil(length / step - 1e-9)) << halvings
    bend = abs(segment.curvature)
    weight = GRAVITY * math.cos(segment.slope)
    sine, cosine = math.sin(segment.banking), math.cos(segment.banking)
    return Piece(
        segment=number,
        name=segment.name,
        count=count,
        step=length / count,
        normal=weight * cosine,
        normal_rate=segment.dip + bend * sine,
        lateral=-weight * sine,
        lateral_rate=bend * cosine,
        along=GRAVITY * math.sin(segment.slope),
        density=density,
        curved=bend > 0,
    )
