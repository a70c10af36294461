"""Keys and values to a mapping: each key a text, there, and once."""

from __future__ import annotations

from collections.abc import Iterable

from rulecheck.diagnostics import Faults, Related, Span
from rulecheck.reading.bounds import MAXIMUM_FAULTS
from rulecheck.reading.nodes import Entry, Located, Mapping, Node
from rulecheck.reading.yaml_traps import colon_closed_up


def mapping_of(items: Iterable[Node], span: Span, split: bool, faults: Faults) -> Mapping:
    """The mapping of `items` (key, value, key, value, …); of a key that stands twice the first is kept.

    Where a formula was `split` at its commas, its pieces stand as keys, and are not compared.
    """
    entries: dict[str, Entry] = {}
    pairs = iter(items)
    for key, value in zip(pairs, pairs, strict=True):
        if len(faults.found) >= MAXIMUM_FAULTS:
            break
        if not isinstance(key, Located):
            _refuse_collection(key.span, faults)
            continue
        first = entries.setdefault(key.text, Entry(key, value)).key
        if first is not key and not split:
            _refuse_twice(key, first, faults)
        if not key.text or key.text == "<<" or ":" in key.text:
            _check(key, value, faults)
    return Mapping(tuple(entries.values()), span)


def _refuse_collection(span: Span, faults: Faults) -> None:
    faults.add(
        "yaml-refused",
        "a list or a mapping stands as a key",
        span,
        expected="a plain word as the key",
        advice="write the key as a word, or put a formula that begins with a bracket between quotes",
    )


def _refuse_twice(key: Located, first: Located, faults: Faults) -> None:
    faults.add(
        "duplicate-key",
        f"the key {key.text!r} stands on line {first.span.line} and again on line {key.span.line}",
        key.span,
        expected="each key once in a mapping",
        advice="delete one of the two, or rename it",
        related=[Related("it stands first here", first.span)],
    )


def _check(key: Located, value: Node, faults: Faults) -> None:
    if key.quoted:
        return
    if key.text == "<<":
        faults.add("yaml-refused", "merge keys are refused", key.span, advice="write out the keys")
    elif not key.text:
        faults.add("yaml-syntax", "a key is missing", key.span, expected="`key: value`", advice="write the key")
    elif colon_closed_up(key, value):
        faults.add(
            "yaml-syntax",
            "the blank behind the colon is missing",
            key.span,
            expected="`key: value`",
            advice="put a blank behind the colon",
        )
