"""Truths over a stretch of one input never contradict what holds at its points."""

from __future__ import annotations

from fractions import Fraction

from hypothesis import given
from hypothesis import strategies as st

from rulecheck.graph.terms import Bank
from rulecheck.operations.arithmetic import add, multiply, rational_power
from rulecheck.operations.comparison import at_most
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.segment import SegmentReader

WHOLE = st.integers(-9, 9)
POINT = st.fractions(min_value=-4, max_value=4, max_denominator=64)


@given(
    WHOLE,
    WHOLE,
    WHOLE,
    WHOLE,
    POINT,
    POINT,
    st.lists(st.fractions(min_value=0, max_value=1, max_denominator=99), max_size=20),
)
def test_what_is_certain_on_a_stretch_holds_at_all_its_points(a, b, c, d, first, second, shares):
    bank = Bank()
    x = bank.input("x", "number", PURE)

    def of(operation, *terms):
        return bank.apply(operation, terms, PURE)

    cube, square = of(rational_power(Fraction(3)), x), of(rational_power(Fraction(2)), x)
    terms = [of(multiply, cube, bank.number(a)), of(multiply, square, bank.number(b)), of(multiply, x, bank.number(c))]
    flag = of(at_most, of(add, of(add, terms[0], terms[1]), terms[2]), bank.number(d))
    inputs = {"x": Monomial(first)}
    along = SegmentReader(bank, inputs, ExactReader(bank, inputs), "x")
    low, high = min(first, second), max(first, second)
    certain = along.truths([flag], low, high)[0]
    for share in [Fraction(0), Fraction(1), *shares]:
        point = low + share * (high - low)
        exact = a * point**3 + b * point**2 + c * point <= d
        assert along.at([flag], point) == [exact]
        assert certain in (None, exact)


def test_only_what_rests_on_the_input_moves():
    bank = Bank()
    x, y = bank.input("x", "number", PURE), bank.input("y", "number", PURE)
    inputs = {"x": Monomial(Fraction(1)), "y": Monomial(Fraction(2))}
    along = SegmentReader(bank, inputs, ExactReader(bank, inputs), "x")
    both = bank.apply(add, [x, y], PURE)
    assert SegmentReader(bank, inputs, ExactReader(bank, inputs), "x").moves(both)
    assert not along.moves(y)


def test_a_stretch_across_the_threshold_of_a_branch_is_between_both_arms():
    """2 + x up to 1, 5 - x beyond: between 3 and 4 on the whole stretch, whichever arm is taken."""
    bank = Bank()
    x = bank.input("x", "number", PURE)

    def of(operation, *terms):
        return bank.apply(operation, terms, PURE)

    first, second = of(add, bank.number(2), x), of(add, bank.number(5), of(multiply, bank.number(-1), x))
    term = bank.branch(of(at_most, x, bank.number(1)), first, second)
    inputs = {"x": Monomial(Fraction(1))}
    along = SegmentReader(bank, inputs, ExactReader(bank, inputs), "x")
    flags = [of(at_most, term, bank.number(limit)) for limit in (5, 3, 1)]
    assert along.truths(flags, Fraction(1, 2), Fraction(3, 2)) == [True, None, False]


def test_what_is_missing_in_a_condition_is_not_bridged_by_its_arms():
    bank = Bank()
    x, gone = bank.input("x", "number", PURE), bank.input("gone", "number", PURE)
    flag = bank.apply(at_most, [gone, x], PURE)
    term = bank.branch(flag, x, x)
    inputs = {"x": Monomial(Fraction(1))}
    along = SegmentReader(bank, inputs, ExactReader(bank, inputs), "x")
    assert along.truths([bank.apply(at_most, [term, bank.number(9)], PURE)], Fraction(0), Fraction(2)) == [None]
