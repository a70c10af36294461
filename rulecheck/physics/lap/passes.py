"""The speed along the track: the greatest that a forward pass (drive) and a backward pass (brakes) allow in the corners.

The square of the speed u follows du/ds = 2 a, by the midpoint of the slopes at both ends of a step (second order). The
passes do not know of each other: the profile is the lower of the two, and where they cross inside a step the crossing
itself is found.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from rulecheck.physics.lap.car import Car
from rulecheck.physics.lap.forces import Forces
from rulecheck.physics.lap.road import Piece

FASTEST = 150.0 * 150.0
"""No corner holds the car back beyond this u, in m²/s²."""
_MOST_ROUNDS = 40
_LONGEST_ROUNDS = 100_000.0
"""So many laps at the most, and on a short circuit so many m, until the speed is the same from lap to lap."""
_SETTLED = 1e-11
_STEADY = 1e-7
_ROOT_STEPS = 100
_ROOM = 1e-9
"""N of grip that do not matter."""


@dataclass(slots=True)
class Stretch:
    """One piece with what was found on it: forces, the cap of the corner, and for each step the lines of both passes.

    `drive` and `brake` are pairs of u at the start and the end of each step; a line may run beyond the cap. `at_grip` is
    the share of each step on which grip and not the engine limits the drive.
    """

    forces: Forces
    cap: float
    drive: list[tuple[float, float]]
    brake: list[tuple[float, float]]
    at_grip: list[float]


def run(car: Car, pieces: Sequence[Piece], masses: Sequence[float], *, closed: bool) -> list[Stretch]:
    """The profile of a lap. Raises `ValueError` where the car cannot get round."""
    stretches = []
    for piece, mass in zip(pieces, masses, strict=True):
        forces = Forces(car, piece, mass)
        stretches.append(Stretch(forces, _cap(forces), [], [], []))
    if not closed:
        _forward(stretches, 0.0)
        last = stretches[-1].drive[-1][1]
        _backward(stretches, last)
        return stretches
    slowest = min(range(len(stretches)), key=lambda place: stretches[place].cap)
    order = [*stretches[slowest:], *stretches[:slowest]]
    speed = min(order[0].cap, FASTEST)
    rounds = max(_MOST_ROUNDS, math.ceil(_LONGEST_ROUNDS / sum(piece.length for piece in pieces)))
    for _ in range(rounds):
        end = min(_forward(order, speed), order[0].cap)
        if abs(end - speed) <= _SETTLED * end:
            break
        speed = end
    else:
        raise ValueError("the speed does not settle from lap to lap")
    speed = min(speed, order[0].cap)
    for _ in range(rounds):
        start = min(_backward(order, speed), order[-1].cap, speed)
        if abs(start - speed) <= _SETTLED * speed:
            return stretches
        speed = start
    raise ValueError("the speed does not settle from lap to lap")


def _forward(stretches: Sequence[Stretch], u: float) -> float:
    for stretch in stretches:
        u = _drive(stretch, min(u, stretch.cap))
    return u


def _drive(stretch: Stretch, u: float) -> float:
    """One piece at full drive from `u`; the end, held to the cap."""
    forces, cap, piece = stretch.forces, stretch.cap, stretch.forces.piece
    acceleration, step = forces.acceleration, piece.step
    lines: list[tuple[float, float]] = []
    at_grip: list[float] = []
    for left in range(piece.count, 0, -1):
        first = acceleration(u)
        spare = forces.spare
        if u >= cap and first >= -_STEADY:
            lines.extend([(cap, cap)] * left)
            at_grip.extend([float(spare > 0)] * left)
            break
        guess = u + 2 * step * first
        second = acceleration(min(max(guess, 0.0), cap))
        end = u + step * (first + second)
        if end <= 0:
            raise ValueError(f"the car comes to a stand on '{piece.name}'")
        lines.append((u, end))
        at_grip.append(_share(spare, forces.spare))
        u = end if end < cap else cap
    stretch.drive, stretch.at_grip = lines, at_grip
    return u


def _share(first: float, last: float) -> float:
    """The share of a step on which a number that changes in a straight line is positive."""
    if (first > 0) == (last > 0):
        return float(first > 0)
    crossing = first / (first - last)
    return crossing if first > 0 else 1 - crossing


def _backward(stretches: Sequence[Stretch], u: float) -> float:
    for stretch in reversed(stretches):
        u = _slow(stretch, min(u, stretch.cap))
    return u


def _slow(stretch: Stretch, u: float) -> float:
    """One piece at full brakes that ends at `u`; its start, held to the cap."""
    forces, cap, piece = stretch.forces, stretch.cap, stretch.forces.piece
    deceleration, step = forces.deceleration, piece.step
    lines: list[tuple[float, float]] = []
    for left in range(piece.count, 0, -1):
        first = deceleration(u)
        if u >= cap and first >= 0:
            lines.extend([(cap, cap)] * left)
            break
        guess = u + 2 * step * first
        second = deceleration(min(max(guess, 0.0), cap))
        start = u + step * (first + second)
        if start <= 0:
            raise ValueError(f"the brakes do not hold the car on '{piece.name}'")
        lines.append((start, u))
        u = start if start < cap else cap
    lines.reverse()
    stretch.brake = lines
    return u


def _cap(forces: Forces) -> float:
    """The greatest u that the corner allows at steady speed; infinite where none does up to `FASTEST`.

    The room is concave in u: a sum of what is linear in it less what is convex. So one bracket holds the one root.
    """
    low, high = 0.0, FASTEST
    at_low, at_high = forces.room(low), forces.room(high)
    if at_low <= 0:
        raise ValueError(f"the car does not hold on '{forces.piece.name}' at rest")
    if at_high >= 0:
        return math.inf
    for _ in range(_ROOT_STEPS):
        middle = (low * at_high - high * at_low) / (at_high - at_low)
        if not low < middle < high:
            middle = (low + high) / 2
        at_middle = forces.room(middle)
        if at_middle > 0:
            low, at_low, at_high = middle, at_middle, at_high / 2
        else:
            high, at_high, at_low = middle, at_middle, at_low / 2
        if abs(at_middle) <= _ROOM or high - low <= 1e-13 * high:
            return middle
    return low
