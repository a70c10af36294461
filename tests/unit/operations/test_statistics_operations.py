"""Aggregates over what a condition keeps, with unknown elements, and counts between bounds."""

from __future__ import annotations

import statistics
from fractions import Fraction as F

import pytest

from rulecheck.operations.arithmetic import add, divide, multiply, negate, subtract
from rulecheck.operations.comparison import at_most, below, equal
from rulecheck.operations.exact import Ball, Rational, exact_number, from_fraction, to_fraction
from rulecheck.operations.operation import UNDECIDED, Undefined
from rulecheck.operations.statistics import (
    NOTHING_LEFT,
    TOO_FEW,
    count_where,
    deviation_where,
    greatest_where,
    least_where,
    mean_where,
    total_where,
)
from rulecheck.operations.values import Bounds, Monomial, Reason, Unknown

MISSING = Unknown((Reason("missing", "masses.tub.mass"),))
DOUBT = Unknown((Reason("missing", "masses.tub.unsprung"),))
PI = exact_number(Monomial(F(1), 1))
AGGREGATES = [total_where, mean_where, deviation_where, least_where, greatest_where]


def pairs(*numbers):
    return [part for number in numbers for part in (True, number)]


@pytest.mark.parametrize("operation", AGGREGATES, ids=lambda operation: operation.name)
class TestUnknownElements:
    def test_an_unknown_number_that_counts_makes_it_unknown(self, operation):
        assert operation.exact([*pairs(Rational(1), Rational(2)), True, MISSING]) == MISSING

    def test_of_what_is_left_out_nothing_need_be_known(self, operation):
        known = pairs(Rational(1), Rational(4))
        assert operation.exact([*known, False, MISSING]) == operation.exact(known)

    def test_an_unknown_flag_makes_it_unknown(self, operation):
        assert operation.exact([*pairs(Rational(1), Rational(2)), DOUBT, Rational(3)]) == DOUBT

    def test_an_undecided_flag_asks_for_precision(self, operation):
        assert operation.exact([*pairs(Rational(1), Rational(2)), UNDECIDED, Rational(3)]) is UNDECIDED

    def test_a_ball_leads_to_balls(self, operation):
        values = pairs(Ball(1), Rational(2), Rational(9))
        assert operation.exact(values) is None
        due = operation.exact(pairs(Rational(1), Rational(2), Rational(9)))
        due = operation.ball(pairs(Rational(1), Rational(2), Rational(9))) if due is None else due
        assert operation.ball(values).overlaps(Ball(due))


def test_empty_collections():
    gone = [False, Rational(1)]
    assert total_where.exact([]) == total_where.exact(gone) == Rational(0)
    assert count_where.exact([]) == count_where.exact([False]) == Rational(0)
    for operation in (mean_where, least_where, greatest_where):
        assert operation.exact(gone) == NOTHING_LEFT
    assert deviation_where.exact(pairs(Rational(1))) == TOO_FEW


def test_against_the_standard_library():
    numbers = [F(31, 10), F(29, 10), F(3), F(17, 5)]
    values = pairs(*map(from_fraction, numbers))
    assert to_fraction(mean_where.exact(values)) == statistics.mean(numbers)
    assert float(deviation_where.ball(values).mid()) == pytest.approx(statistics.stdev(numbers), rel=1e-14)
    assert deviation_where.exact(pairs(Rational(1), Rational(2), Rational(3))) == Rational(1)


def test_extremes_with_pi_are_exact():
    assert least_where.exact(pairs(PI, Rational(22, 7))) == PI
    assert greatest_where.exact(pairs(PI, Rational(22, 7))) == Rational(22, 7)


def test_a_count_with_unknown_elements_is_between_bounds():
    assert count_where.exact([True, DOUBT, True, False, MISSING]) == Bounds(
        Rational(2), Rational(4), (*DOUBT.reasons, *MISSING.reasons)
    )
    assert count_where.exact([True, UNDECIDED]) is UNDECIDED


BETWEEN = Bounds(Rational(2), Rational(4), DOUBT.reasons)


@pytest.mark.parametrize(
    ("operation", "operands", "due"),
    [
        (at_most, (BETWEEN, Rational(4)), True),
        (at_most, (BETWEEN, Rational(3)), None),
        (at_most, (Rational(5), BETWEEN), False),
        (below, (BETWEEN, Rational(2)), False),
        (below, (BETWEEN, Rational(5)), True),
        (below, (Rational(2), BETWEEN), None),
        (equal, (BETWEEN, Rational(5)), False),
        (equal, (BETWEEN, Rational(3)), None),
        (add, (BETWEEN, Rational(1)), (3, 5)),
        (subtract, (Rational(1), BETWEEN), (-3, -1)),
        (negate, (BETWEEN,), (-4, -2)),
        (multiply, (BETWEEN, Rational(-1, 2)), (-2, -1)),
        (divide, (BETWEEN, Rational(4)), (F(1, 2), 1)),
        (divide, (Rational(4), BETWEEN), (1, 2)),
        (divide, (Rational(4), Bounds(Rational(0), Rational(2), ())), None),
        (divide, (BETWEEN, Rational(0)), None),
    ],
)
def test_bounds_decide_where_they_can(operation, operands, due):
    found = operation.bounds(operands)
    if isinstance(due, tuple):
        assert (to_fraction(found.low), to_fraction(found.high)) == due
        assert found.reasons == DOUBT.reasons
    else:
        assert found is due


def test_a_product_with_zero_is_known():
    assert multiply.bounds([BETWEEN, Rational(0)]) == Rational(0)


def test_undefined_says_what():
    assert isinstance(NOTHING_LEFT, Undefined)
    assert NOTHING_LEFT.text == "no element is left"
