"""The stop at grip that falls with load against equations of motion of scipy, and against closed forms.

Derived: loads and deceleration from the balances as a system that scipy solves, the motion run in time.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from datetime import date
from pathlib import Path

import numpy as np
import pytest
from scipy.integrate import solve_ivp
from scipy.optimize import brentq

from rulecheck import workings
from rulecheck.model.solver import Argument, Estimate
from rulecheck.physics.stop.braking import stop
from rulecheck.physics.stop.solver import STOP

GRAVITY = 9.80665
DEMO = Path(__file__).parents[2] / "designs_demo" / "marram-p2.design.yaml"
CAR: Mapping[str, Argument] = {
    "mass": 930.0, "place": 1.62, "height": 0.31, "wheelbase": 2.86, "front_area": 1.35, "rear_area": 2.1,
    "drag_area": 0.95, "density": 1.18, "speed": 75.0, "end_speed": 18.0, "front_grip": 1.55, "rear_grip": 1.62,
    "front_fade": 0.12, "rear_fade": 0.1, "front_load": 4000.0, "rear_load": 4500.0, "distribution": 0.62,
    "distribution_law": "fixed",
}  # fmt: skip


def number(car: Mapping[str, Argument], name: str) -> float:
    value = car[name]
    assert isinstance(value, float)
    return value


def slows(car: Mapping[str, Argument], v: float) -> float:
    """The deceleration at which the wheels are at their grip, searched for."""
    n = {name: value for name, value in car.items() if isinstance(value, float)}
    pressure = n["density"] * v * v / 2

    def grips(rate: float) -> np.ndarray:
        """Both greatest forces, loads from the two balances."""
        weight, down = n["mass"] * GRAVITY, pressure * (n["front_area"] + n["rear_area"])
        turning = weight * n["place"] - n["mass"] * rate * n["height"] + pressure * n["rear_area"] * n["wheelbase"]
        loads = np.linalg.solve([[1, 1], [0, n["wheelbase"]]], [weight + down, turning])
        wheels = loads / 2
        data = np.array([n["front_load"], n["rear_load"]])
        grip = np.array([n["front_grip"], n["rear_grip"]])
        fade = np.array([n["front_fade"], n["rear_fade"]])
        return 2 * wheels * grip * (1 - fade * (wheels - data) / data)

    def room(rate: float) -> float:
        asked = n["mass"] * rate - pressure * n["drag_area"]
        share = np.array([n["distribution"], 1 - n["distribution"]])
        given = grips(rate)
        return float(given.sum() - asked if car["distribution_law"] == "ideal" else min(given - share * asked))

    return float(brentq(room, 0.0, 45.0, xtol=1e-12))


def run(car: Mapping[str, Argument]) -> tuple[float, float]:
    """Distance and time of the motion."""
    end = number(car, "end_speed")

    def slow_enough(_: float, state: np.ndarray) -> float:
        return float(state[1] - end)

    slow_enough.terminal = True  # type: ignore[attr-defined]
    found = solve_ivp(
        lambda _, state: [state[1], -slows(car, state[1])], (0.0, 60.0), [0.0, number(car, "speed")],
        rtol=1e-9, atol=1e-8, events=slow_enough, max_step=0.2,
    )  # fmt: skip
    return float(found.y_events[0][0][0]), float(found.t_events[0][0])


def held(answer: object, due: float) -> bool:
    """Whether a value lies within its bound of what is due, and the bound is small."""
    assert isinstance(answer, Estimate), answer
    assert answer.bound < 1e-4 * answer.value
    return abs(answer.value - due) <= answer.bound + 1e-8 * due


CASES: tuple[Mapping[str, Argument], ...] = (
    {},
    {"distribution_law": "ideal"},
    {"distribution": 0.5},
    {"distribution": 0.575, "rear_area": 3.0},
    {"end_speed": 0.0, "front_area": 0.0, "rear_area": 0.0, "drag_area": 0.0},
    {"front_fade": 0.3, "rear_fade": 0.25},
)


@pytest.mark.parametrize("changes", CASES)
def test_against_the_motion(changes: Mapping[str, Argument]) -> None:
    car = {**CAR, **changes}
    found = stop(car, None, False)
    distance, time = run(car)
    assert held(found["distance"], distance)
    assert held(found["time"], time)
    assert held(found["deceleration"], slows(car, number(car, "speed")))
    assert held(found["end_deceleration"], slows(car, number(car, "end_speed")))


def test_the_axle_that_locks_first_changes_on_the_way() -> None:
    firsts = set()
    for share in np.linspace(0.55, 0.7, 31):
        found = stop({**CAR, "distribution": float(share)}, None, True)
        firsts.add((found["locks_first"], found["locks_first_at_end"]))
    assert {("front", "front"), ("rear", "rear")} < firsts


def test_without_fade_the_closed_form_comes_back() -> None:
    """s = ln((a + b v1²)/(a + b v2²))/(2 b), ideal distribution, the same grip on both axles."""
    car = {**CAR, "distribution_law": "ideal", "front_fade": 0.0, "rear_fade": 0.0, "rear_grip": 1.55}
    start, slope = 1.55 * GRAVITY, 1.18 * (1.55 * (1.35 + 2.1) + 0.95) / (2 * 930)
    due = math.log((start + slope * 75.0**2) / (start + slope * 18.0**2)) / (2 * slope)
    assert held(stop(car, None, False)["distance"], due)


def test_more_fade_above_the_load_of_the_data_takes_a_longer_way() -> None:
    far = [stop({**CAR, "front_fade": fade, "front_load": 2500.0}, None, False)["distance"] for fade in (0.0, 0.1, 0.2)]
    values = [answer.value for answer in far if isinstance(answer, Estimate)]
    assert values == sorted(values)
    assert len(set(values)) == 3


@pytest.mark.parametrize(
    ("changes", "told"),
    [
        ({"height": 1.4}, "rear wheels leave the ground"),
        ({"front_fade": 0.9, "front_load": 1500.0}, "no grip"),
        ({"front_fade": 0.5, "front_load": 2000.0}, "front wheels is beyond"),
        ({"end_speed": 80.0}, "end speed is not between"),
        ({"mass": 0.0}, "mass is not positive"),
        ({"distribution": 1.0}, "one axle has no brakes"),
        ({"front_fade": -0.1}, "grows with load"),
        ({"speed": None}, "speed is not known"),
    ],
)
def test_what_cannot_be_is_refused(changes: Mapping[str, Argument], told: str) -> None:
    with pytest.raises(ValueError, match=told):
        stop(
            {**CAR, "distribution_law": "ideal", **changes} if "height" in changes else {**CAR, **changes}, None, False
        )


def test_every_input_and_output_is_named() -> None:
    assert {item.name for item in STOP.inputs} == set(CAR)
    assert {item.name for item in STOP.outputs} == set(stop(CAR, None, True))


def test_at_constant_grip_a_design_has_the_closed_form_of_its_two_pieces() -> None:
    """The module `braking` has the distance at constant grip and fixed distribution in closed form."""
    names = ["stop.distance", "braking.stopping_distance_fixed", "stop.deceleration", "braking.lock_deceleration"]
    found = workings(DEMO, names, on=date(2027, 3, 1), settings={"vehicle.speed": "240 km/h"})
    figures = [float(item.steps[-1].result.split()[0]) for item in found.items]
    assert len(figures) == 4
    assert figures[0] == pytest.approx(figures[1], rel=1e-5)
    assert figures[2] == pytest.approx(figures[3], rel=1e-5)
