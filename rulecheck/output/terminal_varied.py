"""`workings --vary` on a terminal: a line for each value with the number, the verdict, and a strip of the plot."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from fractions import Fraction

from rich.console import RenderableType
from rich.text import Text

from rulecheck.outcome.results import Amount
from rulecheck.outcome.varied import Axis, Varied, VariedFigure, VariedPoint
from rulecheck.output.escaping import plain
from rulecheck.output.runs import runs_text, word_of
from rulecheck.output.screen import PAPER, STYLES, Screen, draw, line, words
from rulecheck.output.strip import MARKERS, PLAIN_MARKERS, Scale, strip
from rulecheck.output.wording import counted, short
from rulecheck.quantity.numbers import show_number

_WIDEST_VALUE = 24
_LEAST_STRIP = 16


def varied_text(varied: Varied, screen: Screen = PAPER) -> str:
    """The whole terminal form of `workings --vary`."""
    return draw(_parts(varied, screen), screen)


def _parts(varied: Varied, screen: Screen) -> Iterable[RenderableType]:
    yield words(f"workings of {varied.design} ({varied.file}) on {varied.date}")
    yield line(f"along {axis_text(varied.along)}", 2)
    if varied.curves is not None:
        markers = MARKERS if screen.unicode else PLAIN_MARKERS
        for marker, value in zip(markers, varied.curves.values, strict=False):
            yield line(f"{marker} {varied.curves.path} = {value}", 2)
    yield from (line(f"with {change}", 2) for change in varied.changes)
    for figure in varied.figures:
        yield Text()
        yield from _figure(varied, figure, screen)
    for caution in varied.cautions:
        yield Text()
        yield line(f"caution: {caution}")


def axis_text(axis: Axis) -> str:
    """An input with its values in words.

    >>> axis_text(Axis("vehicle.speed", (Amount("60", "km/h"), Amount("80", "km/h")), "20 km/h"))
    'vehicle.speed from 60 km/h to 80 km/h by 20 km/h: 2 values'
    """
    count = counted(len(axis.values), "value")
    if axis.step:
        return f"{axis.path} from {axis.values[0]} to {axis.values[-1]} by {axis.step}: {count}"
    return f"{axis.path}: {count}"


def _figure(varied: Varied, figure: VariedFigure, screen: Screen) -> Iterable[RenderableType]:
    what = f"margin of {figure.name}" if figure.is_rule else figure.name
    yield words(" ".join(filter(None, (figure.clause, what))) + (f": {figure.title}" if figure.title else ""), "bold")
    points = [point for curve in figure.curves for point in curve]
    values = [plain(str(value)) for value in varied.along.values]
    if _is_still(figure):
        if points[0].amount is not None or figure.is_rule:
            unit = figure.unit if points[0].amount is not None else ""
            verdict = f"{points[0].verdict}, margin " if figure.is_rule and points[0].amount is not None else ""
            yield line(f"{verdict}{Amount(_cell(points[0], figure), unit)} all along", 2)
        yield from _reasons(points)
        return
    yield from _rows(figure, values, screen)
    for place, curve in enumerate(figure.curves):
        told = runs_text(curve, values)
        marker = f"{(MARKERS if screen.unicode else PLAIN_MARKERS)[place]} " if len(figure.curves) > 1 else ""
        if told:
            yield line(f"{marker}{told}", 2)
    yield from _reasons(points)


def _is_still(figure: VariedFigure) -> bool:
    """True where no curve moves, and all are alike."""
    first = figure.curves[0][0]
    return all(
        (point.amount, point.verdict, point.reason) == (first.amount, first.verdict, first.reason)
        for curve in figure.curves
        for point in curve
    )


def _reasons(points: Sequence[VariedPoint]) -> Iterable[RenderableType]:
    """Why there is no number, each reason once; what the mark behind a number means."""
    for reason in dict.fromkeys(point.reason for point in points if point.amount is None and point.reason):
        yield line(f"not known ({reason})", 2)
    if any(point.outside for point in points):
        yield line("! outside the range of validity of what it rests on", 2)


def _rows(figure: VariedFigure, values: Sequence[str], screen: Screen) -> Iterable[RenderableType]:
    widest = min(max(map(len, values)), _WIDEST_VALUE)
    cells = [[_cell(point, figure) for point in curve] for curve in figure.curves]
    widths = [max(len(figure.unit), *map(len, column)) for column in cells]
    verdicts = max((len(word_of(point)) for point in figure.curves[0]), default=0) if _says_words(figure) else 0
    left = screen.width - 2 - widest - sum(width + 2 for width in widths) - (verdicts + 2 if verdicts else 0) - 2
    scale = _scale(figure, max(left, _LEAST_STRIP))
    if scale is not None:
        yield _head(figure, widest, widths, verdicts, scale)
    for place, value in enumerate(values):
        points = [curve[place] for curve in figure.curves]
        numbers = "".join(f"  {column[place]:>{width}}" for column, width in zip(cells, widths, strict=True))
        row = Text(f"  {value[:widest]:>{widest}}{numbers}")
        if verdicts:
            row.append(f"  {word_of(points[0]):<{verdicts}}", _style(points[0]))
        if scale is not None:
            numbers_only = [point.amount.value if point.amount else None for point in points]
            row.append("  ").append(strip(scale, numbers_only, unicode=screen.unicode), _style(points[0]))
        yield row


def _says_words(figure: VariedFigure) -> bool:
    return len(figure.curves) == 1 and figure.is_rule


def _style(point: VariedPoint) -> str:
    return STYLES[point.verdict] if point.verdict is not None else ""


def _scale(figure: VariedFigure, length: int) -> Scale | None:
    """The scale of what are numbers in the figure's unit; None where there are none."""
    amounts = [point.amount for curve in figure.curves for point in curve if point.amount is not None]
    numbers = [item.value for item in amounts if item.value is not None and item.unit == figure.unit]
    return Scale.over(numbers, length, limit=0.0 if figure.is_rule else None) if numbers else None


def _head(figure: VariedFigure, widest: int, widths: Sequence[int], verdicts: int, scale: Scale) -> RenderableType:
    """The unit above the numbers, the ends of the scale above the strip, and the word limit above its post."""
    unit = "" if figure.unit == "1" else figure.unit
    text = " " * (2 + widest) + "".join(f"  {unit:>{width}}" for width in widths)
    if verdicts:
        text += " " * (verdicts + 2)
    low, high = (short(Amount(show_number(Fraction(repr(value))), "")) for value in (scale.low, scale.high))
    ends = low + " " * max(scale.length - len(low) - len(high), 1) + high
    if scale.post is not None:
        start = max(min(scale.post - 2, scale.length - 5), 0)
        if not ends[max(start - 1, 0) : start + 6].strip():
            ends = f"{ends[:start]}limit{ends[start + 5 :]}"
    return Text(f"{text}  {ends}", "dim")


def _cell(point: VariedPoint, figure: VariedFigure) -> str:
    """A number without the unit that stands above it, or the word; `!` marks what is outside its validity."""
    if point.amount is None:
        return point.verdict or "not known"
    shown = short(Amount(point.amount.shown, "" if point.amount.unit == figure.unit else point.amount.unit))
    return plain(f"{shown}!" if point.outside else shown)
