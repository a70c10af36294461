"""Dates: the proleptic Gregorian calendar of the standard library, years 1 to 9999.

A date is its ordinal day (1 January of year 1 is 1). Months and years are clamped at the end of a
month: one month after 31 January is 28 or 29 February.
"""

from __future__ import annotations

from calendar import monthrange
from collections.abc import Callable, Sequence
from datetime import date
from typing import Any

from rulecheck.operations.balls import never
from rulecheck.operations.dimensions import DimensionRule, exactly, none, pure
from rulecheck.operations.exact import Rational
from rulecheck.operations.operation import Operation, Sort, Undefined
from rulecheck.operations.spaces import quiet
from rulecheck.quantity.dimension import CALENDAR, Dimension

OUT_OF_CALENDAR = Undefined("a date outside the years 1 to 9999")
PART_OF_A_DAY = Undefined("a period that is no whole number of days or months")


def months_later(day: date, months: int) -> date:
    """The date so many months on, clamped at the month's end; ValueError outside the calendar.

    >>> months_later(date(2028, 2, 29), 12)
    datetime.date(2029, 2, 28)
    """
    years, month = divmod(day.year * 12 + day.month - 1 + months, 12)
    if not date.min.year <= years <= date.max.year:
        raise ValueError("outside the calendar")
    return date(years, month + 1, min(day.day, monthrange(years, month + 1)[1]))


def whole_years(start: date, end: date) -> int:
    """Whole years from `start` to `end`; negative where `end` is earlier.

    A year is over on the clamped day, so that a date plus n years is n years later.

    >>> whole_years(date(2028, 2, 29), date(2029, 2, 28)), whole_years(date(2029, 1, 2), date(2028, 1, 1))
    (1, -1)
    """
    if end < start:
        return -whole_years(end, start)
    years = end.year - start.year
    return years if not years or months_later(start, 12 * years) <= end else years - 1


def _days(day: int, days: int) -> int:
    return date.fromordinal(day + days).toordinal()


def _months(day: int, months: int) -> int:
    return months_later(date.fromordinal(day), months).toordinal()


def _last_of_year(day: int) -> int:
    return date(date.fromordinal(day).year, 12, 31).toordinal()


def _years(start: int, end: int) -> int:
    return whole_years(date.fromordinal(start), date.fromordinal(end))


def _same_day(day: int) -> int:
    return date.fromordinal(day).toordinal()


def _calendar(
    name: str,
    meaning: str,
    function: Callable[..., int],
    takes: tuple[Sort, ...],
    gives: Sort,
    dimension: DimensionRule,
    slope: float = 0.0,
) -> Operation:
    def exact(values: Sequence[Any]) -> Any:
        if any(value.denom() != 1 for value in values):
            return PART_OF_A_DAY
        try:
            return Rational(function(*(int(value.numer()) for value in values)))
        except (ValueError, OverflowError):
            return OUT_OF_CALENDAR

    def on_floats(*values: Any) -> float:
        try:
            return float(function(*map(_as_whole, values)))
        except (ValueError, OverflowError):
            return float("nan")

    def symbolic(sympy: Any, values: Sequence[Any]) -> Any:
        """The calendar has no closed form: a value for numbers, else a named function."""
        if all(getattr(value, "is_Integer", False) for value in values):
            return sympy.Integer(function(*map(int, values)))
        return sympy.Function(name)(*values)

    return Operation(
        name=name,
        takes=takes,
        gives=gives,
        dimension=dimension,
        exact=exact,
        ball=never,
        array=quiet(lambda space, values: space.vectorize(on_floats, otypes=[float])(*values)),
        symbolic=symbolic,
        script=f"{name}({', '.join(f'{{{index}}}' for index in range(len(takes)))})",
        partials=(lambda space, values: (slope,) * len(takes)) if gives == "number" else None,
        domain="years 1 to 9999",
        meaning=meaning,
    )


def _as_whole(value: Any) -> int:
    if value != int(value):
        raise ValueError("no whole number")
    return int(value)


def _days_dimension(dimensions: Sequence[Dimension]) -> Dimension:
    return CALENDAR


ordinal = _calendar("ordinal", "a date as a number of days", _same_day, ("date",), "number", _days_dimension, slope=1.0)
add_days = _calendar(
    "add_days", "the date so many days later; operands date, days", _days, ("date", "number"), "date",
    exactly(CALENDAR, 1, "a date plus days"),
)  # fmt: skip
add_months = _calendar(
    "add_months", "the date so many months later, clamped at the month's end; operands date, months", _months,
    ("date", "number"), "date", pure("a date plus months"),
)  # fmt: skip
end_of_year = _calendar("end_of_year", "31 December of the year of a date", _last_of_year, ("date",), "date", none)
years_between = _calendar(
    "years_between", "whole years from one date to another", _years, ("date", "date"), "number", none
)
