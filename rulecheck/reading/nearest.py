"""Which known name a misspelt one is nearest to, as advice for a diagnostic."""

from __future__ import annotations

from collections.abc import Iterable
from difflib import get_close_matches

LONGEST_NAME = 120
"""Characters: nothing is suggested for a longer name, since comparing costs its length squared."""

MOST_NAMES = 2_000
"""Names compared by spelling; of more, only those of a like length are compared."""

LIKENESS = 0.6
"""The least likeness (difflib's ratio, from 0 to 1) at which a name is suggested."""


def nearest(name: str, known: Iterable[str]) -> str:
    """Advice that names the nearest known name, or an empty text where none is near.

    The same name in other letter case comes first, then the only name that ends in what was written,
    then the nearest by spelling. Equal ones are taken in alphabetical order.

    >>> nearest("tyres.rear.widht", ["tyres.rear.width", "tyres.front.width"])
    "did you mean 'tyres.rear.width'?"
    >>> nearest("rear.width", ["tyres.rear.width", "tyres.front.width"])
    "did you mean 'tyres.rear.width'?"
    >>> nearest("gearbox", ["wheelbase", "mass"])
    ''
    """
    found = _nearest(name, sorted(set(known) - {name}))
    return f"did you mean '{found}'?" if found else ""


def _nearest(name: str, known: list[str]) -> str:
    if not name or len(name) > LONGEST_NAME:
        return ""
    folded = name.casefold()
    for other in known:
        if other.casefold() == folded:
            return other
    endings = [other for other in known if other.endswith("." + name)]
    if len(endings) == 1:
        return endings[0]
    return next(iter(get_close_matches(name, _worth_comparing(name, known), 1, LIKENESS)), "")


def _worth_comparing(name: str, known: list[str]) -> list[str]:
    """At most `MOST_NAMES` of the known names: all, or those whose length is nearest to the name's."""
    if len(known) <= MOST_NAMES:
        return known
    near = sorted(known, key=lambda other: abs(len(other) - len(name)))
    return sorted(near[:MOST_NAMES])
