"""What the rules of single operations give: exact where they can, undefined outside their domain, undecided between."""

from __future__ import annotations

import math
from fractions import Fraction as F

import pytest

from rulecheck.operations.arithmetic import rational_power
from rulecheck.operations.catalogue import CATALOGUE
from rulecheck.operations.exact import BITS, Ball, Rational, exact_number, from_fraction, pi_times
from rulecheck.operations.operation import UNDECIDED, Undefined
from rulecheck.operations.values import Monomial

PI = exact_number(Monomial(F(1), 1))
ZERO, ONE, TWO = Rational(0), Rational(1), Rational(2)
AROUND_ZERO, AROUND_ONE, NEGATIVE = Ball(0, 0.1), Ball(1, 0.1), Ball(-2, 0.1)


def exact(name, *values):
    operation = rational_power(F(name)) if name[-1].isdigit() and name not in CATALOGUE else CATALOGUE[name]
    return operation.exact(values)


def ball(name, *values):
    operation = rational_power(F(name)) if name[-1].isdigit() and name not in CATALOGUE else CATALOGUE[name]
    return operation.ball(values)


@pytest.mark.parametrize(
    ("name", "operands", "due"),
    [
        ("sqrt", (Rational(9, 4),), Rational(3, 2)),
        ("sqrt", (TWO,), None),
        ("sqrt", (PI * PI,), PI),
        ("1/3", (Rational(8, 27),), Rational(2, 3)),
        ("-2/3", (Rational(8, 27),), Rational(9, 4)),
        ("-2", (PI,), 1 / (PI * PI)),
        ("0", (ZERO,), ONE),
        ("2", (ZERO,), ZERO),
        ("power", (TWO, Rational(10)), Rational(1024)),
        ("power", (Rational(9), Rational(-1, 2)), Rational(1, 3)),
        ("power", (TWO, Rational(1, 2)), None),
        ("power", (ONE, PI), ONE),
        ("power", (ZERO, PI), ZERO),
        ("power", (TWO, PI), None),
        ("power", (Rational(-1), Rational(10**9 + 1)), Rational(-1)),
        ("exp", (ZERO,), ONE),
        ("exp", (ONE,), None),
        ("ln", (ONE,), ZERO),
        ("ln", (PI,), None),
        ("log10", (Rational(1000),), Rational(3)),
        ("log10", (Rational(1, 100),), Rational(-2)),
        ("log10", (Rational(20),), None),
        ("log10", (Rational(10, 3),), None),
        ("log10", (PI,), None),
        ("sin", (pi_times(Rational(1, 6)),), Rational(1, 2)),
        ("sin", (pi_times(Rational(-1, 2)),), Rational(-1)),
        ("sin", (pi_times(Rational(1, 3)),), None),
        ("sin", (pi_times(Rational(1, 7)),), None),
        ("cos", (pi_times(Rational(1, 3)),), Rational(1, 2)),
        ("cos", (PI,), Rational(-1)),
        ("cos", (ONE,), None),
        ("tan", (pi_times(Rational(5, 4)),), ONE),
        ("tan", (pi_times(Rational(-1, 4)),), Rational(-1)),
        ("tan", (pi_times(Rational(1, 3)),), None),
        ("asin", (Rational(-1, 2),), pi_times(Rational(-1, 6))),
        ("asin", (Rational(1, 3),), None),
        ("acos", (Rational(-1),), PI),
        ("acos", (Rational(1, 3),), None),
        ("atan", (ONE,), pi_times(Rational(1, 4))),
        ("atan", (TWO,), None),
        ("atan2", (ZERO, Rational(-3)), PI),
        ("atan2", (Rational(-3), ZERO), pi_times(Rational(-1, 2))),
        ("atan2", (PI, -PI), pi_times(Rational(3, 4))),
        ("atan2", (ONE, TWO), None),
        ("cosh", (ZERO,), ONE),
        ("tanh", (ZERO,), ZERO),
        ("floor", (-PI,), Rational(-4)),
        ("ceil", (PI,), Rational(4)),
        ("round", (Rational(-5, 2),), Rational(-3)),
        ("round", (Rational(5, 2),), Rational(3)),
        ("round", (PI,), Rational(3)),
        ("round_to", (Rational(1895, 2), ONE), Rational(948)),
        ("even_to", (Rational(5, 2), ONE), TWO),
        ("even_to", (Rational(7, 2), ONE), Rational(4)),
        ("even_to", (Rational(-5, 2), ONE), Rational(-2)),
        ("floor_to", (PI, Rational(1, 10)), Rational(31, 10)),
        ("ceil_to", (PI * 10, PI), PI * 10),
        ("minimum", (PI, Rational(22, 7)), PI),
        ("maximum", (PI, Rational(22, 7), TWO), Rational(22, 7)),
        ("abs", (-PI,), PI),
        ("at_most", (PI, PI), True),
        ("below", (PI, PI), False),
        ("equal", (PI, PI * 1), True),
        ("below", (PI, Rational(22, 7)), True),
    ],
)
def test_exact_results(name, operands, due):
    found = exact(name, *operands)
    assert found == due
    assert (found is None) == (due is None)


@pytest.mark.parametrize(
    ("name", "operands", "text"),
    [
        ("divide", (ONE, ZERO), "division by zero"),
        ("-1", (ZERO,), "division by zero"),
        ("power", (ZERO, -PI), "division by zero"),
        ("sqrt", (Rational(-1),), "root of a negative number"),
        ("1/3", (Rational(-8),), "a fractional power of a negative number"),
        ("power", (-PI, PI), "a fractional power of a negative number"),
        ("ln", (ZERO,), "logarithm of a number that is not positive"),
        ("log10", (Rational(-1),), "logarithm of a number that is not positive"),
        ("tan", (pi_times(Rational(3, 2)),), "the tangent of a quarter turn"),
        ("asin", (TWO,), "the inverse sine or cosine of a number beyond one"),
        ("acos", (-PI,), "the inverse sine or cosine of a number beyond one"),
        ("atan2", (ZERO, ZERO), "the direction of a vector without length"),
        ("round_to", (ONE, ZERO), "a step that is not positive"),
    ],
)
def test_undefined_results(name, operands, text):
    assert exact(name, *operands) == Undefined(text)


@pytest.mark.parametrize(
    ("name", "operands", "due"),
    [
        ("divide", (ONE, AROUND_ZERO), UNDECIDED),
        ("divide", (ONE, Ball(0)), Undefined("division by zero")),
        ("-1", (AROUND_ZERO,), UNDECIDED),
        ("-1", (Ball(0),), Undefined("division by zero")),
        ("1/3", (AROUND_ZERO,), UNDECIDED),
        ("1/3", (NEGATIVE,), Undefined("a fractional power of a negative number")),
        ("sqrt", (AROUND_ZERO,), UNDECIDED),
        ("sqrt", (NEGATIVE,), Undefined("root of a negative number")),
        ("ln", (AROUND_ZERO,), UNDECIDED),
        ("ln", (NEGATIVE,), Undefined("logarithm of a number that is not positive")),
        ("asin", (AROUND_ONE,), UNDECIDED),
        ("asin", (NEGATIVE,), Undefined("the inverse sine or cosine of a number beyond one")),
        ("tan", (Ball(1.5708, 0.001),), UNDECIDED),
        ("atan2", (AROUND_ZERO, AROUND_ZERO), UNDECIDED),
        ("atan2", (Ball(0), Ball(0)), Undefined("the direction of a vector without length")),
        ("power", (AROUND_ZERO, Ball(2.5)), UNDECIDED),
        ("power", (NEGATIVE, Ball(2.5, 0.1)), Undefined("a fractional power of a negative number")),
        ("floor", (AROUND_ONE,), UNDECIDED),
        ("floor", (Ball(1.5, 0.1),), ONE),
        ("ceil", (AROUND_ZERO,), UNDECIDED),
        ("ceil", (Ball(1.5, 0.1),), TWO),
        ("round", (AROUND_ONE,), ONE),
        ("round", (AROUND_ZERO,), ZERO),
        ("round", (Ball(-1.5, 0.1),), UNDECIDED),
        ("even_to", (Ball(1.7, 0.1), ONE), TWO),
        ("even_to", (Ball(1.5, 0.1), ONE), UNDECIDED),
        ("round_to", (ONE, AROUND_ZERO), UNDECIDED),
        ("round_to", (ONE, NEGATIVE), Undefined("a step that is not positive")),
        ("at_most", (AROUND_ONE, ONE), UNDECIDED),
        ("at_most", (AROUND_ONE, TWO), True),
        ("below", (TWO, AROUND_ONE), False),
        ("equal", (AROUND_ONE, TWO), False),
        ("equal", (AROUND_ONE, AROUND_ONE), UNDECIDED),
        ("equal", (Ball(1), ONE), True),
        ("add_days", (Rational(740000), Ball(2)), UNDECIDED),
    ],
)
def test_ball_results(name, operands, due):
    found = ball(name, *operands)
    assert found is due if due is UNDECIDED or isinstance(due, bool) else found == due


def test_extremes_of_overlapping_balls_hold_both():
    found = ball("minimum", Ball(1, 0.1), Ball(1.05, 0.1))
    assert found.contains(0.95)
    assert found.contains(1.05)
    assert ball("maximum", Ball(1, 0.1), Rational(3)) == Ball(3)


def test_huge_powers_give_up_at_once():
    assert exact("power", Rational(9), Rational(9**9)) is None
    assert exact("power", TWO, Rational(BITS - 2)) is None
    assert exact("1000000", Rational(3, 2)) is None
    assert exact("1/1000003", TWO) is None
    assert exact("power", TWO, Rational(-1000)) == from_fraction(F(1, 2**1000))


def test_a_negative_base_with_a_whole_exponent():
    assert exact("power", Rational(-2), Rational(3)) == Rational(-8)
    assert float(ball("power", Ball(-2), Rational(3))) == -8.0
    assert ball("power", Ball(-2), Ball(3)) is UNDECIDED
    assert float(ball("3", Ball(-2))) == -8.0


def test_doubles_agree_on_ordinary_angles():
    for degrees in range(-720, 721, 15):
        angle = pi_times(Rational(degrees, 180))
        for name in ("sin", "cos", "tan"):
            found = exact(name, angle)
            if isinstance(found, Rational):
                assert float(found) == pytest.approx(getattr(math, name)(math.radians(degrees)), abs=1e-12)
