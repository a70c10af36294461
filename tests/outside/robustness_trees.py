"""Conditions as trees of our own, with their text in the language and their value by the published semantics.

Source: G. E. Fainekos, G. J. Pappas, Theoretical Computer Science 410 (2009) 4262-4291, as restated after A. Donze and
O. Maler, FORMATS 2010 (restatement read, papers from memory): not is minus, and the least, or the greatest. What the
language adds: the measure is the relative margin, and flags have none. Nothing here uses the program's own code.
"""

from __future__ import annotations

import random
from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction

Point = dict[str, Fraction]


@dataclass(frozen=True)
class Room:
    """Truth with the margin and what it is measured by; without number where only flags decided. None: not known."""

    truth: bool | None
    margin: Fraction | None = None
    scale: Fraction = Fraction(1)

    @property
    def relative(self) -> Fraction:
        assert self.margin is not None
        return self.margin / self.scale

    def turned(self) -> Room:
        truth = None if self.truth is None else not self.truth
        return Room(truth, None if self.margin is None else -self.margin, self.scale)


@dataclass(frozen=True)
class Leaf:
    """A comparison or a flag: its text, and its room at a point."""

    text: str
    room: Callable[[Point], Room]


@dataclass(frozen=True)
class Node:
    """`not`, `and` or `or` of others."""

    word: str
    parts: tuple[Leaf | Node, ...]


Tree = Leaf | Node


def text_of(tree: Tree) -> str:
    if isinstance(tree, Leaf):
        return tree.text
    if tree.word == "not":
        return f"not ({text_of(tree.parts[0])})"
    return f" {tree.word} ".join(f"({text_of(part)})" for part in tree.parts)


def room_of(tree: Tree, point: Point) -> Room:
    """The published semantics by relative margin, with Kleene's truth."""
    if isinstance(tree, Leaf):
        return tree.room(point)
    rooms = [room_of(part, point) for part in tree.parts]
    if tree.word == "not":
        return rooms[0].turned()
    if tree.word == "or":
        return _least([room.turned() for room in rooms]).turned()
    return _least(rooms)


def _least(rooms: list[Room]) -> Room:
    truths = {room.truth for room in rooms}
    truth = False if False in truths else (None if None in truths else True)
    if any(room.truth is False and room.margin is None for room in rooms):
        return Room(False)
    numbered = [room for room in rooms if room.margin is not None]
    if not numbered or truth is None:
        return Room(truth)
    worst = min(numbered, key=lambda room: room.relative)
    return Room(truth, worst.margin, worst.scale)


# --- leaves ----------------------------------------------------------------------------------------------------------


def compared(path: str, sign: str, limit: Fraction, unit: str, scale: Fraction | None) -> Leaf:
    """`path <= limit` and its like; the scale is the size of the limit where none is given."""

    def room(point: Point) -> Room:
        if path not in point:
            return Room(None)
        margin = limit - point[path] if sign in ("<", "<=") else point[path] - limit
        return Room(margin >= 0 if "=" in sign else margin > 0, margin, scale or abs(limit))

    return Leaf(f"{path} {sign} {literal(limit, unit)}", room)


def between(path: str, low: Fraction, high: Fraction, unit: str, scale: Fraction | None) -> Leaf:
    """A range: both sides share the larger of the two limits, so the nearer side governs."""

    def room(point: Point) -> Room:
        if path not in point:
            return Room(None)
        margin = min(point[path] - low, high - point[path])
        return Room(margin >= 0, margin, scale or max(abs(low), abs(high)))

    return Leaf(f"{literal(low, unit)} <= {path} <= {literal(high, unit)}", room)


def equal_within(path: str, centre: Fraction, width: Fraction, unit: str) -> Leaf:
    """An equality: the room is the width less the distance, always measured by the width."""

    def room(point: Point) -> Room:
        if path not in point:
            return Room(None)
        margin = width - abs(point[path] - centre)
        return Room(margin >= 0, margin, width)

    return Leaf(f"{path} == {literal(centre, unit)} within {literal(width, unit)}", room)


def flag(path: str, wanted: bool) -> Leaf:
    def room(point: Point) -> Room:
        return Room(None if path not in point else (point[path] == 1) is wanted)

    return Leaf(f"{path} == {'yes' if wanted else 'no'}", room)


def literal(number: Fraction, unit: str) -> str:
    text = f"{float(number):g}"
    assert Fraction(text) == number
    return f"{text} {unit}".strip()


# --- random trees ----------------------------------------------------------------------------------------------------


@dataclass(frozen=True)
class Kinds:
    """What random trees are made of: number inputs by path with their units, flags by path, one scale or none.

    With a scale there are no equalities, whose measure is their own width.
    """

    numbers: dict[str, str]
    flags: tuple[str, ...] = ()
    scale: Fraction | None = None


def quarter(source: random.Random, low: int, high: int) -> Fraction:
    return Fraction(source.randint(4 * low, 4 * high), 4)


def random_leaf(source: random.Random, kinds: Kinds) -> Leaf:
    if kinds.flags and source.random() < 0.25:
        return flag(source.choice(kinds.flags), source.random() < 0.5)
    path, unit = source.choice(sorted(kinds.numbers.items()))
    shape = source.random()
    if shape < 0.6:
        limit = quarter(source, 1, 12) * source.choice((1, 1, -1))
        return compared(path, source.choice(("<", "<=", ">", ">=")), limit, unit, kinds.scale)
    if shape < 0.85 or kinds.scale is not None:
        low = quarter(source, -6, 6)
        return between(path, low, low + quarter(source, 1, 9), unit, kinds.scale)
    return equal_within(path, quarter(source, -6, 9), quarter(source, 1, 4), unit)


def random_tree(source: random.Random, kinds: Kinds, depth: int) -> Tree:
    if depth == 0 or source.random() < 0.15:
        return random_leaf(source, kinds)
    word = source.choice(("not", "and", "and", "or", "or"))
    count = 1 if word == "not" else source.randint(2, 3)
    return Node(word, tuple(random_tree(source, kinds, depth - 1) for _ in range(count)))


def random_point(source: random.Random, kinds: Kinds, missing: float = 0.0) -> Point:
    numbers = {path: quarter(source, -4, 12) for path in kinds.numbers}
    flags = {path: Fraction(source.randint(0, 1)) for path in kinds.flags}
    return {path: value for path, value in {**numbers, **flags}.items() if source.random() >= missing}
