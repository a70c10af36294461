"""The lap against an independent integration: the equations of motion by `scipy.integrate.solve_ivp`, the forces of the
axles by root finding from the balance of each wheel, the turning points by the crossing of dense outputs.

Nothing here is taken from the solver but the car's numbers: loads are sums of wheel loads, grip is the force of each
wheel at its own load, and the greatest force is the root of what is asked less what the wheels can give.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping

import numpy as np
import pytest
from lap_cars import GRAVITY, POINT, WHOLE, drive, estimate, straight, track
from scipy.integrate import quad, solve_ivp
from scipy.optimize import brentq

from rulecheck.model.track import Segment

G = GRAVITY


class Car:
    """The whole car on one piece of road; speed in m/s, everything in SI units."""

    def __init__(self, numbers: Mapping[str, object], segment: Segment, altitude: float) -> None:
        self.n: dict[str, float] = {name: value for name, value in numbers.items() if isinstance(value, float)}
        self.law, self.driven = numbers["distribution_law"], numbers["driven"]
        self.road, self.altitude = segment, altitude
        self.at(segment.length / 2)

    def at(self, s: float) -> Car:
        """The car at a distance from the start of the piece, in the air of that height."""
        # Barometric formula of ISO 2533, temperature falling by 6.5 K per km.
        height = self.altitude + s * math.sin(self.road.slope)
        warm = self.n["temperature"] - 0.0065 * (height - self.n["altitude"])
        pressure_ratio = (warm / self.n["temperature"]) ** (G / (0.0065 * 287.05287))
        self.density = self.n["density"] * pressure_ratio * self.n["temperature"] / warm
        return self

    def wheels(self, axle: str, load: float, side: float) -> float:
        """Force that both wheels of an axle can give together, each at its own load."""
        n = self.n
        moved = min(n[f"{axle}_transfer"] * side, load / 2)
        total = 0.0
        for wheel in (load / 2 + moved, load / 2 - moved):
            grip = n[f"{axle}_grip"] * (1 - n[f"{axle}_fade"] * (wheel - n[f"{axle}_load"]) / n[f"{axle}_load"])
            total += max(grip, 0.0) * wheel
        return total

    def state(self, v: float, force: float) -> tuple[float, float, float, float, float]:
        """Axle loads, lateral acceleration in the road plane, road load, acceleration, under a force at the tyres."""
        n, road = self.n, self.road
        curvature = abs(road.curvature)
        # Acceleration of the path resolved across and square to a road that banks into the corner.
        level = G * math.cos(road.slope)
        square = level * math.cos(road.banking) + v * v * (curvature * math.sin(road.banking) + road.dip)
        across = abs(v * v * curvature * math.cos(road.banking) - level * math.sin(road.banking))
        pressure = self.density * v * v / 2
        down = pressure * (n["front_area"] + n["rear_area"])
        drag = pressure * n["drag_area"]
        rolling = n["rolling"] * (n["mass"] * square + down)
        acceleration = (force - drag - rolling) / n["mass"] - G * math.sin(road.slope)
        # Moments about the foot of the front wheels: weight along the road and inertia act at the height.
        inertia = n["mass"] * (acceleration + G * math.sin(road.slope))
        rear = (n["mass"] * square * n["place"] + inertia * n["height"]) / n["wheelbase"] + pressure * n["rear_area"]
        front = n["mass"] * square + down - rear
        return front, rear, across, drag + rolling, acceleration

    def asks(self, v: float, front_force: float, rear_force: float) -> float:
        """Room of the axle that is nearer its grip, under forces along the road; negative where it slides."""
        n = self.n
        front, rear, across, _, _ = self.state(v, front_force + rear_force)
        share = n["place"] / n["wheelbase"]
        front_side, rear_side = n["mass"] * (1 - share) * across, n["mass"] * share * across
        return min(
            self.wheels("front", max(front, 0.0), across) - math.hypot(front_side, front_force),
            self.wheels("rear", max(rear, 0.0), across) - math.hypot(rear_side, rear_force),
        )

    def greatest(self, room: Callable[[float], float], steady: float) -> float:
        """The greatest force up to which the axles hold, from the steady one on."""
        if room(steady) <= 0:
            return steady
        high = steady + 1000.0
        while room(high) > 0:
            high *= 1.5
            if high > 1e7:
                return high
        return float(brentq(room, steady, high, xtol=1e-9, rtol=1e-14))

    def speeds_up(self, v: float) -> float:
        """Acceleration at full drive, by the rear axle."""
        steady = self.state(v, 0.0)[3]
        force = self.greatest(lambda x: self.asks(v, 0.0, x), steady)
        return self.state(v, min(force, self.n["power"] / max(v, 1e-9)))[4]

    def slows(self, v: float) -> float:
        """Deceleration at full brakes, at the fixed distribution."""
        share = self.n["distribution"]
        force = self.greatest(lambda x: self.asks(v, -share * x, -(1 - share) * x), 0.0)
        return -self.state(v, -force)[4]

    def corner(self) -> float:
        """Speed of the steady corner."""

        def room(v: float) -> float:
            along = min(self.state(v, 0.0)[3] + self.n["mass"] * G * math.sin(self.road.slope), self.n["power"] / v)
            return (
                self.asks(v, 0.0, along)
                if along >= 0
                else self.asks(v, along * self.n["distribution"], along * (1 - self.n["distribution"]))
            )

        return float(brentq(room, 5.0, 140.0, xtol=1e-12, rtol=1e-14))


def along(rate: Callable[[float, float], float], start: float, length: float) -> Callable[[float], float]:
    """Speed over distance from v dv/ds = a(v, s), as a dense output."""
    found = solve_ivp(
        lambda s, u: [2 * rate(math.sqrt(max(u[0], 1e-12)), s)], (0, length), [start * start], rtol=1e-8, atol=1e-8,
        dense_output=True, max_step=length / 40,
    )  # fmt: skip
    return lambda s: math.sqrt(float(found.sol(s)[0]))


def time_over(speed: Callable[[float], float], start: float, end: float) -> float:
    return float(quad(lambda s: 1 / speed(s), start, end, epsabs=1e-9, epsrel=1e-9, limit=400)[0])


CARS = [
    {},
    {"front_grip": 1.9, "rear_grip": 1.3, "power": 520e3},  # the rear gives way first, and grip holds back the drive
    {"front_fade": 0.0, "rear_fade": 0.0, "front_transfer": 0.0, "rear_transfer": 0.0, "distribution": 0.7},
    {"height": 0.5, "drag_area": 1.6, "front_area": 0.4, "rear_area": 0.9},
]


@pytest.mark.parametrize(
    ("changes", "slope"),
    [
        (CARS[0], 0.05),
        (CARS[1], -0.04),
        pytest.param(CARS[2], 0.0, marks=pytest.mark.long),
        pytest.param(CARS[3], -0.04, marks=pytest.mark.long),
    ],
)
def test_corner_straight_corner(changes: dict[str, float], slope: float) -> None:
    """Out of one corner, along a straight with a dip in it, into a banked one; both corners long enough to be steady."""
    numbers = {**WHOLE, "fuel_flow": 0.0, **changes}
    first = Segment("first", 60.0, 1 / 45)
    road = Segment("road", 520.0, 0.0, slope, 0.0, 1 / 900)
    last = Segment("last", 70.0, -1 / 70, 0.0, math.radians(4))
    line = track(straight(300.0), first, road, last, kind="hill", step=1.0)
    lap = drive(numbers, line)
    height = 100.0
    corner = Car(numbers, first, height).corner()
    car, end = Car(numbers, road, height), Car(numbers, last, height + road.length * math.sin(slope)).corner()
    up = along(lambda v, s: car.at(s).speeds_up(v), corner, 520.0)
    down = along(lambda v, s: car.at(520.0 - s).slows(v), end, 520.0)
    meeting = float(brentq(lambda s: up(s) - down(520.0 - s), 0.0, 520.0, xtol=1e-9))
    before = Car(numbers, straight(300.0), height)
    start = along(lambda v, _: before.speeds_up(v), 0.0, 300.0)
    stop = along(lambda v, _: before.slows(v), corner, 300.0)
    turned = float(brentq(lambda s: start(s) - stop(300.0 - s), 1.0, 300.0, xtol=1e-9))
    # From rest the speed grows as the root of the distance: s = x² makes the integrand smooth.
    time = float(quad(lambda x: 2 * x / start(x * x), 1e-6, math.sqrt(turned), epsrel=1e-8, limit=400)[0])
    time += time_over(lambda s: stop(300.0 - s), turned, 300.0) + 60.0 / corner
    time += time_over(up, 0.0, meeting) + time_over(lambda s: down(520.0 - s), meeting, 520.0) + 70.0 / end
    found = estimate(lap, "time")
    assert found.bound < 2e-3
    assert abs(found.value - time) <= found.bound + 2e-5, (found, time)
    top = max(up(meeting), start(turned))
    assert estimate(lap, "top_speed").value == pytest.approx(top, rel=2e-5)
    assert estimate(lap, "least_speed").value == pytest.approx(min(corner, end), rel=1e-7)


@pytest.mark.long
def test_air_by_altitude() -> None:
    """Top speed of a long bend at power in thin air: P = rho C v³/2 with the density of ISO 2533 at that altitude."""
    standard = {0: 1.225, 1000: 1.112, 2000: 1.007, 3000: 0.9093}  # ISO 2533:1975, table of densities
    for altitude, density in standard.items():
        on = track(Segment("bend", 2 * math.pi * 3000, 1 / 3000), altitude=float(altitude))
        lap = drive(POINT, on, power=250e3, drag_area=1.1, density=1.225)
        assert estimate(lap, "top_speed").value == pytest.approx((2 * 250e3 / (density * 1.1)) ** (1 / 3), rel=3e-4)


def test_fuel_makes_the_car_lighter() -> None:
    """A second integration with the mass that falls by flow times power over full power, on a long straight at power."""
    numbers = {**WHOLE, "fuel_flow": 2.0, "rolling": 0.0, "height": 0.0}
    lap = drive(numbers, track(straight(1500.0), kind="hill", step=1.0))

    def rates(_: float, y: np.ndarray) -> list[float]:
        u, mass = y
        car = Car({**numbers, "mass": float(mass)}, straight(1500.0), 100.0)
        v = math.sqrt(max(u, 1e-12))
        acceleration = car.speeds_up(v)
        force = mass * acceleration + car.density * car.n["drag_area"] * u / 2
        return [2 * acceleration, -numbers["fuel_flow"] * force / numbers["power"]]  # type: ignore[operator]

    found = solve_ivp(rates, (0, 1500.0), [1e-4, 900.0], rtol=1e-9, atol=1e-9)
    burnt = 900.0 - found.y[1, -1]
    assert 10 < burnt < 80
    # The lap takes one mass for each piece of the track: good to a share of what burns on it.
    assert estimate(lap, "fuel_used").value == pytest.approx(burnt, rel=3e-3)
    assert estimate(lap, "finish_speed").value == pytest.approx(math.sqrt(found.y[0, -1]), rel=2e-3)
