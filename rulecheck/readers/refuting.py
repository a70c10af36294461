"""Conditions that nothing can meet, shown by cases and by intervals; never guessed.

Flags are taken apart into cases; in each case every number that occurs is a sum of terms with rational factors, and what
is asked of one such sum is an interval. A case in which an interval is empty, a choice has two values or none, or a flag
is both yes and no cannot arise. Where every case is such, the flags are refuted. What is not of this kind (unknown
values, products, functions) stands as it is and refutes nothing, but the same term has the same value everywhere.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, field, replace
from fractions import Fraction

from rulecheck.graph.conditions import AllOf, Condition, Either, Part
from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.comparison import same_text
from rulecheck.operations.logic import both, either
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import PURE

MOST_CASES = 2_000
"""So many steps are taken before a question stays undecided."""
_NOT_NEGATIVE = ("abs", "sqrt", "count_where", "exp")
Claim = tuple[Term, bool]
"""A flag, and whether it should hold."""
Key = tuple[tuple[int, Fraction], ...]


@dataclass(frozen=True, slots=True)
class Interval:
    """What is left for a number: ends with whether they are left out; None where there is no end."""

    low: Fraction | None = None
    low_open: bool = False
    high: Fraction | None = None
    high_open: bool = False

    def at_most(self, end: Fraction, *, left_out: bool) -> Interval:
        """The part up to an end."""
        if self.high is not None and (self.high < end or (self.high == end and self.high_open >= left_out)):
            return self
        return replace(self, high=end, high_open=left_out)

    def at_least(self, end: Fraction, *, left_out: bool) -> Interval:
        """The part from an end on."""
        if self.low is not None and (self.low > end or (self.low == end and self.low_open >= left_out)):
            return self
        return replace(self, low=end, low_open=left_out)

    @property
    def is_empty(self) -> bool:
        """True where nothing is left.

        >>> Interval().at_most(Fraction(2), left_out=False).at_least(Fraction(2), left_out=False).is_empty
        False
        >>> Interval().at_most(Fraction(2), left_out=True).at_least(Fraction(2), left_out=False).is_empty
        True
        """
        if self.low is None or self.high is None:
            return False
        return self.low > self.high or (self.low == self.high and (self.low_open or self.high_open))


@dataclass(slots=True)
class _Case:
    """What one case has assumed so far."""

    flags: dict[int, bool] = field(default_factory=dict)
    words: dict[int, str] = field(default_factory=dict)
    barred: dict[int, frozenset[str]] = field(default_factory=dict)
    sums: dict[Key, Interval] = field(default_factory=dict)

    def copy(self) -> _Case:
        return _Case(dict(self.flags), dict(self.words), dict(self.barred), dict(self.sums))


@dataclass(slots=True)
class Refuter:
    """Refutes flags of one bank; `choices` gives the words that a text input may have, none where any word may stand."""

    bank: Bank
    choices: Callable[[str], tuple[str, ...]] = lambda _: ()
    _left: int = 0
    _blank: dict[int, bool] = field(default_factory=dict)
    _linear: dict[int, tuple[dict[int, Fraction], Fraction]] = field(default_factory=dict)

    def refuted(self, claims: Sequence[Claim]) -> bool:
        """True where no car can meet all claims at once; False also where that cannot be shown."""
        self._left = MOST_CASES
        return self._closes(list(claims), _Case(), [])

    def term_of(self, condition: Condition) -> Term:
        """A condition of a rule as one flag."""
        if isinstance(condition, Part):
            return condition.holds
        if isinstance(condition, Either):
            arms = self.term_of(condition.then), self.term_of(condition.otherwise)
            return self.bank.branch(condition.chooses, *arms)
        return self.bank.apply(
            both if isinstance(condition, AllOf) else either, map(self.term_of, condition.parts), PURE
        )

    def sums_of(self, claims: Sequence[Claim]) -> set[Key]:
        """The sums that claims bound where they ask no alternatives: what two rules may clash about."""
        case = _Case()
        waiting = list(claims)
        while waiting:
            ways = self._ways(*waiting.pop(), case)
            waiting.extend(claim for way in ways or () for claim in way)
        return set(case.sums)

    # --- cases -------------------------------------------------------------------------------------------------------

    def _closes(self, waiting: list[Claim], case: _Case, open_ended: list[list[list[Claim]]]) -> bool:
        """True where every way to meet what is waiting ends in a case that cannot arise."""
        open_ended = list(open_ended)
        while waiting:
            self._left -= 1
            if self._left < 0:
                return False
            ways = self._ways(*waiting.pop(), case)
            if ways is None:
                return True
            if len(ways) == 1:
                waiting.extend(ways[0])
            elif ways:
                open_ended.append(ways)
        if not open_ended:
            return False
        first = min(open_ended, key=len)
        others = [ways for ways in open_ended if ways is not first]
        return all(self._closes(list(way), case.copy(), others) for way in first)

    def _ways(self, term: Term, wanted: bool, case: _Case) -> list[list[Claim]] | None:
        """The ways to meet a claim: none where it can't be met, an empty list where it asks nothing more."""
        if term.kind == "constant":
            return [] if term.value is wanted else None
        if term.kind == "branch":
            gate, then, otherwise = term.arguments
            return [[(gate, True), (then, wanted)], [(gate, False), (otherwise, wanted)]]
        name = term.operation.name if term.operation is not None else ""
        if name == "negation":
            return [[(term.arguments[0], not wanted)]]
        if name in ("both", "either"):
            if (name == "both") is wanted:
                return [[(part, wanted) for part in term.arguments]]
            return [[(part, wanted)] for part in term.arguments]
        if name in ("at_most", "below", "equal"):
            return self._compared(term, name, wanted, case)
        if name == "same_text":
            return self._worded(term, wanted, case)
        return self._flagged(term, wanted, case)

    def _flagged(self, term: Term, wanted: bool, case: _Case) -> list[list[Claim]] | None:
        if self._is_blank(term):
            return []
        return [] if case.flags.setdefault(term.index, wanted) is wanted else None

    def _is_blank(self, term: Term) -> bool:
        """True for what rests on a value that is not known: two such need not be one, though they look alike."""
        found = self._blank.get(term.index)
        if found is None:
            found = term.kind == "unknown" or any(self._is_blank(part) for part in term.arguments)
            self._blank[term.index] = found
        return found

    def _worded(self, term: Term, wanted: bool, case: _Case) -> list[list[Claim]] | None:
        left, right = term.arguments
        if left.kind == "constant":
            left, right = right, left
        if left.kind == "branch":
            gate, *arms = left.arguments
            then, otherwise = (self.bank.apply(same_text, (arm, right), PURE) for arm in arms)
            return [[(gate, True), (then, wanted)], [(gate, False), (otherwise, wanted)]]
        if left.kind == "constant" and right.kind == "constant":
            return [] if (left.value == right.value) is wanted else None
        if right.kind != "constant" or self._is_blank(left):
            return self._flagged(term, wanted, case)
        word = str(right.value)
        if wanted:
            if case.words.setdefault(left.index, word) != word or word in case.barred.get(left.index, ()):
                return None
        else:
            case.barred[left.index] = case.barred.get(left.index, frozenset()) | {word}
            if case.words.get(left.index) == word:
                return None
        known = self.choices(left.path) if left.kind == "input" else ()
        return None if known and not set(known) - case.barred.get(left.index, frozenset()) else []

    # --- numbers -----------------------------------------------------------------------------------------------------

    def _compared(self, term: Term, name: str, wanted: bool, case: _Case) -> list[list[Claim]] | None:
        left, right = term.arguments
        split = self._split(term, name, wanted)
        if split is not None:
            return split
        if left.sort == "date" or self._is_blank(left) or self._is_blank(right):
            return []
        if name == "equal" and not wanted:
            return []
        factors, constant = self._difference(left, right)
        if name == "equal":
            return [] if self._holds(factors, constant, False, case) and self._holds(
                {key: -value for key, value in factors.items()}, -constant, False, case
            ) else None  # fmt: skip
        if not wanted:
            factors, constant = {key: -value for key, value in factors.items()}, -constant
        strict = (name == "below") is wanted
        return [] if self._holds(factors, constant, strict, case) else None

    def _split(self, term: Term, name: str, wanted: bool) -> list[list[Claim]] | None:
        """A comparison with a conditional on one side, as the comparisons of its arms."""
        for place, side in enumerate(term.arguments):
            if side.kind == "branch":
                gate, *arms = side.arguments
                made = []
                for arm in arms:
                    sides = list(term.arguments)
                    sides[place] = arm
                    assert term.operation is not None
                    made.append(self.bank.apply(term.operation, sides, term.dimension))
                return [[(gate, True), (made[0], wanted)], [(gate, False), (made[1], wanted)]]
        return None

    def _holds(self, factors: dict[int, Fraction], constant: Fraction, strict: bool, case: _Case) -> bool:
        """Take `sum + constant <= 0` (or `< 0`) into the case; False where nothing is left then."""
        if not factors:
            return constant < 0 or (constant == 0 and not strict)
        first = min(factors)
        lead = factors[first]
        key = tuple(sorted((index, value / lead) for index, value in factors.items()))
        end = -constant / lead
        before = case.sums.get(key) or self._natural(key)
        after = before.at_most(end, left_out=strict) if lead > 0 else before.at_least(end, left_out=strict)
        case.sums[key] = after
        return not after.is_empty

    def _natural(self, key: Key) -> Interval:
        """What a number can be by its nature."""
        term = self.bank.terms[key[0][0]]
        if len(key) == 1 and term.operation is not None and term.operation.name in _NOT_NEGATIVE:
            return Interval(Fraction(0))
        return Interval()

    def _difference(self, left: Term, right: Term) -> tuple[dict[int, Fraction], Fraction]:
        one, other = self._sum(left), self._sum(right)
        return _added(one, other, Fraction(-1))

    def _sum(self, term: Term) -> tuple[dict[int, Fraction], Fraction]:
        """A number as a sum of terms with rational factors, and a constant."""
        known = self._linear.get(term.index)
        if known is None:
            known = self._linear[term.index] = self._summed(term)
        return known

    def _summed(self, term: Term) -> tuple[dict[int, Fraction], Fraction]:
        alone: tuple[dict[int, Fraction], Fraction] = ({term.index: Fraction(1)}, Fraction(0))
        if isinstance(term.value, Monomial):
            return ({}, term.value.rational) if term.value.is_rational else alone
        if term.operation is None:
            return alone
        parts = [self._sum(part) for part in term.arguments] if term.operation.name in _LINEAR else []
        match term.operation.name:
            case "add" | "total":
                made: tuple[dict[int, Fraction], Fraction] = ({}, Fraction(0))
                for part in parts:
                    made = _added(made, part, Fraction(1))
                return made
            case "subtract":
                return _added(parts[0], parts[1], Fraction(-1))
            case "negate":
                return _added(({}, Fraction(0)), parts[0], Fraction(-1))
            case "multiply" if not parts[0][0]:
                return _added(({}, Fraction(0)), parts[1], parts[0][1])
            case "multiply" if not parts[1][0]:
                return _added(({}, Fraction(0)), parts[0], parts[1][1])
            case "divide" if not parts[1][0] and parts[1][1]:
                return _added(({}, Fraction(0)), parts[0], 1 / parts[1][1])
        return alone


_LINEAR = ("add", "total", "subtract", "negate", "multiply", "divide")


def _added(
    one: tuple[dict[int, Fraction], Fraction], other: tuple[dict[int, Fraction], Fraction], factor: Fraction
) -> tuple[dict[int, Fraction], Fraction]:
    """`one + factor * other`."""
    made = dict(one[0])
    for key, value in other[0].items():
        total = made.get(key, Fraction(0)) + factor * value
        if total:
            made[key] = total
        else:
            made.pop(key, None)
    return made, one[1] + factor * other[1]
