"""Envelopes against published lines and ranges, and against a dense sampling that shares no code with the proof."""

from __future__ import annotations

import random
from fractions import Fraction

import pytest
from small_files import margin, only

from rulecheck.outcome.results import Finding

# UN Regulation No. 13, Annex 10, as restated in D. A. Crolla (ed.), Automotive Engineering: Powertrain, Chassis System and
# Vehicle Body, Elsevier 2009, chapter 12.1: for coefficients of friction k from 0.2 to 0.8 the braking rate is at least
# z = 0.1 + 0.85 (k - 0.2), so that no axle uses more grip than (z + 0.07) / 0.85; for cars the front axle uses more grip
# than the rear one for every z from 0.15 to 0.8. The line is as read there, the range of z of the order rule from memory.
INPUTS = """\
inputs:
  car.front_share: {unit: "1", meaning: Share of the weight on the front axle at rest}
  car.height_share: {unit: "1", meaning: Height of the centre of gravity over the wheelbase}
  car.brake_share: {unit: "1", meaning: Share of the brake force at the front axle}
  car.rate: {unit: "1", meaning: Braking rate}
derived:
  front_use: {formula: car.brake_share * car.rate / (car.front_share + car.rate * car.height_share), unit: "1"}
  rear_use: {formula: (1 - car.brake_share) * car.rate / (1 - car.front_share - car.rate * car.height_share), unit: "1"}
rules:
  it:
    envelope: {car.rate: [%s, %s]}
    require: %s
"""
LINE = "front_use <= (car.rate + 0.07) / 0.85 and rear_use <= (car.rate + 0.07) / 0.85"
ORDER = "front_use > rear_use"


def judged(car: tuple[Fraction, Fraction, Fraction], low: str, high: str, require: str) -> Finding:
    names = ("front_share", "height_share", "brake_share")
    stated = ", ".join(f"{name}: {float(value)}" for name, value in zip(names, car, strict=True))
    return only(f"car: {{{stated}}}\n", INPUTS % (low, high, require))


def uses(car: tuple[Fraction, Fraction, Fraction], z: Fraction) -> tuple[Fraction, Fraction]:
    """Grip used by each axle, from the moments about the contact of the other one."""
    share, height, brake = car
    return brake * z / (share + z * height), (1 - brake) * z / (1 - share - z * height)


def test_the_published_line_is_met_by_a_car_that_brakes_with_equal_grip() -> None:
    # Ideal share at z = 0.5: both axles then use exactly z there, and the line leaves (z + 0.07) / 0.85 - z.
    for k, z in (("0.2", "0.1"), ("0.4", "0.27"), ("0.6", "0.44"), ("0.8", "0.61")):
        assert Fraction(k) == (Fraction(z) + Fraction("0.07")) / Fraction("0.85")
    car = (Fraction("0.5"), Fraction("0.2"), Fraction("0.6"))
    assert uses(car, Fraction(1, 2)) == (Fraction(1, 2), Fraction(1, 2))
    assert judged(car, "0.1", "0.61", LINE).verdict == "complies"


def test_the_order_of_locking_turns_where_both_axles_lock_together() -> None:
    # The worked vehicle of the same chapter: both lock together at 0.52 g (shares partly fitted, from memory).
    car = (Fraction("0.65"), Fraction("0.47") / Fraction("2.45"), Fraction("0.75"))
    stated = (car[0], Fraction(str(float(car[1]))), car[2])
    assert judged(stated, "0.15", "0.521", ORDER).verdict == "complies"
    found = judged(stated, "0.15", "0.8", ORDER)
    assert found.verdict == "breach"
    assert found.binding is not None
    assert found.binding.at["car.rate"].exact == "0.8"
    assert judged(stated, "0.15", "0.522", ORDER).verdict == "breach"


@pytest.mark.parametrize("require", [LINE, ORDER])
def test_cars_at_random_against_a_dense_sampling(require: str) -> None:
    chance = random.Random(20270301)
    for _ in range(12):
        car = tuple(Fraction(chance.randint(low, high), 1000) for low, high in ((420, 560), (120, 220), (500, 720)))
        assert len(car) == 3
        low, high = ("0.1", "0.61") if require == LINE else ("0.15", "0.8")
        start, end = Fraction(low), Fraction(high)
        rooms = []
        for step in range(801):
            z = start + (end - start) * step / 800
            front, rear = uses(car, z)
            limit = (z + Fraction(7, 100)) / Fraction(85, 100)
            rooms.append(min(limit - front, limit - rear) if require == LINE else front - rear)
        found = judged(car, low, high, require)
        met = min(rooms) >= 0 if require == LINE else min(rooms) > 0
        assert found.verdict == ("complies" if met else "breach"), (car, found.reason)


@pytest.mark.parametrize(
    ("formula", "ends", "least", "greatest"),
    [
        # Ranges by hand: R. E. Moore, R. B. Kearfott, M. J. Cloud, Introduction to Interval Analysis, SIAM 2009, shows the
        # first as one that plain interval arithmetic gives too wide (from memory).
        ("car.rate - car.rate", ("0", "1"), "0", "0"),
        ("car.rate / (1 + car.rate)", ("0", "3"), "0", "0.75"),
        ("car.rate^3 - car.rate", ("1", "2"), "0", "6"),
    ],
)
def test_ranges_by_hand_are_met_exactly(formula: str, ends: tuple[str, str], least: str, greatest: str) -> None:
    car = (Fraction("0.5"), Fraction("0.2"), Fraction("0.6"))
    for limit, sign in ((least, ">="), (greatest, "<=")):
        found = judged(car, *ends, f"{formula} {sign} {limit} + 0 * car.front_share")
        assert (found.verdict, margin(found)) == ("complies", 0)
        strict = judged(car, *ends, f"{formula} {sign[0]} {limit} + 0 * car.front_share")
        assert strict.verdict == "breach"


def test_a_greatest_value_inside_of_the_range_is_enclosed() -> None:
    # x (1 - x) is greatest at one half; plain interval arithmetic over the whole range gives 1 (Moore, as above).
    car = (Fraction("0.5"), Fraction("0.2"), Fraction("0.6"))
    for limit, verdict in (("0.250000001", "complies"), ("0.249999999", "breach")):
        found = judged(car, "0", "1", f"car.rate * (1 - car.rate) <= {limit} + 0 * car.front_share")
        assert found.verdict == verdict
        assert found.binding is not None
        assert found.binding.at["car.rate"].exact == "0.5"
