"""The bank of terms: equal terms are one, arguments come first, and an unknown condition is not settled."""

from __future__ import annotations

from datetime import date
from fractions import Fraction

import pytest

from rulecheck.graph.terms import Bank, cone
from rulecheck.operations.arithmetic import add, multiply
from rulecheck.operations.values import Monomial, Reason
from rulecheck.quantity.dimension import LENGTH, MASS, PURE


def test_equal_terms_are_one_and_unlike_ones_are_not() -> None:
    bank = Bank()
    assert bank.input("a", "number", LENGTH) is bank.input("a", "number", LENGTH)
    assert bank.number(2) is bank.number(Fraction(2))
    different = [
        bank.number(2),
        bank.number(2, LENGTH),
        bank.number(2, power=1),
        bank.flag(True),
        bank.number(1),
        bank.text("2"),
        bank.day(date(1, 1, 2)),
        bank.input("a", "number", LENGTH),
        bank.input("b", "number", LENGTH),
        bank.input("a", "number", MASS),
    ]
    assert len({id(term) for term in different}) == len(different)


def test_the_order_of_making_is_an_order_of_working() -> None:
    bank = Bank()
    a, b = bank.input("a", "number", PURE), bank.input("b", "number", PURE)
    total = bank.apply(add, [a, b], PURE)
    product = bank.apply(multiply, [total, a], PURE)
    assert bank.apply(add, [a, b], PURE) is total
    for term in bank:
        assert all(argument.index < term.index for argument in term.arguments)
    assert cone([product]) == [a, b, total, product]
    assert cone([total]) == [a, b, total]
    assert cone([]) == []


@pytest.mark.parametrize(("flag", "chosen"), [(True, 1), (False, 2)])
def test_a_known_condition_is_settled(flag: bool, chosen: int) -> None:
    bank = Bank()
    made = bank.branch(bank.flag(flag), bank.number(1), bank.number(2))
    assert made.value == Monomial(Fraction(chosen))


def test_an_unknown_condition_stays_though_both_arms_are_one() -> None:
    bank = Bank()
    unknown = bank.unknown(Reason("missing", "x"), "flag")
    one = bank.number(1)
    assert bank.branch(unknown, one, one).kind == "branch"
