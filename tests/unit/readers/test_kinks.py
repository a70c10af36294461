"""One-sided slopes at kinks, by hand and against one-sided differences of the exact reader."""

from __future__ import annotations

import math
from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.arithmetic import absolute, add, multiply, rational_power, subtract
from rulecheck.operations.comparison import at_most, below
from rulecheck.operations.extremes import maximum, minimum
from rulecheck.operations.logic import both, either, negation
from rulecheck.operations.roots_and_exponentials import sqrt
from rulecheck.operations.statistics import greatest_where
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.gradient import Gradient, GradientReader


class Numbers:
    def __init__(self, **values: Fraction | int | str) -> None:
        self.bank = Bank()
        self.inputs = {path: Monomial(Fraction(value)) for path, value in values.items()}

    def __getitem__(self, path: str) -> Term:
        return self.bank.input(path, "number", PURE)

    def of(self, operation, *terms: Term | int) -> Term:
        parts = [part if isinstance(part, Term) else self.bank.number(part) for part in terms]
        return self.bank.apply(operation, parts, PURE)

    def reader(self) -> GradientReader:
        return GradientReader(self.bank, ExactReader(self.bank, self.inputs))

    def gradient(self, term: Term) -> Gradient:
        found = self.reader().gradient(term)
        assert found is not None
        return found


def test_a_minimum_and_a_maximum_that_tie() -> None:
    n = Numbers(x=6, y=3)
    doubled = n.of(multiply, n["y"], 2)
    least = n.gradient(n.of(minimum, n["x"], doubled))
    assert (least.sides("x"), least.sides("y")) == ((1.0, 0.0), (2.0, 0.0))
    most = n.gradient(n.of(maximum, n["x"], doubled))
    assert (most.sides("x"), most.sides("y")) == ((0.0, 1.0), (0.0, 2.0))
    assert least.kinked
    assert most.kinked


def test_a_magnitude_at_zero() -> None:
    n = Numbers(x=3)
    found = n.gradient(n.of(multiply, n.of(absolute, n.of(subtract, n["x"], 3)), 5))
    assert found.sides("x") == (-5.0, 5.0)


def test_ties_are_decided_exactly() -> None:
    """sqrt(2)^2 is 2, which no double shows; a part in 10^15 is no tie."""
    n = Numbers(x=2, y=2, z=Fraction(2) + Fraction(1, 10**15))
    root = n.of(sqrt, n["x"])
    assert n.gradient(n.of(minimum, n.of(multiply, root, root), n["y"])).kinked
    assert not n.gradient(n.of(minimum, n["z"], n["y"])).kinked


def test_a_branch_on_its_threshold_that_is_continuous() -> None:
    n = Numbers(x=5)
    term = n.bank.branch(n.of(at_most, n["x"], 5), n["x"], n.of(subtract, n.of(multiply, n["x"], 3), 10))
    assert n.gradient(term).sides("x") == (1.0, 3.0)
    strict = n.bank.branch(n.of(below, n["x"], 5), n["x"], n.of(subtract, n.of(multiply, n["x"], 3), 10))
    assert n.gradient(strict).sides("x") == (1.0, 3.0)


def test_a_branch_that_jumps_has_no_slope_to_the_other_arm() -> None:
    n = Numbers(x=5)
    term = n.bank.branch(n.of(at_most, n["x"], 5), n["x"], n.of(add, n["x"], 1))
    assert n.gradient(term).sides("x") == (1.0, math.inf)
    other = n.bank.branch(n.of(below, n["x"], 5), n["x"], n.of(add, n["x"], 1))
    assert n.gradient(other).sides("x") == (math.inf, 1.0)


def test_conditions_that_are_joined() -> None:
    n = Numbers(x=5, y=1)
    here, there = n.of(at_most, n["x"], 5), n.of(at_most, n["y"], 2)
    steeper = n.of(subtract, n.of(multiply, n["x"], 3), 10)
    for condition in (n.of(both, here, there), n.of(either, here, n.of(negation, there))):
        assert n.gradient(n.bank.branch(condition, n["x"], steeper)).sides("x") == (1.0, 3.0)


def test_an_aggregate_of_elements_that_tie() -> None:
    n = Numbers(x=4, y=4, z=9)
    yes, no = n.bank.flag(True), n.bank.flag(False)
    term = n.bank.apply(greatest_where, [yes, n["x"], yes, n["y"], no, n["z"]], PURE)
    found = n.gradient(term)
    assert (found.sides("x"), found.sides("y"), found.sides("z")) == ((0.0, 1.0), (0.0, 1.0), (0.0, 0.0))


def test_inputs_that_move_together_keep_a_tie() -> None:
    """min(x, y) at a tie: both up by one is up by one, though neither alone moves it."""
    n = Numbers(x=4, y=4)
    term, reader = n.of(minimum, n["x"], n["y"]), n.reader()
    assert reader.along(term, {"x": 1.0, "y": 1.0}) == 1.0
    assert reader.along(term, {"x": 1.0}) == 0.0
    assert reader.along(term, {"x": 1.0, "y": -2.0}) == -2.0


SMALL = st.integers(-3, 3)


@given(
    st.lists(st.tuples(st.integers(0, 6), st.integers(0, 30), st.integers(0, 30)), min_size=3, max_size=12),
    SMALL,
    SMALL,
)
@settings(max_examples=150, deadline=None)
def test_slopes_of_random_graphs_to_each_side_against_differences(steps, x: int, y: int) -> None:
    """Small whole values, so that ties are frequent. All operations are continuous, so one-sided differences converge."""
    n = Numbers(x=x, y=y)
    terms = [n["x"], n["y"], n.bank.number(1), n.bank.number(2)]
    for kind, first, second in steps:
        a, b = terms[first % len(terms)], terms[second % len(terms)]
        operation = (add, subtract, multiply, minimum, maximum)[kind % 5]
        made = n.of(operation, a, b)
        terms.append(n.of(absolute, made) if kind == 5 else n.of(rational_power(Fraction(2)), a) if kind == 6 else made)
    root = terms[-1]
    found = n.reader().gradient(root)
    assert found is not None
    if max(abs(n.reader().value(term)) for term in terms) > 10**6:
        return
    base = n.reader().value(root)
    for path, at in (("x", x), ("y", y)):
        for side, slope in zip((-1, 1), found.sides(path), strict=True):
            due = None
            for step in (Fraction(1, 10**9), Fraction(1, 10**12)):
                inputs = {**n.inputs, path: Monomial(at + side * step)}
                moved = ExactReader(n.bank, inputs).exact_fraction(root)
                assert moved is not None
                due = float((moved - Fraction(base)) / step) * side
            assert slope == pytest.approx(due, rel=1e-4, abs=1e-4)
