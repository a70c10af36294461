"""The exact reader: certain values, signs and truths, and reasons where there are none."""

from __future__ import annotations

from decimal import Decimal
from fractions import Fraction as F

import pytest

from rulecheck.diagnostics import Refused, Span
from rulecheck.graph.terms import Bank
from rulecheck.operations.arithmetic import rational_power
from rulecheck.operations.catalogue import CATALOGUE
from rulecheck.operations.exact import Ball, PiNumber, Rational, precision
from rulecheck.operations.values import Bounds, Monomial, Reason, Unknown
from rulecheck.quantity.dimension import PURE
from rulecheck.readers import exact
from rulecheck.readers.exact import ExactReader

PLACE = Span("car.design.yaml", 10, 20, 2, 3)


@pytest.fixture
def bank():
    return Bank()


def apply(bank, name, *terms, span=None):
    operation = rational_power(F(name)) if name not in CATALOGUE else CATALOGUE[name]
    return bank.apply(operation, terms, PURE, span)


def number(bank, value, power=0):
    return bank.number(F(value), PURE, power)


def given(bank, path, sort="number"):
    return bank.input(path, sort, PURE, PLACE)


def test_nothing_is_decided_by_rounding(bank):
    """A millimetre as a tenth of ten, and degrees that carry pi."""
    margin = apply(bank, "subtract", given(bank, "a"), given(bank, "b"))
    assert ExactReader(bank, {"a": Monomial(F("1.9")), "b": Monomial(F(1900, 1000))}).sign(margin) == 0
    seven = Monomial(F(7, 180), 1)
    assert ExactReader(bank, {"a": seven, "b": seven}).sign(margin) == 0
    almost = Monomial(F(7, 180) + F(1, 10**40), 1)
    assert ExactReader(bank, {"a": seven, "b": almost}).sign(margin) == -1


def test_kinds_of_values(bank):
    reader = ExactReader(bank, {"x": Monomial(F(2)), "open": True, "grade": "S2"})
    assert reader.value(given(bank, "x")) == Rational(2)
    assert isinstance(reader.value(number(bank, 1, power=1)), PiNumber)
    assert isinstance(reader.value(apply(bank, "sqrt", given(bank, "x"))), Ball)
    assert reader.value(given(bank, "open", "flag")) is True
    assert reader.value(given(bank, "grade", "text")) == "S2"
    assert reader.truth(given(bank, "open", "flag")) is True


def test_a_missing_input_says_its_name_and_place(bank):
    reader = ExactReader(bank, {})
    due = Unknown((Reason("missing", "tyres.rear.width", PLACE),))
    term = given(bank, "tyres.rear.width")
    assert reader.value(term) == due
    assert reader.sign(apply(bank, "subtract", number(bank, 1), term)) == due
    assert reader.truth(apply(bank, "at_most", term, number(bank, 1))) == due
    assert reader.exact_fraction(term) is None
    assert reader.approximate(term) is None
    assert reader.decimal(term, 5) is None
    assert reader.ball(term, 64) == due


def test_an_unknown_term_keeps_its_reason(bank):
    reason = Reason("missing", "corners", PLACE)
    assert ExactReader(bank, {}).value(bank.unknown(reason, "number")) == Unknown((reason,))


def test_reasons_are_merged_each_once(bank):
    x, y = given(bank, "x"), given(bank, "y")
    found = ExactReader(bank, {}).value(apply(bank, "total", x, y, x))
    assert [reason.text for reason in found.reasons] == ["x", "y"]


def test_undefined_says_what_and_where(bank):
    term = apply(bank, "divide", number(bank, 1), given(bank, "x"), span=PLACE)
    reader = ExactReader(bank, {"x": Monomial(F(0))})
    assert reader.sign(term) == Unknown((Reason("undefined", "division by zero", PLACE),))
    root = apply(bank, "sqrt", apply(bank, "subtract", apply(bank, "sqrt", number(bank, 2)), number(bank, 2)))
    assert ExactReader(bank, {}).value(root).reasons[0].text == "root of a negative number"


class TestBranches:
    def test_only_the_arm_that_is_taken_counts(self, bank):
        flag, bad = given(bank, "flag", "flag"), given(bank, "lacking")
        term = bank.branch(flag, number(bank, 1), bad)
        assert ExactReader(bank, {"flag": True}).value(term) == Rational(1)
        assert ExactReader(bank, {"flag": False}).value(term) == Unknown((Reason("missing", "lacking", PLACE),))

    def test_an_unknown_condition_makes_it_unknown(self, bank):
        term = bank.branch(given(bank, "flag", "flag"), number(bank, 1), number(bank, 1))
        assert ExactReader(bank, {}).value(term) == Unknown((Reason("missing", "flag", PLACE),))

    def test_an_undecided_condition_asks_for_precision(self, bank):
        root = apply(bank, "sqrt", number(bank, 2))
        close = number(bank, F(14142135623730950488016887242096980785696718753769, 10**49))
        term = bank.branch(apply(bank, "at_most", root, close), number(bank, 1), number(bank, 2))
        assert ExactReader(bank, {}, start_bits=32).value(term) == Rational(2)

    def test_many_nested_arms(self, bank):
        key, term = given(bank, "key"), number(bank, -1)
        for step in range(3000, 0, -1):
            condition = apply(bank, "at_most", key, number(bank, step))
            term = bank.branch(condition, apply(bank, "add", number(bank, step), term), term)
        assert isinstance(ExactReader(bank, {"key": Monomial(F(2999))}).value(term), Rational)

    def test_an_arm_is_not_evaluated_before_it_is_taken(self, bank):
        huge = number(bank, F(3, 7))
        for _ in range(500):
            huge = apply(bank, "multiply", huge, huge)
        term = bank.branch(given(bank, "flag", "flag"), number(bank, 1), huge)
        reader = ExactReader(bank, {"flag": True})
        assert reader.value(term) == Rational(1)
        assert huge.index not in reader._exact


class TestEscalation:
    def test_precision_is_doubled_until_the_sign_is_certain(self, bank):
        # The square root of 2 to 49 decimals, cut off: from OEIS A002193.
        cut = number(bank, F(14142135623730950488016887242096980785696718753769, 10**49))
        margin = apply(bank, "subtract", apply(bank, "sqrt", number(bank, 2)), cut)
        reader = ExactReader(bank, {})
        assert reader.sign(margin) == 1
        assert sorted(reader._levels) == [64, 128, 256]
        assert reader.truth(apply(bank, "below", cut, apply(bank, "sqrt", number(bank, 2)))) is True

    def test_roots_that_cancel_are_proved_equal(self, bank):
        product = apply(bank, "multiply", apply(bank, "sqrt", number(bank, 2)), apply(bank, "sqrt", number(bank, 8)))
        reader = ExactReader(bank, {})
        assert reader.sign(apply(bank, "subtract", product, number(bank, 4))) == 0
        assert reader.truth(apply(bank, "at_most", product, number(bank, 4))) is True
        assert reader.truth(apply(bank, "below", product, number(bank, 4))) is False
        assert reader.truth(apply(bank, "equal", product, number(bank, 4))) is True
        assert reader.value(apply(bank, "floor", product)) == Rational(4)
        quotient = apply(bank, "divide", number(bank, 1), apply(bank, "subtract", product, number(bank, 4)))
        assert reader.value(quotient).reasons[0].text == "division by zero"

    def test_what_cannot_be_proved_is_a_tie(self, bank):
        one = number(bank, 1)
        square = apply(bank, "multiply", apply(bank, "exp", one), apply(bank, "exp", one))
        margin = apply(bank, "subtract", square, apply(bank, "exp", number(bank, 2)), span=PLACE)
        reader = ExactReader(bank, {}, most_bits=512)
        assert reader.sign(margin) == Unknown((Reason("tie", "a tie at 154 digits", PLACE),))
        flag = apply(bank, "at_most", square, apply(bank, "exp", number(bank, 2)), span=PLACE)
        assert reader.truth(flag) == Unknown((Reason("tie", "a tie at 154 digits", PLACE),))
        both = apply(bank, "both", flag, bank.flag(False))
        assert reader.truth(both) is False

    def test_precision_is_put_back(self, bank):
        before = precision.prec
        ExactReader(bank, {}).sign(apply(bank, "exp", number(bank, 1)))
        assert precision.prec == before


class TestBounds:
    def test_a_count_with_unknown_elements(self, bank):
        doubtful = apply(bank, "at_most", given(bank, "x"), number(bank, 1))
        count = apply(bank, "count_where", bank.flag(True), doubtful)
        reader = ExactReader(bank, {})
        reasons = (Reason("missing", "x", PLACE),)
        assert reader.value(count) == Bounds(Rational(1), Rational(2), reasons)
        assert reader.sign(count) == 1
        assert reader.sign(apply(bank, "subtract", count, number(bank, 1))) == Unknown(reasons)
        assert reader.sign(apply(bank, "subtract", count, number(bank, 3))) == -1
        assert reader.truth(apply(bank, "at_most", count, number(bank, 2))) is True
        assert reader.truth(apply(bank, "at_most", number(bank, 2), count)) == Unknown(reasons)
        assert reader.value(apply(bank, "sqrt", count)) == Unknown(reasons)
        assert reader.ball(count, 64) == Unknown(reasons)
        share = apply(bank, "divide", count, number(bank, 2))
        assert reader.value(share) == Bounds(Rational(1, 2), Rational(1), reasons)
        assert reader.value(apply(bank, "multiply", count, apply(bank, "exp", number(bank, 1)))) == Unknown(reasons)


class TestBudgets:
    def test_towers_of_powers_end_at_once(self, bank):
        nine = number(bank, 9)
        tower = apply(bank, "power", nine, apply(bank, "power", nine, apply(bank, "power", nine, nine)))
        found = ExactReader(bank, {}).sign(tower)
        assert found.reasons[0].kind == "budget"

    def test_sixty_four_squarings_go_on_as_balls(self, bank):
        term = number(bank, F(3, 7), power=1)
        for _ in range(64):
            term = apply(bank, "multiply", term, term)
        reader = ExactReader(bank, {})
        assert reader.sign(term) == 1
        assert reader.sign(apply(bank, "subtract", number(bank, 1), term)) == -1
        assert reader.decimal(term, 5) is None

    def test_huge_numbers_are_not_written_out(self, bank):
        huge = apply(bank, "power", number(bank, 2), number(bank, 10**12))
        steps = apply(bank, "even_to", huge, number(bank, 7))
        for term in (apply(bank, "floor", huge), apply(bank, "round", huge), apply(bank, "ceil", huge), steps):
            assert ExactReader(bank, {}).value(term).reasons[0].text == "a number too large to be rounded"
        assert ExactReader(bank, {}).sign(apply(bank, "subtract", huge, number(bank, 1))) == 1
        assert ExactReader(bank, {}).approximate(huge) == float("inf")
        assert str(ExactReader(bank, {}).decimal(huge, 3)).endswith("E+301029995663")

    def test_too_many_terms_are_refused(self, bank, monkeypatch):
        monkeypatch.setattr(exact, "MAXIMUM_TERMS", 2)
        for value in range(3):
            number(bank, value)
        with pytest.raises(Refused, match="too-large"):
            ExactReader(bank, {})

    def test_depth_is_no_bound(self, bank):
        term = given(bank, "x")
        for _ in range(20_000):
            term = apply(bank, "add", term, number(bank, 1))
        assert ExactReader(bank, {"x": Monomial(F(1))}).exact_fraction(term) == 20_001


class TestScreens:
    def test_numbers_for_screens(self, bank):
        reader = ExactReader(bank, {"x": Monomial(F(2))})
        third, root = apply(bank, "divide", number(bank, 1), number(bank, 3)), apply(bank, "sqrt", given(bank, "x"))
        assert reader.exact_fraction(third) == F(1, 3)
        assert reader.exact_fraction(root) is None
        assert reader.approximate(root) == pytest.approx(2**0.5, rel=1e-15)
        assert reader.decimal(third, 4) == Decimal("0.3333")
        assert reader.decimal(root, 4) == Decimal("1.414")
        assert str(reader.decimal(number(bank, 1, power=1), 30)) == "3.14159265358979323846264338328"
        assert reader.approximate(bank.flag(True)) == 1.0
        assert reader.approximate(bank.text("rear")) is None
        assert reader.decimal(bank.text("rear"), 3) is None

    def test_small_differences_are_shown_accurately(self, bank):
        root = apply(bank, "sqrt", number(bank, 2))
        cut = number(bank, F(14142135623730950488, 10**19))
        small = apply(bank, "subtract", root, cut)
        assert ExactReader(bank, {}).approximate(small) == pytest.approx(1.6887242096980785697e-21, rel=1e-12)

    def test_proved_zero_is_shown_as_zero(self, bank):
        product = apply(bank, "multiply", apply(bank, "sqrt", number(bank, 2)), apply(bank, "sqrt", number(bank, 8)))
        zero = apply(bank, "subtract", product, number(bank, 4))
        assert ExactReader(bank, {}).approximate(zero) == 0.0
        assert ExactReader(bank, {}).decimal(zero, 6) == 0

    def test_numbers_beyond_doubles(self, bank):
        huge = apply(bank, "400", number(bank, 10))
        assert ExactReader(bank, {}).approximate(huge) == float("inf")
        assert ExactReader(bank, {}).approximate(apply(bank, "negate", huge)) == float("-inf")

    def test_balls_at_a_precision(self, bank):
        root = apply(bank, "sqrt", number(bank, 2))
        assert ExactReader(bank, {}).ball(root, 1000).rel_accuracy_bits() > 990
        assert ExactReader(bank, {}).ball(number(bank, 1, power=1), 1000).rel_accuracy_bits() > 990
        assert ExactReader(bank, {}).ball(root, 8192).rel_accuracy_bits() > 8000
