"""The house file, `rulecheck.yaml` at the root of a design repository."""

from __future__ import annotations

from rulecheck.diagnostics import Faults
from rulecheck.model.edge import HouseShape, shaped
from rulecheck.model.ruleset import House
from rulecheck.model.ruleset_reader import text
from rulecheck.reading.workspace import HOUSE_FILE, Workspace
from rulecheck.reading.yaml_reader import read_yaml

DECISIONS = ("simple", "guarded", "worst case")


def read_house(workspace: Workspace, file: str = HOUSE_FILE) -> House:
    """Read a house file. Raises `Refused`."""
    root = read_yaml(workspace, file)
    faults = Faults()
    shape = shaped(HouseShape, root, faults)
    if shape is not None and shape.decision is not None and shape.decision.text not in DECISIONS:
        faults.add(
            "unknown-choice",
            f"'{shape.decision.text}' is no decision rule",
            shape.decision.span,
            expected=" or ".join(DECISIONS),
        )
    faults.settle()
    assert shape is not None
    return House(
        file=file,
        name=shape.house.text,
        designs=tuple(shape.designs or ()),
        rulesets=tuple(shape.rulesets or ()),
        reserves=shape.reserves or {},
        decision=text(shape.decision) or "simple",
        fails_on=tuple(shape.fails_on or ()),
        eroded=shape.eroded or {},
        ending=shape.ending or {},
    )


def has_house(workspace: Workspace) -> bool:
    """True where the root has a house file."""
    return (workspace.root / HOUSE_FILE).is_file()
