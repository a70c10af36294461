"""The operations that are made for one record: every rule of them, and balls around a limit."""

from __future__ import annotations

import math
from fractions import Fraction

import numpy
import pytest
import sympy

from rulecheck.operations.exact import Ball, PiNumber, Rational, exact_number
from rulecheck.operations.operation import UNDECIDED, Operation
from rulecheck.operations.samples import base_of, linear, samples_of
from rulecheck.operations.signals import Against, Joint, Order, held_time
from rulecheck.operations.values import Monomial

RECORD = samples_of(base_of([Fraction(n) for n in range(6)]), [Fraction(n) for n in (1, 4, 2, 4, 3, 9)])


def timed(order: Order = ">", measure: str = "duration") -> Operation:
    return held_time(measure, Against(RECORD, order, 0), 1)


@pytest.mark.parametrize(
    ("order", "at_4", "between_2_and_3"),
    [(">", 0, 3), (">=", 2, 3), ("<", 3, 2), ("<=", 5, 2), ("==", 2, 0), ("!=", 3, 5)],
)
def test_exact_limits(order: Order, at_4: int, between_2_and_3: int) -> None:
    operation = timed(order)
    assert operation.exact([Rational(4)]) == at_4
    assert operation.exact([Rational(5, 2)]) == between_2_and_3
    assert operation.ball([Ball("2.5")]) == between_2_and_3
    assert operation.exact([Ball(4)]) is None


def test_a_limit_with_pi() -> None:
    turns = linear(RECORD, Fraction(1), power=1)
    operation = held_time("duration", Against(turns, ">=", 0), 1)
    four = exact_number(Monomial(Fraction(4), 1))
    assert isinstance(four, PiNumber)
    assert operation.exact([four]) == 2
    assert operation.exact([Rational(4)]) == 4


def test_balls_that_hold_a_sample() -> None:
    assert timed().ball([Ball(4, "1e-12")]) is UNDECIDED
    assert timed(">=").ball([Ball(4)]) == timed(">=").exact([Rational(4)])
    cases: tuple[tuple[Order, int, int], ...] = (
        (">", 2, 3),
        (">=", 2, 3),
        ("<", 2, 3),
        ("<=", 2, 3),
        ("==", 0, 1),
        ("!=", 4, 5),
    )
    for order, least, most in cases:
        assert ends(timed(order).ball([Ball(3, "0.75")])) == pytest.approx((least, most), abs=1e-6)
    joint = Joint((Against(RECORD, ">", 0), Against(RECORD, "<", 1)), True)
    assert ends(held_time("longest", joint, 2).ball([Ball(3, "0.5"), Rational(9)])) == pytest.approx((1, 2), abs=1e-6)


def ends(ball: Ball) -> tuple[float, float]:
    return float(ball.lower()), float(ball.upper())


def test_other_rules() -> None:
    operation = timed()
    assert operation.array(numpy, [numpy.array([0.5, 2.5, math.nan])])[:2].tolist() == [5, 3]
    assert math.isnan(operation.array(numpy, [numpy.array([math.nan])])[0])
    assert operation.partials is not None
    assert operation.partials(math, [2.5]) == (0,)
    assert str(operation.symbolic(sympy, [sympy.Symbol("x")])) == "duration(x)"
    assert operation.name != timed().name
