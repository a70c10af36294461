"""Mass, centre of gravity, axle and corner masses and inertias against numpy.

Derived throughout: the ledger is spread out into single points and summed by numpy, which shares nothing with the
module's formulas.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import pytest
from writing import DAY, as_float, findings, values, write_design, write_figures, write_ledger, write_ruleset

from rulecheck import check

DIMENSIONS = {
    "wheelbase": "2860 mm",
    "front_track": "1600 mm",
    "rear_track": "1560 mm",
    "front_ride_height": "40 mm",
    "rear_ride_height": "65 mm",
}
SUSPENSION = {"front": {"roll_stiffness": "1500 N*m/deg"}, "rear": {"roll_stiffness": "1100 N*m/deg"}}
FIGURES = {
    "mass.total": "kg",
    "mass.x": "mm",
    "mass.y": "mm",
    "mass.z": "mm",
    "mass.height": "mm",
    "mass.front": "kg",
    "mass.rear": "kg",
    "mass.front_share": "%",
    "mass.predicted": "kg",
    "mass.unsprung_front": "kg",
    "mass.unsprung_rear": "kg",
    "mass.sprung": "kg",
    "mass.front_left": "kg",
    "mass.front_right": "kg",
    "mass.rear_left": "kg",
    "mass.rear_right": "kg",
}
INERTIA = {f"mass.inertia_{axis}": "kg*m^2" for axis in ("xx", "yy", "zz")}
LEDGER_COLUMNS = (
    "item",
    "mass [kg]",
    "x [mm]",
    "y [mm]",
    "z [mm]",
    "datum",
    "quantity",
    "mirror",
    "growth",
    "unsprung",
)
GEARBOX_FACE = (-410.0, 30.0, 12.0)


@dataclass(frozen=True)
class Part:
    """A row of a random ledger, lengths in mm from its datum."""

    mass: float
    at: tuple[float, float, float]
    datum: str
    quantity: int
    mirror: bool
    growth: float
    unsprung: str

    def cells(self, index: int) -> tuple[object, ...]:
        mirror = "yes" if self.mirror else "no"
        return (
            f"part{index}",
            self.mass,
            *self.at,
            self.datum,
            self.quantity,
            mirror,
            f"{self.growth} %",
            self.unsprung,
        )

    def place(self) -> np.ndarray:
        """From the front axle and the reference plane, in mm; the datums placed by hand."""
        x, y, z = self.at
        if self.datum == "rear_axle":
            return np.array([x + 2860, y, z])
        if self.datum == "gearbox_face":
            return np.array([x + 2860, y, z]) + np.array(GEARBOX_FACE)
        if self.datum == "ground":
            return np.array([x, y, z - (40 + (65 - 40) * x / 2860)])
        return np.array([x, y, z])

    def points(self) -> list[tuple[float, np.ndarray]]:
        """Every single piece with its mass."""
        place = self.place()
        sides = [place, place * (1, -1, 1)] if self.mirror else [place]
        return [(self.mass, side) for side in sides for _ in range(self.quantity)]


def random_parts(seed: int, count: int = 14) -> list[Part]:
    random = np.random.default_rng(seed)
    return [
        Part(
            round(random.uniform(0.1, 90), 3),
            tuple(round(float(value), 1) for value in random.uniform((-900, -800, 20), (3300, 800, 900))),  # type: ignore[arg-type]
            str(random.choice(["front_axle", "rear_axle", "ground", "gearbox_face"])),
            int(random.integers(1, 5)),
            bool(random.integers(0, 2)),
            round(random.uniform(0, 20), 1),
            str(random.choice(["front", "rear", "none"])),
        )
        for _ in range(count)
    ]


def write_car(folder, parts, **more) -> None:
    ledger = write_ledger(folder, LEDGER_COLUMNS, [part.cells(index) for index, part in enumerate(parts)])
    at = " ".join(str(value) for value in GEARBOX_FACE) + " mm"
    datums = {"gearbox_face": {"from": "rear_axle", "at": at}}
    write_design(folder, dimensions=DIMENSIONS, suspension=SUSPENSION, datums=datums, ledger=[ledger], **more)
    write_figures(folder, FIGURES)


def write_car_in_full(folder, parts, own) -> None:
    """The same car without a ledger file, each part with its own moments of inertia."""
    keys = ("item", "mass", "x", "y", "z", "datum", "quantity", "mirror", "growth", "unsprung")
    masses = {}
    for index, (part, inertia) in enumerate(zip(parts, own, strict=True)):
        cells = dict(zip(keys, part.cells(index), strict=True))
        masses[cells["item"]] = {
            "mass": f"{part.mass} kg",
            "at": " ".join(map(str, part.at)) + " mm",
            **{key: cells[key] for key in ("datum", "quantity", "mirror")},
            "inertia": {axis: f"{value} kg*m^2" for axis, value in zip(("xx", "yy", "zz"), inertia, strict=True)},
        }
    at = " ".join(str(value) for value in GEARBOX_FACE) + " mm"
    datums = {"gearbox_face": {"from": "rear_axle", "at": at}}
    write_design(folder, dimensions=DIMENSIONS, datums=datums, masses=masses)
    write_figures(folder, INERTIA)


def apart(parts) -> dict[str, float]:
    """The same figures from single points by numpy, in the units of FIGURES."""
    pieces = [piece for part in parts for piece in part.points()]
    mass = np.array([piece[0] for piece in pieces])
    place = np.array([piece[1] for piece in pieces])
    total = mass.sum()
    centre = np.average(place, axis=0, weights=mass)
    rear = np.dot(mass, place[:, 0]) / 2860
    share = {axle: sum(p.mass * len(p.points()) for p in parts if p.unsprung == axle) for axle in ("front", "rear")}
    return {
        "mass.total": total,
        **{f"mass.{axis}": centre[index] for index, axis in enumerate("xyz")},
        "mass.height": np.average(place[:, 2] + 40 + 25 * place[:, 0] / 2860, weights=mass),
        "mass.front": total - rear,
        "mass.rear": rear,
        "mass.front_share": 100 * (total - rear) / total,
        "mass.predicted": sum(p.mass * len(p.points()) * (1 + p.growth / 100) for p in parts),
        "mass.unsprung_front": share["front"],
        "mass.unsprung_rear": share["rear"],
        "mass.sprung": total - share["front"] - share["rear"],
    }


@pytest.mark.parametrize("seed", range(8))
def test_random_ledgers_against_numpy(tmp_path, seed):
    """Derived. Mirror, quantity and the datums rear axle, ground and a declared one, with growth and unsprung parts."""
    parts = random_parts(seed)
    write_car(tmp_path, parts)
    found = values(tmp_path, FIGURES)
    for name, due in apart(parts).items():
        assert found[name] == pytest.approx(due, rel=1e-10, abs=1e-8), name


def inertia_apart(parts, own) -> np.ndarray:
    """The diagonal of the tensor of inertia through the common centre, from single pieces, in kg m^2."""
    pieces = [piece for part in parts for piece in part.points()]
    mass = np.array([piece[0] for piece in pieces])
    place = np.array([piece[1] for piece in pieces])
    arms = (place - np.average(place, axis=0, weights=mass)) / 1000
    tensor = np.einsum("n,nij->ij", mass, np.einsum("nk,nk->n", arms, arms)[:, None, None] * np.eye(3))
    tensor -= np.einsum("n,ni,nj->ij", mass, arms, arms)
    count = np.array([len(part.points()) for part in parts])
    return np.diagonal(tensor) + count @ np.array(own)


@pytest.mark.parametrize("seed", range(6))
def test_inertia_of_random_cars_against_numpy(tmp_path, seed):
    """Derived: parallel axes by the tensor of single pieces, each with an inertia of its own."""
    parts = random_parts(seed)
    own = np.random.default_rng(seed + 100).uniform(0, 9, (len(parts), 3)).round(3).tolist()
    write_car_in_full(tmp_path, parts, own)
    found = values(tmp_path, INERTIA)
    due = dict(zip(INERTIA, inertia_apart(parts, own), strict=True))
    for name, value in due.items():
        assert found[name] == pytest.approx(value, rel=1e-10), name


@pytest.mark.parametrize("seed", range(8))
def test_corner_masses_balance(tmp_path, seed):
    """Derived from statics: four loads carry the mass and balance its moments about both axes."""
    write_car(tmp_path, random_parts(seed))
    found = values(tmp_path, FIGURES)
    loads = {name: found[f"mass.{name}"] for name in ("front_left", "front_right", "rear_left", "rear_right")}
    assert sum(loads.values()) == pytest.approx(found["mass.total"], rel=1e-12)
    assert loads["front_left"] + loads["front_right"] == pytest.approx(found["mass.front"], rel=1e-12)
    assert loads["rear_left"] + loads["rear_right"] == pytest.approx(found["mass.rear"], rel=1e-12)
    front, rear = (loads[f"{axle}_right"] - loads[f"{axle}_left"] for axle in ("front", "rear"))
    moment = front * 1600 / 2 + rear * 1560 / 2
    assert moment == pytest.approx(found["mass.total"] * found["mass.y"], rel=1e-10, abs=1e-8)
    # No warp preload: the moments stand as the roll stiffnesses of the axles.
    assert front * 1600 * 1100 == pytest.approx(rear * 1560 * 1500, rel=1e-10, abs=1e-4)


def test_a_mirrored_car_is_mirrored(tmp_path):
    """Derived: what is on the right stands on the left, and nothing else changes."""
    (tmp_path / "left").mkdir()
    (tmp_path / "right").mkdir()
    parts = [part for part in random_parts(31) if part.datum != "gearbox_face"]
    turned = [
        Part(p.mass, (p.at[0], -p.at[1], p.at[2]), p.datum, p.quantity, p.mirror, p.growth, p.unsprung) for p in parts
    ]
    write_car(tmp_path / "left", parts)
    write_car(tmp_path / "right", turned)
    one, other = values(tmp_path / "left", FIGURES), values(tmp_path / "right", FIGURES)
    assert abs(one["mass.y"]) > 1
    swapped = {"mass.y": -other["mass.y"]}
    swapped |= {
        f"mass.{a}_{s}": other[f"mass.{a}_{o}"]
        for a in ("front", "rear")
        for s, o in (("left", "right"), ("right", "left"))
    }
    for name, value in one.items():
        assert value == pytest.approx(swapped.get(name, other[name]), rel=1e-12, abs=1e-12), name


def test_states_against_two_cars(tmp_path):
    """Derived: each state against numpy on the ledger of that state, and `every` gives the worst of them."""
    parts = random_parts(5)
    fuel = Part(52.0, (1610.0, 40.0, 290.0), "front_axle", 1, False, 0.0, "none")
    masses = {"fuel": {"mass": "52 kg", "at": "1610 40 290 mm"}}
    states = {"fuel": {"full": {}, "empty": {"masses.fuel.mass": "0 kg"}}}
    write_car(tmp_path, parts, masses=masses, states=states)
    due = {"full": apart([*parts, fuel])["mass.x"], "empty": apart(parts)["mass.x"]}
    assert abs(due["full"] - due["empty"]) > 0.1
    for state, place in due.items():
        report = check(tmp_path / "car.design.yaml", states={"fuel": state}, on=DAY)
        found = {finding.name: finding for finding in report.rules}
        assert as_float(found["mass_x"].value) == pytest.approx(place, rel=1e-12)
    write_ruleset(
        tmp_path,
        states_needed={"fuel": ["empty", "full"]},
        rules={
            "behind": {"states": "every", "require": "mass.x >= 1000 mm"},
            "ahead": {"states": "every", "require": "mass.x <= 1000 mm"},
            "written": {"require": "mass.x >= 1000 mm"},
        },
    )
    found = findings(tmp_path)
    assert as_float(found["behind"].margin) == pytest.approx(min(due.values()) - 1000, rel=1e-10)
    assert as_float(found["ahead"].margin) == pytest.approx(1000 - max(due.values()), rel=1e-10)
    assert as_float(found["written"].margin) == pytest.approx(due["full"] - 1000, rel=1e-10)
    worst = found["behind"].binding
    assert worst is not None
    assert worst.state == {"fuel": min(due, key=due.__getitem__)}


@pytest.mark.parametrize("wheelbase", ["2740 mm", "2980 mm"])
def test_what_hangs_on_the_rear_axle_moves_with_the_wheelbase(tmp_path, wheelbase):
    """Derived: rear parts keep their distance to the rear axle, so the share of a car of two ends does not change."""
    ends = {
        "nose": {"mass": "100 kg", "at": "0 0 300 mm"},
        "tail": {"mass": "150 kg", "datum": "rear_axle", "at": "0 0 300 mm"},
    }
    write_design(tmp_path, dimensions=DIMENSIONS, masses=ends)
    write_figures(tmp_path, {"mass.x": "mm", "mass.front_share": "%"})
    found = values(tmp_path, {"mass.x": "mm", "mass.front_share": "%"}, {"dimensions.wheelbase": wheelbase})
    assert found["mass.front_share"] == pytest.approx(40, abs=1e-12)
    assert found["mass.x"] == pytest.approx(0.6 * float(wheelbase.split()[0]), rel=1e-12)
