"""The gradient reader against sympy's derivatives and against differences, with kinks and branches."""

from __future__ import annotations

import math
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.arithmetic import add, divide, multiply, subtract
from rulecheck.operations.comparison import at_most
from rulecheck.operations.extremes import minimum
from rulecheck.operations.roots_and_exponentials import sqrt
from rulecheck.operations.trigonometry import sin
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.gradient import GradientReader
from rulecheck.readers.symbolic import derivatives


def of(bank: Bank, operation, *terms: Term) -> Term:
    return bank.apply(operation, terms, PURE)


def slopes(bank: Bank, term: Term, values: dict[str, float]) -> dict[str, float]:
    inputs = {path: Monomial(Fraction(value)) for path, value in values.items()}
    found = GradientReader(bank, ExactReader(bank, inputs)).gradient(term)
    assert found is not None
    return found.slopes


def number(bank: Bank, name: str) -> Term:
    return bank.input(name, "number", PURE)


def test_a_quotient_with_a_root_against_sympy():
    bank = Bank()
    x, y = number(bank, "x"), number(bank, "y")
    term = of(bank, divide, of(bank, sqrt, of(bank, add, of(bank, multiply, x, x), y)), of(bank, sin, y))
    found = slopes(bank, term, {"x": 1.5, "y": 0.75})
    expected = derivatives(bank, term)
    for path, slope in found.items():
        due = float(
            expected[path].subs({symbol: {"x": 1.5, "y": 0.75}[str(symbol)] for symbol in expected[path].free_symbols})
        )
        assert slope == pytest.approx(due, rel=1e-12)


@given(st.floats(0.1, 9), st.floats(0.1, 9), st.floats(0.1, 9))
def test_slopes_equal_central_differences(a, b, c):
    bank = Bank()
    x, y, z = (number(bank, name) for name in "xyz")
    term = of(bank, subtract, of(bank, multiply, of(bank, multiply, x, y), z), of(bank, divide, x, of(bank, sqrt, z)))
    found = slopes(bank, term, {"x": a, "y": b, "z": c})

    def f(a: float, b: float, c: float) -> float:
        return a * b * c - a / math.sqrt(c)

    step = 1e-5
    assert found.get("x", 0.0) == pytest.approx(
        (f(a + step, b, c) - f(a - step, b, c)) / (2 * step), rel=1e-6, abs=1e-6
    )
    assert found.get("y", 0.0) == pytest.approx(
        (f(a, b + step, c) - f(a, b - step, c)) / (2 * step), rel=1e-6, abs=1e-6
    )
    assert found.get("z", 0.0) == pytest.approx(
        (f(a, b, c + step) - f(a, b, c - step)) / (2 * step), rel=1e-5, abs=1e-4
    )


def test_a_minimum_passes_the_slope_to_what_binds_and_says_where_it_is_kinked():
    bank = Bank()
    x, y = number(bank, "x"), number(bank, "y")
    term = of(bank, minimum, x, of(bank, multiply, y, bank.number(2)))
    assert slopes(bank, term, {"x": 1, "y": 3}) == {"x": 1.0}
    assert slopes(bank, term, {"x": 9, "y": 3}) == {"y": 2.0}
    inputs = {"x": Monomial(Fraction(6)), "y": Monomial(Fraction(3))}
    tie = GradientReader(bank, ExactReader(bank, inputs)).gradient(term)
    assert tie is not None
    assert tie.kinked


def test_a_branch_passes_the_slope_to_the_arm_that_is_taken():
    bank = Bank()
    x, y = number(bank, "x"), number(bank, "y")
    condition = of(bank, at_most, x, bank.number(5))
    term = bank.branch(condition, of(bank, multiply, x, y), y)
    assert slopes(bank, term, {"x": 2, "y": 7}) == {"x": 7.0, "y": 2.0}
    assert slopes(bank, term, {"x": 6, "y": 7}) == {"y": 1.0}


def test_what_is_not_known_has_no_gradient():
    bank = Bank()
    term = of(bank, divide, number(bank, "x"), number(bank, "gone"))
    reader = ExactReader(bank, {"x": Monomial(Fraction(1))})
    assert GradientReader(bank, reader).gradient(term) is None
