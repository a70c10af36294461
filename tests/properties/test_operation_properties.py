"""What algebra promises of operations and of the exact reader."""

from __future__ import annotations

import math
from datetime import date
from fractions import Fraction

from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.graph.terms import Bank
from rulecheck.operations.arithmetic import rational_power
from rulecheck.operations.calendar import add_months, months_later, years_between
from rulecheck.operations.catalogue import CATALOGUE
from rulecheck.operations.exact import (
    Rational,
    exact_number,
    from_fraction,
    sign,
    to_ball,
    to_fraction,
    whole_below,
)
from rulecheck.operations.values import Monomial, Reason, Unknown
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.decimals import rounded
from rulecheck.readers.exact import ExactReader

fractions = st.fractions(min_value=-1000, max_value=1000, max_denominator=1000)
steps = st.fractions(min_value=Fraction(1, 100), max_value=50, max_denominator=100)
monomials = st.builds(Monomial, fractions, st.integers(-3, 3))
ring = st.recursive(
    st.builds(exact_number, monomials),
    lambda inner: st.builds(lambda a, b, plus: a + b if plus else a * b, inner, inner, st.booleans()),
    max_leaves=5,
)
days = st.dates(date(1000, 1, 1), date(3000, 12, 31))
flags = st.sampled_from([True, False, Unknown((Reason("missing", "x"),))])


def rational(name, *values):
    return to_fraction(CATALOGUE[name].exact([from_fraction(value) for value in values]))


@given(fractions, fractions)
def test_rational_arithmetic_is_that_of_fractions(a, b):
    assert rational("add", a, b) == a + b
    assert rational("subtract", a, b) == a - b
    assert rational("multiply", a, b) == a * b
    if b:
        assert rational("divide", a, b) == a / b
    assert rational("minimum", a, b) == min(a, b)
    assert rational("floor", a) == math.floor(a)
    assert rational("ceil", a) == math.ceil(a)
    assert CATALOGUE["at_most"].exact([from_fraction(a), from_fraction(b)]) is (a <= b)


@given(fractions, steps)
def test_rounding_to_steps(value, step):
    down, up = rational("floor_to", value, step), rational("ceil_to", value, step)
    near, even = rational("round_to", value, step), rational("even_to", value, step)
    assert down <= value <= up
    assert up - down in (0, step)
    assert abs(near - value) <= step / 2
    assert abs(even - value) <= step / 2
    assert rational("round_to", -value, step) == -near
    assert even == round(value / step) * step
    assert all((found / step).denominator == 1 for found in (down, up, near, even))


@given(ring, ring, ring)
@settings(max_examples=40)
def test_numbers_with_pi_are_a_ring(a, b, c):
    assert (a + b) + c == a + (b + c)
    assert a * (b + c) == a * b + a * c
    assert a * b == b * a
    assert a - a == Rational(0)
    if b:
        assert a / b * b == a


@given(ring, ring)
@settings(max_examples=40)
def test_signs_and_order_agree_with_balls(a, b):
    difference = a - b
    ball = to_ball(difference)
    if not ball.contains(0):
        assert sign(difference) == (1 if ball > 0 else -1)
    assert (a < b) == (sign(difference) < 0)
    assert (a >= b) == (sign(difference) >= 0)
    assert Rational(whole_below(a)) <= a
    assert a < Rational(whole_below(a) + 1)


@given(st.fractions(min_value=Fraction(1, 50), max_value=50, max_denominator=50), st.integers(-4, 4), st.integers(1, 4))
def test_powers_undo_roots(base, top, bottom):
    exponent = Fraction(top, bottom)
    raised = rational_power(Fraction(bottom)).exact([from_fraction(base)])
    assert rational_power(exponent).exact([raised]) == from_fraction(base**top)


@given(st.lists(flags, min_size=1, max_size=5))
def test_de_morgan(values):
    def inverted(flag):
        return flag if isinstance(flag, Unknown) else not flag

    found = inverted(CATALOGUE["both"].exact(values))
    assert found == CATALOGUE["either"].exact([inverted(value) for value in values])


@given(days, st.integers(-600, 600))
def test_a_date_plus_years_is_years_later(day, months):
    later = months_later(day, months)
    assert (later.year * 12 + later.month) - (day.year * 12 + day.month) == months
    assert later.day == day.day or later.day < day.day
    start = Rational(day.toordinal())
    moved = add_months.exact([start, Rational(12 * months)]) if abs(months) < 80 else None
    if moved is not None and months >= 0:
        assert years_between.exact([start, moved]) == Rational(months)


@given(st.lists(fractions, min_size=2, max_size=6))
@settings(max_examples=50)
def test_precision_never_changes_a_sign(numbers):
    """A margin over roots has one sign, from whatever precision the reader starts."""
    bank = Bank()
    roots = [bank.apply(CATALOGUE["sqrt"], [bank.number(abs(number))], PURE) for number in numbers]
    margin = bank.apply(CATALOGUE["subtract"], [bank.apply(CATALOGUE["total"], roots[1:], PURE), roots[0]], PURE)
    signs = {ExactReader(bank, {}, start_bits=bits).sign(margin) for bits in (16, 64, 512)}
    assert len(signs) == 1
    due = math.fsum(math.sqrt(abs(number)) for number in numbers[1:]) - math.sqrt(abs(numbers[0]))
    if abs(due) > 1e-9:
        assert signs == {1 if due > 0 else -1}


@given(fractions.filter(bool), st.integers(1, 30))
def test_decimals_are_the_nearest(value, digits):
    found = Fraction(rounded(value, digits))
    last = Fraction(10) ** (rounded(value, digits).adjusted() - digits + 1)
    assert abs(found - value) <= last / 2
