"""Intervals of doubles against the exact reader on random graphs: what the one is certain of, the other does not deny."""

from __future__ import annotations

import random
from fractions import Fraction

import numpy
from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.arithmetic import absolute, add, divide, multiply, rational_power, subtract, total
from rulecheck.operations.comparison import at_most, below
from rulecheck.operations.extremes import maximum, minimum
from rulecheck.operations.logic import both, either, negation
from rulecheck.operations.roots_and_exponentials import exp, sqrt
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.intervals import around
from rulecheck.readers.segment import SegmentReader
from rulecheck.readers.stretches import Movement, Stretches

PATHS = ["x", "y", "z"]


def graph(chance: random.Random) -> tuple[Bank, list[Term]]:
    """Some flags over three inputs."""
    bank = Bank()
    numbers = [bank.input(path, "number", PURE) for path in PATHS]
    numbers += [bank.number(Fraction(chance.randint(-30, 30), 10)) for _ in range(3)]
    flags: list[Term] = []
    for _ in range(14):
        a, b = chance.choice(numbers), chance.choice(numbers)
        kind = chance.choice([add, subtract, multiply, divide, minimum, maximum, total, absolute, sqrt, "power", "if"])
        if kind == "if":
            condition = chance.choice(flags) if flags else bank.apply(below, [a, b], PURE)
            numbers.append(bank.branch(condition, a, b))
        elif kind == "power":
            numbers.append(bank.apply(rational_power(Fraction(chance.randint(1, 4))), [a], PURE))
        else:
            numbers.append(bank.apply(kind, [a] if kind in (absolute, sqrt) else [a, b], PURE))
        flags.append(bank.apply(chance.choice([at_most, below]), [numbers[-1], chance.choice(numbers)], PURE))
        if len(flags) > 2:
            joined = chance.choice([both, either, negation])
            flags.append(bank.apply(joined, chance.sample(flags, 1 if joined is negation else 2), PURE))
    return bank, flags


@settings(max_examples=60, deadline=None)
@given(st.integers(0, 10**9), st.fractions(0, 3, max_denominator=8), st.fractions(0, 3, max_denominator=8))
def test_what_is_certain_is_so_at_all_points(seed, first, second):
    chance = random.Random(seed)
    bank, flags = graph(chance)
    inputs = {path: Monomial(Fraction(chance.randint(-30, 30), 10)) for path in PATHS}
    base = ExactReader(bank, inputs)
    movement = Movement(flags, PATHS)
    ends = [(inputs[path].rational + min(first, second), inputs[path].rational + max(first, second)) for path in PATHS]
    moved = (numpy.array([around(low)[0] for low, _ in ends]), numpy.array([around(high)[1] for _, high in ends]))
    found = Stretches(inputs, base, movement, [0, 1, 2], flags).flags(PATHS, numpy.arange(3), moved)
    for lane, path in enumerate(PATHS):
        along = SegmentReader(bank, inputs, base, path)
        own = [flag for flag in flags if movement.moves(flag, lane)]
        assert own == [flag for flag in flags if along.moves(flag)]
        low, high = ends[lane]
        balls = along.truths(own, low, high)
        points = [along.at(own, low + (high - low) * Fraction(part, 7)) for part in range(8)]
        for place, flag in enumerate(own):
            sure = found[flag.index]
            holds, fails = (bool(numpy.broadcast_to(side, 3)[lane]) for side in (sure.holds, sure.fails))
            assert not (holds and fails)
            if holds or fails:
                assert balls[place] in (None, holds)
                assert all(point[place] is holds for point in points)


def test_what_intervals_do_not_know_is_left_to_the_exact_reader():
    bank = Bank()
    x, y = bank.input("x", "number", PURE), bank.input("y", "number", PURE)
    grown = bank.apply(at_most, [bank.apply(exp, [x], PURE), y], PURE)
    inputs = {"x": Monomial(Fraction(0)), "y": Monomial(Fraction(2))}
    movement = Movement([grown], ["x", "y"])
    assert not movement.answers(grown, 0)
    assert movement.answers(grown, 1)
    over = Stretches(inputs, ExactReader(bank, inputs), movement, [0, 1], [grown])
    found = over.flags(["x", "y"], numpy.array([0, 1]), (numpy.array([0.0, 2.0]), numpy.array([0.1, 3.0])))
    assert found[grown.index].holds.tolist() == [False, True]
