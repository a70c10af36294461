"""Diagnostics for people: the place, what is wrong, the line with carets, what was expected, what to do."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from textwrap import wrap

from rich.cells import cell_len

from rulecheck.diagnostics import Diagnostic, Span
from rulecheck.output.escaping import plain

WIDTH = 80
_MARGIN = "    "
_LEAD = 24


def diagnostics_text(diagnostics: Sequence[Diagnostic], texts: Mapping[str, str], width: int = WIDTH) -> str:
    """All diagnostics, with the count at the end. `texts` are the texts of the files, by the file names in spans.

    >>> span = Span("car.design.yaml", 12, 16, 2, 4)
    >>> fault = Diagnostic("unknown-key", "no key is called 'tyer'", span, advice="did you mean 'tyre'?")
    >>> print(diagnostics_text([fault], {"car.design.yaml": "design: A\\nx: tyer\\n"}), end="")
    car.design.yaml:2:4: unknown-key: no key is called 'tyer'
        x: tyer
           ^^^^
        do: did you mean 'tyre'?
    <BLANKLINE>
    1 fault
    """
    blocks = ["\n".join(_block(item, texts, width)) for item in diagnostics]
    total = f"{len(blocks)} fault" if len(blocks) == 1 else f"{len(blocks)} faults"
    return "\n\n".join([*blocks, total]) + "\n"


def _block(item: Diagnostic, texts: Mapping[str, str], width: int) -> Iterable[str]:
    where = f"{plain(str(item.span))}: " if item.span else ""
    yield f"{where}{item.code}: {plain(item.message)}"
    if item.span is not None:
        yield from _quoted(item.span, texts, width)
    if item.expected:
        yield from _wrapped(f"expected: {plain(item.expected)}", width)
    if item.advice:
        yield from _wrapped(f"do: {plain(item.advice)}", width)
    for other in item.related:
        yield f"{_MARGIN}see {plain(str(other.span))}: {plain(other.message)}"
        yield from _quoted(other.span, texts, width)


def _wrapped(text: str, width: int) -> Iterable[str]:
    yield from wrap(
        text,
        width,
        initial_indent=_MARGIN,
        subsequent_indent=_MARGIN * 2,
        break_long_words=False,
        break_on_hyphens=False,
    )


def _quoted(span: Span, texts: Mapping[str, str], width: int) -> Iterable[str]:
    """The line that a span begins in, cut around it, and the carets below."""
    lines = texts.get(span.file, "").splitlines()
    if not 1 <= span.line <= len(lines):
        return
    line = lines[span.line - 1]
    first = min(span.column - 1, len(line))
    last = min(first + max(span.end - span.start, 1), max(len(line), first + 1))
    before, marked, after = _cut(line, first, last, width - len(_MARGIN))
    yield f"{_MARGIN}{before}{marked}{after}".rstrip()
    yield f"{_MARGIN}{' ' * cell_len(before)}{'^' * max(cell_len(marked), 1)}"


def _cut(line: str, first: int, last: int, room: int) -> tuple[str, str, str]:
    """Before, marked and after, together no wider than the room; `...` stands for what is cut off."""
    before, marked, after = plain(line[:first]), plain(line[first:last]), plain(line[last:])
    if cell_len(before) + cell_len(marked) + cell_len(after) <= room:
        return before, marked, after
    if cell_len(before) > _LEAD:
        before = "..." + _end_of(before, _LEAD - 3)
    marked = _start_of(marked, room - cell_len(before))
    return before, marked, _start_of(after, room - cell_len(before) - cell_len(marked))


def _start_of(text: str, room: int) -> str:
    if cell_len(text) <= room:
        return text
    kept = text[: max(room - 3, 0)]
    while kept and cell_len(kept) > room - 3:
        kept = kept[:-1]
    return kept + "..."[: max(room, 0)]


def _end_of(text: str, room: int) -> str:
    kept = text[-room:]
    while cell_len(kept) > room:
        kept = kept[1:]
    return kept
