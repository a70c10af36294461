"""What adds up along the track: time, energies by axle, recovery, fuel, and which limit held for how long."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from itertools import pairwise

from rulecheck.physics.lap.passes import Stretch

_SHORTEST = 1e-12
"""A part of a step that is shorter than this share of it is left out."""
_ALIKE = 1e-9
Part = tuple[float, float, float, str]
"""A part of a step: its length in m, u at both ends, and what limits it: `corner`, `brake` or `drive`."""


@dataclass(frozen=True, slots=True)
class Recovery:
    """The machines: powers in W and forces in N, all referred to the DC bus; a force of 0 where no machine stands."""

    to_bus: float
    machine: float
    front_force: float
    rear_force: float
    rule: float
    store: float

    def power(self, front: float, rear: float, speed: float) -> tuple[float, float]:
        """Power at the DC bus from the brake forces of both axles; what both share is split as they could give."""
        ours = [
            min(force * speed * self.to_bus, self.machine, torque * speed) if torque > 0 else 0.0
            for force, torque in ((front, self.front_force), (rear, self.rear_force))
        ]
        both = sum(ours)
        kept = min(both, self.rule, self.store) / both if both > 0 else 0.0
        return max(0.0, ours[0] * kept), max(0.0, ours[1] * kept)


@dataclass(slots=True)
class Tally:
    """Sums over a lap: times in s, energies in J, masses in kg, speeds as their squares; `burnt` up to the end of each
    stretch."""

    closed: bool
    time: float = 0.0
    cornering: float = 0.0
    braking: float = 0.0
    traction: float = 0.0
    at_power: float = 0.0
    used_front: float = 0.0
    used_rear: float = 0.0
    braked_front: float = 0.0
    braked_rear: float = 0.0
    lost: float = 0.0
    recovered_front: float = 0.0
    recovered_rear: float = 0.0
    burnt: list[float] = field(default_factory=list)
    top: float = 0.0
    top_place: int = 0
    least: float = math.inf
    least_place: int = 0
    end: float = 0.0


def tally_of(stretches: Sequence[Stretch], recovery: Recovery | None, fuel_per_work: float, *, closed: bool) -> Tally:
    """The sums over a profile. `fuel_per_work` in kg/J of work at the driven wheels.

    The least speed of a track that is not closed is that in its corners: it begins at rest.
    """
    tally = Tally(closed=closed)
    for stretch in stretches:
        for place in range(len(stretch.drive)):
            for part in _parts(stretch, place):
                _add(tally, stretch, part, stretch.at_grip[place], recovery)
        tally.burnt.append(fuel_per_work * (tally.used_front + tally.used_rear))
    return tally


def _parts(stretch: Stretch, place: int) -> Iterator[Part]:
    """A step under the lowest of three lines: drive, brakes, corner; cut where two of them cross."""
    (f0, f1), (b0, b1), cap = stretch.drive[place], stretch.brake[place], stretch.cap
    step = stretch.forces.piece.step
    if cap <= f0 and cap <= b0 and cap <= f1 and cap <= b1:
        yield step, cap, cap, "corner"
    elif f0 <= b0 and f1 <= b1 and f0 <= cap and f1 <= cap:
        yield step, f0, f1, "drive"
    elif b0 <= f0 and b1 <= f1 and b0 <= cap and b1 <= cap:
        yield step, b0, b1, "brake"
    else:
        yield from _crossing(step, {"drive": (f0, f1), "brake": (b0, b1), "corner": (cap, cap)})


def _crossing(step: float, lines: dict[str, tuple[float, float]]) -> Iterator[Part]:
    names = list(lines)
    cuts = {0.0, 1.0}
    for place, one in enumerate(names):
        for other in names[place + 1 :]:
            (a0, a1), (c0, c1) = lines[one], lines[other]
            if not math.isinf(c0) and (a0 - c0) * (a1 - c1) < 0:
                cuts.add((a0 - c0) / ((a0 - c0) - (a1 - c1)))
    ordered = sorted(cuts)
    for low, high in pairwise(ordered):
        if high - low < _SHORTEST:
            continue
        middle = (low + high) / 2
        name = min(names, key=lambda key: _on(lines[key], middle))
        start, end = _on(lines[name], low), _on(lines[name], high)
        yield (high - low) * step, start, end, name


def _on(line: tuple[float, float], share: float) -> float:
    return line[0] if line[0] == line[1] else line[0] + share * (line[1] - line[0])


def _add(tally: Tally, stretch: Stretch, part: Part, at_grip: float, recovery: Recovery | None) -> None:
    length, start, end, limit = part
    forces = stretch.forces
    seconds = 2 * length / (math.sqrt(start) + math.sqrt(end))
    tally.time += seconds
    if limit == "corner":
        tally.cornering += seconds
    elif limit == "brake":
        tally.braking += seconds
    else:
        tally.traction += seconds * at_grip
        tally.at_power += seconds * (1 - at_grip)
    at = forces.stand((start + end) / 2)
    force = forces.mass * ((end - start) / (2 * length) + forces.piece.along) + at.resistance
    rear = forces.rear_part(at, force)
    tally.lost += at.resistance * length
    if force >= 0:
        tally.used_front += (1 - rear) * force * length
        tally.used_rear += rear * force * length
    else:
        tally.braked_front -= (1 - rear) * force * length
        tally.braked_rear -= rear * force * length
        if recovery is not None:
            gained = recovery.power((rear - 1) * force, -rear * force, length / seconds)
            tally.recovered_front += gained[0] * seconds
            tally.recovered_rear += gained[1] * seconds
    _note_speed(tally, stretch, start, end, limit)
    tally.end = end


def _note_speed(tally: Tally, stretch: Stretch, start: float, end: float, limit: str) -> None:
    piece = stretch.forces.piece
    if max(start, end) > tally.top:
        tally.top, tally.top_place = max(start, end), piece.segment
    if tally.closed or limit == "corner":
        low = min(start, end)
        # Where a straight ends at the speed of the corner behind it, the corner is the place.
        if low < tally.least * (1 - _ALIKE) or (low <= tally.least * (1 + _ALIKE) and piece.curved):
            tally.least_place = piece.segment
        tally.least = min(tally.least, low)
