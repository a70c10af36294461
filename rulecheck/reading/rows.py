"""Rows of cells with their places: the CSV of RFC 4180, with any one-character delimiter."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass

from rulecheck.diagnostics import Faults, Span
from rulecheck.reading.bounds import MAXIMUM_CELLS, MAXIMUM_FAULTS, MAXIMUM_SCALAR
from rulecheck.reading.nodes import Located

_BLANKS = " \t"
_BARE_NUMBER = re.compile(r"[+-]?[0-9]+(?:\.[0-9]+)?(?:[eE][+-]?[0-9]+)?")
_DECIMAL_COMMA = re.compile(r"(?<=[0-9]),(?=[0-9])")
_DECIMAL_POINT = re.compile(r"(?<=[0-9])\.(?=[0-9])")


@dataclass(frozen=True, slots=True)
class Row:
    """The cells of one row, and the line of the file on which it begins."""

    number: int
    cells: tuple[Located, ...]


@dataclass(slots=True)
class Scanner:
    """Steps through a text cell by cell; `place` is the offset, `line` counts from 1.

    A cell in quotes may hold delimiters, line ends and, written twice, quotes. Blanks around a cell do
    not count. Empty lines and lines that begin with `#` are passed over.
    """

    file: str
    text: str
    delimiter: str
    faults: Faults
    place: int = 0
    line: int = 1
    line_start: int = 0
    line_end: int = -1

    def rows(self) -> Iterator[Row]:
        """The rows; a row with a fault in its quotes is noted and passed over."""
        while self.place < len(self.text) and len(self.faults.found) < MAXIMUM_FAULTS:
            end = self._line_end()
            content = self.text[self.place : end].lstrip(" ")
            if not content.strip(_BLANKS) or content.startswith("#"):
                self._next_line(end)
                continue
            number = self.line
            cells = self._cells()
            if cells is not None:
                yield Row(number, cells)

    def _cells(self) -> tuple[Located, ...] | None:
        """The cells up to the end of the row, or None where quotes are amiss."""
        cells: list[Located] = []
        while True:
            self._blanks()
            cell = self._quoted() if self.text.startswith('"', self.place) else self._plain()
            if cell is None:
                self._next_line(self._line_end())
                return None
            if len(cell.text) > MAXIMUM_SCALAR:
                message = f"a cell is longer than {MAXIMUM_SCALAR} characters"
                self.faults.add(
                    "too-large", message, cell.span, advice="shorten it, or look for a quote that is missing"
                )
            cells.append(cell)
            if len(cells) > MAXIMUM_CELLS:
                self._fault(
                    cell.span.start, cell.span.end, f"more than {MAXIMUM_CELLS} cells stand in a row", "split it"
                )
                self._next_line(self._line_end())
                return None
            if self.text.startswith(self.delimiter, self.place):
                self.place += 1
                continue
            self._next_line(self.place)
            return tuple(cells)

    def _plain(self) -> Located:
        end = self._line_end()
        delimiter = self.text.find(self.delimiter, self.place, end)
        stop = delimiter if delimiter >= 0 else end
        cell = self._located(self.place, self.place + len(self.text[self.place : stop].rstrip(_BLANKS)))
        self.place = stop
        return cell

    def _quoted(self) -> Located | None:
        start, line, line_start = self.place, self.line, self.line_start
        place = start + 1
        while True:
            closing = self.text.find('"', place)
            if closing < 0:
                self._fault(start, len(self.text), "the quote that opens here is never closed", "close the quote")
                return None
            if not self.text.startswith('"', closing + 1):
                break
            place = closing + 2
        self._count_lines(start, closing)
        self.place = closing + 1
        self._blanks()
        if self.place < self._line_end() and not self.text.startswith(self.delimiter, self.place):
            advice = "write a quote inside of a quoted cell twice"
            self._fault(self.place, self.place + 1, "text stands behind a cell in quotes", advice)
            return None
        raw = self.text[start : closing + 1]
        span = Span(self.file, start, closing + 1, line, start - line_start + 1)
        return Located(raw[1:-1].replace('""', '"'), span, raw, True)

    def _located(self, start: int, end: int) -> Located:
        return Located(self.text[start:end], self._span(start, end))

    def _span(self, start: int, end: int) -> Span:
        return Span(self.file, start, end, self.line, start - self.line_start + 1)

    def _blanks(self) -> None:
        while (
            self.place < len(self.text) and self.text[self.place] in _BLANKS and self.text[self.place] != self.delimiter
        ):
            self.place += 1

    def _line_end(self) -> int:
        """The end of the line, looked for once a line: a line may be as long as the file."""
        if self.line_end < self.place:
            end = self.text.find("\n", self.place)
            self.line_end = end if end >= 0 else len(self.text)
        return self.line_end

    def _next_line(self, end: int) -> None:
        self.place = self.line_start = end + 1
        self.line += 1

    def _count_lines(self, start: int, end: int) -> None:
        newlines = self.text.count("\n", start, end)
        if newlines:
            self.line += newlines
            self.line_start = self.text.rfind("\n", start, end) + 1

    def _fault(self, start: int, end: int, message: str, advice: str) -> None:
        self.faults.add(
            "ledger-row", message, self._span(start, end), expected="cells as RFC 4180 has them", advice=advice
        )


def other_decimal(text: str, decimal: str) -> bool:
    """True where a number holds the sign of decimals that was not declared.

    >>> other_decimal("12,5", ".")
    True
    """
    return bool((_DECIMAL_POINT if decimal == "," else _DECIMAL_COMMA).search(text))


def number_cell(cell: Located, decimal: str, unit: str) -> Located:
    """A cell that holds a number: a decimal comma reads as a point, a bare number takes the unit of its heading."""
    text = _DECIMAL_COMMA.sub(".", cell.text) if decimal == "," else cell.text
    if unit and _BARE_NUMBER.fullmatch(text):
        text = f"{text} {unit}"
    if text == cell.text:
        return cell
    return Located(text, cell.span, cell.raw if cell.raw is not None else cell.text, cell.quoted)
