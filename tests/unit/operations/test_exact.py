"""Exact numbers with pi."""

from __future__ import annotations

from fractions import Fraction as F

import pytest

from rulecheck.operations.exact import (
    Ball,
    PiNumber,
    Polynomial,
    Rational,
    at_precision,
    exact_number,
    exact_root,
    from_fraction,
    pi_multiple,
    pi_times,
    precision,
    quotient,
    sign,
    size,
    to_ball,
    to_fraction,
    whole_below,
)
from rulecheck.operations.values import Monomial

PI = exact_number(Monomial(F(1), 1))
DEGREE = exact_number(Monomial(F(1, 180), 1))


def test_pi_falls_out():
    assert Rational(0) == DEGREE * 7 - DEGREE * 7
    assert isinstance(DEGREE / PI, Rational)
    assert Rational(1, 180) == DEGREE / PI
    assert Rational(-1) == (PI + 1) * (PI - 1) - PI * PI
    assert (PI * PI - 1) / (PI - 1) == PI + 1


def test_equal_numbers_have_equal_parts():
    left, right = (PI + 1) / (PI * 2), (PI * 3 + 3) / (PI * 6)
    assert left == right
    assert hash(left) == hash(right)
    assert left != PI
    assert left != Rational(1)


def test_powers_of_pi():
    assert PI**2 == PI * PI
    assert PI**-1 == 1 / PI
    assert exact_number(Monomial(F(3), -2)) == 3 / (PI * PI)
    assert exact_number(Monomial(F(0), 5)) == Rational(0)
    assert Rational(1) == PI**0


def test_signs_near_zero():
    # Archimedes' bounds, and the convergent 355/113 (in every table of continued fractions).
    assert Rational(223, 71) < PI < Rational(22, 7)
    assert Rational(355, 113) > PI
    assert Rational(355, 113) > PI
    assert abs(PI - Rational(355, 113)) == Rational(355, 113) - PI


def test_a_sign_that_needs_many_bits():
    close = from_fraction(F(10**60, 1))
    near = Rational(at_precision(PI, 400).mid().fmpq() * close).floor() / close
    assert sign(PI - near) == 1
    assert sign(near - PI) == -1


def test_mixed_comparisons():
    assert PI >= 3
    assert PI <= 4
    assert not PI < 3
    assert Rational(3) <= PI


def test_mixing_with_balls_gives_balls():
    ball = Ball(2)
    for found, due in ((PI + ball, 5.14159), (ball - PI, -1.14159), (PI * ball, 6.28318), (ball / PI, 0.63662)):
        assert isinstance(found, Ball)
        assert float(found) == pytest.approx(due, rel=1e-5)
    assert float(PI / ball) == pytest.approx(1.570796, rel=1e-6)


def test_whole_parts():
    assert whole_below(PI * 100) == 314
    assert whole_below(-PI) == -4
    assert whole_below(Rational(-4)) == -4


def test_roots():
    assert exact_root(Rational(9, 4), 2) == Rational(3, 2)
    assert exact_root(Rational(3), 2) is None
    assert exact_root(PI * PI * 4, 2) == PI * 2
    assert exact_root((PI - 4) * (PI - 4), 2) == 4 - PI
    assert exact_root(PI, 2) is None
    assert exact_root(PI**3, 3) is None


def test_multiples_of_pi():
    assert pi_multiple(DEGREE) == Rational(1, 180)
    assert pi_multiple(Rational(0)) == Rational(0)
    assert pi_multiple(Rational(1)) is None
    assert pi_multiple(PI + 1) is None
    assert pi_multiple(1 / PI) is None
    assert pi_times(Rational(1, 180)) == DEGREE


def test_precision_is_put_back():
    before = precision.prec
    at_precision(PI, 1000)
    assert precision.prec == before
    assert at_precision(PI, 1000).rel_accuracy_bits() > 900


def test_conversions():
    assert to_fraction(from_fraction(F(-7, 3))) == F(-7, 3)
    assert to_ball(Rational(1, 2)) == Ball(0.5)
    assert size(Rational(1 << 99)) == 100
    assert size(PI**10) >= 11


def test_shown():
    assert repr(PI + 1) == "pi + 1"
    assert repr(1 / (PI + 1)) == "(1)/(pi + 1)"
    assert isinstance(quotient(Polynomial([0, 1]), Polynomial([2])), PiNumber)
