"""What must hold of a what-if: nothing changes nothing, a change is the changed car, and cars described in two ways.

Derived throughout.
"""

from __future__ import annotations

import tempfile
from collections.abc import Iterator, Mapping
from contextlib import contextmanager
from dataclasses import replace
from fractions import Fraction
from pathlib import Path

import pytest
from hypothesis import Phase, given, settings
from hypothesis import strategies as st
from physics_cars import UNITS
from whole_cars import MORE_UNITS, WholeCar, ask_for, figure_names, figures_known, is_text, whole_car
from writing import DAY, as_fraction, findings, write_design, write_ruleset

from rulecheck import Change, WhatIf, check, whatif

CARS = st.integers(0, 10_000)
FIGURES = figure_names()
# No shrinking: a smaller seed is no simpler car.
PHASES = (Phase.explicit, Phase.reuse, Phase.generate)
FEW = settings(max_examples=2, deadline=None, phases=PHASES)
MOVABLE = sorted({
    "dimensions.wheelbase", "dimensions.front_track", "dimensions.rear_ride_height", "vehicle.speed", "vehicle.grip",
    "vehicle.deceleration", "brakes.distribution", "tyres.rear.width", "recovery.power", "air.temperature",
    "diffuser.gap", "suspension.rear.roll_stiffness", "aero.reference_area", "weighing.angle", "ballasting.mass",
})  # fmt: skip
STEPS = st.dictionaries(st.sampled_from(MOVABLE), st.sampled_from(["1.01", "0.985", "1.03"]), min_size=1, max_size=3)


@contextmanager
def on_file(car: WholeCar, figures: tuple[str, ...] = ("mass.total",)) -> Iterator[Path]:
    """A car and a ruleset on it, in a folder of their own."""
    with tempfile.TemporaryDirectory() as folder:
        car.write(Path(folder))
        ask_for(Path(folder), figures, car.states)
        yield Path(folder) / "car.design.yaml"


def moved(car: WholeCar, steps: Mapping[str, str]) -> dict[str, str]:
    """Inputs moved by a factor, as settings."""
    given_ = {}
    for path, factor in steps.items():
        unit = UNITS.get(path) or MORE_UNITS[path]
        given_[path] = f"{float(car[path]) * float(factor):.6g} {unit}"
    return given_


def changed_car(car: WholeCar, change: Mapping[str, str]) -> WholeCar:
    """The car that a change makes: what hangs on the rear axle has gone with it."""
    numbers = {**car.numbers, **{path: float(text.split()[0]) for path, text in change.items()}}
    step = numbers["dimensions.wheelbase"] - car["dimensions.wheelbase"]
    rows = {
        name: replace(row, place=(round(row.place[0] + step, 9), *row.place[1:])) if row.datum == "rear_axle" else row
        for name, row in car.rows.items()
    }
    return replace(car.with_rows(rows), numbers=numbers)


def asked(design: Path, *changes: Mapping[str, str]) -> WhatIf:
    return whatif(design, [Change((), tuple(change.items())) for change in changes], on=DAY)


# --- what-if ----------------------------------------------------------------------------------------------------------


@FEW
@given(CARS, st.lists(st.sampled_from(MOVABLE), max_size=4, unique=True))
def test_nothing_is_moved_by_nothing(seed, paths):
    """No change, and values set to what they are, in the words of the file or in others."""
    car = whole_car(seed)
    same = {path: f"{car[path]!r} {UNITS.get(path) or MORE_UNITS[path]}" for path in paths}
    with on_file(car) as design:
        outcome = asked(design, {}, same)
        assert (outcome.rules, outcome.figures) == ((), ())
        assert outcome.verdicts == (outcome.verdict, outcome.verdict)


@FEW
@given(CARS, STEPS)
def test_before_and_after_are_two_cars(seed, steps):
    """Every figure after a change is that of a car written so from the first; what is not listed is the same in both."""
    car = whole_car(seed)
    with on_file(car) as design:
        change = moved(car, steps)
        outcome = asked(design, change)
        folder = design.parent
        before = figures_known(folder, car, FIGURES)
        after = figures_known(folder, changed_car(car, change), FIGURES)
    listed = {item.name for item in outcome.figures}
    assert {name for name in FIGURES if before[name] != after[name]} == listed & set(FIGURES)
    for item in outcome.figures:
        if item.before is not None and item.moved[0].after is not None and not is_text(item.name):
            step = item.moved[0].difference
            assert step is not None
            assert step.value == pytest.approx(item.moved[0].after.value - item.before.value, rel=1e-9)  # type: ignore[operator]


@FEW
@given(CARS, STEPS)
def test_there_and_back_again(seed, steps):
    """The changed car with the old values set is the car: the steps of both ways are opposite, to the last digit."""
    car = whole_car(seed)
    change = moved(car, steps)
    back = {path: f"{car[path]!r} {UNITS.get(path) or MORE_UNITS[path]}" for path in change}
    with on_file(car) as design, on_file(changed_car(car, change)) as changed:
        there, again = asked(design, change), asked(changed, back)
    ways = [{item.name: item for item in outcome.figures} for outcome in (there, again)]
    assert set(ways[0]) == set(ways[1])
    for name, item in ways[0].items():
        other = ways[1][name]
        assert (str(item.before), str(item.moved[0].after)) == (str(other.moved[0].after), str(other.before)), name


@FEW
@given(CARS, STEPS, STEPS)
def test_changes_stand_side_by_side(seed, one, other):
    """Two changes asked together are what each is by itself, and the order of settings in one is nothing."""
    car = whole_car(seed)
    changes = [moved(car, steps) for steps in (one, other)]
    with on_file(car) as design:
        both = asked(design, *changes)
        single = [asked(design, change) for change in changes]
        turned = asked(design, dict(reversed(changes[0].items())))
    assert turned.figures == single[0].figures
    for index, outcome in enumerate(single):
        alone = {item.name: item.moved[0] for item in outcome.figures}
        together = {item.name: item.moved[index] for item in both.figures}
        assert {name: alone[name] for name in alone} == {name: together[name] for name in alone}
        assert all(step.difference is None for name, step in together.items() if name not in alone)


@FEW
@given(CARS, st.sampled_from([("air.temperature", "9 K"), ("dimensions.rear_overhang", "40 mm")]))
def test_what_does_not_rest_on_an_input_does_not_move(seed, given_):
    """Statics know nothing of the weather, and no figure but the length of an overhang."""
    path, _ = given_
    car = whole_car(seed)
    with on_file(car) as design:
        outcome = asked(design, moved(car, {path: "1.02"}))
    modules = {item.name.partition(".")[0] for item in outcome.figures}
    assert modules
    if path == "air.temperature":
        assert not modules & {"mass", "rollover", "weighing", "ballasting", "diffuser"}
    else:
        assert [item.name for item in outcome.figures] == ["platform.length_over_overhangs"]


# --- one car in two descriptions --------------------------------------------------------------------------------------

PIECES = st.lists(
    st.tuples(st.integers(1, 900), st.integers(-900, 3600), st.integers(-800, 800), st.integers(0, 900), st.booleans()),
    min_size=2, max_size=8,
)  # fmt: skip
DIMENSIONS = {"wheelbase": "2860 mm", "front_ride_height": "40 mm", "rear_ride_height": "65 mm"}
EXACT = ("mass.total", "mass.x", "mass.y", "mass.z", "mass.height", "mass.rear", "mass.front_share")


def described(folder: Path, pieces, hung: bool) -> None:
    """Pieces with the place from the front axle, or, those that hang there, from the rear axle."""
    masses = {}
    for index, (mass, x, y, z, rear) in enumerate(pieces):
        from_rear = rear and hung
        at = f"{x - 2860 if from_rear else x} {y} {z} mm"
        masses[f"piece{index}"] = {
            "mass": f"{mass} kg",
            "at": at,
            "datum": "rear_axle" if from_rear else "front_axle",
        }
    write_design(folder, dimensions=DIMENSIONS, masses=masses)


def exact(folder: Path, wheelbase: int | None = None) -> dict[str, Fraction]:
    units = {"total": "kg", "rear": "kg", "front_share": "%"}
    write_ruleset(folder, rules={
        name.replace(".", "_"): {"require": f"{name} >= 0 {units.get(name.partition('.')[2], 'mm')}"} for name in EXACT
    })  # fmt: skip
    found = findings(folder, {"dimensions.wheelbase": f"{wheelbase} mm"} if wheelbase else None)
    return {name: as_fraction(found[name.replace(".", "_")].value) for name in EXACT}


@settings(max_examples=10, deadline=None)
@given(PIECES, st.integers(2500, 3200))
def test_places_from_either_axle(pieces, wheelbase):
    """Places from the front axle or from the rear axle say the same car, exactly; with another wheelbase what hangs on
    the rear axle has gone with it: the centre of gravity moves by that share of the change, in the other car not at all."""
    with tempfile.TemporaryDirectory() as folder:
        said = []
        for hung in (False, True):
            described(Path(folder), pieces, hung)
            said.append((exact(Path(folder)), exact(Path(folder), wheelbase)))
    (fixed, fixed_after), (hung, hung_after) = said
    assert fixed == hung
    total = sum(piece[0] for piece in pieces)
    behind = Fraction(sum(piece[0] for piece in pieces if piece[4]), total)
    step = wheelbase - 2860
    assert fixed_after["mass.x"] == fixed["mass.x"]
    assert hung_after["mass.x"] - hung["mass.x"] == behind * step
    assert hung_after["mass.rear"] == total * (hung["mass.x"] + behind * step) / wheelbase
    for name in ("mass.total", "mass.y", "mass.z"):
        assert fixed_after[name] == hung_after[name] == hung[name]


@settings(max_examples=10, deadline=None)
@given(st.integers(1400, 1700), st.integers(200, 380), st.integers(-40, 40), st.integers(0, 3))
def test_a_typed_width_is_held_against_the_tyres(track, tyre, beyond, digits):
    """Wider than the tyres stand, as closely as the value is written: a typed width below that is never judged."""
    typed = Fraction(track + tyre) + Fraction(beyond, 10**digits)
    text = f"{float(typed):.{digits}f}"
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        write_design(
            folder,
            dimensions={"front_track": f"{track} mm", "rear_track": f"{track - 20} mm", "overall_width": f"{text} mm"},
            tyres={"front": {"width": f"{tyre} mm"}, "rear": {"width": f"{tyre} mm"}},
        )
        write_ruleset(folder, rules={"width": {"require": "dimensions.overall_width <= 2200 mm"}})
        report = check(folder / "car.design.yaml", on=DAY)
    contradicted = Fraction(track + tyre) - Fraction(text) > Fraction(1, 2 * 10**digits)
    assert report.rules[0].verdict == ("open" if contradicted else "complies")
    assert bool(report.notes) == contradicted
