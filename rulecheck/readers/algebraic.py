"""Proofs that a term with roots has a certain rational value, for where balls only tighten around it.

`sqrt(2) * sqrt(8)` is 4: no precision shows it, algebra does. Only terms that are made of rationals by
arithmetic and roots (and sines of multiples of 15 deg) are tried, and only small ones.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from fractions import Fraction
from typing import Any

from rulecheck.graph.terms import Term
from rulecheck.operations.exact import PiNumber, Rational, pi_multiple
from rulecheck.operations.real_algebraic import (
    AlgebraicNumber,
    algebraic,
    is_zero,
    raised,
    sign,
    sine_of_half_turns,
)

# Beyond these a proof is not tried: the cost grows steeply with the product of the roots' degrees.
HIGHEST_DEGREE = 16
MOST_STEPS = 200
MOST_BITS = 2000


class _TooHard(Exception):
    """The term is no algebraic number, or too large for a proof."""


class Algebraic:
    """Proves equalities of terms; `settled` holds the exact values that are known already."""

    def __init__(self, settled: Mapping[int, Any]) -> None:
        self._settled = settled

    def equals(self, term: Term, candidate: Rational) -> bool:
        """True where it is proved that the term is `candidate`; False proves nothing."""
        if not candidate and term.operation is not None and term.operation.name == "subtract":
            return self.same(*term.arguments)
        return self._proves(lambda work: work.value(term) - algebraic(candidate))

    def same(self, left: Term, right: Term) -> bool:
        """True where it is proved that two terms are equal; False proves nothing."""
        return left is right or self._proves(lambda work: work.value(left) - work.value(right))

    def _proves(self, difference: Callable[[_Work], AlgebraicNumber]) -> bool:
        try:
            return is_zero(difference(_Work(self._settled)))
        except _TooHard:
            return False


class _Work:
    """One proof: values found so far, and what it has cost."""

    def __init__(self, settled: Mapping[int, Any]) -> None:
        self._settled = settled
        self._found: dict[int, AlgebraicNumber] = {}
        self._degree = 1

    def value(self, root: Term) -> AlgebraicNumber:
        waiting = [root]
        while waiting:
            term = waiting[-1]
            needed = self._needed(term)
            pending = [part for part in needed if part.index not in self._found]
            if pending:
                waiting.extend(pending)
            else:
                waiting.pop()
                if term.index not in self._found:
                    self._found[term.index] = self._step(term, needed)
            if len(waiting) + len(self._found) > MOST_STEPS:
                raise _TooHard
        return self._found[root.index]

    def _needed(self, term: Term) -> Sequence[Term]:
        if isinstance(self._settled.get(term.index), Rational) or self._sine(term) is not None:
            return ()
        if term.kind == "branch":
            condition = self._settled.get(term.arguments[0].index)
            if not isinstance(condition, bool):
                raise _TooHard
            return (term.arguments[1 if condition else 2],)
        if term.kind != "apply":
            raise _TooHard
        return term.arguments

    def _step(self, term: Term, needed: Sequence[Term]) -> AlgebraicNumber:
        value = self._settled.get(term.index)
        if isinstance(value, Rational):
            if value.height_bits() > MOST_BITS:
                raise _TooHard
            return algebraic(value)
        if term.kind == "branch":
            return self._found[needed[0].index]
        sine = self._sine(term)
        if sine is not None:
            self._charge(4)
            return sine
        return self._apply(term, [self._found[part.index] for part in needed])

    def _apply(self, term: Term, values: list[AlgebraicNumber]) -> AlgebraicNumber:
        name = term.operation.name if term.operation else ""
        if name == "sqrt":
            return self._power(values[0], Fraction(1, 2))
        if name.startswith("power["):
            return self._power(values[0], Fraction(name[len("power[") : -1]))
        rule = _RULES.get(name)
        if rule is None or (name == "divide" and is_zero(values[1])):
            raise _TooHard
        return rule(values)

    def _power(self, base: AlgebraicNumber, exponent: Fraction) -> AlgebraicNumber:
        found = sign(base)
        if not found or (found < 0 and exponent.denominator != 1) or abs(exponent.numerator) > HIGHEST_DEGREE:
            if not found and exponent > 0:
                return base
            raise _TooHard
        self._charge(exponent.denominator)
        return raised(base, exponent)

    def _sine(self, term: Term) -> AlgebraicNumber | None:
        if term.operation is None or term.operation.name not in ("sin", "cos"):
            return None
        angle = self._settled.get(term.arguments[0].index)
        multiple = pi_multiple(angle) if isinstance(angle, (Rational, PiNumber)) else None
        if multiple is None:
            return None
        return sine_of_half_turns(multiple if term.operation.name == "sin" else multiple + Rational(1, 2))

    def _charge(self, degree: int) -> None:
        self._degree *= degree
        if self._degree > HIGHEST_DEGREE:
            raise _TooHard


def _least(values: Sequence[AlgebraicNumber]) -> AlgebraicNumber:
    found = values[0]
    for value in values[1:]:
        if sign(value - found) < 0:
            found = value
    return found


_RULES: dict[str, Callable[[list[AlgebraicNumber]], AlgebraicNumber]] = {
    "add": lambda values: values[0] + values[1],
    "subtract": lambda values: values[0] - values[1],
    "multiply": lambda values: values[0] * values[1],
    "divide": lambda values: values[0] / values[1],
    "negate": lambda values: -values[0],
    "abs": lambda values: values[0] if sign(values[0]) >= 0 else -values[0],
    "total": lambda values: sum(values[1:], values[0]),
    "minimum": _least,
    "maximum": lambda values: -_least([-value for value in values]),
}
