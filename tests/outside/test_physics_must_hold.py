"""What must hold of every figure of physics, whatever its formula: units, mirror, similarity, scaling and balance.

Derived throughout. Random cars that say everything, drawn by hypothesis; no figure is left out but where a test says so.
"""

from __future__ import annotations

import tempfile
from collections.abc import Iterable, Mapping
from dataclasses import replace
from decimal import Decimal
from pathlib import Path

import numpy as np
import pytest
from hypothesis import Phase, given, settings
from hypothesis import strategies as st
from physics_cars import GRAVITY, UNITS, in_si, unit_of
from second_computations import REGISTERED, Bench
from whole_cars import (
    ENDS,
    MORE_UNITS,
    SIDES,
    WholeCar,
    ask_for,
    figure_names,
    figures_known,
    is_text,
    whole_car,
)  # fmt: skip
from writing import DAY

from rulecheck import check
from rulecheck.outcome.results import Amount
from rulecheck.quantity.units import find_unit

# No shrinking: a smaller seed is no simpler car.
PHASES = (Phase.explicit, Phase.reuse, Phase.generate)
FEW = settings(max_examples=2, deadline=None, phases=PHASES)
CARS = st.integers(0, 10_000)
STATES = st.fixed_dictionaries(
    {"fuel": st.sampled_from(["empty", "full"]), "driver": st.sampled_from(["light", "heavy"])}
)
FIGURES = figure_names()
NUMBERS = tuple(figure for figure in FIGURES if not is_text(figure))


def known(
    car: WholeCar, states: Mapping[str, str] | None = None, figures: Iterable[str] = FIGURES
) -> dict[str, float | str | None]:
    """Every figure of a car in the SI, or those asked for."""
    with tempfile.TemporaryDirectory() as folder:
        return dict(figures_known(Path(folder), car, figures, states=states))


def amounts(car: WholeCar, given: Mapping[str, str] | None = None) -> dict[str, Amount | None]:
    """Every number as it is shown, with its exact value where it has one; settings laid over the car."""
    with tempfile.TemporaryDirectory() as folder:
        car.write(Path(folder))
        ask_for(Path(folder), NUMBERS, car.states)
        report = check(Path(folder) / "car.design.yaml", on=DAY, settings=given or {})
        found = {finding.name: finding for finding in report.rules}
        return {figure: found[figure.replace(".", "_")].value for figure in NUMBERS}


# --- units ------------------------------------------------------------------------------------------------------------

OTHERS: dict[str, tuple[tuple[str, str], ...]] = {
    "m": (("mm", "1000"), ("cm", "100"), ("km", "0.001")), "m/s": (("km/h", "3.6"), ("mm/s", "1000")),
    "m/s^2": (("km/(h*s)", "3.6"), ("mm/s^2", "1000")), "kg": (("gram", "1000"), ("t", "0.001")),
    "N": (("kN", "0.001"),), "N/m": (("N/mm", "0.001"), ("kN/m", "0.001")), "N*m": (("kN*m", "0.001"), ("J", "1")),
    "N*m/rad": (("N*m", "1"), ("kN*m/rad", "0.001")), "W": (("kW", "0.001"), ("N*m/s", "1")),
    "J": (("MJ", "1e-6"), ("kW*s", "0.001")), "1": (("%", "100"),), "m^2": (("cm^2", "10000"), ("mm^2", "1000000")),
    "bar absolute": (("kPa absolute", "100"), ("Pa absolute", "100000")), "kg*m^2": (("gram*m^2", "1000"),),
}  # fmt: skip


def shown(value: Decimal) -> str:
    return f"{value.normalize():f}"


def reworded(draw: st.DrawFn, car: WholeCar) -> dict[str, str]:
    """Every input of a car in another unit, as exactly the same value."""
    given = {}
    for path, number in car.numbers.items():
        unit = UNITS.get(path) or MORE_UNITS[path]
        value = Decimal(repr(float(number)))
        if unit == "K":
            given[path] = f"{shown(value - Decimal('273.15'))} degC"
        elif unit in OTHERS:
            other, factor = draw(st.sampled_from(OTHERS[unit]))
            given[path] = f"{shown(value * Decimal(factor))} {other}"
    for name, row in car.rows.items():
        other, factor = draw(st.sampled_from(OTHERS["kg"]))
        given[f"masses.{name}.mass"] = f"{shown(Decimal(repr(row.mass)) * Decimal(factor))} {other}"
        place = row.written(car["dimensions.wheelbase"], {})["at"]
        millimetres = " ".join(shown(Decimal(part) * 1000) for part in str(place).split()[:3])
        given[f"masses.{name}.at"] = f"{millimetres} mm"
    for index, surface in enumerate(car.surfaces):
        for name in ("downforce_area", "drag_area"):
            other, factor = draw(st.sampled_from(OTHERS["m^2"]))
            value = Decimal(repr(getattr(surface, name))) * Decimal(factor)
            given[f"aero_surfaces.surface{index}.{name}"] = f"{shown(value)} {other}"
    return given


def in_inches(car: WholeCar) -> tuple[WholeCar, dict[str, str]]:
    """A car near this one whose lengths are hundredths of an inch, in m and in inches (25.4 mm, agreement of 1959)."""
    numbers, given = dict(car.numbers), {}
    for path, number in car.numbers.items():
        if (UNITS.get(path) or MORE_UNITS[path]) == "m":
            inches = Decimal(round(float(number) / 0.000254)) / 100
            numbers[path] = float(inches * Decimal("0.0254"))
            given[path] = f"{shown(inches)} in"
    return replace(car, numbers=numbers), given


@FEW
@given(CARS, st.data())
def test_no_figure_changes_with_the_units_of_the_inputs(seed, data):
    """Every figure to its last digit, exactly where it is exact."""
    car = whole_car(seed)
    given = reworded(data.draw, car)
    assert len(given) > 110
    assert amounts(car, given) == amounts(car)


@FEW
@given(CARS)
def test_no_figure_changes_between_metres_and_inches(seed):
    car, given = in_inches(whole_car(seed))
    assert amounts(car, given) == amounts(car)


# --- mirror -----------------------------------------------------------------------------------------------------------

TURNED = {
    "mass.y", "weighing.y", "ballasting.shift_right", "load_transfer.lateral_moment", "load_transfer.lateral_both_axles",
    "load_transfer.roll_angle", "load_transfer.front_lateral", "load_transfer.rear_lateral", "balance.ackermann_angle",
    "balance.steer_angle",
}  # fmt: skip
"""Figures that count to the right: a mirror turns their sign."""
SIDE_SHARES = {"weighing.left_share", "weighing.cross_share"}
"""Shares of one side, or of one diagonal: a mirror shows the other's."""


TO_THE_RIGHT = {
    f"balance.{name}" for name in ("front_limit", "rear_limit", "limit", "limit_balance", "gives_way_first")
}
"""Limits in a corner to the right, whatever the corner that is driven: the mirror's car takes another one."""
IN_A_RANGE = {f"balance.{name}_speed" for name in ("loaded_critical", "loaded_characteristic", "peak_yaw_gain")} | {
    "performance.top_speed",
    "performance.level_top_speed",
}
"""Speeds sought between bounds that do not grow with a model."""


def sided(figure: str) -> str:
    """The figure of the other side."""
    for side, other in zip(SIDES, SIDES[::-1], strict=True):
        if figure.endswith(f"_{side}") and "shift" not in figure:
            return figure.removesuffix(side) + other
    return figure


@FEW
@given(CARS, STATES)
def test_a_mirrored_car_gives_mirrored_figures(seed, states):
    car = whole_car(seed)
    one, other = known(car, states), known(car.mirrored(), states)
    for figure in (figure for figure in FIGURES if figure not in TO_THE_RIGHT):
        due = other[sided(figure)]
        if isinstance(due, float):
            due = 1 - due if figure in SIDE_SHARES else -due if figure in TURNED else due
            assert one[figure] == pytest.approx(due, rel=1e-12, abs=1e-12), figure
        else:
            assert one[figure] == due, figure
    assert one["mass.y"] != 0
    assert one["load_transfer.front_left"] != pytest.approx(one["load_transfer.front_right"], rel=1e-3)


# --- similarity -------------------------------------------------------------------------------------------------------

OF_NATURE = {f"air.{name}" for name in (
    "standard_temperature", "pressure", "gravity", "gas_constant", "vapour_gas_constant", "standard_density",
    "saturation_pressure", "vapour_pressure", "density", "speed_of_sound",
)}  # fmt: skip
KEPT = {"air.altitude", "air.temperature", "air.humidity"}


def grown(unit: str) -> float:
    """By how much a value in a unit grows in a model of four times the length, by its dimension alone."""
    powers = dict(find_unit(unit).dimension.exponents)  # type: ignore[union-attr]
    return float(4 ** float(powers.get("m", 0)) * 64 ** float(powers.get("kg", 0)) * 2 ** float(powers.get("s", 0)))


def similar(car: WholeCar) -> WholeCar:
    """Four times as long, twice as fast, 64 times the mass: fall and the density of the air are what they were."""
    numbers = {}
    for path, number in car.numbers.items():
        unit = (UNITS.get(path) or MORE_UNITS[path]).removesuffix(" absolute")
        numbers[path] = number if path in KEPT else number * grown(unit)
    rows = {
        name: replace(
            row, mass=64 * row.mass, place=tuple(4 * value for value in row.place),  # type: ignore[arg-type]
            inertia=tuple(1024 * value for value in row.inertia),  # type: ignore[arg-type]
        )
        for name, row in car.rows.items()
    }  # fmt: skip
    surfaces = tuple(
        replace(s, downforce_area=16 * s.downforce_area, drag_area=16 * s.drag_area, x=4 * s.x, z=4 * s.z)
        for s in car.surfaces
    )
    larger = replace(car, numbers=numbers, surfaces=surfaces).with_rows(rows)
    x, y, z = car.piece
    return larger.placed((4 * x, 4 * y, 4 * z))


@FEW
@given(CARS)
def test_a_larger_model_is_similar(seed):
    """Froude's law of similarity (any textbook of model testing): in a model of four times the length every figure grows
    by its dimension, so none holds a length, a mass or a time of its own. What is of nature stays as it is."""
    car = whole_car(seed)
    one, other = known(car), known(similar(car))
    for figure in (figure for figure in FIGURES if figure not in IN_A_RANGE):
        value = one[figure]
        if isinstance(value, float):
            due = value * (1 if figure in OF_NATURE else grown(unit_of(figure)))
            assert other[figure] == pytest.approx(due, rel=1e-9, abs=1e-9), figure
        else:
            assert other[figure] == value, figure


# --- scaling ----------------------------------------------------------------------------------------------------------


def ratios(car: WholeCar, changed: WholeCar, figures: tuple[str, ...]) -> list[float]:
    one, other = known(car, None, figures), known(changed, None, figures)
    return [other[figure] / one[figure] for figure in figures]  # type: ignore[operator]


@FEW
@given(CARS, st.sampled_from([0.5, 2.0, 3.0]))
def test_what_goes_with_the_square_of_the_speed(seed, factor):
    """Energies, forces of the air in still air, and distances where no air slows the car."""
    car = whole_car(seed).but({"air.wind": 0.0})
    faster = car.but({name: factor * car[name] for name in ("vehicle.speed", "vehicle.end_speed")})
    squares = (
        "braking.kinetic_energy",
        "recovery.released_energy",
        "aero.downforce",
        "aero.drag",
        "aero.dynamic_pressure",
    )
    assert ratios(car, faster, squares) == pytest.approx([factor**2] * 5, rel=1e-12)  # type: ignore[arg-type]
    airless, faster = (
        replace(c, surfaces=tuple(replace(s, downforce_area=0.0, drag_area=0.0) for s in c.surfaces))
        for c in (car, faster)
    )
    stops = ("braking.stopping_distance", "braking.stopping_distance_fixed")
    assert ratios(airless, faster, stops) == pytest.approx([factor**2] * 2, rel=1e-9)  # type: ignore[arg-type]


@FEW
@given(CARS, st.sampled_from([0.5, 2.0]))
def test_what_goes_with_height_acceleration_and_mass(seed, factor):
    """Everything lifted above a plane on the ground; braked and cornered harder; every row heavier."""
    car = whole_car(seed).but({f"dimensions.{end}_ride_height": 0.0 for end in ENDS})
    lifted = car.with_rows({
        name: replace(row, place=(*row.place[:2], factor * row.place[2])) for name, row in car.rows.items()
    })  # fmt: skip
    transfers = ("load_transfer.longitudinal", "load_transfer.lateral_moment", "load_transfer.lateral_both_axles")
    assert ratios(car, lifted, transfers) == pytest.approx([factor] * 3, rel=1e-9)
    assert ratios(car, lifted, ("rollover.threshold", "rollover.static_stability_factor")) == pytest.approx(
        [1 / factor] * 2
    )
    harder = car.but({n: factor * car[n] for n in ("vehicle.deceleration", "vehicle.lateral_acceleration")})  # type: ignore[assignment]
    sides = ("load_transfer.front_lateral", "load_transfer.rear_lateral", "load_transfer.roll_angle")
    assert ratios(car, harder, transfers + sides) == pytest.approx([factor] * 6, rel=1e-9)
    heavier = car.with_rows({name: replace(row, mass=factor * row.mass) for name, row in car.rows.items()})
    assert ratios(car, heavier, ("mass.total", "mass.front_left", "load_transfer.weight")) == pytest.approx(
        [factor] * 3
    )
    assert ratios(car, heavier, ("mass.x", "mass.front_share", "mass.height", "rollover.threshold")) == pytest.approx(
        [1] * 4
    )


# --- balance ----------------------------------------------------------------------------------------------------------

PLACES = st.tuples(*[st.floats(-5, 5)] * 3)


@settings(max_examples=3, deadline=None, phases=PHASES)
@given(CARS, STATES, PLACES)
def test_forces_and_moments_of_the_car_sum_to_nothing(seed, states, about):
    """All forces on the car, with those of inertia, about any point: wheels, weight, air, brakes and side forces."""
    car = whole_car(seed)
    figures = known(car, states)
    bench = Bench(car.in_states(states))
    total, (x, y, h) = bench.car.total, bench.centre
    braked, side = car["vehicle.deceleration"], car["vehicle.lateral_acceleration"]
    # The body leans: its weight has moved out to the left in a corner to the right, and that is part of the wheel loads.
    lean = float(figures["load_transfer.roll_angle"]) * float(figures["load_transfer.roll_arm"])  # type: ignore[arg-type]
    forces = [((x, y, h), (-total * braked, -total * side, -total * GRAVITY))]
    forces += [
        ((s.x, 0.0, bench.car.ground(s.x, s.z)), (drag, 0.0, -down))
        for s, down, drag in bench.car.air_forces(bench.density, bench.air_speed)
    ]
    places = {
        f"{end}_{wheel}": (along, out * car[f"dimensions.{end}_track"] / 2, 0.0)
        for end, along in zip(ENDS, (0.0, bench.wheelbase), strict=True)
        for wheel, out in zip(SIDES, (-1, 1), strict=True)
    }
    forces += [(place, (0.0, 0.0, figures[f"load_transfer.{wheel}"])) for wheel, place in places.items()]  # type: ignore[misc]
    # At the ground: what the tyres give along and across. They have no moment in roll or pitch about the ground line.
    forces += [((0.0, 0.0, 0.0), (figures["braking.tyre_force"], total * side, 0.0))]  # type: ignore[list-item]
    force = np.sum([f for _, f in forces], axis=0)
    moment = np.sum([np.cross(np.subtract(p, about), f) for p, f in forces], axis=0)
    moment[0] += bench.body[0] * GRAVITY * lean
    size = total * GRAVITY
    assert force == pytest.approx([0, 0, 0], abs=1e-8 * size)
    assert moment[:2] == pytest.approx([0, 0], abs=1e-7 * size)


@FEW
@given(CARS, STATES)
def test_side_forces_turn_nothing(seed, states):
    """In a steady corner the axles' side forces balance the mass in force and in yaw."""
    car = whole_car(seed)
    figures = known(car, states)
    bench = Bench(car.in_states(states))
    given_ = [figures[f"balance.{end}_grip_use"] * figures[f"tyre.{end}_grip_force"] for end in ENDS]  # type: ignore[operator]
    due = bench.car.total * abs(car["vehicle.lateral_acceleration"])
    assert sum(given_) == pytest.approx(due, rel=1e-9)
    assert given_[1] * bench.wheelbase == pytest.approx(due * bench.centre[0], rel=1e-9)


@FEW
@given(CARS, STATES)
def test_power_and_energy_are_accounted_for(seed, states):
    """No more comes to the bus than each limit lets through, nor to the store than a stop gives up."""
    figures = known(whole_car(seed), states)
    power = figures["recovery.bus_power"]
    limits = [figures[f"recovery.{name}_power"] for name in ("own", "demand", "rule", "store")]
    assert power == pytest.approx(min(limits), rel=1e-12)  # type: ignore[type-var]
    assert power == pytest.approx(figures["recovery.front_bus_power"] + figures["recovery.rear_bus_power"], rel=1e-12)  # type: ignore[operator]
    stored = figures["recovery.stored_energy"]
    if stored is not None:
        assert 0 <= stored <= figures["recovery.stop_energy"] <= figures["recovery.released_energy"]  # type: ignore[operator]
        assert (stored > 0) == (whole_car(seed).choices["recovery.axle"] != "none")  # type: ignore[operator]


def test_the_units_tried_are_other_spellings():
    """Each alternative is the same value: its factor against the table of units."""
    for unit, others in OTHERS.items():
        for other, factor in others:
            pair = [find_unit(name.removesuffix(" absolute")) for name in (unit, other)]
            assert (
                pair[0].factor
                == pair[1].factor * Decimal(factor).as_integer_ratio()[0] / Decimal(factor).as_integer_ratio()[1]
            )
    assert {in_si(figure) for figure in NUMBERS} >= {1.0, 1e-3, 1e3}
    assert set(REGISTERED) <= set(FIGURES)
