"""Dates: clamping at month ends, whole years, and the ends of the calendar."""

from __future__ import annotations

from datetime import date

import pytest

from rulecheck.operations.calendar import (
    OUT_OF_CALENDAR,
    PART_OF_A_DAY,
    add_days,
    add_months,
    end_of_year,
    months_later,
    ordinal,
    years_between,
)
from rulecheck.operations.exact import Rational


def day(text):
    return Rational(date.fromisoformat(text).toordinal())


@pytest.mark.parametrize(
    ("start", "months", "due"),
    [
        ("2027-01-31", 1, "2027-02-28"),
        ("2028-01-31", 1, "2028-02-29"),
        ("2028-02-29", 12, "2029-02-28"),
        ("2028-02-29", 48, "2032-02-29"),
        ("2027-03-31", -1, "2027-02-28"),
        ("2027-12-15", 1, "2028-01-15"),
        ("2027-01-15", -13, "2025-12-15"),
        ("2027-05-31", 0, "2027-05-31"),
        ("2100-01-31", 1, "2100-02-28"),
    ],
)
def test_months_are_clamped(start, months, due):
    assert add_months.exact([day(start), Rational(months)]) == day(due)


@pytest.mark.parametrize(
    ("start", "end", "due"),
    [
        ("2027-03-01", "2028-03-01", 1),
        ("2027-03-01", "2028-02-29", 0),
        ("2028-02-29", "2029-02-28", 1),
        ("2028-02-29", "2029-02-27", 0),
        ("2027-03-01", "2027-03-01", 0),
        ("2028-03-01", "2027-03-01", -1),
        ("2028-03-01", "2027-03-02", 0),
        ("2000-01-01", "2027-12-31", 27),
    ],
)
def test_whole_years(start, end, due):
    assert years_between.exact([day(start), day(end)]) == Rational(due)


def test_days_and_ends_of_years():
    assert add_days.exact([day("2028-02-28"), Rational(2)]) == day("2028-03-01")
    assert end_of_year.exact([day("2027-01-01")]) == day("2027-12-31")
    assert end_of_year.exact([day("2027-12-31")]) == day("2027-12-31")
    assert ordinal.exact([day("0001-01-01")]) == Rational(1)


def test_outside_the_calendar():
    last, first = day("9999-12-31"), day("0001-01-01")
    assert add_days.exact([last, Rational(1)]) == OUT_OF_CALENDAR
    assert add_days.exact([first, Rational(-1)]) == OUT_OF_CALENDAR
    assert add_days.exact([first, Rational(10**30)]) == OUT_OF_CALENDAR
    assert add_months.exact([last, Rational(1)]) == OUT_OF_CALENDAR
    assert add_months.exact([first, Rational(-1)]) == OUT_OF_CALENDAR
    with pytest.raises(ValueError, match="outside the calendar"):
        months_later(date.max, 1)


def test_parts_of_a_day_are_no_days():
    assert add_days.exact([day("2027-01-01"), Rational(1, 2)]) == PART_OF_A_DAY
    assert add_months.exact([day("2027-01-01"), Rational(1, 2)]) == PART_OF_A_DAY
