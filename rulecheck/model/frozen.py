"""What a rule book freezes: paths that must stay as they were in a baseline, with the tolerance and changes allowed."""

from __future__ import annotations

from collections.abc import Mapping as Units
from dataclasses import dataclass, field
from datetime import date

from rulecheck.diagnostics import Faults, Span
from rulecheck.model.keyed import leaves_of
from rulecheck.model.names import is_name
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.quantity import Quantity
from rulecheck.quantity.reading_values import read_day, read_quantity
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence

_KEYS = ("baseline", "since", "paths", "tolerance", "changes_allowed")
_EXAMPLE = '{baseline: homologated, since: 2027-02-01, paths: ["tub.**"]}'
MOST_CHANGES = 10_000


@dataclass(frozen=True, slots=True)
class FrozenWanted:
    """Paths frozen as in a baseline from a day on: `*` stands for one name, `**` for any number of names.

    `allowed` changes are borne; where it is None each is a breach.
    """

    baseline: Located
    since: date | None
    paths: tuple[Located, ...]
    tolerance: Quantity | None
    allowed: int | None
    span: Span = field(compare=False)


def matches(pattern: str, path: str) -> bool:
    """True where a path is one that a pattern stands for.

    >>> matches("tub.**", "tub.side.length"), matches("masses.*.at", "masses.tub.at"), matches("tub.*", "tub.side.length")
    (True, True, False)
    """
    return _matches(pattern.split("."), path.split("."))


def _matches(pattern: list[str], parts: list[str]) -> bool:
    if not pattern:
        return not parts
    if pattern[0] == "**":
        return any(_matches(pattern[1:], parts[index:]) for index in range(len(parts) + 1))
    return bool(parts) and pattern[0] in ("*", parts[0]) and _matches(pattern[1:], parts[1:])


def read_frozen(node: Node | None, own: Units[str, Dimension], faults: Faults) -> FrozenWanted | None:
    """`{baseline, since, paths, tolerance, changes_allowed}`; None where nothing is said or a fault was noted."""
    if node is None:
        return None
    said = leaves_of(node, _KEYS, "what is frozen", _EXAMPLE, faults)
    if said is None:
        return None
    before = len(faults.found)
    assert isinstance(node, Mapping)
    for key in ("baseline", "paths"):
        if node.get(key) is None:
            faults.add("missing-key", f"'{key}:' is missing here", node.span, expected=_EXAMPLE)
    paths = _paths(node.get("paths"), faults)
    since = read_day(said["since"], faults) if "since" in said else None
    tolerance = _tolerance(said.get("tolerance"), own, faults)
    allowed = _count(said.get("changes_allowed"), faults)
    if len(faults.found) > before:
        return None
    return FrozenWanted(said["baseline"], since, paths, tolerance, allowed, node.span)


def _paths(node: Node | None, faults: Faults) -> tuple[Located, ...]:
    made = []
    for item in node if isinstance(node, Sequence) else (node,) if node is not None else ():
        if isinstance(item, Located) and all(part in ("*", "**") or is_name(part) for part in item.text.split(".")):
            made.append(item)
        else:
            expected = 'names joined by dots, * for any, ** for all below: ["tub.**"]'
            faults.add("bad-name", "this is no path that could be frozen", item.span, expected=expected)
    if isinstance(node, Sequence) and not node.items:
        faults.add("bad-structure", "nothing is frozen here", node.span, expected='paths: ["tub.**"]')
    return tuple(made)


def _tolerance(where: Located | None, own: Units[str, Dimension], faults: Faults) -> Quantity | None:
    read = read_quantity(where, None, own=own, faults=faults) if where is not None else None
    if where is not None and read is not None and (read.value < 0 or read.spread is not None or read.unit.offset):
        told = "the tolerance of what is frozen is a width that is not negative"
        faults.add("bad-value", told, where.span, expected="such as '1 mm'")
        return None
    return read


def _count(where: Located | None, faults: Faults) -> int | None:
    if where is None:
        return None
    if where.text.isdecimal() and len(where.text) < 6 and int(where.text) <= MOST_CHANGES:
        return int(where.text)
    faults.add("bad-number", "'changes_allowed' is a count", where.span, expected=f"0 to {MOST_CHANGES}")
    return None
