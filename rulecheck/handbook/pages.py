"""Handbook pages by name, with their tables filled in.

>>> "units" in names()
True
>>> page("units").splitlines()[0]
'# Units'
"""

from __future__ import annotations

import re
from pathlib import Path

from rulecheck.handbook.tables import TABLES

FOLDER = Path(__file__).parent
FIRST = (
    "index",
    "first-ten-minutes",
    "design-files",
    "rulesets",
    "language",
    "units",
    "verdicts-and-margins",
    "physics",
    "diagnostics",
)
"""The order of reading; a page that is not named here comes behind these."""

_MARKER = re.compile(r"^<!-- table: ([a-z-]+) -->$", re.MULTILINE)


def names() -> tuple[str, ...]:
    """The names of all pages, in the order of reading."""
    there = sorted(path.stem for path in FOLDER.glob("*.md"))
    return tuple(sorted(there, key=lambda name: FIRST.index(name) if name in FIRST else len(FIRST)))


def page(name: str) -> str:
    """The Markdown of a page. Raises `KeyError` where there is no such page."""
    if name not in names():
        raise KeyError(name)
    text = (FOLDER / f"{name}.md").read_text(encoding="utf-8")
    return _MARKER.sub(lambda found: TABLES[found[1]](), text)


def title(name: str) -> str:
    """The heading of a page.

    >>> title("units")
    'Units'
    """
    first, _, _ = (FOLDER / f"{name}.md").read_text(encoding="utf-8").partition("\n")
    return first.removeprefix("# ")
