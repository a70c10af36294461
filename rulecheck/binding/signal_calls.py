"""The functions of signals: `peak`, `integral`, `rolling_mean`, and how long a condition on samples holds."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field, replace
from fractions import Fraction
from typing import cast

from rulecheck.binding.bound import BROKEN, Bound, Broken, Number, Signal, kind_of
from rulecheck.binding.scope import Scope
from rulecheck.binding.signal_arithmetic import calculated, made, overlapping, rational
from rulecheck.binding.signal_rates import note_step, told_time, too_coarse
from rulecheck.diagnostics import Span
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import Binary, Call, Comparison, Joined, Not, Syntax
from rulecheck.graph.conditions import Use
from rulecheck.graph.terms import Term
from rulecheck.operations.samples import Samples, greatest, integral, rolling_mean, time_of_peak
from rulecheck.operations.signals import Against, Joint, Order, Sampled, base_of, held_time, leaves
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import TIME
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.units import find_unit

_FLIPPED: dict[str, Order] = {"<=": ">", "<": ">=", ">=": "<", ">": "<=", "==": "!=", "!=": "=="}
_MIRRORED: dict[str, Order] = {"<=": ">=", "<": ">", ">=": "<=", ">": "<", "==": "==", "!=": "!="}


def signal_call(scope: Scope, syntax: Call) -> Bound:
    """Bind a call of one of these functions, and note a number among what a formula uses."""
    due = 2 if syntax.function == "rolling_mean" else 1
    if len(syntax.arguments) != due:
        told = f"'{syntax.function}' takes {due} argument{'s' if due > 1 else ''}, not {len(syntax.arguments)}"
        return scope.fault("wrong-arguments", told, syntax.span, expected=_FORMS[syntax.function])
    bound = SIGNALS[syntax.function](scope, syntax)
    if isinstance(bound, Number) and not scope.loop:
        text = show(syntax)
        scope.uses.setdefault(text, Use(text, "", bound.term, bound.unit))
    return bound


def _signal(scope: Scope, syntax: Call) -> Signal | Broken:
    bound = scope.express(syntax.arguments[0])
    if isinstance(bound, (Signal, Broken)):
        return bound
    told = f"'{syntax.function}' takes a signal, and '{show(syntax.arguments[0])}' is {kind_of(bound)}"
    return scope.fault("kind-mismatch", told, syntax.arguments[0].span, expected=_FORMS[syntax.function])


def _peak(scope: Scope, syntax: Call) -> Bound:
    signal = _signal(scope, syntax)
    if isinstance(signal, Broken):
        return BROKEN
    place = f"closest at {told_time(time_of_peak(signal.samples))}" if signal.samples is not None else ""
    return Number(_figure(scope, "peak", signal, greatest), signal.unit, signal.counted, place=place)


def _integral(scope: Scope, syntax: Call) -> Bound:
    signal = _signal(scope, syntax)
    if isinstance(signal, Broken):
        return BROKEN
    whole = replace(signal, dimension=signal.dimension * TIME)
    return Number(_figure(scope, "integral", whole, integral), find_unit("s") if signal.dimension.is_pure else None)


def _figure(scope: Scope, name: str, signal: Signal, rule: Callable[[Samples], Monomial]) -> Term:
    """One number of a signal: a constant, worked out once."""
    if signal.samples is None:
        return scope.missing(signal.lacking, "number", signal.dimension, signal.span)
    key = ("figure of samples", name, id(signal.samples))
    if key not in scope.shared.memo:
        scope.shared.memo[key] = rule(signal.samples)
    value: Monomial = scope.shared.memo[key]
    return scope.bank.constant(value, "number", signal.dimension)


def _rolling_mean(scope: Scope, syntax: Call) -> Bound:
    signal = _signal(scope, syntax)
    window = scope.express(syntax.arguments[1])
    if isinstance(signal, Broken) or isinstance(window, Broken):
        return BROKEN
    where = syntax.arguments[1]
    if not isinstance(window, Number) or window.dimension != TIME:
        found = name_of(window.dimension) if isinstance(window, Number) else kind_of(window)
        return scope.fault("kind-mismatch", f"a window is a time, and this is {found}", where.span, expected="500 ms")
    value = rational(scope, window, where, "the window of a rolling mean")
    if isinstance(value, Broken):
        return BROKEN
    if value[0] <= 0:
        return scope.fault("bad-value", "a window is longer than nothing", where.span, expected="such as 500 ms")
    return _averaged(scope, replace(signal, counted=False), value[0])


def _averaged(scope: Scope, signal: Signal, window: Fraction) -> Signal:
    given = signal.samples
    if given is None:
        return signal
    if given.base.widest > window:
        return replace(signal, samples=None, lacking=too_coarse(signal.path, window, given.base.widest))
    mean = made(scope, ("mean", id(given), window), signal, lambda: rolling_mean(given, window))
    if mean.samples is None:
        lacking = (
            f"a record of {signal.path} of {told_time(window)} at least (it is {told_time(given.base.length)} long)"
        )
        return replace(mean, lacking=lacking)
    return mean


# --- conditions on samples -------------------------------------------------------------------------------------------


@dataclass(slots=True)
class _Reading:
    """A condition as it is read: its limits in order, and what is missing."""

    scope: Scope
    function: str
    limits: list[Term] = field(default_factory=list)
    lacking: dict[str, Span | None] = field(default_factory=dict)
    paths: dict[str, None] = field(default_factory=dict)


def _time(scope: Scope, syntax: Call) -> Bound:
    reading = _Reading(scope, syntax.function)
    condition = _condition(reading, syntax.arguments[0], negated=False)
    if isinstance(condition, Broken):
        return BROKEN
    seconds = find_unit("s")
    if condition is None:
        what = " and ".join(reading.lacking)
        return Number(scope.missing(what, "number", TIME, next(iter(reading.lacking.values()))), seconds)
    base = base_of(condition)
    path = " and ".join(reading.paths)
    if len(base.ticks) < 2:
        return Number(scope.missing(f"records of {path} that overlap", "number", TIME, syntax.span), seconds)
    leaf_keys = tuple((id(leaf.samples), leaf.order, leaf.limit) for leaf in leaves(condition))
    shape = (_shape(condition), leaf_keys, tuple(term.index for term in reading.limits))
    key = ("time of a condition", syntax.function, shape)
    if key not in scope.shared.memo:
        operation = held_time(syntax.function, condition, len(reading.limits))
        term = scope.apply(operation, reading.limits, syntax.span)
        assert term is not None
        note_step(scope, term, base.widest, path)
        scope.shared.memo[key] = term
    return Number(scope.shared.memo[key], seconds)


def _shape(condition: Sampled) -> str:
    if isinstance(condition, Against):
        return "."
    return f"{'and' if condition.every else 'or'}({''.join(map(_shape, condition.parts))})"


def _condition(reading: _Reading, syntax: Syntax, *, negated: bool) -> Sampled | Broken | None:
    """A condition, None where a signal of it is missing; `negated` pushes `not` down to the comparisons."""
    if isinstance(syntax, Not):
        return _condition(reading, syntax.operand, negated=not negated)
    if isinstance(syntax, Joined):
        parts = [_condition(reading, part, negated=negated) for part in syntax.operands]
        return _joint(parts, (syntax.word == "and") != negated)
    if isinstance(syntax, Comparison) and syntax.within is None:
        return _chain(reading, syntax, negated)
    told = f"'{reading.function}' takes a condition on a signal, and this is none"
    expected = f"{reading.function}(signals.brake > 5 V), also joined by and, or, not"
    return reading.scope.fault("kind-mismatch", told, syntax.span, expected=expected)


def _joint(parts: list[Sampled | Broken | None], every: bool) -> Sampled | Broken | None:
    if any(isinstance(part, Broken) for part in parts):
        return BROKEN
    known = tuple(part for part in parts if part is not None and not isinstance(part, Broken))
    if len(known) < len(parts):
        return None
    return known[0] if len(known) == 1 else Joint(known, every)


def _chain(reading: _Reading, syntax: Comparison, negated: bool) -> Sampled | Broken | None:
    bound = [reading.scope.express(operand) for operand in syntax.operands]
    if any(isinstance(item, Broken) for item in bound):
        return BROKEN
    pairs = zip(bound, syntax.operators, bound[1:], syntax.operands, syntax.operands[1:], strict=False)
    return _joint([_pair(reading, *pair, span=syntax.span, negated=negated) for pair in pairs], not negated)


def _pair(
    reading: _Reading, left: Bound, operator: str, right: Bound, first: Syntax, second: Syntax, *, span: Span, negated: bool
) -> Sampled | Broken | None:  # fmt: skip
    scope = reading.scope
    for side, part in ((left, first), (right, second)):
        if not isinstance(side, (Number, Signal)):
            told = f"a sample is held against a number, and '{show(part)}' is {kind_of(side)}"
            return scope.fault("kind-mismatch", told, part.span, expected="a number or a signal")
    assert isinstance(left, (Number, Signal)) and isinstance(right, (Number, Signal))
    if isinstance(left, Number) and isinstance(right, Number):
        told = f"'{show(first)} {operator} {show(second)}' holds no signal"
        return scope.fault("kind-mismatch", told, span, advice="put what does not change over time under 'when'")
    if left.dimension != right.dimension:
        told = f"'{show(first)}' is {name_of(left.dimension)}, '{show(second)}' is {name_of(right.dimension)}"
        return scope.fault("dimension-mismatch", told, span, advice="the two sides must be of one dimension")
    if operator in ("==", "!=") and not (left.counted and right.counted):
        told = f"'{show(first)} {operator} {show(second)}' compares measured samples for equality"
        return scope.fault("formula-syntax", told, span, expected='abs(a - b) <= width, or a signal in unit "1"')
    if operator not in _FLIPPED:
        return scope.fault("kind-mismatch", f"samples are not held against a list by '{operator}'", span)
    order = _FLIPPED[operator] if negated else cast(Order, operator)
    if isinstance(left, Signal) and isinstance(right, Signal):
        apart = calculated(scope, Binary("-", first, second, span=span), left, right)
        return _against(reading, apart, order, None)
    if isinstance(left, Signal):
        return _against(reading, left, order, right)
    return _against(reading, right, _MIRRORED[order], left)


def _against(reading: _Reading, signal: Bound, order: Order, limit: Bound | None) -> Sampled | Broken | None:
    if not isinstance(signal, Signal):
        return BROKEN
    reading.paths.setdefault(signal.path)
    whole = overlapping(signal)
    if whole.samples is None:
        reading.lacking.setdefault(whole.lacking, whole.span)
        return None
    scope = reading.scope
    term = limit.term if isinstance(limit, Number) else scope.bank.number(0, signal.dimension)
    reading.limits.append(term)
    return Against(whole.samples, order, len(reading.limits) - 1)


SIGNALS: dict[str, Callable[[Scope, Call], Bound]] = {
    "peak": _peak,
    "longest": _time,
    "duration": _time,
    "rolling_mean": _rolling_mean,
    "integral": _integral,
}
"""The functions of signals by name."""
_FORMS = {
    "peak": "peak(signal)",
    "longest": "longest(signal > limit)",
    "duration": "duration(signal > limit)",
    "rolling_mean": "rolling_mean(signal, 500 ms)",
    "integral": "integral(signal)",
}
