"""Overlays as the text of a variant file; what is written reads back to the same overlay."""

from __future__ import annotations

import json
import re

from rulecheck.model.design import LeafNode, Overlay
from rulecheck.reading.nodes import Located, Mapping, Node

# What YAML reads as it stands: words, numbers with units, dates; all else is quoted.
_PLAIN = re.compile(r"[A-Za-z0-9][A-Za-z0-9_.+/^*%° -]*\Z")


def variant_text(reference: str, overlay: Overlay) -> str:
    """A variant of the design at `reference`.

    >>> from rulecheck.diagnostics import Span
    >>> width = Located("250 mm", Span("a", 0, 6, 1, 1))
    >>> print(variant_text("car.design.yaml", Overlay((("tyres.rear.width", width),))), end="")
    changes: car.design.yaml
    set:
      tyres.rear.width: 250 mm
    """
    lines = [f"changes: {_scalar(reference)}", "set:" if overlay else "set: {}"]
    lines.extend(f"  {path}: {_node(node)}" for path, node in overlay.settings)
    return "\n".join(lines) + "\n"


def _node(node: LeafNode | Node) -> str:
    if isinstance(node, Located):
        return _scalar(node.text)
    if isinstance(node, Mapping):
        return "{" + ", ".join(f"{entry.key.text}: {_node(entry.value)}" for entry in node) + "}"
    return "[" + ", ".join(_node(item) for item in node) + "]"


def _scalar(text: str) -> str:
    return text if _PLAIN.match(text) and not text.endswith(" ") else json.dumps(text, ensure_ascii=False)
