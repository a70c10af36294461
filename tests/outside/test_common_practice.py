"""Figures that are told in the trade: common practice, no source, used as test values and nowhere else.

They hold the couplings together; the physics under them has checks of its own.
"""

from __future__ import annotations

from dataclasses import replace

import pytest
from physics_cars import GRAVITY, Car, Mass, figures_of
from scipy.integrate import quad
from second_computations import Bench
from second_longitudinal import axles, own_limits, shared_limits
from whole_cars import figures_known, whole_car

HEIGHT = 0.4


def braked(front_share: float, moved: float, **numbers: float) -> Car:
    """1000 kg without air, braked so hard that a share of the weight has moved to the front."""
    given = {"dimensions.wheelbase": 2.8, "dimensions.front_ride_height": 0.0, "dimensions.rear_ride_height": 0.0}
    given |= {"vehicle.deceleration": moved * 2.8 / HEIGHT * GRAVITY, "vehicle.speed": 60.0, "air.wind": 0.0}
    given |= {"air.altitude": 0.0, "air.temperature": 288.15, "air.humidity": 0.0, **numbers}
    bare = replace(whole_car(0).surfaces[0], downforce_area=0.0, drag_area=0.0)
    return Car(given, (Mass(1000.0, 2.8 * (1 - front_share), 0.0, HEIGHT),), (bare,))


@pytest.mark.parametrize(("front_share", "over_the_machine"), [(0.7, 900), (0.4, 600)])
def test_what_stands_over_a_front_machine(tmp_path, front_share, over_the_machine):
    """Common practice, no source: of 1000 kg, 70 : 30 with 20 points moved forward puts 900 kg over a front machine,
    40 : 60 puts 600 kg."""
    figures = figures_of(tmp_path, braked(front_share, 0.2), ["load_transfer.front_axle"])
    assert figures["load_transfer.front_axle"] / GRAVITY == pytest.approx(over_the_machine, rel=1e-9)


def test_half_as_much_again_at_the_grip_of_a_front_machine(tmp_path):
    """Common practice, no source: 900 kg take half as much power as 600 kg again, while grip is what binds."""
    powers = []
    for share in (0.7, 0.4):
        numbers = {"vehicle.grip": 1.4, "recovery.gear_efficiency": 0.97, "recovery.machine_efficiency": 0.94}
        car = braked(share, 0.2, **numbers)
        car = replace(car, choices={"recovery.axle": "front"})
        powers.append(figures_of(tmp_path, car, ["recovery.front_grip_power"])["recovery.front_grip_power"])
    assert powers[0] / powers[1] == pytest.approx(1.5, rel=1e-9)


@pytest.mark.parametrize("seed", [2, 6, 10])
def test_two_machines_in_a_stop(tmp_path, seed):
    """Derived: each axle by its own limits at every speed, what they share on top, integrated over the stop."""
    car = whole_car(seed)
    assert axles(Bench(car)) == ("front", "rear")
    still = replace(car, surfaces=tuple(replace(s, downforce_area=0.0, drag_area=0.0) for s in car.surfaces))

    def power(speed: float) -> float:
        bench = Bench(replace(still, numbers={**car.numbers, "vehicle.speed": speed}))
        own = sum(min(own_limits(bench, end).values()) for end in axles(bench))
        return min(own, *shared_limits(bench).values())

    run = (car["vehicle.end_speed"], car["vehicle.speed"])
    energy = quad(power, *run, epsrel=1e-7, limit=200)[0] / car["vehicle.deceleration"]
    said = figures_known(tmp_path, car, ["recovery.stop_energy"])["recovery.stop_energy"]
    assert said == pytest.approx(energy, rel=1e-6)
