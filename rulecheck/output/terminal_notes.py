"""Notes below the rules: contradictions, figures outside their range, estimates, and what the rule books changed."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from rich.console import RenderableType
from rich.text import Text

from rulecheck.outcome.results import Finding, Report
from rulecheck.output.marks import mark_lines, some
from rulecheck.output.screen import line, words
from rulecheck.output.terminal_details import SHOWN, ruled_words
from rulecheck.output.wording import counted


def notes(report: Report) -> Iterable[RenderableType]:
    """A heading and the notes; nothing where there are none."""
    lines = [*_told(report)]
    if not lines:
        return
    yield Text()
    yield words("notes", "bold")
    yield from (line(told, 2) for told in lines)


def _told(report: Report) -> Iterable[str]:
    yield from report.notes
    for book in report.rulesets:
        if book.note:
            yield f"{book.name}: {book.note}"
    yield from _outside(report)
    yield from mark_lines([replace(mark, outside_validity=()) for mark in report.marks])
    for item in report.rules:
        yield from (f"{_rule(item)}: {note}" for note in (*item.notes, *_ruled(item)))
    yield from _estimates(report)
    for item in report.rules:
        yield from (f"{_rule(item)}: {told}" for told in item.history)
    for book in report.rulesets:
        yield from (f"withdrawn by {book.name}: {told}" for told in book.withdrawn)


def _rule(item: Finding) -> str:
    return " ".join(filter(None, (item.clause, item.name)))


def _ruled(item: Finding) -> Iterable[str]:
    """The margin as measured, where the details above do not say it."""
    told = ruled_words(item.ruled) if item.verdict not in SHOWN else ""
    if told:
        yield told


def _outside(report: Report) -> Iterable[str]:
    by_figure: dict[str, list[str]] = {}
    for item in report.rules:
        for figure in item.outside_validity:
            by_figure.setdefault(figure, []).append(_rule(item))
    for figure, rules in by_figure.items():
        yield f"{figure} is used outside its range of validity, in {some(rules)}"


def _estimates(report: Report) -> Iterable[str]:
    resting = [item for item in report.rules if item.estimates]
    if not resting:
        return
    values = list(dict.fromkeys(path for item in resting for path in item.estimates))
    yield f"{counted(len(resting), 'rule')} on estimates: {some([_rule(item) for item in resting])}"
    yield f"{counted(len(values), 'estimate')}: {some(values)}"
