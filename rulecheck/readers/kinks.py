"""Kinks: where a number has one slope to each side, and what the slopes are.

A directional derivative follows the chain rule also through minima, magnitudes and branches that are continuous (A.
Shapiro, On concepts of directional differentiability, 1990, from memory): of operands that tie, the one that binds when
the direction is taken counts. Ties are decided by the exact reader, never by doubles.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Mapping, Sequence

from rulecheck.graph.terms import Bank, Term, cone
from rulecheck.operations.arithmetic import subtract
from rulecheck.readers.exact import ExactReader

# Two doubles further apart than this share of the larger do not tie.
_CLOSE = 1e-9
_EXTREMES = {"minimum": (1, 0), "maximum": (1, 0), "least_where": (2, 1), "greatest_where": (2, 1)}
_LEAST = ("minimum", "least_where")
_COMPARISONS = ("at_most", "below", "equal")

Value = Callable[[Term], float]
Partials = Callable[[Term], tuple[float, ...]]


class Kinks:
    """The kinks of one graph at the values of one exact reader."""

    def __init__(self, bank: Bank, reader: ExactReader, value: Value, partials: Partials) -> None:
        self._bank, self._reader = bank, reader
        self._value, self._partials = value, partials
        self._known: dict[int, bool] = {}

    def at(self, term: Term) -> bool:
        """True where a term has a kink at the values given."""
        known = self._known.get(term.index)
        if known is None:
            known = self._known[term.index] = self._at(term)
        return known

    def sides(
        self, root: Term, terms: Sequence[Term], kinked: Sequence[Term], slopes: Mapping[str, float]
    ) -> tuple[dict[str, float], dict[str, float]]:
        """The slopes of a number towards smaller and larger values of the inputs whose two slopes differ."""
        left: dict[str, float] = {}
        right: dict[str, float] = {}
        paths = {t.path for t in cone(kinked) if t.kind == "input" and t.sort == "number"}
        for path in sorted(paths):
            less, more = -self.along(root, terms, {path: -1.0}), self.along(root, terms, {path: 1.0})
            if less != more or more != slopes.get(path, 0.0):
                left[path], right[path] = less, more
        return left, right

    def along(self, root: Term, terms: Iterable[Term], steps: Mapping[str, float]) -> float:
        """The directional derivative of a number, one sweep forwards; infinite where it jumps."""
        moved: dict[int, float] = {}
        for term in terms:
            if term.kind == "input":
                step = steps.get(term.path, 0.0) if term.sort == "number" else 0.0
            elif term.sort != "number":
                continue
            else:
                step = self._step(term, moved)
            if step:
                moved[term.index] = step
        return moved.get(root.index, 0.0)

    def _step(self, term: Term, moved: Mapping[int, float]) -> float:
        if term.kind == "branch" and self.at(term):
            return self._branch(term, moved)
        if self.at(term):
            return self._kink(term, moved)
        return sum(
            partial * moved[part.index]
            for part, partial in zip(term.arguments, self._partials(term), strict=True)
            if partial and part.index in moved
        )

    def _kink(self, term: Term, moved: Mapping[int, float]) -> float:
        assert term.operation is not None
        if term.operation.name == "abs":
            return abs(moved.get(term.arguments[0].index, 0.0))
        steps = [moved.get(part.index, 0.0) for part in self._binding(term)]
        return min(steps) if term.operation.name in _LEAST else max(steps)

    def _branch(self, term: Term, moved: Mapping[int, float]) -> float:
        """The arm that is taken when the direction is; where it is another with another value, the number jumps."""
        condition, then, otherwise = term.arguments
        taken, next_taken = self._reader.truth(condition) is True, self._after(condition, moved)
        here, there = (then if taken else otherwise), (then if next_taken else otherwise)
        if here is not there and not self._tie(here, there):
            return math.inf if self._value(there) > self._value(here) else -math.inf
        return moved.get(there.index, 0.0)

    def _after(self, flag: Term, moved: Mapping[int, float]) -> bool:
        """Whether a flag holds when the direction is taken."""
        name = flag.operation.name if flag.operation is not None else ""
        if name in ("both", "either"):
            parts = [self._after(part, moved) for part in flag.arguments]
            return all(parts) if name == "both" else any(parts)
        if name == "negation":
            return not self._after(flag.arguments[0], moved)
        if name in _COMPARISONS and self._tie(*flag.arguments):
            first, second = (moved.get(part.index, 0.0) for part in flag.arguments)
            return first == second and name != "below" if first == second or name == "equal" else first < second
        return self._reader.truth(flag) is True

    def _at(self, term: Term) -> bool:
        if term.kind == "branch":
            return any(
                part.operation is not None and part.operation.name in _COMPARISONS and self._tie(*part.arguments)
                for part in self._flags(term.arguments[0])
            )
        name = term.operation.name if term.operation is not None else ""
        if name == "abs":
            return self._value(term.arguments[0]) == 0
        return name in _EXTREMES and len(self._binding(term)) > 1

    def _flags(self, flag: Term) -> Iterable[Term]:
        waiting = [flag]
        while waiting:
            found = waiting.pop()
            yield found
            waiting.extend(part for part in found.arguments if part.sort == "flag")

    def _binding(self, term: Term) -> list[Term]:
        """The operands that tie with the one that binds."""
        assert term.operation is not None
        step, first = _EXTREMES[term.operation.name]
        parts = term.arguments[first::step]
        if step == 2:
            flags = term.arguments[::2]
            parts = tuple(p for p, flag in zip(parts, flags, strict=True) if self._reader.truth(flag) is True)
        best = (min if term.operation.name in _LEAST else max)(parts, key=self._value)
        return [part for part in parts if part is best or self._tie(part, best)]

    def _tie(self, one: Term, other: Term) -> bool:
        """True where two numbers are equal, or cannot be told apart."""
        if one.sort != "number" or other.sort != "number":
            return False
        first, second = self._value(one), self._value(other)
        if not abs(first - second) <= _CLOSE * max(abs(first), abs(second)):
            return False
        if first == second == 0 or one is other:
            return True
        between = self._bank.apply(subtract, [one, other], one.dimension)
        return self._reader.sign(between) not in (1, -1)
