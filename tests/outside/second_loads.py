"""Second computations: aero, load transfer, tyres and balance."""

from __future__ import annotations

import math

import numpy as np
from scipy.optimize import brentq
from second_computations import GRAVITY, Bench, second
from second_layout import four_masses
from whole_cars import ENDS

# --- aero -------------------------------------------------------------------------------------------------------------


@second("aero.dynamic_pressure", "aero.downforce", "aero.drag")
def forces_of_the_air(bench: Bench):
    """Pressure: drag of a plate of 1 m^2 of drag area."""
    return bench.density * bench.air_speed**2 * 0.5, bench.downforce(bench.air_speed), bench.drag(bench.air_speed)


@second("aero.downforce_area", "aero.drag_area", "aero.drag_height", "aero.downforce_to_drag")
def areas(bench: Bench):
    """Forces in air of 1 Pa of dynamic pressure."""
    down, drag = bench.downforce(1.0, 2.0), bench.drag(1.0, 2.0)
    moment = sum(force * bench.car.ground(s.x, s.z) for s, _, force in bench.car.air_forces(2.0, 1.0))
    return down, drag, moment / drag, down / drag


@second("aero.front_downforce_area", "aero.rear_downforce_area", "aero.front_share", "aero.centre_of_pressure")
def axle_areas(bench: Bench):
    """What that air adds to the axles; the centre is where one force would do the same."""
    front, rear = bench.unit_air
    return front, rear, front / (front + rear), rear * bench.wheelbase / (front + rear)


@second("aero.front_downforce", "aero.rear_downforce")
def axle_forces(bench: Bench):
    return bench.loads(bench.air_speed, 0.0) - bench.standing


@second("aero.downforce_coefficient", "aero.drag_coefficient")
def coefficients(bench: Bench):
    area = bench["aero.reference_area"]
    return [force / area for force in (bench.downforce(1.0, 2.0), bench.drag(1.0, 2.0))]


@second("aero.coasting_rear_downforce_area", "aero.coasting_front_share", "aero.coasting_centre_of_pressure")
def coasting(bench: Bench):
    """Nothing but drag slows the car, and inertia holds against it."""
    added = bench.loads(1.0, bench.drag(1.0, 2.0) / bench.car.total, 2.0) - bench.loads(0.0, 0.0, 2.0)
    return added[1], added[0] / added.sum(), bench.wheelbase * added[1] / added.sum()


# --- load transfer ----------------------------------------------------------------------------------------------------


@second("load_transfer.weight", "load_transfer.front_axle", "load_transfer.rear_axle", "load_transfer.longitudinal")
def axles(bench: Bench):
    moved = bench.loads(0.0, bench["vehicle.deceleration"]) - bench.standing
    return bench.standing.sum(), *bench.driven, moved[0]


@second("load_transfer.unsprung_front_moment", "load_transfer.unsprung_rear_moment", "load_transfer.unsprung_place")
def unsprung(bench: Bench):
    place = sum(p.mass * p.x for p in bench.car.masses if p.unsprung != "none")
    return *(bench.moment_of(end) for end in ENDS), place


@second("load_transfer.sprung_height", "load_transfer.sprung_x", "load_transfer.roll_arm")
def body(bench: Bench):
    _, x, h = bench.body
    centres = [bench[f"suspension.{end}.roll_centre_height"] for end in ENDS]
    return h, x, h - np.interp(x, [0, bench.wheelbase], centres)


@second("load_transfer.lateral_moment", "load_transfer.lateral_both_axles")
def rigid(bench: Bench):
    """Moment of the side force about the ground, and the pair of forces at the mean track that holds against it."""
    moment = sum(p.mass * bench["vehicle.lateral_acceleration"] * bench.car.ground(p.x, p.z) for p in bench.car.masses)
    return moment, moment / np.mean([bench[f"dimensions.{end}_track"] for end in ENDS])


def rolled(bench: Bench) -> tuple[float, np.ndarray]:
    """The angle of roll, turned step by step until springs and moments agree, and the moment of each axle."""
    mass, x, h = bench.body
    side = bench["vehicle.lateral_acceleration"]
    centres = np.array([bench[f"suspension.{end}.roll_centre_height"] for end in ENDS])
    stiff = np.array([bench[f"suspension.{end}.roll_stiffness"] for end in ENDS])
    supports = np.linalg.solve([[1, 1], [0, bench.wheelbase]], [mass * side, mass * side * x])
    arm = h - np.interp(x, [0, bench.wheelbase], centres)
    angle = 0.0
    for _ in range(300):
        angle = mass * arm * (side + GRAVITY * angle) / stiff.sum()
    own = np.array([side * bench.moment_of(end) for end in ENDS])
    return float(angle), stiff * angle + supports * centres + own


@second("load_transfer.roll_angle", "load_transfer.front_lateral", "load_transfer.rear_lateral")
def roll(bench: Bench):
    angle, moments = rolled(bench)
    return angle, *(moment / bench[f"dimensions.{end}_track"] for end, moment in zip(ENDS, moments, strict=True))


def wheel_loads(bench: Bench, harder: float = 1.0) -> dict[str, np.ndarray]:
    """Left and right wheel of each end: the axle's load halved, the offset of the mass, and the corner's transfer.

    Springs are straight: in a corner taken so many times harder that much more is moved.
    """
    still = four_masses(bench) * GRAVITY
    moments = rolled(bench)[1] * harder
    wheels = {}
    for index, end in enumerate(ENDS):
        offset = (still[2 * index] - still[2 * index + 1]) / 2
        transfer = moments[index] / bench[f"dimensions.{end}_track"]
        wheels[end] = bench.driven[index] / 2 + np.array([1, -1]) * (offset + transfer)
    return wheels


@second(*(f"load_transfer.{end}_{side}" for end in ENDS for side in ("left", "right")), closely=1e-8)
def wheels(bench: Bench):
    return [load for end in ENDS for load in wheel_loads(bench)[end]]


# --- tyres ------------------------------------------------------------------------------------------------------------


def friction(bench: Bench, end: str, load: float) -> float:
    """A straight line through the grip at the load of the data, less by the fade at twice that load."""
    at, most = bench.at(end, "grip_load"), bench.at(end, "grip")
    return float(np.polyval(np.polyfit([at, 2 * at], [most, most * (1 - bench.at(end, "grip_fade"))], 1), load))


def stiffness(bench: Bench, end: str, load: float) -> float:
    """Pacejka 2012 (from memory) without circular functions: sin(2 atan u) = 2u/(1 + u^2)."""
    u = load / (bench.at(end, "cornering_load_factor") * bench.at(end, "grip_load"))
    return bench.at(end, "cornering_factor") * bench.at(end, "grip_load") * 2 * u / (1 + u * u)


def each_end(name: str) -> tuple[str, ...]:
    return tuple(f"tyre.{end}_{name}" for end in ENDS)


@second(*each_end("load"), *each_end("grip"), *each_end("cornering_stiffness"))
def straight_on(bench: Bench):
    loads = bench.driven / 2
    pairs = list(zip(ENDS, loads, strict=True))
    return *loads, *(friction(bench, *pair) for pair in pairs), *(stiffness(bench, *pair) for pair in pairs)


@second(*each_end("grip_force"), *each_end("load_use"), "tyre.speed_use", closely=1e-8)
def in_the_corner(bench: Bench):
    wheels = wheel_loads(bench)
    forces = [sum(load * friction(bench, end, load) for load in wheels[end]) for end in ENDS]
    use = [max(wheels[end]) / bench.at(end, "load_rating") for end in ENDS]
    return *forces, *use, max(bench["vehicle.speed"] / bench.at(end, "speed_rating") for end in ENDS)


# --- balance ----------------------------------------------------------------------------------------------------------


@second("balance.pressure_behind_gravity", "balance.front_load_share")
def shares(bench: Bench):
    front, rear = bench.unit_air
    mass = bench.standing[1] / bench.standing.sum()
    return rear / (front + rear) - mass, bench.driven[0] / bench.driven.sum()


def steer(bench: Bench, speed: float, radius: float, loads: np.ndarray | None = None) -> float:
    """Steer angle of a car with one wheel an axle on a circle: slip angles from forces, and both from the balance."""
    axles = bench.driven if loads is None else loads
    front, rear = (2 * stiffness(bench, end, load / 2) for end, load in zip(ENDS, axles, strict=True))
    x, behind, mass = bench.centre[0], bench.wheelbase - bench.centre[0], bench.car.total
    rate = speed / radius
    # Unknown: steer angle and angle of drift.
    rows = [[front, -(front + rear)], [x * front, -(x * front - behind * rear)]]
    right = [
        mass * speed * rate + (front * x - rear * behind) * rate / speed,
        (front * x**2 + rear * behind**2) * rate / speed,
    ]
    return float(np.linalg.solve(rows, right)[0])


def gradient(bench: Bench, loads: np.ndarray | None = None) -> float:
    """Steer beyond that at walking pace, over lateral acceleration, in rad s^2/m."""
    speed, radius = 20.0, 100.0
    return (steer(bench, speed, radius, loads) - bench.wheelbase / radius) / (speed**2 / radius)


@second("balance.front_stiffness_slope", "balance.rear_stiffness_slope", "balance.gradient_slope", closely=1e-5)
def slopes(bench: Bench):
    """By differences: over a little more load, and over a little more speed with the loads that the air then gives."""
    step = 1.0
    by_load = [
        (stiffness(bench, end, load / 2 + step) - stiffness(bench, end, load / 2 - step)) / (2 * step)
        for end, load in zip(ENDS, bench.driven, strict=True)
    ]
    braked, step = bench["vehicle.deceleration"], 0.05
    by_speed = [gradient(bench, bench.loads(bench.air_speed + side * step, braked)) for side in (1, -1)]
    return *by_load, (by_speed[0] - by_speed[1]) / (2 * step)


@second(
    "balance.understeer_gradient", "balance.steer_angle", "balance.ackermann_angle", "balance.yaw_gain", closely=1e-7
)
def steering(bench: Bench):
    speed, radius = bench["vehicle.speed"], bench["vehicle.corner_radius"]
    angle = steer(bench, speed, radius)
    return gradient(bench), angle, bench.wheelbase / radius, speed / radius / angle


@second("balance.characteristic_speed", "balance.critical_speed", closely=1e-7)
def speeds(bench: Bench):
    """Twice the steer of a neutral car, and none at all: an understeering car has the one, an oversteering the other."""
    slope = gradient(bench)
    speed = math.sqrt(bench.wheelbase / abs(slope))
    needed = steer(bench, speed, 500.0) / (bench.wheelbase / 500.0)
    assert abs(needed - (2 if slope > 0 else 0)) < 1e-6
    return (speed, None) if slope > 0 else (None, speed)


@second("balance.front_grip_use", "balance.rear_grip_use", closely=1e-8)
def uses(bench: Bench):
    """Side forces of both axles by force and moment, over what the wheels can hold."""
    side = bench.car.total * abs(bench["vehicle.lateral_acceleration"])
    needed = np.linalg.solve([[1, 1], [0, bench.wheelbase]], [side, side * bench.centre[0]])
    wheels = wheel_loads(bench)
    held = [sum(load * friction(bench, end, load) for load in wheels[end]) for end in ENDS]
    return needed / held


def gives_way(bench: Bench, end: str) -> float | None:
    """The least side acceleration, up to 10 gn, at which the wheels of an axle hold no more than its mass asks."""
    share = bench.standing[ENDS.index(end)] / GRAVITY
    given = bench["vehicle.lateral_acceleration"]

    def left(side: float) -> float:
        wheels = wheel_loads(bench, side / given)[end]
        return float(sum(load * friction(bench, end, load) for load in wheels) - share * side)

    tried = np.linspace(0, 10 * GRAVITY, 60)
    signs = [left(side) for side in tried]
    for low, high, one, other in zip(tried, tried[1:], signs, signs[1:], strict=False):
        if one > 0 >= other:
            return float(brentq(left, low, high, xtol=1e-13))
    return None


@second(
    *(f"balance.{n}" for n in ("front_limit", "rear_limit", "limit", "limit_balance", "gives_way_first")), closely=1e-8
)
def limits(bench: Bench):
    """In a corner to the right; the axle with the lower limit gives way first."""
    front, rear = (gives_way(bench, end) for end in ENDS)
    if front is None or rear is None:
        return front, rear, None, None, None
    return front, rear, min(front, rear), (rear - front) / min(front, rear), "front" if front <= rear else "rear"
