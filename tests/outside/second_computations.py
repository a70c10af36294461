"""A second computation of every figure of the physics modules, from the definitions of books and not from the modules.

`second(...)` registers what gives some figures. A computation gets a `Bench`: a car put on a bench, with what any
computation may use: forces at their places, loads by sums of forces and moments, the air by an integral of its own. No value
of the program enters.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from physics_cars import GRAVITY, Car
from scipy import constants
from scipy.integrate import quad
from whole_cars import ENDS, WholeCar

Answer = float | str | None
DRY_AIR = 287.05287
"""Specific gas constant in J/(kg K): ISO 2533:1975."""
VAPOUR = 461.495
"""The same of water vapour, as the module states it; held on its own against the molar mass."""


@dataclass(frozen=True, slots=True)
class Second:
    """One computation: the figures that it gives, in their order, and how closely."""

    figures: tuple[str, ...]
    compute: Callable[[Bench], Iterable[Answer]]
    closely: float


REGISTERED: dict[str, Second] = {}


def second(*figures: str, closely: float = 1e-9) -> Callable[[Callable[[Bench], object]], Callable[[Bench], object]]:
    """Registers what computes some figures: a number, a word or None for one figure, a sequence for several."""

    def register(compute: Callable[[Bench], object]) -> Callable[[Bench], object]:
        def answers(bench: Bench) -> Iterable[Answer]:
            given = compute(bench)
            return [given] if len(figures) == 1 else list(given)  # type: ignore[call-overload, list-item]

        made = Second(figures, answers, closely)
        for figure in figures:
            assert figure not in REGISTERED, f"{figure} is registered twice"
            REGISTERED[figure] = made
        return compute

    return register


class Bench:
    """A car on the bench."""

    def __init__(self, car: WholeCar) -> None:
        self.car = car

    def __getitem__(self, name: str) -> float:
        return self.car[name]

    def at(self, end: str, name: str) -> float:
        """A number of a tyre or of a brake at an end of the car."""
        return self.car[f"tyres.{end}.{name}"]

    def choice(self, name: str) -> str:
        return self.car.choices[name]

    # the air

    @cached_property
    def standard_temperature(self) -> float:
        """A straight line from 288.15 K at sea level to 216.65 K at 11 km."""
        return float(np.polyval(np.polyfit([0.0, 11_000.0], [288.15, 216.65], 1), self["air.altitude"]))

    @cached_property
    def pressure(self) -> float:
        """The weight of the air above: dp/p = -g dH/(R T), integrated."""
        weight, _ = quad(lambda h: GRAVITY / (DRY_AIR * (288.15 - 71.5 * h / 11_000)), 0, self["air.altitude"])
        return 101_325 * math.exp(-weight)

    @cached_property
    def saturation(self) -> float:
        """Alduchov and Eskridge 1996: 6.1094 hPa exp(17.625 t/(243.04 + t)), t in degC (coefficients from memory)."""
        celsius = self["air.temperature"] - 273.15
        return 100 * 6.1094 * math.exp(17.625 * celsius / (243.04 + celsius))

    @cached_property
    def vapour(self) -> float:
        return self["air.humidity"] * self.saturation

    @cached_property
    def density(self) -> float:
        """By the virtual temperature: dry air as warm as it must be to be as light."""
        warm = self["air.temperature"] / (1 - self.vapour / self.pressure * (1 - DRY_AIR / VAPOUR))
        return self.pressure / (DRY_AIR * warm)

    @cached_property
    def air_speed(self) -> float:
        return self["vehicle.speed"] + self["air.wind"]

    # forces and loads

    @cached_property
    def wheelbase(self) -> float:
        return self["dimensions.wheelbase"]

    @cached_property
    def centre(self) -> np.ndarray:
        return self.car.centre()

    @cached_property
    def resting(self) -> tuple[float, float, float]:
        """Weight, its moment about the foot of the front axle, and that of 1 m/s^2 of braking."""
        x, _, h = self.centre
        return self.car.total * GRAVITY, self.car.total * GRAVITY * x, self.car.total * h

    @cached_property
    def blown(self) -> tuple[float, float, float]:
        """In air of 1 Pa of dynamic pressure: downforce, drag, and the moment of both about the same foot."""
        forces = [(s, s.downforce_area, s.drag_area) for s in self.car.surfaces]
        moment = sum(down * s.x + drag * self.car.ground(s.x, s.z) for s, down, drag in forces)
        return sum(down for _, down, _ in forces), sum(drag for _, _, drag in forces), moment

    def pascals(self, air_speed: float, density: float | None = None) -> float:
        return (self.density if density is None else density) * air_speed**2 / 2

    def loads(self, air_speed: float, deceleration: float, density: float | None = None) -> np.ndarray:
        """Loads of both axles by the sum of forces and that of moments; what acts at the ground has no moment there."""
        weight, moment, braked = self.resting
        down, _, blown = self.blown
        pascals = self.pascals(air_speed, density)
        rear = (moment - braked * deceleration + blown * pascals) / self.wheelbase
        return np.array([weight + down * pascals - rear, rear])

    def drag(self, air_speed: float, density: float | None = None) -> float:
        return self.blown[1] * self.pascals(air_speed, density)

    def downforce(self, air_speed: float, density: float | None = None) -> float:
        return self.blown[0] * self.pascals(air_speed, density)

    @cached_property
    def driven(self) -> np.ndarray:
        """Loads of both axles as the car is driven."""
        return self.loads(self.air_speed, self["vehicle.deceleration"])

    @cached_property
    def standing(self) -> np.ndarray:
        return self.loads(0.0, 0.0)

    @cached_property
    def unit_air(self) -> np.ndarray:
        """What air of 1 Pa of dynamic pressure adds to both axles."""
        return self.loads(1.0, 0.0, 2.0) - self.loads(0.0, 0.0, 2.0)

    def moment_of(self, end: str) -> float:
        """Unsprung mass of an end times its height above ground."""
        return sum(p.mass * self.car.ground(p.x, p.z) for p in self.car.masses if p.unsprung == end)

    @cached_property
    def body(self) -> tuple[float, float, float]:
        """Sprung mass, its place and its height above ground."""
        body = [(p.mass, p.x, self.car.ground(p.x, p.z)) for p in self.car.masses if p.unsprung == "none"]
        mass = np.array([piece[0] for piece in body])
        x, h = np.average([piece[1:] for piece in body], axis=0, weights=mass)
        return float(mass.sum()), float(x), float(h)


__all__ = ["ENDS", "GRAVITY", "REGISTERED", "Answer", "Bench", "Car", "constants", "second"]
