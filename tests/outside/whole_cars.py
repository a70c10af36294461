"""Invented cars that say everything that any physics module asks for, and all figures of a car in one reading.

Rows of the ledger carry quantity, mirror, growth, inertias and a datum, and the fuel and the driver have states. What
the program is told is written here; what it should answer is in the `second_…` files.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace
from datetime import date
from functools import cache
from pathlib import Path

import numpy as np
from physics_cars import UNITS, Car, Mass, Numbers, in_si, near, random_car, unit_of
from writing import DAY, as_float, write, write_ruleset

from rulecheck import check
from rulecheck.outcome.results import Finding
from rulecheck.physics.modules import BUILT_IN, built_in
from rulecheck.physics.solvers import solver_module

MORE_UNITS = {f"dimensions.{end}_overhang": "m" for end in ("front", "rear")}
SIDES = ("left", "right")
ENDS = ("front", "rear")


@dataclass(frozen=True, slots=True)
class Row:
    """A row of the ledger: places of one piece from the front axle in m, whatever datum it is written from."""

    mass: float
    place: tuple[float, float, float]
    unsprung: str = "none"
    quantity: int = 1
    mirror: bool = False
    growth: float = 0.0
    inertia: tuple[float, float, float] = (0.0, 0.0, 0.0)
    datum: str = "front_axle"

    @property
    def pieces(self) -> list[Mass]:
        """Every single piece; a mirrored one stands on both sides."""
        x, y, z = self.place
        sides = (1, -1) if self.mirror else (1,)
        return [Mass(self.mass, x, y * side, z, self.unsprung) for side in sides for _ in range(self.quantity)]

    def written(self, wheelbase: float, places: Mapping[str, float]) -> dict[str, object]:
        """As the design file has it."""
        x, y, z = self.place
        along = x - places.get(self.datum, 0.0) if self.datum != "rear_axle" else x - wheelbase
        inertia = {axis: f"{value!r} kg*m^2" for axis, value in zip(("xx", "yy", "zz"), self.inertia, strict=True)}
        return {
            "mass": f"{self.mass!r} kg", "at": f"{round(along, 9)!r} {y!r} {z!r} m", "datum": self.datum,
            "unsprung": self.unsprung, "quantity": self.quantity, "mirror": "yes" if self.mirror else "no",
            "growth": f"{self.growth!r} 1", "inertia": inertia,
        }  # fmt: skip


@dataclass(frozen=True)
class WholeCar(Car):
    """A car with rows in place of single pieces, and with states that set the mass of a row."""

    rows: Mapping[str, Row] = None  # type: ignore[assignment]
    states: Mapping[str, Mapping[str, Mapping[str, float]]] = None  # type: ignore[assignment]

    def with_rows(self, rows: Mapping[str, Row]) -> WholeCar:
        """The same car with other rows."""
        return replace(self, rows=rows, masses=tuple(piece for row in rows.values() for piece in row.pieces))

    def in_states(self, states: Mapping[str, str]) -> WholeCar:
        """The car as it is in a state of each axis named."""
        rows = dict(self.rows)
        for axis, name in states.items():
            for row, mass in self.states[axis][name].items():
                rows[row] = replace(rows[row], mass=mass)
        return self.with_rows(rows)

    def mirrored(self) -> WholeCar:
        """What is on the right stands on the left, in a corner to the other side, on other scales."""
        rows = {
            name: replace(row, place=(row.place[0], -row.place[1], row.place[2])) for name, row in self.rows.items()
        }
        turned = {name: -self[name] for name in ("vehicle.lateral_acceleration", "vehicle.corner_radius")}
        turned |= {
            f"corners.{end}_{side}.mass": self[f"corners.{end}_{other}.mass"]
            for end in ENDS
            for side, other in zip(SIDES, SIDES[::-1], strict=True)
        }
        x, y, z = self.piece
        return replace(self.with_rows(rows), numbers={**self.numbers, **turned}).placed((x, -y, z))

    @property
    def piece(self) -> tuple[float, float, float]:
        """Where a piece of ballast is tried."""
        x, y, z = (float(text) for text in self.choices["ballasting.at"].split()[:3])
        return x, y, z

    def placed(self, place: tuple[float, float, float]) -> WholeCar:
        """The same car with the ballast tried elsewhere."""
        at = " ".join(repr(float(value)) for value in place) + " m"
        return replace(self, choices={**self.choices, "ballasting.at": at})

    def write(self, folder: Path) -> None:
        """The car as a design file."""
        tree: dict[str, object] = {}
        for path, number in self.numbers.items():
            _put(tree, path, f"{float(number)!r} {UNITS.get(path) or MORE_UNITS[path]}")
        for path, word in self.choices.items():
            _put(tree, path, word)
        tree["masses"] = {name: row.written(self["dimensions.wheelbase"], {}) for name, row in self.rows.items()}
        tree["aero_surfaces"] = {
            f"surface{index}": {
                "kind": "wing", "at": f"{surface.x!r} 0 {surface.z!r} m",
                "downforce_area": f"{surface.downforce_area!r} m^2", "drag_area": f"{surface.drag_area!r} m^2",
            }
            for index, surface in enumerate(self.surfaces)
        }  # fmt: skip
        tree["states"] = {
            axis: {
                name: {f"masses.{row}.mass": f"{mass!r} kg" for row, mass in sets.items()}
                for name, sets in states.items()
            }
            for axis, states in self.states.items()
        }
        write(folder / "car.design.yaml", {"design": "Whole car", "rulesets": ["book.ruleset.yaml"], **tree})


def _put(tree: dict[str, object], path: str, value: str) -> None:
    *holders, last = path.split(".")
    for holder in holders:
        tree = tree.setdefault(holder, {})  # type: ignore[assignment]
    tree[last] = value


CHOICES = {
    "recovery.axle": ("front", "rear", "both", "none"),
    "recovery.measuring_point": ("bus", "shaft", "wheel"),
    "options.driven_axle": ("rear", "front", "both"),
    "diffuser.width_held": ("track", "outer"),
}
FURTHER = {
    "dimensions.front_overhang": 1.0, "dimensions.rear_overhang": 0.8, "brakes.front.pressure": 62.0,
    "brakes.rear.pressure": 47.0, "brakes.front.piston_area": 3.2e-3, "brakes.rear.piston_area": 2.4e-3,
    "brakes.front.pad_friction": 0.42, "brakes.rear.pad_friction": 0.4, "brakes.front.effective_radius": 0.16,
    "brakes.rear.effective_radius": 0.145, "diffuser.gap": 0.02, "diffuser.length": 0.64, "diffuser.angle": 0.2,
    "diffuser.inlet_height": 0.06, "diffuser.flare": 1.15, "diffuser.width": 1.1, "diffuser.width_over_tyres": 1.94,
    "diffuser.efficiency": 0.7, "diffuser.base_pressure": -0.2, "ballasting.mass": 14.0, "ballasting.front_share_aim": 0.46,
    "ballasting.total_aim": 1190.0, "weighing.front_lifted": 470.0, "weighing.angle": 0.24, "weighing.lift": 0.62,
    "corners.front_left.mass": 215.0, "corners.front_right.mass": 226.0, "corners.rear_left.mass": 278.0,
    "corners.rear_right.mass": 269.0,
}  # fmt: skip


def whole_car(seed: int) -> WholeCar:
    """A random car that says everything; the choices go round with the seed, so that a dozen seeds meet each of them."""
    random = np.random.default_rng(1000 + seed)
    base = random_car(seed)
    numbers: Numbers = {**base.numbers, **{name: near(random, middle, 0.1) for name, middle in FURTHER.items()}}
    choices = {name: words[seed % len(words)] for name, words in CHOICES.items()}
    if seed % 4 == 3:
        # Slow enough that grip holds the acceleration back.
        numbers |= {"vehicle.speed": near(random, 17), "vehicle.end_speed": near(random, 5)}
    bare = WholeCar(numbers, (), base.surfaces, choices, {}, _states(random))
    car = bare.with_rows(_rows(random, base)).placed((near(random, 0.3), near(random, 0.2), near(random, 0.05)))
    share = 1 - car.centre()[0] / car["dimensions.wheelbase"]
    aim = {
        "ballasting.front_share_aim": round(float(share) + 0.01, 5),
        "ballasting.total_aim": round(car.total + 25.0 * (seed % 4 - 1), 3),
    }
    return replace(car, numbers={**numbers, **aim})


def _rows(random: np.random.Generator, base: Car) -> dict[str, Row]:
    """The base's pieces with growth and inertias, one of them written from the rear axle, and mirrored parts."""
    rows = {}
    for index, piece in enumerate(base.masses):
        inertia = tuple(near(random, value) for value in (4.0, 7.0, 9.0))
        datum = "rear_axle" if index % 3 == 1 else "front_axle"
        rows[f"piece{index}"] = Row(
            piece.mass, (piece.x, piece.y, piece.z), piece.unsprung, 1, False, near(random, 0.05), inertia, datum
        )  # type: ignore[arg-type]
    rows["pods"] = Row(
        near(random, 12), (near(random, 1.4), near(random, 0.6), 0.2), "none", 2, True, 0.1, (0.1, 0.2, 0.3)
    )
    rows["fuel"] = Row(near(random, 50), (near(random, 1.6), 0.02, 0.28))
    rows["driver"] = Row(75.0, (near(random, 1.1), -0.05, 0.33))
    return rows


def _states(random: np.random.Generator) -> dict[str, dict[str, dict[str, float]]]:
    return {
        "fuel": {"empty": {"fuel": 0.0}, "full": {"fuel": near(random, 56)}},
        "driver": {"light": {"driver": 62.0}, "heavy": {"driver": 88.0}},
    }


# --- figures ----------------------------------------------------------------------------------------------------------


def figure_names(*, argument: str = "") -> tuple[str, ...]:
    """Every figure of every built-in module: those of the whole car, or those that take an element or a point."""
    kinds = {"element": "loop", "point": "of"}
    names = []
    for name in BUILT_IN:
        module = built_in(name)
        assert module is not None
        for figure in module.figures.values():
            takes = next((kind for kind, field in kinds.items() if getattr(figure, field) is not None), "")
            if takes == argument:
                names.append(f"{name}.{figure.name}")
    return tuple(names)


@cache
def is_text(figure: str) -> bool:
    """Whether a figure says a word."""
    name, _, last = figure.partition(".")
    module = built_in(name) or solver_module(name)
    assert module is not None, name
    return module.figures[last].unit is None


WORDS = {
    "recovery": (
        "no machine",
        "demand",
        "rule",
        "store",
        "grip",
        "machine power",
        "machine torque",
        "each axle by itself",
    ),
    "braking": ENDS,
    "balance": ENDS,
    "performance": ("grip", "power"),
}
Known = Mapping[str, float | str | None]


def ask_for(folder: Path, figures: Iterable[str], states: Mapping[str, Iterable[str]] | None = None) -> None:
    """A ruleset with a rule for each figure, and one for each word that a figure may say."""
    rules: dict[str, object] = {}
    for figure in figures:
        name = figure.replace(".", "_")
        if is_text(figure):
            words = enumerate(WORDS[figure.partition(".")[0]])
            rules |= {f"{name}_{index}": {"require": f'{figure} == "{word}"'} for index, word in words}
        else:
            unit = unit_of(figure)
            rules[name] = {"require": f"{figure} >= 0" if unit == "1" else f"{figure} >= 0 {unit}"}
    needed = {axis: list(names) for axis, names in (states or {}).items()}
    write_ruleset(folder, **({"states_needed": needed} if needed else {}), rules=rules)


def read(found: Mapping[str, Finding], figures: Iterable[str]) -> Known:
    """Figures in the SI, words as they are, None for what is not known."""
    known: dict[str, float | str | None] = {}
    for figure in figures:
        name = figure.replace(".", "_")
        if is_text(figure):
            words = enumerate(WORDS[figure.partition(".")[0]])
            said = [word for index, word in words if found[f"{name}_{index}"].verdict == "complies"]
            known[figure] = said[0] if len(said) == 1 else None
        else:
            value = found[name].value
            known[figure] = None if value is None else as_float(value) * in_si(figure)
    return known


def figures_known(
    folder: Path,
    car: Car,
    figures: Iterable[str],
    *,
    states: Mapping[str, str] | None = None,
    settings: Mapping[str, str] | None = None,
    on: date = DAY,
) -> Known:
    """What the program says of the figures of a car, in the states given."""
    wanted = list(figures)
    car.write(folder)
    axes = car.states if isinstance(car, WholeCar) else {}
    ask_for(folder, wanted, axes)
    report = check(folder / "car.design.yaml", on=on, states=states or {}, settings=settings or {})
    return read({finding.name: finding for finding in report.rules}, wanted)
