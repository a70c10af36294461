"""What the rule book says follows a breach; it stands beside a verdict and never changes it."""

from __future__ import annotations

from dataclasses import dataclass

from rulecheck.diagnostics import Faults
from rulecheck.model.keyed import leaves_of
from rulecheck.reading.nodes import Located, Node

_KEYS = ("kind", "points", "amount", "time", "text")
_EXAMPLE = "{kind: penalty, points: 20}"


@dataclass(frozen=True, slots=True)
class Consequence:
    """Kind of consequence (`penalty`, `not admitted`, …) with its measure, in the rule book's words."""

    kind: str
    points: str = ""
    amount: str = ""
    time: str = ""
    text: str = ""

    def __str__(self) -> str:
        points = f"{self.points} points" if self.points not in ("", "1") else "1 point" if self.points else ""
        told = ", ".join(filter(None, (points, self.amount, self.time)))
        return ": ".join(filter(None, (f"{self.kind} ({told})" if told else self.kind, self.text)))


def read_consequence(node: Node | None, faults: Faults) -> Consequence | None:
    """`{kind: penalty, points: 20}`, also with `amount`, `time` or a `text`."""
    if node is None:
        return None
    said = leaves_of(node, _KEYS, "a consequence", _EXAMPLE, faults)
    if said is None:
        return None
    if "kind" not in said or not said["kind"].text.strip():
        faults.add("missing-key", "'kind:' is missing here", node.span, expected=_EXAMPLE)
        return None
    points = said.get("points")
    if points is not None and not _is_count(points):
        faults.add("bad-number", f"'{points.text}' is no number of points", points.span, expected="such as 20 or 2.5")
        return None
    return Consequence(**{key: where.text for key, where in said.items()})


def _is_count(where: Located) -> bool:
    first, dot, second = where.text.partition(".")
    return first.isdecimal() and (second.isdecimal() if dot else not second) and len(where.text) < 20
