"""Names of a rule book that nothing reads, and names that hide others."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator
from dataclasses import fields, is_dataclass

from rulecheck.diagnostics import Span
from rulecheck.model.core_table import CORE
from rulecheck.model.ruleset import PhysicsModule, Ruleset
from rulecheck.outcome.proofreading import Proof
from rulecheck.reading.nodes import Located, Mapping, Sequence
from rulecheck.studies.amounts import place

_WORD = re.compile(r"[^\W\d]\w*(?:\.(?:\w+|\*+))*")


def unused(ruleset: Ruleset, modules: Iterable[PhysicsModule], touched: Iterable[str]) -> Iterator[Proof]:
    """What the rule book declares and nothing reads; `touched` are the inputs that its rules read when bound.

    A name counts as read where a formula of the rule book, or of a physics module that it names, says it.
    """
    said = set(_words(ruleset.rules, ruleset.derived, ruleset.tables, ruleset.zones, ruleset.templates))
    said.update(_words(ruleset.needed, [module.figures for module in modules]))
    parts = {part for word in said for part in word.split(".")}
    for kind, named in _named(ruleset).items():
        for name, span in named.items():
            if name not in parts:
                yield _finding(f"{kind} '{name}'", name, span)
    known = {entry.path for entry in CORE}
    read = set(touched)
    for entry in ruleset.inputs:
        # What comes with every record of a test is of no rule book's making, and has no origin.
        if (
            entry.origin
            and entry.kind != "datum"
            and entry.path not in known
            and not _is_read(entry.path, said, parts, read)
        ):
            yield _finding(f"input '{entry.path}'", entry.path, entry.span)


def _finding(what: str, name: str, span: Span | None) -> Proof:
    advice = "take it out, or write the rule that reads it"
    return Proof("unused-name", "question", name, "", f"nothing reads the {what}", advice, place(span))


def _named(ruleset: Ruleset) -> dict[str, dict[str, Span | None]]:
    return {
        "derived figure": {name: item.span for name, item in ruleset.derived.items()},
        "table": {name: item.span for name, item in ruleset.tables.items()},
        "list": {name: members[0].span if members else None for name, members in ruleset.lists.items()},
        "zone": {name: item.span for name, item in ruleset.zones.items()},
        "template": {name: item.span for name, item in ruleset.templates.items()},
    }


def _is_read(path: str, said: set[str], parts: set[str], touched: set[str]) -> bool:
    """True where a formula names the input, what holds it or what it holds; a field goes by its last name."""
    if path in touched or path in said:
        return True
    if "*" in path:
        return path.rpartition(".")[2] in parts
    return any(word.startswith(f"{path}.") or path.startswith(f"{word}.") for word in said)


def _words(*things: object) -> Iterator[str]:
    """All words of the formulas in frozen values; titles and meanings are plain texts there, and not looked at."""
    waiting: list[object] = list(things)
    while waiting:
        thing = waiting.pop()
        if isinstance(thing, Located):
            yield from _WORD.findall(thing.text)
        elif isinstance(thing, Mapping):
            waiting.extend(part for entry in thing for part in (entry.key, entry.value))
        elif isinstance(thing, (Sequence, tuple, list)):
            waiting.extend(thing)
        elif isinstance(thing, dict):
            waiting.extend(thing.values())
        elif is_dataclass(thing) and not isinstance(thing, (type, Span)):
            waiting.extend(getattr(thing, item.name) for item in fields(thing))
