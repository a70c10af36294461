from __future__ import annotations

from datetime import date
from fractions import Fraction

import pytest

from rulecheck.diagnostics import Faults, Span
from rulecheck.quantity.dimension import ACCELERATION, LENGTH, MASS, PURE, TEMPERATURE, Dimension
from rulecheck.quantity.quantity import Quantity
from rulecheck.quantity.reading_values import read_day, read_outline, read_period, read_point, read_quantity
from rulecheck.quantity.units import find_unit
from rulecheck.reading.nodes import Located

PRESSURE = find_unit("Pa").dimension
TORQUE = find_unit("N*m").dimension
SPEED = find_unit("m/s").dimension


def located(text: str) -> Located:
    return Located(text, Span("car.design.yaml", 100, 100 + len(text), 7, 14))


def read(text: str, expected: Dimension | None = None, *, missing_blank: bool = False) -> Quantity:
    faults = Faults()
    found = read_quantity(located(text), expected, missing_blank=missing_blank, faults=faults)
    assert not faults, faults.found
    assert found is not None
    return found


def refused(text: str, expected: Dimension | None = None, *, missing_blank: bool = False) -> list[tuple[str, str, str]]:
    """The code, the part of the text pointed at, and the advice of each fault."""
    faults = Faults()
    assert read_quantity(located(text), expected, missing_blank=missing_blank, faults=faults) is None
    found = []
    for item in faults.found:
        assert item.span is not None
        assert item.span.column == 14 + item.span.start - 100
        found.append((item.code, text[item.span.start - 100 : item.span.end - 100], item.advice))
    return found


@pytest.mark.parametrize(
    ("text", "expected", "shown"),
    [
        ("1900 mm", LENGTH, "1900 mm"),
        ("1900   mm", LENGTH, "1900 mm"),
        ("-3.50 deg", PURE, "-3.5 deg"),
        ("12 %", PURE, "12 %"),
        ("0.12", PURE, "0.12"),
        ("7", None, "7"),
        ("5 1/s", find_unit("Hz").dimension, "5 1/s"),
        ("1e3 mm", LENGTH, "1000 mm"),
        ("40 Nm", TORQUE, "40 N*m"),
        ("20 degC", TEMPERATURE, "20 degC"),
        ("20 degC ± 1 K", TEMPERATURE, "20 degC ± 1 degC"),
        ("1895 mm ± 0.6 mm (k=2)", LENGTH, "1895 mm ± 0.6 mm (k=2)"),
        ("1895 mm ± 0.06 cm (k = 2)", LENGTH, "1895 mm ± 0.6 mm (k=2)"),
        ("1895 ± 0.6 mm (k=2)", LENGTH, "1895 mm ± 0.6 mm (k=2)"),
        ("1895 ±1 mm", LENGTH, "1895 mm ± 1 mm"),
        ("1895 mm +/- 1 mm", LENGTH, "1895 mm ± 1 mm"),
        ("1895 +/-1 mm", LENGTH, "1895 mm ± 1 mm"),
        ("1895 +0/-2 mm", LENGTH, "1895 mm +0/-2 mm"),
        ("1895 mm +0/-0.2 cm", LENGTH, "1895 mm +0/-2 mm"),
        ("1895 mm +3/+1 mm", LENGTH, "1895 mm +3/+1 mm"),
        ("41 kg ± 5 %", MASS, "41 kg ± 2.05 kg"),
        ("1.8 bar gauge", PRESSURE, "1.8 bar gauge"),
        ("1.8 bar absolute ± 0.1 bar", PRESSURE, "1.8 bar absolute ± 0.1 bar"),
        ("1.8 bar ± 0.1 bar gauge", PRESSURE, "1.8 bar gauge ± 0.1 bar"),
    ],
)
def test_values_are_read(text: str, expected: Dimension | None, shown: str) -> None:
    assert str(read(text, expected)) == shown


def test_values_are_exact_across_units() -> None:
    assert read("1.9 m").si() == read("1900 mm").si()
    assert read("0.1 mm").si()[0] + read("0.2 mm").si()[0] == read("0.3 mm").si()[0]


@pytest.mark.parametrize(
    ("text", "expected", "faults"),
    [
        ("1900", LENGTH, [("unit-missing", "1900", "write the unit, for example '1900 mm'")]),
        ("0", LENGTH, [("unit-missing", "0", "write the unit, for example '0 mm'")]),
        ("2", ACCELERATION, [("unit-missing", "2", "write the unit, for example '2 m/s^2'")]),
        ("1900 kg", LENGTH, [("wrong-dimension", "kg", "write a unit such as 'mm'")]),
        ("12 mm", PURE, [("wrong-dimension", "mm", "leave the unit out")]),
        ("20 C", TEMPERATURE, [("wrong-dimension", "C", "did you mean 'degC'?")]),
        ("40 nm", TORQUE, [("wrong-dimension", "nm", "did you mean 'N*m'?")]),
        ("300 ps", find_unit("W").dimension, [("wrong-dimension", "ps", "did you mean 'PS'?")]),
        ("10 g", MASS, [("unknown-unit", "g", "write 'gram' for a mass or 'gn' for an acceleration")]),
        ("10 kg*mm/g", MASS, [("unknown-unit", "g", "write 'gram' for a mass or 'gn' for an acceleration")]),
        ("1900 KM", LENGTH, [("unknown-unit", "KM", "did you mean 'km'?")]),
        ("100 km / h", SPEED, [("bad-value", "/", "write a unit without blanks, as in 'km/h'")]),
        ("1 900 mm", LENGTH, [("bad-value", "900", "write a number without blanks")]),
        ("1900 mm long", LENGTH, [("bad-value", "long", "leave it out")]),
        ("1900mm", LENGTH, [("bad-value", "1900mm", "put a blank: '1900 mm'")]),
        ("12%", PURE, [("bad-value", "12%", "put a blank: '12 %'")]),
        (
            "1,900 mm",
            LENGTH,
            [("bad-number", "1,900", "write the decimal mark as a point and thousands without a mark")],
        ),
        ("3/8 in", LENGTH, [("bad-number", "3/8", "write a fraction as a decimal: 0.375 for 3/8")]),
        ("0x1F mm", LENGTH, [("bad-number", "0x1F", "write the number in decimal digits")]),
        (".inf mm", LENGTH, [("bad-number", ".inf", "write a finite number")]),
        ("nan", PURE, [("bad-number", "nan", "write a finite number")]),
        (
            "\u22125 mm",
            LENGTH,
            [("bad-number", "\u22125", "write the minus as the hyphen of the keyboard: '-'")],
        ),
        (
            "1900\u00a0mm",
            LENGTH,
            [
                (
                    "bad-number",
                    "1900\u00a0mm",
                    "write ordinary blanks: a no-break blank or the like stands here",
                )
            ],
        ),
        ("yes", LENGTH, [("bad-value", "yes", "write a value such as '1900 mm'")]),
        ("", LENGTH, [("bad-value", "", "write a value such as '1900 mm'")]),
        ("1.8 mm gauge", LENGTH, [("bad-value", "gauge", "leave 'gauge' out")]),
    ],
)
def test_faults_say_what_to_do_and_point_at_the_part(
    text: str, expected: Dimension, faults: list[tuple[str, str, str]]
) -> None:
    assert refused(text, expected) == faults


def test_a_fault_names_what_is_due_and_what_stands_there() -> None:
    faults = Faults()
    read_quantity(located("1900 kg"), LENGTH, faults=faults)
    assert str(faults.found[0]) == (
        "car.design.yaml:7:19: wrong-dimension: 'kg' is a unit of mass [kg], and length [m] is due; "
        "expected length [m]; write a unit such as 'mm'"
    )


def test_all_faults_of_a_value_are_reported() -> None:
    assert [code for code, _, _ in refused("1,9 mmm", LENGTH)] == ["bad-number", "unknown-unit"]
    assert [code for code, _, _ in refused("1900 kg gauge", LENGTH)] == ["wrong-dimension", "bad-value"]


@pytest.mark.parametrize(
    ("text", "shown"), [("250mm", "250 mm"), ("-5.5mm", "-5.5 mm"), ("250 mm", "250 mm"), ("1e3 mm", "1000 mm")]
)
def test_the_blank_may_be_missing_on_the_command_line(text: str, shown: str) -> None:
    assert str(read(text, LENGTH, missing_blank=True)) == shown


def test_the_blank_may_not_be_missing_behind_an_exponent() -> None:
    assert refused("1e3mm", LENGTH, missing_blank=True) == [("bad-value", "1e3mm", "put a blank: '1e3 mm'")]


def test_an_angle_or_a_share_that_is_declared_wants_its_unit() -> None:
    for symbol in ("deg", "%"):
        faults = Faults()
        declared = find_unit(symbol)
        assert read_quantity(located("7"), PURE, declared=declared, faults=faults) is None
        assert faults.found[0].advice == f"write the unit, for example '7 {symbol}'"
        assert read_quantity(located(f"7 {symbol}"), PURE, declared=declared, faults=Faults()) is not None
    assert read_quantity(located("7"), PURE, declared=find_unit("1"), faults=Faults()) is not None


def test_units_of_a_rulesets_own_are_read() -> None:
    own = {"EUR": Dimension.of(EUR=1)}
    found = read_quantity(located("5 EUR"), own["EUR"], own=own, faults=Faults())
    assert found is not None
    assert found.si() == (5, 0)


def test_a_very_long_value_is_refused_at_once() -> None:
    assert refused("1 mm" + " " * 10_000, LENGTH)[0][0] == "too-large"


@pytest.mark.parametrize("text", ["1250 0 310 mm", "1250 mm 0 mm 310 mm", "125 0 31 cm", "1250  -0  310 mm"])
def test_points_are_read(text: str) -> None:
    found = read_point(located(text), {}, Faults())
    assert found is not None
    assert [item.si()[0] for item in found] == [Fraction(5, 4), 0, Fraction(31, 100)]


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("0 0 0", "unit-missing"),
        ("1 2 mm", "bad-value"),
        ("1 2 3 4 mm", "bad-value"),
        ("1 mm 2 3 mm", "bad-value"),
        ("1 2 mm 3", "bad-value"),
        ("1 2 3 mm mm mm", "bad-value"),
        ("1, 2, 3 mm", "bad-value"),
        ("1 2 3 kg", "wrong-dimension"),
        ("1 x 3 mm", "unknown-unit"),
        ("1 2 3mm", "bad-value"),
        ("", "bad-value"),
    ],
)
def test_what_is_no_point_is_refused(text: str, code: str) -> None:
    faults = Faults()
    assert read_point(located(text), {}, faults) is None
    assert [item.code for item in faults.found] == [code]


def test_outlines_are_read() -> None:
    found = read_outline(located("340 880, 640 880, 640 940, 340 940 mm"), {}, Faults())
    assert found is not None
    assert [(int(x.value), int(y.value)) for x, y in found] == [(340, 880), (640, 880), (640, 940), (340, 940)]
    assert {x.unit.symbol for x, _ in found} == {"mm"}


@pytest.mark.parametrize(
    ("text", "code"), [("1 2, 3 mm", "bad-value"), ("1 2, 3 4", "unit-missing"), ("1 2, 3 4 s", "wrong-dimension")]
)
def test_what_is_no_outline_is_refused(text: str, code: str) -> None:
    faults = Faults()
    assert read_outline(located(text), {}, faults) is None
    assert [item.code for item in faults.found] == [code]


@pytest.mark.parametrize(
    ("text", "period"),
    [("5 years", (60, 0)), ("1 year", (12, 0)), ("1 month", (1, 0)), ("30 days", (0, 30)), ("0 days", (0, 0))],
)
def test_periods_are_read(text: str, period: tuple[int, int]) -> None:
    assert read_period(located(text), Faults()) == period


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("5", "bad-value"),
        ("30 min", "bad-value"),
        ("1.5 years", "bad-value"),
        ("-1 day", "bad-value"),
        ("5years", "bad-value"),
        ("1 day 2 days", "bad-value"),
        ("1e900 years", "too-large"),
        ("five years", "bad-value"),
        ("007 days", "bad-number"),
    ],
)
def test_what_is_no_period_is_refused(text: str, code: str) -> None:
    faults = Faults()
    assert read_period(located(text), faults) is None
    assert [item.code for item in faults.found] == [code]


def test_days_are_read() -> None:
    assert read_day(located("2028-02-29"), Faults()) == date(2028, 2, 29)


@pytest.mark.parametrize("text", ["2027-02-29", "1.3.2027", "20270301", "2027-3-1", "0000-01-01", "2027-03-01T00", ""])
def test_what_is_no_day_is_refused(text: str) -> None:
    faults = Faults()
    assert read_day(located(text), faults) is None
    assert [item.code for item in faults.found] == ["bad-date"]
