"""Proofs that roots cancel."""

from __future__ import annotations

from fractions import Fraction as F

import pytest

from rulecheck.graph.terms import Bank
from rulecheck.operations.arithmetic import rational_power
from rulecheck.operations.catalogue import CATALOGUE
from rulecheck.operations.exact import Rational
from rulecheck.operations.real_algebraic import is_zero, sine_of_half_turns
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.exact import ExactReader

BANK = Bank()


def apply(name, *terms):
    operation = CATALOGUE[name] if name in CATALOGUE else rational_power(F(name))
    return BANK.apply(operation, terms, PURE)


def number(value, power=0):
    return BANK.number(F(value), PURE, power)


def root(value):
    return apply("sqrt", number(value))


def sign(term):
    return ExactReader(BANK, {}, most_bits=1024).sign(term)


NESTED = apply("sqrt", apply("add", number(3), apply("multiply", number(2), root(2))))

ZEROS = {
    "sqrt 2 * sqrt 8 - 4": apply("subtract", apply("multiply", root(2), root(8)), number(4)),
    "sqrt 2 + sqrt 8 - sqrt 18": apply("subtract", apply("add", root(2), root(8)), root(18)),
    "sqrt(3 + 2 sqrt 2) - 1 - sqrt 2": apply("subtract", NESTED, apply("add", number(1), root(2))),
    "cube root of 2, cubed": apply("subtract", apply("3", apply("1/3", number(2))), number(2)),
    "total": apply("subtract", apply("total", root(2), root(8), root(18)), root(72)),
    "quotient": apply("subtract", apply("divide", root(8), root(2)), number(2)),
    "extremes": apply("subtract", apply("maximum", root(8), root(2)), apply("multiply", root(2), number(2))),
    "least": apply("subtract", apply("minimum", root(8), root(18)), apply("multiply", root(2), number(2))),
    "magnitude": apply("subtract", apply("abs", apply("negate", root(8))), apply("multiply", root(2), number(2))),
    "sin 45 deg": apply("subtract", apply("sin", number(F(1, 4), 1)), apply("divide", root(2), number(2))),
    "cos 15 deg": apply(
        "subtract", apply("cos", number(F(1, 12), 1)), apply("divide", apply("add", root(6), root(2)), number(4))
    ),
    "the same transcendental term": apply("subtract", apply("exp", number(1)), apply("exp", number(1))),
    "branch": apply(
        "subtract",
        BANK.branch(apply("below", root(2), root(3)), apply("multiply", root(2), root(8)), number(0)),
        number(4),
    ),
}


@pytest.mark.parametrize("name", ZEROS)
def test_zeros_are_proved(name):
    assert sign(ZEROS[name]) == 0


def test_what_is_not_zero_is_never_proved_to_be():
    close = apply(
        "subtract", apply("add", root(2), root(3)), number(F("3.1462643699419723423291350657155704455124771291873"))
    )
    assert sign(close) in (1, -1)


@pytest.mark.parametrize(
    "term",
    [
        apply("subtract", apply("multiply", root(2), number(1, 1)), apply("multiply", root(2), number(F(2, 2), 1))),
        apply("subtract", apply("total", *map(root, (2, 3, 5, 7, 11))), apply("total", *map(root, (11, 7, 5, 3, 2)))),
    ],
)
def test_beyond_its_bounds_no_proof_is_tried(term):
    """Too many independent roots give up at once; equal terms need no algebra."""
    found = sign(term)
    assert found == 0 or found.reasons[0].kind == "tie"


def test_sines_of_multiples_of_fifteen_degrees():
    for step in range(-30, 31):
        found = sine_of_half_turns(Rational(step, 12))
        back = sine_of_half_turns(Rational(12 - step, 12))
        opposite = sine_of_half_turns(Rational(step + 12, 12))
        quarter_on = sine_of_half_turns(Rational(step + 6, 12))
        assert is_zero(found - back)
        assert is_zero(found + opposite)
        assert is_zero(found * found + quarter_on * quarter_on - sine_of_half_turns(Rational(1, 2)))
    assert sine_of_half_turns(Rational(1, 7)) is None
