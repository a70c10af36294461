"""Figures that solve an equation, against independent balances of forces and roots by scipy.

Nothing here asks the modules for what they solve: loads come from `physics_cars`, roots from `scipy.optimize.brentq`,
stability from the eigenvalues of the two-wheel car (T. D. Gillespie 1992, chapter 6, and W. F. Milliken and D. L.
Milliken 1995 have the same matrix; both from memory).
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from physics_cars import GRAVITY, Car, Mass, figures_of, random_car, said, unknown
from scipy.optimize import brentq, minimize_scalar
from test_physics_balance import friction, on_wheels, stiffness
from test_physics_loads import rolled

SEEDS = (31, 32, 33)
ENDS = ("front", "rear")
KMH = 1 / 3.6


def close(value: float, due: float, rel: float = 1e-9) -> None:
    assert value == pytest.approx(due, rel=rel)


# --- top speed --------------------------------------------------------------------------------------------------------


def surplus(car: Car, density: float, speed: float, grade: float) -> float:
    """Force at the wheels less all that holds the car back, each force put at its place along the road."""
    slope = math.atan(grade)
    down, drag = (
        sum(part)
        for part in zip(*[(f, d) for _, f, d in car.air_forces(density, speed + car["air.wind"])], strict=True)
    )
    load = car.total * GRAVITY * math.cos(slope) + down
    pull = car["powertrain.power"] * car["powertrain.efficiency"] / speed
    return pull - drag - car["vehicle.rolling_resistance"] * load - car.total * GRAVITY * math.sin(slope)


@pytest.mark.parametrize("seed", SEEDS)
def test_top_speed_against_brentq(tmp_path, seed):
    car = random_car(seed)
    figures = figures_of(tmp_path, car, ["performance.top_speed", "performance.level_top_speed", "air.density"])
    for name, grade in (("top_speed", car["vehicle.grade"]), ("level_top_speed", 0.0)):
        due = brentq(lambda v, grade=grade: surplus(car, figures["air.density"], v, grade), 3.0, 160.0, xtol=1e-12)
        close(figures[f"performance.{name}"], due)
    assert figures["performance.top_speed"] < figures["performance.level_top_speed"]  # the grade of these cars climbs


def test_top_speed_without_air_and_grade_has_a_closed_form(tmp_path):
    """Rolling resistance alone: v = P / (f m gn). By hand."""
    car = Car(random_car(1).numbers, (Mass(1000.0, 1.4, 0.0, 0.3),), random_car(1).surfaces)
    car = Car(car.numbers, car.masses, tuple(type(s)(0.0, 0.0, s.x, s.z) for s in car.surfaces))
    car = car.but({"powertrain.power": 14000.0, "powertrain.efficiency": 1.0, "vehicle.rolling_resistance": 0.015})
    figures = figures_of(tmp_path, car, ["performance.level_top_speed"])
    close(figures["performance.level_top_speed"], 14000.0 / (0.015 * 1000.0 * GRAVITY), rel=1e-12)


def test_a_car_that_reaches_no_top_speed_in_the_range_has_none(tmp_path):
    assert unknown(tmp_path, random_car(1).but({"powertrain.power": 100.0}), "performance.level_top_speed")


# --- critical speed ---------------------------------------------------------------------------------------------------


def loaded_stiffnesses(car: Car, density: float, speed: float) -> tuple[float, float]:
    loads = car.axle_loads(density, speed + car["air.wind"], car["vehicle.deceleration"])
    front, rear = (2 * stiffness(car, end, load / 2) for end, load in zip(ENDS, loads, strict=True))
    return front, rear


def growth(car: Car, density: float, speed: float) -> float:
    """The greatest real part of the eigenvalues of the two-wheel car, positive where it is unstable."""
    x, wheelbase, mass = car.centre()[0], car["dimensions.wheelbase"], car.total
    inertia = mass * x * (wheelbase - x)
    front, rear = loaded_stiffnesses(car, density, speed)
    behind = wheelbase - x
    matrix = [
        [-(front + rear) / (mass * speed), (rear * behind - front * x) / (mass * speed) - speed],
        [(rear * behind - front * x) / (inertia * speed), -(front * x**2 + rear * behind**2) / (inertia * speed)],
    ]
    return float(np.linalg.eigvals(np.array(matrix)).real.max())


def tail_heavy() -> Car:
    """Oversteering at rest, with wings on both axles."""
    wings = random_car(20).surfaces
    car = on_wheels(2200.0, 4600.0)
    return Car(car.numbers, car.masses, wings).but(
        {"vehicle.deceleration": 0.0, "air.wind": 2.0, "vehicle.speed": 10.0}
    )


def test_critical_speed_is_where_an_eigenvalue_turns_positive(tmp_path):
    car = tail_heavy()
    figures = figures_of(tmp_path, car, ["balance.loaded_critical_speed", "air.density", "balance.critical_speed"])
    density, speed = figures["air.density"], figures["balance.loaded_critical_speed"]
    assert growth(car, density, 0.999 * speed) < 0 < growth(car, density, 1.001 * speed)
    due = brentq(lambda v: growth(car, density, v), 0.9 * speed, 1.1 * speed, xtol=1e-12)
    close(speed, due, rel=1e-7)
    # The gradient of one speed is another's only by accident.
    assert abs(figures["balance.critical_speed"] / speed - 1) > 0.01


def steer_over_neutral(car: Car, density: float, speed: float) -> float:
    """Steer angle on a circle over that of a neutral car, from the slip angles that the loads at that speed ask."""
    x, wheelbase = car.centre()[0], car["dimensions.wheelbase"]
    front, rear = loaded_stiffnesses(car, density, speed)
    force = car.total * speed**2 / wheelbase  # on a radius of 1
    return 1 + (force * (wheelbase - x) / front - force * x / rear) / wheelbase


def test_characteristic_speed_and_the_peak_of_yaw_gain(tmp_path):
    """Twice the neutral steer; and the speed of the greatest yaw rate over steer, found by scipy."""
    wings = random_car(20).surfaces
    car = on_wheels(3300.0, 2500.0)
    car = Car(car.numbers, car.masses, wings).but({"vehicle.deceleration": 0.0, "air.wind": 0.0})
    names = ["loaded_characteristic_speed", "peak_yaw_gain_speed", "characteristic_speed"]
    figures = figures_of(tmp_path, car, ["air.density", *(f"balance.{name}" for name in names)])
    density, speed = figures["air.density"], figures["balance.loaded_characteristic_speed"]
    close(steer_over_neutral(car, density, speed), 2.0)
    found = minimize_scalar(
        lambda v: -v / steer_over_neutral(car, density, v),
        bounds=(5.0, 100.0),
        method="bounded",
        options={"xatol": 1e-9},
    )
    close(figures["balance.peak_yaw_gain_speed"], float(found.x), rel=1e-5)
    assert abs(float(found.x) / speed - 1) > 1e-3  # the two part where the gradient moves with speed


@pytest.mark.parametrize("seed", SEEDS)
def test_the_slope_of_the_gradient_against_differences(tmp_path, seed):
    car = random_car(seed).but({"vehicle.deceleration": 1.0})
    slope = figures_of(tmp_path, car, ["balance.gradient_slope"])["balance.gradient_slope"]
    step = 0.01
    ends = [
        figures_of(tmp_path, car.but({"vehicle.speed": car["vehicle.speed"] + side * step}), [name])[name]
        for name in ("balance.understeer_gradient",)
        for side in (1, -1)
    ]
    close(slope, (ends[0] - ends[1]) / (2 * step), rel=1e-6)


def test_how_stiffness_grows_with_load(tmp_path):
    """Central differences of the tyre's law, written without circular functions."""
    car, step = on_wheels(3300.0, 5200.0), 0.1
    figures = figures_of(tmp_path, car, [f"balance.{end}_stiffness_slope" for end in ENDS])
    for end, load in (("front", 3300.0), ("rear", 5200.0)):
        due = (stiffness(car, end, load + step) - stiffness(car, end, load - step)) / (2 * step)
        close(figures[f"balance.{end}_stiffness_slope"], due, rel=1e-7)


# --- limit balance ----------------------------------------------------------------------------------------------------


def held(car: Car, density: float, end: str, acceleration: float) -> float:
    """What the wheels of an axle can hold in a corner, less what its share of the mass asks."""
    _, *moments = rolled(car, acceleration)
    place = ENDS.index(end)
    straight = car.axle_loads(density, car["vehicle.speed"] + car["air.wind"], car["vehicle.deceleration"])[place]
    transfer = moments[place] / car[f"dimensions.{end}_track"]
    # At rest the weight stands off the middle plane: each axle carries the same share of it.
    x, y, _ = car.centre()
    share = x / car["dimensions.wheelbase"] if end == "rear" else 1 - x / car["dimensions.wheelbase"]
    aside = car.total * GRAVITY * share * y / car[f"dimensions.{end}_track"]
    wheels = [straight / 2 + transfer - aside, straight / 2 - transfer + aside]
    return sum(load * friction(car, end, load) for load in wheels) - car.total * share * acceleration


@pytest.mark.parametrize("seed", SEEDS)
def test_limit_of_each_axle_against_brentq(tmp_path, seed):
    car = random_car(seed).but({"vehicle.deceleration": 0.0, "suspension.front.roll_stiffness": 3e5})
    car = car.but({"suspension.rear.roll_stiffness": 2.6e5})
    car = Car(
        car.numbers, tuple(Mass(p.mass, p.x, 0.0, p.z, p.unsprung) for p in car.masses), car.surfaces, car.choices
    )
    limits = ["front_limit", "rear_limit"]
    figures = figures_of(
        tmp_path, car, ["air.density", *(f"balance.{name}" for name in (*limits, "limit", "limit_balance"))]
    )
    values = {}
    for end in ENDS:
        due = brentq(lambda a, end=end: held(car, figures["air.density"], end, a), 0.1, 60.0, xtol=1e-12)
        values[end] = due
        close(figures[f"balance.{end}_limit"], due, rel=1e-8)
    close(figures["balance.limit"], min(values.values()), rel=1e-8)
    close(figures["balance.limit_balance"], (values["rear"] - values["front"]) / min(values.values()), rel=1e-6)
    first = min(ENDS, key=lambda end: values[end])
    assert said(tmp_path, car, "balance.gives_way_first", ENDS) == first


def test_tyres_alike_and_no_transfer_give_a_limit_by_hand(tmp_path):
    """Grip that does not fade and no downforce: both axles hold mu gn, whatever moves between the wheels."""
    car = random_car(7)
    car = Car(car.numbers, car.masses, tuple(type(s)(0.0, 0.0, s.x, s.z) for s in car.surfaces), car.choices)
    car = car.but({f"tyres.{end}.{name}": value for end in ENDS for name, value in (("grip_fade", 0.0), ("grip", 1.5))})
    car = car.but({"vehicle.deceleration": 0.0})
    figures = figures_of(tmp_path, car, ["balance.front_limit", "balance.rear_limit"])
    for value in figures.values():
        close(value, 1.5 * GRAVITY)
