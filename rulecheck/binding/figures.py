"""Figures: derived formulas, tables and lists of a ruleset, physics, and other rules by reference."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace

from rulecheck.binding.bound import BROKEN, Bound, Broken, Date, Item, Number, Place, Truth, Words, kind_of
from rulecheck.binding.external import method_of, solver_output
from rulecheck.binding.parsing import parsed, parsed_each
from rulecheck.binding.reconciling import declared_figure, states_value
from rulecheck.binding.scope import Owner, Scope
from rulecheck.binding.solves import solved
from rulecheck.binding.tables import list_of, table_value
from rulecheck.diagnostics import Refused, Span
from rulecheck.formula.syntax import Call
from rulecheck.graph.figures import Figure, Solved
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import Formula, PhysicsModule, Ruleset
from rulecheck.operations.values import Reason
from rulecheck.physics.solvers import OWN
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.units import Unit, UnitFault, find_unit
from rulecheck.reading.nodes import Located


@dataclass(frozen=True, slots=True)
class Made:
    """A figure that is bound, and what it rests on."""

    bound: Bound
    touched: frozenset[str]
    figures: frozenset[str]


# --- by name ---------------------------------------------------------------------------------------------------------


def own_figure(scope: Scope, name: str, span: Span) -> Bound | None:
    """A derived figure, table or list of the owner by its bare name; None where it has none."""
    owner = scope.owner
    if isinstance(owner, PhysicsModule):
        return module_figure(scope, owner, name, span) if name in owner.figures else None
    if name in owner.derived:
        return figure(scope, owner, owner.derived[name], name, span)
    if name in owner.tables:
        return table_value(scope, owner.tables[name], None, parsed)
    if name in owner.lists:
        return list_of(scope, owner.lists[name], name, parsed)
    if (name in owner.zones or name in owner.templates) and scope.shared.vocabulary.entry(name) is None:
        what, use = ("zone", f"depth(p, {name})") if name in owner.zones else ("template", "passes: or stops:")
        return scope.fault("kind-mismatch", f"'{name}' is a {what}", span, advice=f"use it in {use}")
    if name in owner.rules and scope.shared.vocabulary.entry(name) is None:
        return scope.fault("kind-mismatch", f"'{name}' is a rule", span, advice=f"write rule({name}) or margin({name})")
    return None


def physics_module(scope: Scope, name: str) -> PhysicsModule | None:
    """A physics module by its name, read when it is first used."""
    key = ("module", name)
    if key not in scope.shared.memo:
        try:
            scope.shared.memo[key] = scope.shared.physics.module(name)
        except Refused as refused:
            scope.shared.faults.take(refused)
            scope.shared.memo[key] = None
    module: PhysicsModule | None = scope.shared.memo[key]
    return module


def standing(scope: Scope, module: PhysicsModule, name: str) -> tuple[PhysicsModule, Formula, str]:
    """What stands under the name of a module's figure: its owner, its formula, and the name to show.

    Where a figure is replaced, the file that replaces it still reads the old one under the old name.
    """
    path = f"{module.name}.{name}"
    swap = scope.shared.physics.replaced.get(path)
    if swap is None:
        return module, module.figures[name], path
    if swap.module.file == scope.owner.file:
        return module, module.figures[name], f"{path} as it was"
    return swap.module, swap.formula, path


def replaced_module(scope: Scope, path: tuple[str, ...]) -> PhysicsModule | None:
    """The module of a figure that another one replaces; None for every other path."""
    return physics_module(scope, path[0]) if ".".join(path) in scope.shared.physics.replaced else None


def module_figure(scope: Scope, module: PhysicsModule, name: str, span: Span) -> Bound:
    """A figure of a module, or what replaces it."""
    owner, formula, path = standing(scope, module, name)
    return figure(scope, owner, formula, path, span)


def physics_figure(scope: Scope, path: tuple[str, ...], span: Span) -> Bound | None:
    """`mass.total`: a figure of a physics module; None where there is none."""
    module = physics_module(scope, path[0]) if len(path) == 2 else None
    if module is None or path[1] not in module.figures:
        return None
    bound = module_figure(scope, module, path[1], span)
    name = ".".join(path)
    entry = scope.shared.vocabulary.entry(name)
    if entry is not None and entry.computed and isinstance(bound, Number) and states_value(scope, name):
        # What is declared is declared of the design as written, whatever the state that is judged.
        written = scope.fresh(scope.shared.base, scope.owner)
        as_written = module_figure(written, module, path[1], span)
        if isinstance(as_written, Number):
            return declared_figure(scope, name, bound, as_written)
    return bound


def known_names(scope: Scope) -> list[str]:
    """Names of figures, for advice."""
    owner = scope.owner
    own = (
        owner.figures
        if isinstance(owner, PhysicsModule)
        else {**owner.derived, **owner.tables, **owner.lists, **owner.rules}
    )
    modules = (physics_module(scope, name) for name in (*scope.shared.physics.names, *OWN))
    return [*own, *(f"{module.name}.{name}" for module in modules if module for name in module.figures)]


def callable_names(scope: Scope) -> list[str]:
    """Names of the owner that can be called."""
    owner = scope.owner
    formulas = owner.figures if isinstance(owner, PhysicsModule) else owner.derived
    tables = owner.tables if isinstance(owner, Ruleset) else {}
    return [name for name, formula in formulas.items() if formula.loop or formula.of] + list(tables)


# --- with an argument ------------------------------------------------------------------------------------------------


def called_figure(scope: Scope, syntax: Call) -> Bound | None:
    """`usable(b)`, `minimum_mass(x)`, `mass.of(m)`; None where neither the owner nor a module has such a name."""
    owner: Owner = scope.owner
    prefix, dot, name = syntax.function.rpartition(".")
    if dot:
        module = physics_module(scope, prefix) if "." not in prefix else None
        if module is None:
            return None
        owner = module
    if isinstance(owner, Ruleset) and name in owner.tables:
        table = owner.tables[name]
        due = len(table.over) if table.linear else 1
        if len(syntax.arguments) != due:
            told = f"the table '{name}' takes {'one key' if due == 1 else f'{due} keys'}"
            return scope.fault("wrong-arguments", told, syntax.span, expected="a key for each name that it is over")
        return table_value(scope, table, syntax.arguments, parsed)
    formulas = owner.figures if isinstance(owner, PhysicsModule) else owner.derived
    if name not in formulas:
        return None
    if len(syntax.arguments) != 1:
        return scope.fault("wrong-arguments", f"'{name}' takes one argument", syntax.span)
    argument = scope.express(syntax.arguments[0])
    if isinstance(argument, Broken):
        return BROKEN
    formula, path = formulas[name], name
    if isinstance(owner, PhysicsModule):
        owner, formula, path = standing(scope, owner, name)
    return _with_argument(scope, owner, formula, argument, syntax.span, path)


def module_call(scope: Scope, module_name: str, name: str, argument: Bound, span: Span) -> Bound:
    """A figure of a physics module at a given point."""
    module = physics_module(scope, module_name)
    if module is None or name not in module.figures:
        return scope.fault("bad-physics", f"there is no figure '{module_name}.{name}'", span)
    owner, formula, path = standing(scope, module, name)
    return _with_argument(scope, owner, formula, argument, span, path)


def _with_argument(scope: Scope, owner: Owner, formula: Formula, argument: Bound, span: Span, path: str) -> Bound:
    if formula.of is not None:
        if not isinstance(argument, Place):
            return scope.fault(
                "kind-mismatch", f"'{formula.name}' takes a point, and this is {kind_of(argument)}", span
            )
        label = ",".join(str(number.term.index) for number in (argument.x, argument.y, argument.z))
        return figure(scope, owner, formula, f"{formula.name}({label})", span, {formula.of.text: argument})
    if formula.loop is None:
        return scope.fault("wrong-arguments", f"'{formula.name}' takes no argument", span)
    head = parsed_each(scope, formula.loop)
    if head is None:
        return BROKEN
    if not isinstance(argument, Item):
        return scope.fault("kind-mismatch", f"'{formula.name}' takes an item, and this is {kind_of(argument)}", span)
    return figure(scope, owner, formula, f"{path}({argument.path})", span, {head.variables[0]: argument})


# --- one figure ------------------------------------------------------------------------------------------------------


def figure(
    scope: Scope, owner: Owner, formula: Formula, name: str, span: Span, variables: Mapping[str, Bound] | None = None
) -> Bound:
    """Bind a named formula in its owner's name space and this state; each is bound once."""
    if variables is None and (formula.loop or formula.of):
        word = formula.loop.text if formula.loop else formula.of.text if formula.of else ""
        return scope.fault(
            "wrong-arguments", f"'{formula.name}' is defined for {word}", span, expected=f"{formula.name}(…)"
        )
    made = _made(scope, owner, formula, name, span, variables)
    scope.touched.update(made.touched)
    scope.figures.update(made.figures)
    return made.bound


def _made(
    scope: Scope, owner: Owner, formula: Formula, name: str, span: Span, variables: Mapping[str, Bound] | None
) -> Made:
    shared, states = scope.shared, scope.view.states
    key = ("figure", owner.file, name, states, scope.strict)
    known: Made | None = shared.memo.get(key)
    if known is not None:
        return known
    if states and not _of_points(variables):
        base = _made(scope.fresh(shared.base, owner), owner, formula, name, span, variables)
        # Points carry terms of their own state: figures of a point are not shared between states.
        if not scope.view.changes_any(base.touched):
            shared.memo[key] = base
            return base
    if not shared.enter(name, formula.span, f"'{name}' is defined by itself"):
        return Made(BROKEN, frozenset(), frozenset())
    made = _bind(scope.fresh(scope.view, owner, variables), owner, formula, name)
    shared.leave()
    shared.memo[key] = made
    return made


def _of_points(variables: Mapping[str, Bound] | None) -> bool:
    return any(not isinstance(bound, Item) for bound in (variables or {}).values())


def _bind(scope: Scope, owner: Owner, formula: Formula, name: str) -> Made:
    states = scope.view.states
    solver = owner.solver if isinstance(owner, PhysicsModule) and formula.by_solver else None
    syntax = parsed(scope, formula.formula)
    how: Solved | None = None
    if solver is not None:
        bound = solver_output(scope, solver, formula.name, formula.span)
    elif formula.solve is not None or formula.between:
        scope, bound, how = solved(scope, formula, name, syntax)
    else:
        bound = scope.express(syntax) if syntax is not None else BROKEN
    bound = _spoken(scope, formula, bound)
    if any(term.kind == "variable" for term in scope.view.given.values()):
        return Made(bound, frozenset(scope.touched), frozenset())
    valid = _validity(scope, formula)
    if syntax is not None and isinstance(bound, (Number, Truth, Words, Date)):
        full = _in_states(name, states)
        scope.shared.figures[full] = Figure(
            full, bound.term, getattr(bound, "unit", None), syntax, formula.meaning, _source(owner, formula),
            formula.formula.span, tuple(scope.uses.values()), valid, how, scope.arms,
            method_of(scope, solver) if solver else "",
        )  # fmt: skip
        scope.figures.add(full)
        if scope.strict and valid is not None:
            bound = _where_valid(scope, bound, valid, formula, name)
    return Made(bound, frozenset(scope.touched), frozenset(scope.figures))


def _in_states(name: str, states: tuple[tuple[str, str], ...]) -> str:
    told = ",".join(f"{axis}={state}" for axis, state in states)
    return f"{name} [{told}]" if told else name


def _where_valid(
    scope: Scope, bound: Number | Truth | Words | Date, valid: Term, formula: Formula, name: str
) -> Number | Truth | Words | Date:
    """The figure within its range of validity; outside it, and where that is not known, it is not known either."""
    outside = Reason("missing", f"{name} within its range of validity", formula.valid.span if formula.valid else None)
    term = scope.bank.branch(valid, bound.term, scope.bank.unknown(outside, bound.term.sort, bound.term.dimension))
    return replace(bound, term=term)


def _source(owner: Owner, formula: Formula) -> str:
    return owner.sources.get(formula.source, formula.source) if isinstance(owner, PhysicsModule) else formula.source


def _validity(scope: Scope, formula: Formula) -> Term | None:
    if formula.valid is None:
        return None
    apart = replace(scope, uses={}, arms={})
    syntax = parsed(scope, formula.valid)
    bound = apart.express(syntax) if syntax is not None else BROKEN
    if isinstance(bound, (Truth, Broken)):
        return bound.term if isinstance(bound, Truth) else None
    scope.fault(
        "kind-mismatch", f"a range of validity is a condition, and this is {kind_of(bound)}", formula.valid.span
    )
    return None


def _spoken(scope: Scope, formula: Formula, bound: Bound) -> Bound:
    """A number in the declared unit, whose dimension must be the formula's."""
    if isinstance(bound, Broken):
        return BROKEN
    unit = declared_unit(scope, formula.unit)
    if isinstance(bound, Number):
        if unit is not None and unit.dimension != bound.dimension:
            return scope.fault(
                "wrong-dimension",
                f"'{formula.name}' is declared in {unit.symbol}, {name_of(unit.dimension)}, and its formula gives {name_of(bound.dimension)}",
                formula.formula.span, advice="mend the formula or the unit",
            )  # fmt: skip
        return replace(bound, unit=unit or bound.unit, bare=False)
    if formula.unit is not None:
        return scope.fault(
            "kind-mismatch",
            f"'{formula.name}' is {kind_of(bound)} and has no unit",
            formula.unit.span,
            advice="leave 'unit:' out",
        )
    if isinstance(bound, (Truth, Words, Date, Place)):
        return bound
    return scope.fault(
        "kind-mismatch",
        f"'{formula.name}' is {kind_of(bound)}",
        formula.formula.span,
        expected="a number, flag, text, date or point",
    )


def declared_unit(scope: Scope, where: Located | None) -> Unit | None:
    """A unit as declared, or None with the fault noted."""
    if where is None:
        return None
    try:
        return find_unit(where.text, scope.units)
    except UnitFault as fault:
        scope.fault("unknown-unit", str(fault), where.span, advice=fault.advice)
        return None
