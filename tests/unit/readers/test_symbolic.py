"""Closed forms, derivatives and solved inputs."""

from __future__ import annotations

from fractions import Fraction as F

import pytest
import sympy

from rulecheck.diagnostics import Refused
from rulecheck.graph.terms import Bank
from rulecheck.operations.catalogue import CATALOGUE
from rulecheck.operations.values import Monomial, Reason
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.symbolic import (
    MOST_OPERANDS,
    closed_form,
    derivatives,
    describe,
    solve_for,
    symbol,
)


@pytest.fixture
def bank():
    return Bank()


def apply(bank, name, *terms):
    return bank.apply(CATALOGUE[name], terms, PURE)


def given(bank, path, sort="number"):
    return bank.input(path, sort, PURE)


def number(bank, value, power=0):
    return bank.number(F(value), PURE, power)


def test_a_closed_form_is_exact(bank):
    term = apply(bank, "multiply", number(bank, F(7, 180), 1), given(bank, "a.b"))
    assert closed_form(bank, term) == 7 * sympy.pi * symbol("a.b") / 180


def test_inputs_that_are_not_kept_become_numbers(bank):
    term = apply(bank, "add", given(bank, "a"), given(bank, "b"))
    inputs = {"a": Monomial(F(1, 2)), "b": Monomial(F(3))}
    assert closed_form(bank, term, inputs, ["a"]) == symbol("a") + 3
    assert closed_form(bank, term, inputs) == symbol("a") + symbol("b")
    assert derivatives(bank, term, inputs, ["a"]) == {"a": 1}


def test_derivatives_are_those_of_sympy(bank):
    x, y = given(bank, "x"), given(bank, "y")
    inner = apply(bank, "divide", apply(bank, "sin", apply(bank, "multiply", x, y)), apply(bank, "sqrt", x))
    term = apply(bank, "add", apply(bank, "multiply", inner, inner), apply(bank, "exp", y))
    form = closed_form(bank, term)
    for path, slope in derivatives(bank, term).items():
        assert sympy.simplify(slope - sympy.diff(form, symbol(path))) == 0


def test_derivatives_have_no_floats(bank):
    term = apply(bank, "multiply", apply(bank, "sqrt", given(bank, "x")), apply(bank, "ln", given(bank, "x")))
    assert not derivatives(bank, term)["x"].has(sympy.Float)


def test_branches_and_minima(bank):
    x, y = given(bank, "x"), given(bank, "y")
    low = apply(bank, "minimum", x, y)
    term = bank.branch(apply(bank, "at_most", x, number(bank, 0)), apply(bank, "multiply", low, low), y)
    slope = derivatives(bank, term)["y"]
    at = {symbol("x"): sympy.Integer(-1), symbol("y"): sympy.Integer(-3)}
    assert slope.subs(at) == -6
    assert slope.subs({symbol("x"): 1, symbol("y"): 2}) == 1
    assert closed_form(bank, term).subs(at) == 9


def test_flags_and_texts(bank):
    rear = apply(bank, "same_text", given(bank, "options.axle", "text"), bank.text("rear"))
    term = bank.branch(rear, number(bank, 1), number(bank, 2))
    inputs = {"options.axle": "rear"}
    assert closed_form(bank, term, inputs, []) == 1
    assert closed_form(bank, term).free_symbols == {sympy.Symbol("options.axle"), sympy.Symbol("rear")}
    flag = bank.branch(given(bank, "options.closed", "flag"), number(bank, 1), number(bank, 2))
    assert closed_form(bank, flag, {"options.closed": False}, []) == 2


def test_an_unknown_term_is_named(bank):
    assert closed_form(bank, bank.unknown(Reason("missing", "corners"), "number")) == symbol("corners")


def test_solved_inputs(bank):
    x, y = given(bank, "x"), given(bank, "y")
    line = apply(bank, "subtract", apply(bank, "multiply", number(bank, 3), x), y)
    assert solve_for(bank, line, "x") == [symbol("y") / 3]
    square = apply(bank, "subtract", apply(bank, "multiply", x, x), number(bank, 2))
    assert set(solve_for(bank, square, "x")) == {sympy.sqrt(2), -sympy.sqrt(2)}
    ratio = apply(bank, "subtract", apply(bank, "divide", x, apply(bank, "add", x, y)), number(bank, F(1, 2)))
    assert solve_for(bank, ratio, "x") == [symbol("y")]
    log = apply(bank, "subtract", apply(bank, "ln", x), number(bank, 2))
    assert solve_for(bank, log, "x") == [sympy.exp(2)]


def test_what_has_no_solution_gives_none(bank):
    x = given(bank, "x")
    assert solve_for(bank, number(bank, 3), "x") == []
    never = apply(bank, "add", apply(bank, "multiply", x, x), number(bank, 1))
    assert solve_for(bank, never, "x") == []
    stepped = apply(bank, "subtract", apply(bank, "floor", x), number(bank, 3))
    assert solve_for(bank, stepped, "x") == []
    pole = apply(bank, "divide", number(bank, 1), x)
    assert solve_for(bank, pole, "x") == []
    mixed = apply(bank, "subtract", apply(bank, "exp", x), apply(bank, "sin", x))
    assert solve_for(bank, mixed, "x") == []


def test_solved_with_values(bank):
    line = apply(bank, "subtract", apply(bank, "multiply", given(bank, "k"), given(bank, "x")), given(bank, "y"))
    inputs = {"k": Monomial(F(2)), "y": Monomial(F(5)), "x": Monomial(F(1))}
    assert solve_for(bank, line, "x", inputs) == [sympy.Rational(5, 2)]


def test_description(bank):
    x = given(bank, "x")
    form = describe(bank, apply(bank, "divide", apply(bank, "multiply", x, x), x))
    assert form.formula == "x"
    assert form.conditions == ("the divisor is not zero: x^2, x",)
    assert form.derivatives == {"x": "1"}
    cube = apply(bank, "multiply", apply(bank, "multiply", x, x), apply(bank, "sqrt", given(bank, "y")))
    assert describe(bank, cube).formula == "x^2*sqrt(y)"
    assert describe(bank, cube, {"y": Monomial(F(4))}, ["x"]).formula == "2*x^2"


def test_forms_that_would_help_no_reader_are_refused(bank):
    wide = apply(bank, "minimum", *(given(bank, f"x{index}") for index in range(MOST_OPERANDS + 1)))
    with pytest.raises(Refused, match="too-large"):
        closed_form(bank, wide)
    long = given(bank, "x")
    for _ in range(500):
        long = apply(bank, "multiply", long, apply(bank, "add", long, number(bank, 1)))
    with pytest.raises(Refused, match="too-large"):
        derivatives(bank, long)
