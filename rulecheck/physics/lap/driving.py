"""A lap from its arguments: the track driven with coarse and with halved steps, and what the difference says."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from rulecheck.model.solver import Answer, Argument, Estimate, NoAnswer
from rulecheck.model.track import Track
from rulecheck.physics.handed import number
from rulecheck.physics.lap.car import Car, car_of
from rulecheck.physics.lap.passes import run
from rulecheck.physics.lap.road import pieces_of
from rulecheck.physics.lap.tally import Recovery, Tally, tally_of

LEAST_BOUND = 1e-6
"""No bound is stated below this share of the value, however little halving the step changes."""
_RECOVERY = ("to_bus", "machine", "front_force", "rear_force", "rule", "store_power")


@dataclass(frozen=True, slots=True)
class Store:
    """What holds back the energy of a lap on its way from the DC bus: efficiency, room and allowance at the store in J."""

    efficiency: float
    room: float
    allowance: float


def drive(values: Mapping[str, Argument], track: Track | None, quick: bool) -> dict[str, Answer]:
    """The outputs of the lap by name. With `quick` one run with coarse steps, without bounds.

    Raises `ValueError` where the car cannot be, or cannot get round.
    """
    assert track is not None
    car, recovery = car_of(values), _recovery(values)
    coarse, masses = _settled(car, track, recovery)
    store = _store(values)
    rough = _outputs(coarse, track, store)
    fine = rough if quick else _outputs(_lap(car, track, recovery, masses, 1), track, store)
    answers = {name: _between(value, rough.get(name)) for name, value in fine.items()}
    if "least_speed" not in answers:
        answers["least_speed"] = answers["slowest_place"] = NoAnswer("no corner holds the car back")
    return {**answers, "limit": _most(answers), "distance": Estimate(track.length, 0.0)}


def _settled(car: Car, track: Track, recovery: Recovery | None) -> tuple[Tally, Sequence[float]]:
    """A coarse lap, and the mass of the car on each piece of the track: fuel burns as the engine works."""
    count = len(pieces_of(track, car, 2 * track.step))
    masses: Sequence[float] = [car.mass] * count
    found = _lap(car, track, recovery, masses, 0)
    if car.fuel_flow:
        before = [0.0, *found.burnt[:-1]]
        masses = [car.mass - (start + end) / 2 for start, end in zip(before, found.burnt, strict=True)]
        if min(masses) <= 0:
            raise ValueError("the car burns more than it weighs")
        found = _lap(car, track, recovery, masses, 0)
    return found, masses


def _lap(car: Car, track: Track, recovery: Recovery | None, masses: Sequence[float], halvings: int) -> Tally:
    closed = track.kind == "circuit"
    stretches = run(car, pieces_of(track, car, 2 * track.step, halvings), masses, closed=closed)
    burn = car.fuel_flow / car.power if car.power > 0 else 0.0
    return tally_of(stretches, recovery, burn, closed=closed)


def _recovery(values: Mapping[str, Argument]) -> Recovery | None:
    if any(values[name] is None for name in _RECOVERY):
        return None
    return Recovery(*(number(values, name) for name in _RECOVERY))


def _store(values: Mapping[str, Argument]) -> Store | None:
    if any(values[name] is None for name in ("store_efficiency", "store_room", "store_allowance")):
        return None
    return Store(*(number(values, name) for name in ("store_efficiency", "store_room", "store_allowance")))


def _outputs(tally: Tally, track: Track, store: Store | None) -> dict[str, float | str]:
    """Numbers in SI units, and names of places."""
    recovered = tally.recovered_front + tally.recovered_rear
    found: dict[str, float | str] = {
        "time": tally.time,
        "average_speed": track.length / tally.time,
        "top_speed": math.sqrt(tally.top),
        "finish_speed": math.sqrt(tally.end),
        "energy_used": tally.used_front + tally.used_rear,
        "energy_used_front": tally.used_front,
        "energy_used_rear": tally.used_rear,
        "energy_braked": tally.braked_front + tally.braked_rear,
        "energy_braked_front": tally.braked_front,
        "energy_braked_rear": tally.braked_rear,
        "energy_lost": tally.lost,
        "energy_recovered": recovered,
        "energy_recovered_front": tally.recovered_front,
        "energy_recovered_rear": tally.recovered_rear,
        "energy_stored": min(recovered * store.efficiency, store.room, store.allowance) if store else math.nan,
        "fuel_used": tally.burnt[-1],
        "time_cornering": tally.cornering,
        "time_braking": tally.braking,
        "time_at_grip": tally.traction,
        "time_at_power": tally.at_power,
        "fastest_place": track.segments[tally.top_place].name,
        "slowest_place": track.segments[tally.least_place].name,
    }
    if not math.isinf(tally.least):
        found["least_speed"] = math.sqrt(tally.least)
    else:
        del found["slowest_place"]
    return found


def _between(fine: float | str, rough: float | str | None) -> Answer:
    """A value with what halving the step changed; a place only where both runs find it."""
    if isinstance(fine, str):
        return fine if fine == rough else NoAnswer("two places are too alike to tell which it is")
    if not isinstance(rough, float):
        return NoAnswer("the coarse run and the fine one do not agree")
    return Estimate(fine, abs(fine - rough) + LEAST_BOUND * abs(fine))


_LIMITS = {
    "time_cornering": "grip in corners",
    "time_braking": "grip under braking",
    "time_at_grip": "grip under power",
    "time_at_power": "power",
}


def _most(answers: Mapping[str, Answer]) -> Answer:
    """The limit that holds for the longest time, where it does so by more than the bounds."""
    times = [(answer, word) for name, word in _LIMITS.items() if isinstance(answer := answers[name], Estimate)]
    (first, word), (second, _), *_ = sorted(times, key=lambda item: -item[0].value)
    if first.value - second.value <= first.bound + second.bound:
        return NoAnswer("two limits hold for as long")
    return word
