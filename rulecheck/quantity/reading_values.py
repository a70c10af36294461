"""Values as a design writes them: text with its place to quantities, points, periods and days."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date
from fractions import Fraction

from rulecheck.diagnostics import Faults
from rulecheck.quantity.dimension import LENGTH, Dimension
from rulecheck.quantity.dimension_names import example_unit, name_of
from rulecheck.quantity.numbers import NUMBER_PATTERN, quoted, read_number
from rulecheck.quantity.quantity import Pressure, Quantity
from rulecheck.quantity.reading_spread import read_spread
from rulecheck.quantity.units import NONE_OWN, Unit, find_unit, symbols
from rulecheck.quantity.value_parts import Piece, Pieces
from rulecheck.reading.nodes import Located

Point = tuple[Quantity, Quantity, Quantity]

LONGEST_PERIOD = 9999 * 12 * 31
_PRESSURE = find_unit("Pa").dimension
_PLAIN = re.compile(rf"([+-]?{NUMBER_PATTERN}) +([^ ±]+)")
_DAY = re.compile(r"[0-9]{4}-[0-9]{2}-[0-9]{2}", re.ASCII)
_ADVICE_ON_REST = {
    "number": "write a number without blanks",
    "plus-minus": "write one spread",
    "tolerance": "write one spread",
    "coverage": "write '(k=2)' behind the uncertainty",
}
_PERIODS = {"day": (0, 1), "days": (0, 1), "month": (1, 0), "months": (1, 0), "year": (12, 0), "years": (12, 0)}


@dataclass(frozen=True, slots=True)
class Due:
    """What a value is due to be: its dimension, and the unit that is declared for it."""

    dimension: Dimension | None
    unit: Unit | None = None

    @property
    def needs_unit(self) -> bool:
        """A pure number goes without a unit, unless an angle or a share is declared."""
        if self.unit is not None and self.unit.symbol != "1":
            return True
        return self.dimension is not None and not self.dimension.is_pure

    @property
    def words(self) -> str:
        """The dimension in words; an angle and a share by the unit declared."""
        if self.dimension is None:
            return "a number with its unit"
        if self.dimension.is_pure and self.unit is not None and self.unit.symbol != "1":
            return f"a value in '{self.unit.symbol}'"
        return name_of(self.dimension)

    @property
    def example(self) -> str:
        """A unit for an example."""
        if self.unit is not None and (self.dimension is None or self.dimension == self.unit.dimension):
            return self.unit.symbol
        return example_unit(self.dimension) if self.dimension is not None else "mm"


def read_quantity(
    where: Located,
    expected: Dimension | None,
    *,
    own: Mapping[str, Dimension] = NONE_OWN,
    missing_blank: bool = False,
    declared: Unit | None = None,
    faults: Faults,
) -> Quantity | None:
    """A number with its unit, and its spread where one is stated; None where a fault was noted.

    `1900 mm`, `12 %`, `20 degC`, `1895 mm ± 0.6 mm (k=2)` (also `+/-`, and with the unit once, at the end),
    `1895 +0/-2 mm`, `1.8 bar gauge`. `expected` is the dimension that is due, None for any; a pure number needs
    no unit, unless `declared` is an angle or a share. `own` are units of a ruleset's own. With `missing_blank`
    the blank may be left out, never behind an exponent.
    """
    plain = _plain(where.text, expected, own)
    if plain is not None:
        return plain
    return _taken_apart(Pieces(where, faults, own, missing_blank), Due(expected, declared))


def _plain(text: str, expected: Dimension | None, own: Mapping[str, Dimension]) -> Quantity | None:
    """The common case, a sound number with a fitting unit, without taking it apart; None for all else."""
    found = _PLAIN.fullmatch(text)
    if found is None:
        return None
    try:
        unit, value = find_unit(found[2], own), read_number(found[1])
    except ValueError:  # what is wrong is said where the value is taken apart
        return None
    return Quantity(value, unit) if expected is None or unit.dimension == expected else None


def _taken_apart(pieces: Pieces, due: Due) -> Quantity | None:
    faults, before = pieces.faults, len(pieces.faults.found)
    if not pieces.next_is("number", "tolerance"):
        _no_number(pieces, due)
        return None
    value = pieces.number(pieces.take())
    unit_piece = (
        pieces.take() if pieces.next_is("word") and pieces.waiting[0].text not in ("gauge", "absolute") else None
    )
    unit = pieces.unit(unit_piece) if unit_piece else None
    if len(faults.found) > before or value is None:
        return None
    pressure = _pressure(pieces)
    spread = read_spread(pieces, value, unit)
    if unit is None and spread.unit is not None:
        unit, unit_piece = spread.unit, spread.unit_piece
    pressure = pressure or _pressure(pieces)
    settled = _due_unit(pieces, unit, unit_piece, due) if _nothing_left(pieces) else None
    if pressure and unit is not None and unit.dimension != _PRESSURE:
        piece = Piece("word", pressure, pieces.where.text.index(pressure))
        pieces.fault("bad-value", f"'{pressure}' is said of a pressure alone", piece, advice=f"leave '{pressure}' out")
    if len(faults.found) > before or settled is None:
        return None
    return Quantity(value, settled, spread.stated, pressure=pressure)


def read_point(where: Located, own: Mapping[str, Dimension], faults: Faults) -> Point | None:
    """Three lengths, `1250 0 310 mm` or `1250 mm 0 mm 310 mm`: one unit at the end, or one for each."""
    if "," in where.text:
        faults.add("bad-value", "a point is three lengths, without commas", where.span, advice="write '1250 0 310 mm'")
        return None
    read = _lengths(where, own, faults, 3, "a point is three lengths", "1250 0 310 mm")
    return (read[0], read[1], read[2]) if read else None


def read_outline(
    where: Located, own: Mapping[str, Dimension], faults: Faults
) -> tuple[tuple[Quantity, Quantity], ...] | None:
    """The corners of an outline, `340 880, 640 880, 640 940 mm`: pairs of lengths, one unit at the end."""
    text = where.text.replace(",", " ")
    # Commas stand for blanks of the same width, so that places stay right.
    inner = Located(text, where.span, where.raw.replace(",", " ") if where.raw is not None else None)
    counts = [len(re.findall(r"(?<![^ ])[+-]?[0-9]", corner)) for corner in where.text.split(",")]
    if any(count != 2 for count in counts):
        faults.add(
            "bad-value",
            "a corner of an outline is two lengths",
            where.span,
            advice="write '340 880, 640 880, 640 940 mm'",
        )
        return None
    read = _lengths(inner, own, faults, 2 * len(counts), "a corner of an outline is two lengths", "340 880, 640 880 mm")
    return tuple(zip(read[::2], read[1::2], strict=True)) if read else None


def read_period(where: Located, faults: Faults) -> tuple[int, int] | None:
    """A calendar period, `5 years`, `1 month`, `30 days`, as whole months and whole days."""
    pieces = Pieces(where, faults)
    before = len(faults.found)
    value = pieces.number(pieces.take()) if pieces.next_is("number") else None
    unit = pieces.take() if pieces.next_is("word") else None
    if len(faults.found) > before:
        return None
    if value is None or unit is None or pieces.waiting or unit.text not in _PERIODS:
        advice = "write whole days, months or years, such as '30 days' or '5 years'"
        pieces.fault("bad-value", f"{quoted(where.text)} is no calendar period", advice=advice)
        return None
    if value.denominator != 1 or value < 0:
        pieces.fault(
            "bad-value", "a calendar period is a whole number, not negative", advice="write '18 months' for 1.5 years"
        )
        return None
    if value > LONGEST_PERIOD:
        pieces.fault("too-large", "this period is longer than the calendar", advice="write at most 9999 years")
        return None
    months, days = _PERIODS[unit.text]
    return int(value) * months, int(value) * days


def read_day(where: Located, faults: Faults) -> date | None:
    """A date as year, month, day: `2027-03-01`."""
    text = where.text
    if not _DAY.fullmatch(text):
        faults.add(
            "bad-date",
            f"{quoted(text)} is not a date",
            where.span,
            expected="year-month-day",
            advice="write '2027-03-01'",
        )
        return None
    try:
        return date.fromisoformat(text)
    except ValueError:
        faults.add("bad-date", f"the calendar has no {text}", where.span, expected="a day of the calendar")
        return None


def _no_number(pieces: Pieces, due: Due) -> None:
    message = f"{quoted(pieces.where.text)} does not begin with a number" if pieces.waiting else "a value is missing"
    pieces.fault("bad-value", message, expected=due.words, advice=f"write a value such as '{_sample(due)}'")


def _sample(due: Due, number: str = "1900") -> str:
    return f"{number} {due.example}" if due.needs_unit or due.dimension is None else number


def _pressure(pieces: Pieces) -> Pressure:
    if pieces.next_is("word"):
        for word in ("gauge", "absolute"):
            if pieces.waiting[0].text == word:
                pieces.take()
                return word
    return ""


def _due_unit(pieces: Pieces, unit: Unit | None, piece: Piece | None, due: Due) -> Unit | None:
    """The unit of the value, checked against what is due."""
    if unit is None:
        if not due.needs_unit:
            return find_unit("1")
        number = pieces.where.text.split()[0]
        message = f"{quoted(pieces.where.text)} has no unit"
        advice = f"write the unit, for example '{_sample(due, number)}'"
        pieces.fault("unit-missing", message, expected=due.words, advice=advice)
        return None
    if due.dimension is not None and unit.dimension != due.dimension:
        message = f"'{unit.symbol}' is a unit of {name_of(unit.dimension)}, and {due.words} is due"
        pieces.fault("wrong-dimension", message, piece, expected=due.words, advice=_meant(unit, due.dimension))
        return None
    return unit


def _meant(unit: Unit, dimension: Dimension) -> str:
    """A unit of the dimension that is due, where one differs from what is written in case alone, or in nothing but its kind."""
    taken_for = {"C": "degC", "F": "degF"}.get(unit.symbol, "")
    names = [taken_for, *(name for name in symbols() if name.casefold() == unit.symbol.replace("*", "").casefold())]
    if unit.symbol == "nm":
        names.append("N*m")
    fitting = [name for name in names if name and find_unit(name).dimension == dimension]
    if fitting:
        return f"did you mean '{fitting[0]}'?"
    return f"write a unit such as '{example_unit(dimension)}'" if not dimension.is_pure else "leave the unit out"


def _nothing_left(pieces: Pieces) -> bool:
    if not pieces.waiting:
        return True
    piece = pieces.waiting[0]
    rest = pieces.where.text[piece.start :].rstrip()
    advice = _ADVICE_ON_REST.get(piece.sort, "leave it out")
    if piece.text[0] in "/*^(":
        advice = "write a unit without blanks, as in 'km/h'"
    pieces.fault("bad-value", f"{quoted(rest)} is too much here", piece, advice=advice)
    return False


def _lengths(
    where: Located, own: Mapping[str, Dimension], faults: Faults, count: int, what: str, sample: str
) -> list[Quantity] | None:
    pieces = Pieces(where, faults, own)
    before = len(faults.found)
    numbers: list[Fraction] = []
    units: list[Unit] = []
    order = ""
    while pieces.next_is("number", "word"):
        piece = pieces.take()
        order += piece.sort[0]
        if piece.sort == "number":
            number = pieces.number(piece)
            numbers.append(number if number is not None else Fraction(0))
        elif (unit := pieces.unit(piece)) is not None:
            units.append(unit)
            _is_length(pieces, piece, unit)
    if len(faults.found) > before:
        return None
    if not units and len(numbers) == count:
        pieces.fault("unit-missing", "these lengths have no unit", expected=name_of(LENGTH), advice=f"write '{sample}'")
        return None
    if pieces.waiting or order not in ("n" * count + "w", "nw" * count):
        pieces.fault("bad-value", what, advice=f"write '{sample}': one unit at the end, or one behind each number")
        return None
    return [Quantity(number, unit) for number, unit in zip(numbers, units * (count // len(units)), strict=True)]


def _is_length(pieces: Pieces, piece: Piece, unit: Unit) -> None:
    if unit.dimension != LENGTH:
        message = f"'{unit.symbol}' is a unit of {name_of(unit.dimension)}, and {name_of(LENGTH)} is due"
        pieces.fault("wrong-dimension", message, piece, expected=name_of(LENGTH), advice="write a unit such as 'mm'")
