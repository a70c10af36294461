"""Intervals of doubles enclose what the exact operations give at points within them."""

from __future__ import annotations

import math
from fractions import Fraction

import numpy
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from rulecheck.readers.intervals import COMPARISONS, NUMBERS, around, rule_of

NUMBER = st.fractions(-100, 100, max_denominator=60) | st.sampled_from([Fraction(0), Fraction(1, 10), Fraction(-3)])
SHARE = st.fractions(0, 1, max_denominator=9)
EXACT = {
    "add": lambda a, b: a + b,
    "subtract": lambda a, b: a - b,
    "multiply": lambda a, b: a * b,
    "divide": lambda a, b: a / b,
    "minimum": min,
    "maximum": max,
    "total": lambda a, b: a + b,
    "negate": lambda a: -a,
    "abs": abs,
    "power[2]": lambda a: a**2,
    "power[5]": lambda a: a**5,
    "power[8]": lambda a: a**8,
}


def interval(low: Fraction, high: Fraction, *, as_array: bool):
    ends = around(low)[0], around(high)[1]
    return tuple(numpy.array([end, end]) for end in ends) if as_array else ends


@given(
    st.sampled_from(sorted(EXACT)), st.lists(st.tuples(NUMBER, NUMBER, SHARE, st.booleans()), min_size=2, max_size=2)
)
def test_what_an_operation_gives_at_a_point_lies_within(name, operands):
    exact, rule = EXACT[name], rule_of(name)
    operands = operands if name in NUMBERS and name not in ("negate", "abs") else operands[:1]
    assume(any(as_array for *_, as_array in operands))
    ends = [(min(a, b), max(a, b)) for a, b, _, _ in operands]
    points = [low + share * (high - low) for (low, high), (_, _, share, _) in zip(ends, operands, strict=True)]
    with numpy.errstate(all="ignore"):
        low, high = rule([interval(*pair, as_array=item[3]) for pair, item in zip(ends, operands, strict=True)])
    low, high = float(numpy.ravel(low)[0]), float(numpy.ravel(high)[0])
    if name == "divide" and ends[1][0] <= 0 <= ends[1][1]:
        assert math.isnan(low)
        assert math.isnan(high)
        return
    assert Fraction(low) <= exact(*points) <= Fraction(high)


@given(NUMBER, NUMBER)
def test_a_root_encloses_and_is_nowhere_below_zero(a, b):
    low, high = min(a, b), max(a, b)
    with numpy.errstate(all="ignore"):
        least, greatest = (float(end[0]) for end in rule_of("sqrt")([interval(low, high, as_array=True)]))
    if low < 0:
        assert math.isnan(least)
        assert math.isnan(greatest)
    else:
        assert Fraction(least) ** 2 <= low
        assert Fraction(greatest) ** 2 >= high


@given(st.sampled_from(["at_most", "below", "equal"]), NUMBER, NUMBER, NUMBER, NUMBER)
def test_a_comparison_is_certain_only_where_it_is(name, a, b, c, d):
    exact = {"at_most": lambda x, y: x <= y, "below": lambda x, y: x < y, "equal": lambda x, y: x == y}[name]
    left, right = (min(a, b), max(a, b)), (min(c, d), max(c, d))
    holds, fails = COMPARISONS[name](interval(*left, as_array=True), interval(*right, as_array=True))
    found = {exact(x, y) for x in left for y in right}
    assert not (holds[0] and found != {True})
    assert not (fails[0] and found != {False})


@pytest.mark.parametrize("name", sorted(NUMBERS))
def test_what_may_have_no_value_stays_without_one(name):
    nowhere = (numpy.array([math.nan]), numpy.array([math.nan]))
    one = (numpy.array([1.0]), numpy.array([2.0]))
    parts = [nowhere] if name in ("negate", "abs", "sqrt") else [nowhere, one]
    with numpy.errstate(all="ignore"):
        found = rule_of(name)(parts)
    assert all(numpy.isnan(end).all() for end in found)
    assert not any(certain.any() for rule in COMPARISONS.values() for certain in rule(found, one))


def test_a_number_beyond_doubles_is_nowhere():
    assert all(math.isnan(end) for end in around(Fraction(10) ** 400))
    assert [rule_of(name) for name in ("power[1/3]", "power[9]", "exp")] == [None] * 3
