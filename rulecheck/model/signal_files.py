"""Signals of a design: which file of columns they stand in, found when the design is read, and read when a rule asks."""

from __future__ import annotations

from dataclasses import dataclass, field

from rulecheck.diagnostics import Faults, Refused
from rulecheck.reading.nodes import Located, Mapping
from rulecheck.reading.workspace import Workspace

HOLDER = "signals"
"""What holds the signals of a design."""
KEYS = ("file", "time", "column", "time_unit", "unit", "delimiter", "decimal", "rows", "basis", "reference", "note")
"""What may be said of a signal."""


@dataclass(frozen=True, slots=True)
class Logged(Mapping):
    """What a design says of a signal, with the file that it names, below the root, and where that can be read."""

    file: str = ""
    workspace: Workspace | None = field(default=None, compare=False, repr=False)


def is_signal(path: str) -> bool:
    """True for the path of a signal.

    >>> is_signal("signals.crash"), is_signal("tyres.rear.width")
    (True, False)
    """
    return path.partition(".")[0] == HOLDER


def logged(node: Mapping, workspace: Workspace, beside: str, faults: Faults) -> Mapping:
    """The node with its file found; the file is not read yet, and need not exist."""
    name = node.get("file")
    if not isinstance(name, Located):
        return node
    try:
        target = workspace.resolve(name.text, beside, name.span)
    except Refused as refused:
        faults.take(refused)
        return node
    return Logged(node.entries, node.span, file=target, workspace=workspace)
