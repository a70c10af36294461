"""`workings --vary` as CSV (RFC 4180, with line feeds): a row for each value, numbers without units, units in the head."""

from __future__ import annotations

import csv
from collections.abc import Iterable
from io import StringIO

from rulecheck.outcome.results import Amount
from rulecheck.outcome.varied import Varied, VariedFigure, VariedPoint
from rulecheck.output.escaping import plain
from rulecheck.output.wording import common_unit, with_unit


def varied_csv(varied: Varied) -> str:
    """The whole table as CSV; with a second path, its values stand in the first column."""
    stream = StringIO()
    writer = csv.writer(stream, lineterminator="\n")
    unit = common_unit(varied.along.values)
    head = [with_unit(varied.along.path, unit), *(name for figure in varied.figures for name in _heads(figure))]
    curves = varied.curves
    writer.writerow([guarded(name) for name in ([curves.path, *head] if curves else head)])
    for number, curve in enumerate(curves.values if curves else (None,)):
        for place, value in enumerate(varied.along.values):
            row = [number_text(value) if unit else guarded(str(value))]
            row += [cell for figure in varied.figures for cell in _cells(figure, figure.curves[number][place])]
            writer.writerow([guarded(str(curve)), *row] if curve is not None else row)
    return stream.getvalue()


def guarded(text: str) -> str:
    """A text that no spreadsheet takes for a formula: an apostrophe before `=`, `+`, `-`, `@`.

    >>> guarded("=1+1"), guarded("grip")
    ("'=1+1", 'grip')
    """
    shown = plain(text)
    return f"'{shown}" if shown.lstrip().startswith(("=", "+", "-", "@")) else shown


def number_text(amount: Amount) -> str:
    """A number without its unit: exact where it is a decimal, else the nearest double; a word is guarded.

    >>> number_text(Amount("0.333333", "mm", 1 / 3, "1/3")), number_text(Amount("-4", "mm", -4.0, "-4"))
    ('0.3333333333333333', '-4')
    """
    if amount.value is None:
        return guarded(amount.shown)
    return amount.exact if amount.exact and "/" not in amount.exact else repr(amount.value)


def _heads(figure: VariedFigure) -> Iterable[str]:
    yield with_unit(f"{figure.name} margin" if figure.is_rule else figure.name, figure.unit)
    if figure.is_rule:
        yield f"{figure.name} verdict"
    yield f"{figure.name} note"


def _cells(figure: VariedFigure, point: VariedPoint) -> Iterable[str]:
    """Number, verdict, and what is to be said: why there is no number, another unit, outside its validity."""
    amount, notes = point.amount, []
    alien = amount is not None and amount.value is not None and amount.unit != figure.unit
    if amount is None and point.reason:
        notes.append(point.reason)
    if alien:
        notes.append(f"{amount}")
    if point.outside:
        notes.append("outside its range of validity")
    yield "" if amount is None or alien else number_text(amount)
    if figure.is_rule:
        yield point.verdict or ""
    yield guarded("; ".join(notes))
