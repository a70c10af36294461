"""The margin of another rule as one number: least for `and`, greatest for `or`, by relative margin."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

from rulecheck.binding.bound import Bound, Number
from rulecheck.binding.comparing import all_of, any_of
from rulecheck.binding.conditions import holds
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.graph.conditions import AnyOf, BoundRule, Condition, Either, Part
from rulecheck.graph.terms import Term
from rulecheck.operations.arithmetic import divide
from rulecheck.operations.comparison import at_most
from rulecheck.operations.values import Reason
from rulecheck.quantity.units import Unit


@dataclass(frozen=True, slots=True)
class _Room:
    """A margin with what it is measured by; `counts` is a flag: whether it takes part at all."""

    margin: Term
    scale: Term | None
    unit: Unit | None
    counts: Term


class _Mixed(Exception):
    """Margins of several dimensions cannot become one number."""


def margin_term(scope: Scope, rule: BoundRule, span: Span) -> Bound:
    """`margin(x)` as a number. Undefined where the rule does not apply or is decided without a number."""
    rooms: list[_Room] = []
    unsettled: list[Term] = []
    if any(case.envelope is not None for case in rule.cases):
        told = f"rule '{rule.name}' has an envelope, and its margin at the worst point of it is no number of a formula"
        return scope.fault("kind-mismatch", told, span, expected=f"rule({rule.name}), which says whether it is met")
    try:
        for case in rule.cases:
            room = _room(scope, case.condition, span)
            if room is not None:
                rooms.append(replace(room, counts=all_of(scope, [case.applies, room.counts])))
            else:
                unsettled.append(_settled(scope, case.applies, holds(scope, case.condition)))
        best = _best(scope, rooms, least=True) or _room_of_shape(scope, rule, span)
    except _Mixed:
        return scope.fault("dimension-mismatch", f"the margins of rule '{rule.name}' are of several dimensions", span)
    if best is None:
        return scope.fault("kind-mismatch", f"rule '{rule.name}' has no part with a number, and so no margin", span)
    nothing = _undefined(scope, best, f"rule '{rule.name}' does not apply", span)
    term = scope.bank.branch(best.counts, best.margin, nothing)
    decided = _undefined(scope, best, f"rule '{rule.name}' is decided without a number", span)
    return Number(scope.bank.branch(all_of(scope, unsettled), term, decided), best.unit)


def _room_of_shape(scope: Scope, rule: BoundRule, span: Span) -> _Room | None:
    """The kind of margin of a rule none of whose cases has one, since what it is about is missing."""
    shape: Condition | None = scope.shared.memo.get(("shape", rule.ruleset, rule.name))
    room = None if shape is None else _room(scope, shape, span)
    return None if room is None else replace(room, counts=scope.bank.flag(False))


def _settled(scope: Scope, applies: Term, met: Term) -> Term:
    """Whether a case without a number leaves the margin to the others: it does not apply, or it is met."""
    return scope.bank.branch(applies, met, scope.bank.flag(True))


def _undefined(scope: Scope, room: _Room, why: str, span: Span) -> Term:
    return scope.bank.unknown(Reason("undefined", why, span), "number", room.margin.dimension)


def _room(scope: Scope, condition: Condition, span: Span) -> _Room | None:
    """The room of a condition; None where no part of it has a number."""
    yes = scope.bank.flag(True)
    if isinstance(condition, Part):
        return None if condition.margin is None else _Room(condition.margin, condition.scale, condition.unit, yes)
    if isinstance(condition, Either):
        return _room_of_either(scope, condition, span)
    alternatives = isinstance(condition, AnyOf)
    rooms: list[_Room] = []
    bare: list[Term] = []
    for part in condition.parts:
        room = _room(scope, part, span)
        rooms.extend([room] if room is not None else [])
        bare.extend([holds(scope, part)] if room is None else [])
    best = _best(scope, rooms, least=not alternatives)
    if best is None or not bare:
        return best
    # A flag that holds adds no limit to `and`, and one that fails drops out of `or`; else it decides without a number.
    decided = _undefined(scope, best, "a part without a number decides", span)
    if alternatives:
        return replace(best, margin=scope.bank.branch(any_of(scope, bare), decided, best.margin))
    return replace(best, margin=scope.bank.branch(all_of(scope, bare), best.margin, decided))


def _room_of_either(scope: Scope, condition: Either, span: Span) -> _Room | None:
    """The room of the arm that is taken; where that has no number, the conditional has none."""
    then, otherwise = _room(scope, condition.then, span), _room(scope, condition.otherwise, span)
    known = then or otherwise
    if known is None:
        return None
    if then is not None and otherwise is not None and then.margin.dimension != otherwise.margin.dimension:
        raise _Mixed
    decided = _undefined(scope, known, "a part without a number decides", span)
    margins = [decided if room is None else room.margin for room in (then, otherwise)]
    scales = [None if room is None else room.scale for room in (then or known, otherwise or known)]
    scale = None
    if scales[0] is not None and scales[1] is not None:
        scale = scope.bank.branch(condition.chooses, scales[0], scales[1])
    return replace(known, margin=scope.bank.branch(condition.chooses, margins[0], margins[1]), scale=scale)


def _best(scope: Scope, rooms: Sequence[_Room], *, least: bool) -> _Room | None:
    """The least or the greatest of those that count."""
    best: _Room | None = None
    for room in rooms:
        if best is not None and best.margin.dimension != room.margin.dimension:
            raise _Mixed
        best = room if best is None else _better(scope, best, room, least=least)
    return best


def _better(scope: Scope, first: _Room, second: _Room, *, least: bool) -> _Room:
    chosen = _choose(scope, first, second, least=least)
    branch = scope.bank.branch
    both_margins = branch(first.counts, branch(second.counts, chosen.margin, first.margin), second.margin)
    scale = chosen.scale
    if scale is not None and first.scale is not None and second.scale is not None:
        scale = branch(first.counts, branch(second.counts, scale, first.scale), second.scale)
    return _Room(both_margins, scale, chosen.unit, any_of(scope, [first.counts, second.counts]))


def _choose(scope: Scope, first: _Room, second: _Room, *, least: bool) -> _Room:
    keys = [_relative(scope, room) for room in (first, second)]
    small, large = (keys[0], keys[1]) if least else (keys[1], keys[0])
    if small.dimension != large.dimension:
        small, large = (first.margin, second.margin) if least else (second.margin, first.margin)
    chosen = scope.apply(at_most, [small, large], None)
    assert chosen is not None
    margin = scope.bank.branch(chosen, first.margin, second.margin)
    scale = scope.bank.branch(chosen, first.scale, second.scale) if first.scale and second.scale else None
    return _Room(margin, scale, first.unit or second.unit, first.counts)


def _relative(scope: Scope, room: _Room) -> Term:
    if room.scale is None:
        return room.margin
    made = scope.apply(divide, [room.margin, room.scale], None)
    assert made is not None
    return made
