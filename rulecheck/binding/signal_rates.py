"""Whether a record is sampled closely enough for the time that it is held against."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

from rulecheck.binding.bound import Broken, Number
from rulecheck.binding.scope import Scope
from rulecheck.binding.signal_arithmetic import settled
from rulecheck.diagnostics import Span
from rulecheck.graph.terms import Term, cone
from rulecheck.operations.comparison import at_most
from rulecheck.operations.exact import Rational, to_fraction
from rulecheck.quantity.dimension import TIME

_STEPS = ("steps of signals",)


def note_step(scope: Scope, term: Term, step: Fraction, path: str) -> None:
    """Remember the widest step of the record that a time rests on."""
    scope.shared.memo.setdefault(_STEPS, {})[term.index] = (step, path)


def resolved(scope: Scope, left: Number, right: Number, span: Span | None) -> tuple[Number, Number]:
    """Both sides of a comparison; a time from a record whose steps are wider than the other side is unknown."""
    steps = scope.shared.memo.get(_STEPS)
    if not steps or left.dimension != TIME:
        return left, right
    return _resolved(scope, left, right, span, steps), _resolved(scope, right, left, span, steps)


def _resolved(
    scope: Scope, number: Number, limit: Number, span: Span | None, steps: dict[int, tuple[Fraction, str]]
) -> Number:
    found = [steps[term.index] for term in cone([number.term]) if term.index in steps]
    if not found:
        return number
    step, path = max(found)
    value = settled(limit.term)
    if isinstance(value, Rational):
        # No sampling resolves a time of zero: such a limit speaks of the samples themselves.
        if not 0 < to_fraction(value) < step:
            return number
        return replace(number, term=scope.missing(too_coarse(path, to_fraction(value), step), "number", TIME, span))
    enough = scope.apply(at_most, [scope.bank.number(step, TIME), limit.term], span)
    assert enough is not None
    told = f"closer samples of {path}: the widest step is {told_time(step)}, and the limit is shorter"
    return replace(number, term=scope.bank.branch(enough, number.term, scope.missing(told, "number", TIME, span), span))


def not_sampled(scope: Scope, text: str, span: Span | None) -> Broken:
    """A comparison of samples where one of a figure is due."""
    told = f"'{text}' holds for some samples and not for others"
    expected = "peak(…), longest(…) or duration(…) of a signal, held against a limit"
    return scope.fault("kind-mismatch", told, span, expected=expected)


def too_coarse(path: str, window: Fraction, step: Fraction) -> str:
    """What is missing from a record that is too coarse for a window."""
    return f"samples of {path} at most {told_time(window)} apart (the widest step is {told_time(step)})"


def told_time(seconds: Fraction) -> str:
    """A time in words, in milliseconds below a second.

    >>> told_time(Fraction(3, 100))
    '30 ms'
    """
    return f"{float(seconds * 1000):g} ms" if seconds < 1 else f"{float(seconds):g} s"
