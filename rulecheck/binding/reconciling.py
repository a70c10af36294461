"""Declared values beside what the car's own parts give."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

from rulecheck.binding.bound import Bound, Number
from rulecheck.binding.inputs import quantity
from rulecheck.binding.leaves import scalar
from rulecheck.binding.scope import Scope
from rulecheck.graph.figures import DeclaredCheck
from rulecheck.graph.terms import Term
from rulecheck.operations.arithmetic import absolute, subtract
from rulecheck.operations.comparison import at_most
from rulecheck.operations.logic import reconcile
from rulecheck.physics.declared import DECLARED, Declared
from rulecheck.quantity.quantity import Tolerance, Uncertainty


def states_value(scope: Scope, path: str) -> bool:
    """True where the design states a value, and not `none`."""
    return path in scope.view.design.leaves and not scope.view.design.states_none(path)


def reconciled(scope: Scope, path: str, bound: Number, computed: Bound | None) -> Number:
    """A declared input, unless the car's own parts are known to contradict it."""
    if not isinstance(computed, Number) or computed.dimension != bound.dimension:
        return bound
    return replace(bound, term=_agreeing(scope, DECLARED[path], bound, computed, bound.term))


def declared_figure(scope: Scope, name: str, bound: Number, computed: Number) -> Number:
    """A computed figure in this state, unless its declared value contradicts what is computed as written."""
    entry = scope.shared.vocabulary.entry(name)
    assert entry is not None
    read = quantity(scope, entry, scope.view.design.leaves[name])
    if read is None:
        return bound
    rational, _ = read.si()
    stated = Number(scope.bank.number(rational, computed.dimension), computed.unit)
    return replace(bound, term=_agreeing(scope, DECLARED[name], stated, computed, bound.term))


def _agreeing(scope: Scope, declared: Declared, stated: Number, computed: Number, kept: Term) -> Term:
    width = scope.bank.number(_closeness(scope, declared.path), stated.dimension)
    apart = scope.apply(subtract, [computed.term, stated.term], None)
    gap = scope.apply(absolute, [apart], None) if apart and declared.relation == "equal" else apart
    agrees = scope.apply(at_most, [gap, width], None) if gap else None
    assert agrees is not None
    node = scope.view.design.leaves[declared.path]
    scope.shared.declared[declared.path] = DeclaredCheck(
        declared.path, f"{declared.module}.{declared.figure}", declared.relation, agrees, stated.term, computed.term,
        stated.unit, node.span,
    )  # fmt: skip
    made = scope.apply(reconcile, [kept, agrees], node.span)
    assert made is not None
    return made


def _closeness(scope: Scope, path: str) -> Fraction:
    """How closely a declared value is meant: its spread, else half a unit of its last digit (SI)."""
    entry = scope.shared.vocabulary.entry(path)
    node = scope.view.design.leaves[path]
    read = quantity(scope, entry, node) if entry is not None else None
    if read is None:
        return Fraction(0)
    spread = read.spread
    if isinstance(spread, Uncertainty):
        return spread.half_width * read.unit.factor
    if isinstance(spread, Tolerance):
        return max(abs(spread.upper), abs(spread.lower)) * read.unit.factor
    where = scalar(node)
    digits = where.text.split()[0] if where else ""
    decimals = len(digits.partition(".")[2]) if "e" not in digits.lower() else 0
    return Fraction(1, 2 * 10**decimals) * read.unit.factor
