"""Syntax to bound values: one case for each kind of node."""

from __future__ import annotations

from dataclasses import replace
from typing import assert_never

from rulecheck.binding.aggregates import aggregate
from rulecheck.binding.arithmetic import binary, literal, mismatch, negative
from rulecheck.binding.bound import BROKEN, Bound, Broken, Choices, Date, Number, Truth, Words, kind_of
from rulecheck.binding.comparing import all_of, any_of, opposite, truth
from rulecheck.binding.functions import call
from rulecheck.binding.names import bind_member, bind_name
from rulecheck.binding.scope import Scope
from rulecheck.formula.syntax import (
    Aggregate,
    Binary,
    Call,
    Comparison,
    Conditional,
    Day,
    Flag,
    Joined,
    Listing,
    Member,
    Name,
    Negative,
    Not,
    Syntax,
    Text,
)
from rulecheck.formula.syntax import Number as NumberSyntax
from rulecheck.quantity.reading_values import read_day
from rulecheck.reading.nodes import Located


def express(scope: Scope, syntax: Syntax) -> Bound:
    """Bind one node; faults are noted in the shared bundle and leave `BROKEN`."""
    match syntax:
        case NumberSyntax():
            return literal(scope, syntax)
        case Day():
            day = read_day(Located(syntax.text, syntax.span), scope.shared.faults)
            return Date(scope.bank.day(day)) if day else BROKEN
        case Text():
            return Words(scope.bank.text(syntax.text))
        case Flag():
            return Truth(scope.bank.flag(syntax.value))
        case Name():
            return bind_name(scope, syntax)
        case Member():
            return bind_member(scope, syntax)
        case Call():
            return call(scope, syntax)
        case Listing():
            members = tuple(scope.express(item) for item in syntax.items)
            return BROKEN if any(isinstance(item, Broken) for item in members) else Choices(members)
        case Negative():
            return negative(scope, syntax)
        case Binary():
            return binary(scope, syntax)
        case Comparison():
            return truth(scope, syntax)
        case Not():
            return _not(scope, syntax)
        case Joined():
            return _joined(scope, syntax)
        case Conditional():
            return _conditional(scope, syntax)
        case Aggregate():
            return aggregate(scope, syntax)
        case _:
            assert_never(syntax)


def flag(scope: Scope, syntax: Syntax, what: str) -> Truth | Broken:
    """An expression that has to be a condition."""
    bound = scope.express(syntax)
    if isinstance(bound, (Truth, Broken)):
        return bound
    return scope.fault(
        "kind-mismatch",
        f"{what} takes a condition, and this is {kind_of(bound)}",
        syntax.span,
        expected="a comparison or a flag",
    )


def _not(scope: Scope, syntax: Not) -> Bound:
    operand = flag(scope, syntax.operand, "'not'")
    return operand if isinstance(operand, Broken) else Truth(opposite(scope, operand.term))


def _joined(scope: Scope, syntax: Joined) -> Bound:
    flags = [flag(scope, operand, f"'{syntax.word}'") for operand in syntax.operands]
    terms = [item.term for item in flags if isinstance(item, Truth)]
    if len(terms) < len(flags):
        return BROKEN
    return Truth(all_of(scope, terms) if syntax.word == "and" else any_of(scope, terms))


def _arms(scope: Scope, syntax: Conditional, condition: Truth | Broken) -> tuple[Bound, Bound]:
    """Both arms; one that a settled condition leaves aside is held against its dimensions, and nothing rests on it."""
    settled = condition.term.value if isinstance(condition, Truth) and condition.term.kind == "constant" else None
    if settled is not None and not scope.loop:
        scope.arms[syntax] = syntax.then if settled else syntax.otherwise
    aside = replace(scope, uses={}, touched=set(), figures=set())
    then = (aside if settled is False else scope).express(syntax.then)
    return then, (aside if settled is True else scope).express(syntax.otherwise)


def _conditional(scope: Scope, syntax: Conditional) -> Bound:
    condition = flag(scope, syntax.condition, "'if'")
    then, otherwise = _arms(scope, syntax, condition)
    if isinstance(condition, Broken) or isinstance(then, Broken) or isinstance(otherwise, Broken):
        return BROKEN
    if isinstance(then, Number) and isinstance(otherwise, Number) and then.dimension != otherwise.dimension:
        return mismatch(scope, "choose", syntax.then, then, syntax.otherwise, otherwise, syntax.span)
    if type(then) is not type(otherwise) or not isinstance(then, (Number, Truth, Words, Date)):
        return scope.fault(
            "kind-mismatch",
            f"the arms of 'if' are {kind_of(then)} and {kind_of(otherwise)}",
            syntax.span,
            expected="two numbers, flags, texts or dates",
        )
    assert isinstance(otherwise, (Number, Truth, Words, Date))
    term = scope.bank.branch(condition.term, then.term, otherwise.term, syntax.span)
    if isinstance(then, Number) and isinstance(otherwise, Number):
        return Number(term, then.unit or otherwise.unit, then.counted and otherwise.counted)
    if isinstance(then, Words) and isinstance(otherwise, Words):
        return Words(term, tuple(dict.fromkeys((*then.choices, *otherwise.choices))))
    assert not isinstance(then, Number)
    return replace(then, term=term)
