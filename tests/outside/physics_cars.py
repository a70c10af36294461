"""Invented cars for the outside checks of the physics modules, and the balance of forces that each is held against.

A car is a flat mapping of input to number, in SI units (angles in radian) but for the air, whose density is asked of the
program and checked elsewhere. What is derived here shares no formula with the modules: forces are put at their places
and the wheel loads come out of `numpy.linalg.solve`.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field, replace
from functools import cache
from pathlib import Path

import numpy as np
from writing import as_float, findings, write_design, write_ruleset

from rulecheck.outcome.results import Finding
from rulecheck.physics.modules import built_in

GRAVITY = 9.80665
NODES, WEIGHTS = np.polynomial.legendre.leggauss(16)
Numbers = dict[str, float]

UNITS = {
    "dimensions.wheelbase": "m", "dimensions.front_track": "m", "dimensions.rear_track": "m",
    "dimensions.front_ride_height": "m", "dimensions.rear_ride_height": "m",
    "suspension.front.heave_rate": "N/m", "suspension.rear.heave_rate": "N/m",
    "suspension.front.roll_stiffness": "N*m/rad", "suspension.rear.roll_stiffness": "N*m/rad",
    "suspension.front.roll_centre_height": "m", "suspension.rear.roll_centre_height": "m",
    "vehicle.speed": "m/s", "vehicle.end_speed": "m/s", "vehicle.deceleration": "m/s^2",
    "vehicle.lateral_acceleration": "m/s^2", "vehicle.corner_radius": "m", "vehicle.grip": "1", "vehicle.grade": "1",
    "vehicle.rolling_resistance": "1",
    "air.altitude": "m", "air.temperature": "K", "air.humidity": "1", "air.wind": "m/s",
    "brakes.distribution": "1", "brakes.adhesion_coefficient": "1", "brakes.adhesion_offset": "1",
    "recovery.power": "W", "recovery.torque": "N*m", "recovery.ratio": "1", "recovery.power_allowed": "W",
    "recovery.charging_power": "W", "recovery.gear_efficiency": "1", "recovery.machine_efficiency": "1",
    "recovery.store_efficiency": "1", "recovery.store_room": "J", "recovery.allowance": "J",
    "recovery.braking_force": "N", "recovery.front_share": "1",
    "powertrain.power": "W", "powertrain.efficiency": "1", "aero.reference_area": "m^2",
    "diffuser.gap": "m", "diffuser.length": "m", "diffuser.angle": "rad", "diffuser.inlet_height": "m",
    "diffuser.flare": "1", "diffuser.width": "m", "diffuser.width_over_tyres": "m", "diffuser.efficiency": "1",
    "diffuser.base_pressure": "1",
    "ballasting.mass": "kg", "ballasting.front_share_aim": "1", "ballasting.total_aim": "kg",
    "weighing.front_lifted": "kg", "weighing.angle": "rad", "weighing.lift": "m",
    **{f"corners.{end}_{side}.mass": "kg" for end in ("front", "rear") for side in ("left", "right")},
    **{
        f"brakes.{end}.{name}": unit
        for end in ("front", "rear")
        for name, unit in (
            ("pressure", "bar absolute"), ("piston_area", "m^2"), ("pad_friction", "1"), ("effective_radius", "m"),
        )
    },
    **{
        f"tyres.{end}.{name}": unit
        for end in ("front", "rear")
        for name, unit in (
            ("width", "m"), ("section_width", "m"), ("loaded_radius", "m"), ("stiffness", "N/m"), ("growth", "m"),
            ("grip", "1"), ("grip_load", "N"), ("grip_fade", "1"), ("cornering_factor", "1"),
            ("cornering_load_factor", "1"), ("load_rating", "N"), ("speed_rating", "m/s"),
        )
    },
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class Mass:
    """A piece of the ledger, its place from the front axle and the reference plane."""

    mass: float
    x: float
    y: float
    z: float
    unsprung: str = "none"


@dataclass(frozen=True, slots=True)
class Surface:
    """An aero surface with its downforce and drag area."""

    downforce_area: float
    drag_area: float
    x: float
    z: float


@dataclass(frozen=True)
class Car:
    """Numbers, choices, masses and surfaces of one car; lengths in m."""

    numbers: Numbers
    masses: tuple[Mass, ...]
    surfaces: tuple[Surface, ...]
    choices: Mapping[str, str] = field(default_factory=dict)

    def __getitem__(self, name: str) -> float:
        return self.numbers[name]

    def but(self, numbers: Numbers | None = None, choices: Mapping[str, str] | None = None) -> Car:
        """The same car with other numbers or choices."""
        return replace(self, numbers={**self.numbers, **(numbers or {})}, choices={**self.choices, **(choices or {})})

    @property
    def total(self) -> float:
        return sum(piece.mass for piece in self.masses)

    def ground(self, x: float, z: float, heights: tuple[float, float] | None = None) -> float:
        """Height above ground of a place, at the ride heights given or those at rest."""
        front, rear = heights or (self["dimensions.front_ride_height"], self["dimensions.rear_ride_height"])
        return z + front + (rear - front) * x / self["dimensions.wheelbase"]

    def centre(self, heights: tuple[float, float] | None = None) -> np.ndarray:
        """Centre of gravity: x, y and the height above ground."""
        places = [(piece.x, piece.y, self.ground(piece.x, piece.z, heights)) for piece in self.masses]
        return np.average(places, axis=0, weights=[piece.mass for piece in self.masses])

    def air_forces(self, density: float, speed: float) -> list[tuple[Surface, float, float]]:
        """Each surface with its downforce and drag in N."""
        pressure = 0.5 * density * speed * speed
        return [(surface, pressure * surface.downforce_area, pressure * surface.drag_area) for surface in self.surfaces]

    def axle_loads(
        self, density: float, air_speed: float, deceleration: float, heights: tuple[float, float] | None = None
    ) -> tuple[float, float]:
        """Loads of both axles: sums of vertical forces and of moments about the foot of the front axle.

        Forces at the ground have no moment about it, whatever brakes or drives.
        """
        x, _, h = self.centre(heights)
        down, moment = self.total * GRAVITY, self.total * (GRAVITY * x - deceleration * h)
        for surface, downforce, drag in self.air_forces(density, air_speed):
            down += downforce
            moment += downforce * surface.x + drag * self.ground(surface.x, surface.z, heights)
        loads = np.linalg.solve([[1, 1], [0, self["dimensions.wheelbase"]]], [down, moment])
        return float(loads[0]), float(loads[1])

    def write(self, folder: Path) -> None:
        """The car as a design file."""
        tree: dict[str, object] = {}
        for path, number in self.numbers.items():
            unit = UNITS[path]
            _put(tree, path, f"{float(number)!r} {unit}")
        for path, word in self.choices.items():
            _put(tree, path, word)
        tree["masses"] = {
            f"piece{index}": {
                "mass": f"{float(piece.mass)!r} kg",
                "at": f"{float(piece.x)!r} {float(piece.y)!r} {float(piece.z)!r} m",
                "unsprung": piece.unsprung,
            }
            for index, piece in enumerate(self.masses)
        }
        tree["aero_surfaces"] = {
            f"surface{index}": {
                "kind": "wing",
                "at": f"{surface.x!r} 0 {surface.z!r} m",
                "downforce_area": f"{surface.downforce_area!r} m^2",
                "drag_area": f"{surface.drag_area!r} m^2",
            }
            for index, surface in enumerate(self.surfaces)
        }
        write_design(folder, **tree)


def _put(tree: dict[str, object], path: str, value: str) -> None:
    *holders, last = path.split(".")
    for holder in holders:
        tree = tree.setdefault(holder, {})  # type: ignore[assignment]
    tree[last] = value


def near(random: np.random.Generator, middle: float, spread: float = 0.2, digits: int = 4) -> float:
    """A number within a share of another, with few digits."""
    return float(f"{middle * (1 + spread * random.uniform(-1, 1)):.{digits}g}")


USUAL = {
    "dimensions.wheelbase": 2.86, "dimensions.front_track": 1.6, "dimensions.rear_track": 1.56,
    "dimensions.front_ride_height": 0.045, "dimensions.rear_ride_height": 0.065,
    "suspension.front.heave_rate": 3e5, "suspension.rear.heave_rate": 2.6e5,
    "suspension.front.roll_stiffness": 9e4, "suspension.rear.roll_stiffness": 7e4,
    "suspension.front.roll_centre_height": 0.04, "suspension.rear.roll_centre_height": 0.07,
    "vehicle.speed": 62.0, "vehicle.end_speed": 21.0, "vehicle.deceleration": 14.0,
    "vehicle.lateral_acceleration": 9.0, "vehicle.corner_radius": 420.0, "vehicle.grip": 1.3, "vehicle.grade": 0.04,
    "vehicle.rolling_resistance": 0.014,
    "air.altitude": 240.0, "air.temperature": 297.0, "air.humidity": 0.5, "air.wind": 3.0,
    "brakes.distribution": 0.62, "brakes.adhesion_coefficient": 0.85, "brakes.adhesion_offset": 0.07,
    "recovery.power": 1.4e5, "recovery.torque": 320.0, "recovery.ratio": 6.2, "recovery.power_allowed": 1.2e5,
    "recovery.charging_power": 1.3e5, "recovery.gear_efficiency": 0.97, "recovery.machine_efficiency": 0.93,
    "recovery.store_efficiency": 0.95, "recovery.store_room": 2.2e6, "recovery.allowance": 2.0e6,
    "recovery.braking_force": 2400.0, "recovery.front_share": 0.55,
    "powertrain.power": 3.6e5, "powertrain.efficiency": 0.91, "aero.reference_area": 1.7,
    "tyres.front.width": 0.3, "tyres.rear.width": 0.33, "tyres.front.section_width": 0.312,
    "tyres.rear.section_width": 0.344, "tyres.front.loaded_radius": 0.331, "tyres.rear.loaded_radius": 0.344,
    "tyres.front.stiffness": 2.8e5, "tyres.rear.stiffness": 3e5, "tyres.front.growth": 0.001,
    "tyres.rear.growth": 0.002, "tyres.front.grip": 1.6, "tyres.rear.grip": 1.65, "tyres.front.grip_load": 4000.0,
    "tyres.rear.grip_load": 4500.0, "tyres.front.grip_fade": 0.12, "tyres.rear.grip_fade": 0.11,
    "tyres.front.cornering_factor": 22.0, "tyres.rear.cornering_factor": 24.0,
    "tyres.front.cornering_load_factor": 1.7, "tyres.rear.cornering_load_factor": 1.8,
    "tyres.front.load_rating": 9500.0, "tyres.rear.load_rating": 10500.0, "tyres.front.speed_rating": 100.0,
    "tyres.rear.speed_rating": 98.0,
}  # fmt: skip


def random_car(seed: int) -> Car:
    """A car near the usual one, with parts and surfaces strewn about."""
    random = np.random.default_rng(seed)
    numbers = {name: near(random, middle, 0.1) for name, middle in USUAL.items()}
    wheelbase = numbers["dimensions.wheelbase"]
    masses = [
        Mass(
            near(random, 95), float(f"{random.uniform(0.1, 2.9):.4f}"), float(f"{random.uniform(-0.4, 0.4):.4f}"),
            float(f"{random.uniform(0.05, 0.55):.4f}"),
        )
        for _ in range(9)
    ]  # fmt: skip
    for end, x in (("front", 0.0), ("rear", wheelbase)):
        masses.extend(Mass(near(random, 22), x, side, near(random, 0.27), end) for side in (-0.7, 0.7))
    surfaces = [
        Surface(near(random, 0.9), near(random, 0.1), -0.4, 0.02),
        Surface(near(random, 1.1), near(random, 0.12), 1.3, 0.0),
        Surface(near(random, 0.75), near(random, 0.16), near(random, 3.4), 0.9),
        Surface(near(random, -0.25), near(random, 0.4), 1.4, 0.55),
    ]
    return Car(numbers, tuple(masses), tuple(surfaces), {"recovery.axle": "rear", "options.driven_axle": "rear"})


@cache
def unit_of(figure: str) -> str:
    """The unit in which a figure is spoken of."""
    name, _, last = figure.partition(".")
    module = built_in(name)
    assert module is not None
    unit = module.figures[last].unit
    assert unit is not None, f"{figure} is a text"
    return unit.text


def in_si(figure: str) -> float:
    """What one of the figure's own unit is in the SI."""
    factors = {
        "kW": 1e3, "MJ": 1e6, "mm/N": 1e-3, "N/mm": 1e3, "mm": 1e-3, "deg": np.pi / 180, "km/h": 1 / 3.6, "%": 1e-2,
        "deg/gn": np.pi / 180 / GRAVITY, "gn": GRAVITY,
    }  # fmt: skip
    return float(factors.get(unit_of(figure), 1.0))


def found(folder: Path, figures: Iterable[str], settings: Mapping[str, str] | None = None) -> dict[str, Finding]:
    """The findings on one rule a figure, in the figure's own unit."""
    rules = {}
    for figure in figures:
        limit = "0" if unit_of(figure) == "1" else f"0 {unit_of(figure)}"
        rules[figure.replace(".", "_")] = {"require": f"{figure} >= {limit}"}
    write_ruleset(folder, rules=rules)
    return findings(folder, settings)


def figures_of(
    folder: Path, car: Car, figures: Iterable[str], settings: Mapping[str, str] | None = None
) -> dict[str, float]:
    """The figures of a car in the SI; each must be known."""
    wanted = list(figures)
    car.write(folder)
    report = found(folder, wanted, settings)
    values = {}
    for figure in wanted:
        finding = report[figure.replace(".", "_")]
        assert finding.value is not None, (figure, finding.reason)
        values[figure] = as_float(finding.value) * in_si(figure)
    return values


def outside(folder: Path, car: Car, figure: str) -> bool:
    """Whether a figure of a car is outside its range of validity."""
    car.write(folder)
    return figure in found(folder, [figure])[figure.replace(".", "_")].outside_validity


def unknown(folder: Path, car: Car, figure: str) -> bool:
    """Whether a figure of a car has no value."""
    car.write(folder)
    return found(folder, [figure])[figure.replace(".", "_")].margin is None


def said(folder: Path, car: Car, figure: str, words: Iterable[str]) -> str:
    """Which of some words a figure that is a text gives."""
    car.write(folder)
    known = list(words)
    write_ruleset(
        folder, rules={f"word{index}": {"require": f'{figure} == "{word}"'} for index, word in enumerate(known)}
    )
    report = findings(folder)
    held = [word for index, word in enumerate(known) if report[f"word{index}"].verdict == "complies"]
    assert len(held) == 1, held
    return held[0]


def integral(function: Callable[[float], float], low: float, high: float, pieces: int = 40) -> float:
    """By Gauss and Legendre on equal pieces."""
    edges = np.linspace(low, high, pieces + 1)
    middle, half = (edges[1:] + edges[:-1]) / 2, (edges[1:] - edges[:-1]) / 2
    return float(
        sum(
            h * sum(w * function(float(m + h * n)) for n, w in zip(NODES, WEIGHTS, strict=True))
            for m, h in zip(middle, half, strict=True)
        )
    )
