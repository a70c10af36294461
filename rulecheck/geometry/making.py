"""Terms of lengths and flags, with what is certain settled: the arithmetic that outlines and zones are written in."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction

from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.arithmetic import absolute, add, divide, multiply, negate, rational_power, subtract, total
from rulecheck.operations.comparison import at_most, below
from rulecheck.operations.extremes import maximum, minimum
from rulecheck.operations.logic import both, either, negation
from rulecheck.operations.operation import Operation
from rulecheck.operations.roots_and_exponentials import sqrt
from rulecheck.operations.statistics import greatest_where, least_where
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import LENGTH, PURE, Dimension

_SQUARE = rational_power(Fraction(2))


def constant(term: Term) -> Fraction | None:
    """The value (SI) of a rational constant, else None."""
    if term.kind == "constant" and isinstance(term.value, Monomial) and not term.value.power:
        return term.value.rational
    return None


@dataclass(frozen=True, slots=True)
class Maker:
    """Makes terms in one bank. Dimensions are the caller's business: a wrong one is a fault of the program.

    >>> from rulecheck.graph.terms import Bank
    >>> make = Maker(Bank())
    >>> constant(make.plus(make.length(1), make.length(2)))
    Fraction(3, 1)
    """

    bank: Bank

    def length(self, value: Fraction | int) -> Term:
        """A constant length in metres."""
        return self.bank.number(value, LENGTH)

    def number(self, value: Fraction | int, dimension: Dimension = PURE) -> Term:
        """A constant in SI units."""
        return self.bank.number(value, dimension)

    def plus(self, a: Term, b: Term) -> Term:
        """a + b."""
        if constant(a) == 0 or constant(b) == 0:
            return b if constant(a) == 0 else a
        return self._apply(add, (a, b), lambda left, right: left + right)

    def minus(self, a: Term, b: Term) -> Term:
        """a - b."""
        return a if constant(b) == 0 else self._apply(subtract, (a, b), lambda left, right: left - right)

    def opposite(self, a: Term) -> Term:
        """-a."""
        return self._apply(negate, (a,), lambda value: -value)

    def times(self, a: Term, b: Term) -> Term:
        """a b."""
        if constant(a) == 1 and a.dimension == PURE:
            return b
        return self._apply(multiply, (a, b), lambda left, right: left * right)

    def over(self, a: Term, b: Term) -> Term:
        """a / b."""
        if constant(b) == 0:
            return self._made(divide, (a, b))
        return self._apply(divide, (a, b), lambda left, right: left / right)

    def size(self, a: Term) -> Term:
        """The magnitude of a."""
        return self._apply(absolute, (a,), abs)

    def square(self, a: Term) -> Term:
        """The square of a."""
        return self._apply(_SQUARE, (a,), lambda value: value * value)

    def root(self, a: Term) -> Term:
        """The square root of a."""
        return self._made(sqrt, (a,))

    def total(self, terms: Sequence[Term]) -> Term:
        """The sum of several."""
        return terms[0] if len(terms) == 1 else self._apply(total, tuple(terms), lambda *values: sum(values))

    def least(self, terms: Sequence[Term]) -> Term:
        """The least of several."""
        return self._extreme(minimum, terms, min)

    def greatest(self, terms: Sequence[Term]) -> Term:
        """The greatest of several."""
        return self._extreme(maximum, terms, max)

    def middle(self, a: Term, b: Term) -> Term:
        """(a + b) / 2."""
        return self.over(self.plus(a, b), self.number(2))

    def at_most(self, a: Term, b: Term) -> Term:
        """Whether a <= b."""
        return self._flag(at_most, a, b, lambda left, right: left <= right)

    def below(self, a: Term, b: Term) -> Term:
        """Whether a < b."""
        return self._flag(below, a, b, lambda left, right: left < right)

    def is_room(self, a: Term) -> Term:
        """Whether a is zero or more."""
        return self.at_most(self.number(0, a.dimension), a)

    def is_above_zero(self, a: Term) -> Term:
        """Whether a is more than zero."""
        return self.below(self.number(0, a.dimension), a)

    def opposite_flag(self, flag: Term) -> Term:
        """`not`."""
        return self.bank.flag(not flag.value) if flag.kind == "constant" else self._made(negation, (flag,))

    def every(self, flags: Iterable[Term]) -> Term:
        """`and`."""
        return self._joined(both, flags, decides=False)

    def some(self, flags: Iterable[Term]) -> Term:
        """`or`."""
        return self._joined(either, flags, decides=True)

    def choose(self, flag: Term, then: Term, otherwise: Term) -> Term:
        """`then` where the flag holds, else `otherwise`."""
        return self.bank.branch(flag, then, otherwise)

    def least_where(self, pairs: Iterable[tuple[Term, Term]]) -> Term:
        """The least of the numbers whose flag holds; undefined where none does."""
        return self._where(least_where, pairs)

    def greatest_where(self, pairs: Iterable[tuple[Term, Term]]) -> Term:
        """The greatest of the numbers whose flag holds; undefined where none does."""
        return self._where(greatest_where, pairs)

    # --- within ------------------------------------------------------------------------------------------------------

    def _where(self, operation: Operation, pairs: Iterable[tuple[Term, Term]]) -> Term:
        listed = list(pairs)
        kept = [(flag, number) for flag, number in listed if flag.kind != "constant" or flag.value] or listed[:1]
        return self._made(operation, tuple(term for pair in kept for term in pair))

    def _extreme(self, operation: Operation, terms: Sequence[Term], pick: Callable[..., Fraction]) -> Term:
        apart = tuple(dict.fromkeys(terms))
        if len(apart) == 1:
            return apart[0]
        return self._apply(operation, apart, lambda *values: pick(values))

    def _joined(self, operation: Operation, flags: Iterable[Term], *, decides: bool) -> Term:
        open_flags: list[Term] = []
        for flag in dict.fromkeys(flags):
            if flag.kind != "constant":
                open_flags.append(flag)
            elif flag.value is decides:
                return flag
        if not open_flags:
            return self.bank.flag(not decides)
        return open_flags[0] if len(open_flags) == 1 else self._made(operation, tuple(open_flags))

    def _flag(self, operation: Operation, a: Term, b: Term, decide: Callable[[Fraction, Fraction], bool]) -> Term:
        left, right = constant(a), constant(b)
        if left is not None and right is not None:
            return self.bank.flag(decide(left, right))
        return self._made(operation, (a, b))

    def _apply(self, operation: Operation, terms: tuple[Term, ...], fold: Callable[..., Fraction | int]) -> Term:
        values = [constant(term) for term in terms]
        if any(value is None for value in values):
            return self._made(operation, terms)
        return self.bank.number(Fraction(fold(*values)), operation.dimension([term.dimension for term in terms]))

    def _made(self, operation: Operation, terms: tuple[Term, ...]) -> Term:
        return self.bank.apply(operation, terms, operation.dimension([term.dimension for term in terms]))
