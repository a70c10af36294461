"""Published bodies as designs: centroids, moments of inertia, and a car's place of gravity from its wheel loads.

Each check names its source and whether it was read or is from memory.
"""

from __future__ import annotations

import numpy as np
import pytest
from writing import as_float, findings, values, write_design, write_figures, write_ruleset

DIMENSIONS = {"wheelbase": "2860 mm"}
INERTIA = {f"mass.inertia_{axis}": "kg*m^2" for axis in ("xx", "yy", "zz")}


def place(x: float, y: float, z: float) -> str:
    return f"{x:.9f} {y:.9f} {z:.9f} m"


def centre_of(folder, points) -> dict[str, float]:
    """Centre of (mass, x, y, z) in m."""
    masses = {
        f"piece{index}": {"mass": f"{mass:.12f} kg", "at": place(*at)} for index, (mass, *at) in enumerate(points)
    }
    write_design(folder, dimensions=DIMENSIONS, masses=masses)
    units = {"mass.x": "m", "mass.y": "m", "mass.z": "m"}
    write_ruleset(
        folder,
        derived={name.replace(".", "_at_"): {"formula": name, "unit": "m", "meaning": "Centre"} for name in units},
        rules={name.replace(".", "_"): {"require": f"{name.replace('.', '_at_')} >= 0 m"} for name in units},
    )
    return values(folder, units)


def test_centroid_of_a_triangle(tmp_path):
    """A third of the height above the base: Beer and Johnston, Statics, figure 5.8A (from memory); h = 3 gives 1."""
    centre = centre_of(tmp_path, [(1, 0, 0, 0), (1, 2, 0, 0), (1, 0.5, 0, 3)])
    assert centre["mass.z"] == pytest.approx(1.0, abs=1e-12)
    assert centre["mass.x"] == pytest.approx(2.5 / 3, abs=1e-8)


def test_centroid_of_a_semicircle(tmp_path):
    """4r/(3 pi) = 0.424413 above the base for r = 1: the same figure 5.8A (from memory); 100 thin strips."""
    heights = (np.arange(100) + 0.5) / 100
    centre = centre_of(tmp_path, [(float(np.sqrt(1 - z * z)), 0.0, 0.0, float(z)) for z in heights])
    assert centre["mass.z"] == pytest.approx(0.424413, abs=5e-4)


def test_centroid_of_a_semicircular_arc(tmp_path):
    """2r/pi = 0.63662 for r = 1: the same figure 5.8A (from memory); 90 short pieces of wire."""
    angles = np.pi * (np.arange(90) + 0.5) / 90
    centre = centre_of(tmp_path, [(1.0, float(np.cos(a)), 0.0, float(np.sin(a))) for a in angles])
    assert centre["mass.z"] == pytest.approx(0.63662, abs=5e-5)
    assert centre["mass.x"] == pytest.approx(0, abs=1e-8)


def inertia_of(folder, pieces) -> dict[str, float]:
    """Moments of inertia through the common centre of pieces (mass, place, own inertias)."""
    masses = {
        f"piece{index}": {
            "mass": f"{mass} kg",
            "at": place(*at),
            "inertia": {axis: f"{value} kg*m^2" for axis, value in zip(("xx", "yy", "zz"), own, strict=True)},
        }
        for index, (mass, at, own) in enumerate(pieces)
    }
    write_design(folder, dimensions=DIMENSIONS, masses=masses)
    write_figures(folder, INERTIA)
    return values(folder, INERTIA)


def test_rod_about_its_end(tmp_path):
    """m L^2/12 about the middle, m L^2/3 about the end (standard table, from memory): 3 kg and 2 m give 1 and 4.

    Two rods end to end lie with their common centre at the end of each, so the pair shows twice the end value.
    """
    rod = (0.0, 1.0, 1.0)
    alone = inertia_of(tmp_path, [(3, (0.5, 0, 0.2), rod)])
    assert alone["mass.inertia_zz"] == pytest.approx(1, abs=1e-12)
    pair = inertia_of(tmp_path, [(3, (-1, 0, 0.2), rod), (3, (1, 0, 0.2), rod)])
    assert pair["mass.inertia_zz"] == pytest.approx(2 * 4, abs=1e-12)
    assert pair["mass.inertia_xx"] == pytest.approx(0, abs=1e-12)


def test_disc_off_its_axis(tmp_path):
    """m r^2/2 on the axis, with m d^2 beside it (from memory): 4 kg, 0.5 m, offset 1.5 m give 9.5."""
    disc = (0.25, 0.25, 0.5)
    pair = inertia_of(tmp_path, [(4, (0, -1.5, 0.3), disc), (4, (0, 1.5, 0.3), disc)])
    assert pair["mass.inertia_zz"] == pytest.approx(2 * 9.5, abs=1e-12)


def test_cuboid_from_eight_parts(tmp_path):
    """m (b^2 + c^2)/12 and so on (from memory): 12 kg, 1 by 2 by 3 m give 13, 10 and 5; eight parts make the whole."""
    whole = (13.0, 10.0, 5.0)
    own = tuple(value / 32 for value in whole)
    corners = [(x, y, z) for x in (-0.25, 0.25) for y in (-0.5, 0.5) for z in (-0.75, 0.75)]
    found = inertia_of(tmp_path, [(1.5, corner, own) for corner in corners])
    assert tuple(found[f"mass.inertia_{axis}"] for axis in ("xx", "yy", "zz")) == pytest.approx(whole, abs=1e-12)


def test_a_mirrored_part_with_its_own_inertia(tmp_path):
    """Derived: one mirrored row with quantity 2 is four bodies."""
    row = {"mass": "1.5 kg", "at": place(0.3, 0.4, 0.5), "quantity": "2", "mirror": "yes"}
    own = {"xx": "0.1 kg*m^2", "yy": "0.2 kg*m^2", "zz": "0.3 kg*m^2"}
    write_design(tmp_path, dimensions=DIMENSIONS, masses={"pod": {**row, "inertia": own}})
    write_figures(tmp_path, INERTIA)
    found = values(tmp_path, INERTIA)
    assert found["mass.inertia_xx"] == pytest.approx(4 * (0.1 + 1.5 * 0.4**2), abs=1e-12)
    assert found["mass.inertia_yy"] == pytest.approx(4 * 0.2, abs=1e-12)
    assert found["mass.inertia_zz"] == pytest.approx(4 * (0.3 + 1.5 * 0.4**2), abs=1e-12)


def test_place_from_wheel_loads(tmp_path):
    """R. N. Jazar, Vehicle Dynamics (Springer 2008), example 40 (read): 2.34 m wheelbase, 2000 N on each front wheel and
    1800 N on each rear wheel give a1 = 1.1084 m to the front axle and a2 = 1.2316 m to the rear axle."""
    wheels = {
        "front_wheels": {"mass": "2000 kg", "at": "0 800 300 mm", "mirror": "yes"},
        "rear_wheels": {"mass": "1800 kg", "datum": "rear_axle", "at": "0 780 300 mm", "mirror": "yes"},
    }
    write_design(tmp_path, dimensions={**DIMENSIONS, "wheelbase": "2.34 m"}, masses=wheels)
    write_ruleset(
        tmp_path,
        derived={
            "to_front_axle": {"formula": "mass.x", "unit": "m", "meaning": "Distance"},
            "to_rear_axle": {"formula": "dimensions.wheelbase - mass.x", "unit": "m", "meaning": "Distance"},
        },
        rules={
            "front": {"require": "to_front_axle >= 0 m"},
            "rear": {"require": "to_rear_axle >= 0 m"},
            "front_mass": {"require": "mass.front >= 4000 kg"},
        },
    )
    found = findings(tmp_path)
    assert as_float(found["front"].value) == pytest.approx(1.1084, abs=5e-5)
    assert as_float(found["rear"].value) == pytest.approx(1.2316, abs=5e-5)
    assert found["front_mass"].margin.exact == "0"
