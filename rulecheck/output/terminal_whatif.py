"""`whatif` on a terminal: what moves, most affected first; before, after, difference, and what the slope foretold."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from rich.console import RenderableType
from rich.table import Table
from rich.text import Text

from rulecheck.outcome.changes import FigureChange, Moved, RuleChange, WhatIf
from rulecheck.output.marks import mark_lines
from rulecheck.output.screen import PAPER, STYLES, Screen, draw, line, words
from rulecheck.output.wording import folded, short

_MOST_FIGURES = 30
_MOST_INPUTS = 30
_WIDEST = 16
"""Columns of a number with its unit; what is longer is cut, and stands whole in JSON."""
_HEADERS = ("before", "after", "difference", "foretold")


def whatif_text(outcome: WhatIf, screen: Screen = PAPER) -> str:
    """The whole terminal form of `whatif`."""
    return draw(_parts(outcome, screen), screen)


def _parts(outcome: WhatIf, screen: Screen) -> Iterable[RenderableType]:
    yield words(f"what if, for {outcome.design} ({outcome.file}) on {outcome.date}")
    for place, (name, settings) in enumerate(outcome.columns, 1):
        yield line(f"{place}. {name}: {', '.join(settings) or 'nothing'}", 2)
    arrow = " → " if screen.unicode else " -> "
    yield from _inputs(outcome, arrow)
    yield Text()
    if not outcome.rules and not outcome.figures:
        yield words("nothing moves")
    else:
        yield from _rules(outcome)
        yield from _limits(outcome, arrow)
        yield from _figures(outcome, screen)
    yield Text()
    yield from _totals(outcome)
    for told in mark_lines(outcome.marks, [f"with {name}" for name, _ in outcome.columns]):
        yield line(told, 2)
    for caution in outcome.cautions:
        yield Text()
        yield line(f"caution: {caution}")


def _inputs(outcome: WhatIf, arrow: str) -> Iterable[RenderableType]:
    """What is set where change files do not say it in the lines above."""
    if not any(setting.startswith("change ") for _, settings in outcome.columns for setting in settings):
        return
    yield Text()
    yield words("inputs that change", "bold")
    for item in outcome.inputs[:_MOST_INPUTS]:
        yield line(f"{item.path}: {_told(item.before, item.after, arrow, 'not stated')}", 2)
    if len(outcome.inputs) > _MOST_INPUTS:
        yield words(f"  and {len(outcome.inputs) - _MOST_INPUTS} more, in --form json", "dim")


def _limits(outcome: WhatIf, arrow: str) -> Iterable[RenderableType]:
    """Which limit binds, before and after; what stays is told too, since a limit that stays explains the numbers."""
    if not outcome.limits:
        return
    yield Text()
    yield words("what binds, before and after", "bold")
    for item in outcome.limits:
        yield line(f"{item.name}: {_told(item.before, item.after, arrow, 'not known')}", 2)


def _told(before: str, after: Sequence[str], arrow: str, nothing: str) -> str:
    if all(text == before for text in after):
        return f"{before or nothing}, as before"
    shown = after[:1] if len(set(after)) == 1 else after
    return f"{before or nothing}{arrow}{', '.join(text or nothing for text in shown)}"


def _rules(outcome: WhatIf) -> Iterable[RenderableType]:
    yield words("rules that move, most affected first", "bold")
    foretold = _is_foretold(outcome.rules)
    table = _table("rule", foretold=foretold)
    for change in outcome.rules:
        for place, moved in enumerate(change.moved, 1):
            table.add_row(*list(_rule_row(change, moved, place, len(change.moved)))[: 6 if foretold else 5])
    yield table
    yield words(f"{outcome.unchanged} rules do not move", "dim")
    yield from _bindings(outcome.rules)


def _table(first: str, *, foretold: bool) -> Table:
    table = Table(box=None, padding=(0, 1, 0, 0), pad_edge=False, expand=True, header_style="underline")
    if first == "rule":
        table.add_column("", width=5)
    table.add_column(first, ratio=1)
    for header in _headers(foretold):
        table.add_column(header, justify="right", no_wrap=True, max_width=_WIDEST)
    return table


def _headers(foretold: bool) -> Sequence[str]:
    return _HEADERS if foretold else _HEADERS[:-1]


def _is_foretold(changes: Sequence[RuleChange | FigureChange]) -> bool:
    """A change of choices or parts has no slope, and then the column says nothing."""
    return any(moved.foretold is not None for change in changes for moved in change.moved)


def _rule_row(change: RuleChange, moved: Moved, place: int, count: int) -> Iterable[Text]:
    yield words(change.clause if place == 1 else "")
    title = change.title if place == 1 else ""
    column = f" [{place}]" if count > 1 else ""
    turned = moved.verdict is not None and moved.verdict != change.verdict
    said = Text.assemble(words(title + column))
    if turned and moved.verdict is not None:
        said = Text.assemble(said, words(f" {change.verdict} to "), words(moved.verdict, STYLES[moved.verdict]))
    yield said
    yield from _numbers(change, moved, place)


def _numbers(change: RuleChange | FigureChange, moved: Moved, place: int) -> Iterable[Text]:
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


def _figures(outcome: WhatIf, screen: Screen) -> Iterable[RenderableType]:
    if not outcome.figures:
        return
    yield Text()
    yield words("figures that move, most affected first", "bold")
    shown = outcome.figures[:_MOST_FIGURES]
    foretold = _is_foretold(shown)
    rows = [
        (change, moved, place, list(_numbers(change, moved, place))[: len(_headers(foretold))])
        for change in shown
        for place, moved in enumerate(change.moved, 1)
    ]
    widths = [
        max(len(header), *(min(row[3][index].cell_len, _WIDEST) for row in rows))
        for index, header in enumerate(_headers(foretold))
    ]
    room = screen.width - sum(widths) - len(widths) - 6
    table = _table("figure", foretold=foretold)
    for change, _, place, numbers in rows:
        column = f" [{place}]" if len(change.moved) > 1 else ""
        table.add_row(words((folded(change.name, room) if place == 1 else "") + column), *numbers)
    yield table
    if len(outcome.figures) > _MOST_FIGURES:
        yield words(f"and {len(outcome.figures) - _MOST_FIGURES} more, in --form json", "dim")


def _totals(outcome: WhatIf) -> Iterable[RenderableType]:
    yield Text.assemble("total before: ", words(outcome.verdict, STYLES[outcome.verdict]))
    for (name, _), verdict in zip(outcome.columns, outcome.verdicts, strict=True):
        yield Text.assemble(words(f"total with {name}: "), words(verdict, STYLES[verdict]))
