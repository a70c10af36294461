"""A solve through every reader: value, slope, stretch, closed form and program agree."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from solve_terms import Equations

from rulecheck.graph.terms import Term
from rulecheck.operations.arithmetic import add, multiply, subtract
from rulecheck.operations.comparison import at_most
from rulecheck.operations.values import Monomial
from rulecheck.readers.gradient import GradientReader
from rulecheck.readers.program import Program
from rulecheck.readers.segment import SegmentReader
from rulecheck.readers.symbolic import derivatives, describe

VALUE = st.fractions(Fraction(1, 2), 6, max_denominator=16)


def cubic(e: Equations) -> Term:
    """x^3 + a x = b: one solution for positive a and b."""
    cube = e.of(multiply, e.of(multiply, e.x, e.x), e.x)
    return e.solve(e.of(subtract, e.of(add, cube, e.of(multiply, e.input("a"), e.x)), e.input("b")), 0, 20)


@given(VALUE, VALUE)
@settings(max_examples=30, deadline=None)
def test_slopes_of_a_solution(a: Fraction, b: Fraction) -> None:
    """By hand: x_a = -x / (3x^2 + a), x_b = 1 / (3x^2 + a)."""
    e = Equations()
    term = e.of(multiply, cubic(e), e.input("b"))
    reader = e.reader(a=a, b=b)
    found = GradientReader(e.bank, reader).gradient(term)
    x = reader.approximate(cubic(e))
    assert found is not None
    assert x is not None
    below = 3 * x * x + float(a)
    assert found.slopes["a"] == pytest.approx(-x / below * float(b), rel=1e-12)
    assert found.slopes["b"] == pytest.approx(x + float(b) / below, rel=1e-12)


def test_slopes_of_a_solve_inside_a_solve_against_differences() -> None:
    e = Equations()
    y = e.bank.variable("y", e.x.dimension)
    body = e.of(subtract, e.of(multiply, y, y), e.of(multiply, e.input("a"), e.x))
    inner = e.bank.solve(body, y, (e.number(0), e.number(90)), said="y")
    outer = e.solve(e.of(subtract, e.of(multiply, inner, e.x), e.input("b")), "1/100", 30)
    found = GradientReader(e.bank, e.reader(a=3, b=5)).gradient(outer)
    step = Fraction(1, 10**6)
    assert found is not None
    for path in ("a", "b"):
        ends = [e.reader(**{"a": 3, "b": 5, path: {"a": 3, "b": 5}[path] + side * step}) for side in (1, -1)]
        high, low = (reader.decimal(outer, 30) for reader in ends)
        assert high is not None
        assert low is not None
        assert found.slopes[path] == pytest.approx(float((high - low) / 2) * 1e6, rel=1e-9)


def test_the_closed_form_names_the_solution_and_differentiates_it() -> None:
    e = Equations()
    term = cubic(e)
    form = describe(e.bank, term)
    assert form.formula == f"solution_{term.index}"
    assert any("is the least x from 0 to 20 with" in text for text in form.conditions)
    found = derivatives(e.bank, term)
    reader = e.reader(a=2, b=3)
    x = reader.approximate(term)
    for path, slope in GradientReader(e.bank, reader).gradient(term).slopes.items():  # type: ignore[union-attr]
        names = {symbol: {"a": 2, "b": 3}.get(str(symbol), x) for symbol in found[path].free_symbols}
        assert float(found[path].subs(names)) == pytest.approx(slope, rel=1e-12)


def test_a_program_leaves_a_solve_to_the_exact_reader() -> None:
    e = Equations()
    holds = e.of(at_most, cubic(e), e.number(1))
    inputs = {path: Monomial(Fraction(value)) for path, value in (("a", 2), ("b", 3))}
    program = Program(e.bank, inputs, [holds])
    assert program.reader(inputs).truth(holds) is True  # 1 + 2 = 3: exactly on the limit
    assert program.reader({**inputs, "b": Monomial(Fraction("3.0000001"))}).truth(holds) is False


def test_a_stretch_of_an_input_is_certain_of_a_solution() -> None:
    e = Equations()
    holds = e.of(at_most, cubic(e), e.number(1))
    inputs = {path: Monomial(Fraction(value)) for path, value in (("a", 2), ("b", 2))}
    along = SegmentReader(e.bank, inputs, e.reader(a=2, b=2), "b")
    assert along.truths([holds], Fraction(1), Fraction("2.9")) == [True]
    assert along.truths([holds], Fraction("3.1"), Fraction(4)) == [False]
    assert along.truths([holds], Fraction(2), Fraction(4)) == [None]
    assert along.at([holds], Fraction(3)) == [True]
