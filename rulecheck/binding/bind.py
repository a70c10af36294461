"""`bind`: design, rulesets and physics to one graph."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from datetime import date

from rulecheck.binding.bound import Item
from rulecheck.binding.express import express
from rulecheck.binding.figures import figure, physics_figure, physics_module
from rulecheck.binding.parsing import parsed, parsed_each
from rulecheck.binding.rules import bind_rule
from rulecheck.binding.scope import Scope, Shared, View
from rulecheck.binding.tables import table_value
from rulecheck.binding.validate import validate
from rulecheck.diagnostics import Faults
from rulecheck.graph.figures import Graph
from rulecheck.model.core_table import CORE
from rulecheck.model.design import Design
from rulecheck.model.ruleset import Formula, PhysicsModule, Ruleset
from rulecheck.model.vocabulary import Vocabulary

Loader = Callable[[str], PhysicsModule | None]


def bind(
    design: Design,
    rulesets: Sequence[Ruleset],
    *,
    day: date,
    physics: Loader,
    physics_names: Sequence[str],
    also_known: Sequence[Ruleset] = (),
    figures: Sequence[str] = (),
) -> Graph:
    """Bind every rule of the rulesets for a design. Raises `Refused` with all faults.

    `also_known` are rulesets whose inputs the design may state though they are not checked; `figures` are physics
    figures, or whole modules, that are wanted beside what the rules use.
    """
    shared = _shared(design, rulesets, day, physics, physics_names, also_known)
    base = Scope(shared, shared.base, rulesets[0] if rulesets else _NO_RULES)
    validate(base)
    for ruleset in rulesets:
        _unused_formulas(Scope(shared, shared.base, ruleset), ruleset)
        for name in ruleset.rules:
            bind_rule(shared, ruleset, name)
    for name in figures:
        _wanted(base, name)
    shared.faults.settle()
    rules = [rule for book in rulesets for name in book.rules if (rule := bind_rule(shared, book, name)) is not None]
    return Graph(
        shared.bank, shared.inputs, shared.facts, shared.figures, tuple(rules), day, tuple(shared.declared.values())
    )


def _shared(
    design: Design,
    rulesets: Sequence[Ruleset],
    day: date,
    physics: Loader,
    physics_names: Sequence[str],
    also_known: Sequence[Ruleset],
) -> Shared:
    entries = [entry for ruleset in (*also_known, *rulesets) for entry in ruleset.inputs]
    return Shared(
        base=View(design),
        vocabulary=Vocabulary(CORE).extended(entries),
        rulesets=tuple(rulesets),
        physics=physics,
        physics_names=tuple(physics_names),
        day=day,
        faults=Faults(),
        express=express,
        bind_rule=bind_rule,
    )


def _unused_formulas(scope: Scope, ruleset: Ruleset) -> None:
    """Bind what no rule uses too, so that its faults are found."""
    for formula in ruleset.derived.values():
        _formula(scope, formula, formula.name)
    for table in ruleset.tables.values():
        table_value(scope.fresh(scope.view, ruleset), table, None, parsed)


def _formula(scope: Scope, formula: Formula, name: str) -> None:
    owner = scope.owner
    if formula.loop is None and formula.of is None:
        figure(scope.fresh(scope.view, owner), owner, formula, name, formula.span)
    elif formula.loop is not None and (head := parsed_each(scope, formula.loop)) is not None:
        collection = head.collection.path if hasattr(head.collection, "path") else ()
        stand_in = Item(f"{'.'.join(collection)}.*")
        figure(
            scope.fresh(scope.view, owner),
            owner,
            formula,
            f"{name}({stand_in.path})",
            formula.span,
            {head.variables[0]: stand_in},
        )


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


_NO_RULES = PhysicsModule("", "", "", {}, {}, "")
