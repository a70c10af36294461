"""`bind`: design, rulesets and physics to one graph."""

from __future__ import annotations

import sys
from collections.abc import Callable, Iterator, Sequence
from contextlib import contextmanager
from dataclasses import replace
from datetime import date

from rulecheck.binding.bound import Broken, Item, Items, kind_of
from rulecheck.binding.declarations import check_declarations
from rulecheck.binding.express import express
from rulecheck.binding.figures import figure, physics_figure, physics_module
from rulecheck.binding.parsing import parsed, parsed_each
from rulecheck.binding.placing import check_unused_places
from rulecheck.binding.points import zero_place
from rulecheck.binding.rules import bind_rule
from rulecheck.binding.scope import NO_RULES, Scope, Shared, View
from rulecheck.binding.tables import list_of, table_value
from rulecheck.binding.validate import validate
from rulecheck.diagnostics import Faults
from rulecheck.formula.syntax import Each
from rulecheck.graph.conditions import Case
from rulecheck.graph.figures import Graph
from rulecheck.model.core_table import CORE
from rulecheck.model.design import Design
from rulecheck.model.ruleset import Formula, PhysicsModule, Ruleset
from rulecheck.model.track import Track
from rulecheck.model.vocabulary import Vocabulary
from rulecheck.physics.library import Library
from rulecheck.reading.nodes import Located

MOST_FRAMES = 250_000
"""What the longest chain of the most deeply nested formulas takes; such frames use no stack of the machine."""
Tracks = Callable[[Located], Track]


def bind(
    design: Design,
    rulesets: Sequence[Ruleset],
    *,
    day: date,
    physics: Library,
    validity_required: bool = False,
    also_known: Sequence[Ruleset] = (),
    figures: Sequence[str] = (),
    tracks: Tracks | None = None,
    only: Sequence[str] = (),
) -> Graph:
    """Bind every rule of the rulesets for a design. Raises `Refused` with all faults.

    `also_known` are rulesets whose inputs the design may state though they are not checked; `figures` are physics
    figures, or whole modules, that are wanted beside what the rules use; `tracks` reads the track that a design names.
    `only` are the rules that are bound, where not all are; what they do not use is then not looked at.
    With `validity_required` no rule may rest on a figure outside its range of validity.
    """
    with deep_formulas():
        shared = _shared(design, rulesets, day, physics, also_known)
        shared.strict, shared.tracks = validity_required, tracks
        return _bound(shared, figures, only)


@contextmanager
def deep_formulas() -> Iterator[None]:
    """Room on the stack for a chain of the longest formulas that may rest one on the other."""
    before = sys.getrecursionlimit()
    sys.setrecursionlimit(max(before, MOST_FRAMES))
    try:
        yield
    finally:
        sys.setrecursionlimit(before)


def bind_stand_ins(rulesets: Sequence[Ruleset], *, day: date, physics: Library) -> Shared:
    """Bind rulesets for no design at all: inputs are unknown, and items stand in for those that a car would have.

    Nothing is raised: the faults are among what is given. `stand_in` finds a rule in it.
    """
    nothing = Design("", "", "", "", (), {}, {}, frozenset(), frozenset(), {}, {})
    with deep_formulas():
        shared = _shared(nothing, rulesets, day, physics, ())
        shared.stand_ins = True
        # What holds where nothing is stated is not what holds for every car.
        shared.vocabulary = Vocabulary(replace(entry, default="") for entry in shared.vocabulary)
        _bind_all(shared, ())
    return shared


def stand_in(shared: Shared, ruleset: Ruleset, name: str) -> Case | None:
    """A rule bound for stand-ins; None where it is at fault."""
    case: Case | None = shared.memo.get(("stand-in", ruleset.file, name))
    return case


def _bind_all(shared: Shared, figures: Sequence[str], only: Sequence[str] = ()) -> None:
    rulesets = shared.rulesets
    base = Scope(shared, shared.base, rulesets[0] if rulesets else NO_RULES)
    check_declarations(base, rulesets)
    validate(base)
    wanted = _chosen(rulesets, only)
    for ruleset in () if only else rulesets:
        _unused_formulas(Scope(shared, shared.base, ruleset), ruleset)
    for ruleset, name in wanted:
        bind_rule(shared, ruleset, name)
    for ruleset in () if only else rulesets:
        check_unused_places(Scope(shared, shared.base, ruleset), ruleset)
    for name in figures:
        _wanted(base, name)


def _chosen(rulesets: Sequence[Ruleset], only: Sequence[str]) -> list[tuple[Ruleset, str]]:
    """The rules that are bound: those that are named, else all."""
    return [(book, name) for book in rulesets for name in book.rules if not only or name in only]


def _bound(shared: Shared, figures: Sequence[str], only: Sequence[str]) -> Graph:
    _bind_all(shared, figures, only)
    shared.faults.settle()
    rules = [
        rule for book, name in _chosen(shared.rulesets, only) if (rule := bind_rule(shared, book, name)) is not None
    ]
    assert all(rule.cases for rule in rules), "a rule without cases would pass unseen"
    return Graph(
        shared.bank,
        shared.inputs,
        shared.facts,
        shared.figures,
        tuple(rules),
        shared.day,
        tuple(shared.declared.values()),
        _cautions(shared),
        shared.base.design.correlations,
        _replaced(shared),
    )


def _cautions(shared: Shared) -> dict[str, str]:
    """The words of caution of the physics modules that were read."""
    modules = [found for key, found in shared.memo.items() if key[0] == "module"]
    return {module.name: module.caution for module in modules if isinstance(module, PhysicsModule) and module.caution}


def _replaced(shared: Shared) -> dict[str, str]:
    """The figures that stand in the place of others: by which file, and why."""
    said = {path: f"replaced by {swap.module.file}: {swap.because}" for path, swap in shared.physics.replaced.items()}
    bare = {name: name.partition(" [")[0].partition("(")[0] for name in shared.figures}
    return {name: said[path] for name, path in bare.items() if path in said}


def _shared(
    design: Design,
    rulesets: Sequence[Ruleset],
    day: date,
    physics: Library,
    also_known: Sequence[Ruleset],
) -> Shared:
    books = (*also_known, *rulesets)
    entries = [entry for ruleset in books for entry in ruleset.inputs]
    units = {symbol: unit for ruleset in books for symbol, unit in ruleset.units.items()}
    return Shared(
        base=View(design),
        vocabulary=Vocabulary(CORE).extended(entries),
        rulesets=tuple(rulesets),
        physics=physics,
        day=day,
        faults=Faults(),
        express=express,
        bind_rule=bind_rule,
        units=units,
    )


def _unused_formulas(scope: Scope, ruleset: Ruleset) -> None:
    """Bind what no rule uses too, so that its faults are found."""
    for formula in ruleset.derived.values():
        _formula(scope, formula, formula.name)
    for table in ruleset.tables.values():
        table_value(scope.fresh(scope.view, ruleset), table, None, parsed)
    for name, members in ruleset.lists.items():
        list_of(scope.fresh(scope.view, ruleset), members, name, parsed)


def _formula(scope: Scope, formula: Formula, name: str) -> None:
    owner = scope.owner
    if formula.loop is None and formula.of is None:
        figure(scope.fresh(scope.view, owner), owner, formula, name, formula.span)
    elif formula.of is not None:
        place = zero_place(scope)
        figure(scope.fresh(scope.view, owner), owner, formula, f"{name}(0)", formula.span, {formula.of.text: place})
    elif formula.loop is not None and (head := parsed_each(scope, formula.loop)) is not None:
        _of_items(scope, formula, name, head)


def _of_items(scope: Scope, formula: Formula, name: str, head: Each) -> None:
    """A figure of any item, bound for one that is not there."""
    if len(head.variables) != 1:
        told = f"'{name}' is a figure of one item, and this loop has two variables"
        scope.fault("wrong-arguments", told, head.span, expected="x in collection")
        return
    items = scope.express(head.collection)
    if isinstance(items, Items):
        stand_in = Item(f"{items.path}.*")
        variables = {head.variables[0]: stand_in}
        inner = scope.fresh(scope.view, scope.owner)
        figure(inner, scope.owner, formula, f"{name}({stand_in.path})", formula.span, variables)
    elif not isinstance(items, Broken):
        scope.fault("kind-mismatch", f"this is {kind_of(items)}, not a collection", head.collection.span)


def _wanted(scope: Scope, name: str) -> None:
    """A physics figure by name, or all figures of a module."""
    module = physics_module(scope, name.partition(".")[0])
    if module is None:
        return
    if "." in name:
        physics_figure(scope, tuple(name.split(".")), module.figures[name.partition(".")[2]].span) if name.partition(
            "."
        )[2] in module.figures else None
        return
    for formula in module.figures.values():
        if formula.loop is None and formula.of is None:
            physics_figure(scope, (name, formula.name), formula.span)
