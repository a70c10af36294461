"""The strip: one line of a plot that runs down the page. Values go across; a rule's limit stands as a post in it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

MARKERS = "●○◆◇"
PLAIN_MARKERS = "o*+x"
"""Markers of the curves, for a screen that takes them and for one that does not."""


@dataclass(frozen=True, slots=True)
class Scale:
    """From the least to the greatest value on so many places; `post` is the place of the limit, None without one."""

    low: float
    high: float
    length: int
    post: int | None = None

    @classmethod
    def over(cls, values: Sequence[float], length: int, *, limit: float | None = None) -> Scale:
        """The scale that holds all values, and the limit where there is one.

        >>> Scale.over([-5, 15], 21, limit=0).post
        5
        """
        held = [*values, *(() if limit is None else (limit,))] or [0.0]
        scale = cls(min(held), max(held), length)
        return scale if limit is None else cls(scale.low, scale.high, length, scale.place(limit))

    def place(self, value: float) -> int:
        """Where a value stands, from 0 to the length less one.

        >>> [Scale(0, 10, 11).place(value) for value in (0, 4.4, 10)], Scale(3, 3, 11).place(3)
        ([0, 4, 10], 0)
        """
        # Halves first: the whole width of the greatest doubles would not be one.
        width = self.high / 2 - self.low / 2
        if width <= 0:
            return 0
        share = (value / 2 - self.low / 2) / width
        return min(max(round(share * (self.length - 1)), 0), self.length - 1)

    def beside_post(self, value: float) -> int:
        """Where a margin stands: on its own side of the post, however near it comes."""
        place = self.place(value)
        if place != self.post or value == 0:
            return place
        return min(place + 1, self.length - 1) if value > 0 else max(place - 1, 0)


def strip(scale: Scale, values: Sequence[float | None], *, unicode: bool = True) -> str:
    """One line: a marker for each value, the post of the limit; left of the post is the unsafe side.

    Where two markers meet, the first is seen. Only a value on the limit itself stands on the post.

    >>> strip(Scale(-5, 15, 21, 5), [5.0]), strip(Scale(-5, 15, 21, 5), [-3.0], unicode=False)
    ('╌╌╌╌╌┃────●──────────', '..o..|---------------')
    >>> strip(Scale(-5, 15, 21, 5), [0.1]), strip(Scale(-5, 15, 21, 5), [0.0])
    ('╌╌╌╌╌┃●──────────────', '╌╌╌╌╌●───────────────')
    >>> strip(Scale(0, 10, 11), [2.0, None, 10.0])
    '  ●       ◆'
    """
    unsafe, post, safe = "╌┃─" if unicode else ".|-"
    drawn = [" "] * scale.length
    if scale.post is not None:
        drawn = [unsafe] * scale.post + [post] + [safe] * (scale.length - scale.post - 1)
    markers = MARKERS if unicode else PLAIN_MARKERS
    for marker, value in reversed(list(zip(markers, values, strict=False))):
        if value is not None:
            drawn[scale.beside_post(value)] = marker
    return "".join(drawn)
