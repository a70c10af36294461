"""The table of units against two outside sources: pint's own table, and printed conversion factors.

pint (in its arithmetic of fractions) must agree exactly with every row, but for rows with pi, where its
value of pi is cut: there to 1e-25.

Printed factors: NIST Special Publication 811 (2008), appendix B.8 and B.9, which print seven digits; SI
Brochure; international yard and pound agreement of 1959. All of these numbers are from memory.
"""

from __future__ import annotations

from fractions import Fraction

import pint
import pytest

from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.unit_table import UNITS, Row
from rulecheck.quantity.units import find_unit, symbols

PI = Fraction("3.14159265358979323846264338327950288")  # from memory

PINT_NAMES = {
    "1": "dimensionless",
    "%": "percent",
    "rad": "radian",
    "sr": "steradian",
    "deg": "degree",
    "rpm": "revolutions_per_minute",
    "min": "minute",
    "h": "hour",
    "t": "metric_ton",
    "atm": "standard_atmosphere",
    "Wh": "watt_hour",
    "Ah": "ampere_hour",
    "gn": "standard_gravity",
    "kgf": "kilogram_force",
    "PS": "metric_horsepower",
    "in": "inch",
    "lbf": "pound_force",
    "hp": "horsepower",
    "gal_us": "gallon",
    "gal_imp": "imperial_gallon",
}
PREFIX_NAMES = {
    "k": "kilo",
    "m": "milli",
    "c": "centi",
    "d": "deci",
    "M": "mega",
    "\u00b5": "micro",
    "G": "giga",
    "n": "nano",
    "T": "tera",
    "p": "pico",
    "h": "hecto",
    "da": "deca",
}
OF_OUR_OWN = {"dB", "dBA", "dBC", "day", "month", "year"}
"""Levels and calendar periods, which pint has as other things (ratios, and fixed times)."""

PINT_BASES = {
    "meter": "m",
    "kilogram": "kg",
    "second": "s",
    "ampere": "A",
    "kelvin": "K",
    "mole": "mol",
    "candela": "cd",
}


@pytest.fixture(scope="module")
def registry() -> pint.UnitRegistry:
    return pint.UnitRegistry(non_int_type=Fraction)


def by_pint(registry: pint.UnitRegistry, name: str, value: int) -> tuple[Fraction, Dimension]:
    found = registry.Quantity(Fraction(value), name).to_base_units()
    powers = {PINT_BASES[base]: Fraction(power) for base, power in found._units.items() if base != "radian"}
    return Fraction(found.magnitude), Dimension.of(**powers)


def agree(ours: tuple[Fraction, int], theirs: Fraction) -> bool:
    rational, power = ours
    return abs(rational * PI**power - theirs) <= (abs(theirs) * Fraction(1, 10**25) if power else 0)


@pytest.mark.parametrize("row", [row for row in UNITS if row.symbol not in OF_OUR_OWN], ids=lambda row: row.symbol)
def test_every_row_agrees_with_pint(registry: pint.UnitRegistry, row: Row) -> None:
    unit = find_unit(row.symbol)
    for value in (0, 1, 37):
        theirs, dimension = by_pint(registry, PINT_NAMES.get(row.symbol, row.symbol), value)
        assert dimension == unit.dimension
        assert agree(unit.in_si(Fraction(value)), theirs)


def test_every_prefixed_symbol_agrees_with_pint(registry: pint.UnitRegistry) -> None:
    compared = 0
    for row in UNITS:
        for prefix in row.prefixes:
            # whole words, since pint reads `mcd` as a millionth of a day
            theirs, dimension = by_pint(registry, PREFIX_NAMES[prefix] + row.name.replace(" ", "_"), 1)
            unit = symbols()[prefix + row.symbol]
            assert (unit.dimension, unit.in_si(Fraction(1))[0]) == (dimension, theirs), unit.symbol
            compared += 1
    assert compared > 200


@pytest.mark.parametrize("symbol", ["kg", "mg", "\u00b5g"])
def test_prefixes_of_the_gram_agree_with_pint(registry: pint.UnitRegistry, symbol: str) -> None:
    theirs, dimension = by_pint(registry, symbol, 1)
    assert (find_unit(symbol).in_si(Fraction(1))[0], find_unit(symbol).dimension) == (theirs, dimension)


@pytest.mark.parametrize(
    "text",
    ["km/h", "N*m", "W/(m^2*K)", "gram/cm^3", "lbf*ft", "kN/mm", "L/min", "kg/h", "GPa*cm^3/gram", "rpm*N*m", "deg/s"],
)
def test_products_agree_with_pint(registry: pint.UnitRegistry, text: str) -> None:
    theirs, dimension = by_pint(registry, text.replace("^", "**"), 3)
    unit = find_unit(text)
    assert unit.dimension == dimension
    assert agree(unit.in_si(Fraction(3)), theirs)


EXACT = [
    ("in", "0.0254", "yard and pound agreement 1959"),
    ("ft", "0.3048", "yard and pound agreement 1959"),
    ("yd", "0.9144", "yard and pound agreement 1959"),
    ("mi", "1609.344", "yard and pound agreement 1959"),
    ("lb", "0.45359237", "yard and pound agreement 1959"),
    ("oz", "0.028349523125", "a sixteenth of a pound"),
    ("lbf", "4.4482216152605", "NIST SP 811, footnote to B.8"),
    ("mph", "0.44704", "NIST SP 811 B.8"),
    ("gal_us", "0.003785411784", "231 cubic inches"),
    ("gal_imp", "0.00454609", "NIST SP 811 B.8"),
    ("PS", "735.49875", "75 kgf m/s"),
    ("hp", "745.69987158227022", "550 ft lbf/s"),
    ("gn", "9.80665", "3rd CGPM 1901"),
    ("kgf", "9.80665", "NIST SP 811 B.8"),
    ("bar", "100000", "SI Brochure, 8th edition"),
    ("atm", "101325", "10th CGPM 1954"),
    ("kWh", "3600000", "NIST SP 811 B.8"),
    ("Ah", "3600", "NIST SP 811 B.8"),
    ("L", "0.001", "SI Brochure"),
    ("t", "1000", "SI Brochure"),
]


@pytest.mark.parametrize(("symbol", "factor", "source"), EXACT, ids=[row[0] for row in EXACT])
def test_exact_factors_as_printed(symbol: str, factor: str, source: str) -> None:
    assert find_unit(symbol).in_si(Fraction(1)) == (Fraction(factor), 0), source


SEVEN_DIGITS = [
    ("hp", "7.456999e2"),
    ("PS", "7.354988e2"),
    ("psi", "6.894757e3"),
    ("lbf", "4.448222e0"),
    ("gal_us", "3.785412e-3"),
    ("lb", "4.535924e-1"),
    ("oz", "2.834952e-2"),
    ("ft*lbf", "1.355818e0"),
    ("lbf/in", "1.751268e2"),
    ("lb/ft^3", "1.601846e1"),
    ("in^3", "1.638706e-5"),
    ("ft^3", "2.831685e-2"),
    ("deg", "1.745329e-2"),
    ("rpm", "1.047198e-1"),
    ("km/h", "2.777778e-1"),
]


@pytest.mark.parametrize(("symbol", "printed"), SEVEN_DIGITS, ids=[row[0] for row in SEVEN_DIGITS])
def test_seven_digits_of_special_publication_811(symbol: str, printed: str) -> None:
    rational, power = find_unit(symbol).in_si(Fraction(1))
    last_digit = Fraction(10) ** (int(printed.partition("e")[2]) - 6)
    assert abs(rational * PI**power - Fraction(printed)) <= last_digit / 2


def test_the_radian_is_one_and_torque_times_angular_speed_is_power() -> None:
    # SI Brochure, 9th edition, table 4: 1 rad = 1 m/m
    assert find_unit("rad").in_si(Fraction(1)) == (1, 0)
    assert find_unit("N*m*rad/s").dimension == find_unit("W").dimension


def test_fixed_points_of_temperature_scales() -> None:
    # SI Brochure: t/degC = T/K - 273.15; SP 811 B.8: T/K = (t/degF + 459.67)/1.8
    for fahrenheit, kelvin in ((-40, "233.15"), (32, "273.15"), (212, "373.15")):
        assert find_unit("degF").in_si(Fraction(fahrenheit)) == (Fraction(kelvin), 0)
