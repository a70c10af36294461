"""Closed forms of margins and figures, by the symbolic reader. Loads sympy: only where it is asked for."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

from rulecheck.diagnostics import Diagnostic, Refused
from rulecheck.graph.figures import Graph
from rulecheck.graph.terms import Term, cone
from rulecheck.operations.arithmetic import total
from rulecheck.operations.values import Monomial
from rulecheck.outcome.results import ClosedFormResult
from rulecheck.quantity.numbers import show_number
from rulecheck.readers import symbolic
from rulecheck.readers.exact import ExactReader
from rulecheck.reading.nearest import nearest

LONGEST = 400
TOO_LONG = "(too long to be read; ask for one input with --solve-for)"


def closed_form(graph: Graph, term: Term, solve_for: str = "") -> ClosedFormResult:
    """A number as one formula of the inputs, its derivatives, and the inputs that make it zero; in SI units.

    With `solve_for` all other inputs have their values, and what the input must be is given in its own unit. Raises
    `Refused` where there is no such input. What is too large to be written down says so.
    """
    if solve_for and solve_for not in graph.inputs:
        message = f"the design gives no number under '{solve_for}'"
        raise Refused([Diagnostic("unknown-name", message, advice=nearest(solve_for, graph.inputs))])
    try:
        if solve_for:
            return _solved(graph, _with_values(graph, term, solve_for), solve_for)
        form = symbolic.describe(graph.bank, term, graph.inputs)
    except Refused as refused:
        return ClosedFormResult("", {}, {}, tuple(item.message for item in refused.diagnostics))
    return ClosedFormResult(
        _short(form.formula),
        {path: _short(slope) for path, slope in form.derivatives.items()},
        {path: tuple(found) for path, found in form.solved.items() if all(len(text) <= LONGEST for text in found)},
        form.conditions,
    )


def _short(text: str) -> str:
    return text if len(text) <= LONGEST else TOO_LONG


def _solved(graph: Graph, term: Term, path: str) -> ClosedFormResult:
    """One input free: the number that makes the margin zero, in the input's unit."""
    form = symbolic.describe(graph.bank, term, graph.inputs, [path])
    roots = symbolic.solve_for(graph.bank, term, path, graph.inputs)
    found = tuple(_in_unit(graph, path, value) for root in roots if (value := symbolic.numeric(root)) is not None)
    slopes = {name: _short(slope) for name, slope in form.derivatives.items()}
    return ClosedFormResult(_short(form.formula), slopes, {path: found} if found else {}, form.conditions)


def _in_unit(graph: Graph, path: str, value: Fraction) -> str:
    fact = graph.facts.get(path)
    unit = fact.unit if fact else None
    if unit is None:
        return show_number(value)
    rational, power = unit.of_si(value)
    # pi in a unit (degrees) to 30 digits: enough for what is shown.
    shown = rational * Fraction("3.14159265358979323846264338328") ** power
    return f"{show_number(shown)} {unit.symbol}".removesuffix(" 1")


def _with_values(graph: Graph, root: Term, path: str) -> Term:
    """The term with everything that does not rest on one input as its value."""
    reader, bank = ExactReader(graph.bank, graph.inputs), graph.bank
    made: dict[int, Term] = {}
    rests: set[int] = set()
    for term in cone([root]):
        if term.path == path or any(argument.index in rests for argument in term.arguments):
            rests.add(term.index)
            made[term.index] = _rebuilt(graph, term, [made[argument.index] for argument in term.arguments])
        else:
            value = reader.exact_fraction(term) if term.sort == "number" else None
            made[term.index] = term if value is None else bank.number(value, term.dimension)
            if term.sort == "flag" and isinstance(truth := reader.truth(term), bool):
                made[term.index] = bank.flag(truth)
    return made[root.index]


def _rebuilt(graph: Graph, term: Term, arguments: Sequence[Term]) -> Term:
    bank = graph.bank
    if term.kind == "branch":
        return bank.branch(arguments[0], arguments[1], arguments[2])
    if term.operation is None:
        return term
    if term.operation is total:
        constants = [item.value for item in arguments if isinstance(item.value, Monomial) and item.value.is_rational]
        others = [item for item in arguments if not (isinstance(item.value, Monomial) and item.value.is_rational)]
        held = sum((value.rational for value in constants), Fraction(0))
        arguments = [*others, bank.number(held, term.dimension)]
    return bank.apply(term.operation, arguments, term.dimension)
