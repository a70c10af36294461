"""Recovery and performance against lists of limits, equilibria solved by numpy and integrals taken numerically.

Derived throughout but where a check names its source.
"""

from __future__ import annotations

import numpy as np
import pytest
from physics_cars import GRAVITY, Car, Mass, Surface, figures_of, integral, random_car, said, unknown


def still(seed: int) -> Car:
    """A random car in still air."""
    return random_car(seed).but({"air.wind": 0.0})


def close(value: float, due: float, rel: float = 1e-9) -> None:
    assert value == pytest.approx(due, rel=rel, abs=1e-12)


# --- recovery ---------------------------------------------------------------------------------------------------------

LIMITS = ["grip", "machine power", "machine torque", "demand", "rule", "store", "no machine", "each axle by itself"]


def bus_limits(car: Car, density: float, loads: dict[str, float], drag: float) -> dict[str, float]:
    """Every limit of a machine on one axle at the DC bus, efficiencies multiplied along the way that the power takes."""
    axle, speed = car.choices["recovery.axle"], car["vehicle.speed"]
    gear, machine, store = (car[f"recovery.{n}_efficiency"] for n in ("gear", "machine", "store"))
    turning = speed / car[f"tyres.{axle}.loaded_radius"] * car["recovery.ratio"]
    point = {"wheel": gear * machine, "shaft": machine, "bus": 1.0}[car.choices["recovery.measuring_point"]]
    return {
        "grip": car["vehicle.grip"] * loads[axle] * speed * gear * machine,
        "machine power": car["recovery.power"] * machine,
        "machine torque": car["recovery.torque"] * turning * machine,
        "demand": (car.total * car["vehicle.deceleration"] - drag) * speed * gear * machine,
        "rule": car["recovery.power_allowed"] * point,
        "store": car["recovery.charging_power"] / store,
    }


PLENTY = {"recovery.power": 9e5, "recovery.torque": 9e3, "recovery.power_allowed": 8e6, "recovery.charging_power": 9e6}


@pytest.mark.parametrize(
    ("binds", "axle", "point", "numbers"),
    [
        ("grip", "front", "bus", {"vehicle.grip": 0.3, "vehicle.deceleration": 12.0, "recovery.power": 4e6}),
        ("grip", "rear", "bus", {"vehicle.grip": 0.3, "vehicle.deceleration": 12.0, "recovery.power": 4e6}),
        ("machine power", "rear", "wheel", {"recovery.power": 9e4}),
        ("machine torque", "front", "shaft", {"recovery.torque": 40.0}),
        ("machine torque", "rear", "shaft", {"recovery.torque": 40.0}),
        ("demand", "front", "bus", {"vehicle.deceleration": 3.0}),
        ("rule", "front", "wheel", {"recovery.power_allowed": 8e4}),
        ("rule", "rear", "shaft", {"recovery.power_allowed": 8e4}),
        ("rule", "rear", "bus", {"recovery.power_allowed": 8e4}),
        ("store", "front", "wheel", {"recovery.charging_power": 5e4}),
    ],
)
def test_the_limit_that_binds_is_named(tmp_path, binds, numbers, axle, point):
    """Trap: one efficiency over all terms. The least limit at the DC bus, and its name, against a list of all."""
    car = still(11).but({**PLENTY, **numbers}, {"recovery.axle": axle, "recovery.measuring_point": point})
    names = ["air.density", "recovery.bus_power", f"recovery.{axle}_bus_power", "recovery.stored_power"]
    figures = figures_of(tmp_path, car, names)
    density = figures["air.density"]
    loads = dict(
        zip(("front", "rear"), car.axle_loads(density, car["vehicle.speed"], car["vehicle.deceleration"]), strict=True)
    )
    drag = sum(force for _, _, force in car.air_forces(density, car["vehicle.speed"]))
    limits = bus_limits(car, density, loads, drag)
    assert min(limits, key=limits.__getitem__) == binds
    close(figures["recovery.bus_power"], limits[binds])
    close(figures[f"recovery.{axle}_bus_power"], limits[binds])
    close(figures["recovery.stored_power"], limits[binds] * car["recovery.store_efficiency"])
    assert said(tmp_path, car, "recovery.limit", LIMITS) == binds


def test_machines_on_both_axles_share_a_limit_in_proportion(tmp_path):
    """A rule that holds both together is split as what each could give by itself; without it each gives its own."""
    choices = {"recovery.axle": "both", "recovery.measuring_point": "bus"}
    car = still(12).but({**PLENTY, "recovery.torque": 150.0}, choices)
    names = [f"recovery.{n}" for n in ("front_own_power", "rear_own_power", "front_bus_power", "rear_bus_power")]
    free = figures_of(tmp_path, car, names)
    assert said(tmp_path, car, "recovery.limit", LIMITS) == "each axle by itself"
    for end in ("front", "rear"):
        turning = car["vehicle.speed"] / car[f"tyres.{end}.loaded_radius"] * car["recovery.ratio"]
        close(free[f"recovery.{end}_own_power"], 150.0 * turning * car["recovery.machine_efficiency"])
        close(free[f"recovery.{end}_bus_power"], free[f"recovery.{end}_own_power"])
    held = car.but({"recovery.power_allowed": 6e4})
    split = figures_of(tmp_path, held, names)
    assert said(tmp_path, held, "recovery.limit", LIMITS) == "rule"
    close(split["recovery.front_bus_power"] + split["recovery.rear_bus_power"], 6e4)
    close(
        split["recovery.front_bus_power"] / split["recovery.rear_bus_power"],
        free["recovery.front_own_power"] / free["recovery.rear_own_power"],
    )


def test_no_machine_recovers_nothing(tmp_path):
    car = still(12).but(choices={"recovery.axle": "none", "recovery.measuring_point": "bus"})
    names = ["recovery.bus_power", "recovery.stop_energy", "recovery.stored_energy"]
    assert set(figures_of(tmp_path, car, names).values()) == {0}
    assert said(tmp_path, car, "recovery.limit", LIMITS) == "no machine"


def bare(front_share: float, axle: str, power: float) -> Car:
    """1000 kg, grip 1.4, no air, braked as hard as the grip allows, loads counted as they stand: nothing transfers."""
    numbers = {"dimensions.wheelbase": 2.5, "dimensions.front_ride_height": 0.0, "dimensions.rear_ride_height": 0.0}
    numbers |= {"vehicle.speed": 300 / 3.6, "vehicle.end_speed": 100 / 3.6, "vehicle.grip": 1.4}
    numbers |= {"vehicle.deceleration": 1.4 * GRAVITY, "recovery.power": power, "recovery.torque": 1e5}
    numbers |= {"recovery.ratio": 5.0, "recovery.power_allowed": 9e9, "recovery.charging_power": 9e9}
    numbers |= {f"recovery.{name}_efficiency": 1.0 for name in ("gear", "machine", "store")}
    numbers |= {"recovery.store_room": 9e9, "recovery.allowance": 9e9}
    numbers |= {f"tyres.{end}.loaded_radius": 0.33 for end in ("front", "rear")}
    choices = {"recovery.axle": axle, "recovery.measuring_point": "bus"}
    return Car(numbers, (Mass(1000.0, 2.5 * (1 - front_share), 0.0, 0.0),), (), choices)


@pytest.mark.parametrize(("power", "ratio"), [(2e5, 1.00), (3.5e5, 1.05), (9e6, 1.50)])
def test_half_as_much_again_only_while_grip_binds(tmp_path, power, ratio):
    """Trap: 900 kg over the machine against 600 kg give half as much again only where nothing but grip binds."""
    energies = []
    for share in (0.9, 0.6):
        car = bare(share, "front", power)
        energies.append(figures_of(tmp_path, car, ["recovery.stop_energy"])["recovery.stop_energy"])
        force = 1.4 * GRAVITY * 1000 * share

        def power_at(v: float, force: float = force) -> float:
            return min(force * v, power) / (1.4 * GRAVITY)

        close(energies[-1], integral(power_at, 100 / 3.6, 300 / 3.6, pieces=300), rel=1e-5)
    assert energies[0] / energies[1] == pytest.approx(ratio, abs=0.005)


def test_energy_of_a_stop(tmp_path):
    """Where nothing but the demand binds: m (v1^2 - v2^2)/2 times the efficiency, 1800 kJ for 1000 kg, 80 to 20 m/s and
    0.6 (derived closed form); four times as much from twice the speeds; capped by room and by allowance."""
    car = bare(0.5, "front", 9e9)
    car = car.but({"vehicle.speed": 80.0, "vehicle.end_speed": 20.0, "recovery.machine_efficiency": 0.6})
    car = car.but({"vehicle.deceleration": 3.0})
    names = ["recovery.stop_energy", "recovery.stored_energy", "recovery.released_energy"]
    figures = figures_of(tmp_path, car, names)
    assert figures["recovery.stop_energy"] == pytest.approx(1.8e6, rel=1e-12)
    assert figures["recovery.released_energy"] == pytest.approx(3e6, rel=1e-12)
    twice = figures_of(tmp_path, car.but({"vehicle.speed": 160.0, "vehicle.end_speed": 40.0}), names)
    assert twice["recovery.stop_energy"] == pytest.approx(7.2e6, rel=1e-12)
    lossy = car.but({"recovery.store_efficiency": 0.9})
    caps = [({}, 1.62e6), ({"recovery.store_room": 1e6}, 1e6), ({"recovery.allowance": 1e6}, 9e5)]
    for cap, due in caps:
        stored = figures_of(tmp_path, lossy.but(cap), names)["recovery.stored_energy"]
        assert stored == pytest.approx(due, rel=1e-12)


# --- performance ------------------------------------------------------------------------------------------------------


def driven(car: Car, density: float, speed: float, axle: str) -> float:
    """Acceleration with one axle at its grip: loads and acceleration solved together."""
    x, _, h = car.centre()
    forces = car.air_forces(density, speed)
    down, drag = sum(a for _, a, _ in forces), sum(d for _, _, d in forces)
    moment = sum(a * s.x + d * car.ground(s.x, s.z) for s, a, d in forces)
    wheelbase, grip, mass = car["dimensions.wheelbase"], car["vehicle.grip"], car.total
    drive = [grip if axle in (end, "both") else 0.0 for end in ("front", "rear")]
    # Unknown: load of the front axle, of the rear axle, acceleration.
    rows = [[1, 1, 0], [0, wheelbase, -mass * h], [*drive, -mass]]
    return float(np.linalg.solve(rows, [mass * GRAVITY + down, mass * GRAVITY * x + moment, drag])[2])


@pytest.mark.parametrize("axle", ["front", "rear", "both"])
def test_acceleration_at_the_grip_of_an_axle(tmp_path, axle):
    """Three balances solved together for the two loads and the acceleration."""
    car = still(11).but({"vehicle.grade": 0.0}, {"options.driven_axle": axle})
    names = ["air.density", "performance.grip_acceleration", "performance.acceleration", "performance.road_load"]
    figures = figures_of(tmp_path, car, names)
    due = driven(car, figures["air.density"], car["vehicle.speed"], axle)
    close(figures["performance.grip_acceleration"], due)
    power = car["powertrain.power"] * car["powertrain.efficiency"] / car["vehicle.speed"]
    by_power = (power - figures["performance.road_load"]) / car.total
    close(figures["performance.acceleration"], min(due, by_power))
    held = "power" if by_power < due else "grip"
    assert said(tmp_path, car, "performance.acceleration_limit", ["grip", "power"]) == held
    slow = car.but({"vehicle.speed": 8.0})
    assert said(tmp_path, slow, "performance.acceleration_limit", ["grip", "power"]) == "grip"


def test_road_load(tmp_path):
    """100 + 75.44 + 33.97 = 209.41 lb: Mannering and others, Principles of Highway Engineering 4e, 2008, problem 2.31
    (read). There the slope's sine is taken as its tangent, and the weight on the road as the weight: 0.12 % each."""
    pound, foot, speed = 4.4482216152605, 0.3048, 70 * 0.44704
    drag_area = 75.44 * pound / (0.5 * 1.225 * speed**2)
    numbers = {"dimensions.wheelbase": 2.5, "dimensions.front_ride_height": 0.1, "dimensions.rear_ride_height": 0.1}
    numbers |= {"vehicle.speed": speed, "vehicle.grade": 0.05, "air.wind": 0.0, "air.altitude": 0.0}
    numbers |= {"air.temperature": 288.15, "air.humidity": 0.0}
    numbers |= {"vehicle.rolling_resistance": 0.01 * (1 + 70 * 5280 / 3600 / 147)}
    car = Car(numbers, (Mass(2000 * 0.45359237, 1.2, 0.0, 0.4),), (Surface(0.0, drag_area, 1.2, 0.5),))
    figures = figures_of(tmp_path, car, [f"performance.{n}" for n in ("road_load", "grade_force", "road_power")])
    assert figures["performance.grade_force"] / pound == pytest.approx(100, rel=0.0013)
    assert figures["performance.road_load"] / pound == pytest.approx(209.41, rel=0.001)
    close(figures["performance.road_power"], figures["performance.road_load"] * speed)
    assert foot * 5280 / 3600 == pytest.approx(0.44704)


def test_holding_on_a_slope(tmp_path):
    """R. N. Jazar, Vehicle Dynamics, 2008, ch. 2, eqs (2.44) to (2.71): a1 = 1.2 m, a2 = 1.4 m, h = 0.55 m, grip 0.8.

    No numbers are printed; these are derived from the balance of moments, for the front axle too, where the printed
    (2.68) contradicts the book's own (2.66).
    """
    numbers = {"dimensions.wheelbase": 2.6, "dimensions.front_ride_height": 0.1, "dimensions.rear_ride_height": 0.1}
    car = Car({**numbers, "vehicle.grip": 0.8}, (Mass(1000.0, 1.2, 0.0, 0.45),), ())
    names = ("rear_axle_grade", "front_axle_grade", "all_wheels_grade", "tip_back_angle")
    figures = figures_of(tmp_path, car, [f"performance.{name}" for name in names])
    degrees = [np.degrees(figures[f"performance.{name}"]) for name in names]
    assert degrees == pytest.approx([23.962, 20.225, 38.66, 68.552], abs=6e-4)
    for angle, axle in zip(degrees[:2], ("rear", "front"), strict=True):
        sine, cosine = np.sin(np.radians(angle)), np.cos(np.radians(angle))
        rear = (1.2 * cosine + 0.55 * sine) / 2.6
        assert 0.8 * (rear if axle == "rear" else cosine - rear) == pytest.approx(sine, abs=1e-9)


def test_greatest_speed_after_fifty_metres(tmp_path):
    """78.1 and 63.8 km/h by front and rear drive: Beer and Johnston, Dynamics (answers read, attribution from memory).

    60 % on the front axle, grip 0.8, no transfer: the mass lies on the ground. There g is 9.81 m/s^2.
    """
    numbers = {"dimensions.wheelbase": 2.5, "dimensions.front_ride_height": 0.0, "dimensions.rear_ride_height": 0.0}
    numbers |= {"vehicle.speed": 0.0, "air.wind": 0.0, "air.altitude": 0.0, "air.temperature": 288.15}
    numbers |= {"air.humidity": 0.0, "vehicle.grip": 0.8}
    car = Car(numbers, (Mass(1000.0, 1.0, 0.0, 0.0),), (Surface(0.0, 0.0, 1.0, 0.0),))
    names = ["performance.front_grip_acceleration", "performance.rear_grip_acceleration"]
    figures = figures_of(tmp_path, car, names)
    speeds = [3.6 * np.sqrt(2 * figures[name] * 50) for name in names]
    assert speeds == pytest.approx([78.1, 63.8], abs=0.06)


def test_corner_speed(tmp_path):
    """27.12008 and 46.04733 m/s: derived closed form of a point mass, by its balance m v^2/R = mu (m g + rho CA v^2/2)."""
    numbers = {"dimensions.wheelbase": 2.5, "dimensions.front_ride_height": 0.0, "dimensions.rear_ride_height": 0.0}
    numbers |= {"vehicle.grip": 1.5, "air.altitude": 0.0, "air.temperature": 288.15, "air.humidity": 0.0}
    numbers |= {"air.wind": 0.0}
    flat = Car(
        {**numbers, "vehicle.corner_radius": 50.0}, (Mass(900.0, 1.2, 0.0, 0.3),), (Surface(0.0, 1.0, 1.2, 0.0),)
    )
    wing = Car({**numbers, "vehicle.corner_radius": 100.0}, flat.masses, (Surface(3.0, 1.0, 1.2, 0.0),))
    name = "performance.corner_speed"
    assert figures_of(tmp_path, flat, [name])[name] == pytest.approx(27.12008, abs=1e-4)
    assert figures_of(tmp_path, wing, [name])[name] == pytest.approx(46.04733, abs=1e-3)
    # Beyond the radius at which downforce outgrows the corner there is no such speed.
    assert unknown(tmp_path, wing.but({"vehicle.corner_radius": 400.0}), name)
