"""Solves against closed forms and mpmath, and what is said where there is no solution or none can be proved."""

from __future__ import annotations

from decimal import Decimal
from fractions import Fraction

import mpmath
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from solve_terms import Equations

from rulecheck.operations.arithmetic import absolute, add, divide, multiply, subtract
from rulecheck.operations.comparison import at_most, below
from rulecheck.operations.exact import Rational
from rulecheck.operations.extremes import maximum, minimum
from rulecheck.operations.roots_and_exponentials import exp, ln, sqrt
from rulecheck.operations.rounding import floor
from rulecheck.operations.trigonometry import cos, sin
from rulecheck.operations.values import Monomial, Unknown
from rulecheck.readers.exact import ExactReader

WHOLE = st.integers(1, 40)


def square_less(e: Equations, value: object) -> object:
    return e.of(subtract, e.of(multiply, e.x, e.x), value)


@given(WHOLE, WHOLE)
@settings(max_examples=40, deadline=None)
def test_a_root_agrees_with_the_square_root_to_sixty_digits(top: int, bottom: int) -> None:
    e = Equations()
    value = Fraction(top, bottom)
    term = e.solve(square_less(e, e.number(value)))
    with mpmath.workdps(70):
        due = Decimal(mpmath.nstr(mpmath.sqrt(mpmath.mpf(top) / bottom), 62))
    found = e.reader().decimal(term, 60)
    assert found is not None
    assert abs(found - due) <= abs(due) * Decimal(10) ** -59


@given(WHOLE, WHOLE)
@settings(max_examples=40, deadline=None)
def test_a_rational_root_is_exact_so_that_limits_on_it_are_decided(top: int, bottom: int) -> None:
    e = Equations()
    root = Fraction(top, bottom)
    term = e.solve(square_less(e, e.number(root * root)), 0, 50)
    assert e.reader().value(term) == Rational(top, bottom)
    assert e.reader().truth(e.of(at_most, term, e.number(root))) is True
    assert e.reader().truth(e.of(below, term, e.number(root))) is False


def test_transcendental_roots_agree_with_mpmath_to_fifty_digits() -> None:
    e = Equations()
    cases = [
        (e.of(subtract, e.of(cos, e.x), e.x), lambda x: mpmath.cos(x) - x, 0.7),
        (e.of(subtract, e.of(exp, e.x), e.number(5)), lambda x: mpmath.exp(x) - 5, 1.6),
        (e.of(subtract, e.of(multiply, e.x, e.of(ln, e.x)), e.number(2)), lambda x: x * mpmath.log(x) - 2, 2.3),
    ]
    for body, function, near in cases:
        with mpmath.workdps(60):
            due = Decimal(mpmath.nstr(mpmath.findroot(function, near), 55))
        found = e.reader().decimal(e.solve(body, "0.5"), 50)
        assert found is not None
        assert abs(found - due) <= abs(due) * Decimal(10) ** -49


def test_of_many_solutions_the_least_is_taken() -> None:
    e = Equations()
    wave = e.of(sin, e.x)
    found = e.reader().decimal(e.solve(wave, 1, 100), 20)
    assert found == Decimal("3.1415926535897932385")
    later = e.reader().decimal(e.solve(wave, 4, 100), 20)
    assert later == Decimal("6.2831853071795864769")
    # Two roots a millionth apart.
    first, second = e.number("2.000001"), e.number("2.000002")
    close = e.of(multiply, e.of(subtract, e.x, first), e.of(subtract, e.x, second))
    assert e.reader().exact_fraction(e.solve(close)) == Fraction("2.000001")


def test_solutions_at_the_ends_of_the_range_count() -> None:
    e = Equations()
    body = square_less(e, e.number(4))
    assert e.reader().value(e.solve(body, 2, 9)) == 2
    assert e.reader().value(e.solve(body, 0, 2)) == 2
    assert isinstance(e.reader().value(e.solve(body, "2.000001", 9)), Unknown)


def told(e: Equations, body: object, low: object = 0, high: object = 10, **values: object) -> tuple[str, str]:
    found = e.reader(**values).value(e.solve(body, low, high))
    assert isinstance(found, Unknown)
    assert len(found.reasons) == 1
    return found.reasons[0].kind, found.reasons[0].text


def test_no_solution_says_where_it_was_looked_for() -> None:
    e = Equations()
    assert told(e, square_less(e, e.number(-1))) == ("undefined", "there is no solution for x from 0 to 10")
    assert told(e, square_less(e, e.number(1)), 5, 5) == (
        "undefined",
        "the range ends where it begins, or before for x from 5 to 5",
    )


def test_what_is_missing_outside_is_missing_in_the_solution() -> None:
    e = Equations()
    assert told(e, square_less(e, e.input("a"))) == ("missing", "a")


def test_an_arm_that_is_not_taken_may_be_missing() -> None:
    e = Equations()
    arms = e.bank.branch(e.of(at_most, e.input("a"), e.number(1)), e.number(9), e.input("b"))
    assert e.reader(a=1).value(e.solve(square_less(e, arms))) == 3


def test_a_formula_that_is_undefined_before_its_solution() -> None:
    e = Equations()
    body = e.of(subtract, e.of(sqrt, e.of(subtract, e.x, e.number(3))), e.number(1))
    kind, text = told(e, body)
    assert kind == "undefined"
    assert "root of a negative number" in text
    assert e.reader().value(e.solve(body, "3.01")) == 4


def test_neither_a_touch_nor_a_jump_nor_a_pole_is_taken_for_a_solution() -> None:
    e = Equations()
    less = e.of(subtract, e.x, e.number("1.2345"))
    touch = e.of(multiply, less, less)
    jump = e.bank.branch(e.of(at_most, e.x, e.number("1.2345")), e.number(-1), e.number(1))
    pole = e.of(divide, e.number(1), less)
    steps = e.of(subtract, e.of(floor, e.x), e.number("2.5"))
    for body in (touch, jump, pole, steps):
        kind, text = told(e, body)
        assert kind == "tie"
        assert "touches zero, jumps or has no value near" in text


def test_a_formula_with_kinks_by_solver_across_them() -> None:
    e = Equations()
    low, high = e.of(multiply, e.x, e.number(2)), e.of(add, e.x, e.number(1))
    least = e.of(subtract, e.of(minimum, low, high), e.number(2))
    assert e.reader().value(e.solve(least)) == 1  # just where the two operands tie
    most = e.of(subtract, e.of(maximum, low, high), e.number(2))
    assert e.reader().value(e.solve(most)) == 1
    away = e.of(subtract, e.of(absolute, e.of(subtract, e.x, e.number(4))), e.number(1))
    assert e.reader().value(e.solve(away)) == 3


def test_a_branch_by_solver_in_the_arm_that_holds() -> None:
    e = Equations()
    arms = e.bank.branch(e.of(at_most, e.x, e.number(2)), e.number(7), e.of(subtract, e.number(6), e.x))
    assert e.reader().value(e.solve(arms)) == 6


@given(st.integers(1, 9), st.integers(1, 9))
@settings(max_examples=20, deadline=None)
def test_a_solve_inside_a_solve(a: int, b: int) -> None:
    """y(x) with y^2 = x; then y(x) * x = a, that is x = a^(2/3)."""
    e = Equations()
    y = e.bank.variable("y", e.x.dimension)
    inner = e.bank.solve(e.of(subtract, e.of(multiply, y, y), e.x), y, (e.number(0), e.number(20)), said="y")
    outer = e.solve(e.of(subtract, e.of(multiply, inner, e.x), e.number(Fraction(a, b))), "1/100", 30)
    found = e.reader().decimal(outer, 15)
    assert found is not None
    assert float(found) == pytest.approx((a / b) ** (2 / 3), rel=1e-13)


@given(st.fractions(-3, 3, max_denominator=20), st.fractions(-3, 3, max_denominator=20), WHOLE)
@settings(max_examples=60, deadline=None)
def test_no_earlier_solution_is_jumped_over(first: Fraction, second: Fraction, third: int) -> None:
    """A cubic with known roots: the least of those in the range."""
    e = Equations()
    roots = sorted({first, second, Fraction(third)})
    assume(len(roots) == 3 and Fraction(-2) not in roots)
    body = e.number(1)
    for root in roots:
        body = e.of(multiply, body, e.of(subtract, e.x, e.number(root)))
    inside = [root for root in roots if root >= -2]
    assert e.reader().exact_fraction(e.solve(body, -2, 50)) == inside[0]


@given(st.integers(1, 30), st.fractions(0, 1, max_denominator=9), st.fractions(0, 1, max_denominator=9))
@settings(max_examples=40, deadline=None)
def test_where_an_input_is_a_ball_the_solution_holds_that_of_each_point(a: int, width: Fraction, share: Fraction):
    e = Equations()
    term = e.solve(square_less(e, e.input("a")))
    point = a + width * (2 * share - 1)
    wide = ExactReader(e.bank, {"a": Rational(a) + 0}, start_bits=64, most_bits=64)
    wide._inputs = {"a": e.reader(a=a).ball(e.input("a"), 64).union(e.reader(a=a + width).ball(e.input("a"), 64))}
    wide._inputs["a"] = wide._inputs["a"].union(e.reader(a=a - width).ball(e.input("a"), 64))
    found = wide.value(term)
    if not isinstance(found, Unknown):
        exact = ExactReader(e.bank, {"a": Monomial(point)}).ball(term, 200)
        assert found == exact or found.contains(exact) or found.overlaps(exact)


def test_wide_inputs_still_give_a_certain_solution() -> None:
    e = Equations()
    term = e.solve(square_less(e, e.input("a")))
    ball = e.reader(a=4).ball(e.input("a"), 64).union(e.reader(a=5).ball(e.input("a"), 64))
    reader = ExactReader(e.bank, {"a": ball}, start_bits=64, most_bits=64)  # type: ignore[dict-item]
    assert reader.truth(e.of(at_most, term, e.number("2.5"))) is True
    assert reader.truth(e.of(at_most, term, e.number("1.9"))) is False
