"""Tests that a rule asks for: which record, how the test was set up, what its result must be."""

from __future__ import annotations

from collections.abc import Mapping as Units
from dataclasses import dataclass, field

from rulecheck.diagnostics import Faults, Span
from rulecheck.model.keyed import leaves_of
from rulecheck.model.rulings import NO_RULING, Ruling, read_ruling
from rulecheck.quantity.dimension import Dimension
from rulecheck.reading.nodes import Located, Node

_KEYS = ("name", "of", "setup", "require", "runs", "tolerance", "rounding")
_EXAMPLE = "{name: nose_impact, setup: setup.mass >= 300 kg, require: result.mean_deceleration <= 20 gn}"
MOST_RUNS = 1000


@dataclass(frozen=True, slots=True)
class RecordWanted:
    """A test: the record by `name`, or every record that states to be `of` an element; `runs` valid ones are asked for."""

    name: Located | None
    of: Located | None
    setup: Located | None
    require: Located
    runs: int
    ruling: Ruling = NO_RULING
    span: Span | None = field(default=None, compare=False)

    @property
    def called(self) -> Located:
        """What names the record."""
        named = self.name or self.of
        assert named is not None
        return named


def read_record(node: Node | None, own: Units[str, Dimension], faults: Faults) -> RecordWanted | None:
    """`{name, setup, require}`, with `of` in the place of `name` and `runs` where several are asked for."""
    if node is None:
        return None
    said = leaves_of(node, _KEYS, "a test", _EXAMPLE, faults)
    if said is None:
        return None
    if ("name" in said) == ("of" in said):
        told = "a test has a 'name', or says of which element it is, and not both"
        faults.add("bad-structure", told, node.span, expected="name: nose_impact, or of: o under each")
        return None
    if "require" not in said:
        faults.add("missing-key", "'require:' is missing here", node.span, expected=_EXAMPLE)
        return None
    runs = said.get("runs")
    count = 1 if runs is None else _count(runs, faults)
    return RecordWanted(
        said.get("name"), said.get("of"), said.get("setup"), said["require"], count, read_ruling(node, own, faults), node.span
    )  # fmt: skip


def _count(where: Located, faults: Faults) -> int:
    if where.text.isdecimal() and 0 < len(where.text) < 5 and 0 < int(where.text) <= MOST_RUNS:
        return int(where.text)
    faults.add("bad-number", "'runs' is how many valid runs are asked for", where.span, expected=f"1 to {MOST_RUNS}")
    return 1
