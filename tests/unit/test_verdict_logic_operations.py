"""Comparisons, flags and bounds as operations: every corner of their tables, in memory."""

from __future__ import annotations

import itertools

import pytest

from rulecheck.operations import bounds
from rulecheck.operations.arithmetic import divide
from rulecheck.operations.comparison import at_most, below, equal, same_text
from rulecheck.operations.exact import Ball, Rational
from rulecheck.operations.logic import CONTRADICTION, both, either, negation, reconcile
from rulecheck.operations.operation import UNDECIDED, Undefined
from rulecheck.operations.values import Bounds, Reason, Unknown

LACK = Unknown((Reason("missing", "a"),))
OTHER = Unknown((Reason("missing", "b"),))


def ball(value: float, radius: float = 0.0) -> Ball:
    return Ball(value, radius)


def count(low: int, high: int, *reasons: Reason) -> Bounds:
    return Bounds(Rational(low), Rational(high), reasons or LACK.reasons)


@pytest.mark.parametrize(
    ("left", "right", "least", "less", "same"),
    [(1, 2, True, True, False), (2, 2, True, False, True), (3, 2, False, False, False)],
)
def test_exact_numbers_are_compared(left: int, right: int, least: bool, less: bool, same: bool) -> None:
    pair = [Rational(left), Rational(right)]
    assert (at_most.exact(pair), below.exact(pair), equal.exact(pair)) == (least, less, same)
    balls = [ball(left), ball(right)]
    assert (at_most.ball(balls), below.ball(balls), equal.ball(balls)) == (least, less, same)


def test_balls_that_overlap_are_not_decided() -> None:
    pair = [ball(1, 0.5), ball(1.25, 0.5)]
    assert [operation.ball(pair) for operation in (at_most, below, equal)] == [UNDECIDED] * 3
    apart = [ball(1, 0.25), ball(2, 0.25)]
    assert [operation.ball(apart) for operation in (at_most, below, equal)] == [True, True, False]
    turned = apart[::-1]
    assert [operation.ball(turned) for operation in (at_most, below, equal)] == [False, False, False]


def test_texts_are_compared() -> None:
    assert same_text.exact(["rear", "rear"]) is True
    assert same_text.exact(["rear", "front"]) is False
    assert same_text.strict


# --- numbers between bounds ------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("values", "least", "less", "same"),
    [
        ((count(2, 4), Rational(4)), True, None, None),
        ((count(2, 4), Rational(5)), True, True, False),
        ((count(2, 4), Rational(2)), None, False, None),
        ((count(2, 4), Rational(1)), False, False, False),
        ((count(2, 4), Rational(3)), None, None, None),
        ((Rational(2), count(2, 4)), True, None, None),
        ((Rational(1), count(2, 4)), True, True, False),
        ((Rational(4), count(2, 4)), None, False, None),
        ((Rational(5), count(2, 4)), False, False, False),
        ((count(1, 2), count(2, 4)), True, None, None),
        ((count(1, 2), count(3, 4)), True, True, False),
        ((count(3, 4), count(1, 2)), False, False, False),
        ((count(1, 4), count(2, 3)), None, None, None),
        ((count(2, 3), count(1, 4)), None, None, None),
    ],
)
def test_a_count_decides_where_all_its_values_do(
    values: tuple[object, object], least: bool | None, less: bool | None, same: bool | None
) -> None:
    found = []
    for operation in (at_most, below, equal):
        assert operation.bounds is not None
        found.append(operation.bounds(values))
    assert found == [least, less, same]


def difference(values: tuple[Rational, ...]) -> Rational:
    return values[0] - values[1]


def added(values: list[Rational]) -> Rational:
    return sum(values[1:], values[0])


def nowhere(values: object) -> Undefined:
    return Undefined("nothing here")


def test_corners_span_what_is_monotone_in_each_operand() -> None:
    rule = bounds.by_corners(difference)
    assert rule([count(1, 3), Rational(5)]) == count(-4, -2)
    assert rule([Rational(5), count(1, 3)]) == count(2, 4)
    assert rule([count(1, 3), count(10, 20)]) == count(-19, -7)
    merged = rule([count(1, 3), count(1, 2, *OTHER.reasons)])
    assert merged == Bounds(Rational(-1), Rational(2), (*LACK.reasons, *OTHER.reasons))


def test_ends_span_what_grows_with_every_operand() -> None:
    rule = bounds.by_ends(added)
    assert rule([count(1, 3), Rational(5)]) == count(6, 8)
    assert rule([count(1, 3), count(10, 20), Rational(1)]) == count(12, 24)


@pytest.mark.parametrize("made", [bounds.by_corners, bounds.by_ends])
def test_bounds_that_meet_are_a_number(made: object) -> None:
    rule = made(lambda values: values[0] * 0)  # type: ignore[operator]
    assert rule([count(1, 3)]) == 0
    assert not isinstance(rule([count(1, 3)]), Bounds)


@pytest.mark.parametrize("made", [bounds.by_corners, bounds.by_ends])
def test_bounds_with_an_undefined_end_say_nothing(made: object) -> None:
    assert made(nowhere)([count(1, 3)]) is None  # type: ignore[operator]
    assert made(lambda values: None)([count(1, 3)]) is None  # type: ignore[operator]
    assert made(lambda values: None if values[0] == 1 else values[0])([count(1, 3)]) is None  # type: ignore[operator]


@pytest.mark.parametrize(
    ("divisor", "low", "high"),
    [(count(1, 2), 3, 6), (count(-2, -1), -6, -3), (Rational(2), 3, 3)],
)
def test_a_quotient_needs_a_divisor_of_one_sign(divisor: object, low: int, high: int) -> None:
    assert divide.bounds is not None
    found = divide.bounds([Rational(6), divisor])
    assert (found.low, found.high) == (low, high) if isinstance(found, Bounds) else found == low == high


@pytest.mark.parametrize("divisor", [count(0, 2), count(-1, 1), count(-1, 0), Rational(0)])
def test_a_divisor_that_may_be_zero_says_nothing(divisor: object) -> None:
    assert divide.bounds is not None
    assert divide.bounds([Rational(6), divisor]) is None
    assert divide.bounds([count(1, 2), divisor]) is None


# --- flags -----------------------------------------------------------------------------------------------------------

FLAGS = (True, False, LACK, UNDECIDED)


@pytest.mark.parametrize(("operation", "decides"), [(both, False), (either, True)])
@pytest.mark.parametrize("values", [*itertools.product(FLAGS, repeat=2), *itertools.product(FLAGS, repeat=3)])
def test_what_decides_comes_first_then_undecided_then_unknown(
    operation: object, decides: bool, values: tuple[object, ...]
) -> None:
    if decides in [value for value in values if isinstance(value, bool)]:
        expected: object = decides
    elif any(value is UNDECIDED for value in values):
        expected = UNDECIDED
    else:
        expected = LACK if any(value is LACK for value in values) else not decides
    for rule in (operation.exact, operation.ball):  # type: ignore[attr-defined]
        found = rule(values)
        assert found == expected
        assert type(found) is type(expected)


@pytest.mark.parametrize("rule", [both.exact, either.exact, both.ball, either.ball])
def test_reasons_of_all_unknown_flags_are_given(rule: object) -> None:
    neutral = rule in (both.exact, both.ball)
    assert rule([OTHER, neutral, LACK]) == Unknown((*OTHER.reasons, *LACK.reasons))  # type: ignore[operator]


@pytest.mark.parametrize("flag", [True, False])
def test_negation_turns_a_flag_round(flag: bool) -> None:
    assert negation.exact([flag]) is not flag
    assert negation.ball([flag]) is not flag
    assert isinstance(negation.exact([flag]), bool)


def test_which_operations_see_unknown_operands() -> None:
    assert [operation.strict for operation in (both, either, reconcile)] == [False] * 3
    assert [operation.strict for operation in (negation, at_most, below, equal)] == [True] * 4


VALUE = Rational(3)


@pytest.mark.parametrize(
    ("values", "expected"),
    [
        ((VALUE, True), VALUE),
        ((VALUE, False), CONTRADICTION),
        ((VALUE, LACK), VALUE),
        ((VALUE, UNDECIDED), UNDECIDED),
        ((LACK, True), LACK),
        ((LACK, False), LACK),
        ((LACK, UNDECIDED), LACK),
        ((UNDECIDED, True), UNDECIDED),
        ((UNDECIDED, LACK), UNDECIDED),
        ((UNDECIDED, False), CONTRADICTION),
    ],
)
def test_a_declared_value_stands_until_it_is_contradicted(values: tuple[object, object], expected: object) -> None:
    assert reconcile.exact(values) == expected
    found = reconcile.ball(values)
    if expected is VALUE:
        assert isinstance(found, Ball)
        assert found == 3
    else:
        assert found == expected


def test_a_declared_count_between_bounds_stays_one() -> None:
    between = count(1, 2)
    assert reconcile.exact((between, True)) == between
    assert reconcile.ball((between, True)) == between


def test_a_contradiction_is_open_and_not_unproven() -> None:
    assert CONTRADICTION.kind == "contradiction"


def test_balls_that_just_touch() -> None:
    wide = ball(0, 0.5)
    border = Ball(wide.rad())  # exactly the upper end of the other: equal, or above it
    assert at_most.ball([wide, border]) is True
    assert below.ball([border, wide]) is False
    assert at_most.ball([border, wide]) is UNDECIDED
    assert below.ball([wide, border]) is UNDECIDED
    assert equal.ball([wide, border]) is UNDECIDED
