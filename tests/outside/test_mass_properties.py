"""Mass, centre of gravity, axle and corner masses and inertias against numpy and against published bodies.

Each check names its source. Where none is published the comparison is derived: the ledger spread out into single
points and summed by numpy, which shares nothing with the module's formulas.
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
    "mass.inertia_xx": "kg*m^2",
    "mass.inertia_yy": "kg*m^2",
    "mass.inertia_zz": "kg*m^2",
    "mass.front_left": "kg",
    "mass.front_right": "kg",
    "mass.rear_left": "kg",
    "mass.rear_right": "kg",
}
CENTRE = {"mass.x": "m", "mass.y": "m", "mass.z": "m"}
INERTIA = {f"mass.inertia_{axis}": "kg*m^2" for axis in ("xx", "yy", "zz")}
LEDGER_COLUMNS = ("item", "mass [kg]", "x [mm]", "y [mm]", "z [mm]", "datum", "quantity", "mirror", "growth", "unsprung")
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
        return (f"part{index}", self.mass, *self.at, self.datum, self.quantity, mirror, f"{self.growth} %", self.unsprung)

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


def apart(parts) -> dict[str, float]:
    """The same figures from single points by numpy, in the units of FIGURES."""
    pieces = [piece for part in parts for piece in part.points()]
    mass = np.array([piece[0] for piece in pieces])
    place = np.array([piece[1] for piece in pieces])
    total = mass.sum()
    centre = np.average(place, axis=0, weights=mass)
    arms = (place - centre) / 1000
    tensor = np.einsum("n,nij->ij", mass, np.einsum("nk,nk->n", arms, arms)[:, None, None] * np.eye(3))
    tensor -= np.einsum("n,ni,nj->ij", mass, arms, arms)
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
        **{f"mass.inertia_{axis}": tensor[index, index] for index, axis in enumerate(("xx", "yy", "zz"))},
    }


@pytest.mark.parametrize("seed", range(8))
def test_random_ledgers_against_numpy(tmp_path, seed):
    """Derived. Mirror, quantity and the datums rear axle, ground and a declared one, with growth and unsprung parts."""
    parts = random_parts(seed)
    write_car(tmp_path, parts)
    found = values(tmp_path, FIGURES)
    for name, due in apart(parts).items():
        assert found[name] == pytest.approx(due, rel=1e-10, abs=1e-8), name


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
    swapped |= {f"mass.{a}_{s}": other[f"mass.{a}_{o}"] for a in ("front", "rear") for s, o in (("left", "right"), ("right", "left"))}
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


# --- published bodies ------------------------------------------------------------------------------------------------


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
    """4r/(3 pi) = 0.424413 above the base for r = 1: the same figure 5.8A (from memory); 200 thin strips."""
    heights = (np.arange(200) + 0.5) / 200
    centre = centre_of(tmp_path, [(float(np.sqrt(1 - z * z)), 0.0, 0.0, float(z)) for z in heights])
    assert centre["mass.z"] == pytest.approx(0.424413, abs=2e-4)


def test_centroid_of_a_semicircular_arc(tmp_path):
    """2r/pi = 0.63662 for r = 1: the same figure 5.8A (from memory); 180 short pieces of wire."""
    angles = np.pi * (np.arange(180) + 0.5) / 180
    centre = centre_of(tmp_path, [(1.0, float(np.cos(a)), 0.0, float(np.sin(a))) for a in angles])
    assert centre["mass.z"] == pytest.approx(0.63662, abs=2e-5)
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
