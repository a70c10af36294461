"""What reading gives: text with its place, and mappings and sequences of it."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field

from rulecheck.diagnostics import Span


@dataclass(frozen=True, slots=True)
class Located:
    """Text and where it stands. `raw` is the text as the file writes it, where that differs.

    >>> span = Span("a.yaml", 7, 14, 1, 8)
    >>> str(Located("1900 mm", span).part(5, 7))
    'a.yaml:1:13'
    """

    text: str
    span: Span = field(compare=False)
    raw: str | None = field(default=None, compare=False, repr=False)
    quoted: bool = field(default=False, compare=False, repr=False)

    def part(self, start: int, end: int) -> Span:
        """The place in the file of characters `start` to `end` of the text."""
        first, last = self._offset(start), self._offset(max(start, end - 1)) + (end > start)
        if self.raw is not None:
            last = min(last, len(self.raw))
        before = self.raw[:first] if self.raw is not None else self.text[:first]
        newlines = before.count("\n")
        column = len(before) - before.rfind("\n") if newlines else self.span.column + first
        where = self.span
        return Span(where.file, where.start + first, where.start + last, where.line + newlines, column)

    def _offset(self, index: int) -> int:
        """Where character `index` of the text stands in `raw`: quotes and line folds are stepped over.

        A character that `raw` lacks (an escape stands for it, or a unit of a heading was added) takes
        the place that comes next.
        """
        if self.raw is None:
            return index
        place = 0
        for position, character in enumerate(self.text):
            found = place
            while found < len(self.raw) and not _same(self.raw[found], character):
                found += 1
            place = found if found < len(self.raw) else min(place, len(self.raw))
            if position == index:
                return place
            place += 1
        return min(place, len(self.raw))


def _same(raw: str, character: str) -> bool:
    return raw == character or (raw == "\n" and character == " ")


@dataclass(frozen=True, slots=True)
class Entry:
    """A key of a mapping with its value."""

    key: Located
    value: Node


@dataclass(frozen=True, slots=True)
class Mapping:
    """Entries in the order of the file; keys are unique (reading refuses duplicates)."""

    entries: tuple[Entry, ...]
    span: Span = field(compare=False)
    _by_key: dict[str, Entry] = field(default_factory=dict, compare=False, repr=False)

    def get(self, name: str) -> Node | None:
        """The value of a key, or None."""
        entry = self._entry(name)
        return entry.value if entry is not None else None

    def key(self, name: str) -> Located | None:
        """The key itself with its place, or None."""
        entry = self._entry(name)
        return entry.key if entry is not None else None

    def _entry(self, name: str) -> Entry | None:
        # A long mapping is asked for each of its keys: it is gone through once.
        if not self._by_key:
            self._by_key.update((entry.key.text, entry) for entry in self.entries)
        return self._by_key.get(name)

    def __iter__(self) -> Iterator[Entry]:
        return iter(self.entries)

    def __len__(self) -> int:
        return len(self.entries)


@dataclass(frozen=True, slots=True)
class Sequence:
    """Items in the order of the file."""

    items: tuple[Node, ...]
    span: Span = field(compare=False)

    def __iter__(self) -> Iterator[Node]:
        return iter(self.items)

    def __len__(self) -> int:
        return len(self.items)


Node = Located | Mapping | Sequence
