"""`whatif` on a terminal: what moves, most affected first; before, after, difference, and what the slope foretold."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from rich.console import RenderableType
from rich.table import Table
from rich.text import Text

from rulecheck.outcome.changes import FigureChange, Moved, RuleChange, WhatIf
from rulecheck.output.marks import mark_lines
from rulecheck.output.screen import PAPER, STYLES, Screen, draw, line, words
from rulecheck.output.wording import short

_MOST_FIGURES = 30


def whatif_text(outcome: WhatIf, screen: Screen = PAPER) -> str:
    """The whole terminal form of `whatif`."""
    return draw(_parts(outcome), screen)


def _parts(outcome: WhatIf) -> Iterable[RenderableType]:
    yield words(f"what if, for {outcome.design} ({outcome.file}) on {outcome.date}")
    for place, (name, settings) in enumerate(outcome.columns, 1):
        yield line(f"{place}. {name}: {', '.join(settings) or 'nothing'}", 2)
    yield Text()
    if not outcome.rules and not outcome.figures:
        yield words("nothing moves")
    else:
        yield from _rules(outcome)
        yield from _figures(outcome)
    yield Text()
    yield from _totals(outcome)
    for told in mark_lines(outcome.marks, [f"with {name}" for name, _ in outcome.columns]):
        yield line(told, 2)
    for caution in outcome.cautions:
        yield Text()
        yield line(f"caution: {caution}")


def _rules(outcome: WhatIf) -> Iterable[RenderableType]:
    yield words("rules that move, most affected first", "bold")
    table = _table("rule")
    for change in outcome.rules:
        for place, moved in enumerate(change.moved, 1):
            table.add_row(*_rule_row(change, moved, place, len(change.moved)))
    yield table
    yield words(f"{outcome.unchanged} rules do not move", "dim")
    yield from _bindings(outcome.rules)


def _table(first: str) -> Table:
    table = Table(box=None, padding=(0, 1, 0, 0), pad_edge=False, expand=True, header_style="underline")
    if first == "rule":
        table.add_column("", width=5)
    table.add_column(first, ratio=1)
    for header in ("before", "after", "difference", "foretold"):
        table.add_column(header, justify="right", no_wrap=True, max_width=14)
    return table


def _rule_row(change: RuleChange, moved: Moved, place: int, count: int) -> Iterable[Text]:
    yield words(change.clause if place == 1 else "")
    title = change.title if place == 1 else ""
    column = f" [{place}]" if count > 1 else ""
    turned = moved.verdict is not None and moved.verdict != change.verdict
    said = Text.assemble(words(title + column))
    if turned and moved.verdict is not None:
        said = Text.assemble(said, words(f" {change.verdict} to "), words(moved.verdict, STYLES[moved.verdict]))
    yield said
    yield words(short(change.before) if place == 1 else "")
    yield words(short(moved.after))
    yield words(_difference(moved))
    yield words(short(moved.foretold) if moved.difference is not None else "")


def _difference(moved: Moved) -> str:
    if moved.difference is None:
        return ""
    shown = short(moved.difference)
    return shown if shown.startswith(("-", "+")) or not shown[:1].isdigit() else f"+{shown}"


def _bindings(rules: Sequence[RuleChange]) -> Iterable[RenderableType]:
    """Rules in which another part binds afterwards."""
    for change in rules:
        for moved in change.moved:
            if moved.binding and change.binding and moved.binding != change.binding:
                yield line(f"{change.clause} {change.title}: now decided by {moved.binding}", 2, "dim")


def _figures(outcome: WhatIf) -> Iterable[RenderableType]:
    if not outcome.figures:
        return
    yield Text()
    yield words("figures that move, most affected first", "bold")
    table = _table("figure")
    for change in outcome.figures[:_MOST_FIGURES]:
        for place, moved in enumerate(change.moved, 1):
            table.add_row(*_figure_row(change, moved, place, len(change.moved)))
    yield table
    if len(outcome.figures) > _MOST_FIGURES:
        yield words(f"and {len(outcome.figures) - _MOST_FIGURES} more, in --form json", "dim")


def _figure_row(change: FigureChange, moved: Moved, place: int, count: int) -> Iterable[Text]:
    column = f" [{place}]" if count > 1 else ""
    yield words((change.name if place == 1 else "") + column)
    yield words(short(change.before) if place == 1 else "")
    yield words(short(moved.after))
    yield words(_difference(moved))
    yield words(short(moved.foretold) if moved.difference is not None else "")


def _totals(outcome: WhatIf) -> Iterable[RenderableType]:
    yield Text.assemble("total before: ", words(outcome.verdict, STYLES[outcome.verdict]))
    for (name, _), verdict in zip(outcome.columns, outcome.verdicts, strict=True):
        yield Text.assemble(words(f"total with {name}: "), words(verdict, STYLES[verdict]))
