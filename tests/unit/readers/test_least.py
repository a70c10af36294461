"""The certified least value over a box: exact at corners, never above what is met, and honest about what is not proved."""

from __future__ import annotations

from fractions import Fraction
from itertools import product

from hypothesis import given, settings
from hypothesis import strategies as some

from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.arithmetic import absolute, divide, multiply, subtract
from rulecheck.operations.exact import Rational
from rulecheck.operations.extremes import minimum
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.box import BoxReader
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.least import Least, least

NUMBERS = some.fractions(min_value=-3, max_value=3, max_denominator=12)
WIDTHS = some.fractions(min_value=Fraction(1, 12), max_value=1, max_denominator=12)


def least_of(make: object, **ends: tuple[Fraction, Fraction]) -> tuple[Least, Bank, Term]:
    bank = Bank()
    root = make(bank, *(bank.input(name, "number", PURE) for name in ends))  # type: ignore[operator]
    inputs = {name: Monomial((low + high) / 2) for name, (low, high) in ends.items()}
    over = BoxReader(bank, inputs, ExactReader(bank, inputs), list(ends), [root])
    return least(over, root, ends), bank, root


def test_a_corner_is_exact() -> None:
    box = {"x": (Fraction(1, 3), Fraction(1)), "y": (Fraction(2), Fraction(7, 3))}
    found, *_ = least_of(lambda bank, x, y: bank.apply(divide, [x, y], PURE), **box)
    assert found.proved
    assert found.low is not None
    assert found.low.value == Rational(1, 7)


def test_the_bottom_of_a_bowl_is_certified_from_below() -> None:
    box = {"x": (Fraction(-1), Fraction(2))}
    found, *_ = least_of(lambda bank, x: bank.apply(multiply, [x, x], PURE), **box)
    assert found.low is not None
    assert -1e-3 < float(found.low) <= 0
    assert found.found is not None
    assert 0 <= float(found.found) < 1e-3


def test_nothing_is_known_of_what_is_not_defined_everywhere() -> None:
    box = {"x": (Fraction(-1), Fraction(1))}
    found, *_ = least_of(lambda bank, x: bank.apply(divide, [bank.number(1), x], PURE), **box)
    assert found.low is None
    assert not found.proved


@settings(max_examples=40, deadline=None)
@given(x=NUMBERS, y=NUMBERS, wide=WIDTHS, high=WIDTHS)
def test_no_point_lies_below(x: Fraction, y: Fraction, wide: Fraction, high: Fraction) -> None:
    box = {"x": (x, x + wide), "y": (y, y + high)}

    def make(bank: Bank, a: Term, b: Term) -> Term:
        bent = bank.apply(absolute, [bank.apply(subtract, [a, b], PURE)], PURE)
        return bank.apply(minimum, [bent, bank.apply(multiply, [a, b], PURE)], PURE)

    found, bank, root = least_of(make, **box)
    assert found.low is not None
    for across, up in product(range(5), repeat=2):
        point = {"x": Monomial(x + wide * across / 4), "y": Monomial(y + high * up / 4)}
        met = ExactReader(bank, point).exact_fraction(root)
        assert met is not None
        assert float(found.low) <= float(met) + 1e-12
