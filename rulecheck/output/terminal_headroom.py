"""`headroom` on a terminal: each input with its travel both ways, and what stops it."""

from __future__ import annotations

from collections.abc import Iterable

from rich.console import RenderableType
from rich.table import Table
from rich.text import Text

from rulecheck.outcome.travel import Headroom, HeadroomReport, Travel
from rulecheck.output.marks import mark_lines
from rulecheck.output.screen import PAPER, Screen, draw, line, words
from rulecheck.output.wording import short

_MOST_RULES = 3
_MOST_UNREAD = 12
_WORDS = {
    "stops": "until",
    "opens": "not settled beyond, by",
    "mends": "is met from there on:",
    "unsure": "not certain beyond, by",
}


def headroom_text(report: HeadroomReport, screen: Screen = PAPER) -> str:
    """The whole terminal form of `headroom`."""
    return draw(_parts(report), screen)


def _parts(report: HeadroomReport) -> Iterable[RenderableType]:
    yield words(f"headroom of {report.design} ({report.file}) on {report.date}, each input alone")
    if report.breached:
        yield line(f"in breach as it stands: {', '.join(report.breached)}", 2)
    yield Text()
    if report.inputs:
        yield _table(report)
    else:
        yield words("no rule reads these inputs")
    yield from _left_out(report)
    yield from _unread(report)
    for told in mark_lines(report.marks):
        yield line(told, 2)
    for caution in report.cautions:
        yield Text()
        yield line(f"caution: {caution}")


def _table(report: HeadroomReport) -> Table:
    table = Table(box=None, padding=(0, 1, 0, 0), pad_edge=False, expand=True, header_style="underline")
    table.add_column("input", ratio=1)
    table.add_column("value", justify="right", no_wrap=True)
    table.add_column("down", justify="right", no_wrap=True, min_width=11)
    table.add_column("up", justify="right", no_wrap=True, min_width=11)
    for row in report.inputs:
        table.add_row(words(row.path), words(short(row.value)), words(_travel(row.down)), words(_travel(row.up)))
        for told in _stops(row):
            table.add_row(words(f"  {told}", "dim"), Text(), Text(), Text())
    return table


def _travel(travel: Travel) -> str:
    if travel.travel is None:
        return "free"
    shown = short(travel.travel)
    signed = shown if shown.startswith("-") else f"+{shown}"
    return signed if travel.is_exact else f"~{signed}"


def _stops(row: Headroom) -> Iterable[str]:
    for way, travel in (("down", row.down), ("up", row.up)):
        if travel.travel is None:
            continue
        more = f" and {len(travel.rules) - _MOST_RULES} more" if len(travel.rules) > _MOST_RULES else ""
        yield f"{way} to {short(travel.at)} {_WORDS[travel.ending]} {', '.join(travel.rules[:_MOST_RULES])}{more}"


def _left_out(report: HeadroomReport) -> Iterable[RenderableType]:
    for rule, paths in report.left_out:
        more = f" and {len(paths) - _MOST_UNREAD} more" if len(paths) > _MOST_UNREAD else ""
        yield Text()
        yield line(f"left out, since a solver stands between: {rule}, by {', '.join(paths[:_MOST_UNREAD])}{more}")


def _unread(report: HeadroomReport) -> Iterable[RenderableType]:
    if not report.unread:
        return
    more = f" and {len(report.unread) - _MOST_UNREAD} more" if len(report.unread) > _MOST_UNREAD else ""
    yield Text()
    yield line(f"no rule restrains: {', '.join(report.unread[:_MOST_UNREAD])}{more}")
    yield line("free: nothing stops it as far as 100 times its value, nor down to zero where", style="dim")
    yield line("lower values are no values; ~ known to a billionth of that", style="dim")
