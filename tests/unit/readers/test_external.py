"""A solver through every reader."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction

import pytest

from rulecheck.diagnostics import Refused
from rulecheck.graph.terms import Bank, External, Term
from rulecheck.model.solver import Answer, Argument, Estimate, NoAnswer, Question, Solver, SolverInput, SolverOutput
from rulecheck.model.track import Track
from rulecheck.operations.arithmetic import add, multiply, subtract
from rulecheck.operations.comparison import at_most
from rulecheck.operations.exact import Ball
from rulecheck.operations.roots_and_exponentials import sqrt
from rulecheck.operations.values import Monomial, Reason, Unknown
from rulecheck.quantity.dimension import PURE
from rulecheck.readers import symbolic
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.gradient import GradientReader
from rulecheck.readers.program import Program
from rulecheck.readers.segment import SegmentReader
from rulecheck.readers.stretches import Movement

BOUND = 0.01


def ask(arguments: Mapping[str, Argument], track: Track | None, quick: bool) -> Mapping[str, Answer]:
    """x³ y with a bound, the word that was handed in, and what needs only x."""
    x, y = arguments["x"], arguments["y"]
    assert isinstance(x, float)
    product: Answer = NoAnswer("y is negative")
    if isinstance(y, float) and y >= 0:
        product = Estimate(x**3 * y, BOUND)
    return {"product": product, "word": str(arguments["word"]), "square": Estimate(x * x, BOUND)}


SOLVER = Solver(
    name="cube", meaning="m", method="m", caution="", sources={"book": "A book"}, run=ask,
    inputs=(SolverInput("x", "x", "1"), SolverInput("y", "y", "1", ("product",)), SolverInput("word", "w")),
    outputs=tuple(SolverOutput(name, unit, "m", "book") for name, unit in (("product", "1"), ("word", ""), ("square", "1"))),
)  # fmt: skip


class Sample:
    def __init__(self, **inputs: int | str | None) -> None:
        self.bank = Bank()
        self.inputs = {
            path: value if isinstance(value, str) else Monomial(Fraction(value))
            for path, value in {"w": "rear", **inputs}.items()
            if value is not None
        }
        self.x, self.y = (self.bank.input(path, "number", PURE) for path in ("x", "y"))
        self.question = Question(SOLVER, None)
        self.reader = ExactReader(self.bank, self.inputs)

    def output(self, name: str, x: Term | None = None) -> Term:
        needs = (True, name == "product", True)
        word = self.bank.input("w", "text", PURE)
        sort = "text" if name == "word" else "number"
        return self.bank.external(External(self.question, name, needs), (x or self.x, self.y, word), sort, PURE)  # type: ignore[arg-type]

    def apply(self, operation: object, *terms: Term) -> Term:
        return self.bank.apply(operation, terms, PURE)  # type: ignore[arg-type]

    def number(self, value: Fraction | int) -> Term:
        return self.bank.number(value)


def test_equal_questions_are_one_term() -> None:
    sample = Sample(x=2, y=5)
    assert sample.output("product") is sample.output("product")
    assert sample.output("product") is not sample.output("square")


def test_the_exact_reader_gives_the_value_with_its_bound() -> None:
    sample = Sample(x=2, y=5)
    found = sample.reader.value(sample.output("product"))
    assert isinstance(found, Ball)
    assert found.contains(40)
    assert found.contains(Ball("40.0099"))
    assert not found.contains(Ball("40.0102"))
    assert sample.reader.value(sample.output("word")) == "rear"
    assert sample.reader.approximate(sample.output("product")) == pytest.approx(40)


@pytest.mark.parametrize(("limit", "truth"), [("40.02", True), ("39.98", False)])
def test_a_limit_outside_the_bound_is_decided(limit: str, truth: bool) -> None:
    sample = Sample(x=2, y=5)
    flag = sample.apply(at_most, sample.output("product"), sample.number(Fraction(limit)))
    assert sample.reader.truth(flag) is truth


@pytest.mark.parametrize("limit", ["40.009", "40", "39.991"])
def test_a_limit_inside_the_bound_is_not(limit: str) -> None:
    sample = Sample(x=2, y=5)
    limit_term = sample.number(Fraction(limit))
    flag = sample.apply(at_most, sample.output("product"), limit_term)
    within = Unknown((Reason("tie", "within the bound of solver 'cube'"),))
    assert sample.reader.truth(flag) == within
    assert sample.reader.sign(sample.apply(subtract, limit_term, sample.output("product"))) == within


def test_the_same_figure_agrees_with_itself() -> None:
    sample = Sample(x=2, y=5)
    term = sample.output("product")
    assert sample.reader.truth(sample.apply(at_most, term, term)) is True


def test_one_run_is_enough_whatever_the_precision() -> None:
    sample = Sample(x=2, y=5)
    root = sample.output("square", sample.apply(sqrt, sample.x))
    for bits in (64, 128, 512, 4096):
        assert isinstance(sample.reader.ball(root, bits), Ball)
    assert len(sample.question._known) == 1


def test_what_is_missing_makes_unknown_what_needs_it() -> None:
    sample = Sample(x=2, y=None)
    assert sample.reader.value(sample.output("product")) == Unknown((Reason("missing", "y"),))
    assert isinstance(sample.reader.value(sample.output("square")), Ball)
    without = Sample(x=None, y=5)
    assert without.reader.value(without.output("word")) == Unknown((Reason("missing", "x"),))


def test_no_answer_is_unknown_with_the_reason() -> None:
    sample = Sample(x=2, y=-5)
    assert sample.reader.value(sample.output("product")) == Unknown((Reason("undefined", "y is negative"),))


def test_slopes_are_central_differences_and_said_to_be() -> None:
    sample = Sample(x=2, y=5)
    total = sample.apply(add, sample.apply(multiply, sample.x, sample.number(3)), sample.output("product"))
    gradient = GradientReader(sample.bank, sample.reader).gradient(total)
    assert gradient is not None
    assert gradient.differenced
    # d/dx (3 x + x³ y) = 3 + 3 x² y, d/dy = x³
    assert gradient.slopes == {"x": pytest.approx(63, rel=1e-5), "y": pytest.approx(8, rel=1e-9)}
    plain = GradientReader(sample.bank, sample.reader).gradient(sample.x)
    assert plain is not None
    assert not plain.differenced


def test_a_slope_by_what_does_not_matter_is_left_out() -> None:
    sample = Sample(x=2, y=None)
    gradient = GradientReader(sample.bank, sample.reader).gradient(sample.output("square"))
    assert gradient is not None
    assert gradient.slopes == {"x": pytest.approx(4)}


def test_a_program_leaves_it_to_the_exact_reader() -> None:
    sample = Sample(x=2, y=5)
    flag = sample.apply(at_most, sample.output("product"), sample.apply(multiply, sample.x, sample.number(30)))
    program = Program(sample.bank, sample.inputs, [flag])
    assert program.reader(sample.inputs).truth(flag) is True
    assert program.reader({**sample.inputs, "y": Monomial(Fraction(8))}).truth(flag) is False


def test_along_a_stretch_nothing_is_certain_but_at_points() -> None:
    sample = Sample(x=2, y=5)
    flag = sample.apply(at_most, sample.output("product"), sample.number(100))
    other = sample.apply(at_most, sample.output("square"), sample.number(100))
    along = SegmentReader(sample.bank, sample.inputs, sample.reader, "y")
    assert along.truths([flag, other], Fraction(5), Fraction(6)) == [None, True]
    assert along.at([flag], Fraction(12)) == [True]
    assert along.at([flag], Fraction(13)) == [False]
    movement = Movement([flag, other], ["x", "y"])
    assert [movement.is_solved_outside(flag, place) for place in (0, 1)] == [True, True]
    assert [movement.is_solved_outside(other, place) for place in (0, 1)] == [True, False]
    assert (along.moves(flag), along.moves(other)) == (True, False)


def test_there_is_no_closed_form() -> None:
    sample = Sample(x=2, y=5)
    with pytest.raises(Refused, match="no closed form: a solver stands behind"):
        symbolic.describe(sample.bank, sample.output("product"))
