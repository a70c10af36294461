"""Figures that are defined by an equation: `solve: vehicle.speed`, `between: [10 km/h, 600 km/h]`, `formula: …`.

The formula, with all figures that it names, is bound anew with a variable where the input stands; its solution is a
term. Then it is bound once more with that solution in place of the input, so that every figure at the solution, the
formula's rest there, and ranges of validity are terms like any other.
"""

from __future__ import annotations

from rulecheck.binding.bound import BROKEN, Bound, Broken, Number, kind_of
from rulecheck.binding.inputs import unit_of
from rulecheck.binding.parsing import parsed
from rulecheck.binding.scope import Scope, View
from rulecheck.formula.syntax import Syntax
from rulecheck.graph.figures import Solved
from rulecheck.graph.terms import Equation, Term
from rulecheck.model.ruleset import Formula
from rulecheck.model.vocabulary import Entry
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.units import Unit
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located

_PI = 3.141592653589793


def solved(scope: Scope, formula: Formula, name: str, syntax: Syntax | None) -> tuple[Scope, Bound, Solved | None]:
    """The least value of the input between the ends for which the formula is zero; the scope in which it has that value.

    Faults are noted, and leave `BROKEN`.
    """
    entry = _entry(scope, formula)
    ends = [_end(scope, where, entry) for where in formula.between]
    if len(ends) != 2 or entry is None or formula.solve is None:
        if entry is not None:
            _two_ends(scope, formula)
        return scope, BROKEN, None
    low, high = ends
    if syntax is None or low is None or high is None:
        return scope, BROKEN, None
    path, unit = formula.solve.text, unit_of(entry, scope)
    variable = scope.bank.variable(f"{path} for {name}", unit.dimension)
    body = _with(scope, path, variable, "for", name).express(syntax)
    if not isinstance(body, Number):
        if not isinstance(body, Broken):
            told = f"the formula of a solve is a number that is zero at the solution, and this is {kind_of(body)}"
            scope.fault("kind-mismatch", told, syntax.span, advice="write one side less the other")
        return scope, BROKEN, None
    term = _term(scope, formula, body.term, variable, (low, high), unit)
    if term is None:
        told = f"the formula does not rest on '{path}'"
        scope.fault("wrong-arguments", told, syntax.span, advice="solve for an input that it reads")
        return scope, BROKEN, None
    if isinstance(term.value, Equation) and any(part.kind == "external" for part in term.value.moving):
        told = "the formula of a solve rests on a figure that a solver finds, along which nothing is certain"
        scope.fault("kind-mismatch", told, syntax.span, advice="vary the input with --vary, and read the figure there")
        return scope, BROKEN, None
    at = _with(scope, path, term, "at", name)
    rest = at.express(syntax)
    if not isinstance(rest, Number):
        return scope, BROKEN, None
    texts = [where.text for where in formula.between]
    return at, Number(term, unit), Solved(path, texts[0], texts[1], f"at={name}", rest.term)


def _term(
    scope: Scope, formula: Formula, body: Term, variable: Term, ends: tuple[Term, Term], unit: Unit
) -> Term | None:
    low, high = (where.text for where in formula.between)
    term = scope.bank.solve(
        body, variable, ends, formula.formula.span,
        said=f"{variable.path.partition(' ')[0]} from {low} to {high}",
        unit="" if unit.symbol == "1" else unit.symbol, factor=float(unit.factor) * _PI**unit.power,
    )  # fmt: skip
    return term if scope.bank.rests_on_its_variable(term) else None


def _with(scope: Scope, path: str, term: Term, axis: str, name: str) -> Scope:
    """The scope of the formula with a term in place of the input."""
    view = scope.view
    inner = View(
        view.design, (*view.states, (axis, name)), view.set_paths | {path}, view.base or view.design,
        {**view.given, path: term},
    )  # fmt: skip
    return scope.fresh(inner, scope.owner, scope.variables)


def _entry(scope: Scope, formula: Formula) -> Entry | None:
    """What the input is that is solved for."""
    where = formula.solve
    if where is None:
        scope.fault("missing-key", "'between:' says where a solution is looked for", formula.between[0].span,
                    advice="add 'solve:' with the input that is looked for, or take it out")  # fmt: skip
        return None
    entry = scope.shared.vocabulary.entry(where.text)
    if entry is None:
        known = [item.path for item in scope.shared.vocabulary if item.kind == "number" and "*" not in item.path]
        advice = nearest(where.text, known)
        scope.fault("unknown-name", f"there is no input '{where.text}'", where.span, advice=advice)
    elif entry.kind != "number" or entry.computed:
        told = f"'{where.text}' is a computed figure" if entry.computed else f"'{where.text}' is a {entry.kind}"
        scope.fault("kind-mismatch", told, where.span, expected="an input that is a number")
        return None
    return entry


def _two_ends(scope: Scope, formula: Formula) -> None:
    place = formula.between[0].span if formula.between else formula.span
    told = f"a solution is looked for between two ends, not {len(formula.between)}"
    scope.fault("bad-structure", told, place, expected="between: [from, to]")


def _end(scope: Scope, where: Located, entry: Entry | None) -> Term | None:
    """One end of the range."""
    syntax = parsed(scope, where)
    bound = scope.express(syntax) if syntax is not None else BROKEN
    if entry is None or isinstance(bound, Broken):
        return None
    unit = unit_of(entry, scope)
    if isinstance(bound, Number) and bound.dimension == unit.dimension:
        return bound.term
    found = name_of(bound.dimension) if isinstance(bound, Number) else kind_of(bound)
    told = f"an end of the range of '{entry.path}' is {name_of(unit.dimension)}, and this is {found}"
    scope.fault("wrong-dimension", told, where.span, expected=f"a value in {unit.symbol}")
    return None
