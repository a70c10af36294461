"""Aero, wheel loads and ride heights against forces put at their places and solved by numpy.

Derived throughout but where a check names its source. Random cars; each test computes its figures a second way, from
the balance of forces, of moments and of springs.
"""

from __future__ import annotations

from functools import cache

import numpy as np
import pytest
from physics_cars import GRAVITY, Car, Mass, Surface, figures_of, outside, random_car, unknown
from writing import as_float, findings, write_figures

SEEDS = (0, 1, 2)
FIGURES = (
    "air.density", "air.relative_speed", "mass.x", "mass.y", "mass.height", "mass.front_share", "mass.sprung",
    *(
        f"aero.{name}"
        for name in (
            "dynamic_pressure", "downforce_area", "drag_area", "drag_height", "front_share", "centre_of_pressure",
            "downforce", "drag", "front_downforce", "rear_downforce", "downforce_to_drag", "drag_coefficient",
            "downforce_coefficient", "coasting_front_share", "coasting_centre_of_pressure",
        )
    ),
    *(
        f"load_transfer.{name}"
        for name in (
            "weight", "front_axle", "rear_axle", "lateral_moment", "lateral_both_axles", "roll_angle", "front_lateral",
            "rear_lateral", "front_left", "front_right", "rear_left", "rear_right", "sprung_height", "sprung_x",
        )
    ),
    "platform.loaded_front_ride_height", "platform.loaded_rear_ride_height",
    "balance.pressure_behind_gravity",
)  # fmt: skip
WHEELS = ("front_left", "front_right", "rear_left", "rear_right")


@pytest.fixture(scope="module")
def known(tmp_path_factory: pytest.TempPathFactory):
    """The figures of a random car, computed by the program once."""

    @cache
    def values(seed: int) -> dict[str, float]:
        return figures_of(tmp_path_factory.mktemp("car"), random_car(seed), FIGURES)

    return values


def close(value: float, due: float) -> None:
    assert value == pytest.approx(due, rel=1e-9, abs=1e-9)


# --- air --------------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("seed", SEEDS)
def test_axle_loads_balance_forces_and_moments(known, seed):
    """Sums of forces and moments about the foot of the front axle; drag counts with its height, once."""
    car, figures = random_car(seed), known(seed)
    speed = car["vehicle.speed"] + car["air.wind"]
    front, rear = car.axle_loads(figures["air.density"], speed, car["vehicle.deceleration"])
    close(figures["load_transfer.front_axle"], front)
    close(figures["load_transfer.rear_axle"], rear)


@pytest.mark.parametrize("seed", SEEDS)
def test_axle_downforce_is_what_steady_air_adds(known, seed):
    """The loads at steady speed less those at rest."""
    car, figures = random_car(seed), known(seed)
    speed = car["vehicle.speed"] + car["air.wind"]
    moving, standing = (car.axle_loads(figures["air.density"], v, 0.0) for v in (speed, 0.0))
    added = np.subtract(moving, standing)
    close(figures["aero.front_downforce"], added[0])
    close(figures["aero.rear_downforce"], added[1])
    close(figures["aero.front_share"], added[0] / sum(added))
    close(figures["aero.centre_of_pressure"], car["dimensions.wheelbase"] * added[1] / sum(added))
    close(figures["aero.downforce"], sum(added))


@pytest.mark.parametrize("seed", SEEDS)
def test_coasting_is_drag_against_inertia(known, seed):
    """While the car coasts drag alone slows it: the deceleration is drag over mass, and the share moves forward."""
    car, figures = random_car(seed), known(seed)
    density, speed = figures["air.density"], car["vehicle.speed"] + car["air.wind"]
    drag = sum(force for _, _, force in car.air_forces(density, speed))
    coasting, standing = car.axle_loads(density, speed, drag / car.total), car.axle_loads(density, 0.0, 0.0)
    added = np.subtract(coasting, standing)
    close(figures["aero.coasting_front_share"], added[0] / sum(added))
    close(figures["aero.coasting_centre_of_pressure"], car["dimensions.wheelbase"] * added[1] / sum(added))
    assert figures["aero.coasting_front_share"] > figures["aero.front_share"] + 0.01
    close(figures["aero.drag"], drag)


@pytest.mark.parametrize("seed", SEEDS)
def test_sums_of_the_surfaces(known, seed):
    """Areas and the height of drag by numpy; coefficients are the same totals over the reference area."""
    car, figures = random_car(seed), known(seed)
    down, drag = (np.array([getattr(s, name) for s in car.surfaces]) for name in ("downforce_area", "drag_area"))
    heights = [car.ground(s.x, s.z) for s in car.surfaces]
    close(figures["aero.drag_height"], np.average(heights, weights=drag))
    close(figures["aero.downforce_to_drag"], down.sum() / drag.sum())
    close(figures["aero.drag_coefficient"] * car["aero.reference_area"], drag.sum())
    close(figures["aero.downforce_coefficient"] * car["aero.reference_area"], down.sum())
    close(figures["aero.dynamic_pressure"] * drag.sum(), figures["aero.drag"])


@pytest.mark.parametrize("seed", SEEDS)
def test_centre_of_pressure_against_centre_of_gravity(known, seed):
    """Behind by as much of the wheelbase as the front share of downforce is below that of mass."""
    figures = known(seed)
    close(figures["balance.pressure_behind_gravity"], figures["mass.front_share"] - figures["aero.front_share"])


def test_one_drag_total_whatever_the_reference_area(tmp_path):
    """Trap: a coefficient on an area beside the sum of surfaces must not count twice."""
    car = random_car(3)
    names = ["aero.drag", "aero.front_share", "load_transfer.front_axle", "aero.drag_coefficient"]
    small, large = (figures_of(tmp_path, car.but({"aero.reference_area": area}), names) for area in (1.0, 2.0))
    assert small["aero.drag_coefficient"] == pytest.approx(2 * large["aero.drag_coefficient"])
    assert [small[name] for name in names[:3]] == [large[name] for name in names[:3]]


def test_wind_is_not_the_speed_of_the_car(tmp_path):
    """Trap: at 60 m/s with 6 m/s of wind ahead the air meets the car at 66 m/s: 21 % more drag than in still air."""
    car = random_car(3)
    drags = [
        figures_of(tmp_path, car.but({"vehicle.speed": 60.0, "air.wind": wind}), ["aero.drag"])["aero.drag"]
        for wind in (0.0, 6.0)
    ]
    assert drags[1] / drags[0] == pytest.approx(1.21, rel=1e-12)


def test_shares_exist_at_rest_and_not_without_downforce(tmp_path):
    """Trap: a share of forces is 0/0 at rest; one of areas is not. Without downforce there is none, and it says so."""
    car = random_car(3)
    still = figures_of(tmp_path, car.but({"vehicle.speed": 0.0, "air.wind": 0.0}), ["aero.front_share", "aero.drag"])
    moving = figures_of(tmp_path, car, ["aero.front_share"])
    assert still["aero.drag"] == 0
    assert still["aero.front_share"] == moving["aero.front_share"]
    flat = Car(car.numbers, car.masses, (Surface(0.3, 0.2, 0.5, 0.1), Surface(-0.3, 0.2, 2.0, 0.3)))
    assert unknown(tmp_path, flat, "aero.front_share")
    faint = Car(car.numbers, car.masses, (Surface(0.3, 0.2, 0.5, 0.1), Surface(-0.27, 0.2, 2.0, 0.3)))
    assert outside(tmp_path, faint, "aero.front_share")
    assert not outside(tmp_path, car, "aero.front_share")


def test_a_wing_on_the_rear_axle_moves_with_the_wheelbase(tmp_path):
    """Trap: a rear part at a fixed x would change its arm about the rear axle when the wheelbase grows."""
    car = random_car(3)
    car.write(tmp_path)
    path = tmp_path / "car.design.yaml"
    wing = "{kind: wing, datum: rear_axle, at: 500 0 900 mm, downforce_area: 1 m^2, drag_area: 0 m^2}"
    text = path.read_text(encoding="utf-8")
    path.write_text(text[: text.index("aero_surfaces:")] + f"aero_surfaces: {{wing: {wing}}}\n", encoding="utf-8")
    write_figures(tmp_path, {"aero.front_downforce_area": "m^2"})
    for wheelbase in (2.7, 3.0):
        area = findings(tmp_path, {"dimensions.wheelbase": f"{wheelbase} m"})["aero_front_downforce_area"].value
        assert as_float(area) == pytest.approx(-0.5 / wheelbase, rel=1e-12)


# --- wheels -----------------------------------------------------------------------------------------------------------


def rolled(car: Car, acceleration: float) -> tuple[float, float, float]:
    """Roll angle and the moments that front and rear axle carry: the body on its roll axis, turned step by step.

    The body is turned until springs and moments agree; the force at each roll centre splits the side force as a beam
    on two supports does.
    """
    wheelbase = car["dimensions.wheelbase"]
    body = [p for p in car.masses if p.unsprung == "none"]
    mass = sum(p.mass for p in body)
    x = sum(p.mass * p.x for p in body) / mass
    h = sum(p.mass * car.ground(p.x, p.z) for p in body) / mass
    centres = np.array([car[f"suspension.{end}.roll_centre_height"] for end in ("front", "rear")])
    stiffness = np.array([car[f"suspension.{end}.roll_stiffness"] for end in ("front", "rear")])
    supports = np.linalg.solve([[1, 1], [0, wheelbase]], [mass * acceleration, mass * acceleration * x])
    axis = np.interp(x, [0, wheelbase], centres)
    angle = 0.0
    for _ in range(200):
        angle = mass * (acceleration * (h - axis) + GRAVITY * (h - axis) * angle) / stiffness.sum()
    moments = stiffness * angle + supports * centres
    for index, end in enumerate(("front", "rear")):
        moments[index] += sum(p.mass * acceleration * car.ground(p.x, p.z) for p in car.masses if p.unsprung == end)
    return angle, moments[0], moments[1]


@pytest.mark.parametrize("seed", SEEDS)
def test_lateral_transfer_of_each_axle(known, seed):
    """The body on its roll axis with springs, roll centres and unsprung mass, solved step by step."""
    car, figures = random_car(seed), known(seed)
    angle, front, rear = rolled(car, car["vehicle.lateral_acceleration"])
    close(figures["load_transfer.roll_angle"], angle)
    close(figures["load_transfer.front_lateral"], front / car["dimensions.front_track"])
    close(figures["load_transfer.rear_lateral"], rear / car["dimensions.rear_track"])


@pytest.mark.parametrize("seed", SEEDS)
def test_both_axles_together_are_a_rigid_car_that_leans(known, seed):
    """Statics as the oracle: both moments are m a h and the moment of the sprung weight that has moved outward."""
    car, figures = random_car(seed), known(seed)
    _, _, h = car.centre()
    rigid = car.total * car["vehicle.lateral_acceleration"] * h
    close(figures["load_transfer.lateral_moment"], rigid)
    carried = sum(figures[f"load_transfer.{e}_lateral"] * car[f"dimensions.{e}_track"] for e in ("front", "rear"))
    body = [p for p in car.masses if p.unsprung == "none"]
    x, z = figures["load_transfer.sprung_x"], figures["load_transfer.sprung_height"]
    close(x, np.average([p.x for p in body], weights=[p.mass for p in body]))
    close(z, np.average([car.ground(p.x, p.z) for p in body], weights=[p.mass for p in body]))
    centres = [car[f"suspension.{end}.roll_centre_height"] for end in ("front", "rear")]
    out = (z - np.interp(x, [0, car["dimensions.wheelbase"]], centres)) * figures["load_transfer.roll_angle"]
    assert carried == pytest.approx(rigid + sum(p.mass for p in body) * GRAVITY * out, rel=1e-9)


@pytest.mark.parametrize("seed", SEEDS)
def test_four_wheels_carry_the_car(known, seed):
    """Forces and moments about both axes: weight, downforce, the offset of the mass and the moment of cornering."""
    car, figures = random_car(seed), known(seed)
    loads = {name: figures[f"load_transfer.{name}"] for name in WHEELS}
    assert sum(loads.values()) == pytest.approx(figures["load_transfer.weight"] + figures["aero.downforce"], rel=1e-9)
    for end in ("front", "rear"):
        close(loads[f"{end}_left"] + loads[f"{end}_right"], figures[f"load_transfer.{end}_axle"])
    turning = sum(
        (loads[f"{end}_left"] - loads[f"{end}_right"]) * car[f"dimensions.{end}_track"] / 2 for end in ("front", "rear")
    )
    cornering = sum(figures[f"load_transfer.{e}_lateral"] * car[f"dimensions.{e}_track"] for e in ("front", "rear"))
    assert turning == pytest.approx(cornering - car.total * GRAVITY * car.centre()[1], rel=1e-9)


def test_a_mirrored_car_in_a_mirrored_corner(tmp_path):
    """What the left wheels carry in a corner to the right, the right wheels of the mirrored car carry to the left."""
    car = random_car(4)
    turned = Car(
        {**car.numbers, "vehicle.lateral_acceleration": -car["vehicle.lateral_acceleration"]},
        tuple(Mass(p.mass, p.x, -p.y, p.z, p.unsprung) for p in car.masses), car.surfaces, car.choices,
    )  # fmt: skip
    names = [f"load_transfer.{wheel}" for wheel in WHEELS]
    one, other = figures_of(tmp_path, car, names), figures_of(tmp_path, turned, names)
    assert abs(one["load_transfer.front_left"] - one["load_transfer.front_right"]) > 100
    for end in ("front", "rear"):
        close(one[f"load_transfer.{end}_left"], other[f"load_transfer.{end}_right"])
        close(one[f"load_transfer.{end}_right"], other[f"load_transfer.{end}_left"])


def test_transfer_goes_with_height_and_with_acceleration(tmp_path):
    """Scaling: a centre of gravity on the ground moves no load; twice as high and twice as hard move four times."""
    low = Car(random_car(5).numbers, (Mass(900.0, 1.4, 0.0, 0.0),), ())
    low = low.but({"dimensions.front_ride_height": 0.0, "dimensions.rear_ride_height": 0.0})
    names = ["load_transfer.longitudinal", "load_transfer.lateral_moment"]
    moved = []
    for z, factor in ((0.0, 1.0), (0.2, 1.0), (0.4, 1.0), (0.4, 2.0)):
        car = Car(low.numbers, (Mass(900.0, 1.4, 0.0, z),), ())
        car = car.but({"vehicle.deceleration": 7.0 * factor, "vehicle.lateral_acceleration": 9.0 * factor})
        moved.append(figures_of(tmp_path, car, names))
    for name in names:
        assert moved[0][name] == 0
        assert [moved[i][name] / moved[1][name] for i in (2, 3)] == pytest.approx([2, 4], rel=1e-12)


def test_fifty_millimetres_forgotten(tmp_path):
    """Trap: a centre of gravity 310 mm above a plane that stands 50 mm above ground: 360 mm count, not 310."""
    numbers = {**random_car(5).numbers, "vehicle.deceleration": 10.0, "dimensions.wheelbase": 2.5}
    numbers |= {"dimensions.front_ride_height": 0.05, "dimensions.rear_ride_height": 0.05}
    car = Car(numbers, (Mass(1000.0, 1.2, 0.0, 0.31),), ())
    moved = figures_of(tmp_path, car, ["load_transfer.longitudinal"])["load_transfer.longitudinal"]
    assert moved == pytest.approx(1000 * 10 * 0.36 / 2.5, rel=1e-12)
    assert 1 - 1000 * 10 * 0.31 / 2.5 / moved == pytest.approx(0.14, abs=0.002)


def test_by_axle_needs_roll_stiffness(tmp_path):
    """Trap: a rigid body does not say which axle carries the corner; the sum over both is there all the same.

    The sum: m a h/t = 2941.995 N for 1000 kg, 1.2 gn, 0.40 m and 1.60 m (derived closed form).
    """
    numbers = {k: v for k, v in random_car(5).numbers.items() if "roll_stiffness" not in k}
    numbers |= {"dimensions.front_track": 1.6, "dimensions.rear_track": 1.6, "dimensions.front_ride_height": 0.0}
    numbers |= {"dimensions.rear_ride_height": 0.0, "vehicle.lateral_acceleration": 1.2 * GRAVITY}
    car = Car(numbers, (Mass(1000.0, 1.3, 0.0, 0.4),), ())
    together = figures_of(tmp_path, car, ["load_transfer.lateral_both_axles"])["load_transfer.lateral_both_axles"]
    assert together == pytest.approx(2941.995, abs=1e-3)
    assert unknown(tmp_path, car, "load_transfer.front_lateral")
    assert unknown(tmp_path, car, "load_transfer.rear_left")
    apart = car.but({"dimensions.rear_track": 1.5})
    assert outside(tmp_path, apart, "load_transfer.lateral_both_axles")


# --- ride heights -----------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("seed", SEEDS)
def test_ride_heights_under_load(known, seed):
    """Springs and tyres are let down step by step, with the loads of the heights just reached, until nothing moves."""
    car, figures = random_car(seed), known(seed)
    density, speed = figures["air.density"], car["vehicle.speed"] + car["air.wind"]
    rest = (car["dimensions.front_ride_height"], car["dimensions.rear_ride_height"])
    standing = car.axle_loads(density, 0.0, 0.0)
    heights = rest
    for _ in range(100):
        loads = car.axle_loads(density, speed, car["vehicle.deceleration"], heights)
        sunk = []
        for index, end in enumerate(("front", "rear")):
            more = loads[index] - standing[index]
            spring, tyre = car[f"suspension.{end}.heave_rate"], 2 * car[f"tyres.{end}.stiffness"]
            sunk.append(rest[index] + car[f"tyres.{end}.growth"] - more / spring - more / tyre)
        heights = (sunk[0], sunk[1])
    assert abs(heights[0] - rest[0]) > 0.005
    close(figures["platform.loaded_front_ride_height"], heights[0])
    close(figures["platform.loaded_rear_ride_height"], heights[1])


def test_a_car_at_rest_stands_at_its_heights(tmp_path):
    car = random_car(6).but({"vehicle.speed": 0.0, "air.wind": 0.0, "vehicle.deceleration": 0.0})
    car = car.but({"tyres.front.growth": 0.0, "tyres.rear.growth": 0.0})
    names = [f"platform.loaded_{end}_ride_height" for end in ("front", "rear")]
    found = figures_of(tmp_path, car, names)
    for end, name in zip(("front", "rear"), names, strict=True):
        close(found[name], car[f"dimensions.{end}_ride_height"])
