"""Flags over many stretches at once: a lane for each input and stretch, evaluated as intervals of doubles.

What is said to be certain is certain (`intervals`); what is not may yet be for the exact reader, which is slower. Terms
that rest on none of the inputs keep what the exact reader found. Operations that are not known here are left to the exact
reader altogether: `answers` says for which flags and inputs. Loads numpy.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

import numpy

from rulecheck.graph.terms import Inputs, Term, cone
from rulecheck.operations.exact import Ball, Rational, to_fraction
from rulecheck.operations.values import Monomial, Unknown
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.external import operands
from rulecheck.readers.intervals import COMPARISONS, NOWHERE, Interval, around, multiply, rule_of

_LOGIC = ("both", "either", "negation", "reconcile")
_BITS = 64


@dataclass(frozen=True, slots=True)
class Flag:
    """Where a flag certainly holds, where it certainly does not, and where it surely has a value at all."""

    holds: Any
    fails: Any
    exists: Any = False


class Movement:
    """Which terms rest on which inputs, as bits of the places of the inputs; for one bank and some roots.

    >>> from rulecheck.graph.terms import Bank
    >>> from rulecheck.operations.arithmetic import add
    >>> from rulecheck.quantity.dimension import PURE
    >>> bank = Bank()
    >>> x, y = (bank.input(name, "number", PURE) for name in "xy")
    >>> both = bank.apply(add, [x, y], PURE)
    >>> moving = Movement([both], ["x", "y"])
    >>> [moving.moves(term, 1) for term in (x, y, both)]
    [False, True, True]
    """

    def __init__(self, roots: Sequence[Term], paths: Sequence[str]) -> None:
        self.terms = cone(roots)
        places = {path: 1 << place for place, path in enumerate(paths)}
        self.bits: dict[int, int] = {}
        self._unknown: dict[int, int] = {}
        self._outside: dict[int, int] = {}
        for term in self.terms:
            moved, unknown, outside = places.get(term.path, 0) if term.kind == "input" else 0, 0, 0
            for part in operands(term):
                moved |= self.bits[part.index]
                unknown |= self._unknown[part.index]
                outside |= self._outside[part.index]
            self.bits[term.index] = moved
            self._unknown[term.index] = unknown if _is_known(term) else moved
            self._outside[term.index] = moved if term.kind == "external" else outside

    def moving(self, place: int) -> set[int]:
        """The indices of all terms that rest on the input at a place."""
        return {index for index, bits in self.bits.items() if bits >> place & 1}

    def moves(self, term: Term, place: int) -> bool:
        """True where the term rests on the input at a place."""
        return bool(self.bits[term.index] >> place & 1)

    def answers(self, term: Term, place: int) -> bool:
        """False where an operation that intervals do not know stands between the input and the term."""
        return not self._unknown[term.index] >> place & 1

    def is_solved_outside(self, term: Term, place: int) -> bool:
        """True where a solver stands between the input and the term: along a stretch it is never certain."""
        return bool(self._outside[term.index] >> place & 1)


def _is_known(term: Term) -> bool:
    if term.kind == "input":
        return term.sort == "number"
    if term.kind == "branch":
        return term.sort in ("number", "flag")
    if term.operation is None:
        return term.kind == "constant"
    name = term.operation.name
    return name in COMPARISONS or name in _LOGIC or rule_of(name) is not None


class Stretches:
    """The flags that some inputs move, each input alone in lanes of its own.

    >>> from rulecheck.graph.terms import Bank
    >>> from rulecheck.operations.comparison import at_most
    >>> from rulecheck.quantity.dimension import PURE
    >>> bank = Bank()
    >>> holds = bank.apply(at_most, [bank.input("x", "number", PURE), bank.number(3)], PURE)
    >>> inputs = {"x": Monomial(Fraction(1))}
    >>> over = Stretches(inputs, ExactReader(bank, inputs), Movement([holds], ["x"]), [0], [holds])
    >>> low, high = numpy.array([1.0, 2.0]), numpy.array([2.0, 4.0])
    >>> over.flags(["x"], numpy.array([0, 0]), (low, high))[holds.index].holds.tolist()
    [True, False]
    """

    def __init__(
        self,
        inputs: Inputs,
        base: ExactReader,
        movement: Movement,
        places: Sequence[int],
        wanted: Sequence[Term],
    ) -> None:
        self._inputs, self._base, self._wanted = inputs, base, wanted
        self._places = list(places)
        chosen = sum(1 << place for place in self._places)
        self._movement = movement
        self._moving = [term for term in cone(wanted) if movement.bits[term.index] & chosen]
        inside = {term.index for term in self._moving}
        self._still = {
            part.index: self._at_rest(part)
            for term in self._moving
            for part in term.arguments
            if part.index not in inside
        }
        # What keeps its value in the lanes of inputs that do not move it.
        kept = [term for term in self._moving if term.sort == "flag" or not _is_known(term)]
        self._rest = {term.index: self._at_rest(term) for term in kept}
        conditions = [term.arguments[0] for term in self._moving if term.kind == "branch"]
        self._conditions = {term.index for term in cone(conditions)}
        operations = [(term.index, term.operation) for term in self._moving if term.sort == "number"]
        self._rules = {index: rule_of(operation.name) for index, operation in operations if operation is not None}
        self._own = {index: self._mask(index) for index in self._rest}

    def flags(self, paths: Sequence[str], lanes: Any, moved: Interval) -> Mapping[int, Flag]:
        """Each flag that is wanted and that the inputs move, by the index of its term.

        `lanes` has for each lane the place of its input among `paths` (those at the places of the movement that were
        chosen), `moved` the ends between which that input runs, in SI units and rounded outwards.
        """
        found: dict[int, Any] = dict(self._still)
        with numpy.errstate(all="ignore"):
            for term in self._moving:
                if term.kind == "input":
                    found[term.index] = self._input(term, paths, lanes, moved)
                elif term.sort == "flag":
                    found[term.index] = self._settled(term, self._flag(term, found), lanes)
                else:
                    found[term.index] = self._number(term, found, lanes)
        return {flag.index: found[flag.index] for flag in self._wanted if flag.index in found}

    def _at_rest(self, term: Term) -> Interval | Flag:
        """What a term is while its inputs stay as stated."""
        if term.sort == "flag":
            truth = self._base.truth(term)
            return Flag(truth is True, truth is False, not isinstance(truth, Unknown))
        if term.sort != "number" or term.kind == "external":
            return NOWHERE
        found = self._base.value(term)
        if isinstance(found, Rational):
            return around(to_fraction(found))
        ball = self._base.ball(term, _BITS)
        if isinstance(ball, Unknown) or not ball.is_finite():
            return NOWHERE
        return _ends(ball)

    def _input(self, term: Term, paths: Sequence[str], lanes: Any, moved: Interval) -> Interval:
        value = self._inputs[term.path]
        assert isinstance(value, Monomial)
        stated = in_doubles(value.rational, value.power)
        own = lanes == paths.index(term.path)
        return numpy.where(own, moved[0], stated[0]), numpy.where(own, moved[1], stated[1])

    def _number(self, term: Term, found: Mapping[int, Any], lanes: Any) -> Interval:
        parts = [found[part.index] for part in term.arguments]
        if term.kind == "branch":
            return _either_arm(*parts)
        rule = self._rules.get(term.index)
        if rule is not None:
            return rule(parts)
        if term.operation is not None and term.operation.name == "reconcile":
            (low, high), agrees = parts
            # A flag at rest that is not known contradicts nothing.
            sound = agrees.holds if term.arguments[1].index not in self._still else not agrees.fails
            return numpy.where(sound, low, math.nan), numpy.where(sound, high, math.nan)
        own = self._own[term.index]
        ends: Any = self._rest[term.index]
        if own is None:
            return NOWHERE
        return numpy.where(own[lanes], math.nan, ends[0]), numpy.where(own[lanes], math.nan, ends[1])

    def _flag(self, term: Term, found: Mapping[int, Any]) -> Flag:
        parts = [found[part.index] for part in term.arguments]
        if term.kind == "branch":
            condition, then, otherwise = parts
            return Flag(
                (condition.holds & then.holds) | (condition.fails & otherwise.holds),
                (condition.holds & then.fails) | (condition.fails & otherwise.fails),
            )
        name = term.operation.name if term.operation is not None else ""
        if name in COMPARISONS:
            holds, fails = COMPARISONS[name](*parts)
            return Flag(holds, fails, _exist(parts) if term.index in self._conditions else False)
        if name == "negation":
            return Flag(parts[0].fails, parts[0].holds, parts[0].exists)
        if name in ("both", "either"):
            return _joined(parts, name == "both")
        return Flag(False, False)

    def _mask(self, index: int) -> Any:
        """Which of the inputs move a term; None where all do."""
        bits = self._movement.bits[index]
        own = numpy.array([bits >> place & 1 for place in self._places], dtype=bool)
        return None if own.all() else own

    def _settled(self, term: Term, found: Flag, lanes: Any) -> Flag:
        """In the lanes of inputs that do not move the flag it is what it was."""
        own = self._own[term.index]
        if own is None:
            return found
        moved, rest = own[lanes], self._rest[term.index]
        assert isinstance(rest, Flag)
        return Flag(
            numpy.where(moved, found.holds, rest.holds),
            numpy.where(moved, found.fails, rest.fails),
            numpy.where(moved, found.exists, rest.exists),
        )


def in_doubles(value: Fraction, power: int) -> tuple[float, float]:
    """An interval around `value` times a power of pi.

    >>> in_doubles(Fraction(1, 2), 0)
    (0.5, 0.5)
    """
    plain = around(value)
    low, high = multiply((plain, _ends(Ball.pi() ** power))) if power else plain
    return float(low), float(high)


def _ends(ball: Ball) -> Interval:
    """The ends of a ball, two doubles further out than they round to."""
    low, high = float(ball.lower()), float(ball.upper())
    for _ in range(2):
        low, high = math.nextafter(low, -math.inf), math.nextafter(high, math.inf)
    return low, high


def _either_arm(condition: Flag, then: Interval, otherwise: Interval) -> Interval:
    """The arm that is taken; where that is not certain, but the condition has a value, around both."""
    open_low = numpy.where(condition.exists, numpy.minimum(then[0], otherwise[0]), math.nan)
    open_high = numpy.where(condition.exists, numpy.maximum(then[1], otherwise[1]), math.nan)
    low = numpy.where(condition.holds, then[0], numpy.where(condition.fails, otherwise[0], open_low))
    high = numpy.where(condition.holds, then[1], numpy.where(condition.fails, otherwise[1], open_high))
    return low, high


def _exist(parts: Sequence[Interval]) -> Any:
    (a, b), (c, d) = parts
    whole = (a + b) + (c + d)
    return whole == whole  # false where a number may have no value


def _joined(parts: Sequence[Flag], every: bool) -> Flag:
    holds, fails, exists = parts[0].holds, parts[0].fails, parts[0].exists
    for part in parts[1:]:
        holds = holds & part.holds if every else holds | part.holds
        fails = fails | part.fails if every else fails & part.fails
        exists = exists & part.exists
    return Flag(holds, fails, exists)
