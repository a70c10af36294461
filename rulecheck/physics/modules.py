"""Reading physics modules: the built-in ones by name, from the package."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

from rulecheck.diagnostics import Faults, Span
from rulecheck.model.edge import PhysicsShape, shaped
from rulecheck.model.names import check_name
from rulecheck.model.ruleset import PhysicsModule, Replaces
from rulecheck.model.ruleset_reader import formula_of, text
from rulecheck.reading.nodes import Located, Mapping, Node
from rulecheck.reading.workspace import Workspace
from rulecheck.reading.yaml_reader import read_yaml

FOLDER = Path(__file__).parent
BUILT_IN: tuple[str, ...] = tuple(sorted(path.stem for path in FOLDER.glob("*.yaml")))


def built_in(name: str) -> PhysicsModule | None:
    """The built-in module of a name, or None. Raises `Refused` where its file is at fault.

    >>> built_in("mass").figures["total"].unit.text
    'kg'
    """
    if name not in BUILT_IN:
        return None
    return read_module(Workspace(FOLDER.parent), f"{FOLDER.name}/{name}.yaml")


def read_module(workspace: Workspace, file: str, asked: Span | None = None) -> PhysicsModule:
    """A module from a file. Raises `Refused`."""
    root = read_yaml(workspace, file, asked)
    faults = Faults()
    shape = shaped(PhysicsShape, root, faults)
    faults.settle()
    assert shape is not None
    node = root.get("figures")
    assert isinstance(node, Mapping)
    figures = {}
    for entry in node:
        if check_name(entry.key, faults):
            made = shape.figures[entry.key.text]
            figures[entry.key.text] = formula_of(entry.key.text, entry.key, made)
            if made.source is not None and made.source.text not in shape.sources:
                faults.add(
                    "bad-physics",
                    f"there is no source '{made.source.text}'",
                    made.source.span,
                    expected=" or ".join(shape.sources),
                )
    replaces = tuple(_replaces(root.get("replaces"), faults))
    check_name(shape.module, faults)
    faults.settle()
    sources = {name: where.text for name, where in shape.sources.items()}
    traps = tuple(where.text for where in shape.traps or ())
    return PhysicsModule(
        shape.module.text,
        file,
        shape.meaning.text,
        sources,
        figures,
        text(shape.caution),
        replaces,
        shape.module.span,
        traps=traps,
    )


def _replaces(node: Node | None, faults: Faults) -> Iterator[Replaces]:
    for entry in node if isinstance(node, Mapping) else ():
        because = entry.value.text.strip() if isinstance(entry.value, Located) else ""
        if not because:
            told = f"'{entry.key.text}' is replaced without a reason"
            faults.add("bad-physics", told, entry.key.span, expected=f"{entry.key.text}: the reason")
        yield Replaces(entry.key, because)
