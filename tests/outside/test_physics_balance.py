"""Tyres and steering against laws by hand and a two-wheel car solved by numpy.

Derived throughout but where a check names its source.
"""

from __future__ import annotations

import numpy as np
import pytest
from physics_cars import GRAVITY, Car, Mass, figures_of, outside, random_car, unknown

SEEDS = (20, 21)
ENDS = ("front", "rear")


def close(value: float, due: float, rel: float = 1e-9) -> None:
    assert value == pytest.approx(due, rel=rel, abs=1e-12)


# --- tyres ------------------------------------------------------------------------------------------------------------


def friction(car: Car, end: str, load: float) -> float:
    """A straight line through the grip at the load of the data, and less by the fade when the load is double."""
    at = car[f"tyres.{end}.grip_load"]
    most = car[f"tyres.{end}.grip"]
    lost = most * car[f"tyres.{end}.grip_fade"]
    return float(np.polyval(np.polyfit([at, 2 * at], [most, most - lost], 1), load))


def stiffness(car: Car, end: str, load: float) -> float:
    """The law of Pacejka 2012 without circular functions: sin(2 atan u) = 2u/(1 + u^2)."""
    at = car[f"tyres.{end}.grip_load"]
    u = load / (car[f"tyres.{end}.cornering_load_factor"] * at)
    return car[f"tyres.{end}.cornering_factor"] * at * 2 * u / (1 + u * u)


@pytest.mark.parametrize("seed", SEEDS)
def test_tyres_at_their_own_loads(tmp_path, seed):
    """Corners to both sides, hard enough that the outer wheel is the more loaded."""
    car = random_car(seed).but({"vehicle.lateral_acceleration": 19.0 if seed % 2 else -19.0})
    names = [f"tyre.{e}_{n}" for e in ENDS for n in ("grip", "grip_force", "cornering_stiffness", "load_use")]
    wheels = [f"load_transfer.{e}_{s}" for e in ENDS for s in ("left", "right")]
    axles = [f"load_transfer.{e}_axle" for e in ENDS]
    figures = figures_of(tmp_path, car, [*names, *wheels, *axles, "tyre.speed_use"])
    for end in ENDS:
        straight = figures[f"load_transfer.{end}_axle"] / 2
        pair = [figures[f"load_transfer.{end}_{side}"] for side in ("left", "right")]
        close(figures[f"tyre.{end}_grip"], friction(car, end, straight))
        close(figures[f"tyre.{end}_cornering_stiffness"], stiffness(car, end, straight))
        close(figures[f"tyre.{end}_grip_force"], sum(load * friction(car, end, load) for load in pair))
        close(figures[f"tyre.{end}_load_use"] * car[f"tyres.{end}.load_rating"], max(pair))
        # Grip that falls with load: a pair loaded unequally holds less than one loaded alike.
        assert figures[f"tyre.{end}_grip_force"] < 2 * straight * friction(car, end, straight)
    close(figures["tyre.speed_use"] * min(car[f"tyres.{e}.speed_rating"] for e in ENDS), car["vehicle.speed"])


def test_stiffness_is_greatest_at_its_load(tmp_path):
    """Pacejka 2012: p1 times the load of the data, at p2 times that load; outside beyond twice that."""
    car = on_wheels(4000.0 * 1.7, 4500.0 * 1.8)
    figures = figures_of(tmp_path, car, [f"tyre.{end}_cornering_stiffness" for end in ENDS])
    close(figures["tyre.front_cornering_stiffness"], 22.0 * 4000)
    close(figures["tyre.rear_cornering_stiffness"], 24.0 * 4500)
    heavy = on_wheels(4000.0 * 3.5, 4500.0)
    assert outside(tmp_path, heavy, "tyre.front_cornering_stiffness")
    assert not outside(tmp_path, heavy, "tyre.rear_cornering_stiffness")


def test_no_law_from_width_alone(tmp_path):
    """Trap: a wider tyre is not a stiffer one by itself; without data there is no figure, with data width says nothing."""
    car = random_car(20)
    wide = figures_of(tmp_path, car.but({"tyres.rear.width": 0.4}), ["tyre.rear_cornering_stiffness"])
    assert wide == figures_of(tmp_path, car, ["tyre.rear_cornering_stiffness"])
    bare = Car({k: v for k, v in car.numbers.items() if "cornering" not in k}, car.masses, car.surfaces)
    assert unknown(tmp_path, bare, "tyre.rear_cornering_stiffness")


def on_wheels(front: float, rear: float) -> Car:
    """A car at rest with given loads of a front and a rear wheel."""
    numbers = {
        **{f"tyres.front.{n}": v for n, v in (("grip_load", 4000.0), ("cornering_factor", 22.0))},
        **{f"tyres.rear.{n}": v for n, v in (("grip_load", 4500.0), ("cornering_factor", 24.0))},
        "tyres.front.cornering_load_factor": 1.7,
        "tyres.rear.cornering_load_factor": 1.8,
        "dimensions.wheelbase": 2.8,
        "dimensions.front_ride_height": 0.05,
        "dimensions.rear_ride_height": 0.05,
        "vehicle.speed": 0.0,
        "vehicle.deceleration": 0.0,
        "air.wind": 0.0,
        "air.altitude": 0.0,
        "air.temperature": 288.15,
        "air.humidity": 0.0,
    }
    mass = 2 * (front + rear) / GRAVITY
    surfaces = random_car(20).surfaces
    return Car(numbers, (Mass(mass, 2.8 * rear / (front + rear), 0.0, 0.3),), surfaces)


# --- steering ---------------------------------------------------------------------------------------------------------


def steady_corner(car: Car, axle_stiffness: tuple[float, float], speed: float, radius: float) -> float:
    """Steer angle of a car with one wheel an axle on a circle: slip angles from forces, and both from the balance."""
    x, wheelbase = car.centre()[0], car["dimensions.wheelbase"]
    rate = speed / radius
    front, rear = axle_stiffness
    # Unknown: steer angle and angle of drift. Slip: steer - drift - x r/v in front, -drift + (L - x) r/v behind.
    rows = [[front, -(front + rear)], [x * front, -(x * front - (wheelbase - x) * rear)]]
    right = [
        car.total * speed * rate + (front * x - rear * (wheelbase - x)) * rate / speed,
        (front * x**2 + rear * (wheelbase - x) ** 2) * rate / speed,
    ]
    return float(np.linalg.solve(rows, right)[0])


def axle_stiffnesses(car: Car, density: float) -> tuple[float, float]:
    loads = car.axle_loads(density, car["vehicle.speed"] + car["air.wind"], car["vehicle.deceleration"])
    front, rear = (2 * stiffness(car, end, load / 2) for end, load in zip(ENDS, loads, strict=True))
    return front, rear


@pytest.mark.parametrize("seed", SEEDS)
def test_steering_of_a_two_wheel_car(tmp_path, seed):
    """Steady state solved by numpy: its steer angle, the gradient behind it, and the gain in yaw."""
    car = random_car(seed).but({"vehicle.deceleration": 1.0, "vehicle.speed": 30.0})
    names = ["air.density", *(f"balance.{n}" for n in ("understeer_gradient", "steer_angle", "ackermann_angle"))]
    names += ["balance.yaw_gain", "balance.front_load_share"]
    figures = figures_of(tmp_path, car, names)
    speed, radius = car["vehicle.speed"], car["vehicle.corner_radius"]
    angle = steady_corner(car, axle_stiffnesses(car, figures["air.density"]), speed, radius)
    close(figures["balance.steer_angle"], angle)
    ackermann = car["dimensions.wheelbase"] / radius
    close(figures["balance.ackermann_angle"], ackermann)
    close(figures["balance.understeer_gradient"], (angle - ackermann) / (speed**2 / radius))
    close(figures["balance.yaw_gain"], speed / radius / angle)
    loads = car.axle_loads(figures["air.density"], speed + car["air.wind"], 1.0)
    close(figures["balance.front_load_share"], loads[0] / sum(loads))


def two_wheel_determinant(car: Car, axle_stiffness: tuple[float, float], speed: float) -> float:
    """The determinant of motion sideways and in yaw (inertia 1), nothing where the car becomes unstable."""
    x, wheelbase, mass = car.centre()[0], car["dimensions.wheelbase"], car.total
    front, rear = axle_stiffness
    moment = x * front - (wheelbase - x) * rear
    matrix = [
        [-(front + rear) / (mass * speed), -moment / (mass * speed) - speed],
        [-moment / speed, -(front * x**2 + rear * (wheelbase - x) ** 2) / speed],
    ]
    return float(np.linalg.det(matrix))


def test_critical_and_characteristic_speed(tmp_path):
    """An oversteering car is unstable beyond its critical speed, where the determinant changes sign; an understeering one
    needs twice the steer of a neutral car at its characteristic speed. Neither has the other's."""
    tail, nose = (on_wheels(*loads).but({"vehicle.corner_radius": 300.0}) for loads in ((2200, 4600), (4600, 2200)))
    density = 1.2
    critical = figures_of(tmp_path, tail, ["balance.critical_speed"])["balance.critical_speed"]
    scale = abs(two_wheel_determinant(tail, axle_stiffnesses(tail, density), critical / 2))
    assert abs(two_wheel_determinant(tail, axle_stiffnesses(tail, density), critical)) < 1e-9 * scale
    assert unknown(tmp_path, tail, "balance.characteristic_speed")
    speed = figures_of(tmp_path, nose, ["balance.characteristic_speed"])["balance.characteristic_speed"]
    angle = steady_corner(nose, axle_stiffnesses(nose, density), speed, 300.0)
    close(angle, 2 * nose["dimensions.wheelbase"] / 300.0)
    assert unknown(tmp_path, nose, "balance.critical_speed")


def test_two_tyres_an_axle_not_one(tmp_path):
    """Trap: the load of an axle put into the law of one tyre. Here it would turn the sign of the gradient."""
    car = on_wheels(3600.0, 4200.0)
    car = car.but({"tyres.front.cornering_load_factor": 1.2, "tyres.rear.cornering_load_factor": 3.4})
    car = car.but({"tyres.rear.cornering_factor": 28.0})
    gradient = figures_of(tmp_path, car, ["balance.understeer_gradient"])["balance.understeer_gradient"]
    x, wheelbase = car.centre()[0], car["dimensions.wheelbase"]

    def by(front: float, rear: float) -> float:
        return car.total / wheelbase * ((wheelbase - x) / front - x / rear)

    right = by(2 * stiffness(car, "front", 3600.0), 2 * stiffness(car, "rear", 4200.0))
    wrong = by(stiffness(car, "front", 7200.0), stiffness(car, "rear", 8400.0))
    assert right * wrong < 0
    close(gradient, right)


def test_published_understeer(tmp_path):
    """K = 0.016 rad, 0.92 deg, and 41.5 m/s: J. Y. Wong, Theory of Ground Vehicles, 3rd ed. 2001, example 5.1 (a)
    (from memory). 20105 N, 2.8 m, 53.5 %, 38920 and 38250 N/rad a tyre: laws chosen to have these at their greatest."""
    loads = [20105 * share / 2 for share in (0.535, 0.465)]
    numbers = on_wheels(*loads).numbers
    for end, load, value in zip(ENDS, loads, (38920.0, 38250.0), strict=True):
        numbers |= {f"tyres.{end}.grip_load": load, f"tyres.{end}.cornering_load_factor": 1.0}
        numbers |= {f"tyres.{end}.cornering_factor": value / load}
    car = Car(numbers, on_wheels(*loads).masses, on_wheels(*loads).surfaces)
    figures = figures_of(tmp_path, car, ["balance.understeer_gradient", "balance.characteristic_speed"])
    assert figures["balance.understeer_gradient"] * GRAVITY == pytest.approx(0.016, abs=5e-4)
    assert np.degrees(figures["balance.understeer_gradient"] * GRAVITY) == pytest.approx(0.92, abs=0.005)
    assert figures["balance.characteristic_speed"] == pytest.approx(41.5, abs=0.05)


@pytest.mark.parametrize(("radius", "angle"), [(500, 0.96), (200, 2.4), (100, 4.8), (50, 9.6)])
def test_published_steer_angles(tmp_path, radius, angle):
    """57.3 L/R for 100.6 in: Gillespie 1992, ch. 6, example 1 (a) (from memory), radii in ft."""
    car = on_wheels(3000.0, 3000.0).but(
        {"dimensions.wheelbase": 100.6 * 0.0254, "vehicle.corner_radius": radius * 0.3048}
    )
    figures = figures_of(tmp_path, car, ["balance.ackermann_angle"])
    assert np.degrees(figures["balance.ackermann_angle"]) == pytest.approx(angle, abs=0.05)


@pytest.mark.parametrize("seed", SEEDS)
def test_the_axle_that_gives_way_first(tmp_path, seed):
    """Side forces of both axles from force and moment in the corner, over what the four wheels can hold."""
    car = random_car(seed)
    names = [f"{m}.{e}_{n}" for e in ENDS for m, n in (("balance", "grip_use"), ("tyre", "grip_force"))]
    figures = figures_of(tmp_path, car, names)
    side = car.total * car["vehicle.lateral_acceleration"]
    forces = np.linalg.solve([[1, 1], [0, car["dimensions.wheelbase"]]], [side, side * car.centre()[0]])
    for end, force in zip(ENDS, forces, strict=True):
        close(figures[f"balance.{end}_grip_use"] * figures[f"tyre.{end}_grip_force"], force)
