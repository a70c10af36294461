from __future__ import annotations

import pickle
from fractions import Fraction

import pytest

from rulecheck.quantity.dimension import PURE, Dimension
from rulecheck.quantity.units import UnitFault, find_unit, is_unit, show_unit

EUR = {"EUR": Dimension.of(EUR=1)}


@pytest.mark.parametrize(
    ("text", "symbol", "dimension", "factor", "power"),
    [
        ("mm", "mm", {"m": 1}, Fraction(1, 1000), 0),
        ("km/h", "km/h", {"m": 1, "s": -1}, Fraction(5, 18), 0),
        ("m/s^2", "m/s^2", {"m": 1, "s": -2}, Fraction(1), 0),
        ("W/(m^2*K)", "W/(m^2*K)", {"kg": 1, "s": -3, "K": -1}, Fraction(1), 0),
        ("kg*m^-1*s^-2", "kg*m^-1*s^-2", {"kg": 1, "m": -1, "s": -2}, Fraction(1), 0),
        ("Nm", "N*m", {"kg": 1, "m": 2, "s": -2}, Fraction(1), 0),
        ("kN*m/deg", "kN*m/deg", {"kg": 1, "m": 2, "s": -2}, Fraction(180_000), -1),
        ("cm3", "cm^3", {"m": 3}, Fraction(1, 10**6), 0),
        ("gram/cm3", "gram/cm^3", {"kg": 1, "m": -3}, Fraction(1000), 0),
        ("N/Nm", "N/(N*m)", {"m": -1}, Fraction(1), 0),
        ("mm4", "mm^4", {"m": 4}, Fraction(1, 10**12), 0),
        ("1/s", "1/s", {"s": -1}, Fraction(1), 0),
        ("1", "1", {}, Fraction(1), 0),
        ("%", "%", {}, Fraction(1, 100), 0),
        ("rpm", "rpm", {"s": -1}, Fraction(1, 30), 1),
        ("deg^2", "deg^2", {}, Fraction(1, 180**2), 2),
        ("rad/s", "rad/s", {"s": -1}, Fraction(1), 0),
        ("l", "L", {"m": 3}, Fraction(1, 1000), 0),
        ("min", "min", {"s": 1}, Fraction(60), 0),
        ("\u03bcm", "\u00b5m", {"m": 1}, Fraction(1, 10**6), 0),
        ("k\u03a9", "kohm", {"kg": 1, "m": 2, "s": -3, "A": -2}, Fraction(1000), 0),
        ("kg", "kg", {"kg": 1}, Fraction(1), 0),
        ("mg", "mg", {"kg": 1}, Fraction(1, 10**6), 0),
        ("years", "year", {"month": 1}, Fraction(12), 0),
        ("EUR/kg", "EUR/kg", {"EUR": 1, "kg": -1}, Fraction(1), 0),
    ],
)
def test_units_are_found(text: str, symbol: str, dimension: dict[str, int], factor: Fraction, power: int) -> None:
    unit = find_unit(text, EUR)
    assert unit.symbol == symbol
    assert unit.dimension == Dimension.of(**dimension)
    assert (unit.factor, unit.power, unit.offset) == (factor, power, 0)


@pytest.mark.parametrize(
    ("text", "advice"),
    [
        ("g", "write 'gram' for a mass or 'gn' for an acceleration"),
        ("g/cm^3", "write 'gram' for a mass or 'gn' for an acceleration"),
        ("KM", "did you mean 'km'?"),
        ("RPM", "did you mean 'rpm'?"),
        ("Kg", "did you mean 'kg'?"),
        ("mw", "did you mean 'mW' or 'MW'?"),
        ("NM", "did you mean 'nm' or 'Nm'?"),
        ("kph", "write 'km/h'"),
        ("N.m", "write 'N*m'"),
        ("N\u00b7m", "write 'N*m'"),
        ("m/s\u00b2", "write 's^2'"),
        ("m/s2", "write 's^2'"),
        ("m**2", "write 'm^2'"),
        ("m*", "write factors joined by '*', as in 'N*m'"),
        ("m/s/s", "write one slash, as in 'm/s^2' or 'W/(m^2*K)'"),
        ("W/m^2*K", "write 'W/(m^2*K)', or put the second factor before the slash"),
        ("cc", "write 'cm^3'"),
        ("\u00b0", "write 'deg'"),
        ("\u00b0C", "write 'degC'"),
        ("um", "write '\u00b5m'"),
        ("d", "write 'day'"),
        ("gal", "write 'gal_us' or 'gal_imp'"),
        ("lbs", "write 'lb'"),
        ("newton", "write 'N'"),
        ("Pascal", "did you mean 'Pa'?"),
        ("mtre", "did you mean 'm'?"),
        ("degC/m", "write 'K' for a difference"),
        ("J/degC", "write 'K' for a difference"),
        ("cm3^2", "write it out, from 'cm^3'"),
        ("m^0", "write a whole exponent of one or two digits"),
        ("m^1.5", "write a whole exponent of one or two digits"),
        ("m^100", "write a whole exponent of one or two digits"),
        ("m/1", "leave the 1 out"),
        ("1*m", "leave the 1 out"),
        ("(m)", "write it as in 'W/(m^2*K)'"),
        ("m/(s", "write it as in 'W/(m^2*K)'"),
        ("zzzz", "write one of the units of the table, such as mm, kg, N*m or km/h"),
        ("", "write a unit, such as mm, or 1 for a pure number"),
    ],
)
def test_what_is_no_unit_is_answered_with_advice(text: str, advice: str) -> None:
    with pytest.raises(UnitFault) as caught:
        find_unit(text)
    assert caught.value.advice == advice


@pytest.mark.parametrize(("text", "part"), [("N*kgg", "kgg"), ("N/(m*g)", "g"), ("km/hour", "hour"), ("xx/s", "xx")])
def test_a_fault_points_at_the_factor(text: str, part: str) -> None:
    with pytest.raises(UnitFault) as caught:
        find_unit(text)
    assert text[caught.value.start : caught.value.end] == part


def test_a_unit_of_a_rulesets_own_is_known_there_only() -> None:
    assert find_unit("EUR", EUR).dimension == EUR["EUR"]
    with pytest.raises(UnitFault):
        find_unit("EUR")


def test_symbols_of_the_table_are_known_as_such() -> None:
    assert is_unit("mm")
    assert is_unit("cm3")
    assert not is_unit("EUR")
    assert not is_unit("g")


def test_a_pure_number_shows_no_unit() -> None:
    assert show_unit(find_unit("1")) == ""
    assert show_unit(find_unit("%")) == "%"


def test_a_temperature_has_its_own_zero_and_a_difference_has_none() -> None:
    celsius, fahrenheit = find_unit("degC"), find_unit("degF")
    assert celsius.in_si(Fraction(20)) == (Fraction("293.15"), 0)
    assert fahrenheit.in_si(Fraction(32)) == celsius.in_si(Fraction(0))
    assert fahrenheit.in_si(Fraction(212)) == celsius.in_si(Fraction(100))
    assert fahrenheit.in_si(Fraction(-40)) == celsius.in_si(Fraction(-40))
    assert celsius.width_in_si(Fraction(20)) == (Fraction(20), 0)
    assert fahrenheit.width_of_si(Fraction(5)) == (Fraction(9), 0)


def test_a_gallon_is_not_the_other_gallon_and_a_horsepower_not_the_other() -> None:
    assert find_unit("gal_us").factor != find_unit("gal_imp").factor
    assert find_unit("hp").factor != find_unit("PS").factor


def test_levels_and_periods_go_with_their_own_kind_alone() -> None:
    kinds = [find_unit(text).dimension for text in ("dB", "dBA", "dBC", "day", "month", "s", "1")]
    assert len(set(kinds)) == len(kinds)
    assert find_unit("rad").dimension == PURE


def test_a_long_text_is_refused_and_a_fault_can_be_pickled() -> None:
    with pytest.raises(UnitFault) as caught:
        find_unit("m*" * 1000)
    copy = pickle.loads(pickle.dumps(caught.value))
    assert (copy.message, copy.end) == (caught.value.message, caught.value.end)
