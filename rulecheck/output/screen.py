"""What a screen can show, and the drawing of rich's building blocks on it.

Colours are the Okabe-Ito set (M. Okabe and K. Ito, Color Universal Design, 2008), which people with the usual forms of
colour blindness can tell apart. Every colour is doubled by a word.
"""

from __future__ import annotations

import os
from collections.abc import Iterable
from dataclasses import dataclass
from io import StringIO
from typing import Literal, TextIO

from rich.console import Console, RenderableType
from rich.padding import Padding
from rich.text import Text

from rulecheck.outcome.results import Verdict
from rulecheck.output.escaping import encodable, plain

WIDTH = 80
WIDEST = 120
Colours = Literal["", "standard", "256", "truecolor"]

ORANGE, SKY_BLUE, GREEN, VERMILION = "#E69F00", "#56B4E9", "#009E73", "#D55E00"
YELLOW, BLUE, PURPLE = "#F0E442", "#0072B2", "#CC79A7"

STYLES: dict[Verdict, str] = {
    "complies": GREEN,
    "tight": ORANGE,
    "breach": f"bold {VERMILION}",
    "unproven": PURPLE,
    "open": SKY_BLUE,
    "dispensed": BLUE,
    "not applicable": "dim",
    "not followed": YELLOW,
}


@dataclass(frozen=True, slots=True)
class Screen:
    """Columns, whether box characters can be written, how many colours there are, and the encoding."""

    width: int = WIDTH
    unicode: bool = True
    colours: Colours = ""
    encoding: str = "utf-8"


PAPER = Screen()


def screen_of(stream: TextIO) -> Screen:
    """What a stream can show. Away from a terminal: 80 columns, no colour."""
    encoding = stream.encoding or "utf-8"
    if not stream.isatty():
        return Screen(unicode=_takes_lines(encoding), encoding=encoding)
    console = Console(file=stream)
    colours = "" if console.no_color or "NO_COLOR" in os.environ else (console.color_system or "")
    width = max(min(console.width, WIDEST), 40)
    return Screen(width, _takes_lines(encoding), _known(colours), encoding)


def _known(colours: str) -> Colours:
    for name in ("truecolor", "256", "standard"):
        if colours == name:
            return name
    return ""


def _takes_lines(encoding: str) -> bool:
    try:
        "┃─╌●◆".encode(encoding)
    except (UnicodeEncodeError, LookupError):
        return False
    return True


def words(text: str, style: str = "") -> Text:
    """Text from a file, harmless, in a style."""
    return Text(plain(text), style)


def line(text: str, indent: int = 0, style: str = "") -> Padding:
    """Text from a file on a line of its own; what does not fit goes on below it, as far in."""
    return Padding(words(text, style), (0, 0, 0, indent))


def draw(parts: Iterable[RenderableType], screen: Screen) -> str:
    """Parts one below the other as text for the screen, without blanks at line ends."""
    console = Console(
        file=StringIO(),
        width=screen.width,
        force_terminal=bool(screen.colours),
        color_system=screen.colours or None,
        no_color=not screen.colours,
        highlight=False,
        markup=False,
        emoji=False,
        legacy_windows=False,
        _environ={},
    )
    with console.capture() as capture:
        for part in parts:
            console.print(part)
    lines = (line.rstrip() for line in capture.get().split("\n"))
    return encodable("\n".join(lines), screen.encoding)
