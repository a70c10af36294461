"""A graph's rational part as a program: the same answers as the reader that it hands over to."""

from __future__ import annotations

from fractions import Fraction

from hypothesis import given
from hypothesis import strategies as st

from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.arithmetic import absolute, add, divide, multiply, negate, rational_power, subtract, total
from rulecheck.operations.comparison import at_most, below, equal
from rulecheck.operations.extremes import maximum, minimum
from rulecheck.operations.logic import both, either, negation
from rulecheck.operations.roots_and_exponentials import sqrt
from rulecheck.operations.values import Monomial, Unknown
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.program import Program

RATIONAL = st.fractions(min_value=-20, max_value=20, max_denominator=50)


def build(bank: Bank) -> list[Term]:
    """Flags over every operation that a program writes, and one that it leaves to the reader."""

    def of(operation, *terms: Term) -> Term:
        return bank.apply(operation, terms, PURE)

    x, y = bank.input("x", "number", PURE), bank.input("y", "number", PURE)
    one, two = bank.number(1), bank.number(2)
    quotient = of(divide, x, of(add, of(multiply, y, y), one))
    spread = of(subtract, of(maximum, x, y, one), of(minimum, x, y, two))
    sums = of(total, x, of(negate, y), of(rational_power(Fraction(3)), quotient), of(absolute, spread))
    branch = bank.branch(of(below, x, y), sums, quotient)
    low, same = of(at_most, branch, two), of(equal, sums, quotient)
    root = of(at_most, of(sqrt, of(absolute, branch)), two)
    return [low, same, of(both, low, of(negation, same)), of(either, low, same), root]


@given(RATIONAL, RATIONAL, RATIONAL, RATIONAL)
def test_a_program_answers_like_the_reader(first_x, first_y, x, y):
    bank = Bank()
    flags = build(bank)
    program = Program(bank, {"x": Monomial(first_x), "y": Monomial(first_y)}, flags)
    inputs = {"x": Monomial(x), "y": Monomial(y)}
    quick, slow = program.reader(inputs), ExactReader(bank, inputs)
    assert [quick.truth(flag) for flag in flags] == [slow.truth(flag) for flag in flags]


def test_a_division_by_zero_is_left_to_the_reader():
    bank = Bank()
    x = bank.input("x", "number", PURE)
    flag = bank.apply(at_most, [bank.apply(divide, [bank.number(1), x], PURE), bank.number(3)], PURE)
    program = Program(bank, {"x": Monomial(Fraction(1))}, [flag])
    assert program.reader({"x": Monomial(Fraction(1))}).truth(flag) is True
    assert isinstance(program.reader({"x": Monomial(Fraction(0))}).truth(flag), Unknown)


def test_an_input_that_is_gone_is_missing():
    bank = Bank()
    flag = bank.apply(at_most, [bank.input("x", "number", PURE), bank.number(3)], PURE)
    program = Program(bank, {"x": Monomial(Fraction(1))}, [flag])
    found = program.reader({}).truth(flag)
    assert isinstance(found, Unknown)
    assert found.reasons[0].text == "x"
