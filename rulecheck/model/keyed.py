"""Small mappings of a rule: their single values by key, and every key that is not known as a fault."""

from __future__ import annotations

from rulecheck.diagnostics import Faults
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node


def leaves_of(node: Node, known: tuple[str, ...], what: str, example: str, faults: Faults) -> dict[str, Located] | None:
    """The single values of a mapping by key; None where it is none, or something in it is at fault."""
    if not isinstance(node, Mapping):
        faults.add("bad-structure", f"{what} has keys", node.span, expected=example)
        return None
    before = len(faults.found)
    said: dict[str, Located] = {}
    for entry in node:
        if entry.key.text not in known:
            faults.add(
                "unknown-key", f"{what} has no key '{entry.key.text}'", entry.key.span,
                expected=" or ".join(known), advice=nearest(entry.key.text, known),
            )  # fmt: skip
        elif isinstance(entry.value, Located):
            said[entry.key.text] = entry.value
        elif entry.key.text not in PASSED:
            faults.add("bad-value", f"'{entry.key.text}' is a single value", entry.value.span)
    return said if len(faults.found) == before else None


PASSED = ("rounding", "paths")
"""Keys whose value is no single one; they are read by others."""
