"""The physics modules that one run knows: the built-in ones, those that rulesets name, and installed ones.

A module of a ruleset adds figures under a name of its own. It takes the place of a figure that is there already only
where it says so, with the reason, under `replaces:`; within its own file the old name still means the old figure.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field

from rulecheck.diagnostics import Faults, Related
from rulecheck.model.ruleset import Formula, PhysicsModule
from rulecheck.physics.modules import BUILT_IN, built_in
from rulecheck.physics.solvers import OWN
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.units import UnitFault, find_unit
from rulecheck.reading.nearest import nearest

Installed = Callable[[str], PhysicsModule | None]
"""Finds an installed module by its name; asked only for a name that nothing else has."""


@dataclass(frozen=True, slots=True)
class Replacement:
    """A figure that stands in the place of another one: its module and formula, and the reason given."""

    module: PhysicsModule
    formula: Formula
    because: str


@dataclass(frozen=True, slots=True)
class Library:
    """Modules by name, and the figures that are replaced by their path."""

    own: Mapping[str, PhysicsModule] = field(default_factory=dict)
    replaced: Mapping[str, Replacement] = field(default_factory=dict)
    installed: Installed = lambda _name: None

    @property
    def names(self) -> tuple[str, ...]:
        """The names of the built-in modules and those of the rulesets."""
        return (*BUILT_IN, *self.own)

    def module(self, name: str) -> PhysicsModule | None:
        """A module by its name, or None. Raises `Refused` where its file is at fault.

        >>> Library().module("mass").name
        'mass'
        """
        return self.own.get(name) or built_in(name) or self.installed(name)


def library(modules: Iterable[PhysicsModule], installed: Installed, faults: Faults) -> Library:
    """The modules of the rulesets beside the built-in ones; names that clash are noted."""
    own: dict[str, PhysicsModule] = {}
    for module in modules:
        other = own.get(module.name)
        if other is not None and other.file == module.file:
            continue
        if other is not None or module.name in (*BUILT_IN, *OWN):
            there = other.file if other is not None else "the built-in modules"
            faults.add(
                "name-taken",
                f"there is a physics module '{module.name}' already, in {there}",
                module.span,
                advice="give this one a name of its own; to take the place of a figure, say so under 'replaces:'",
            )
            continue
        own[module.name] = module
    return Library(own, _replaced(own, faults), installed)


def _replaced(own: Mapping[str, PhysicsModule], faults: Faults) -> dict[str, Replacement]:
    found: dict[str, Replacement] = {}
    for module in own.values():
        for where in module.replaces:
            path = where.path.text
            old = _figure(path, own)
            new = module.figures.get(path.rpartition(".")[2])
            if old is None or path.partition(".")[0] == module.name:
                known = [f"{name}.{figure}" for name in BUILT_IN for figure in _figures(name)]
                faults.add(
                    "unknown-name",
                    f"there is no figure '{path}' of another module to replace",
                    where.path.span,
                    expected="the name of a figure, such as aero.drag_area",
                    advice=nearest(path, known),
                )
            elif new is None:
                name = path.rpartition(".")[2]
                told = f"module '{module.name}' replaces '{path}', and has no figure '{name}'"
                faults.add("bad-physics", told, where.path.span, advice=f"add the figure '{name}'")
            elif (new.loop is None, new.of is None) != (old.loop is None, old.of is None):
                told = f"'{path}' is called otherwise than the figure '{new.name}' that is to replace it"
                faults.add("bad-physics", told, new.span, expected=_called(old))
            elif _dimension(new) != _dimension(old):
                told = f"the figure '{new.name}' that is to replace '{path}' is of another kind of quantity"
                expected = f"a figure in {old.unit.text}" if old.unit is not None else "a figure without a unit"
                faults.add("wrong-dimension", told, new.unit.span if new.unit else new.span, expected=expected)
            elif path in found:
                told = f"'{path}' is replaced by two modules"
                other = next(item for item in found[path].module.replaces if item.path.text == path)
                related = (Related("it is replaced here too", other.path.span),)
                faults.add("name-taken", told, where.path.span, advice="take one of them out", related=related)
            else:
                found[path] = Replacement(module, new, where.because)
    return found


def _figure(path: str, own: Mapping[str, PhysicsModule]) -> Formula | None:
    name, _, figure = path.partition(".")
    module = own.get(name) or built_in(name)
    return module.figures.get(figure) if module is not None else None


def _figures(name: str) -> Iterable[str]:
    module = built_in(name)
    return module.figures if module is not None else ()


def _dimension(formula: Formula) -> Dimension | None:
    """The dimension of the unit; None without one, and for a unit that nobody knows, which binding tells."""
    try:
        return find_unit(formula.unit.text).dimension if formula.unit is not None else None
    except UnitFault:
        return None


def _called(formula: Formula) -> str:
    if formula.loop is not None:
        return f"for: {formula.loop.text}"
    return f"of: {formula.of.text}" if formula.of is not None else "neither 'for:' nor 'of:'"
