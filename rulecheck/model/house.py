"""The house file, `rulecheck.yaml` at the root of a design repository."""

from __future__ import annotations

from rulecheck.diagnostics import Faults
from rulecheck.model.decisions import read_decision
from rulecheck.model.edge import HouseShape, shaped
from rulecheck.model.ruleset import House
from rulecheck.reading.workspace import HOUSE_FILE, Workspace
from rulecheck.reading.yaml_reader import read_yaml


def read_house(workspace: Workspace, file: str = HOUSE_FILE) -> House:
    """Read a house file. Raises `Refused`."""
    root = read_yaml(workspace, file)
    faults = Faults()
    shape = shaped(HouseShape, root, faults)
    decision = read_decision(root.get("decision"), faults)
    faults.settle()
    assert shape is not None
    return House(
        file=file,
        name=shape.house.text,
        designs=tuple(shape.designs or ()),
        rulesets=tuple(shape.rulesets or ()),
        reserves=shape.reserves or {},
        decision=decision,
        fails_on=tuple(shape.fails_on or ()),
        eroded=shape.eroded or {},
        ending=shape.ending or {},
    )


def has_house(workspace: Workspace) -> bool:
    """True where the root has a house file."""
    return (workspace.root / HOUSE_FILE).is_file()
