"""Cars and tracks for the checks of the lap: what the solver is handed, in SI units, and how it is asked."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping

from rulecheck.model.solver import Answer, Argument, Estimate
from rulecheck.model.track import Segment, Track, TrackKind
from rulecheck.physics.lap.solver import LAP

GRAVITY = 9.80665
# A point mass in still air with all wheels driven: what every closed form of a textbook starts from.
POINT: Mapping[str, Argument] = {
    "mass": 900.0, "place": 1.6, "height": 0.0, "wheelbase": 2.9, "front_area": 0.0, "rear_area": 0.0, "drag_area": 0.0,
    "density": 1.2, "altitude": 0.0, "temperature": 288.15, "rolling": 0.0, "power": 1e9, "fuel_flow": 0.0,
    "driven": "both", "front_grip": 1.4, "rear_grip": 1.4, "front_fade": 0.0, "rear_fade": 0.0, "front_load": 1.0,
    "rear_load": 1.0, "front_transfer": 0.0, "rear_transfer": 0.0, "distribution": 0.5, "distribution_law": "ideal",
    "to_bus": None, "machine": None, "front_force": None, "rear_force": None, "rule": None, "store_power": None,
    "store_efficiency": None, "store_room": None, "store_allowance": None,
}  # fmt: skip
# A car with everything: wings, drag, height, fuel, rear drive, fixed brakes, tyres that fade with load, a rear machine.
WHOLE: Mapping[str, Argument] = {
    **POINT, "height": 0.31, "front_area": 1.45, "rear_area": 1.95, "drag_area": 0.96, "density": 1.16, "altitude": 100.0,
    "temperature": 295.0, "rolling": 0.014, "power": 330e3, "fuel_flow": 0.023, "driven": "rear", "front_grip": 1.6,
    "rear_grip": 1.65, "front_fade": 0.12, "rear_fade": 0.1, "front_load": 4000.0, "rear_load": 4500.0,
    "front_transfer": 95.0, "rear_transfer": 80.0, "distribution": 0.58, "distribution_law": "fixed", "to_bus": 0.9,
    "machine": 115e3, "front_force": 0.0, "rear_force": 4200.0, "rule": 110e3, "store_power": 120e3,
    "store_efficiency": 0.95, "store_room": 3e6, "store_allowance": 2e6,
}  # fmt: skip


def track(*segments: Segment, kind: TrackKind = "circuit", step: float = 2.0, altitude: float = 100.0) -> Track:
    """A track of the segments given."""
    return Track("test", "test.track.yaml", kind, altitude, step, segments)


def straight(length: float, **more: float) -> Segment:
    """A straight."""
    return Segment("straight", length, **more)


def bend(radius: float, turn: float = math.pi, **more: float) -> Segment:
    """A corner to the right by an angle in rad; to the left where the radius is negative."""
    return Segment("bend", abs(radius) * turn, 1 / radius, **more)


def drive(car: Mapping[str, Argument], on: Track, **changes: Argument) -> dict[str, Answer]:
    """The answers of the lap."""
    return dict(LAP.run({**car, **changes}, on, False))


def estimates(answers: Mapping[str, Answer], names: Iterable[str] = ()) -> dict[str, Estimate]:
    """The numbers among answers, or those named, which must be there."""
    wanted = names or [name for name, answer in answers.items() if isinstance(answer, Estimate)]
    found = {}
    for name in wanted:
        answer = answers[name]
        assert isinstance(answer, Estimate), (name, answer)
        found[name] = answer
    return found


def estimate(answers: Mapping[str, Answer], name: str) -> Estimate:
    """One number among answers."""
    return estimates(answers, [name])[name]


def time_of(car: Mapping[str, Argument], on: Track, **changes: Argument) -> float:
    """The time of a lap."""
    return estimate(drive(car, on, **changes), "time").value


def is_near(answer: Estimate, true: float, times: float = 1.0) -> bool:
    """Whether the true value lies within the bound, and the bound is worth something."""
    return abs(answer.value - true) <= times * answer.bound and answer.bound <= 1e-2 * abs(true)
