"""The exact reader: values, signs and truths of terms that are certain, or the reason why they are not.

Terms stay exact (rational, or with pi) while they can. A root or a transcendental function leads to
balls, and the precision is doubled until a sign or a truth is certain. Nothing is ever decided by rounding.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Iterator
from decimal import Decimal
from fractions import Fraction
from typing import Any

from rulecheck.diagnostics import Diagnostic, Refused
from rulecheck.graph.terms import Bank, Inputs, Term
from rulecheck.operations.exact import (
    BITS,
    Ball,
    PiNumber,
    Rational,
    at_precision,
    exact_number,
    precision,
    sign,
    to_ball,
    to_fraction,
)
from rulecheck.operations.operation import UNDECIDED, Undecided
from rulecheck.operations.values import Bounds, Monomial, Reason, Unknown
from rulecheck.readers.applying import EXACT_KINDS, START_BITS, Applying, tie
from rulecheck.readers.decimals import in_digits, rounded
from rulecheck.readers.enclosing import Enclosing
from rulecheck.readers.external import answered
from rulecheck.readers.solving import Solving
from rulecheck.readers.throughout import holds_throughout

# A graph with more terms is refused: a count, so that verdicts are reproducible.
MAXIMUM_TERMS = 1_000_000
MOST_BITS = 4096
# A number for the screen needs no more relative accuracy than a double holds.
_DOUBLE_BITS = 53
_SCREEN_BITS = 1024

Value = Rational | PiNumber | Ball | Bounds | bool | str | Unknown


class ExactReader:
    """Evaluates the terms of one bank for one set of inputs; remembers what it has evaluated.

    >>> from rulecheck.operations.arithmetic import divide, subtract
    >>> from rulecheck.operations.roots_and_exponentials import sqrt
    >>> from rulecheck.quantity.dimension import PURE
    >>> bank = Bank()
    >>> root = bank.apply(sqrt, [bank.input("x", "number", PURE)], PURE)
    >>> margin = bank.apply(subtract, [root, bank.number(Fraction(141421356, 10**8))], PURE)
    >>> ExactReader(bank, {"x": Monomial(Fraction(2))}).sign(margin)
    1
    """

    def __init__(
        self,
        bank: Bank,
        inputs: Inputs,
        *,
        start_bits: int = START_BITS,
        most_bits: int = MOST_BITS,
        both_arms: bool = False,
    ) -> None:
        if len(bank.terms) > MAXIMUM_TERMS:
            message = f"the graph has {len(bank.terms)} terms; {MAXIMUM_TERMS} is the bound"
            raise Refused([Diagnostic("too-large", message, advice="check fewer rules or elements at once")])
        self._bank = bank
        self._inputs = inputs
        self._start = start_bits
        self._most = max(start_bits, most_bits)
        # Where a ball cannot tell which arm a branch takes, both enclose its value: for balls that are wide on purpose.
        self._both_arms = both_arms
        # Values that no precision changes, and for each precision balls and what is not known or not decided.
        self._exact: dict[int, Any] = {}
        self._levels: dict[int, dict[int, Any]] = {}
        self._applying = Applying(bank, self._exact, self._most)
        self._solving = Solving(bank)

    def alike(self, inputs: Inputs, *, bits: int = 0, both_arms: bool = False) -> ExactReader:
        """A reader of the same bank for other inputs, that knows nothing yet; with `bits`, of that one precision."""
        start, most = (bits, bits) if bits else (self._start, self._most)
        return ExactReader(self._bank, inputs, start_bits=start, most_bits=most, both_arms=both_arms or self._both_arms)

    def take(self, found: Iterable[tuple[int, Any]]) -> None:
        """Take over values that were found exactly by other means, by the index of their term."""
        self._exact.update(found)

    def forget(self, indices: Iterable[int]) -> None:
        """Forget what was found for some terms: an input that they rest on has changed."""
        self._solving.forget()
        tables = [self._exact, *self._levels.values()]
        gone = indices if isinstance(indices, (set, frozenset)) else set(indices)
        for table in tables:
            for index in table.keys() & gone:
                del table[index]

    def known(self) -> Iterable[tuple[int, Any]]:
        """All values that were found exactly, by the index of their term."""
        return self._exact.items()

    def value(self, term: Term) -> Value:
        """The value: exact where it can be, else a ball at the first precision that decides it."""
        for bits in self._precisions():
            found = self._at(term, bits)
            if found is not UNDECIDED:
                return found  # type: ignore[no-any-return]
        return tie(self._most, self._bank.spans[term.index], term)

    def sign(self, term: Term) -> int | Unknown:
        """-1, 0 or 1, certain; or why it cannot be had (`tie` where the most precise ball still holds zero)."""
        found = self._at(term, self._start)
        if type(found) is Rational:
            return sign(found)
        return self._decided(term, self._sign_at)  # type: ignore[no-any-return]

    def truth(self, term: Term) -> bool | Unknown:
        """Whether a flag holds, certain; or why it cannot be said."""
        known = self._exact.get(term.index)
        if known is True or known is False:
            return known
        return self._decided(term, lambda term, value, bits: value)  # type: ignore[no-any-return]

    def ball(self, term: Term, bits: int) -> Ball | Unknown:
        """A ball around a number, with at least `bits` of working precision."""
        for level in self._precisions(bits):
            found = self._at(term, level)
            if isinstance(found, Ball):
                return found
            if isinstance(found, (Unknown, Bounds)):
                return Unknown(found.reasons)
            if found is not UNDECIDED:
                return at_precision(found, bits)
        return tie(self._most, self._bank.spans[term.index], term)

    def exact_fraction(self, term: Term) -> Fraction | None:
        """The value where it is rational and known to be, else None."""
        found = self.value(term)
        return to_fraction(found) if isinstance(found, Rational) else None

    def decimal(self, term: Term, digits: int) -> Decimal | None:
        """The number with so many significant digits, ties away from zero.

        None where it is not known, or has an exponent beyond what `Decimal` holds.
        """
        found = self.value(term)
        if isinstance(found, Rational):
            return rounded(to_fraction(found), digits)
        ball = self._accurate(term, math.ceil(digits * math.log2(10)) + 8)
        return None if ball is None else in_digits(ball, digits)

    def approximate(self, term: Term) -> float | None:
        """The number as a double, for screens and plots; flags are 0 and 1; None where it is not known."""
        found = self.value(term)
        if isinstance(found, bool):
            return float(found)
        if isinstance(found, Rational):
            return _as_float(to_fraction(found))
        ball = self._accurate(term, _DOUBLE_BITS)
        return None if ball is None else float(ball.mid())

    def enclosing(self, term: Term, bits: int = START_BITS) -> Enclosing:
        """The formula of a solve, with what it takes from outside at a precision."""
        return self._solving.enclosing(term, [self._at(part, bits) for part in term.arguments])

    def _accurate(self, term: Term, accuracy: int) -> Ball | None:
        """A ball with so many bits of relative accuracy, as far as the bound on precision allows."""
        closest: Ball | None = None
        for bits in self._precisions(accuracy):
            found = self.ball(term, bits) if term.sort in ("number", "date") else None
            if not isinstance(found, Ball):
                return None
            closest = found
            if closest.rel_accuracy_bits() >= accuracy:
                break
            if bits >= _SCREEN_BITS and closest.contains(0) and self.sign(term) == 0:
                return Ball(0)
        return closest

    def _decided(self, term: Term, decide: Callable[[Term, Any, int], Any]) -> Any:
        for bits in self._precisions():
            found = self._at(term, bits)
            if isinstance(found, (Unknown, Undecided)):
                decision: Any = found
            else:
                decision = decide(term, found, bits)
            if decision is not UNDECIDED:
                return decision
        return tie(self._most, self._bank.spans[term.index], term)

    def _sign_at(self, term: Term, value: Any, bits: int) -> int | Unknown | Undecided:
        if isinstance(value, (Rational, PiNumber)):
            return sign(value)
        if isinstance(value, Bounds):
            low, high = sign(value.low), sign(value.high)
            return low if low == high else Unknown(value.reasons)
        if value > 0 or value < 0:
            return 1 if value > 0 else -1
        if value.is_zero() or self._applying.is_zero(term, bits):
            return 0
        return UNDECIDED

    def _precisions(self, least: int = 0) -> Iterator[int]:
        bits = self._start
        while bits < least:
            bits *= 2
        while bits < self._most:
            yield bits
            bits *= 2
        yield max(self._most, least)

    def _at(self, root: Term, bits: int) -> Any:
        """The value of a term at one precision."""
        found = self._exact.get(root.index)
        if found is not None:
            return found
        rough = self._levels.setdefault(bits, {})
        if root.index not in rough:
            before = precision.prec
            precision.prec = bits
            try:
                self._evaluate(root, rough, bits)
            finally:
                precision.prec = before
        found = self._exact.get(root.index)
        return rough[root.index] if found is None else found

    def _evaluate(self, root: Term, rough: dict[int, Any], bits: int) -> None:
        """Arguments first, each term once, without recursion; of a branch only the arm that it takes."""
        exact = self._exact
        frames = [iter(self._order(root, rough))]
        while frames:
            for term in frames[-1]:
                index, operation = term.index, term.operation
                if index in exact or index in rough:
                    continue
                if operation is None:
                    arms = self._arms(term, rough) if term.kind == "branch" else ()
                    waiting = [arm for arm in arms if arm.index not in exact and arm.index not in rough]
                    if waiting:
                        frames.append(iter([*(part for arm in waiting for part in self._order(arm, rough)), term]))
                        break
                    self._keep(term, self._leaf(term, arms, rough), rough)
                    continue
                # The usual case on a short way: exact operands, and a rational of sane size.
                parts = term.arguments
                try:
                    if len(parts) == 2:
                        found = operation.exact((exact[parts[0].index], exact[parts[1].index]))
                    else:
                        found = operation.exact([exact[part.index] for part in parts])
                except KeyError:
                    self._keep(term, self._applying.on_any(term, rough, bits), rough)
                    continue
                if type(found) is Rational and found.height_bits() <= BITS:
                    exact[index] = found
                else:
                    self._keep(term, self._applying.on_exact(term, found, bits), rough)
            else:
                frames.pop()

    def _order(self, root: Term, rough: dict[int, Any]) -> list[Term]:
        """What has to be evaluated for a term, arguments first; of branches the condition only."""
        exact, found, waiting = self._exact, {}, [root]
        while waiting:
            term = waiting.pop()
            index = term.index
            if index in found or index in exact or index in rough:
                continue
            found[index] = term
            waiting.extend(term.arguments if term.kind != "branch" else term.arguments[:1])
        return [found[index] for index in sorted(found)]

    def _keep(self, term: Term, found: Any, rough: dict[int, Any]) -> None:
        (self._exact if type(found) in EXACT_KINDS else rough)[term.index] = found

    def _look(self, term: Term, rough: dict[int, Any]) -> Any:
        found = self._exact.get(term.index)
        return rough.get(term.index) if found is None else found

    def _arms(self, term: Term, rough: dict[int, Any]) -> tuple[Term, ...]:
        """The arm that a branch takes; none where its condition is not known, or both where they enclose the value."""
        condition = self._look(term.arguments[0], rough)
        if isinstance(condition, bool):
            return (term.arguments[1 if condition else 2],)
        is_open = self._both_arms and isinstance(condition, Undecided | Unknown)
        return term.arguments[1:] if is_open and term.sort in ("number", "flag") and _is_tie(condition) else ()

    def _leaf(self, term: Term, arms: tuple[Term, ...], rough: dict[int, Any]) -> Any:
        if len(arms) == 2:
            found = [self._look(arm, rough) for arm in arms]
            if all(isinstance(value, (Rational, PiNumber, Ball)) for value in found):
                return to_ball(found[0]).union(to_ball(found[1]))
            if isinstance(found[0], bool) and found[0] is found[1]:
                return found[0]
            arms = ()
        if term.kind == "branch":
            return self._look(arms[0] if arms else term.arguments[0], rough)
        if term.kind == "solve":
            return self._solving.value(term, [self._look(part, rough) for part in term.arguments])
        if term.kind == "external":
            return answered(term, [self._look(argument, rough) for argument in term.arguments])
        if term.kind == "throughout":
            return holds_throughout(self, self._bank, self._inputs, term)
        if term.kind == "unknown":
            return Unknown((term.value,)) if isinstance(term.value, Reason) else Unknown(())
        value = term.value if term.kind == "constant" else self._inputs.get(term.path)  # a variable has no value
        if value is None:
            return Unknown((Reason("missing", term.path, self._bank.spans[term.index]),))
        return exact_number(value) if isinstance(value, Monomial) else value


def _is_tie(condition: Undecided | Unknown) -> bool:
    """True where a condition is known but for the width of the balls in it."""
    return isinstance(condition, Undecided) or all(reason.kind == "tie" for reason in condition.reasons)


def _as_float(value: Fraction) -> float:
    try:
        return float(value)
    except OverflowError:
        return math.inf if value > 0 else -math.inf
