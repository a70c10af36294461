"""Certain slopes: exact where numbers are, around the truth else, and honest at kinks and jumps."""

from __future__ import annotations

from fractions import Fraction

import pytest

from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.arithmetic import absolute, add, divide, multiply, rational_power
from rulecheck.operations.exact import Ball
from rulecheck.operations.extremes import maximum, minimum
from rulecheck.operations.rounding import floor
from rulecheck.operations.trigonometry import sin
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.certain import Certain, Unsure
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.gradient import GradientReader
from rulecheck.readers.slopes import SlopeReader, Slopes


def slopes_of(make: object, **point: Fraction) -> tuple[Slopes, Bank, Term, ExactReader]:
    bank = Bank()
    inputs = {name: bank.input(name, "number", PURE) for name in point}
    root = make(bank, *inputs.values())  # type: ignore[operator]
    reader = ExactReader(bank, {name: Monomial(value) for name, value in point.items()})
    return SlopeReader(bank, reader, list(point)).slopes(root), bank, root, reader


def test_rational_slopes_are_exact() -> None:
    found, *_ = slopes_of(
        lambda bank, x, y: bank.apply(divide, [bank.apply(multiply, [x, x], PURE), y], PURE),
        x=Fraction(1, 3), y=Fraction(7),
    )  # fmt: skip
    assert found.are_known
    assert found.by_path["x"] == Fraction(2, 21)
    assert found.by_path["y"] == Fraction(-1, 441)
    assert all(slope is not None and slope.is_exact for slope in found.by_path.values())


@pytest.mark.parametrize("exponent", [Fraction(1, 3), Fraction(-2, 3), Fraction(5)])
def test_slopes_of_powers_hold_the_truth_at_every_precision(exponent: Fraction) -> None:
    def made(bank: Bank, x: Term) -> Term:
        return bank.apply(rational_power(exponent), [bank.apply(sin, [x], PURE)], PURE)

    found, bank, root, reader = slopes_of(made, x=Fraction(2, 5))
    rough = found.by_path["x"]
    fine = SlopeReader(bank, reader, ["x"]).slopes(root, 1024).by_path["x"]
    assert rough is not None
    assert fine is not None
    assert rough.ball().contains(fine.ball())
    gradient = GradientReader(bank, reader).gradient(root)
    assert gradient is not None
    assert gradient.slopes["x"] == pytest.approx(float(fine))


def test_a_tie_has_the_slopes_of_both_sides() -> None:
    for operation in (minimum, maximum):
        found, *_ = slopes_of(
            lambda bank, x, y, op=operation: bank.apply(op, [x, y], PURE), x=Fraction(1), y=Fraction(1)
        )
        assert found.bent
        assert all(
            slope is not None and slope.ball().contains(0) and slope.ball().contains(1)
            for slope in found.by_path.values()
        )
        apart, *_ = slopes_of(
            lambda bank, x, y, op=operation: bank.apply(op, [x, y], PURE), x=Fraction(1), y=Fraction(2)
        )
        assert apart.are_known
        assert len(apart.by_path) == 1


def test_a_magnitude_at_zero_is_bent_and_a_jump_is_not_known() -> None:
    at_zero, *_ = slopes_of(lambda bank, x: bank.apply(absolute, [x], PURE), x=Fraction(0))
    assert at_zero.bent
    jump, *_ = slopes_of(lambda bank, x: bank.apply(add, [x, bank.apply(floor, [x], PURE)], PURE), x=Fraction(1, 2))
    assert jump.by_path == {"x": None}
    assert not jump.are_known


def test_a_comparison_that_is_not_settled_is_never_answered() -> None:
    with pytest.raises(Unsure):
        bool(root_of_two_squared_less_two())


def root_of_two_squared_less_two() -> Certain:
    """A ball around zero that no precision shrinks to it."""
    root = Certain(Ball(2).sqrt())
    return root * root - 2
