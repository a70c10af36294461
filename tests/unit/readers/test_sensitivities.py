"""All sensitivities at once against the gradient reader, number by number, on random graphs."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from solve_terms import Equations

from rulecheck.graph.terms import Bank
from rulecheck.operations.arithmetic import absolute, add, divide, multiply, rational_power, subtract, total
from rulecheck.operations.comparison import at_most
from rulecheck.operations.extremes import maximum, minimum
from rulecheck.operations.roots_and_exponentials import sqrt
from rulecheck.operations.trigonometry import sin
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.gradient import GradientReader
from rulecheck.readers.sensitivities import Sensitivities

PATHS = ("x", "y", "z")
STEP = st.tuples(st.integers(0, 9), st.integers(0, 40), st.integers(0, 40), st.integers(0, 40))
VALUE = st.fractions(-3, 3, max_denominator=97)


def graph(bank: Bank, steps):
    def of(operation, *terms):
        return bank.apply(operation, terms, PURE)

    one = bank.number(1)
    terms = [bank.input(path, "number", PURE) for path in PATHS] + [one, bank.number(Fraction(1, 3))]
    for kind, *picks in steps:
        a, b, c = (terms[pick % len(terms)] for pick in picks)
        if kind < 5:
            made = of((add, subtract, multiply, minimum, maximum)[kind], a, b)
        elif kind == 5:
            made = of(divide, a, of(add, one, of(multiply, b, b)))
        elif kind == 6:
            made = bank.branch(of(at_most, a, b), b, c)
        elif kind == 7:
            made = of(sqrt, of(add, one, of(rational_power(Fraction(2)), a)))
        elif kind == 8:
            made = of(total, a, of(sin, b), c)
        else:
            made = of(minimum, of(absolute, a), b, c)
        terms.append(of(sin, made) if kind in (2, 8) else made)  # so that numbers stay small
    return terms


@given(st.lists(STEP, min_size=3, max_size=25), VALUE, VALUE, VALUE)
@settings(max_examples=150, deadline=None)
def test_every_slope_agrees_with_the_gradient_reader(steps, x, y, z):
    bank = Bank()
    roots = graph(bank, steps)[-6:]
    inputs = {path: Monomial(value) for path, value in zip(PATHS, (x, y, z), strict=True)}
    found = Sensitivities(roots, PATHS).at(inputs)
    gradients = GradientReader(bank, ExactReader(bank, inputs)).gradients(roots)
    for place, (row, gradient) in enumerate(zip(found.matrix, gradients, strict=True)):
        assert gradient is not None
        if place in found.doubtful:
            continue
        for path, slope in zip(PATHS, row, strict=True):
            assert slope == pytest.approx(gradient.slopes.get(path, 0.0), rel=1e-9, abs=1e-9)


def test_a_tie_is_left_to_the_gradient_reader():
    bank = Bank()
    x, y = (bank.input(path, "number", PURE) for path in ("x", "y"))
    program = Sensitivities([bank.apply(minimum, [x, y], PURE)])
    apart = {"x": Monomial(Fraction(1)), "y": Monomial(Fraction(2))}
    assert program.at(apart).matrix.tolist() == [[1.0, 0.0]]
    assert program.at(apart).doubtful == ()
    assert program.at({**apart, "y": Monomial(Fraction(1))}).doubtful == (0,)


def test_a_tie_of_operands_with_the_same_slopes_does_not_matter():
    """Both operands stand on their bound, and stay there."""
    bank = Bank()
    x, y = (bank.input(path, "number", PURE) for path in ("x", "y"))
    four = bank.number(4)
    first, second = bank.apply(minimum, [x, four], PURE), bank.apply(minimum, [y, four], PURE)
    inputs = {"x": Monomial(Fraction(9)), "y": Monomial(Fraction(8))}
    found = Sensitivities([bank.apply(minimum, [first, second], PURE)]).at(inputs)
    assert (found.matrix.tolist(), found.doubtful) == ([[0.0, 0.0]], ())


def test_inputs_that_are_not_asked_for_are_constants():
    bank = Bank()
    x, y = (bank.input(path, "number", PURE) for path in ("x", "y"))
    program = Sensitivities([bank.apply(multiply, [x, y], PURE), y], ["x"])
    assert program.at({"x": Monomial(Fraction(3)), "y": Monomial(Fraction(5))}).matrix.tolist() == [[5.0], [0.0]]


def test_a_solve_has_no_such_program():
    e = Equations()
    term = e.solve(e.of(subtract, e.of(multiply, e.x, e.x), e.input("a")))
    with pytest.raises(ValueError, match="'solve' has no program"):
        Sensitivities([term])
