"""The lap against closed forms: circles, banks, crests, straights at constant power, single stops.

Each is the motion of a point mass, or of a car with two axles, as any textbook of mechanics derives it; the derivation
stands beside the check.
"""

from __future__ import annotations

import math

import pytest
from lap_cars import GRAVITY, POINT, bend, drive, estimate, is_near, straight, track

MU = 1.4
RADIUS = 80.0
CIRCLE = track(bend(RADIUS, 2 * math.pi))


def test_a_circle_is_driven_at_the_speed_of_its_grip() -> None:
    """m v²/R = mu m g."""
    found = drive(POINT, CIRCLE)
    speed = math.sqrt(MU * GRAVITY * RADIUS)
    assert is_near(estimate(found, "time"), 2 * math.pi * RADIUS / speed)
    assert is_near(estimate(found, "least_speed"), speed)
    assert is_near(estimate(found, "top_speed"), speed)
    assert found["limit"] == "grip in corners"


def test_a_circle_with_downforce() -> None:
    """m v²/R = mu (m g + rho C v²/2), the downforce shared by the axles as the mass is."""
    area, share = 3.0, 1.6 / 2.9
    found = drive(POINT, CIRCLE, front_area=area * (1 - share), rear_area=area * share)
    density = 1.2 * (1 - 0.0065 * 100 / 288.15) ** (GRAVITY / (0.0065 * 287.05287) - 1)
    squared = MU * GRAVITY * RADIUS / (1 - MU * density * area * RADIUS / (2 * 900))
    assert is_near(estimate(found, "least_speed"), math.sqrt(squared))


@pytest.mark.parametrize("angle", [-8.0, 0.0, 12.0, 25.0])
def test_a_banked_circle(angle: float) -> None:
    """v² = g R (sin b + mu cos b)/(cos b - mu sin b), balance along and across the plane of the road."""
    bank = math.radians(angle)
    found = drive(POINT, track(bend(RADIUS, 2 * math.pi, banking=bank)))
    sine, cosine = math.sin(bank), math.cos(bank)
    squared = GRAVITY * RADIUS * (sine + MU * cosine) / (cosine - MU * sine)
    assert is_near(estimate(found, "least_speed"), math.sqrt(squared))


@pytest.mark.parametrize("vertical", [-300.0, 250.0])
def test_a_corner_over_a_crest_or_in_a_dip(vertical: float) -> None:
    """v²/R = mu (g + v²/Rv), Rv negative over a crest."""
    found = drive(POINT, track(bend(RADIUS, 2 * math.pi, dip=1 / vertical)))
    squared = MU * GRAVITY / (1 / RADIUS - MU / vertical)
    assert is_near(estimate(found, "least_speed"), math.sqrt(squared))


def test_drag_in_a_circle_takes_its_part_of_the_circle_of_grip() -> None:
    """One driven axle: (drag)² + (m x/L v²/R)² = (mu m g x/L)², no height, no downforce."""
    share = 1.6 / 2.9
    found = drive(POINT, CIRCLE, driven="rear", drag_area=1.5, altitude=100.0)
    drag, side, limit = 1.2 * 1.5 / 2, 900 * share / RADIUS, MU * 900 * GRAVITY * share
    assert is_near(estimate(found, "least_speed"), math.sqrt(limit / math.hypot(drag, side)))


def test_a_standing_start_at_grip_and_then_at_constant_power() -> None:
    """a = mu g up to v1 = P/(m a), then m v dv/dt = P: v³ = v1³ + 3 P (s - s1)/m, t = t1 + m (v² - v1²)/(2 P)."""
    length, power = 600.0, 300e3
    found = drive(POINT, track(straight(length), kind="hill"), power=power)
    push = MU * GRAVITY
    first = power / (900 * push)
    end = (first**3 + 3 * power / 900 * (length - first**2 / (2 * push))) ** (1 / 3)
    time = first / push + 900 * (end**2 - first**2) / (2 * power)
    assert is_near(estimate(found, "time"), time)
    assert is_near(estimate(found, "finish_speed"), end)
    assert is_near(estimate(found, "time_at_grip"), first / push)
    assert is_near(estimate(found, "energy_used"), 900 * end**2 / 2)
    assert found["limit"] == "power"


def test_top_speed_where_drag_eats_the_power() -> None:
    """P = rho C v³/2 far behind the start of a long circle."""
    found = drive(POINT, track(bend(3000.0, 2 * math.pi)), power=250e3, drag_area=1.1, altitude=100.0)
    assert is_near(estimate(found, "top_speed"), (2 * 250e3 / (1.2 * 1.1)) ** (1 / 3))
    assert found["limit"] == "power"


@pytest.mark.parametrize(
    ("driven", "push"),
    [
        # Gillespie 1992: rear a = mu g (x/L)/(1 - mu h/L), front a = mu g (1 - x/L)/(1 + mu h/L).
        ("rear", MU * GRAVITY * (1.6 / 2.9) / (1 - MU * 0.3 / 2.9)),
        ("front", MU * GRAVITY * (1.3 / 2.9) / (1 + MU * 0.3 / 2.9)),
        ("both", MU * GRAVITY),
    ],
)
def test_a_standing_start_by_driven_axle(driven: str, push: float) -> None:
    found = drive(POINT, track(straight(200.0), kind="hill"), driven=driven, height=0.3)
    assert is_near(estimate(found, "time"), math.sqrt(2 * 200 / push))
    assert is_near(estimate(found, "finish_speed"), math.sqrt(2 * 200 * push))


@pytest.mark.parametrize(
    ("changes", "slow"),
    [
        ({"distribution_law": "ideal"}, MU * GRAVITY),
        # Limpert: the front locks at mu g (1 - x/L)/(b - mu h/L), the rear at mu g (x/L)/(1 - b + mu h/L).
        ({"distribution_law": "fixed", "distribution": 0.75}, MU * GRAVITY * (1.3 / 2.9) / (0.75 - MU * 0.3 / 2.9)),
        ({"distribution_law": "fixed", "distribution": 0.4}, MU * GRAVITY * (1.6 / 2.9) / (0.6 + MU * 0.3 / 2.9)),
    ],
)
def test_one_stop_before_a_corner(changes: dict[str, float | str], slow: float) -> None:
    """Up at a, down at d to the speed of the corner: vp² = (2 a d L + a vc²)/(a + d), from v² = 2 a s."""
    length, push = 400.0, MU * GRAVITY
    corner = math.sqrt(MU * GRAVITY * 50)
    found = drive(POINT, track(straight(length), bend(50, math.pi / 2), kind="hill"), height=0.3, **changes)
    peak = math.sqrt((2 * push * slow * length + push * corner**2) / (push + slow))
    time = peak / push + (peak - corner) / slow + 25 * math.pi / corner
    assert is_near(estimate(found, "top_speed"), peak)
    assert is_near(estimate(found, "time"), time)
    assert is_near(estimate(found, "time_braking"), (peak - corner) / slow)
    assert is_near(estimate(found, "energy_braked"), 900 * (peak**2 - corner**2) / 2)
    if changes["distribution_law"] == "fixed":
        front = estimate(found, "energy_braked_front").value / estimate(found, "energy_braked").value
        assert front == pytest.approx(changes["distribution"], rel=1e-9)


def test_uphill_gravity_takes_its_part() -> None:
    """All wheels driven uphill: a = g (mu cos t - sin t)."""
    slope = math.atan(0.15)
    found = drive(POINT, track(straight(150.0, slope=slope), kind="hill"))
    push = GRAVITY * (MU * math.cos(slope) - math.sin(slope))
    assert is_near(estimate(found, "time"), math.sqrt(300 / push))


def test_a_slope_too_steep_is_said() -> None:
    with pytest.raises(ValueError, match="the car does not hold on 'straight' at rest"):
        drive(POINT, track(straight(150.0, slope=1.0), kind="hill"))
    with pytest.raises(ValueError, match="comes to a stand on 'straight'"):
        drive(POINT, track(straight(20.0), straight(400.0, slope=0.2), kind="hill"), power=0.0)


def test_fuel_burns_with_the_work_of_the_engine() -> None:
    """Flow at full power over the time at full power, less where grip holds: flow/P per work done."""
    power, flow = 300e3, 0.05
    found = drive(POINT, track(straight(900.0), kind="hill"), power=power, fuel_flow=flow)
    assert estimate(found, "fuel_used").value == pytest.approx(
        flow / power * estimate(found, "energy_used").value, rel=1e-9
    )
    assert (
        estimate(found, "time").value
        < estimate(drive(POINT, track(straight(900.0), kind="hill"), power=power), "time").value
    )


def test_recovery_of_one_stop() -> None:
    """The machine's own power binds all the way: E = P t; where the torque binds, E = F s."""
    on = track(straight(400.0), bend(50, math.pi / 2), kind="hill")
    machine = {
        "to_bus": 0.9, "machine": 60e3, "front_force": 9e9, "rear_force": 0.0, "rule": 9e9, "store_power": 9e9,
        "store_efficiency": 0.5, "store_room": 9e9, "store_allowance": 9e9,
    }  # fmt: skip
    found = drive(POINT, on, **machine)
    braking = estimate(found, "time_braking").value
    assert estimate(found, "energy_recovered_front").value == pytest.approx(60e3 * braking, rel=1e-4)
    assert estimate(found, "energy_recovered_rear").value == 0
    assert estimate(found, "energy_stored").value == pytest.approx(30e3 * braking, rel=1e-4)
    slow, corner, top = MU * GRAVITY, MU * GRAVITY * 50, estimate(found, "top_speed").value
    distance = (top**2 - corner) / (2 * slow)
    held = drive(POINT, on, **{**machine, "machine": 9e9, "front_force": 0.0, "rear_force": 800.0})
    assert estimate(held, "energy_recovered_rear").value == pytest.approx(800 * distance, rel=1e-4)
    ruled = drive(POINT, on, **{**machine, "rear_force": 9e9, "rule": 70e3})
    halves = (estimate(ruled, "energy_recovered_front").value, estimate(ruled, "energy_recovered_rear").value)
    assert halves == (pytest.approx(35e3 * braking, rel=1e-4), pytest.approx(35e3 * braking, rel=1e-4))
    assert estimate(drive(POINT, on, **{**machine, "store_room": 1e5}), "energy_stored").value == 1e5
