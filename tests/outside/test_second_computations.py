"""Every figure of every physics module against a second computation, on random cars and in their states.

The registry is whole: a figure that no second computation gives, and that no other test holds, fails here. `HELD_BY`
names the tests that hold the figures that no car by itself can show; that these tests do fail when the figure is wrong
is proved in the long tier, where each such figure is bent.
"""

from __future__ import annotations

import os
import subprocess
import sys
from functools import cache
from pathlib import Path

import pytest
import second_layout
import second_loads
import second_longitudinal
from second_computations import REGISTERED, Bench
from whole_cars import WholeCar, figure_names, figures_known, is_text, whole_car

HERE = Path(__file__).parent
BOOKS = (second_layout, second_loads, second_longitudinal)
SEEDS = range(8)
STATES = (
    {"fuel": "empty", "driver": "light"},
    {"fuel": "empty", "driver": "heavy"},
    {"fuel": "full", "driver": "light"},
    {"fuel": "full", "driver": "heavy"},
)
HELD_BY = {
    "mass.of": "test_mass_properties.py::test_random_ledgers_against_numpy",
    "mass.own_inertia_xx": "test_mass_properties.py::test_inertia_of_random_cars_against_numpy",
    "mass.own_inertia_yy": "test_mass_properties.py::test_inertia_of_random_cars_against_numpy",
    "mass.own_inertia_zz": "test_mass_properties.py::test_inertia_of_random_cars_against_numpy",
    "mass.uncertainty_of": "test_mass_spread.py::test_the_spread_against_differences_piece_by_piece",
    **{
        f"mass.{name}_spread": "test_mass_spread.py::test_the_spread_against_differences_piece_by_piece"
        for name in ("total", "x", "y", "z")
    },
    "mass.planned": "test_mass_spread.py::test_predicted_mass_with_the_reserve_of_the_project",
    "balance.loaded_critical_speed": "test_physics_solves.py::test_critical_speed_is_where_an_eigenvalue_turns_positive",
    **{
        f"balance.{name}_speed": "test_physics_solves.py::test_characteristic_speed_and_the_peak_of_yaw_gain"
        for name in ("loaded_characteristic", "peak_yaw_gain")
    },
    "aero.map_front_downforce_area": "test_aero_map.py::test_a_map_and_surfaces_on_top_of_it",
    "aero.map_rear_downforce_area": "test_aero_map.py::test_a_map_and_surfaces_on_top_of_it",
    "aero.map_drag_area": "test_aero_map.py::test_a_map_and_surfaces_on_top_of_it",
    "aero.map_moment_area": "test_aero_map.py::test_a_map_and_surfaces_on_top_of_it",
    "aero.surface_downforce_area": "test_aero_map.py::test_a_map_and_surfaces_on_top_of_it",
    "aero.surface_drag_area": "test_aero_map.py::test_a_map_and_surfaces_on_top_of_it",
    "aero.surface_moment_area": "test_aero_map.py::test_a_map_and_surfaces_on_top_of_it",
    "aero.level_moment_area": "test_aero_map.py::test_a_map_and_surfaces_on_top_of_it",
    "aero.downforce_of": "test_aero_map.py::test_a_map_and_surfaces_on_top_of_it",
    "aero.drag_of": "test_aero_map.py::test_a_map_and_surfaces_on_top_of_it",
    "aero.surface_drag_moment_area": "test_physics_loads.py::test_sums_of_the_surfaces",
    "frontal.outline_area": "test_own_ratings.py::test_frontal_area_of_outlines",
    "weighing.arm": "test_own_ratings.py::test_uncertainty_of_the_height_from_a_lift",
    "weighing.height_uncertainty": "test_own_ratings.py::test_uncertainty_of_the_height_from_a_lift",
    "ballasting.first_slot_mass": "test_own_ratings.py::test_two_slots_meet_total_and_share",
    "ballasting.second_slot_mass": "test_own_ratings.py::test_two_slots_meet_total_and_share",
    "ballasting.slots_room": "test_own_ratings.py::test_two_slots_meet_total_and_share",
    "ballasting.z_with_slots": "test_own_ratings.py::test_two_slots_meet_total_and_share",
    "tyre.front_pressure_room": "test_own_ratings.py::test_tyres_against_their_ratings",
    "tyre.front_camber_room": "test_own_ratings.py::test_tyres_against_their_ratings",
    "tyre.rear_pressure_room": "test_own_ratings.py::test_tyres_against_their_ratings",
    "tyre.rear_camber_room": "test_own_ratings.py::test_tyres_against_their_ratings",
    "frontal.drag_area": "test_aero_map.py::test_one_drag_total_from_a_coefficient",
    "frontal.area": "test_aero_map.py::test_one_drag_total_from_a_coefficient",
    "tank.mass": "test_aero_map.py::test_fuel_from_the_tank",
    "tank.x_of_fuel": "test_aero_map.py::test_fuel_from_the_tank",
    "tank.y_of_fuel": "test_aero_map.py::test_fuel_from_the_tank",
    "tank.z_of_fuel": "test_aero_map.py::test_fuel_from_the_tank",
    "tank.room": "test_aero_map.py::test_fuel_from_the_tank",
    "driver.ballast": "test_aero_map.py::test_driver_ballast",
    "driver.ballasted_mass": "test_aero_map.py::test_driver_ballast",
    "mass.x_of": "test_mass_properties.py::test_random_ledgers_against_numpy",
    "mass.side_of": "test_mass_properties.py::test_random_ledgers_against_numpy",
    "mass.y_of": "test_mass_properties.py::test_random_ledgers_against_numpy",
    "mass.z_of": "test_mass_properties.py::test_random_ledgers_against_numpy",
    "platform.height_above_ground": "test_platform.py::test_heights_against_a_rigid_rotation",
}


@pytest.fixture(scope="module")
def said(tmp_path_factory: pytest.TempPathFactory):
    """What the program says of every figure of a car, once."""
    return cache(lambda seed: figures_known(tmp_path_factory.mktemp("car"), whole_car(seed), REGISTERED))


def hold(car: WholeCar, said) -> None:
    """Every registered figure against its second computation; all that differ are named at once."""
    bench, wrong = Bench(car), []
    for made in dict.fromkeys(REGISTERED.values()):
        for figure, due in zip(made.figures, made.compute(bench), strict=True):
            value = said[figure]
            close = (
                value == due
                if isinstance(due, str) or due is None
                else value == pytest.approx(due, rel=made.closely, abs=1e-11)
            )
            if not close:
                wrong.append((figure, value, due))
    assert wrong == []


@pytest.mark.parametrize("seed", SEEDS)
def test_every_figure_of_a_random_car(said, seed):
    hold(whole_car(seed), said(seed))


@pytest.mark.long
@pytest.mark.parametrize("seed", range(len(SEEDS), 80))
def test_every_figure_of_many_random_cars(tmp_path, seed):
    car = whole_car(seed)
    hold(car, figures_known(tmp_path, car, REGISTERED))


@pytest.mark.parametrize(("seed", "states"), list(enumerate(STATES)))
def test_every_figure_in_a_state(tmp_path, seed, states):
    """The program lays the state over the design; the second computation gets a car of that fuel and driver."""
    car = whole_car(seed)
    hold(car.in_states(states), figures_known(tmp_path, car, REGISTERED, states=states))


def test_no_figure_is_without_a_second_computation():
    every = {name for kind in ("", "element", "point") for name in figure_names(argument=kind)}
    held = {*REGISTERED, *HELD_BY}
    assert sorted(every - held) == [], "write a second computation, or name the test that holds the figure"
    assert sorted(held - every) == [], "no such figure any more"
    assert not set(REGISTERED) & set(HELD_BY)


@pytest.mark.parametrize("test", sorted(set(HELD_BY.values())))
def test_the_tests_that_hold_figures_are_there(test):
    file, _, name = test.partition("::")
    assert f"def {name}(" in (HERE / file).read_text(encoding="utf-8")


def test_the_random_cars_show_every_figure(said):
    """A figure that is nothing, or unknown, on every car would be held by nothing; a word by its being always the same."""
    for figure in REGISTERED:
        shown = {said(seed)[figure] for seed in SEEDS}
        assert shown - {None, 0.0}, figure
        assert not is_text(figure) or len(shown) >= 2, figure


def test_the_second_computations_ask_nothing_of_the_modules():
    """They know the program only through the texts of units; no formula of a module is within their reach."""
    for book in BOOKS:
        source = Path(str(book.__file__)).read_text(encoding="utf-8")
        assert "rulecheck" not in source
        assert "figures_of" not in source


BEND = """
import sys
from dataclasses import replace

import pytest

from rulecheck.physics import modules

sound = modules.read_module


def bent(workspace, file):
    module = sound(workspace, file)
    figure = module.figures.get({figure!r})
    if module.name != {module!r} or figure is None:
        return module
    text = f"({{figure.formula.text}}) * {factor}"
    if figure.solve is not None:
        # A multiple has the same root: what is solved for is bent instead.
        path = figure.solve.text
        text = figure.formula.text.replace(path, f"({{path}} * {factor})")
    formula = replace(figure.formula, text=text)
    return replace(module, figures={{**module.figures, {figure!r}: replace(figure, formula=formula)}})


modules.read_module = bent
sys.exit(pytest.main(["-q", "-p", "no:cacheprovider", {test!r}]))
"""


@pytest.mark.long
@pytest.mark.parametrize("factor", ["1", "1.001"])
@pytest.mark.parametrize("held", sorted(HELD_BY))
def test_what_is_held_elsewhere_is_held(held, factor):
    """The test named passes as the figure stands, and fails when the figure is bent by a thousandth."""
    module, _, figure = held.partition(".")
    text = BEND.format(module=module, figure=figure, factor=factor, test=str(HERE / HELD_BY[held]))
    root = HERE.parents[1]
    done = subprocess.run(
        [sys.executable, "-c", text], cwd=root, env={**os.environ, "PYTHONPATH": str(root)}, capture_output=True,
        text=True, timeout=300, check=False,
    )  # fmt: skip
    assert done.returncode == (0 if factor == "1" else 1), done.stdout[-2000:] + done.stderr[-2000:]
