"""All sensitivities of many numbers at once, as a program: for studies that ask for them at many sets of inputs.

Each term that is used more than once is a joint. The slopes of a joint by the joints and inputs below it are written as
Python once (backwards over the tree between them, `slopes_written`); what is left is to put them together, joint after
joint. In double precision, as the gradient reader. Where operands tie, or nearly so, and their slopes differ, doubles
cannot tell which one binds: the numbers that rest on them are named, and the gradient reader is to be asked. Loads numpy.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import Any

import numpy

from rulecheck.graph.terms import Inputs, Term, cone
from rulecheck.operations.values import Monomial
from rulecheck.readers.slopes_written import Entry, Writer, matters


@dataclass(frozen=True, slots=True)
class Slopes:
    """A row for each number, a column for each input; `doubtful` are the places of numbers near a kink."""

    matrix: Any
    doubtful: tuple[int, ...]


class Sensitivities:
    """The slopes of numbers by numeric inputs, by those named or by all that the numbers rest on.

    >>> from fractions import Fraction
    >>> from rulecheck.graph.terms import Bank
    >>> from rulecheck.operations.arithmetic import multiply
    >>> from rulecheck.quantity.dimension import PURE
    >>> bank = Bank()
    >>> x = bank.input("x", "number", PURE)
    >>> square = bank.apply(multiply, [x, x], PURE)
    >>> Sensitivities([square]).at({"x": Monomial(Fraction(3))}).matrix.tolist()
    [[6.0]]

    Raises `ValueError` where one of the numbers rests on a term that has no such program (a solve).
    """

    def __init__(self, roots: Iterable[Term], paths: Iterable[str] | None = None) -> None:
        self._roots = list(roots)
        terms = cone(self._roots)
        self._terms = {term.index: term for term in terms}
        self._given = list(dict.fromkeys(term.path for term in terms if term.kind == "input"))
        numbers = {term.path for term in terms if term.kind == "input" and term.sort == "number"}
        self.paths = [path for path in self._given if path in numbers] if paths is None else list(paths)
        writer = Writer(terms, self._roots, self._given, self.paths)
        self._run = writer.run
        self._size = len(self.paths) + len(writer.joints)
        self._levels = [_level(level) for level in writer.levels]
        self._rows = numpy.array([writer.places[root.index] for root in self._roots])
        self._moving = writer.moving
        self._masks: dict[int, int] = {}
        self._known: dict[str, tuple[Any, Any]] = {}

    def at(self, inputs: Inputs) -> Slopes:
        """The slopes of every number by each of `paths`, in SI units."""
        near: list[int] = []
        slots, values = self._run(near, *(self._plain(path, inputs.get(path)) for path in self._given))
        local = numpy.array(slots)
        slopes = numpy.zeros((self._size, len(self.paths)))
        numpy.fill_diagonal(slopes, 1.0)
        for first, last, starts, slots, below in self._levels:
            slopes[first:last] = numpy.add.reduceat(local[slots, None] * slopes[below], starts, axis=0)
        kinks = [i for i in near if values is not None and matters(self._terms[i], values, self._moving)]
        return Slopes(slopes[self._rows], self._resting_on(kinks) if kinks else ())

    def _plain(self, path: str, value: Any) -> Any:
        """An input as a double; most are the same object from one set of inputs to the next."""
        known = self._known.get(path)
        if known is None or known[0] is not value:
            known = self._known[path] = (value, _as_double(value))
        return known[1]

    def _resting_on(self, kinks: Sequence[int]) -> tuple[int, ...]:
        """The places of the numbers that rest on one of some terms."""
        if not self._masks:
            self._masks = _masks(self._terms.values(), self._roots)
        found = 0
        for index in kinks:
            found |= self._masks[index]
        return tuple(place for place in range(len(self._roots)) if found >> place & 1)


def _masks(terms: Iterable[Term], roots: Sequence[Term]) -> dict[int, int]:
    """Which of the roots rest on a term, as bits."""
    found: dict[int, int] = {term.index: 0 for term in terms}
    for place, root in enumerate(roots):
        found[root.index] |= 1 << place
    for term in reversed(list(terms)):
        for part in term.arguments:
            found[part.index] |= found[term.index]
    return found


def _level(entries: Sequence[Entry]) -> tuple[int, int, Any, Any, Any]:
    """The entries of one level as arrays; rows follow one another, and each has one entry at least."""
    rows = [entry.row for entry in entries]
    starts = [place for place, row in enumerate(rows) if place == 0 or rows[place - 1] != row]
    slots, below = [entry.slot for entry in entries], [entry.below for entry in entries]
    return rows[0], rows[-1] + 1, numpy.array(starts), numpy.array(slots), numpy.array(below)


def _as_double(value: Any) -> Any:
    if isinstance(value, Monomial):
        return float(value.rational) * math.pi**value.power
    return math.nan if value is None else value
