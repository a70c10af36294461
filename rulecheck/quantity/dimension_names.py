"""The words for dimensions, and the unit in which each is spoken of."""

from __future__ import annotations

from fractions import Fraction
from functools import cache

from rulecheck.quantity import unit_table
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.units import Unit, find_unit


def preferred(dimension: Dimension) -> Unit:
    """The unit used to speak of a dimension, and for values without a declared unit; always coherent with the SI.

    >>> preferred(Dimension.of(kg=1, m=1, s=-2)).symbol, preferred(Dimension.of(kg=1, m=-5)).symbol
    ('N', 'kg/m^5')
    """
    known = _named().get(dimension)
    return known[0] if known else Unit(base_form(dimension), dimension, Fraction(1))


def name_of(dimension: Dimension) -> str:
    """A dimension in words with its unit, or the unit alone where there is no word.

    >>> name_of(Dimension.of(m=1)), name_of(Dimension()), name_of(Dimension.of(kg=1, m=-5))
    ('length [m]', 'pure number [1]', '[kg/m^5]')
    """
    known = _named().get(dimension)
    return f"{known[1]} [{known[0].symbol}]" if known else f"[{base_form(dimension)}]"


def example_unit(dimension: Dimension) -> str:
    """The symbol that an example in advice takes: `mm` for a length, `kg` for a mass."""
    symbol = preferred(dimension).symbol
    return unit_table.EXAMPLES.get(symbol, symbol)


def base_form(dimension: Dimension) -> str:
    """The dimension as a product of base units: `kg/(m*s^2)`, `1/s`, `1`."""
    above = [_factor(base, power) for base, power in dimension.exponents if power > 0]
    below = [_factor(base, -power) for base, power in dimension.exponents if power < 0]
    text = "*".join(above) or "1"
    if not below:
        return text
    return f"{text}/({'*'.join(below)})" if len(below) > 1 else f"{text}/{below[0]}"


def _factor(base: str, power: Fraction) -> str:
    if power == 1:
        return base
    return f"{base}^{power}" if power.denominator == 1 else f"{base}^({power})"


@cache
def _named() -> dict[Dimension, tuple[Unit, str]]:
    found = {}
    for symbol, words in unit_table.NAMES:
        unit = find_unit(symbol)
        found[unit.dimension] = (unit, words)
    return found
