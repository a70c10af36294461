"""Handbook pages by name, with their tables filled in.

>>> "units" in names()
True
>>> page("units").splitlines()[0]
'# Units'
"""

from __future__ import annotations

import re
import shlex
from pathlib import Path

from rulecheck.handbook.module_pages import PREFIX, module_names, module_page
from rulecheck.handbook.tables import TABLES

FOLDER = Path(__file__).parent
FIRST = (
    "index",
    "first-ten-minutes",
    "design-files",
    "curves-and-maps",
    "signals",
    "rulesets",
    "from-paper",
    "proofreading",
    "language",
    "zones",
    "units",
    "verdicts-and-margins",
    "spread",
    "what-if-and-headroom",
    "physics",
    "tracks-and-laps",
    "own-physics",
    "diagnostics",
)
"""The order of reading; a page that is not named here comes behind these."""

_MARKER = re.compile(r"^<!-- table: ([a-z-]+) -->$", re.MULTILINE)
_EXAMPLE = re.compile(r"^```(\w+) (.+)$", re.MULTILINE)


def names() -> tuple[str, ...]:
    """The names of all pages, in the order of reading; those of the physics modules stand behind `physics`."""
    there = [path.stem for path in FOLDER.glob("*.md")] + list(module_names())
    return tuple(sorted(there, key=_place))


def _place(name: str) -> tuple[int, str]:
    first = name if name in FIRST else "physics" if name.startswith(PREFIX) else ""
    return (FIRST.index(first) if first else len(FIRST), "" if name in FIRST else name)


def meant(name: str) -> str:
    """The page that a name stands for: a module's name alone stands for its page.

    >>> meant("mass"), meant("units")
    ('physics-mass', 'units')
    """
    return f"{PREFIX}{name}" if f"{PREFIX}{name}" in module_names() else name


def page(name: str) -> str:
    """The Markdown of a page. Raises `KeyError` where there is no such page."""
    if name not in names():
        raise KeyError(name)
    if name in module_names():
        return module_page(name.removeprefix(PREFIX))
    text = (FOLDER / f"{name}.md").read_text(encoding="utf-8")
    return _MARKER.sub(lambda found: TABLES[found[1]](), _EXAMPLE.sub(_captioned, text))


def _captioned(found: re.Match[str]) -> str:
    """The head of an example: what is said for its test becomes a line that people read."""
    said = dict(word.partition("=")[::2] for word in shlex.split(found[2]))
    caption = ""
    if "file" in said and f"`{said['file']}`" not in found.string[: found.start()].rstrip().rpartition("\n")[2]:
        caption = f"File `{said['file']}`:\n\n"
    elif "expect" in said:
        caption = f"Gives {said['expect']}.\n\n"
    return f"{caption}```{found[1]}"


def title(name: str) -> str:
    """The heading of a page.

    >>> title("units")
    'Units'
    """
    first, _, _ = page(name).partition("\n")
    return first.removeprefix("# ")
