"""Tyres and steering against a two-wheel car, diffuser, ballast and weighing against geometry and moments.

Derived throughout but where a check names its source.
"""

from __future__ import annotations

import numpy as np
import pytest
from physics_cars import GRAVITY, Car, Mass, figures_of, outside, random_car, unknown

SEEDS = (20, 21, 22)
ENDS = ("front", "rear")


def close(value: float, due: float, rel: float = 1e-9) -> None:
    assert value == pytest.approx(due, rel=rel, abs=1e-12)


# --- tyres -----------------------------------------------------------------------------------------------------------


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


# --- steering --------------------------------------------------------------------------------------------------------


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


# --- diffuser --------------------------------------------------------------------------------------------------------

INCH = 0.0254
DIFFUSER = {
    "dimensions.rear_track": 1.6, "tyres.rear.width": 0.33, "tyres.rear.section_width": 0.34, "diffuser.gap": 0.02,
    "diffuser.width": 1.15, "diffuser.length": 0.64, "diffuser.angle": np.radians(13.0), "diffuser.flare": 1.1,
    "diffuser.inlet_height": 0.06, "diffuser.width_over_tyres": 1.95, "diffuser.efficiency": 0.7,
    "diffuser.base_pressure": -0.2,
}  # fmt: skip


def diffuser_car(held: str, **numbers: float) -> Car:
    named = {name.replace("__", "."): value for name, value in numbers.items()}
    return Car({**DIFFUSER, **named}, (), (), {"diffuser.width_held": held})


@pytest.mark.parametrize(("held", "freed"), [("track", 5), ("outer", 10)])
def test_a_narrower_tyre_frees_width(tmp_path, held, freed):
    """Common practice, no source: 9 in for 14 in tyres free 5 in at the same track, 10 in at the same outer width."""
    widths = [
        figures_of(tmp_path, diffuser_car(held, tyres__rear__width=inches * INCH), ["diffuser.width_between_tyres"])
        for inches in (14, 9)
    ]
    name = "diffuser.width_between_tyres"
    assert widths[1][name] - widths[0][name] == pytest.approx(freed * INCH, abs=1e-9)


@pytest.mark.parametrize("held", ["track", "outer"])
def test_width_between_the_inner_edges(tmp_path, held):
    """The inner edges of both tyres placed across the car, a gap inside each."""
    car = diffuser_car(held)
    names = [f"diffuser.{n}" for n in ("width_between_tyres", "width_between_sidewalls", "width_room", "outer_width")]
    figures = figures_of(tmp_path, car, names)
    track = 1.6 if held == "track" else 1.95 - 0.33
    centres = np.array([-track / 2, track / 2])
    for name, width in (("tyres", 0.33), ("sidewalls", 0.34)):
        inner = centres + np.array([1, -1]) * (width / 2 + 0.02)
        close(figures[f"diffuser.width_between_{name}"], inner[1] - inner[0])
    close(figures["diffuser.width_room"], figures["diffuser.width_between_tyres"] - 1.15)
    close(figures["diffuser.outer_width"], track + 0.33)


def test_ideal_recovery_is_bernoulli(tmp_path):
    """Speeds from areas, pressures from speeds, both by hand; the efficiency takes its share of the recovery."""
    car = diffuser_car("track")
    names = [f"diffuser.{n}" for n in ("area_ratio", "ideal_recovery", "recovery", "inlet_pressure")]
    figures = figures_of(tmp_path, car, names)
    inlet = 0.06 * 1.0
    outlet = (0.06 + 0.64 * np.sin(np.radians(13.0)) / np.cos(np.radians(13.0))) * 1.1
    close(figures["diffuser.area_ratio"], outlet / inlet)
    slow = inlet / outlet
    close(figures["diffuser.ideal_recovery"], 1 - slow**2)
    # Recovery over the dynamic pressure at the inlet: (Cp2 - Cp1)/(1 - Cp1), Bernoulli in the inlet itself.
    inside = figures["diffuser.inlet_pressure"]
    close((-0.2 - inside) / (1 - inside), 0.7 * (1 - slow**2))
    close(figures["diffuser.recovery"], 0.7 * (1 - slow**2))
    flat = diffuser_car("track", diffuser__angle=0.0, diffuser__flare=1.0)
    assert figures_of(tmp_path, flat, ["diffuser.ideal_recovery"])["diffuser.ideal_recovery"] == 0
    assert outside(tmp_path, diffuser_car("track", diffuser__angle=np.radians(21.0)), "diffuser.area_ratio")


# --- ballast ---------------------------------------------------------------------------------------------------------


def ballasted(seed: int, place: str) -> Car:
    car = random_car(seed)
    numbers = {
        **car.numbers,
        "ballasting.mass": 14.0,
        "ballasting.front_share_aim": 0.47,
        "ballasting.total_aim": 1200.0,
    }
    return Car(numbers, car.masses, car.surfaces, {**car.choices, "ballasting.at": place})


@pytest.mark.parametrize("seed", SEEDS)
def test_a_piece_of_ballast_in_the_ledger(tmp_path, seed):
    """The same piece as a row of the ledger moves the centre of gravity by the shift that was said."""
    car = ballasted(seed, "0.31 0.2 0.03 m")
    names = [f"ballasting.{n}" for n in ("shift", "shift_right", "shift_up", "total", "front_share", "mass_for_total")]
    centre = ["mass.x", "mass.y", "mass.z"]
    before = figures_of(tmp_path, car, [*names, *centre])
    added = Car(car.numbers, (*car.masses, Mass(14.0, 0.31, 0.2, 0.03)), car.surfaces, car.choices)
    after = figures_of(tmp_path, added, [*centre, "mass.front_share", "mass.total"])
    for name, axis in zip(names, centre, strict=False):
        close(before[name], after[axis] - before[axis], rel=1e-7)
    close(before["ballasting.front_share"], after["mass.front_share"])
    close(before["ballasting.total"], after["mass.total"])
    close(before["ballasting.mass_for_total"], max(0.0, 1200.0 - car.total))


@pytest.mark.parametrize("seed", SEEDS)
def test_ballast_for_a_share(tmp_path, seed):
    """Put into the ledger, the mass at the place, and the mass given at the place found, reach the share."""
    car = ballasted(seed, "0.31 0 0.03 m")
    share = car.centre()[0] / car["dimensions.wheelbase"]
    car = car.but({"ballasting.front_share_aim": round(1 - share + 0.01, 6)})
    needed = figures_of(tmp_path, car, ["ballasting.mass_for_share", "ballasting.place_for_share"])
    pieces = [(needed["ballasting.mass_for_share"], 0.31), (14.0, needed["ballasting.place_for_share"])]
    for mass, x in pieces:
        assert mass > 0
        tried = Car(car.numbers, (*car.masses, Mass(mass, x, 0.0, 0.03)), car.surfaces)
        reached = 1 - tried.centre()[0] / car["dimensions.wheelbase"]
        close(reached, car["ballasting.front_share_aim"])
    away = Car(car.numbers, car.masses, car.surfaces, {**car.choices, "ballasting.at": "2.8 0 0.03 m"})
    assert outside(tmp_path, away, "ballasting.mass_for_share")


# --- weighing --------------------------------------------------------------------------------------------------------


def lifted_share(x: float, height: float, wheelbase: float, radii: tuple[float, float], angle: float) -> float:
    """Share on the front wheels of a body turned nose down: wheel centres and centre of gravity turned as points, each
    load straight below a wheel centre."""
    turn = np.array([[np.cos(angle), -np.sin(angle)], [np.sin(angle), np.cos(angle)]])
    front, rear, centre = (turn @ np.array(p) for p in ((0.0, radii[0]), (wheelbase, radii[1]), (x, height)))
    return float((rear[0] - centre[0]) / (rear[0] - front[0]))


def weighed(radii: tuple[float, float], degrees: float, x: float = 1.3, height: float = 0.42) -> tuple[Car, float]:
    """A car of 1000 kg with its scales level and lifted; its wheels, its angle and the lift that goes with it."""
    angle, wheelbase = np.radians(degrees), 2.6
    front = 1000 * (1 - x / wheelbase)
    numbers = {"dimensions.wheelbase": wheelbase, "dimensions.front_track": 1.6, "dimensions.rear_track": 1.5}
    numbers |= {"tyres.front.loaded_radius": radii[0], "tyres.rear.loaded_radius": radii[1]}
    split = {"front_left": 0.49, "front_right": 0.51, "rear_left": 0.505, "rear_right": 0.495}
    numbers |= {
        f"corners.{name}.mass": share * (front if "front" in name else 1000 - front) for name, share in split.items()
    }
    lifted = 1000 * lifted_share(x, height, wheelbase, radii, angle)
    rise = np.sin(angle) * wheelbase + np.cos(angle) * (radii[1] - radii[0]) - (radii[1] - radii[0])
    numbers |= {"weighing.front_lifted": lifted, "weighing.angle": float(angle), "weighing.lift": float(rise)}
    return Car({name: float(value) for name, value in numbers.items()}, (), ()), height


@pytest.mark.parametrize("radii", [(0.33, 0.33), (0.331, 0.356), (0.34, 0.31)])
@pytest.mark.parametrize("degrees", [8.0, 20.0, -12.0])
def test_height_from_a_turned_body(tmp_path, radii, degrees):
    """The body is turned as a set of points, and the height that it has comes back, by angle and by lift."""
    car, height = weighed(radii, degrees)
    names = ["weighing.height", "weighing.height_from_lift", "weighing.lift_angle"]
    figures = figures_of(tmp_path, car, names)
    close(figures["weighing.height"], height, rel=1e-8)
    close(figures["weighing.height_from_lift"], height, rel=1e-8)
    close(figures["weighing.lift_angle"], car["weighing.angle"], rel=1e-8)


def test_height_by_the_standard(tmp_path):
    """ISO 10392:2011, 6.5 (formula from memory): h = r + L dm/(m tan), 450 kg level, 479.11762 kg at 20 deg give 0.500 m.

    By construction: equal radii of 0.30 m, 1000 kg, 2.5 m.
    """
    corners = {"front_left": 225.0, "front_right": 225.0, "rear_left": 275.0, "rear_right": 275.0}
    numbers = {"dimensions.wheelbase": 2.5, "weighing.front_lifted": 479.11762, "weighing.angle": np.radians(20.0)}
    numbers |= {f"tyres.{end}.loaded_radius": 0.3 for end in ENDS}
    numbers |= {f"corners.{name}.mass": mass for name, mass in corners.items()}
    # Trap: tan = lift over wheelbase is only near; the lift of the wheel centres is the sine.
    numbers |= {"weighing.lift": 2.5 * np.sin(np.radians(20.0))}
    car = Car({name: float(value) for name, value in numbers.items()}, (), ())
    figures = figures_of(tmp_path, car, ["weighing.height", "weighing.height_from_lift"])
    assert figures["weighing.height"] == pytest.approx(0.5, abs=1e-6)
    assert figures["weighing.height_from_lift"] == pytest.approx(0.5, abs=1e-6)
    crude = 0.3 + 2.5 * 29.11762 / (1000 * np.sin(np.radians(20.0)))
    assert abs(crude - 0.5) > 0.01


def test_shares_from_four_scales(tmp_path):
    """Place of gravity by numpy over the four contacts; the cross weight is one diagonal."""
    car, _ = weighed((0.33, 0.34), 10.0)
    figures = figures_of(
        tmp_path, car, [f"weighing.{n}" for n in ("x", "y", "front_share", "left_share", "cross_share")]
    )
    places = {
        f"{end}_{side}": (0.0 if end == "front" else 2.6, (1 if side == "right" else -1) * track / 2)
        for end, track in (("front", 1.6), ("rear", 1.5))
        for side in ("left", "right")
    }
    loads = [car[f"corners.{name}.mass"] for name in places]
    x, y = np.average(list(places.values()), axis=0, weights=loads)
    close(figures["weighing.x"], x)
    close(figures["weighing.y"], y)
    close(figures["weighing.front_share"], 0.5)
    close(figures["weighing.left_share"], 0.5 * 0.49 + 0.5 * 0.505)
    close(figures["weighing.cross_share"], 0.5 * 0.51 + 0.5 * 0.505)


def test_published_wheel_loads(tmp_path):
    """2000 N and 1800 N a wheel over 2.34 m: 1.1084 m and 1.2316 m; R. N. Jazar 2008, ch. 2, example 40 (read)."""
    loads = {"front_left": 2000, "front_right": 2000, "rear_left": 1800, "rear_right": 1800}
    numbers = {f"corners.{name}.mass": load / GRAVITY for name, load in loads.items()}
    car = Car({**numbers, "dimensions.wheelbase": 2.34}, (), ())
    x = figures_of(tmp_path, car, ["weighing.x"])["weighing.x"]
    assert x == pytest.approx(1.1084, abs=5e-5)
    assert 2.34 - x == pytest.approx(1.2316, abs=5e-5)
