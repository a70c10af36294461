"""What the car can do at one place and speed: drive, brake, and hold the corner, each axle by its own load and grip.

Forces are along and across the road at the contacts. Longitudinal load transfer is that of the force at the tyres less
drag and rolling resistance (moments about the ground; the air's own moment is in the axle areas). Each axle must hold
its share of the cornering force, in proportion to the mass that it carries (no yaw acceleration), and may use along the
road what the circle of its grip leaves (a friction circle by axle).
"""

from __future__ import annotations

import math
from collections.abc import Callable
from typing import NamedTuple

from rulecheck.physics.lap.car import Car, Tyre
from rulecheck.physics.lap.road import Piece

_ROUNDS = 12
"""So many rounds may the grip of a tyre that fades with load follow the load that it makes; each leaves about a twentieth."""
_CLOSE = 1e-7
_NEWTON = 40
_UNLIMITED = 1e12
_LEAST_SQUARE = 1e-12
_Find = Callable[["Stand", float, float, float, float], float]


class Stand(NamedTuple):
    """Loads at one place and speed before any force along the road: loads of the axles in N, cornering force of each,
    road load (drag and rolling resistance) and lateral acceleration."""

    front: float
    rear: float
    front_side: float
    rear_side: float
    resistance: float
    sideways: float


class Forces:
    """One car on one piece of road with one mass."""

    __slots__ = (
        "_along", "_constant", "_drag", "_front_at", "_front_by", "_rear_at", "_rear_by", "arm", "car",
        "front_mass", "mass", "piece", "rear_mass", "spare",
    )  # fmt: skip

    def __init__(self, car: Car, piece: Piece, mass: float) -> None:
        self.car, self.piece, self.mass = car, piece, mass
        self.rear_mass = mass * car.rear_share
        self.front_mass = mass - self.rear_mass
        half = piece.density / 2
        # Loads are linear in u: what they are at rest, and what each unit of u adds.
        self._front_at, self._rear_at = self.front_mass * piece.normal, self.rear_mass * piece.normal
        self._front_by = self.front_mass * piece.normal_rate + half * car.front_area
        self._rear_by = self.rear_mass * piece.normal_rate + half * car.rear_area
        self._drag, self._along, self.arm = half * car.drag_area, piece.along, car.height_ratio
        self._constant = car.front.fade == 0 == car.rear.fade
        self.spare = 0.0

    def stand(self, u: float) -> Stand:
        """The loads at the speed whose square is `u` in m²/s²."""
        front, rear = self._front_at + self._front_by * u, self._rear_at + self._rear_by * u
        sideways = abs(self.piece.lateral + self.piece.lateral_rate * u)
        load = front + rear
        resistance = self._drag * u + (self.car.rolling * load if load > 0 else 0.0)
        return Stand(front, rear, self.front_mass * sideways, self.rear_mass * sideways, resistance, sideways)

    # --- along the road ----------------------------------------------------------------------------------------------

    def acceleration(self, u: float) -> float:
        """The greatest acceleration in m/s² at full drive; negative where the car cannot hold its speed.

        `spare` is afterwards what the engine could give beyond the grip of the driven axle, in N; negative where the
        engine holds the car back.
        """
        at = self.stand(u)
        force, engine = self.drive(at), self.engine(u)
        self.spare = engine - force
        return ((engine if engine <= force else force) - at.resistance) / self.mass - self._along

    def deceleration(self, u: float) -> float:
        """The greatest deceleration in m/s²."""
        at = self.stand(u)
        return (self.brake(at) + at.resistance) / self.mass + self._along

    def engine(self, u: float) -> float:
        """The force of the engine at the driven wheels in N."""
        return self.car.power / math.sqrt(u) if u > 0 else _UNLIMITED * self.car.power

    def drive(self, at: Stand) -> float:
        """The force in N along the road that the driven axles can carry."""
        return self._forced(at, 1.0, self._drive)

    def brake(self, at: Stand) -> float:
        """The brake force in N that both axles carry as the brakes share it."""
        return self._forced(at, -1.0, self._brake)

    def _forced(self, at: Stand, sense: float, find: _Find) -> float:
        """A force along the road, with the grip that the tyres have under it."""
        car, moved = self.car, -self.arm * at.resistance
        if self._constant:
            return find(at, at.front - moved, at.rear + moved, car.front.grip, car.rear.grip)
        force = before = 0.0
        for _ in range(_ROUNDS):
            shifted = moved + sense * self.arm * force
            front = _grip(car.front, at.front - shifted, at.sideways)
            rear = _grip(car.rear, at.rear + shifted, at.sideways)
            force = min(find(at, at.front - moved, at.rear + moved, front, rear), _UNLIMITED)
            if abs(force - before) <= _CLOSE * force:
                break
            before = force
        return force

    def _drive(self, at: Stand, front: float, rear: float, front_grip: float, rear_grip: float) -> float:
        driven, arm = self.car.driven, self.arm
        if driven == "both":
            return _together((front, -arm, front_grip, at.front_side), (rear, arm, rear_grip, at.rear_side))
        if driven == "front":
            return _alone(front, -arm, front_grip, at.front_side, 1.0)
        force = _alone(rear, arm, rear_grip, at.rear_side, 1.0)
        return min(force, _held(front, arm, front_grip, at.front_side))

    def _brake(self, at: Stand, front: float, rear: float, front_grip: float, rear_grip: float) -> float:
        car, arm = self.car, self.arm
        if car.ideal_brakes:
            return _together((front, arm, front_grip, at.front_side), (rear, -arm, rear_grip, at.rear_side))
        by_front = _alone(front, arm, front_grip, at.front_side, car.front_brakes)
        return min(by_front, _alone(rear, -arm, rear_grip, at.rear_side, 1 - car.front_brakes))

    # --- across the road ---------------------------------------------------------------------------------------------

    def room(self, u: float) -> float:
        """Grip that is left in N on the axle with less of it, at steady speed; negative where the car slides."""
        return min(self.rooms(u))

    def rooms(self, u: float) -> tuple[float, float]:
        """Grip in N that is left on each axle while the speed is held, as far as the engine can."""
        at = self.stand(u)
        along = min(at.resistance + self.mass * self.piece.along, self.engine(u))
        front, rear = self._limits(at, along)
        share = self.rear_part(at, along)
        return front - math.hypot(at.front_side, (1 - share) * along), rear - math.hypot(at.rear_side, share * along)

    def rear_part(self, at: Stand, along: float) -> float:
        """The part of a force along the road that the rear axle gives; what both share goes by the grip they have left."""
        car = self.car
        if along < 0 and not car.ideal_brakes:
            return 1 - car.front_brakes
        if along >= 0 and car.driven != "both":
            return 1.0 if car.driven == "rear" else 0.0
        front, rear = self._limits(at, along)
        front_left = math.sqrt(max(0.0, front * front - at.front_side * at.front_side))
        rear_left = math.sqrt(max(0.0, rear * rear - at.rear_side * at.rear_side))
        return rear_left / (front_left + rear_left) if front_left + rear_left > 0 else 0.5

    def _limits(self, at: Stand, along: float) -> tuple[float, float]:
        """What each axle can carry in all, in N, under a force along the road."""
        car, shifted = self.car, self.arm * (along - at.resistance)
        front, rear = max(0.0, at.front - shifted), max(0.0, at.rear + shifted)
        return _grip(car.front, front, at.sideways) * front, _grip(car.rear, rear, at.sideways) * rear


def _grip(tyre: Tyre, load: float, sideways: float) -> float:
    """Coefficient of friction of an axle: each wheel at its own load, the inner one lifted at the most."""
    if not tyre.fade or load <= 0:
        return tyre.grip
    moved = min(tyre.transfer * sideways, load / 2)
    squares = load / 2 + 2 * moved * moved / load
    return max(0.0, tyre.grip * (1 + tyre.fade - tyre.fade * squares / tyre.load))


def _alone(load: float, arm: float, grip: float, side: float, share: float) -> float:
    """The greatest X with (share X)² + side² = (grip (load + arm X))²: one axle gives `share` of the force X.

    An axle that gains load by X may hold its cornering force only from some X on.
    """
    limit = grip * load
    square = share * share - grip * grip * arm * arm
    half = grip * grip * arm * load
    rest = limit * limit - side * side
    if load <= 0 or (rest <= 0 and arm <= 0):
        return 0.0
    root = half * half + square * rest
    root = math.sqrt(root) if root > 0 else 0.0
    if arm <= 0:
        return rest / (root - half) if root > half else _UNLIMITED
    if square <= _LEAST_SQUARE:
        return _UNLIMITED
    return (half + root) / square if rest > 0 or root > 0 else 0.0


def _held(load: float, arm: float, grip: float, side: float) -> float:
    """The greatest X at which the other axle, which it takes load from, still holds its cornering force."""
    left = load - side / grip if grip > 0 else 0.0
    return max(0.0, left / arm) if arm > 0 else _UNLIMITED


_Axle = tuple[float, float, float, float]


def _together(one: _Axle, other: _Axle) -> float:
    """The greatest X that two axles give together when each gives all it has; the sum is concave, by Newton's method."""
    edge = min(_edge(one), _edge(other))
    if edge <= 0:
        return 0.0
    slope = 1 - one[1] * one[2] - other[1] * other[2]
    start = (one[0] * one[2] + other[0] * other[2]) / slope if slope > 1e-9 else _UNLIMITED
    if not one[3] and not other[3]:
        return max(0.0, min(start, edge))
    low, high = 0.0, min(start, edge)
    if _excess(one, other, high)[0] >= 0:
        return high
    found = high * (1 - 1e-9)
    for _ in range(_NEWTON):
        value, change = _excess(one, other, found)
        low, high = (found, high) if value >= 0 else (low, found)
        step = found - value / change if change < 0 else (low + high) / 2
        step = step if low < step < high else (low + high) / 2
        if abs(step - found) <= 1e-10 * high:
            return step
        found = step
    return found


def _edge(axle: _Axle) -> float:
    """How far the force may go before the axle cannot hold its cornering force."""
    load, arm, grip, side = axle
    return max(0.0, (load - side / grip) / -arm) if arm < 0 and grip > 0 else _UNLIMITED


def _excess(one: _Axle, other: _Axle, force: float) -> tuple[float, float]:
    """What both axles could give less what they are to give, and its slope."""
    value, change = -force, -1.0
    for load, arm, grip, side in (one, other):
        limit = grip * (load + arm * force)
        left = math.sqrt(max(limit * limit - side * side, 0.0))
        value += left
        change += grip * arm * limit / left if left > 0 else 0.0
    return value, change
