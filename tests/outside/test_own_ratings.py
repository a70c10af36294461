"""Frontal area, weighing uncertainty, two slots of ballast, tyre ratings: against other ways to the same figure.

Derived throughout. Areas by shapely; the uncertainty by differences of the height that the general lift formula gives
(ISO 10392 describes the method; from memory) and the law of JCGM 100:2008, 5.1.2; ballast by `numpy.linalg.solve`.
"""

from __future__ import annotations

import numpy as np
import pytest
from shapely.geometry import Polygon
from shapely.ops import unary_union
from small_files import CAR, RULES, check_files, findings, margin
from writing import as_float, values, write_design, write_figures

WING = [(0.1, 0.7), (0.75, 0.7), (0.75, 0.95), (0.1, 0.9)]
BODY = [(-0.9, 0.05), (0.9, 0.05), (0.8, 0.6), (0.3, 1.05), (-0.3, 1.05), (-0.8, 0.6)]


def corners(ring: list[tuple[float, float]]) -> str:
    return ", ".join(f"{across} {up}" for across, up in ring) + " m"


def test_frontal_area_of_outlines(tmp_path):
    write_design(
        tmp_path,
        outlines={"body": {"front": corners(BODY)}},
        aero_surfaces={
            "wing": {"outline": {"front": corners(WING), "mirror": "yes"}, "at": "3 0 0.8 m", "datum": "rear_axle"},
            "floor": {"outline": {"front": "none"}, "at": "1 0 0 m"},
        },
        frontal={"area_source": "outlines", "drag_coefficient": "0.4"},
    )
    units = {"frontal.area": "m^2", "frontal.outline_area": "m^2", "frontal.drag_area": "m^2"}
    write_figures(tmp_path, units)
    found = values(tmp_path, units)
    due = unary_union([Polygon(BODY), Polygon(WING), Polygon([(-a, b) for a, b in WING])]).area
    assert found["frontal.area"] == found["frontal.outline_area"] == pytest.approx(due, rel=1e-12)
    assert found["frontal.drag_area"] == pytest.approx(0.4 * due, rel=1e-12)


AREA = "rules:\n  it: {require: 'front_area(outlines, aero_surfaces) <= 3 m^2'}\n"


@pytest.mark.parametrize(
    ("design", "said"),
    [
        ("", "outlines"),
        ("outlines: {body: {side: '0 0, 1 0, 1 1 m'}}\naero_surfaces: none\n", "outlines.body.front"),
        ("outlines: {body: {front: '0 0, 1 0, 1 1 m'}}\n", "aero_surfaces"),
        ("outlines: {body: {front: '0 0, 1 0, 1 1 m'}}\naero_surfaces: {wing: {at: 0 0 0 m}}\n", "wing.outline.front"),
        ("outlines: {body: {front: '0 0, 1 0, 1 1 m', datum: ground}}\naero_surfaces: none\n", "from a datum"),
    ],
)
def test_a_missing_outline_is_never_nothing(design, said):
    found = findings(check_files({"car.design.yaml": CAR + design, "cup.ruleset.yaml": RULES + AREA}))["it"]
    assert found.verdict == "open"
    assert said in found.reason


@pytest.mark.parametrize("seed", range(5))
def test_uncertainty_of_the_height_from_a_lift(tmp_path, seed):
    random = np.random.default_rng(seed)
    wheelbase, front_radius, rear_radius = 2.7, 0.33, float(round(random.uniform(0.31, 0.36), 3))
    scales = np.round(random.uniform(180, 260, 4), 1)
    angle = float(round(random.uniform(0.15, 0.4), 3))
    lifted = float(scales[0] + scales[1] + round(random.uniform(10, 30), 1))
    spread = np.array([0.3, 0.3, 0.4, 0.4, 0.5, 0.002])

    def height(inputs: np.ndarray) -> float:
        *weights, lift, turn = inputs
        total, step = sum(weights), rear_radius - front_radius
        x = wheelbase * (weights[2] + weights[3]) / total
        moved = lift - weights[0] - weights[1]
        return front_radius + step * x / wheelbase + (wheelbase - step * np.tan(turn)) * moved / (total * np.tan(turn))

    at = np.array([*scales, lifted, angle])
    slopes = [(height(at + step) - height(at - step)) / (2 * np.abs(step).max()) for step in np.diag(at * 1e-6)]
    due = float(np.sqrt(sum((slope * width) ** 2 for slope, width in zip(slopes, spread, strict=True))))
    names = ("front_left", "front_right", "rear_left", "rear_right")
    write_design(
        tmp_path,
        dimensions={"wheelbase": f"{wheelbase} m"},
        tyres={"front": {"loaded_radius": f"{front_radius} m"}, "rear": {"loaded_radius": f"{rear_radius} m"}},
        corners={
            name: {"mass": f"{mass} kg ± {width} kg (k=1)"}
            for name, mass, width in zip(names, scales, spread[:4], strict=True)
        },
        weighing={
            "front_lifted": f"{lifted} kg ± {spread[4]} kg (k=1)",
            "angle": f"{angle} rad ± {spread[5]} rad (k=1)",
        },
    )
    units = {"weighing.height_uncertainty": "mm", "weighing.arm": "mm"}
    write_figures(tmp_path, units)
    found = values(tmp_path, units)
    assert found["weighing.height_uncertainty"] == pytest.approx(1000 * due, rel=1e-6)
    rise = (height(at + np.eye(6)[4]) - height(at)) * scales.sum()
    assert found["weighing.arm"] == pytest.approx(1000 * rise, rel=1e-9)


SLOTS = {
    "ballasting.first_slot_mass": "kg", "ballasting.second_slot_mass": "kg", "ballasting.slots_room": "kg",
    "ballasting.z_with_slots": "mm",
}  # fmt: skip


@pytest.mark.parametrize(("share", "total"), [(0.48, 900.0), (0.45, 880.0), (0.5, 860.0), (0.4, 900.0)])
def test_two_slots_meet_total_and_share(tmp_path, share, total):
    wheelbase, mass, x, z = 2.8, 850.0, 1.5, 0.31
    places, heights, capacity = (0.4, 2.2), (0.05, 0.08), 40.0
    aim = wheelbase * (1 - share)
    first, second = np.linalg.solve([[1, 1], list(places)], [total - mass, total * aim - mass * x])
    write_design(
        tmp_path,
        dimensions={"wheelbase": f"{wheelbase} m"},
        masses={"car": {"mass": f"{mass} kg", "at": f"{x} 0 {z} m"}},
        ballasting={
            "front_share_aim": f"{share} 1",
            "total_aim": f"{total} kg",
            "first_slot": {"at": f"{places[0]} 0 {heights[0]} m", "capacity": f"{capacity} kg"},
            "second_slot": {"at": f"{places[1] - wheelbase:.4g} 0 {heights[1]} m", "datum": "rear_axle", "capacity": f"{capacity} kg"},
        },
    )  # fmt: skip
    write_figures(tmp_path, SLOTS)
    found = values(tmp_path, SLOTS)
    assert found["ballasting.first_slot_mass"] == pytest.approx(first, abs=1e-6)
    assert found["ballasting.second_slot_mass"] == pytest.approx(second, abs=1e-6)
    assert found["ballasting.slots_room"] == pytest.approx(
        min(first, capacity - first, second, capacity - second), abs=1e-6
    )
    high = (mass * z + first * heights[0] + second * heights[1]) / total
    assert found["ballasting.z_with_slots"] == pytest.approx(1000 * high, rel=1e-9)


def test_tyres_against_their_ratings():
    tyres = "tyres:\n" + "".join(
        f"  {axle}: {{pressure: {bar} bar, least_pressure: 1.3 bar, greatest_pressure: 2 bar, camber: {camber} deg, greatest_camber: 4 deg}}\n"
        for axle, bar, camber in (("front", "1.4", "-3.5"), ("rear", "1.9", "4.5"))
    )
    names = [f"{axle}_{what}_room" for axle in ("front", "rear") for what in ("pressure", "camber")]
    rules = "rules:\n" + "".join(
        f"  {name}: {{require: tyre.{name} >= 0 {'bar' if 'pressure' in name else 'deg'}}}\n" for name in names
    )
    found = findings(check_files({"car.design.yaml": CAR + tyres, "cup.ruleset.yaml": RULES + rules}))
    assert [float(margin(found[name])) for name in names] == [0.1, 0.5, 0.1, -0.5]
    assert as_float(found["rear_camber_room"].margin) == -0.5
