"""The margin of another rule as one number: least for `and`, greatest for `or`, by relative margin."""

from __future__ import annotations

from dataclasses import dataclass

from rulecheck.binding.bound import Bound, Number
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.graph.conditions import AnyOf, BoundRule, Condition, Part
from rulecheck.graph.terms import Term
from rulecheck.operations.arithmetic import divide
from rulecheck.operations.comparison import at_most
from rulecheck.operations.values import Reason
from rulecheck.quantity.units import Unit


@dataclass(frozen=True, slots=True)
class _Room:
    """A margin with what it is measured by."""

    margin: Term
    scale: Term | None
    unit: Unit | None


def margin_term(scope: Scope, rule: BoundRule, span: Span) -> Bound:
    """`margin(x)` as a number. Undefined where the rule does not apply or gives no number."""
    rooms = []
    for case in rule.cases:
        room = _room(scope, case.condition)
        if room is None:
            return scope.fault(
                "kind-mismatch", f"rule '{rule.name}' has parts without a number, and so no margin", span
            )
        if case.applies.kind == "constant" and not case.applies.value:
            continue
        rooms.append(room)
    if not rooms:
        return scope.fault("kind-mismatch", f"rule '{rule.name}' has no case with a margin here", span)
    best = rooms[0]
    for room in rooms[1:]:
        best = _choose(scope, best, room, least=True)
    if any(room.margin.dimension != best.margin.dimension for room in rooms):
        return scope.fault("dimension-mismatch", f"the margins of rule '{rule.name}' are of several dimensions", span)
    term = best.margin
    for case in rule.cases:
        reason = Reason("undefined", f"rule '{rule.name}' does not apply", span)
        nothing = scope.bank.unknown(reason, "number", term.dimension)
        if len(rule.cases) == 1:
            term = scope.bank.branch(case.applies, term, nothing, span)
    return Number(term, best.unit)


def _room(scope: Scope, condition: Condition) -> _Room | None:
    if isinstance(condition, Part):
        return None if condition.margin is None else _Room(condition.margin, condition.scale, condition.unit)
    rooms = [_room(scope, part) for part in condition.parts]
    best: _Room | None = None
    for room in rooms:
        if room is None or (best is not None and best.margin.dimension != room.margin.dimension):
            return None
        best = room if best is None else _choose(scope, best, room, least=not isinstance(condition, AnyOf))
    return best


def _choose(scope: Scope, first: _Room, second: _Room, *, least: bool) -> _Room:
    keys = [_relative(scope, room) for room in (first, second)]
    small, large = (keys[0], keys[1]) if least else (keys[1], keys[0])
    if small.dimension != large.dimension:
        small, large = (first.margin, second.margin) if least else (second.margin, first.margin)
    chosen = scope.apply(at_most, [small, large], None)
    assert chosen is not None
    margin = scope.bank.branch(chosen, first.margin, second.margin)
    scale = scope.bank.branch(chosen, first.scale, second.scale) if first.scale and second.scale else None
    return _Room(margin, scale, first.unit or second.unit)


def _relative(scope: Scope, room: _Room) -> Term:
    if room.scale is None:
        return room.margin
    made = scope.apply(divide, [room.margin, room.scale], None)
    assert made is not None
    return made
