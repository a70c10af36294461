"""Markdown tables."""

from __future__ import annotations

from collections.abc import Iterable


def table(head: Iterable[str], rows: Iterable[Iterable[str]]) -> str:
    """A Markdown table; upright lines in cells are escaped.

    >>> print(table(["a", "b"], [["1", "x|y"]]))
    | a | b |
    | --- | --- |
    | 1 | x\\|y |
    """
    names = list(head)
    lines = [_line(names), _line(["---"] * len(names)), *(_line(row) for row in rows)]
    return "\n".join(lines)


def _line(cells: Iterable[str]) -> str:
    return "| " + " | ".join(cell.replace("|", "\\|") for cell in cells) + " |"
