from __future__ import annotations

import pickle
from fractions import Fraction

import pytest

from rulecheck.quantity.numbers import NumberFault, quoted, read_number, show_exact, show_number


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("1900", Fraction(1900)),
        ("-3.5", Fraction(-7, 2)),
        ("+2", Fraction(2)),
        ("0", Fraction(0)),
        ("-0.0", Fraction(0)),
        ("0.1", Fraction(1, 10)),
        ("1e3", Fraction(1000)),
        ("1.5e-6", Fraction(3, 2_000_000)),
        ("2E+2", Fraction(200)),
        ("1e999", Fraction(10) ** 999),
        ("9" * 400, Fraction(10**400 - 1)),
    ],
)
def test_numbers_are_read_exactly(text: str, value: Fraction) -> None:
    assert read_number(text) == value


@pytest.mark.parametrize(
    ("text", "advice"),
    [
        ("", "write a number, such as 1900"),
        ("007", "write the number without leading zeros"),
        ("-00.5", "write the number without leading zeros"),
        (".5", "write a digit before the point: 0.5"),
        ("5.", "write a digit behind the point, or no point"),
        ("1,9", "write the decimal mark as a point and thousands without a mark"),
        ("1,900.5", "write the decimal mark as a point and thousands without a mark"),
        ("1_000", "write the digits without underscores"),
        ("1'900", "write the digits without separators"),
        ("1 900", "write the digits without blanks"),
        ("0x1F", "write the number in decimal digits"),
        ("inf", "write a finite number"),
        ("-.inf", "write a finite number"),
        ("NaN", "write a finite number"),
        ("\u22125", "write the minus as the hyphen of the keyboard: '-'"),
        ("\u20135", "write the minus as the hyphen of the keyboard: '-'"),
        ("1\u00a0900", "write ordinary blanks: a no-break blank or the like stands here"),
        ("1\u202f900", "write ordinary blanks: a no-break blank or the like stands here"),
        ("3/8", "write a fraction as a decimal: 0.375 for 3/8"),
        ("1e", "write a whole exponent, such as 1.5e-6"),
        ("1e1.5", "write a whole exponent, such as 1.5e-6"),
        ("--1", "write one sign, directly before the digits"),
        ("\u0661", "write the digits 0 to 9"),
        ("abc", "write digits with a point, such as 1900, -3.5 or 1.5e-6"),
        ("5\n", "write digits with a point, such as 1900, -3.5 or 1.5e-6"),
    ],
)
def test_what_is_no_number_is_answered_with_advice(text: str, advice: str) -> None:
    with pytest.raises(NumberFault) as caught:
        read_number(text)
    assert caught.value.advice == advice
    assert caught.value.code == "bad-number"


@pytest.mark.parametrize("text", ["9" * 401, "0." + "1" * 400, "1e1000", "1e-0001"])
def test_bounds_are_kept(text: str) -> None:
    with pytest.raises(NumberFault) as caught:
        read_number(text)
    assert caught.value.code == "too-large"


def test_a_fault_can_be_pickled() -> None:
    fault = pickle.loads(pickle.dumps(NumberFault("m", "a", "too-large")))
    assert (fault.message, fault.advice, fault.code) == ("m", "a", "too-large")


def test_a_message_shows_what_cannot_be_seen() -> None:
    assert quoted("1\u00a09") == "'1<U+00A0>9'"


@pytest.mark.parametrize(
    ("value", "digits", "shown"),
    [
        (Fraction(0), 6, "0"),
        (Fraction(1900), 6, "1900"),
        (Fraction(19, 10), 6, "1.9"),
        (Fraction(1, 3), 6, "0.333333"),
        (Fraction(-2, 3), 3, "-0.667"),
        (Fraction(5, 2), 1, "3"),
        (Fraction(-5, 2), 1, "-3"),
        (Fraction(1234567), 3, "1234567"),
        (Fraction(2469135, 2), 6, "1234568"),
        (Fraction(999_999_999, 1000), 6, "1000000"),
        (Fraction(9_999_999_999, 10), 6, "1e9"),
        (Fraction(10**8), 6, "100000000"),
        (Fraction(10**9), 6, "1e9"),
        (Fraction(-123456789012), 6, "-1.23457e11"),
        (Fraction(1, 10**5), 6, "0.00001"),
        (Fraction(1, 10**6), 6, "1e-6"),
        (Fraction(-1, 10**30), 6, "-1e-30"),
        (Fraction(1, 3 * 10**7), 2, "3.3e-8"),
    ],
)
def test_numbers_are_shown(value: Fraction, digits: int, shown: str) -> None:
    assert show_number(value, digits) == shown


@pytest.mark.parametrize(
    ("value", "shown"),
    [
        (Fraction(0), "0"),
        (Fraction(1900), "1900"),
        (Fraction(-3, 10), "-0.3"),
        (Fraction(1, 3), "1/3"),
        (Fraction(-22, 7), "-22/7"),
        (Fraction(10) ** 30, "1e30"),
        (Fraction(15, 10**12), "1.5e-11"),
        (Fraction(10) ** 1398, "1" + "0" * 399 + "e999"),
        (Fraction(1, 10**1000), "0.1e-999"),
    ],
)
def test_numbers_are_shown_exactly(value: Fraction, shown: str) -> None:
    assert show_exact(value) == shown


def test_what_a_calculation_may_reach_can_be_shown() -> None:
    assert show_number(Fraction(2) ** 100_000) == "9.99002e30102"
    assert show_exact(Fraction(1, 3**40_000)).startswith("about ")
