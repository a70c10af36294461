"""Physics modules of installed packages: entry points of the group `rulecheck.physics`.

The entry point's name is the module's, its value the package whose file `NAME.physics.yaml` holds it. The file is read
as data where the package is installed; the package itself is not imported, so reading runs no code of anybody.
"""

from __future__ import annotations

from importlib.metadata import entry_points
from pathlib import Path

from rulecheck.diagnostics import Diagnostic, Refused
from rulecheck.model.ruleset import PhysicsModule
from rulecheck.physics.modules import read_module
from rulecheck.reading.workspace import Workspace

GROUP = "rulecheck.physics"


def installed_module(name: str) -> PhysicsModule | None:
    """The installed module of a name, or None. Raises `Refused` where its file is at fault or not there.

    >>> installed_module("nothing_of_this_name") is None
    True
    """
    for point in entry_points(group=GROUP, name=name):
        if point.dist is None:
            continue
        folder = Path(str(point.dist.locate_file(point.value.partition(":")[0].replace(".", "/"))))
        file = f"{name}.physics.yaml"
        if not (folder / file).is_file():
            told = f"the installed physics module '{name}' has no file {file} in its package {point.value}"
            raise Refused([Diagnostic("bad-physics", told, advice=f"install {point.dist.name} anew")])
        return _sound(read_module(Workspace(folder), file), name)
    return None


def _sound(module: PhysicsModule, name: str) -> PhysicsModule:
    if module.name != name:
        told = f"the installed physics module '{name}' calls itself '{module.name}'"
        raise Refused([Diagnostic("bad-physics", told, module.span, expected=f"module: {name}")])
    if module.replaces:
        told = f"the installed physics module '{name}' replaces '{module.replaces[0].path.text}'"
        advice = "copy its file beside the ruleset and name it under 'physics:'"
        raise Refused([Diagnostic("bad-physics", told, module.replaces[0].path.span, advice=advice)])
    return module
