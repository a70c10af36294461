"""Proofs over boxes: how many parts they take, what is left, and what a flag of an envelope is for other readers."""

from __future__ import annotations

from fractions import Fraction

from rulecheck.graph.terms import Axis, Bank, Term
from rulecheck.operations.arithmetic import multiply, subtract
from rulecheck.operations.comparison import at_most, below
from rulecheck.operations.values import Monomial, Unknown
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.segment import SegmentReader
from rulecheck.readers.throughout import MOST_BOXES, Proof, Prover


def spanned(bank: Bank, low: int, high: int) -> tuple[Term, Axis]:
    x = bank.input("x", "number", PURE)
    return x, Axis("x", x, Fraction(low), Fraction(high))


def proof_of(bank: Bank, flag: Term, axis: Axis) -> Proof:
    return Prover(bank, {}, ExactReader(bank, {}), flag, [axis]).proof()


def test_a_slope_of_one_sign_takes_one_box_also_on_the_limit() -> None:
    bank = Bank()
    x, axis = spanned(bank, 1, 3)
    square = bank.apply(multiply, [x, x], PURE)
    found = proof_of(bank, bank.apply(at_most, [square, bank.number(9)], PURE), axis)
    assert (found.truth, found.boxes, found.left) == (True, 1, ())
    strict = proof_of(bank, bank.apply(below, [square, bank.number(9)], PURE), axis)
    assert strict.truth is False
    assert strict.at == {"x": 3}


def test_a_margin_that_touches_zero_inside_is_left_with_its_place() -> None:
    bank = Bank()
    x, axis = spanned(bank, 0, 1)
    apart = bank.apply(subtract, [x, bank.number(Fraction(1, 3))], PURE)
    flag = bank.apply(at_most, [bank.number(0), bank.apply(multiply, [apart, apart], PURE)], PURE)
    found = proof_of(bank, flag, axis)
    assert isinstance(found.truth, Unknown)
    assert found.boxes <= MOST_BOXES
    assert all(box["x"][1] - box["x"][0] < Fraction(1, 1000) for box in found.left)
    assert any(box["x"][0] <= Fraction(1, 3) <= box["x"][1] for box in found.left)


def test_a_flag_of_an_envelope_is_certain_along_a_stretch_of_another_input() -> None:
    bank = Bank()
    x, axis = spanned(bank, 0, 2)
    y = bank.input("y", "number", PURE)
    met = bank.throughout(bank.apply(at_most, [bank.apply(multiply, [x, y], PURE), bank.number(6)], PURE), (axis,))
    assert met.kind == "throughout"
    inputs = {"y": Monomial(Fraction(1))}
    along = SegmentReader(bank, inputs, ExactReader(bank, inputs), "y")
    assert along.moves(met)
    assert along.at([met], Fraction(3)) == [True]
    assert along.truths([met], Fraction(1), Fraction(2)) == [True]
    assert along.truths([met], Fraction(4), Fraction(5)) == [False]
    assert along.truths([met], Fraction(2), Fraction(5)) == [None]


def test_a_flag_that_rests_on_no_axis_is_itself() -> None:
    bank = Bank()
    _, axis = spanned(bank, 0, 2)
    flag = bank.apply(at_most, [bank.input("y", "number", PURE), bank.number(6)], PURE)
    assert bank.throughout(flag, (axis,)) is flag
