"""`check` on a terminal: what was checked, every rule with its rail, what needs work, notes, and the total."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from rich.cells import cell_len
from rich.console import RenderableType
from rich.table import Table
from rich.text import Text

from rulecheck.outcome.results import VERDICTS, Finding, Report
from rulecheck.output.rail import LENGTH, legend, rail
from rulecheck.output.screen import PAPER, STYLES, Screen, draw, line, words
from rulecheck.output.terminal_details import details
from rulecheck.output.terminal_notes import notes
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
    yield from notes(report)
    yield Text()
    yield from _total(report)


def _head(report: Report) -> Iterable[RenderableType]:
    revision = f", revision {report.revision}" if report.revision else ""
    rows = Table.grid(padding=(0, 2))
    rows.add_row(words("design"), words(f"{report.design}{revision} ({report.file})", "bold"))
    for book in report.rulesets:
        edition = f", edition {book.edition}" if book.edition else ""
        rows.add_row(words("rules"), words(f"{book.name}{edition} ({book.file})"))
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


def _table(findings: Sequence[Finding], screen: Screen) -> Table:
    widest = max(cell_len(item.clause) for item in findings)
    margins = max(cell_len(short(item.margin)) for item in findings)
    table = Table(box=None, padding=(0, 1, 0, 0), expand=True, pad_edge=False, header_style="underline")
    table.add_column("", width=min(max(widest, 4), 10))
    table.add_column("rule", ratio=1)
    if screen.width >= _NAMES_FROM:
        table.add_column("name", no_wrap=True)
    table.add_column("verdict", width=max(len(verdict) for verdict in VERDICTS))
    table.add_column("margin", width=min(max(margins, 6), 14), justify="right")
    table.add_column("share", width=7, justify="right")
    table.add_column("rail", width=LENGTH, no_wrap=True)
    for item in findings:
        table.add_row(*_row(item, screen))
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
        yield words(f"tightest: {tightest.clause} {tightest.title}, margin {short(tightest.margin)}{share}")
    for caution in report.cautions:
        yield Text()
        yield line(f"caution: {caution}")
