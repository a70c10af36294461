"""Examples of a rule: its own tests, values given and what must come of them."""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import date

from rulecheck.diagnostics import Faults, Span
from rulecheck.model.design import Overlay
from rulecheck.model.names import check_path
from rulecheck.quantity.reading_values import read_day
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence

_KEYS = ("given", "margin", "verdict", "on")
_EXAMPLE = "{given: {path: value}, margin: 10 mm}, or verdict: breach"
EXPECTED = ("complies", "breach", "open", "unproven", "not applicable", "not followed")
"""What an example may expect: a reserve or a dispensation is no rule book's."""


@dataclass(frozen=True, slots=True)
class Example:
    """Values `given`, which are the whole design, and what must come of them: a margin, a verdict or both.

    `on` is the evaluation date, None for a day on which the rule is in force.
    """

    given: Overlay
    margin: Located | None
    verdict: str
    on: date | None
    span: Span = field(compare=False)


def read_examples(node: Node | None, faults: Faults) -> tuple[Example, ...]:
    """The examples of a rule; those at fault are left out."""
    if node is None:
        return ()
    if not isinstance(node, Sequence):
        faults.add("bad-structure", "examples are a list", node.span, expected=f"[{_EXAMPLE}]")
        return ()
    made = [_example(item, faults) for item in node]
    return tuple(item for item in made if item is not None)


def _example(node: Node, faults: Faults) -> Example | None:
    if not isinstance(node, Mapping):
        faults.add("bad-structure", "an example has values and what must come of them", node.span, expected=_EXAMPLE)
        return None
    before = len(faults.found)
    for entry in node:
        if entry.key.text not in _KEYS:
            faults.add(
                "unknown-key", f"an example has no key '{entry.key.text}'", entry.key.span,
                expected=" or ".join(_KEYS), advice=nearest(entry.key.text, _KEYS),
            )  # fmt: skip
    margin, verdict = (_single(node, key, faults) for key in ("margin", "verdict"))
    if margin is None and verdict is None and len(faults.found) == before:
        told = "an example says what must come of its values"
        faults.add("missing-key", told, node.span, expected="margin: 10 mm, or verdict: breach")
    if verdict is not None and verdict.text not in EXPECTED:
        faults.add(
            "unknown-choice", f"no example can expect '{verdict.text}'", verdict.span, expected=" or ".join(EXPECTED),
            advice=nearest(verdict.text, EXPECTED),
        )  # fmt: skip
    day = _single(node, "on", faults)
    on = read_day(day, faults) if day is not None else None
    given = _given(node.get("given"), node.span, faults)
    if len(faults.found) > before:
        return None
    return Example(given, margin, verdict.text if verdict is not None else "", on, node.span)


def _single(node: Mapping, key: str, faults: Faults) -> Located | None:
    found = node.get(key)
    if found is None or isinstance(found, Located):
        return found
    faults.add("bad-value", f"'{key}' is a single value", found.span)
    return None


def _given(node: Node | None, span: Span, faults: Faults) -> Overlay:
    """The values given, laid flat; an example without any is the empty design."""
    if node is None:
        return Overlay()
    if not isinstance(node, Mapping):
        faults.add("bad-structure", "values are given by path", node.span, expected="given: {path: value, …}")
        return Overlay()
    return Overlay.of((entry.key.text, entry.value) for entry in node if check_path(entry.key, faults))
