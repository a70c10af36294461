"""Solvers by name: our own from a table, others from the entry points of installed packages.

A file of a design repository can name a solver and cannot bring one. Entry points are read only when a module is named
that is not among our own; ours are loaded when they are named.
"""

from __future__ import annotations

from functools import cache
from importlib.metadata import EntryPoint, entry_points

from rulecheck.diagnostics import Diagnostic, Refused, Span
from rulecheck.model.names import is_name
from rulecheck.model.ruleset import Formula, PhysicsModule
from rulecheck.model.solver import Solver
from rulecheck.reading.nodes import Located

GROUP = "rulecheck.solvers"
OWN: dict[str, str] = {"lap": "rulecheck.physics.lap.solver:LAP", "stop": "rulecheck.physics.stop.solver:STOP"}
"""Our own solvers: where each is, as an entry point says it."""


@cache
def solver_module(name: str) -> PhysicsModule | None:
    """The module of a solver, or None where no solver has the name. Raises `Refused` where it cannot be used.

    >>> solver_module("lap").figures["time"].unit.text
    's'
    """
    if name in OWN:
        return as_module(_loaded(EntryPoint(name, OWN[name], GROUP)))
    for entry in entry_points(group=GROUP):
        if entry.name == name:
            return as_module(_loaded(entry))
    return None


def _loaded(entry: EntryPoint) -> Solver:
    """The solver behind an entry point. Raises `Refused` where there is none that can be used."""
    try:
        found = entry.load()
    except (ImportError, AttributeError, ValueError) as error:
        raise _refused(entry, f"cannot be loaded: {error}") from error
    if not isinstance(found, Solver):
        raise _refused(entry, f"is a {type(found).__name__} and no Solver")
    if found.name != entry.name:
        raise _refused(entry, f"calls itself '{found.name}'")
    return found


def _refused(entry: EntryPoint, what: str) -> Refused:
    owner = f" of {entry.dist.name}" if entry.dist is not None else ""
    told = f"solver '{entry.name}' ({entry.value}{owner}) {what}"
    return Refused([Diagnostic("bad-physics", told, advice="mend or remove the package that brings it")])


def as_module(solver: Solver) -> PhysicsModule:
    """A solver as a physics module: its formulas, and its outputs as figures without one."""
    file = f"solver {solver.name}"

    def at(text: str) -> Located:
        return Located(text, Span(file, 0, len(text), 1, 1))

    valid = at(solver.valid) if solver.valid else None
    figures: dict[str, Formula] = {}
    for item in solver.formulas:
        unit = at(item.unit) if item.unit else None
        figures[item.name] = Formula(
            item.name, at(item.formula).span, at(item.formula), unit, item.meaning, item.source, None, None, None
        )
    for output in solver.outputs:
        full = at(f"{solver.name}.{output.name}")
        unit = at(output.unit) if output.unit else None
        figures[output.name] = Formula(
            output.name, full.span, full, unit, output.meaning, output.source, valid, None, None, by_solver=True
        )
    assert all(is_name(name) for name in figures)
    return PhysicsModule(
        solver.name, file, solver.meaning, solver.sources, figures, solver.caution, solver=solver, traps=solver.traps
    )
