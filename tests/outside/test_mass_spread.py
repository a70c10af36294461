"""Spread of the centre of gravity and own inertias of ledger rows, against computations that share no formula.

The law of propagation (JCGM 100:2008, 5.1.2) is applied by numeric differences of a plain centre of gravity, piece by
piece, with the pieces of a mirrored pair or a batch moved together (JCGM 100:2008, 5.2.2: fully correlated).
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
import pytest
from writing import as_float, findings, values, write_design, write_figures, write_ledger, write_ruleset

DIMENSIONS = {"wheelbase": "2860 mm", "front_ride_height": "45 mm", "rear_ride_height": "62 mm"}
FIGURES = {"mass.total_spread": "kg", "mass.x_spread": "mm", "mass.y_spread": "mm", "mass.z_spread": "mm"}

# item: mass, its u, place, their u, quantity, mirror
ROWS: dict[str, tuple[float, float, tuple[float, float, float], tuple[float, float, float], int, bool]] = {
    "tub": (96.0, 0.4, (1250.0, 0.0, 310.0), (5.0, 1.0, 4.0), 1, False),
    "engine": (142.0, 0.25, (1890.0, 6.0, 280.0), (2.0, 0.5, 3.0), 1, False),
    "wheel": (18.5, 0.1, (0.0, 800.0, 331.0), (0.5, 0.5, 0.5), 1, True),
    "bolt_set": (0.02, 0.001, (1500.0, -120.0, 150.0), (30.0, 30.0, 30.0), 40, False),
    "pod": (7.5, 0.3, (1650.0, 560.0, 240.0), (6.0, 8.0, 9.0), 2, True),
}


def pieces(masses: dict[str, float], places: dict[str, np.ndarray]) -> tuple[np.ndarray, np.ndarray]:
    """Every single piece of the car."""
    found_masses, found_places = [], []
    for name, (_, _, _, _, quantity, mirror) in ROWS.items():
        for side in (1, -1) if mirror else (1,):
            for _ in range(quantity):
                found_masses.append(masses[name])
                found_places.append(places[name] * np.array([1, side, 1]))
    return np.array(found_masses), np.array(found_places)


def spread_by_differences(of: Callable[[np.ndarray, np.ndarray], np.ndarray]) -> np.ndarray:
    """The law of propagation with central differences over each stated value."""
    masses = {name: row[0] for name, row in ROWS.items()}
    places = {name: np.array(row[2]) for name, row in ROWS.items()}
    variance = np.zeros(4)
    for name, (_, u_mass, _, u_place, _, _) in ROWS.items():
        step = 1e-4
        up, down = ({**masses, name: masses[name] + sign * step} for sign in (1, -1))
        slope = (of(*pieces(up, places)) - of(*pieces(down, places))) / (2 * step)
        variance += (slope * u_mass) ** 2
        for axis in range(3):
            move = np.eye(3)[axis] * 1e-2
            after, before = ({**places, name: places[name] + sign * move} for sign in (1, -1))
            slope = (of(*pieces(masses, after)) - of(*pieces(masses, before))) / 2e-2
            variance += (slope * u_place[axis]) ** 2
    return np.sqrt(variance)


def centre(masses: np.ndarray, places: np.ndarray) -> np.ndarray:
    return np.array([masses.sum(), *(masses @ places / masses.sum())])


def design_rows() -> dict[str, dict[str, object]]:
    rows: dict[str, dict[str, object]] = {}
    for name, (mass, u_mass, place, u_place, quantity, mirror) in ROWS.items():
        at = {axis: f"{value} mm ± {2 * u} mm (k=2)" for axis, value, u in zip("xyz", place, u_place, strict=True)}
        rows[name] = {
            "mass": f"{mass} kg ± {2 * u_mass} kg (k=2)", "at": at, "quantity": quantity, "mirror": "yes" if mirror else "no",
        }  # fmt: skip
    return rows


def test_the_spread_against_differences_piece_by_piece(tmp_path):
    write_design(tmp_path, dimensions=DIMENSIONS, masses=design_rows())
    write_figures(tmp_path, FIGURES)
    found = values(tmp_path, FIGURES)
    assert [found[name] for name in FIGURES] == pytest.approx(spread_by_differences(centre), rel=1e-6)


def test_the_same_out_of_a_ledger(tmp_path):
    header = ("item", "mass [kg]", "x [mm]", "y [mm]", "z [mm]", "quantity", "mirror")
    rows = []
    for name, (mass, u_mass, place, u_place, quantity, mirror) in ROWS.items():
        cells = [f"{value} mm ± {2 * u} mm (k=2)" for value, u in zip(place, u_place, strict=True)]
        rows.append((name, f"{mass} kg ± {2 * u_mass} kg (k=2)", *cells, quantity, "yes" if mirror else "no"))
    write_design(tmp_path, dimensions=DIMENSIONS, ledger=write_ledger(tmp_path, header, rows))
    write_figures(tmp_path, FIGURES)
    found = values(tmp_path, FIGURES)
    assert [found[name] for name in FIGURES] == pytest.approx(spread_by_differences(centre), rel=1e-6)


def test_two_equal_pieces_by_hand(tmp_path):
    """Two pieces of 10 kg +- 1 kg at 0 and 1 m: the centre moves by (x_i - x_G)/m each, 0.5/20 m/kg, so 35.36 mm."""
    at = {"y": "0 mm", "z": "0 mm"}
    masses = {
        "a": {"mass": "10 kg ± 1 kg (k=1)", "at": {"x": "0 mm ± 0 mm (k=1)", **at}},
        "b": {"mass": "10 kg ± 1 kg (k=1)", "at": {"x": "1000 mm ± 0 mm (k=1)", **at}},
    }
    write_design(tmp_path, dimensions=DIMENSIONS, masses=masses)
    write_figures(tmp_path, {"mass.x_spread": "mm"})
    assert values(tmp_path, {"mass.x_spread": "mm"})["mass.x_spread"] == pytest.approx(np.sqrt(2) * 25, rel=1e-12)


@pytest.mark.parametrize(
    ("stated", "standard"),
    [("± 3 kg (k=2)", 1.5), ("± 3 kg", 3 / np.sqrt(3)), ("± 0 kg", 0)],
)
def test_the_standard_uncertainty_of_a_statement(tmp_path, stated, standard):
    """JCGM 100:2008, 4.3.3, 4.3.7 and 4.3.9."""
    write_design(tmp_path, masses={"a": {"mass": f"50 kg {stated}", "at": "0 0 0 mm"}})
    write_figures(tmp_path, {"mass.total_spread": "kg"})
    assert values(tmp_path, {"mass.total_spread": "kg"})["mass.total_spread"] == pytest.approx(standard, rel=1e-12)


@pytest.mark.parametrize(
    ("mass", "place"), [("50 kg", "0 mm ± 1 mm"), ("50 kg ± 1 kg", "0 mm"), ("50 kg +1/-0 kg", "0 mm ± 1 mm")]
)
def test_what_states_no_uncertainty_is_not_taken_for_certain(tmp_path, mass, place):
    write_design(tmp_path, masses={"a": {"mass": mass, "at": {"x": place, "y": "0 mm", "z": "0 mm"}}})
    write_ruleset(tmp_path, rules={"limit": {"require": "mass.x_spread <= 1 m"}})
    finding = findings(tmp_path)["limit"]
    assert finding.verdict == "open"
    assert "uncertainty of masses.a" in finding.reason


def test_predicted_mass_with_the_reserve_of_the_project(tmp_path):
    """96 kg + 5 % and 2 times 20 kg + 10 % are 144.8 kg; with 6 kg in hand 150.8 kg."""
    masses = {
        "tub": {"mass": "96 kg", "at": "0 0 0 mm", "growth": "5 %"},
        "pod": {"mass": "20 kg", "at": "0 500 0 mm", "mirror": "yes", "growth": "10 %"},
    }
    write_design(tmp_path, masses=masses, mass={"reserve": "6 kg"})
    rules = {"planned": {"require": "mass.planned <= 160 kg"}, "predicted": {"require": "mass.predicted <= 160 kg"}}
    write_ruleset(tmp_path, rules=rules)
    found = findings(tmp_path)
    assert as_float(found["planned"].margin) == pytest.approx(160 - 150.8, abs=1e-12)
    assert as_float(found["predicted"].margin) == pytest.approx(160 - 144.8, abs=1e-12)
    assert findings(tmp_path, {"mass.reserve": "none"})["planned"].verdict == "open"


def test_own_inertias_of_a_ledger(tmp_path):
    """Two uniform rods of 6 kg and 2 m across the car, at x = 1 m and 3 m: m l^2/12 = 2 kg m^2 each, m d^2 = 6 each."""
    header = (
        "item",
        "mass [kg]",
        "x [m]",
        "y [m]",
        "z [m]",
        "inertia_xx [kg*m^2]",
        "inertia_yy",
        "inertia_zz [kg*m^2]",
    )
    rows = [("front", 6, 1, 0, 0.3, 2, "0 kg*m^2", 2), ("rear", 6, 3, 0, 0.3, 2, "0 kg*m^2", 2)]
    write_design(tmp_path, dimensions=DIMENSIONS, ledger=write_ledger(tmp_path, header, rows))
    figures = {f"mass.inertia_{axis}": "kg*m^2" for axis in ("xx", "yy", "zz")}
    write_figures(tmp_path, figures)
    assert list(values(tmp_path, figures).values()) == pytest.approx([4, 12, 16], abs=1e-12)
    short = [row[:-1] for row in rows]
    write_design(tmp_path, dimensions=DIMENSIONS, ledger=write_ledger(tmp_path, header[:-1], short))
    write_ruleset(tmp_path, rules={"limit": {"require": "mass.inertia_zz <= 100 kg*m^2"}})
    assert findings(tmp_path)["limit"].verdict == "open"
