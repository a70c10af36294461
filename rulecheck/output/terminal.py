"""`check` on a terminal: what was checked, every rule with its rail, what needs work, notes, and the total."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from rich.cells import cell_len
from rich.console import RenderableType
from rich.table import Table
from rich.text import Text

from rulecheck.outcome.results import VERDICTS, Finding, Report
from rulecheck.output.rail import LENGTH, legend, rail
from rulecheck.output.screen import PAPER, STYLES, Screen, draw, line, words
from rulecheck.output.terminal_details import details
from rulecheck.output.terminal_notes import notes
from rulecheck.output.terminal_spread import spreads
from rulecheck.output.wording import percent, short

_NAMES_FROM = 108


def report_text(report: Report, screen: Screen = PAPER) -> str:
    """The whole terminal form of `check`."""
    return draw(_parts(report, screen), screen)


def _parts(report: Report, screen: Screen) -> Iterable[RenderableType]:
    yield from _head(report)
    for title, findings in _books(report):
        yield Text()
        yield words(title, "bold")
        yield _table(findings, screen)
    if any(item.relative_margin is not None for item in report.rules):
        yield Text()
        for told in legend(unicode=screen.unicode).splitlines():
            yield line(told, style="dim")
    yield from details(report)
    yield from spreads(report)
    yield from notes(report)
    yield Text()
    yield from _total(report)


def _head(report: Report) -> Iterable[RenderableType]:
    revision = f", revision {report.revision}" if report.revision else ""
    rows = Table.grid(padding=(0, 2))
    rows.add_row(words("design"), words(f"{report.design}{revision} ({report.file})", "bold"))
    for book in report.rulesets:
        for part in (book, *book.extends):
            edition = f", edition {part.edition}" if part.edition else ""
            rows.add_row(words("rules" if part is book else "and"), words(f"{part.name}{edition} ({part.file})"))
    rows.add_row(words("on"), words(report.date))
    for change in report.changes:
        rows.add_row(words("with"), words(change))
    if report.reserve:
        rows.add_row(words("reserve"), words(report.reserve))
    yield rows


def _books(report: Report) -> Iterable[tuple[str, Sequence[Finding]]]:
    """The findings by rule book, in the order of the books."""
    books: dict[str, list[Finding]] = {}
    for item in report.rules:
        books.setdefault(item.ruleset_name or item.ruleset, []).append(item)
    yield from books.items()


@dataclass(frozen=True, slots=True)
class _Column:
    """A column: its header, its width in cells, the side on which its text stands."""

    header: str
    width: int
    right: bool = False


def _columns(findings: Sequence[Finding], screen: Screen) -> list[_Column]:
    widest = max(cell_len(item.clause) for item in findings)
    margins = max(cell_len(short(item.margin)) for item in findings)
    others = [
        _Column("verdict", max(len(verdict) for verdict in VERDICTS)),
        _Column("margin", min(max(margins, 6), 14), right=True),
        _Column("share", 7, right=True),
        _Column("rail", LENGTH),
    ]
    if screen.width >= _NAMES_FROM:
        others.insert(0, _Column("name", max(cell_len(item.name) for item in findings)))
    first = _Column("", min(max(widest, 4), 10))
    taken = first.width + sum(column.width for column in others) + len(others) + 1
    return [first, _Column("rule", max(screen.width - taken, 10)), *others]


def _table(findings: Sequence[Finding], screen: Screen) -> RenderableType:
    """One line a rule, written at once; where a cell needs several lines, the library lays the table out."""
    columns = _columns(findings, screen)
    rows = [tuple(_row(item, screen)) for item in findings]
    if any(cell.cell_len > column.width for row in rows for cell, column in zip(row, columns, strict=True)):
        return _laid_out(columns, rows)
    whole = Text(no_wrap=True, overflow="ignore")
    _append(whole, [Text(column.header, "underline") for column in columns], columns)
    for row in rows:
        whole.append("\n")
        _append(whole, row, columns)
    return whole


def _append(whole: Text, row: Sequence[Text], columns: Sequence[_Column]) -> None:
    for place, (cell, column) in enumerate(zip(row, columns, strict=True)):
        blanks = " " * (column.width - cell.cell_len)
        whole.append(" " * (place > 0) + (blanks if column.right else ""))
        whole.append_text(cell)
        whole.append("" if column.right else blanks)


def _laid_out(columns: Sequence[_Column], rows: Sequence[Sequence[Text]]) -> Table:
    table = Table(box=None, padding=(0, 1, 0, 0), pad_edge=False, header_style="underline")
    for column in columns:
        fixed = column.header in ("name", "rail")
        table.add_column(column.header, width=column.width, justify="right" if column.right else "left", no_wrap=fixed)
    for row in rows:
        table.add_row(*row)
    return table


def _row(item: Finding, screen: Screen) -> Iterable[Text]:
    style = STYLES[item.verdict]
    yield words(item.clause)
    yield words(item.title)
    if screen.width >= _NAMES_FROM:
        yield words(item.name)
    yield words(item.verdict, style)
    yield words(short(item.margin))
    yield words(percent(item.relative_margin))
    yield words(rail(item.relative_margin, holds=_holds(item), unicode=screen.unicode), style)


def _holds(item: Finding) -> bool:
    margin = item.relative_margin or 0.0
    return margin > 0 or (margin == 0 and not item.strict)


def _total(report: Report) -> Iterable[RenderableType]:
    said = ", ".join(f"{number} {verdict}" for verdict, number in report.counts.items() if number)
    yield Text.assemble("total: ", words(report.verdict, STYLES[report.verdict]), words(f" ({said})"))
    tightest = next((item for item in report.rules if item.name == report.tightest), None)
    if tightest is not None:
        share = f" ({percent(tightest.relative_margin)})" if tightest.relative_margin is not None else ""
        named = f"{tightest.clause} {tightest.title}".strip()
        yield words(f"tightest: {named}, margin {short(tightest.margin)}{share}")
    for caution in report.cautions:
        yield Text()
        yield line(f"caution: {caution}")
