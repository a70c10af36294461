"""A log of channels: a file of columns with a time column, read to exact whole numbers over a power of ten.

Quicker than files of columns that become located cells, since a log may have a hundred thousand rows: places are found
only for what is at fault.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass

from rulecheck.diagnostics import Faults, Span
from rulecheck.reading.characters import span_at
from rulecheck.reading.ledger import check_signs, name_and_unit
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located
from rulecheck.reading.rows import Scanner, other_decimal
from rulecheck.reading.workspace import Workspace

MAXIMUM_SAMPLES = 200_000
"""Rows of one log."""
MAXIMUM_DIGITS = 40
"""Characters of one sample: loggers write far fewer, and a common denominator stays small."""
MOST_TOLD = 20
"""So many faults of one column are told."""
_SAMPLE = re.compile(r"([+-]?)([0-9]+)(?:\.([0-9]+))?(?:[eE]([+-]?[0-9]{1,2}))?")


@dataclass(frozen=True, slots=True)
class Line:
    """A row: its cells as texts, its number in the file, and where it begins."""

    cells: list[str]
    number: int
    start: int


@dataclass(frozen=True, slots=True)
class Channel:
    """A column: row i is `values[i] / over` in the unit of the heading, which may be empty."""

    values: tuple[int, ...]
    over: int
    unit: str
    heading: Located


@dataclass(frozen=True, slots=True)
class Log:
    """The headings and rows of one log, before any column is read."""

    file: str
    names: tuple[str, ...]
    units: tuple[str | None, ...]
    headings: tuple[Located, ...]
    lines: tuple[Line, ...]
    decimal: str

    def place(self, row: int, text: str = "") -> Span:
        """Where a row begins, as far as `text` in it."""
        line = self.lines[row]
        return Span(self.file, line.start, line.start + max(len(text), 1), line.number, 1)


def read_log(
    workspace: Workspace, file: str, *, delimiter: str = ",", decimal: str = ".", asked: Span | None = None
) -> Log:
    """The rows of a log. Raises `Refused` with every fault: `log-file`, `too-large`, and what reading raises."""
    check_signs(delimiter, decimal, asked)
    text = workspace.read(file, asked)
    faults = Faults()
    scanner = Scanner(file, text, delimiter, faults)
    header = next(scanner.rows(), None)
    if header is None:
        expected = "a header such as `time [s], deceleration [m/s^2]`"
        faults.add("log-file", f"{file} has no header", span_at(file, text, 0, 0), expected=expected)
        faults.settle()
        raise AssertionError("a log without a header is refused")
    named = [name_and_unit(cell.text) for cell in header.cells]
    names = tuple(name for name, _ in named)
    for place, (cell, name) in enumerate(zip(header.cells, names, strict=True)):
        if not name or name in names[:place]:
            told = f"the column '{name}' stands twice" if name else f"column {place + 1} has no name"
            faults.add("log-file", told, cell.span, advice="give each column a name of its own")
    lines = tuple(_lines(file, text, scanner, len(names), faults))
    faults.settle()
    return Log(file, names, tuple(unit for _, unit in named), header.cells, lines, decimal)


def _lines(file: str, text: str, scanner: Scanner, count: int, faults: Faults) -> Iterator[Line]:
    start, delimiter, found = scanner.place, scanner.delimiter, 0
    for number, written in enumerate(text[start:].split("\n"), scanner.line):
        begins, start = start, start + len(written) + 1
        content = written.strip(" \r")
        if not content or content.startswith("#"):
            continue
        cells = content.split(delimiter)
        if len(cells) != count:
            told = f"row {number}: {len(cells)} cells stand under {count} columns"
            place = Span(file, begins, begins + len(written), number, 1)
            faults.add("log-file", told, place, expected=f"{count} cells")
        found += 1
        if found > MAXIMUM_SAMPLES or len(faults.found) >= MOST_TOLD:
            if found > MAXIMUM_SAMPLES:
                place, bound = Span(file, begins, begins + len(written), number, 1), f"{MAXIMUM_SAMPLES:,}"
                faults.add("too-large", f"{file} has more than {bound} rows", place, advice="log a shorter run")
            return
        yield Line(cells, number, begins)


def channel(log: Log, name: str, asked: Span, faults: Faults) -> Channel | None:
    """A column by its name, every row of it a number; None with the faults noted."""
    if name not in log.names:
        told = f"{log.file} has no column '{name}'"
        faults.add("log-file", told, asked, expected=" or ".join(log.names), advice=nearest(name, log.names))
        return None
    place = log.names.index(name)
    before = len(faults.found)
    parts: list[tuple[int, int]] = []
    for row, line in enumerate(log.lines):
        read = _number(line.cells[place], log.decimal)
        if isinstance(read, str):
            _note(log, row, place, read, faults)
            if len(faults.found) - before >= MOST_TOLD:
                break
            read = (0, 0)
        parts.append(read)
    if len(faults.found) > before:
        return None
    digits = max((-exponent for _, exponent in parts if exponent < 0), default=0)
    values = tuple(whole * 10 ** (exponent + digits) for whole, exponent in parts)
    return Channel(values, 10**digits, log.units[place] or "", log.headings[place])


def _number(cell: str, decimal: str) -> tuple[int, int] | str:
    """`whole * 10^exponent`, or what is wrong with the cell."""
    text = cell.strip()
    if len(text) > MAXIMUM_DIGITS:
        return f"is longer than {MAXIMUM_DIGITS} characters"
    if decimal == ",":
        if other_decimal(text, decimal):
            return "has another decimal sign than the `,` that is declared"
        text = text.replace(",", ".", 1)
    found = _SAMPLE.fullmatch(text)
    if found is None:
        wrong_sign = decimal == "." and other_decimal(text, decimal)
        return "has another decimal sign than `.`" if wrong_sign else "is not a number"
    sign, whole, fraction, exponent = found.groups()
    digits = fraction or ""
    return int(f"{sign}{whole}{digits}"), int(exponent or 0) - len(digits)


def _note(log: Log, row: int, place: int, wrong: str, faults: Faults) -> None:
    line = log.lines[row]
    text = line.cells[place].strip()
    start = line.start + sum(len(cell) + 1 for cell in line.cells[:place])
    where = Span(log.file, start, start + max(len(line.cells[place]), 1), line.number, start - line.start + 1)
    advice = "declare `decimal:` as the file writes it" if "decimal sign" in wrong else ""
    if not text:
        wrong, advice = "is empty", "a logger's gap is no value: take the row out"
    shown = f"'{text[:MAXIMUM_DIGITS]}' {wrong}" if text else f"the cell {wrong}"
    told = f"row {line.number}, column '{log.names[place]}': {shown}"
    faults.add("log-file", told, where, expected="a number without a unit", advice=advice)
