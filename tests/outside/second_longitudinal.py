"""Second computations: braking, recovery and performance, by equilibria and by integrals of scipy."""

from __future__ import annotations

import math
from collections.abc import Callable
from itertools import pairwise

import numpy as np
from scipy.integrate import quad, solve_ivp
from scipy.optimize import brentq
from second_computations import GRAVITY, Bench, second
from second_layout import root_of_line
from whole_cars import ENDS

# --- braking ----------------------------------------------------------------------------------------------------------


def shares(bench: Bench) -> np.ndarray:
    return np.array([bench["brakes.distribution"], 1 - bench["brakes.distribution"]])


def tyre_force(bench: Bench) -> float:
    return bench.car.total * bench["vehicle.deceleration"] - bench.drag(bench.air_speed)


@second("braking.rate", "braking.tyre_force", "braking.ideal_distribution", "braking.kinetic_energy")
def of_the_stop(bench: Bench):
    energy = sum(p.mass * bench["vehicle.speed"] ** 2 / 2 for p in bench.car.masses)
    return (
        bench["vehicle.deceleration"] / GRAVITY,
        tyre_force(bench),
        1 / (1 + bench.driven[1] / bench.driven[0]),
        energy,
    )


@second("braking.front_utilisation", "braking.rear_utilisation")
def utilisations(bench: Bench):
    return shares(bench) * tyre_force(bench) / bench.driven


@second("braking.utilisation_limit")
def limit_line(bench: Bench):
    """Where z = coefficient k - offset (UN R13 Annex 10 as restated in Crolla 2009) meets the deceleration."""
    slope, offset = bench["brakes.adhesion_coefficient"], bench["brakes.adhesion_offset"]
    return root_of_line(lambda k: slope * k - offset - bench["vehicle.deceleration"] / GRAVITY, 0.0, 1.0)


@second("braking.equal_utilisation_rate", closely=1e-8)
def equal_use(bench: Bench):
    """Without air: force over load alike at both axles."""

    def unlike(rate: float) -> float:
        loads = bench.loads(0.0, rate * GRAVITY)
        return float(shares(bench)[0] * loads[1] - shares(bench)[1] * loads[0])

    return root_of_line(unlike, 0.0, 1.0)


def torques(bench: Bench) -> list[float]:
    """Single pads, added up."""
    made = []
    for end in ENDS:
        clamp = bench[f"brakes.{end}.pressure"] * 1e5 * bench[f"brakes.{end}.piston_area"]
        pads = [clamp * bench[f"brakes.{end}.pad_friction"] for _wheel in range(2) for _face in range(2)]
        made.append(sum(force * bench[f"brakes.{end}.effective_radius"] for force in pads))
    return made


@second(*(f"braking.{n}" for n in ("front_torque", "rear_torque", "torque_distribution", "hardware_distribution")))
def hardware(bench: Bench):
    made = torques(bench)
    forces = [torque / bench.at(end, "loaded_radius") for end, torque in zip(ENDS, made, strict=True)]
    return *made, made[0] / sum(made), forces[0] / sum(forces)


def machine_forces(bench: Bench) -> np.ndarray:
    share = {"front": (1, 0), "rear": (0, 1), "none": (0, 0)}
    both = (bench["recovery.front_share"], 1 - bench["recovery.front_share"])
    return bench["recovery.braking_force"] * np.array(share.get(bench.choice("recovery.axle"), both))


@second("braking.machine_front_force", "braking.machine_force", "braking.hydraulic_force")
def machine(bench: Bench):
    forces = machine_forces(bench)
    return forces[0], forces.sum(), tyre_force(bench) - forces.sum()


@second("braking.distribution_machine_on", *(f"braking.{end}_utilisation_machine_on" for end in ENDS))
def machine_on(bench: Bench):
    electric = machine_forces(bench)
    forces = shares(bench) * (tyre_force(bench) - electric.sum()) + electric
    return forces[0] / forces.sum(), *(forces / bench.driven)


@second(
    "braking.deceleration_machine_failed", *(f"braking.{end}_utilisation_machine_failed" for end in ENDS), closely=1e-8
)
def machine_failed(bench: Bench):
    """The hydraulic force stays; the car slows less, and other loads belong to that."""
    forces = shares(bench) * (tyre_force(bench) - machine_forces(bench).sum())
    slower = (forces.sum() + bench.drag(bench.air_speed)) / bench.car.total
    return slower, *(forces / bench.loads(bench.air_speed, slower))


def together(bench: Bench, speed: float) -> float:
    """Deceleration with all the grip of all wheels, in still air."""
    loads = bench.loads(speed, 0.0).sum()
    return (bench["vehicle.grip"] * loads + bench.drag(speed)) / bench.car.total


def locking(bench: Bench, speed: float) -> np.ndarray:
    """Decelerations at which each axle is at its grip, at the distribution given: what is left goes in a line."""
    drag, total = bench.drag(speed), bench.car.total

    def left(deceleration: float) -> np.ndarray:
        force = shares(bench) * (total * deceleration - drag)
        return bench["vehicle.grip"] * bench.loads(speed, deceleration) - force

    one, other = left(0.0), left(10.0)
    return -one * 10.0 / (other - one)


def distance(bench: Bench, held: Callable[[float], float]) -> float:
    """The car is let run in time until it has the end speed: speed and place as two equations of motion."""
    end = bench["vehicle.end_speed"]

    def slow_enough(_: float, state: np.ndarray) -> float:
        return float(state[1] - end)

    slow_enough.terminal = True  # type: ignore[attr-defined]
    run = solve_ivp(
        lambda _, state: [state[1], -held(state[1])], (0.0, 60.0), [0.0, bench["vehicle.speed"]],
        method="DOP853", rtol=1e-11, atol=1e-9, events=slow_enough,
    )  # fmt: skip
    return float(run.y_events[0][0][0])


@second("braking.grip_deceleration", "braking.air_deceleration", "braking.stopping_distance", closely=1e-8)
def ideal_stop(bench: Bench):
    still, moving = together(bench, 0.0), together(bench, 50.0)
    return still, (moving - still) / 50.0**2, distance(bench, lambda speed: together(bench, speed))


LOCKS = ("lock_deceleration", "lock_air")


@second(*(f"braking.{end}_{name}" for end in ENDS for name in LOCKS), closely=1e-8)
def locks_of_each_axle(bench: Bench):
    still, moving = locking(bench, 0.0), locking(bench, 50.0)
    return [value for index in range(2) for value in (still[index], (moving[index] - still[index]) / 2500)]


@second("braking.lock_deceleration", "braking.locks_first", closely=1e-8)
def first_lock(bench: Bench):
    at = locking(bench, bench["vehicle.speed"])
    return min(at), ENDS[int(np.argmin(at))]


def pieces(bench: Bench) -> tuple[int, float]:
    """The axle that locks first at great speed, and the speed at which it changes, held within the stop."""
    fast = int(np.argmin(locking(bench, 1e4)))
    low, high = bench["vehicle.end_speed"], bench["vehicle.speed"]

    def ahead(speed: float) -> float:
        at = locking(bench, speed)
        return float(at[fast] - at[1 - fast])

    if ahead(high) >= 0:
        return fast, high
    return fast, low if ahead(low) <= 0 else brentq(ahead, low, high, xtol=1e-13)


@second(*(f"braking.{n}" for n in ("lock_change", "fast_lock_deceleration", "slow_lock_deceleration")), closely=1e-7)
def change_on_the_way(bench: Bench):
    fast, speed = pieces(bench)
    still = locking(bench, 0.0)
    return speed**2, still[fast], still[1 - fast]


@second(
    *(f"braking.{n}" for n in ("fast_lock_distance", "slow_lock_distance", "stopping_distance_fixed")), closely=1e-6
)
def fixed_stop(bench: Bench):
    fast, change = pieces(bench)

    def over(index: int, low: float, high: float) -> float:
        return quad(lambda v: v / locking(bench, v)[index], low, high, epsabs=0, epsrel=1e-11)[0] if high > low else 0.0

    parts = over(fast, change, bench["vehicle.speed"]), over(1 - fast, bench["vehicle.end_speed"], change)
    return *parts, distance(bench, lambda speed: float(min(locking(bench, speed))))


# --- recovery ---------------------------------------------------------------------------------------------------------

CHAIN = ("gear", "machine", "store")
"""From the wheel through the shaft and the DC bus to the store."""


def along(bench: Bench, power: float, start: str, end: str) -> float:
    """Power that has gone from one point of the chain to another, each efficiency once; backwards it grows."""
    points = ("wheel", "shaft", "bus", "store")
    first, last = points.index(start), points.index(end)
    for name in CHAIN[min(first, last) : max(first, last)]:
        efficiency = bench[f"recovery.{name}_efficiency"]
        power = power * efficiency if last > first else power / efficiency
    return power


def axles(bench: Bench) -> tuple[str, ...]:
    return {"both": ENDS, "none": ()}.get(bench.choice("recovery.axle"), (bench.choice("recovery.axle"),))


def own_limits(bench: Bench, end: str) -> dict[str, float]:
    """What holds back a machine on an axle, at the DC bus."""
    if end not in axles(bench):
        return {"no machine": 0.0}
    speed = bench["vehicle.speed"]
    turning = speed / bench.at(end, "loaded_radius") * bench["recovery.ratio"]
    grip = bench["vehicle.grip"] * bench.driven[ENDS.index(end)] * speed
    return {
        "grip": along(bench, grip, "wheel", "bus"),
        "machine power": along(bench, bench["recovery.power"], "shaft", "bus"),
        "machine torque": along(bench, bench["recovery.torque"] * turning, "shaft", "bus"),
    }


def shared_limits(bench: Bench) -> dict[str, float]:
    """What holds back all machines together, at the DC bus."""
    return {
        "demand": along(bench, max(tyre_force(bench), 0.0) * bench["vehicle.speed"], "wheel", "bus"),
        "rule": along(bench, bench["recovery.power_allowed"], bench.choice("recovery.measuring_point"), "bus"),
        "store": along(bench, bench["recovery.charging_power"], "store", "bus"),
    }


@second(
    "recovery.wheel_to_bus",
    "recovery.machine_power",
    "recovery.demand_power",
    "recovery.rule_power",
    "recovery.store_power",
)
def at_the_bus(bench: Bench):
    shared = shared_limits(bench)
    return along(bench, 1.0, "wheel", "bus"), along(bench, bench["recovery.power"], "shaft", "bus"), *shared.values()


@second(*(f"recovery.{end}_{name}" for end in ENDS for name in ("grip_power", "torque_power", "own_power")))
def of_an_axle(bench: Bench):
    given = []
    for end in ENDS:
        limits = own_limits(bench, end)
        given += [limits.get("grip", 0.0), limits.get("machine torque", 0.0), min(limits.values())]
    return given


def split(bench: Bench) -> tuple[float, list[float]]:
    """Power at the DC bus, and the part of each axle."""
    own = [min(own_limits(bench, end).values()) for end in ENDS]
    power = min(sum(own), *shared_limits(bench).values())
    return power, [power * part / sum(own) if sum(own) else 0.0 for part in own]


@second(*(f"recovery.{n}" for n in ("own_power", "bus_power", "front_bus_power", "rear_bus_power", "stored_power")))
def at_work(bench: Bench):
    power, parts = split(bench)
    own = sum(min(own_limits(bench, end).values()) for end in ENDS)
    return own, power, *parts, along(bench, power, "bus", "store")


def least(limits: dict[str, float]) -> str:
    return min(limits, key=limits.__getitem__)


@second("recovery.front_limit", "recovery.rear_limit", "recovery.limit")
def what_binds(bench: Bench):
    own = [own_limits(bench, end) for end in ENDS]
    shared = shared_limits(bench)
    if not axles(bench):
        return "no machine", "no machine", "no machine"
    if min(shared.values()) <= sum(min(limits.values()) for limits in own):
        word = least(shared)
    else:
        word = "each axle by itself" if len(axles(bench)) == 2 else least(own[ENDS.index(axles(bench)[0])])
    return least(own[0]), least(own[1]), word


def stop_forces(bench: Bench) -> list[float]:
    """What grip and torque of each axle allow in a stop without air, at the DC bus over speed."""
    loads = bench.loads(0.0, bench["vehicle.deceleration"])
    forces = []
    for index, end in enumerate(ENDS):
        turned = bench["recovery.torque"] * bench["recovery.ratio"] / bench.at(end, "loaded_radius")
        grip = along(bench, bench["vehicle.grip"] * loads[index], "wheel", "bus")
        forces.append(min(grip, along(bench, turned, "shaft", "bus")) if end in axles(bench) else 0.0)
    return forces


def stop_limits(bench: Bench) -> tuple[float, float]:
    """In a stop without air at constant deceleration: the force that force limits allow, and the power that power
    limits allow, at the DC bus."""
    demand = along(bench, bench.car.total * bench["vehicle.deceleration"], "wheel", "bus")
    shared = shared_limits(bench)
    machines = len(axles(bench)) * along(bench, bench["recovery.power"], "shaft", "bus")
    power = min(machines, shared["rule"], shared["store"]) if axles(bench) else 0.0
    return min(demand, sum(stop_forces(bench))), power


def in_a_stop(bench: Bench) -> Callable[[float], float]:
    """Power at a speed: each machine by its own limits, all together by those that they share."""
    machine = along(bench, bench["recovery.power"], "shaft", "bus")
    shared, forces = shared_limits(bench), stop_forces(bench)
    held = min(shared["rule"], shared["store"])
    demand = along(bench, bench.car.total * bench["vehicle.deceleration"], "wheel", "bus")
    return lambda speed: min(sum(min(force * speed, machine) for force in forces), demand * speed, held)


def stop_energy(bench: Bench) -> float:
    """Power over time, v from the one speed to the other at constant deceleration; in pieces, since it has kinks."""
    power, cuts = in_a_stop(bench), np.linspace(bench["vehicle.end_speed"], bench["vehicle.speed"], 21)
    parts = [quad(power, low, high, epsabs=1e-4, epsrel=1e-10, limit=200)[0] for low, high in pairwise(cuts)]
    return sum(parts) / bench["vehicle.deceleration"]


@second(
    *(f"recovery.{end}_stop_force" for end in ENDS), "recovery.stop_single_force", "recovery.stop_force", closely=1e-8
)
def forces_of_a_stop(bench: Bench):
    forces = stop_forces(bench)
    return *forces, min(forces), stop_limits(bench)[0]


def stop_speeds(bench: Bench) -> tuple[float, float]:
    """The speeds at which power leaves the line of all forces, and at which it meets its greatest."""
    force, power = stop_limits(bench)
    if not axles(bench):
        return 0.0, 0.0
    at = in_a_stop(bench)
    leaves = brentq(lambda v: force * v * (1 - 1e-12) - at(v), 1e-3, 1e4, xtol=1e-12)
    meets = brentq(lambda v: power * (1 - 1e-12) - at(v), 1e-3, 1e5, xtol=1e-12)
    return leaves, meets


@second("recovery.stop_power", "recovery.stop_energy", closely=1e-8)
def of_a_stop(bench: Bench):
    return stop_limits(bench)[1], stop_energy(bench)


CHANGES = ("first_change", "second_change")


@second(
    "recovery.stop_single_speed", "recovery.stop_full_speed", *(f"recovery.stop_{n}" for n in CHANGES), closely=1e-6
)
def speeds_of_a_stop(bench: Bench):
    speeds = stop_speeds(bench)
    return *speeds, *np.clip(speeds, bench["vehicle.end_speed"], bench["vehicle.speed"])


@second("recovery.stored_energy", "recovery.released_energy", closely=1e-8)
def stored(bench: Bench):
    energy = stop_energy(bench)
    speeds = (bench["vehicle.end_speed"], bench["vehicle.speed"])
    released = sum(quad(lambda v, m=p.mass: m * v, *speeds)[0] for p in bench.car.masses)
    allowed = along(bench, bench["recovery.allowance"], bench.choice("recovery.measuring_point"), "store")
    return min(along(bench, energy, "bus", "store"), bench["recovery.store_room"], allowed), released


# --- performance ------------------------------------------------------------------------------------------------------


def slope_weight(bench: Bench) -> tuple[float, float]:
    """Weight across and along the road, turned by the slope."""
    road = np.array([1.0, bench["vehicle.grade"]])
    road /= np.linalg.norm(road)
    weight = bench.car.total * GRAVITY
    return weight * road[0], weight * road[1]


def road_load(bench: Bench) -> tuple[float, float, float]:
    across, uphill = slope_weight(bench)
    rolling = bench["vehicle.rolling_resistance"] * (across + bench.downforce(bench.air_speed))
    return rolling, uphill, rolling + uphill + bench.drag(bench.air_speed)


@second(*(f"performance.{n}" for n in ("rolling_resistance", "grade_force", "road_load", "road_power", "wheel_power")))
def on_the_road(bench: Bench):
    loads = road_load(bench)
    return *loads, loads[2] * bench["vehicle.speed"], bench["powertrain.power"] * bench["powertrain.efficiency"]


def by_power(bench: Bench) -> float:
    """m a v = P - R v."""
    speed = bench["vehicle.speed"]
    power = bench["powertrain.power"] * bench["powertrain.efficiency"] - road_load(bench)[2] * speed
    return power / (bench.car.total * speed)


def by_grip(bench: Bench, driven: tuple[str, ...]) -> float:
    """The two loads and the acceleration from three balances together, on a level road."""
    x, _, h = bench.centre
    forces = bench.car.air_forces(bench.density, bench.air_speed)
    moment = sum(down * s.x + drag * bench.car.ground(s.x, s.z) for s, down, drag in forces)
    mass = bench.car.total
    grip = [bench["vehicle.grip"] if end in driven else 0.0 for end in ENDS]
    rows = [[1, 1, 0], [0, bench.wheelbase, -mass * h], [*grip, -mass]]
    weight = mass * GRAVITY
    right = [weight + sum(down for _, down, _ in forces), weight * x + moment, sum(drag for _, _, drag in forces)]
    return float(np.linalg.solve(rows, right)[2])


def driven_axles(bench: Bench) -> tuple[str, ...]:
    word = bench.choice("options.driven_axle")
    return ENDS if word == "both" else (word,)


@second(
    "performance.power_acceleration",
    *(f"performance.{n}_grip_acceleration" for n in ("front", "rear", "all")),
    closely=1e-8,
)
def limits_of_acceleration(bench: Bench):
    return by_power(bench), by_grip(bench, ("front",)), by_grip(bench, ("rear",)), by_grip(bench, ENDS)


@second(*(f"performance.{n}" for n in ("grip_acceleration", "acceleration", "acceleration_limit")), closely=1e-8)
def acceleration(bench: Bench):
    grip, power = by_grip(bench, driven_axles(bench)), by_power(bench)
    return grip, min(grip, power), "grip" if grip <= power else "power"


@second(
    *(f"performance.{n}" for n in ("front_axle_grade", "rear_axle_grade", "all_wheels_grade", "tip_back_angle")),
    closely=1e-8,
)
def slopes(bench: Bench):
    """The slope on which forces along the road are as great as the grip, and that on which the front wheels lift."""
    x, _, h = bench.centre

    def loads(angle: float) -> np.ndarray:
        """Over the weight, the car facing uphill: moments about the foot of the front axle."""
        across, down = math.cos(angle), math.sin(angle)
        return np.linalg.solve([[1, 1], [0, bench.wheelbase]], [across, across * x + down * h])

    def held(ends: tuple[int, ...]) -> float:
        grip = bench["vehicle.grip"]
        return brentq(lambda a: grip * sum(loads(a)[end] for end in ends) - math.sin(a), 0, 1.5, xtol=1e-14)

    return held((0,)), held((1,)), held((0, 1)), brentq(lambda a: loads(a)[0], 0, 1.57, xtol=1e-14)


@second("performance.top_speed", "performance.level_top_speed", closely=1e-8)
def top_speeds(bench: Bench):
    """Where the power at the wheels is what the road takes, between 10 and 600 km/h; on the grade and on the level."""
    power = bench["powertrain.power"] * bench["powertrain.efficiency"]
    level = (bench.car.total * GRAVITY, 0.0)

    def left(speed: float, across: float, uphill: float) -> float:
        air = speed + bench["air.wind"]
        held = bench.drag(air) + bench["vehicle.rolling_resistance"] * (across + bench.downforce(air)) + uphill
        return power - held * speed

    ends = 10 / 3.6, 600 / 3.6
    return [
        brentq(left, *ends, args=weights, xtol=1e-11) if left(ends[0], *weights) > 0 > left(ends[1], *weights) else None
        for weights in (slope_weight(bench), level)
    ]


@second("performance.corner_speed", closely=1e-8)
def corner(bench: Bench):
    """What the corner asks against what the tyres give, still air; None where they give more at any speed."""
    radius, grip = abs(bench["vehicle.corner_radius"]), bench["vehicle.grip"]

    def over(speed: float) -> float:
        given = grip * (bench.car.total * GRAVITY + bench.downforce(speed))
        return given - bench.car.total * speed**2 / radius

    return brentq(over, 1.0, 1e5, xtol=1e-10, rtol=1e-13) if over(1e5) < 0 else None
