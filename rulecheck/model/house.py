"""The house file, `rulecheck.yaml` at the root of a design repository."""

from __future__ import annotations

from rulecheck.diagnostics import Faults
from rulecheck.model.decisions import read_decision
from rulecheck.model.edge import HouseShape, shaped
from rulecheck.model.ruleset import House
from rulecheck.model.ruleset_reader import VALIDITIES, text
from rulecheck.reading.workspace import HOUSE_FILE, Workspace
from rulecheck.reading.yaml_reader import read_yaml


def read_house(workspace: Workspace, file: str = HOUSE_FILE) -> House:
    """Read a house file. Raises `Refused`."""
    root = read_yaml(workspace, file)
    faults = Faults()
    shape = shaped(HouseShape, root, faults)
    decision = read_decision(root.get("decision"), faults)
    if shape is not None and shape.validity is not None and shape.validity.text not in VALIDITIES:
        told = f"'{shape.validity.text}' does not say what becomes of figures outside their range"
        faults.add("unknown-choice", told, shape.validity.span, expected=" or ".join(VALIDITIES))
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
        validity=text(shape.validity) or "noted",
    )


def has_house(workspace: Workspace) -> bool:
    """True where the root has a house file."""
    return (workspace.root / HOUSE_FILE).is_file()
