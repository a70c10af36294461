"""The gradient reader: all first derivatives of a number at once, accumulated backwards over its terms.

Values come from the exact reader, slopes from the operations' own partials, in double precision: sensitivities are for
ordering, spread and prediction, and never decide a verdict. At a kink (two operands of a minimum that tie) the slope is
that of the operand which binds; `kinked` says so.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field

from rulecheck.graph.terms import Bank, Term, cone
from rulecheck.operations.exact import Ball
from rulecheck.readers.exact import START_BITS, ExactReader
from rulecheck.readers.implicit import implicit_partials, local_partials


@dataclass(frozen=True, slots=True)
class Gradient:
    """Slopes by the path of the input, in SI units; inputs that do not matter are left out."""

    slopes: dict[str, float] = field(default_factory=dict)
    kinked: bool = False


class GradientReader:
    """Gradients of the terms of one graph at the values of one exact reader.

    >>> from fractions import Fraction
    >>> from rulecheck.operations.arithmetic import multiply
    >>> from rulecheck.operations.values import Monomial
    >>> from rulecheck.quantity.dimension import PURE
    >>> bank = Bank()
    >>> x = bank.input("x", "number", PURE)
    >>> square = bank.apply(multiply, [x, x], PURE)
    >>> GradientReader(bank, ExactReader(bank, {"x": Monomial(Fraction(3))})).gradient(square).slopes
    {'x': 6.0}
    """

    def __init__(self, bank: Bank, reader: ExactReader) -> None:
        self._bank, self._reader = bank, reader
        self._values: dict[int, float] = {}
        self._partials: dict[int, tuple[float, ...]] = {}

    def gradient(self, root: Term) -> Gradient | None:
        """The gradient of a number; None where it has no value or no slope there."""
        if self._reader.approximate(root) is None:
            return None
        slopes: dict[int, float] = {root.index: 1.0}
        found: dict[str, float] = {}
        kinked = False
        for term in reversed(cone([root])):
            slope = slopes.get(term.index, 0.0)
            if not slope:
                continue
            if term.kind == "input" and term.sort == "number":
                found[term.path] = found.get(term.path, 0.0) + slope
                continue
            parts = self._parts(term)
            kinked = kinked or self._is_kinked(term)
            for argument, partial in zip(term.arguments, parts, strict=True):
                if partial:
                    slopes[argument.index] = slopes.get(argument.index, 0.0) + slope * partial
        if any(math.isnan(slope) for slope in found.values()):
            return None
        return Gradient(dict(sorted(found.items())), kinked)

    def _parts(self, term: Term) -> tuple[float, ...]:
        if term.index not in self._partials:
            self._partials[term.index] = self._computed(term)
        return self._partials[term.index]

    def _computed(self, term: Term) -> tuple[float, ...]:
        if term.kind == "solve":
            found = self._reader.ball(term, START_BITS)
            if not isinstance(found, Ball):
                return (math.nan,) * len(term.arguments)
            return implicit_partials(term, found, self._reader.enclosing(term))
        if term.kind == "branch":
            taken = self._reader.truth(term.arguments[0])
            return (0.0, 1.0 if taken is True else 0.0, 1.0 if taken is False else 0.0)
        return local_partials(term, [self._value(argument) for argument in term.arguments])

    def _is_kinked(self, term: Term) -> bool:
        operation = term.operation
        if operation is None or operation.binds is None or len(term.arguments) < 2:
            return False
        values = [self._value(argument) for argument in term.arguments if argument.sort == "number"]
        best = values[operation.binds(values)] if values else 0.0
        return sum(value == best for value in values) > 1

    def _value(self, term: Term) -> float:
        if term.index not in self._values:
            found = self._reader.approximate(term)
            self._values[term.index] = math.nan if found is None else found
        return self._values[term.index]
