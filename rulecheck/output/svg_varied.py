"""`workings --vary` as SVG: a panel for each rule or figure, curves apart by colour, dash pattern and word.

Colours are the Okabe-Ito set. A limit is drawn as a line between two posts, the unsafe side hatched by the word
`breach`; a point outside a range of validity is a hollow ring; where nothing is known the curve is broken.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass

from rulecheck.outcome.results import Amount
from rulecheck.outcome.varied import Varied, VariedFigure, VariedPoint
from rulecheck.output.runs import runs_text
from rulecheck.output.screen import BLUE, GREEN, PURPLE, VERMILION
from rulecheck.output.svg import document, element, words
from rulecheck.output.terminal_varied import axis_text
from rulecheck.output.wording import common_unit, with_unit

WIDTH, HEIGHT = 640, 300
LEFT, RIGHT, TOP, BOTTOM = 76, 20, 34, 48
CURVES = ((BLUE, ""), (VERMILION, "7 4"), (GREEN, "2 3"), (PURPLE, "9 3 2 3"))
"""Colour and dash pattern of each curve."""
_MOST_RINGS = 60
_HIGHEST = 1e300
"""Beyond it a number cannot be drawn to scale with others."""


def varied_svg(varied: Varied) -> str:
    """The whole drawing; figures that are words are told in its description and below their heading."""
    panels: list[_Panel] = []
    foot = 0
    for figure in varied.figures:
        panels.append(_Panel(varied, figure, foot))
        foot += panels[-1].height
    title = f"{', '.join(figure.name for figure in varied.figures)} along {varied.along.path}"
    told = [f"{varied.design} ({varied.file}) on {varied.date}, along {axis_text(varied.along)}."]
    told += [panel.description for panel in panels]
    caution = element("text", words("A check is not approval: the event's officials decide."), x=LEFT, y=foot + 14)
    parts = [part for panel in panels for part in panel.parts()]
    return document(WIDTH, foot + 24, title, " ".join(told), [*parts, caution])


@dataclass(frozen=True, slots=True)
class _Range:
    """Values from low to high on pixels from start to end."""

    low: float
    high: float
    start: float
    end: float

    def at(self, value: float) -> float:
        share = (value - self.low) / (self.high - self.low)
        return self.start + share * (self.end - self.start)

    def ticks(self) -> Iterator[float]:
        """About five round values."""
        step = round_step((self.high - self.low) / 5)
        index = math.ceil(self.low / step - 1e-9)
        while index * step <= self.high + step * 1e-9:
            yield index * step
            index += 1


def round_step(least: float) -> float:
    """The least of 1, 2, 5 times a power of ten that is not below a width.

    >>> round_step(0.3), round_step(7), round_step(20)
    (0.5, 10.0, 20.0)
    """
    power = 10.0 ** math.floor(math.log10(least))
    return next(power * factor for factor in (1, 2, 5, 10) if power * factor >= least * (1 - 1e-9))


class _Panel:
    def __init__(self, varied: Varied, figure: VariedFigure, top: int) -> None:
        self.varied, self.figure, self.top = varied, figure, top
        self.xs, self.labels = _places(varied.along.values)
        self.across = _range(self.xs, LEFT, WIDTH - RIGHT, pad=0.0)
        numbers = [value for curve in figure.curves for point in curve if (value := _number(point, figure)) is not None]
        held = [*numbers, 0.0] if figure.is_rule else numbers
        self.legend = 16 * len(figure.curves) if varied.curves else 0
        self.bottom = top + self.legend + HEIGHT - BOTTOM
        self.up = _range(held, self.bottom, self.bottom - (HEIGHT - BOTTOM - TOP), pad=0.06) if numbers else None

    @property
    def height(self) -> int:
        """Less where there is nothing but words."""
        return HEIGHT + self.legend if self.up is not None else TOP + 18 * len(self._said_in_words()) + 8

    @property
    def description(self) -> str:
        """The panel in words."""
        what = f"margin of {self.figure.name}" if self.figure.is_rule else self.figure.name
        values = [str(value) for value in self.varied.along.values]
        told = [f"{what}: {self.figure.title}."]
        for name, curve in zip(self._names(), self.figure.curves, strict=True):
            first, last = (_said(point) for point in (curve[0], curve[-1]))
            runs = runs_text(curve, values)
            told.append(f"{name + ': ' if name else ''}{first} at {values[0]}, {last} at {values[-1]}.")
            told.append(f"{runs}." if runs else "")
        return " ".join(filter(None, told))

    def _names(self) -> list[str]:
        curves = self.varied.curves
        return [f"{curves.path} = {value}" for value in curves.values] if curves else [""]

    def parts(self) -> Iterator[str]:
        """Heading, axes, limit, curves, legend."""
        figure = self.figure
        what = f"margin of {figure.name}" if figure.is_rule else figure.name
        yield element("text", words(what), x=LEFT, y=self.top + 16, font_weight="bold")
        if self.up is None:
            for place, text in enumerate(self._said_in_words()):
                yield element("text", words(text), x=LEFT, y=self.top + 36 + 18 * place)
            return
        yield from self._axes(self.up)
        if figure.is_rule:
            yield from self._limit(self.up)
        for place, curve in enumerate(figure.curves):
            yield from self._curve(place, curve, self.up)
        yield from self._legend()

    def _said_in_words(self) -> list[str]:
        """Each stretch on a line, and why nothing is known."""
        values = [str(value) for value in self.varied.along.values]
        lines: list[str] = []
        for name, curve in zip(self._names(), self.figure.curves, strict=True):
            reasons = dict.fromkeys(point.reason for point in curve if point.amount is None and point.reason)
            lines += [name, *runs_text(curve, values).split("; "), *reasons]
        return list(filter(None, lines))

    def _axes(self, up: _Range) -> Iterator[str]:
        bottom, right = self.bottom, WIDTH - RIGHT
        grey: dict[str, object] = {"stroke": "#bbb", "stroke_width": 1}
        for value in up.ticks():
            y = up.at(value)
            yield element("line", x1=LEFT, x2=right, y1=y, y2=y, **grey)
            yield element("text", words(f"{value:.6g}"), x=LEFT - 6, y=y + 4, text_anchor="end")
        for x, label in self._marks():
            yield element("line", x1=x, x2=x, y1=bottom, y2=bottom + 5, stroke="#000")
            yield element("text", words(label), x=x, y=bottom + 18, text_anchor="middle")
        yield element("line", x1=LEFT, x2=right, y1=bottom, y2=bottom, stroke="#000")
        unit = common_unit(self.varied.along.values)
        yield element(
            "text", words(with_unit(self.varied.along.path, unit)), x=(LEFT + right) / 2, y=bottom + 36,
            text_anchor="middle",
        )  # fmt: skip
        middle = bottom - (HEIGHT - BOTTOM - TOP) / 2
        yield element(
            "text", words(f"[{self.figure.unit or '1'}]"), x=16, y=middle, text_anchor="middle",
            transform=f"rotate(-90 16 {middle:g})",
        )  # fmt: skip

    def _marks(self) -> Iterator[tuple[float, str]]:
        if self.labels:
            every = max(len(self.labels) // 8, 1)
            yield from (
                (self.across.at(x), label) for x, label in list(zip(self.xs, self.labels, strict=True))[::every]
            )
        else:
            yield from ((self.across.at(value), f"{value:.6g}") for value in self.across.ticks())

    def _limit(self, up: _Range) -> Iterator[str]:
        """The limit at margin zero: a line between two posts, with the word on either side."""
        y, right = up.at(0.0), WIDTH - RIGHT
        yield element("line", x1=LEFT, x2=right, y1=y, y2=y, stroke="#000", stroke_width=2)
        for x in (LEFT, right):
            yield element("line", x1=x, x2=x, y1=y - 8, y2=y + 8, stroke="#000", stroke_width=4)
        yield element("text", words("limit; breach below"), x=right - 6, y=y + 14, text_anchor="end", font_size=11)

    def _curve(self, place: int, curve: Sequence[VariedPoint], up: _Range) -> Iterator[str]:
        colour, dashes = CURVES[place]
        style: dict[str, object] = {"stroke": colour, "stroke_width": 2, "fill": "none"}
        if dashes:
            style["stroke_dasharray"] = dashes
        for stretch in self._stretches(curve, up):
            points = " ".join(f"{x:.1f},{y:.1f}" for x, y in stretch)
            if len(stretch) > 1 and not self.labels:
                yield element("polyline", points=points, **style)
            if len(stretch) == 1 or self.labels:
                yield from (element("circle", cx=x, cy=y, r=3, fill=colour) for x, y in stretch)
        outside = [(x, point) for x, point in zip(self.xs, curve, strict=True) if point.outside]
        for x, point in outside[:: max(len(outside) // _MOST_RINGS, 1)]:
            value = _number(point, self.figure)
            if value is not None:
                ring: dict[str, object] = {"r": 4, "fill": "#fff", "stroke": colour}
                yield element("circle", cx=self.across.at(x), cy=up.at(value), **ring)

    def _stretches(self, curve: Sequence[VariedPoint], up: _Range) -> Iterable[list[tuple[float, float]]]:
        """Points that hang together: a gap where nothing is known."""
        found: list[list[tuple[float, float]]] = [[]]
        for x, point in sorted(zip(self.xs, curve, strict=True), key=lambda pair: pair[0]):
            value = _number(point, self.figure)
            if value is None:
                found.append([])
            else:
                found[-1].append((self.across.at(x), up.at(value)))
        return [stretch for stretch in found if stretch]

    def _legend(self) -> Iterator[str]:
        told = [name for name in self._names() if name]
        for place, name in enumerate(told):
            colour, dashes = CURVES[place]
            y = self.top + TOP - 2 + 16 * place
            dash: dict[str, object] = {"stroke_dasharray": dashes} if dashes else {}
            yield element("line", x1=LEFT, x2=LEFT + 30, y1=y, y2=y, stroke=colour, stroke_width=2, **dash)
            yield element("text", words(name), x=LEFT + 36, y=y + 4, font_size=11)
        if any(point.outside for curve in self.figure.curves for point in curve):
            text = words("ring: outside its range of validity")
            yield element("text", text, x=WIDTH - RIGHT, y=self.top + 16, text_anchor="end", font_size=11)


def _places(values: Sequence[Amount]) -> tuple[list[float], list[str]]:
    """Where each value stands across: by its number, or one after the other under its words."""
    if common_unit(values):
        return [value.value or 0.0 for value in values], []
    return [float(place) for place in range(len(values))], [str(value) for value in values]


def _number(point: VariedPoint, figure: VariedFigure) -> float | None:
    value = point.amount.value if point.amount is not None and point.amount.unit == figure.unit else None
    return value if value is None or abs(value) <= _HIGHEST else None


def _range(values: Sequence[float], start: float, end: float, *, pad: float) -> _Range:
    low, high = min(values), max(values)
    if high - low <= 1 / _HIGHEST:
        room = abs(low) / 10 if abs(low) > 10 / _HIGHEST else 1.0
        return _Range(low - room, high + room, start, end)
    room = (high - low) * pad
    return _Range(low - room, high + room, start, end)


def _said(point: VariedPoint) -> str:
    return str(point.amount) if point.amount is not None else point.verdict or "not known"
