"""Units: from a symbol as written to dimension and exact factor, and the words for dimensions."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from difflib import get_close_matches
from fractions import Fraction
from functools import cache, lru_cache
from types import MappingProxyType

from rulecheck.quantity import unit_table
from rulecheck.quantity.dimension import MASS, PURE, Dimension
from rulecheck.quantity.numbers import quoted

LONGEST_UNIT = 100
NONE_OWN: Mapping[str, Dimension] = MappingProxyType({})

_FACTOR = re.compile(r"([^\W\d]\w*|%|1)(?:\^(-?[1-9][0-9]?))?")
_OHMS = str.maketrans({"\u03a9": "ohm", "\u2126": "ohm", "\u03bc": "\u00b5"})
_BARE_EXPONENT = re.compile(r"([^\W\d]+)(-?[1-9])")
_LOOKALIKES = str.maketrans({"\u00b7": "*", "\u22c5": "*", "\u00d7": "*", "\u2044": "/", "\u2215": "/", " ": ""})
_RAISED = str.maketrans({"\u00b2": "^2", "\u00b3": "^3", "\u2074": "^4", "\u207b": "^-", "\u00b9": "1"})


@dataclass(frozen=True, slots=True)
class Unit:
    """A unit: SI value = value * factor * pi^power + offset, in the base units of `dimension`.

    Only temperatures with their own zero have an offset, and those have no power of pi.
    """

    symbol: str
    dimension: Dimension
    factor: Fraction
    power: int = 0
    offset: Fraction = Fraction(0)

    def in_si(self, value: Fraction) -> tuple[Fraction, int]:
        """The SI value as a rational and a power of pi.

        >>> find_unit("km/h").in_si(Fraction(36)), find_unit("deg").in_si(Fraction(90))
        ((Fraction(10, 1), 0), (Fraction(1, 2), 1))
        """
        return value * self.factor + self.offset, self.power

    def of_si(self, rational: Fraction, power: int = 0) -> tuple[Fraction, int]:
        """The SI value `rational * pi^power` in this unit, as a rational and a power of pi.

        >>> find_unit("degC").of_si(Fraction("293.15"))
        (Fraction(20, 1), 0)
        """
        return (rational - self.offset) / self.factor, power - self.power

    def width_in_si(self, width: Fraction) -> tuple[Fraction, int]:
        """A difference of two values in this unit, in SI: the zero of the unit plays no part."""
        return width * self.factor, self.power

    def width_of_si(self, rational: Fraction, power: int = 0) -> tuple[Fraction, int]:
        """The SI difference `rational * pi^power` as a difference in this unit."""
        return rational / self.factor, power - self.power


class UnitFault(ValueError):
    """Raised where text is no unit: what is wrong, what to do, and the part of the text that is meant."""

    def __init__(self, message: str, advice: str = "", start: int = 0, end: int | None = None) -> None:
        super().__init__(message)
        self.message = message
        self.advice = advice
        self.start = start
        self.end = end

    def __reduce__(self) -> tuple[type[UnitFault], tuple[str, str, int, int | None]]:
        return UnitFault, (self.message, self.advice, self.start, self.end)


@dataclass(frozen=True, slots=True)
class _Factor:
    unit: Unit
    exponent: int

    @property
    def symbol(self) -> str:
        return self.unit.symbol if self.exponent == 1 else f"{self.unit.symbol}^{self.exponent}"


def find_unit(text: str, own: Mapping[str, Dimension] = NONE_OWN) -> Unit:
    """The unit that is written `text`: `mm`, `km/h`, `N*m`, `W/(m^2*K)`, `kg*m^-1*s^-2`, `1/s`, `1`.

    Factors `sym` or `sym^int` are joined by `*`; at most one slash, behind it one factor or a product in
    parentheses. `own` are base units of a ruleset's own (`EUR`). The symbol of the unit found is the standard
    spelling (`N*m` for `Nm`). Raises `UnitFault`.

    >>> find_unit("Nm").symbol, str(find_unit("kPa").dimension), find_unit("kPa").factor
    ('N*m', 'kg*m^-1*s^-2', Fraction(1000, 1))
    """
    return _find(text, frozenset(own.items()))


def is_unit(symbol: str) -> bool:
    """True where the table has the symbol, with or without prefix: a ruleset may not declare it as its own."""
    return symbol in symbols() or symbol in unit_table.ALIASES


def show_unit(unit: Unit) -> str:
    """The unit behind a number on the screen: its symbol, and nothing for a pure number."""
    return "" if unit.symbol == "1" else unit.symbol


@lru_cache(maxsize=4096)
def _find(text: str, own: frozenset[tuple[str, Dimension]]) -> Unit:
    if len(text) > LONGEST_UNIT:
        raise UnitFault(f"the unit {quoted(text)} is too long", f"write at most {LONGEST_UNIT} characters")
    known = dict(own)
    if text in known:
        return Unit(text, known[text], Fraction(1))
    if unit_table.SPELLINGS.get(text) or unit_table.ADVICE.get(text):
        raise _unknown(text, known, 0)
    numerator, below = _split(text)
    factors = _product(numerator, known, 0, upper=True)
    divisors: list[_Factor] = []
    if below is not None:
        start = len(numerator) + 1 + below.startswith("(")
        divisors = _product(below.removeprefix("(").removesuffix(")"), known, start, upper=False)
    if any(factor.unit.offset for factor in factors + divisors) and (
        divisors or len(factors) > 1 or factors[0].exponent != 1
    ):
        raise UnitFault(
            f"a temperature with its own zero cannot be part of {quoted(text)}", "write 'K' for a difference"
        )
    return _multiplied(factors, divisors)


def _split(text: str) -> tuple[str, str | None]:
    """What stands before the slash, and what stands behind it; refuses what breaks the grammar as a whole."""
    if not text:
        raise UnitFault("a unit is missing", "write a unit, such as mm, or 1 for a pure number")
    if "**" in text:
        raise UnitFault(f"{quoted(text)} has a doubled star", f"write '{text.replace('**', '^')}'")
    numerator, slash, below = text.partition("/")
    if "/" in below:
        raise UnitFault(f"{quoted(text)} has more than one slash", "write one slash, as in 'm/s^2' or 'W/(m^2*K)'")
    if "(" in numerator or ")" in numerator:
        raise UnitFault(f"{quoted(text)} has a parenthesis that is not behind a slash", "write it as in 'W/(m^2*K)'")
    if slash and below.startswith("(") != below.endswith(")"):
        raise UnitFault(f"the parentheses in {quoted(text)} do not close", "write it as in 'W/(m^2*K)'")
    if slash and "*" in below and not below.startswith("("):
        raise UnitFault(
            f"behind the slash of {quoted(text)} stands a product",
            f"write '{numerator}/({below})', or put the second factor before the slash",
            len(numerator) + 1,
        )
    return numerator, below if slash else None


def _product(text: str, own: Mapping[str, Dimension], start: int, *, upper: bool) -> list[_Factor]:
    factors = []
    pieces = text.split("*")
    for piece in pieces:
        found = _FACTOR.fullmatch(piece.translate(_OHMS))
        if found is None:
            raise _misspelt(piece, own, start)
        symbol, exponent = found[1], int(found[2] or 1)
        if symbol == "1" and (found[2] or len(pieces) > 1 or not upper):
            raise UnitFault("1 stands alone, or before a slash", "leave the 1 out", start, start + len(piece))
        factors.extend(_raised(symbol, exponent, own, start))
        start += len(piece) + 1
    return factors


def _raised(symbol: str, exponent: int, own: Mapping[str, Dimension], start: int) -> list[_Factor]:
    """The factors that one symbol stands for: more than one where it is an alias."""
    if symbol in own:
        return [_Factor(Unit(symbol, own[symbol], Fraction(1)), exponent)]
    meant = unit_table.ALIASES.get(symbol)
    if meant is not None and exponent != 1 and meant not in symbols():
        raise UnitFault(
            f"'{symbol}' cannot be raised to a power", f"write it out, from '{meant}'", start, start + len(symbol)
        )
    if meant is not None:
        return [_Factor(factor.unit, factor.exponent * exponent) for factor in _product(meant, own, start, upper=True)]
    unit = symbols().get(symbol)
    if unit is None:
        raise _unknown(symbol, own, start)
    return [_Factor(unit, exponent)]


def _multiplied(factors: list[_Factor], divisors: list[_Factor]) -> Unit:
    symbol = "*".join(factor.symbol for factor in factors)
    if divisors:
        below = "*".join(factor.symbol for factor in divisors)
        symbol += f"/({below})" if len(divisors) > 1 else f"/{below}"
    dimension, scale, power = PURE, Fraction(1), 0
    for unit, exponent in [(item.unit, item.exponent) for item in factors] + [
        (item.unit, -item.exponent) for item in divisors
    ]:
        dimension *= unit.dimension**exponent
        scale *= unit.factor**exponent
        power += unit.power * exponent
    offset = factors[0].unit.offset if len(factors) == 1 and not divisors else Fraction(0)
    return Unit(symbol, dimension, scale, power, offset)


@cache
def symbols() -> dict[str, Unit]:
    """Every single symbol with its unit, prefixes spelled out, in the order of the table."""
    found = {}
    for row in unit_table.UNITS:
        found[row.symbol] = Unit(row.symbol, row.dimension, row.factor, row.power, row.offset)
    for row in unit_table.UNITS:
        for prefix in row.prefixes:
            symbol = prefix + row.symbol
            found[symbol] = Unit(symbol, row.dimension, row.factor * unit_table.PREFIXES[prefix], row.power)
    for prefix in unit_table.GRAM_PREFIXES:
        found[f"{prefix}g"] = Unit(f"{prefix}g", MASS, unit_table.PREFIXES[prefix] / 1000)
    return found


# --- what to say where there is no such unit ---------------------------------------------------


def _misspelt(piece: str, own: Mapping[str, Dimension], start: int) -> UnitFault:
    """A factor that is not even shaped like one."""
    end = start + len(piece)
    if not piece:
        return UnitFault("a factor of the unit is missing", "write factors joined by '*', as in 'N*m'", start, end)
    if _FACTOR.match(piece) and "^" in piece:
        return UnitFault(
            f"{quoted(piece)} has no whole exponent", "write a whole exponent of one or two digits", start, end
        )
    return _unknown(piece, own, start)


def _unknown(symbol: str, own: Mapping[str, Dimension], start: int) -> UnitFault:
    message = f"no unit is written {quoted(symbol)}"
    return UnitFault(message, _advice(symbol, own), start, start + len(symbol))


def _advice(symbol: str, own: Mapping[str, Dimension]) -> str:
    if symbol in unit_table.ADVICE:
        return unit_table.ADVICE[symbol]
    meant = unit_table.SPELLINGS.get(symbol) or unit_table.SPELLINGS.get(symbol.lower())
    if not meant:
        plain = _plain(symbol)
        meant = plain if plain != symbol and _reads(plain, own) else None
    if meant:
        return f"write '{meant}'"
    close = _nearest(symbol, own)
    if not close:
        return "write one of the units of the table, such as mm, kg, N*m or km/h"
    return "did you mean " + " or ".join(f"'{name}'" for name in close[:3]) + "?"


def _plain(symbol: str) -> str:
    """The text with the signs of the keyboard: `N*m` for a raised dot, `s^2` for a small raised two or `s2`."""
    plain = symbol.translate(_LOOKALIKES).translate(_RAISED).replace(".", "*")
    raised = _BARE_EXPONENT.fullmatch(plain)
    return f"{raised[1]}^{raised[2]}" if raised else plain


def _nearest(symbol: str, own: Mapping[str, Dimension]) -> list[str]:
    """Symbols that differ in case alone; else those of the nearest symbols or names of units."""
    meant = {row.name.casefold(): row.symbol for row in unit_table.UNITS}
    meant.update({name: name for name in [*symbols(), *own]})
    folded = symbol.casefold()
    same = [name for name in (*meant.values(), *unit_table.ALIASES) if name.casefold() == folded]
    if same or folded in meant:
        return list(dict.fromkeys(same)) or [meant[folded]]
    return list(dict.fromkeys(meant[name] for name in get_close_matches(symbol, meant, n=1, cutoff=0.6)))


def _reads(text: str, own: Mapping[str, Dimension]) -> bool:
    try:
        find_unit(text, own)
    except UnitFault:
        return False
    return True
