"""Diffuser, ballast and weighing against geometry, moments and turned bodies.

Derived throughout but where a check names its source.
"""

from __future__ import annotations

import numpy as np
import pytest
from physics_cars import GRAVITY, Car, Mass, figures_of, outside, random_car

SEEDS = (20, 21)
ENDS = ("front", "rear")


def close(value: float, due: float, rel: float = 1e-9) -> None:
    assert value == pytest.approx(due, rel=rel, abs=1e-12)


# --- diffuser ---------------------------------------------------------------------------------------------------------

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


# --- ballast ----------------------------------------------------------------------------------------------------------


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


# --- weighing ---------------------------------------------------------------------------------------------------------


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
