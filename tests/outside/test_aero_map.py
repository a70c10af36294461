"""Aero maps, a coefficient on the frontal area, tank tables and driver ballast against forces put at their places.

Derived throughout: maps are read between their rows by `scipy.interpolate.RegularGridInterpolator` (scipy, its own
documentation: "linear" is multilinear), axle loads come out of a balance of forces and moments that is solved by
`numpy.linalg.solve`. No published figure is used.
"""

from __future__ import annotations

from itertools import product

import numpy as np
import pytest
from scipy.interpolate import RegularGridInterpolator
from small_files import CAR, RULES, check_files, findings, margin
from writing import values, write_design, write_figures

HEIGHTS = (np.array([20.0, 35.0, 60.0]), np.array([40.0, 55.0, 90.0]), np.array([-2.0, 0.0, 3.0]))
OVER = ["dimensions.front_ride_height", "dimensions.rear_ride_height", "vehicle.yaw"]
FIGURES = {
    "aero.downforce_area": "m^2",
    "aero.rear_downforce_area": "m^2",
    "aero.front_downforce_area": "m^2",
    "aero.drag_area": "m^2",
    "aero.front_share": "%",
    "aero.centre_of_pressure": "mm",
    "aero.level_moment_area": "m^3",
}


def axle_areas(forces: list[tuple[float, float, float, float]], wheelbase: float) -> np.ndarray:
    """Front and rear load over dynamic pressure that hold these forces: down, x, drag, height above ground."""
    matrix = np.array([[1.0, 1.0], [0.0, wheelbase]])
    down = sum(force[0] for force in forces)
    moment = sum(down_ * x + drag * height for down_, x, drag, height in forces)
    return np.linalg.solve(matrix, np.array([down, moment]))


def rows(random: np.random.Generator, least: float, most: float) -> tuple[np.ndarray, list[list[str]]]:
    table = np.round(random.uniform(least, most, (3, 3, 3)), 4)
    listed = [
        [f"{a} mm", f"{b} mm", f"{c} deg", f"{table[i, j, k]} m^2"]
        for (i, a), (j, b), (k, c) in product(*(enumerate(axis) for axis in HEIGHTS))
    ]
    return table, listed


def at(table: np.ndarray, place: tuple[float, float, float]) -> float:
    return float(RegularGridInterpolator(HEIGHTS, table, method="linear")([place])[0])


@pytest.mark.parametrize("seed", range(6))
@pytest.mark.parametrize("drag_moment", ["included", "apart"])
def test_a_map_and_surfaces_on_top_of_it(tmp_path, seed, drag_moment):
    random = np.random.default_rng(seed)
    front, front_rows = rows(random, 0.8, 1.6)
    rear, rear_rows = rows(random, 1.0, 1.9)
    drag, drag_rows = rows(random, 0.5, 0.9)
    place = (round(random.uniform(20, 60), 2), round(random.uniform(40, 90), 2), round(random.uniform(-2, 3), 2))
    wheelbase, correction, height = 2.85, 0.96, 0.41
    wing = (round(random.uniform(-0.1, 0.2), 3), 3.1, round(random.uniform(0.0, 0.05), 3), 0.88)
    stated = {name: {"over": OVER, "rows": listed} for name, listed in (
        ("front_downforce_area", front_rows), ("rear_downforce_area", rear_rows), ("drag_area", drag_rows),
    )}  # fmt: skip
    extra = {} if drag_moment == "included" else {"drag_height": f"{height} m"}
    surfaces = {
        "wing": {"at": f"{wing[1]} 0 {wing[3]} m", "downforce_area": f"{wing[0]} m^2", "drag_area": f"{wing[2]} m^2", "in_map": "no"},
        "floor": {"at": "1.2 0 0 m", "downforce_area": "2 m^2", "drag_area": "0.2 m^2", "in_map": "yes"},
    }  # fmt: skip
    write_design(
        tmp_path,
        dimensions={
            "wheelbase": f"{wheelbase} m",
            "front_ride_height": f"{place[0]} mm",
            "rear_ride_height": f"{place[1]} mm",
        },
        vehicle={"yaw": f"{place[2]} deg"},
        aero={"source": "map", "map": {**stated, **extra, "drag_moment": drag_moment, "correction": correction}},
        aero_surfaces=surfaces,
    )
    write_figures(tmp_path, FIGURES)
    found = values(tmp_path, FIGURES)
    ground = wing[3] + (place[0] + (place[1] - place[0]) * wing[1] / wheelbase) / 1000
    axles = [correction * at(table, place) for table in (front, rear)]
    whole_drag = correction * at(drag, place)
    # Wheels weighed in a tunnel feel the moment of drag; a map without it leaves that moment to be added, once.
    arm = 0.0 if drag_moment == "included" else height
    forces = [(axles[0], 0.0, 0.0, 0.0), (axles[1], wheelbase, whole_drag, arm), (wing[0], wing[1], wing[2], ground)]
    by_front, by_rear = axle_areas(forces, wheelbase)
    assert found["aero.front_downforce_area"] == pytest.approx(by_front, rel=1e-9)
    assert found["aero.rear_downforce_area"] == pytest.approx(by_rear, rel=1e-9)
    assert found["aero.downforce_area"] == pytest.approx(by_front + by_rear, rel=1e-12)
    assert found["aero.drag_area"] == pytest.approx(whole_drag + wing[2], rel=1e-12)
    assert found["aero.front_share"] == pytest.approx(100 * by_front / (by_front + by_rear), rel=1e-9)
    level = wheelbase * axles[1] + whole_drag * arm + wing[0] * wing[1] + wing[2] * wing[3]
    assert found["aero.level_moment_area"] == pytest.approx(level, rel=1e-9)
    assert found["aero.centre_of_pressure"] == pytest.approx(
        1000 * wheelbase * by_rear / (by_front + by_rear), rel=1e-9
    )


def test_one_drag_total_from_a_coefficient(tmp_path):
    """The drag of surfaces is not counted beside it, and its moment is that about the ground at its own height."""
    surfaces = {"wing": {"at": "3 0 0.9 m", "downforce_area": "1.5 m^2", "drag_area": "0.4 m^2"}}
    write_design(
        tmp_path,
        dimensions={"wheelbase": "3 m", "front_ride_height": "0 mm", "rear_ride_height": "0 mm"},
        aero={"reference_area": "1.6 m^2", "drag_source": "coefficient"},
        frontal={"drag_coefficient": "0.5", "drag_height": "0.45 m"},
        aero_surfaces=surfaces,
    )
    write_figures(tmp_path, FIGURES)
    found = values(tmp_path, FIGURES)
    front, rear = axle_areas([(1.5, 3.0, 0.0, 0.0), (0.0, 0.0, 0.8, 0.45)], 3.0)
    assert found["aero.drag_area"] == pytest.approx(0.8)
    assert found["aero.rear_downforce_area"] == pytest.approx(rear)
    assert found["aero.front_downforce_area"] == pytest.approx(front)


RULE = "rules:\n  it: {require: aero.drag_area <= 1 m^2}\n"
MAP = "map: {drag_area: {over: [vehicle.yaw, vehicle.roll], rows: [[0 deg, 0 deg, 0.5 m^2], [1 deg, 0 deg, 0.5 m^2], [0 deg, 1 deg, 0.5 m^2], [1 deg, 1 deg, 0.5 m^2]]}}"
WING = "aero_surfaces: {wing: {at: 3 0 1 m, downforce_area: 1 m^2, drag_area: 0.3 m^2%s}}\n"
STILL = "vehicle: {yaw: 0 deg, roll: 0 deg}\n"


@pytest.mark.parametrize(
    ("design", "verdict", "said"),
    [
        (WING % "", "complies", ""),
        (f"aero: {{{MAP}}}\n" + STILL + WING % "", "open", "aero.source"),
        (f"aero: {{source: map, {MAP}}}\n" + STILL + WING % "", "open", "aero_surfaces.wing.in_map"),
        (f"aero: {{source: map, {MAP}}}\n" + STILL + WING % ", in_map: yes", "complies", ""),
        (f"aero: {{source: map, {MAP}}}\n" + WING % ", in_map: yes", "open", "vehicle.yaw"),
        ("aero: {source: map}\n" + WING % ", in_map: yes", "open", "aero.map.drag_area"),
        (f"aero: {{source: surfaces, {MAP}}}\n" + WING % "", "complies", ""),
        ("frontal: {drag_coefficient: 0.5}\n" + WING % "", "open", "aero.drag_source"),
    ],
)
def test_what_is_counted_must_be_said(design, verdict, said):
    report = check_files({"car.design.yaml": CAR + design, "cup.ruleset.yaml": RULES + RULE})
    found = findings(report)["it"]
    assert found.verdict == verdict
    assert said in found.reason


TANK = """\
powertrain: {tank_volume: 80 L}
tank:
  volume: %s
  density: 0.75 kg/L
  x: {rows: [[0 L, 0 mm], [20 L, 10 mm], [80 L, -50 mm]]}
  y: {rows: [[0 L, 0 mm], [80 L, 16 mm]]}
  z: {rows: [[0 L, 5 mm], [80 L, 165 mm]]}
masses:
  fuel: {taken_from: tank, at: 1600 0 200 mm}
  car: {mass: 570 kg, at: 1400 -8 300 mm}
"""


def test_fuel_from_the_tank():
    """40 L are 30 kg, at 1600 - 10, 8 and 200 + 85 mm; centres of gravity by hand."""
    rules = "rules:\n  mass: {require: mass.total <= 600 kg}\n  x: {require: mass.x <= 1500 mm}\n  y: {require: mass.y <= 10 mm}\n  z: {require: mass.z <= 400 mm}\n  room: {require: tank.room >= 10 L}\n"
    report = check_files({"car.design.yaml": CAR + TANK % "40 L", "cup.ruleset.yaml": RULES + rules})
    found = {name: margin(finding) for name, finding in findings(report).items()}
    assert (found["mass"], found["room"]) == (0, 30)
    assert found["x"] * 600 == 1500 * 600 - (570 * 1400 + 30 * 1590)
    assert found["y"] * 600 == 10 * 600 - (570 * -8 + 30 * 8)
    assert found["z"] * 600 == 400 * 600 - (570 * 300 + 30 * 285)
    report = check_files({"car.design.yaml": CAR + TANK % "81 L", "cup.ruleset.yaml": RULES + rules})
    assert findings(report)["x"].reason == "missing: tank.x beyond 80 L, where its rows end"


@pytest.mark.parametrize(("driver", "total"), [("66 kg", 880), ("80 kg", 880), ("95 kg", 895)])
def test_driver_ballast(driver, total):
    design = f"driver: {{mass: {driver}, reference_mass: 80 kg}}\nmasses:\n  car: {{mass: 800 kg, at: 1400 0 300 mm}}\n  driver: {{mass: {driver}, at: 1200 0 350 mm}}\n  lead: {{taken_from: driver_ballast, at: 1300 0 100 mm}}\n"
    rules = "rules:\n  mass: {require: mass.total <= 1000 kg}\n  seat: {require: driver.ballasted_mass <= 100 kg}\n"
    report = check_files({"car.design.yaml": CAR + design, "cup.ruleset.yaml": RULES + rules})
    assert margin(findings(report)["mass"]) == 1000 - total
    assert margin(findings(report)["seat"]) == 100 - (total - 800)
