"""What an input is, and how a path is looked up: the core table extended by the inputs of rulesets."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass, field, replace
from typing import Literal

from rulecheck.diagnostics import Span

InputKind = Literal[
    "number", "flag", "choice", "text", "date", "point", "datum", "item", "collection", "curve", "map", "signal", "outline", "range",
]  # fmt: skip


@dataclass(frozen=True, slots=True)
class Entry:
    """One row: what stands under a path. `*` in the path stands for any item of a collection.

    `unit` is the unit in which the value is spoken of (`1` for a pure number); `default` the text that holds where
    nothing is stated; `items` and `at_least` say what a collection must hold; `definition` is the definition that a
    ruleset asks for, `definitions` those that rival; `basis` is where a ruleset asks the value to come from; `over` the units of the keys of a curve or map.
    `computed` marks a declared value beside a computed figure; `sign` is what a stated number must be.
    """

    path: str
    kind: InputKind
    meaning: str
    unit: str = ""
    choices: tuple[str, ...] = ()
    default: str = ""
    term: str = ""
    items: tuple[str, ...] = ()
    at_least: int = 0
    of: str = ""
    datum_required: bool = False
    definition: str = ""
    definitions: tuple[str, ...] = ()
    basis: str = ""
    origin: str = ""
    computed: bool = False
    over: tuple[str, ...] = ()
    sign: Literal["", "more than 0", "0 or more"] = ""
    span: Span | None = field(default=None, compare=False)


@dataclass(slots=True)
class _Step:
    """A step of the path tree."""

    children: dict[str, _Step] = field(default_factory=dict)
    entry: Entry | None = None


class Vocabulary:
    """All inputs that may be named, looked up by path.

    >>> from rulecheck.model.core_table import CORE
    >>> Vocabulary(CORE).entry("tyres.rear.width").unit
    'mm'
    """

    def __init__(self, entries: Iterable[Entry]) -> None:
        self._root = _Step()
        self._entries: dict[str, Entry] = {}
        for entry in entries:
            self._place(entry)

    def extended(self, entries: Iterable[Entry]) -> Vocabulary:
        """A vocabulary with more entries; a ruleset's declaration of a known path completes the known one."""
        merged = dict(self._entries)
        for entry in entries:
            known = merged.get(entry.path)
            merged[entry.path] = _merged(known, entry) if known else entry
        return Vocabulary(merged.values())

    def _place(self, entry: Entry) -> None:
        step = self._root
        for part in entry.path.split("."):
            step = step.children.setdefault(part, _Step())
        step.entry = entry
        self._entries[entry.path] = entry

    def __iter__(self) -> Iterator[Entry]:
        return iter(self._entries.values())

    def entry(self, path: str) -> Entry | None:
        """The row for a path, or None."""
        step = self._step(path)
        return step.entry if step else None

    def knows_inside(self, path: str) -> bool:
        """True where something may stand below the path."""
        step = self._step(path)
        return bool(step and step.children)

    def _step(self, path: str) -> _Step | None:
        step: _Step | None = self._root
        for part in path.split("."):
            if step is None:
                return None
            step = step.children.get(part) or step.children.get("*")
        return step

    def below(self, path: str) -> tuple[str, ...]:
        """The names that may stand directly below a path."""
        step = self._step(path) if path else self._root
        return tuple(name for name in step.children if name != "*") if step else ()


def _merged(known: Entry, entry: Entry) -> Entry:
    """A ruleset may narrow or complete a known input; what it leaves out stays as it was."""
    told = {
        name: getattr(entry, name)
        for name in (
            "unit",
            "choices",
            "items",
            "at_least",
            "definition",
            "basis",
            "definitions",
            "meaning",
            "of",
            "default",
            "over",
        )
        if getattr(entry, name)
    }
    required = known.datum_required or entry.datum_required
    return replace(known, **told, datum_required=required, kind=entry.kind, origin=entry.origin, span=entry.span)
