"""The deceleration of a car at the grip of its axles, and the integral of it from one speed to the other.

Loads: balance of forces and of moments at the deceleration; two like wheels on each axle, each at half its load. The
distance is the integral of du / (2 d) over u = v², the time that of dv / d, by Simpson's rule (any textbook).
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from functools import partial

from rulecheck.model.solver import Answer, Argument, Estimate, NoAnswer
from rulecheck.model.track import Track
from rulecheck.physics.handed import number

GRAVITY = 9.80665
"""m/s², standard gravity by definition."""
CELLS = 1024
"""Cells of the coarse integral; the fine one has twice as many."""
LEAST_BOUND = 1e-6
"""No bound is stated below this share of the value: it covers the bend where the other axle begins to lock first."""


@dataclass(frozen=True, slots=True)
class Axle:
    """One axle: grip at the load of its tyre's data, the share of it lost while the load doubles, that load in N, the
    mass that it carries at rest in kg, its downforce area in m², the mass that a braking car loads onto it (kg, above
    zero in front), and its share of the brake force."""

    grip: float
    fade: float
    rated: float
    mass: float
    area: float
    moved: float
    share: float

    def load(self, pressure: float, deceleration: float) -> float:
        """Load in N at a dynamic pressure in Pa."""
        return self.mass * GRAVITY + self.area * pressure + self.moved * deceleration

    def force(self, load: float) -> float:
        """Greatest brake force in N."""
        return self.grip * load * (1 + self.fade - self.fade * load / (2 * self.rated))

    def terms(self, pressure: float) -> tuple[float, float, float]:
        """The greatest force as a polynomial of the deceleration: its square, itself, and without it."""
        rest, fall = self.load(pressure, 0.0), self.grip * self.fade / (2 * self.rated)
        slope = self.grip * (1 + self.fade) - 2 * fall * rest
        return -fall * self.moved**2, slope * self.moved, self.force(rest)


@dataclass(frozen=True, slots=True)
class Car:
    """A car that brakes: mass in kg, air density in kg/m³, drag area in m²; the distribution ideal or as the axles say."""

    mass: float
    density: float
    drag_area: float
    front: Axle
    rear: Axle
    ideal: bool

    def locks(self, pressure: float) -> tuple[float, float]:
        """Decelerations in m/s² at which front and rear axle are at their grip; one and the same where it is ideal."""
        drag = self.drag_area * pressure
        front, rear = self.front.terms(pressure), self.rear.terms(pressure)
        if self.ideal:
            square, slope, rest = (one + other for one, other in zip(front, rear, strict=True))
            both = least_root(square, slope - self.mass, rest + drag)
            return both, both
        first, second = (
            least_root(square, slope - axle.share * self.mass, rest + axle.share * drag)
            for axle, (square, slope, rest) in ((self.front, front), (self.rear, rear))
        )
        return first, second

    def deceleration(self, squared: float) -> float:
        """The greatest deceleration without a locked wheel in m/s² at the square of a speed.

        Raises `ValueError` where an axle leaves the ground, or a load is beyond what the grip is known for.
        """
        pressure = self.density * squared / 2
        found = min(self.locks(pressure))
        for name, axle in (("front", self.front), ("rear", self.rear)):
            load = axle.load(pressure, found)
            at = f"at {3.6 * math.sqrt(squared):.1f} km/h"
            if not load > 0:
                raise ValueError(f"the {name} wheels leave the ground {at}")
            if axle.fade * load > (1 + axle.fade) * axle.rated:
                raise ValueError(f"the load of the {name} wheels is beyond what their grip is known for {at}")
        return found


def least_root(square: float, slope: float, rest: float) -> float:
    """The least positive root of a polynomial that is `rest` at zero and bends down; infinite where there is none.

    >>> least_root(-1.0, 1.0, 6.0), least_root(0.0, -2.0, 6.0), least_root(0.0, 1.0, 6.0)
    (3.0, 3.0, inf)
    """
    if rest <= 0:
        raise ValueError("an axle has no grip")
    under = -slope + math.sqrt(slope * slope - 4 * square * rest)
    return 2 * rest / under if under > 0 else math.inf


def simpson(over: Callable[[float], float], low: float, high: float, cells: int) -> float:
    """Simpson's rule over an even number of cells.

    >>> simpson(lambda x: x**3, 0.0, 2.0, 4)
    4.0
    """
    width = (high - low) / cells
    inner = sum((4 if index % 2 else 2) * over(low + index * width) for index in range(1, cells))
    return (over(low) + inner + over(high)) * width / 3


def stop(values: Mapping[str, Argument], track: Track | None, quick: bool) -> dict[str, Answer]:
    """The outputs of the stop by name; needs no track. With `quick` the coarse integrals alone, without bounds.

    Raises `ValueError` where the car cannot be, or cannot brake so.
    """
    del track
    car, speed, end = car_of(values), number(values, "speed"), number(values, "end_speed")
    if not 0 <= end <= speed:
        raise ValueError("the end speed is not between zero and the speed")

    def distance(cells: int) -> float:
        return simpson(lambda squared: 0.5 / car.deceleration(squared), end * end, speed * speed, cells)

    def time(cells: int) -> float:
        return simpson(lambda v: 1 / car.deceleration(v * v), end, speed, cells)

    estimate = partial(_estimate, quick=quick)
    rates = car.deceleration(speed * speed), car.deceleration(end * end)
    return {
        "distance": estimate(distance),
        "time": estimate(time),
        "deceleration": Estimate(rates[0], LEAST_BOUND * rates[0]),
        "end_deceleration": Estimate(rates[1], LEAST_BOUND * rates[1]),
        "locks_first": _first(car, speed),
        "locks_first_at_end": _first(car, end),
    }


def _estimate(integral: Callable[[int], float], *, quick: bool) -> Estimate:
    rough = integral(CELLS)
    fine = rough if quick else integral(2 * CELLS)
    return Estimate(fine, abs(fine - rough) + LEAST_BOUND * abs(fine))


def _first(car: Car, speed: float) -> Answer:
    if car.ideal:
        return "both"
    front, rear = car.locks(car.density * speed * speed / 2)
    if abs(front - rear) <= LEAST_BOUND * min(front, rear):
        return NoAnswer("both axles lock at deceleration too alike to tell which is first")
    return "front" if front < rear else "rear"


def car_of(values: Mapping[str, Argument]) -> Car:
    """The car from the solver's arguments. Raises `ValueError` where one cannot be."""
    for name in ("mass", "wheelbase", "density", "front_grip", "rear_grip", "front_load", "rear_load"):
        if number(values, name) <= 0:
            raise ValueError(f"{name.replace('_', ' ')} is not positive")
    mass, place, wheelbase = (number(values, name) for name in ("mass", "place", "wheelbase"))
    share, moved = number(values, "distribution"), mass * number(values, "height") / wheelbase
    if not (0 < place < wheelbase and 0 < share < 1):
        raise ValueError("the centre of gravity is not between the axles, or one axle has no brakes")
    rear = place / wheelbase

    def axle(name: str, carried: float, onto: float, part: float) -> Axle:
        grip, fade, load, area = (number(values, f"{name}_{what}") for what in ("grip", "fade", "load", "area"))
        if fade < 0:
            raise ValueError(f"the grip of the {name} tyres grows with load")
        return Axle(grip, fade, load, carried * mass, area, onto, part)

    return Car(
        mass,
        number(values, "density"),
        number(values, "drag_area"),
        axle("front", 1 - rear, moved, share),
        axle("rear", rear, -moved, 1 - share),
        values["distribution_law"] == "ideal",
    )
