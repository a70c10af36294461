"""Formulas that YAML reads as something else: found here, and answered with "quote this formula".

Nothing here judges a formula; each rule looks for marks that a file meant as it stands does not have:
a parenthesis that closes in a later piece of one flow collection, a bracket or quote that a comment
cuts off, a first character that belongs to YAML.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator

from rulecheck.diagnostics import Faults
from rulecheck.reading.characters import span_at
from rulecheck.reading.nodes import Located, Node

_QUOTED_TEXT = re.compile(r'"[^"\n]*"')
_OPENED_QUOTE = re.compile(r'(?:^|[\s(\[=,])"[^"]*$')
_LONGEST_SHOWN = 200
_LONGEST_VALUE = 2000  # characters looked at for the end of a value
_CLOSED_UP = re.compile(r"[A-Za-z_][\w.]*:\S")


def quoted(formula: str) -> str:
    r"""A formula as it has to stand in the file: on one line, in quotes that fit what it holds.

    >>> print(quoted('grade in  ["A", "B"]'))
    'grade in ["A", "B"]'
    >>> print(quoted("max(a, b)"))
    "max(a, b)"
    """
    line = " ".join(formula.split())
    if '"' in line or "\\" in line:
        return "'" + line.replace("'", "''") + "'"
    return f'"{line}"'


def quote_this(faults: Faults, file: str, text: str, start: int, end: int, why: str) -> None:
    """Note that characters `start` to `end` have to be quoted, and how that looks where it is whole."""
    formula = text[start:end]
    whole = formula.strip() and len(formula) <= _LONGEST_SHOWN and not openness(formula, "([{", ")]}")
    shown = f": {quoted(formula)}" if whole else ""
    faults.add(
        "quote-this",
        why,
        span_at(file, text, start, end),
        expected="a formula in quotes",
        advice=f"quote this formula{shown}",
    )


def value_end(text: str, start: int, flow: bool) -> int:
    """Where a value that begins at `start` ends, as its writer meant it: with the line, or before ` #`.

    In a flow collection it ends before the comma or bracket that is not inside brackets of its own.

    >>> value_end("{a: max(b, c), d: 2}", 4, flow=True)
    13
    """
    place, depth = start, 0
    limit = min(len(text), start + _LONGEST_VALUE)
    while place < limit and text[place] != "\n" and not text.startswith(" #", place):
        character = text[place]
        if character == '"':
            closing = _QUOTED_TEXT.match(text, place)
            place = closing.end() if closing else place + 1
            continue
        if flow and not depth and character in ",]}":
            break
        depth += (character in "([{") - (character in ")]}")
        place += 1
    return start + len(text[start:place].rstrip())


def openness(text: str, opening: str = "(", closing: str = ")") -> int:
    """How many brackets of a plain text stay open (negative: close), quoted text left out.

    >>> openness("max(a"), openness("b)"), openness('f(")")')
    (1, -1, 0)
    """
    if '"' in text:
        text = _QUOTED_TEXT.sub("", text)
    return sum(map(text.count, opening)) - sum(map(text.count, closing))


def split_at_commas(pieces: Iterable[Node]) -> Iterator[tuple[Located, Located]]:
    """First and last piece of each formula that the commas of a flow collection have split.

    `{formula: max(a, b)}` reads as the value `max(a` and the key `b)`. A text that closes more than it
    opened, or stays open to the end of the collection, is left alone: it may be meant.
    """
    first: Located | None = None
    balance = 0
    for piece in pieces:
        if not isinstance(piece, Located) or piece.quoted or not ("(" in piece.text or ")" in piece.text):
            continue
        change = openness(piece.text)
        if first is None:
            if change > 0:
                first, balance = piece, change
            continue
        balance += change
        if balance <= 0:
            yield first, piece
            first = None


def still_open(pieces: Iterable[Node]) -> Located | None:
    """The first plain text of a flow collection that opens a parenthesis and does not close it."""
    for piece in pieces:
        if isinstance(piece, Located) and not piece.quoted and "(" in piece.text and openness(piece.text) > 0:
            return piece
    return None


def cut_by_comment(value: str, rest: str) -> bool:
    """True where ` #` ends a plain text inside brackets or quotes; `rest` is the line behind the text.

    >>> cut_by_comment("max(a,", " # first, b)"), cut_by_comment("1900 mm", " # overall")
    (True, False)
    """
    if not rest.lstrip(" \t").startswith("#"):
        return False
    if openness(value, "([{", ")]}") > 0:
        return True
    return '"' in rest and bool(_OPENED_QUOTE.search(_QUOTED_TEXT.sub("", value)))


def colon_closed_up(key: Located, value: Node) -> bool:
    """True for `{width:12 mm}`: a key with its value, as the blank behind the colon is missing."""
    if key.quoted or not isinstance(value, Located) or value.text or value.quoted:
        return False
    return bool(_CLOSED_UP.match(key.text))
