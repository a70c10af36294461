"""The ledger: parts with their masses and places, one row each, from a CSV file to located cells."""

from __future__ import annotations

from dataclasses import dataclass, field

from rulecheck.diagnostics import Diagnostic, Faults, Refused, Related, Span
from rulecheck.reading.bounds import MAXIMUM_ROWS
from rulecheck.reading.characters import line_at, span_at
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located
from rulecheck.reading.rows import Row, Scanner, number_cell, other_decimal
from rulecheck.reading.workspace import Workspace

COLUMNS = (
    "item",
    "mass",
    "x",
    "y",
    "z",
    "datum",
    "quantity",
    "mirror",
    "basis",
    "maturity",
    "growth",
    "inertia_xx",
    "inertia_yy",
    "inertia_zz",
    "unsprung",
    "owner",
    "group",
)
"""The columns that a ledger may have, in any order."""

REQUIRED = ("item", "mass")
"""The columns that a ledger must have, with a value in every row."""

WITH_UNIT = ("mass", "x", "y", "z", "growth", "inertia_xx", "inertia_yy", "inertia_zz")
"""The columns whose heading may state a unit for bare numbers: `mass [kg]`."""

NUMERIC = (*WITH_UNIT, "quantity")
"""The columns whose cells hold numbers, in which the declared decimal sign counts."""

DELIMITERS = (",", ";", "\t", "|")
"""What may part the cells of a row."""

DECIMALS = (".", ",")
"""What may part the decimals of a number."""

_NAMES = {",": "a comma", ";": "a semicolon", "\t": "a tab", "|": "an upright line"}


@dataclass(frozen=True, slots=True)
class LedgerRow:
    """A row: the line on which it begins, and its cells by column; a cell that is empty is absent."""

    number: int
    cells: dict[str, Located]


@dataclass(frozen=True, slots=True)
class Column:
    """A column of the header: its name, and the unit that bare numbers in it take, or an empty text."""

    name: str
    unit: str
    heading: Located


@dataclass(slots=True)
class _Reading:
    """What is known while one ledger is read."""

    file: str
    delimiter: str
    decimal: str
    faults: Faults = field(default_factory=Faults)
    columns: tuple[Column | None, ...] = ()


def read_ledger(
    workspace: Workspace, file: str, *, delimiter: str = ",", decimal: str = ".", asked: Span | None = None
) -> tuple[LedgerRow, ...]:
    """The rows of a ledger. `delimiter` parts cells, `decimal` is the sign of decimals; neither is guessed.

    A bare number in a column with a unit in its heading takes that unit (`12.5` under `mass [kg]` reads
    `12.5 kg`), and a decimal comma reads as a point. A row without any value is passed over. Raises
    `Refused` with every fault: `ledger-header`, `ledger-row`, `too-large`, `bad-value` for signs that
    cannot be, and what `Workspace.read` raises.
    """
    check_signs(delimiter, decimal, asked)
    text = workspace.read(file, asked)
    reading = _Reading(file, delimiter, decimal)
    rows = Scanner(file, text, delimiter, reading.faults).rows()
    header = next(rows, None)
    if header is None:
        message = f"the ledger {file} has no header"
        reading.faults.add("ledger-header", message, span_at(file, text, 0, 0), expected=_expected_header())
        reading.faults.settle()
        return ()
    _read_header(reading, header, line_at(text, header.cells[0].span.start))
    found = []
    for count, row in enumerate(rows, 1):
        if count > MAXIMUM_ROWS:
            message = f"the ledger has more than {MAXIMUM_ROWS} rows"
            reading.faults.add("too-large", message, row.cells[0].span, advice="split the ledger")
            break
        if any(cell.text for cell in row.cells):
            found.append(_read_row(reading, row))
    reading.faults.settle()
    return tuple(found)


def check_signs(delimiter: str, decimal: str, asked: Span | None) -> None:
    """Raises `Refused` where these cannot be the signs of one file."""
    if delimiter not in DELIMITERS:
        message, expected = f"{delimiter!r} cannot part the cells of a ledger", "a comma, `;`, a tab or `|`"
    elif decimal not in DECIMALS:
        message, expected = f"{decimal!r} cannot part the decimals of a number", "`.` or `,`"
    elif delimiter == decimal:
        message, expected = "a comma cannot part both cells and decimals", "another delimiter, such as `;`"
    else:
        return
    advice = "declare the delimiter and the decimal sign that the file has"
    raise Refused([Diagnostic("bad-value", message, asked, expected=expected, advice=advice)])


# The header


def _read_header(reading: _Reading, header: Row, line: str) -> None:
    """Settle the columns, or raise `Refused`: rows mean nothing below a header that cannot be read."""
    other = _other_delimiter(reading.delimiter, line) if len(header.cells) == 1 else ""
    if other:
        reading.faults.add(
            "ledger-header",
            f"the header is one cell, and holds {_NAMES[other]}",
            header.cells[0].span,
            expected=f"cells parted by {_NAMES[reading.delimiter]}",
            advice=f"declare `delimiter: {_written(other)}`",
        )
        reading.faults.settle()
    reading.columns = tuple(_column(reading, heading, place) for place, heading in enumerate(header.cells, 1))
    _refuse_twice(reading)
    missing = [name for name in REQUIRED if name not in {column.name for column in reading.columns if column}]
    for name in missing:
        place = header.cells[0].span
        message = f"the header lacks the column {name!r}"
        reading.faults.add("ledger-header", message, place, expected=_expected_header(), advice="add the column")
    reading.faults.settle()


def _other_delimiter(delimiter: str, line: str) -> str:
    return next((other for other in DELIMITERS if other != delimiter and other in line), "")


def _written(delimiter: str) -> str:
    return r'"\t"' if delimiter == "\t" else f'"{delimiter}"'


def _column(reading: _Reading, heading: Located, place: int) -> Column | None:
    name, unit = name_and_unit(heading.text)
    if name not in COLUMNS:
        message = f"no column is called {name!r}" if name else f"column {place} has no name"
        advice = nearest(name, COLUMNS) or "delete the column, or rename it"
        reading.faults.add("ledger-header", message, heading.span, expected=_expected_header(), advice=advice)
        return None
    if unit is not None and (not unit or name not in WITH_UNIT):
        message = f"the column {name!r} takes no unit" if unit else f"the unit of the column {name!r} is empty"
        advice = "write the name alone" if name not in WITH_UNIT else f"write `{name} [unit]`, or the name alone"
        reading.faults.add("ledger-header", message, heading.span, expected=f"`{name}`", advice=advice)
    return Column(name, unit or "", heading)


def name_and_unit(heading: str) -> tuple[str, str | None]:
    """`mass [kg]` to `mass` and `kg`; without brackets at its end, the heading is the name.

    >>> name_and_unit("mass [kg]")
    ('mass', 'kg')
    """
    name, bracket, unit = heading.partition("[")
    if bracket and unit.endswith("]"):
        return name.strip(), unit[:-1].strip()
    return heading, None


def _refuse_twice(reading: _Reading) -> None:
    first: dict[str, Column] = {}
    for column in reading.columns:
        if column is None:
            continue
        known = first.setdefault(column.name, column)
        if known is not column:
            reading.faults.add(
                "ledger-header",
                f"the column {column.name!r} stands twice",
                column.heading.span,
                expected="each column once",
                advice="delete one of the two",
                related=[Related("it stands first here", known.heading.span)],
            )


def _expected_header() -> str:
    return f"a header of {', '.join(COLUMNS)}, of which {' and '.join(REQUIRED)} must be there"


# The rows


def _read_row(reading: _Reading, row: Row) -> LedgerRow:
    cells: dict[str, Located] = {}
    if len(row.cells) != len(reading.columns):
        _refuse_count(reading, row)
        return LedgerRow(row.number, cells)
    for column, cell in zip(reading.columns, row.cells, strict=True):
        if column is not None and cell.text:
            cells[column.name] = _cell(reading, column, cell, row.number)
    for place, column in enumerate(reading.columns):
        if column is not None and column.name in REQUIRED and column.name not in cells:
            message = f"row {row.number}, column {column.name!r}: nothing stands here"
            advice = "fill the cell, or delete the row"
            span = row.cells[place].span
            reading.faults.add("ledger-row", message, span, expected="a value", advice=advice)
    return LedgerRow(row.number, cells)


def _refuse_count(reading: _Reading, row: Row) -> None:
    due, there = len(reading.columns), len(row.cells)
    if there > due:
        message = f"row {row.number}: {there} cells stand under {due} columns; the first too many is cell {due + 1}"
        span = row.cells[due].span
        advice = "put a cell that holds the delimiter between quotes"
        if reading.delimiter == ",":
            advice += '; a file with decimal commas declares `delimiter: ";"` and `decimal: ","`'
    else:
        lacking = reading.columns[there]
        name = f" {lacking.name!r}" if lacking else ""
        message = f"row {row.number}: {there} cells stand under {due} columns; the first that lacks is column{name}"
        span = row.cells[-1].span
        advice = "write the delimiter for each cell that is empty"
    reading.faults.add("ledger-row", message, span, expected=f"{due} cells", advice=advice)


def _cell(reading: _Reading, column: Column, cell: Located, number: int) -> Located:
    if column.name not in NUMERIC:
        return cell
    if other_decimal(cell.text, reading.decimal):
        _refuse_decimal(reading, column, cell, number)
    return number_cell(cell, reading.decimal, column.unit)


def _refuse_decimal(reading: _Reading, column: Column, cell: Located, number: int) -> None:
    sign, declared = ("a comma", ".") if reading.decimal == "." else ("a point", ",")
    other = "," if reading.decimal == "." else "."
    reading.faults.add(
        "ledger-row",
        f"row {number}, column {column.name!r}: {sign} stands in the number {cell.text!r}, "
        f"and the decimal sign of this ledger is `{declared}`",
        cell.span,
        expected=f"a number such as 12{declared}5, without signs between thousands",
        advice=f'declare `decimal: "{other}"` if that is how this ledger writes decimals',
    )
