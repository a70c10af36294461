"""Stretches of values along which a word stays: from where to where a rule complies, which limit binds."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from rulecheck.outcome.varied import VariedPoint


def word_of(point: VariedPoint) -> str:
    """The verdict of a rule, or the word that a figure is; empty for a number."""
    if point.verdict is not None:
        return point.verdict
    if point.amount is None:
        return "not known"
    return point.amount.shown if point.amount.value is None else ""


def runs(points: Sequence[VariedPoint], values: Sequence[str]) -> Iterable[tuple[str, str, str]]:
    """Each word with the first and the last value of its stretch, in order.

    >>> points = [VariedPoint(None, "complies"), VariedPoint(None, "complies"), VariedPoint(None, "breach")]
    >>> list(runs(points, ["10 mm", "20 mm", "30 mm"]))
    [('complies', '10 mm', '20 mm'), ('breach', '30 mm', '30 mm')]
    """
    found: list[tuple[str, str, str]] = []
    for point, value in zip(points, values, strict=True):
        word = word_of(point)
        if found and found[-1][0] == word:
            found[-1] = (word, found[-1][1], value)
        else:
            found.append((word, value, value))
    return found


def runs_text(points: Sequence[VariedPoint], values: Sequence[str]) -> str:
    """The stretches in words; empty where nothing but numbers is shown."""
    told = [
        f"{word} at {first}" if first == last else f"{word} from {first} to {last}"
        for word, first, last in runs(points, values)
        if word
    ]
    return "; ".join(told)
