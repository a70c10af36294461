"""The register of clauses of a rule book, and the answers of officials to questions about a rule."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field
from datetime import date

from rulecheck.diagnostics import Faults, Span
from rulecheck.quantity.reading_values import read_day
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence

CLAUSE_KINDS = ("rule", "definition", "procedure", "information", "heading")
"""What a clause may be. `rule` asks something of the car, and needs a rule; the others ask nothing of it."""
_CLAUSE_KEYS = ("title", "kind", "note")
_ANSWER_KEYS = ("reference", "date", "text")


@dataclass(frozen=True, slots=True)
class Clause:
    """One clause of the rule book: its number, a few words, and what it is."""

    number: str
    title: str
    kind: str
    note: str
    span: Span = field(compare=False)


@dataclass(frozen=True, slots=True)
class Answer:
    """What the officials answered to a question about a rule; it explains the rule and does not change it."""

    reference: str
    day: date | None
    text: str
    span: Span = field(compare=False)


def read_clauses(node: Node | None, faults: Faults) -> dict[str, Clause]:
    """The register in the order of the file: `"3.1": title`, or `"3.1": {title, kind, note}`."""
    found: dict[str, Clause] = {}
    if node is not None and not isinstance(node, Mapping):
        faults.add("bad-structure", "'clauses' is a register by number", node.span, expected='{"3.1": Overall width}')
    for entry in node if isinstance(node, Mapping) else ():
        number, value = entry.key, entry.value
        if isinstance(value, Located):
            found[number.text] = Clause(number.text, value.text, "rule", "", number.span)
        elif isinstance(value, Mapping):
            said = _said(value, _CLAUSE_KEYS, f"clause '{number.text}'", faults)
            found[number.text] = Clause(
                number.text, _text(said, "title"), _kind(said.get("kind"), faults), _text(said, "note"), number.span
            )
        else:
            told = f"clause '{number.text}' is a title, or a mapping"
            faults.add("bad-structure", told, value.span, expected="a title, or {title, kind, note}")
    return found


def read_answers(node: Node | None, faults: Faults) -> tuple[Answer, ...]:
    """The answers of officials, in order: `[{reference, date, text}]`."""
    if node is None:
        return ()
    if not isinstance(node, Sequence):
        faults.add("bad-structure", "'answers' is a list", node.span, expected="[{reference, date, text}]")
        return ()
    return tuple(answer for item in node if (answer := _answer(item, faults)) is not None)


def _answer(item: Node, faults: Faults) -> Answer | None:
    if not isinstance(item, Mapping):
        faults.add("bad-structure", "an answer is a mapping", item.span, expected="{reference, date, text}")
        return None
    said = _said(item, _ANSWER_KEYS, "an answer", faults)
    for key in ("reference", "text"):
        if not _text(said, key):
            faults.add("missing-key", f"this answer has no '{key}'", item.span, expected="{reference, date, text}")
    day = said.get("date")
    return Answer(_text(said, "reference"), read_day(day, faults) if day else None, _text(said, "text"), item.span)


def _said(node: Mapping, known: Iterable[str], what: str, faults: Faults) -> dict[str, Located]:
    """The single values of a mapping; every other key or value is a fault."""
    found: dict[str, Located] = {}
    for entry in node:
        if entry.key.text not in known:
            faults.add(
                "unknown-key", f"{what} has no '{entry.key.text}'", entry.key.span, expected=" or ".join(known),
                advice=nearest(entry.key.text, tuple(known)),
            )  # fmt: skip
        elif isinstance(entry.value, Located):
            found[entry.key.text] = entry.value
        else:
            faults.add("bad-structure", f"'{entry.key.text}' is a single value", entry.value.span)
    return found


def _kind(where: Located | None, faults: Faults) -> str:
    if where is None or where.text in CLAUSE_KINDS:
        return where.text if where is not None else "rule"
    faults.add(
        "unknown-choice", f"'{where.text}' is no kind of clause", where.span, expected=" or ".join(CLAUSE_KINDS),
        advice=nearest(where.text, CLAUSE_KINDS),
    )  # fmt: skip
    return "rule"


def _text(said: dict[str, Located], key: str) -> str:
    return said[key].text if key in said else ""
