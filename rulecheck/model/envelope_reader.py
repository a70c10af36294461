"""`envelope:` of a rule as it is written: the ranges throughout which it must hold."""

from __future__ import annotations

from rulecheck.diagnostics import Faults
from rulecheck.model.ruleset import Range
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence

_EXPECTED = "{vehicle.speed: [60 km/h, 320 km/h]}"


def read_envelope(node: Node | None, faults: Faults) -> tuple[Range, ...]:
    """The ranges in the order in which they stand; empty where there are none, or where a fault was noted."""
    if node is None:
        return ()
    if not isinstance(node, Mapping) or not list(node):
        faults.add("bad-structure", "an envelope has a range for each input", node.span, expected=_EXPECTED)
        return ()
    made = []
    for entry in node:
        ends = list(entry.value) if isinstance(entry.value, Sequence) else []
        texts = [end for end in ends if isinstance(end, Located)]
        if len(texts) != 2 or len(ends) != 2:
            told = f"the range of '{entry.key.text}' has two ends"
            faults.add("bad-structure", told, entry.value.span, expected=_EXPECTED)
            continue
        made.append(Range(entry.key, texts[0], texts[1]))
    return tuple(made)
