"""Figures that a solver gives: its arguments bound as formulas of its module, and the track that it drives on."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from rulecheck.binding.bound import BROKEN, Bound, Broken, Number, Truth, Words, kind_of
from rulecheck.binding.parsing import parsed
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Refused, Span
from rulecheck.graph.terms import External, Term
from rulecheck.model.design import NONE
from rulecheck.model.solver import Question, Solver, SolverInput
from rulecheck.model.track import Track
from rulecheck.quantity.dimension import PURE
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.units import find_unit
from rulecheck.reading.nodes import Located, Mapping

TRACK = "track"
"""The input that names the track's file."""


@dataclass(frozen=True, slots=True)
class _Handed:
    """What a solver is handed in one state: terms in the order of its inputs, or None where one of them is broken."""

    terms: tuple[Term, ...] | None
    scope: Scope


def solver_output(scope: Scope, solver: Solver, name: str, span: Span) -> Bound:
    """One output of a solver; unknown where the design names no track for one that drives on it."""
    output = next(output for output in solver.outputs if output.name == name)
    handed = _handed(scope, solver)
    scope.uses.update(handed.scope.uses)
    scope.touched.update(handed.scope.touched)
    scope.figures.update(handed.scope.figures)
    unit = find_unit(output.unit) if output.unit else None
    dimension = unit.dimension if unit is not None else PURE
    question = _question(scope, solver)
    if handed.terms is None or isinstance(question, Broken):
        return BROKEN
    if isinstance(question, Question):
        needs = tuple(not item.serves or name in item.serves for item in solver.inputs)
        asked = External(question, name, needs)
        term = scope.bank.external(asked, handed.terms, "number" if unit else "text", dimension, span)
    else:
        term = scope.missing(TRACK, "number" if unit else "text", dimension, span)
    return Number(term, unit) if unit is not None else Words(term)


def _handed(scope: Scope, solver: Solver) -> _Handed:
    key = ("solver inputs", solver.name, scope.view.states)
    if key not in scope.shared.memo:
        apart = scope.fresh(scope.view, scope.owner)
        terms = [_argument(apart, solver, item) for item in solver.inputs]
        known = tuple(term for term in terms if term is not None)
        scope.shared.memo[key] = _Handed(known if len(known) == len(terms) else None, apart)
    handed: _Handed = scope.shared.memo[key]
    return handed


def _argument(scope: Scope, solver: Solver, item: SolverInput) -> Term | None:
    where = Located(item.formula, Span(f"solver {solver.name}", 0, len(item.formula), 1, 1))
    syntax = parsed(scope, where)
    bound = scope.express(syntax) if syntax is not None else BROKEN
    if isinstance(bound, Number) and item.unit:
        if bound.dimension == find_unit(item.unit).dimension:
            return bound.term
        told = f"'{item.name}' of solver '{solver.name}' is declared in {item.unit}, and is {name_of(bound.dimension)}"
        scope.fault("wrong-dimension", told, where.span)
    elif isinstance(bound, (Truth, Words)) and not item.unit:
        return bound.term
    elif not isinstance(bound, Broken):
        scope.fault("bad-physics", f"'{item.name}' of solver '{solver.name}' is {kind_of(bound)}", where.span)
    return None


def _question(scope: Scope, solver: Solver) -> Question | Broken | None:
    """The solver put to the track of the design in this state; None where it has none."""
    track: Track | None = None
    if solver.drives_track:
        found = track_of(scope)
        if found is None or isinstance(found, Broken):
            return found
        track = found
    key = ("question", solver.name, track.file if track is not None else "")
    if key not in scope.shared.memo:
        scope.shared.memo[key] = Question(solver, track)
    question: Question = scope.shared.memo[key]
    return question


def track_of(scope: Scope) -> Track | Broken | None:
    """The track that the design names, read once; None where it names none, broken with the faults noted."""
    scope.touched.add(TRACK)
    where: Any = scope.view.design.leaves.get(TRACK)
    if isinstance(where, Mapping):
        where = where.get("value")
    if not isinstance(where, Located) or where.text == NONE or scope.shared.tracks is None:
        return None
    key = (TRACK, where.text, where.span)
    if key not in scope.shared.memo:
        try:
            scope.shared.memo[key] = scope.shared.tracks(where)
        except Refused as refused:
            scope.shared.faults.take(refused)
            scope.shared.memo[key] = BROKEN
    track: Track | Broken = scope.shared.memo[key]
    return track


def method_of(scope: Scope, solver: Solver) -> str:
    """How the solver goes about it, and on which track, in words."""
    track = track_of(scope) if solver.drives_track else None
    where = f" on {track.name} ({track.file})" if isinstance(track, Track) else ""
    return f"solver {solver.name}{where}: {solver.method}"
