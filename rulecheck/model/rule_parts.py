"""Parts of a rule: the states in which it is judged, and its exemption."""

from __future__ import annotations

from typing import Any

from rulecheck.diagnostics import Faults
from rulecheck.model.ruleset import Unless
from rulecheck.reading.nodes import Located, Node


def read_states(node: Any, key: Located, faults: Faults) -> tuple[tuple[str, tuple[Located, ...]], ...] | None:
    """`every`, or names by axis; None for the design as written, `()` for every state."""
    if node is None:
        return None
    if isinstance(node, Located):
        if node.text != "every":
            faults.add(
                "bad-value",
                f"'{node.text}' does not say which states",
                node.span,
                expected="every, or {axis: every} or {axis: [names]}",
            )
        return ()
    if not node or not all(isinstance(names, Located) or names for names in node.values()):
        # An empty choice must be read neither as every state nor as none.
        faults.add(
            "bad-structure", f"rule '{key.text}' does not say which states", key.span,
            expected="every, or {axis: every} or {axis: [names]}",
        )  # fmt: skip
    chosen = []
    for axis, names in node.items():
        if isinstance(names, Located):
            chosen.append((axis, () if names.text == "every" else (names,)))
        else:
            chosen.append((axis, tuple(names)))
    return tuple(chosen)


def read_unless(shape: dict[str, Located] | None, node: Node | None, faults: Faults) -> Unless | None:
    """An exemption: `{when: condition, because: reason}`; `node` is the rule."""
    if shape is None:
        return None
    if "when" not in shape or set(shape) - {"when", "because"}:
        place = getattr(node, "get", lambda _: None)("unless")
        faults.add(
            "bad-structure",
            "an exemption has a condition and a reason",
            place.span if place is not None else None,
            expected="{when: condition, because: text}",
        )
        return None
    because = shape.get("because")
    return Unless(shape["when"], because.text if because is not None else "")
