"""From conditions to verdicts: Kleene's logic for what holds, robustness semantics for the margin.

Source of the margins of joined conditions: G. E. Fainekos and G. J. Pappas, Robustness of temporal logic specifications
for continuous-time signals, Theoretical Computer Science 410 (2009): least for `and`, greatest for `or`; here by
relative margin, so that parts of several units can be held against each other.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction

from rulecheck.graph.conditions import AnyOf, Case, Condition, Either, Part
from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.arithmetic import divide
from rulecheck.operations.values import Bounds, Reason, Unknown
from rulecheck.outcome.results import Verdict
from rulecheck.readers.exact import ExactReader

Truth = bool | Unknown


@dataclass(frozen=True, slots=True)
class Judged:
    """A condition with its truth; `part` is what binds, in its case, on its branch; `room` orders margins.

    `measure` is what the room is in: empty for a relative margin, else the dimension of the margin itself. `mixed` says
    that several parts would decide whose rooms have no common measure; then none of them is said to bind.
    """

    truth: Truth
    part: Part | None
    case: Case | None = None
    branch: str = ""
    room: Fraction | float | None = None
    measure: str = ""
    mixed: bool = False


class Judge:
    """Judges the conditions of one graph.

    `holds` says of one part whether it holds, `flag` whether a flag does; by default as values are stated.
    """

    def __init__(
        self,
        bank: Bank,
        reader: ExactReader,
        holds: Callable[[Part], Truth] | None = None,
        flag: Callable[[Term], Truth] | None = None,
    ) -> None:
        self.bank, self.reader = bank, reader
        self.flag = flag or reader.truth
        self.holds = holds or (lambda part: reader.truth(part.holds))
        self._rooms: dict[int, Fraction | float | None] = {}

    def part(self, part: Part) -> Judged:
        """One part: its truth, and its relative margin where it has one."""
        room, measure = self._measured(part)
        return Judged(self.holds(part), part, room=room, measure=measure)

    def room(self, part: Part) -> Fraction | float | None:
        """What a part's margin is ordered by: the relative margin, else the margin itself (SI); None without number."""
        return self._measured(part)[0]

    def _measured(self, part: Part) -> tuple[Fraction | float | None, str]:
        if part.margin is None:
            return None, ""
        term = self.relative(part)
        found = None if term is None else self._number(term)
        return (self._number(part.margin), str(part.margin.dimension)) if found is None else (found, "")

    def relative(self, part: Part) -> Term | None:
        """The relative margin as a term; None where nothing measures it."""
        if part.margin is None or part.scale is None:
            return None
        size = self.reader.sign(part.scale)
        if isinstance(size, Unknown) or size == 0:
            return None
        return self.bank.apply(
            divide, [part.margin, part.scale], divide.dimension([part.margin.dimension, part.scale.dimension])
        )

    def _number(self, term: Term) -> Fraction | float | None:
        if term.index not in self._rooms:
            value = self.reader.value(term)
            if isinstance(value, Bounds):
                self._rooms[term.index] = None
            else:
                exact = self.reader.exact_fraction(term)
                # A ball is ordered by its middle: it only chooses which part is named, never whether it holds.
                self._rooms[term.index] = self.reader.approximate(term) if exact is None else exact
        return self._rooms[term.index]

    def condition(self, condition: Condition) -> Judged:
        """A tree of conditions."""
        if isinstance(condition, Part):
            return self.part(condition)
        if isinstance(condition, Either):
            return self._either(condition)
        inner = [self.condition(part) for part in condition.parts]
        if isinstance(condition, AnyOf):
            if condition.labels:
                inner = [_on_branch(item, label) for item, label in zip(inner, condition.labels, strict=True)]
            return any_of(inner)
        return all_of(inner)

    def taken(self, condition: Either) -> Condition | None:
        """The arm of a conditional that is asked; None where that is not known."""
        truth = self.flag(condition.chooses)
        if isinstance(truth, Unknown):
            return None
        return condition.then if truth else condition.otherwise

    def _either(self, condition: Either) -> Judged:
        arm = self.taken(condition)
        if arm is not None:
            return self.condition(arm)
        return replace(self.condition(condition.gate), truth=self.flag(condition.chooses), room=None)


def _on_branch(item: Judged, label: str) -> Judged:
    return replace(item, branch=label)


def all_of(items: Sequence[Judged]) -> Judged:
    """`and`: a part that fails without a number decides; else the least relative margin binds."""
    failing = [item for item in items if item.truth is False]
    if failing:
        bare = [item for item in failing if _is_bare(item)]
        return bare[0] if bare else _least(failing)
    unknown = [item for item in items if isinstance(item.truth, Unknown)]
    if unknown:
        return _unknown(unknown)
    numbered = [item for item in items if not _is_bare(item)]
    return _least(numbered) if numbered else items[0]


def any_of(items: Sequence[Judged]) -> Judged:
    """`or`: a part that holds without a number decides; else the greatest relative margin binds."""
    holding = [item for item in items if item.truth is True]
    if holding:
        bare = [item for item in holding if _is_bare(item)]
        return bare[0] if bare else _greatest(holding)
    unknown = [item for item in items if isinstance(item.truth, Unknown)]
    if unknown:
        return _unknown(unknown)
    numbered = [item for item in items if not _is_bare(item)]
    return _greatest(numbered) if numbered else items[0]


def _unknown(items: Sequence[Judged]) -> Judged:
    reasons: dict[Reason, None] = {}
    for item in items:
        assert isinstance(item.truth, Unknown)
        reasons.update(dict.fromkeys(item.truth.reasons))
    first = items[0]
    return Judged(Unknown(tuple(reasons)), first.part, first.case, first.branch)


def _is_bare(item: Judged) -> bool:
    """True for what is decided without a number."""
    return item.room is None and not item.mixed


def _least(items: Sequence[Judged]) -> Judged:
    return _mixed(items) or min(items, key=_order)


def _greatest(items: Sequence[Judged]) -> Judged:
    return _mixed(items) or max(items, key=_order)


def _mixed(items: Sequence[Judged]) -> Judged | None:
    """The truth alone, where several rooms have no common measure (a limit that comes to zero measures nothing)."""
    if not any(item.mixed for item in items) and len({item.measure for item in items}) == 1:
        return None
    return Judged(items[0].truth, None, items[0].case, mixed=True)


def _order(item: Judged) -> tuple[Fraction | float, bool]:
    assert item.room is not None
    # Of two margins of zero the strict one is the worse.
    return item.room, not (item.part is not None and item.part.strict)


def verdict_of(truth: Truth) -> Verdict:
    """The verdict of a truth: unknown for want of something, or by contradiction, is `open`, else `unproven`."""
    if truth is True:
        return "complies"
    if truth is False:
        return "breach"
    assert isinstance(truth, Unknown)
    return "open" if any(reason.kind in ("missing", "contradiction") for reason in truth.reasons) else "unproven"
