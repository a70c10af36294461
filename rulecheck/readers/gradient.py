"""The gradient reader: all first derivatives of a number at once, accumulated backwards over its terms.

Values come from the exact reader, slopes from the operations' own partials, in double precision: sensitivities are for
ordering, spread and prediction, and never decide a verdict. At a kink (operands of a minimum that tie, a magnitude at
zero, a branch on its threshold) a number has one slope to each side; both are given, from one sweep forwards for each
input and side. Where a branch jumps on its threshold there is no slope to the side of the other arm.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field

from rulecheck.graph.terms import Bank, Term, cone
from rulecheck.model.solver import Argument
from rulecheck.operations.exact import Ball, to_ball
from rulecheck.readers.applying import START_BITS
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.external import slopes
from rulecheck.readers.implicit import implicit_partials, local_partials
from rulecheck.readers.kinks import Kinks


@dataclass(frozen=True, slots=True)
class Gradient:
    """Slopes by the path of the input, in SI units; inputs that do not matter are left out.

    Where `kinked`, `left` and `right` have the slopes towards smaller and larger values of those inputs whose two
    slopes differ; `slopes` has that of the operand which binds. A slope that is infinite says that the number jumps.
    `differenced` says that a solver stands behind the number, whose own slopes are central differences.
    """

    slopes: dict[str, float] = field(default_factory=dict)
    kinked: bool = False
    left: dict[str, float] = field(default_factory=dict)
    right: dict[str, float] = field(default_factory=dict)
    differenced: bool = False

    def sides(self, path: str) -> tuple[float, float]:
        """The slopes towards smaller and towards larger values of an input.

        >>> Gradient({"x": 1.0}, True, {"x": 1.0}, {"x": 2.0}).sides("x")
        (1.0, 2.0)
        """
        usual = self.slopes.get(path, 0.0)
        return self.left.get(path, usual), self.right.get(path, usual)


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
        self._kinks = Kinks(bank, reader, self.value, self.partials)

    def gradients(self, roots: Iterable[Term]) -> list[Gradient | None]:
        """The gradient of each number; what they share is evaluated once."""
        return [self.gradient(root) for root in roots]

    def gradient(self, root: Term) -> Gradient | None:
        """The gradient of a number; None where it has no value or no slope there."""
        if self._reader.approximate(root) is None:
            return None
        terms = cone([root])
        slopes: dict[int, float] = {root.index: 1.0}
        found: dict[str, float] = {}
        kinked: list[Term] = []
        differenced = False
        for term in reversed(terms):
            slope = slopes.get(term.index, 0.0)
            if not slope:
                continue
            if term.kind == "input" and term.sort == "number":
                found[term.path] = found.get(term.path, 0.0) + slope
                continue
            differenced = differenced or term.kind == "external"
            if self._kinks.at(term):
                kinked.append(term)
            for argument, partial in zip(term.arguments, self.partials(term), strict=True):
                if partial:
                    slopes[argument.index] = slopes.get(argument.index, 0.0) + slope * partial
        if any(math.isnan(slope) for slope in found.values()):
            return None
        left, right = self._kinks.sides(root, terms, kinked, found) if kinked else ({}, {})
        return Gradient(dict(sorted(found.items())), bool(kinked), left, right, differenced)

    def along(self, root: Term, steps: Mapping[str, float]) -> float | None:
        """The first-order change of a number when several inputs move together; None where it has no slope.

        At a kink this is not the sum of what each input does alone.
        """
        gradient = self.gradient(root)
        if gradient is None:
            return None
        if not gradient.kinked:
            return sum(slope * steps[path] for path, slope in gradient.slopes.items() if path in steps)
        return self._kinks.along(root, cone([root]), steps)

    def partials(self, term: Term) -> tuple[float, ...]:
        """The slopes of one term by its arguments."""
        if term.index not in self._partials:
            self._partials[term.index] = self._computed(term)
        return self._partials[term.index]

    def _computed(self, term: Term) -> tuple[float, ...]:
        if term.kind == "solve":
            found = self._reader.ball(term, START_BITS)
            if not isinstance(found, Ball):
                return (math.nan,) * len(term.arguments)
            return implicit_partials(term, to_ball(found), self._reader.enclosing(term))
        if term.kind == "branch":
            taken = self._reader.truth(term.arguments[0])
            return (0.0, 1.0 if taken is True else 0.0, 1.0 if taken is False else 0.0)
        if term.kind == "external":
            return slopes(term, [self._argument(argument) for argument in term.arguments])
        return local_partials(term, [self.value(argument) for argument in term.arguments])

    def _argument(self, term: Term) -> Argument:
        """What a solver is handed; None where it is not known."""
        if term.sort == "number":
            return self._reader.approximate(term)
        found = self._reader.value(term)
        return found if isinstance(found, (str, bool)) else None

    def value(self, term: Term) -> float:
        """A term as a double; not a number where it is not known."""
        if term.index not in self._values:
            found = self._reader.approximate(term)
            self._values[term.index] = math.nan if found is None else found
        return self._values[term.index]
