"""The exact reader over a stretch of one input: what is certain on the whole of it, by ball arithmetic."""

from __future__ import annotations

from collections.abc import Iterable
from fractions import Fraction
from typing import Any

from rulecheck.graph.terms import Bank, Inputs, Term
from rulecheck.operations.exact import Ball, from_fraction
from rulecheck.operations.values import Monomial, Unknown
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.external import operands

BITS = 64


class SegmentReader:
    """Evaluates terms while one input runs over an interval and all others stay.

    >>> from rulecheck.operations.comparison import at_most
    >>> from rulecheck.quantity.dimension import PURE
    >>> bank = Bank()
    >>> holds = bank.apply(at_most, [bank.input("x", "number", PURE), bank.number(3)], PURE)
    >>> inputs = {"x": Monomial(Fraction(1))}
    >>> along = SegmentReader(bank, inputs, ExactReader(bank, inputs), "x")
    >>> along.truths([holds], Fraction(1), Fraction(2)), along.truths([holds], Fraction(2), Fraction(4))
    ([True], [None])
    """

    def __init__(
        self, bank: Bank, inputs: Inputs, base: ExactReader, path: str, moving: set[int] | None = None
    ) -> None:
        """`moving` are the indices of what rests on the input, where the caller knows them of all that it asks for."""
        self._path = path
        value = inputs[path]
        assert isinstance(value, Monomial)
        self._power = value.power
        self._moving = resting_on(bank, path) if moving is None else moving
        still = [(index, found) for index, found in base.known() if index not in self._moving]
        # One set of inputs for both readers, in which one value is exchanged.
        self._inputs: dict[str, Any] = dict(inputs)
        self._points = ExactReader(bank, self._inputs)
        self._stretches = ExactReader(bank, self._inputs, start_bits=BITS, most_bits=BITS, both_arms=True)
        for reader in (self._points, self._stretches):
            reader.take(still)

    def moves(self, term: Term) -> bool:
        """True where a term rests on the input."""
        return term.index in self._moving

    def truths(self, flags: Iterable[Term], low: Fraction, high: Fraction) -> list[bool | None]:
        """What each flag certainly is from `low` to `high` (SI, without the power of pi); None where it is not certain."""
        middle, radius = from_fraction((low + high) / 2), from_fraction((high - low) / 2)
        ball = Ball(middle, Ball(radius).upper()) if radius else Ball(middle)
        if self._power:
            ball = ball * Ball.pi() ** self._power
        self._exchange(self._stretches, ball)
        return [_certain(self._stretches.truth(flag)) for flag in flags]

    def at(self, flags: Iterable[Term], point: Fraction) -> list[bool | None]:
        """What each flag is at one point, exactly."""
        self._exchange(self._points, Monomial(point, self._power))
        return [_certain(self._points.truth(flag)) for flag in flags]

    def numbers(self, terms: Iterable[Term], point: Fraction) -> list[Fraction | None]:
        """Numbers at one point, each where it is rational."""
        self._exchange(self._points, Monomial(point, self._power))
        return [self._points.exact_fraction(term) for term in terms]

    def _exchange(self, reader: ExactReader, value: object) -> None:
        self._inputs[self._path] = value
        reader.forget(self._moving)


def _certain(truth: bool | Unknown) -> bool | None:
    return None if isinstance(truth, Unknown) else truth


def resting_on(bank: Bank, path: str) -> set[int]:
    """All terms that rest on an input; arguments come first, so one pass is enough."""
    found: set[int] = set()
    for term in bank.terms:
        if (term.kind == "input" and term.path == path) or any(part.index in found for part in operands(term)):
            found.add(term.index)
    return found
