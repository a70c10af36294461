"""The parts of a value as text: numbers, units, spreads and words, each with its place."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from typing import Literal

from rulecheck.diagnostics import Faults, Span
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.numbers import NUMBER_PATTERN, NumberFault, quoted, read_number
from rulecheck.quantity.units import Unit, UnitFault, find_unit
from rulecheck.reading.nodes import Located

LONGEST_VALUE = 2000

Sort = Literal["plus-minus", "coverage", "tolerance", "number", "word"]

_SIGNED = rf"[+-]?{NUMBER_PATTERN}"
_PARTS = re.compile(
    r"(?P<plus_minus>±|\+/-(?=[ 0-9.]|$))|(?P<coverage>\(k *=[^)]*\)?)|(?P<tolerance>[+-][0-9.][^ /]*/[^ ]+)|(?P<word>(?:(?!\(k *=)[^ ±])+)"
)
# `-5km/h` with the blank left out is a number with its unit, and no tolerance.
_RATE = re.compile(rf"{_SIGNED}[^\W\d][^ /]*/[^ 0-9+-][^ ]*")
_COVERAGE = re.compile(rf"\(k *= *({NUMBER_PATTERN})\)")
_LEADING_NUMBER = re.compile(_SIGNED)
_NUMERIC = re.compile(
    r"(?!1/[^\d])[+\-\u2010-\u2015\u2212\ufe63\uff0d]?\.?[0-9]|[+-]?\.?(?:inf|nan|infinity)$", re.IGNORECASE
)


@dataclass(frozen=True, slots=True)
class Piece:
    """A part of a value: where it stands in the text, and what sort it is."""

    sort: Sort
    text: str
    start: int

    @property
    def end(self) -> int:
        """Behind the last character."""
        return self.start + len(self.text)


@dataclass(slots=True)
class Pieces:
    """The parts of one value, taken one after the other; faults are noted with their place."""

    where: Located
    faults: Faults
    own: Mapping[str, Dimension] = field(default_factory=dict)
    missing_blank: bool = False
    waiting: list[Piece] = field(default_factory=list)

    def __post_init__(self) -> None:
        text = self.where.text
        if len(text) > LONGEST_VALUE:
            advice = f"write at most {LONGEST_VALUE} characters"
            self.faults.add("too-large", "this value is too long", self.where.span, advice=advice)
            return
        for found in _PARTS.finditer(text):
            self.waiting.extend(self._cut(found))

    def _cut(self, found: re.Match[str]) -> list[Piece]:
        text, start = found[0], found.start()
        for sort in ("plus-minus", "coverage", "tolerance"):
            if found[sort.replace("-", "_")] and not (self.missing_blank and _RATE.fullmatch(text)):
                return [Piece(sort, text, start)]
        if not _NUMERIC.match(text):
            return [Piece("word", text, start)]
        return self._apart(text, start) if self.missing_blank else [Piece("number", text, start)]

    def _apart(self, text: str, start: int) -> list[Piece]:
        """A number and a unit that are written without a blank (`250mm`), never behind an exponent."""
        number = _LEADING_NUMBER.match(text)
        if number is None or number.end() == len(text) or "e" in number[0].lower():
            return [Piece("number", text, start)]
        rest = text[number.end() :]
        if not (rest[0].isalpha() or rest[0] in "%°") or re.match(r"0[xob]", text):
            return [Piece("number", text, start)]
        return [Piece("number", number[0], start), Piece("word", rest, start + number.end())]

    def next_is(self, *sorts: Sort) -> bool:
        """True where the next part is of one of these sorts."""
        return bool(self.waiting) and self.waiting[0].sort in sorts

    def take(self) -> Piece:
        """The next part."""
        return self.waiting.pop(0)

    def part(self, piece: Piece) -> Span:
        """The place of a part in the file."""
        return self.where.part(piece.start, piece.end)

    def fault(
        self, code: str, message: str, piece: Piece | None = None, *, expected: str = "", advice: str = ""
    ) -> None:
        """Note a fault at a part, or at the whole value."""
        span = self.part(piece) if piece else self.where.span
        self.faults.add(code, message, span, expected=expected, advice=advice)

    def number(self, piece: Piece) -> Fraction | None:
        """A part read as a number."""
        try:
            return read_number(piece.text)
        except NumberFault as fault:
            if not self._blank_missing(piece):
                self.fault(fault.code, fault.message, piece, advice=fault.advice)
        return None

    def unit(self, piece: Piece) -> Unit | None:
        """A part read as a unit."""
        try:
            return find_unit(piece.text, self.own)
        except UnitFault as fault:
            end = piece.end if fault.end is None else piece.start + fault.end
            span = self.where.part(piece.start + fault.start, end)
            self.faults.add("unknown-unit", fault.message, span, advice=fault.advice)
        return None

    def coverage(self, piece: Piece) -> Fraction | None:
        """The factor of `(k=2)`."""
        found = _COVERAGE.fullmatch(piece.text)
        factor = read_number(found[1]) if found else None
        if not factor:
            message = f"{quoted(piece.text)} is no coverage factor"
            self.fault("bad-value", message, piece, advice="write '(k=2)', with a number above zero")
            return None
        return factor

    def _blank_missing(self, piece: Piece) -> bool:
        """Notes `1900mm` and the like; False where the text is no number for another reason."""
        number = _LEADING_NUMBER.match(piece.text)
        rest = piece.text[number.end() :] if number else ""
        if number is None or not rest or not (rest[0].isalpha() or rest[0] in "%°"):
            return False
        try:
            find_unit(rest, self.own)
        except UnitFault:
            return False
        message = f"between the number and the unit of {quoted(piece.text)} a blank is missing"
        self.fault("bad-value", message, piece, advice=f"put a blank: '{number[0]} {rest}'")
        return True
