"""A file of columns: the rows of a curve or a map, with units in the header, to located cells."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from rulecheck.diagnostics import Faults, Span
from rulecheck.reading.bounds import MAXIMUM_ROWS
from rulecheck.reading.characters import span_at
from rulecheck.reading.ledger import check_signs, name_and_unit
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located
from rulecheck.reading.rows import Row, Scanner, number_cell, other_decimal
from rulecheck.reading.workspace import Workspace


@dataclass(frozen=True, slots=True)
class Columns:
    """The headings of a file, name and unit, and its rows of cells; bare numbers have the unit of their column."""

    headings: tuple[Located, ...]
    names: tuple[str, ...]
    rows: tuple[tuple[Located, ...], ...]

    def place(self, name: str) -> int | None:
        """The place of a column, counted from 0."""
        return self.names.index(name) if name in self.names else None


def read_columns(
    workspace: Workspace, file: str, *, delimiter: str = ",", decimal: str = ".", asked: Span | None = None
) -> Columns:
    """The columns of a file. Raises `Refused` with every fault: `column-file`, `too-large`, and what reading raises."""
    check_signs(delimiter, decimal, asked)
    text = workspace.read(file, asked)
    faults = Faults()
    rows = Scanner(file, text, delimiter, faults).rows()
    header = next(rows, None)
    if header is None:
        faults.add(
            "column-file",
            f"{file} has no header",
            span_at(file, text, 0, 0),
            expected="a header such as `engine_speed [rpm], torque [N*m]`",
        )
        faults.settle()
        return Columns((), (), ())
    named = [name_and_unit(cell.text) for cell in header.cells]
    _check_header(header, [name for name, _ in named], faults)
    found = tuple(_rows(rows, [unit or "" for _, unit in named], decimal, faults))
    faults.settle()
    return Columns(header.cells, tuple(name for name, _ in named), found)


def _check_header(header: Row, names: list[str], faults: Faults) -> None:
    for place, (cell, name) in enumerate(zip(header.cells, names, strict=True)):
        if not name:
            faults.add("column-file", f"column {place + 1} has no name", cell.span, expected="`name [unit]`")
        elif name in names[:place]:
            faults.add("column-file", f"the column '{name}' stands twice", cell.span, advice="delete one of the two")


def _rows(rows: Iterator[Row], units: list[str], decimal: str, faults: Faults) -> Iterator[tuple[Located, ...]]:
    for count, row in enumerate(rows, 1):
        if count > MAXIMUM_ROWS:
            faults.add("too-large", f"the file has more than {MAXIMUM_ROWS} rows", row.cells[0].span)
            return
        if not any(cell.text for cell in row.cells):
            continue
        if len(row.cells) != len(units):
            told = f"row {row.number}: {len(row.cells)} cells stand under {len(units)} columns"
            faults.add("column-file", told, row.cells[-1].span, expected=f"{len(units)} cells")
            continue
        for cell in row.cells:
            if other_decimal(cell.text, decimal):
                told = f"row {row.number}: the decimal sign of this file is `{decimal}`, and '{cell.text}' has another"
                faults.add("column-file", told, cell.span, advice="declare `decimal:` as the file writes it")
        yield tuple(number_cell(cell, decimal, unit) for cell, unit in zip(row.cells, units, strict=True))


def chosen(columns: Columns, names: list[str], asked: Span, faults: Faults) -> tuple[tuple[Located, ...], ...] | None:
    """The rows with the columns of these names alone, in their order; None with the fault noted where one is missing."""
    places = [columns.place(name) for name in names]
    for name, place in zip(names, places, strict=True):
        if place is None:
            file = columns.headings[0].span.file
            faults.add(
                "column-file",
                f"{file} has no column '{name}'",
                asked,
                expected=" or ".join(columns.names),
                advice=nearest(name, columns.names),
            )
    if None in places:
        return None
    return tuple(tuple(row[place] for place in places if place is not None) for row in columns.rows)
