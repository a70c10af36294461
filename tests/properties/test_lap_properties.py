"""What must hold of any lap: more grip is never slower, longer is never quicker, mirrors change nothing, energy balances."""

from __future__ import annotations

import math
import sys
from dataclasses import replace
from pathlib import Path
from typing import Any

from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.model.solver import Argument, Estimate
from rulecheck.model.track import Segment, Track
from rulecheck.physics.lap.solver import LAP

sys.path.insert(0, str(Path(__file__).parents[1] / "outside"))
from lap_cars import GRAVITY, WHOLE, drive, estimate

QUICK = settings(max_examples=5, deadline=None)
TRIFLE = 1e-9


def between(low: float, high: float) -> st.SearchStrategy[float]:
    return st.floats(low, high, allow_nan=False).map(lambda value: round(value, 6))


@st.composite
def segments(draw: st.DrawFn) -> Segment:
    """A straight or a corner, hilly, banked, in a dip or over a crest."""
    bend = draw(st.sampled_from([0.0, 0.0, 1.0, -1.0]))
    return Segment(
        name="piece",
        length=draw(between(80, 320)),
        curvature=bend / draw(between(25, 260)),
        slope=draw(between(-0.05, 0.05)),
        banking=draw(between(-0.02, 0.1)),
        dip=1 / draw(st.sampled_from([math.inf, 700.0, -900.0])),
    )


@st.composite
def tracks(draw: st.DrawFn) -> Track:
    """A hill, or a line that is driven round and round though it closes neither in place nor in height."""
    kind = draw(st.sampled_from(["circuit", "hill"]))
    return Track("t", "t.track.yaml", kind, 100.0, 2.0, tuple(draw(st.lists(segments(), min_size=2, max_size=5))))


@st.composite
def cars(draw: st.DrawFn) -> dict[str, Argument]:
    """A car near the whole one, any axle driven, either law of the brakes."""
    numbers = {
        name: WHOLE[name] * draw(between(0.8, 1.2))  # type: ignore[operator]
        for name in (
            "mass",
            "place",
            "height",
            "front_area",
            "rear_area",
            "drag_area",
            "power",
            "front_grip",
            "rear_grip",
        )
    }
    return {
        **WHOLE,
        **numbers,
        "driven": draw(st.sampled_from(["front", "rear", "both"])),
        "distribution_law": draw(st.sampled_from(["fixed", "ideal"])),
        "distribution": draw(between(0.45, 0.7)),
        "fuel_flow": 0.0,
    }


def time_of(car: dict[str, Argument], track: Track) -> Estimate:
    return estimate(drive(car, track), "time")


@given(cars(), tracks())
@QUICK
def test_more_grip_is_never_slower(car: dict[str, Argument], track: Track) -> None:
    grippier: dict[str, Any] = {**car, "front_grip": car["front_grip"] * 1.03, "rear_grip": car["rear_grip"] * 1.03}  # type: ignore[operator]
    before, after = time_of(car, track), time_of(grippier, track)
    assert after.value <= before.value + before.bound + after.bound


@given(cars(), tracks())
@QUICK
def test_more_power_is_never_slower(car: dict[str, Argument], track: Track) -> None:
    before, after = time_of(car, track), time_of({**car, "power": car["power"] * 1.05}, track)  # type: ignore[operator]
    assert after.value <= before.value + before.bound + after.bound


@given(cars(), tracks(), st.data())
@QUICK
def test_a_longer_straight_takes_longer(car: dict[str, Argument], track: Track, data: st.DataObject) -> None:
    """Two tracks that differ in the length of one straight."""
    place = data.draw(st.integers(0, len(track.segments)))

    def with_straight(length: float) -> Track:
        return replace(track, segments=(*track.segments[:place], Segment("more", length), *track.segments[place:]))

    before, after = time_of(car, with_straight(10.0)), time_of(car, with_straight(60.0))
    assert after.value > before.value


@given(cars(), tracks())
@QUICK
def test_a_mirrored_track_takes_the_same(car: dict[str, Argument], track: Track) -> None:
    mirrored = replace(track, segments=tuple(replace(item, curvature=-item.curvature) for item in track.segments))
    assert drive(car, mirrored) == drive(car, track)


@given(cars(), tracks())
@QUICK
def test_halving_the_step_stays_within_the_bound(car: dict[str, Argument], track: Track) -> None:
    before, after = drive(car, track), drive(car, replace(track, step=track.step / 2))
    for name in ("time", "top_speed", "energy_used", "energy_braked", "energy_lost", "energy_recovered"):
        found, halved = estimate(before, name), estimate(after, name)
        assert abs(found.value - halved.value) <= found.bound + halved.bound, name


@given(cars(), tracks())
@QUICK
def test_energy_balances(car: dict[str, Argument], track: Track) -> None:
    """Work of the engine, less that of brakes, drag and rolling resistance, is what speed and height have gained."""
    found = drive(car, track)
    rise = sum(item.length * math.sin(item.slope) for item in track.segments)
    mass = car["mass"]
    assert isinstance(mass, float)
    gained = mass * GRAVITY * rise
    if track.kind == "hill":
        gained += mass * estimate(found, "finish_speed").value ** 2 / 2
    work = (
        estimate(found, "energy_used").value
        - estimate(found, "energy_braked").value
        - estimate(found, "energy_lost").value
    )
    scale = estimate(found, "energy_used").value + abs(gained) + 1
    assert abs(work - gained) <= 1e-6 * scale


@given(cars(), tracks())
@QUICK
def test_parts_make_the_whole(car: dict[str, Argument], track: Track) -> None:
    found = drive(car, track)

    def value(name: str) -> float:
        return estimate(found, name).value

    times = sum(value(f"time_{name}") for name in ("cornering", "braking", "at_grip", "at_power"))
    assert math.isclose(times, value("time"), rel_tol=TRIFLE)
    for name in ("energy_used", "energy_braked", "energy_recovered"):
        both = value(f"{name}_front") + value(f"{name}_rear")
        assert math.isclose(both, value(name), rel_tol=TRIFLE, abs_tol=1e-6)
    assert value("energy_recovered_front") == 0, "no machine stands there"
    assert value("energy_recovered") <= 0.9 * value("energy_braked_rear") * (1 + TRIFLE) + 1e-6
    assert value("energy_stored") <= value("energy_recovered")
    assert value("top_speed") >= value("average_speed")


@given(cars(), tracks())
@QUICK
def test_the_quick_run_is_the_coarse_one(car: dict[str, Argument], track: Track) -> None:
    quick, whole = LAP.run(car, track, True), drive(car, track)
    for name, answer in whole.items():
        if isinstance(answer, Estimate) and isinstance(quick[name], Estimate):
            assert abs(quick[name].value - answer.value) <= answer.bound * (1 + TRIFLE)  # type: ignore[union-attr]
