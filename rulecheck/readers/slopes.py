"""The reader of certain slopes: first derivatives as exact numbers or balls, at a point or over a box.

They come from the operations' own partials, accumulated backwards, as the gradient reader's do; here every number is
exact or a ball, so a verdict under a decision rule may rest on them. Over a box a slope is a ball around all its
values there. Where operands of a minimum tie, or a magnitude stands at zero, the slope is a ball around both sides
(`bent`); where nothing can be said (a jump, a condition that is not settled) it is None.
"""

from __future__ import annotations

from collections.abc import Collection, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING

from rulecheck.graph.terms import Bank, Term, cone
from rulecheck.operations.exact import Ball, precision
from rulecheck.operations.operation import Operation
from rulecheck.operations.values import Unknown
from rulecheck.readers.applying import START_BITS
from rulecheck.readers.certain import BOTH_WAYS, ONE, SPACE, UP_TO_ONE, ZERO, Certain, Unsure, lifted

# The exact reader itself asks for slopes, where something is to hold throughout a range.
if TYPE_CHECKING:
    from rulecheck.readers.exact import ExactReader

_LEAST = ("minimum", "least_where")
_GREATEST = ("maximum", "greatest_where")


@dataclass(frozen=True, slots=True)
class Slopes:
    """Slopes by the path of the input in SI units, None where one is not known; inputs that do not matter are left out."""

    by_path: dict[str, Certain | None]
    bent: bool = False

    @property
    def are_known(self) -> bool:
        """True where every slope is known, and no kink stands there."""
        return not self.bent and all(slope is not None for slope in self.by_path.values())


def resting_on(terms: Sequence[Term], paths: Collection[str], settled: Collection[int] = ()) -> set[int]:
    """The terms that rest on an input among `paths`; those in `settled`, and what rests on these alone, do not."""
    found: set[int] = set()
    for term in terms:
        if term.index in settled:
            continue
        if (term.kind == "input" and term.path in paths) or any(part.index in found for part in term.arguments):
            found.add(term.index)
    return found


class SlopeReader:
    """Slopes of terms by the inputs among `paths`, with the values of one exact reader; `settled` are terms that are
    taken as they stand.

    >>> from fractions import Fraction
    >>> from rulecheck.operations.arithmetic import multiply
    >>> from rulecheck.operations.values import Monomial
    >>> from rulecheck.quantity.dimension import PURE
    >>> from rulecheck.readers.exact import ExactReader
    >>> bank = Bank()
    >>> x = bank.input("x", "number", PURE)
    >>> square = bank.apply(multiply, [x, x], PURE)
    >>> reader = ExactReader(bank, {"x": Monomial(Fraction(1, 3))})
    >>> SlopeReader(bank, reader, ["x"]).slopes(square).by_path["x"].value
    2/3
    """

    def __init__(self, bank: Bank, reader: ExactReader, paths: Collection[str], settled: Collection[int] = ()) -> None:
        self._bank, self._reader = bank, reader
        self._paths, self._settled = paths, settled
        self._bits = START_BITS
        self._orders: dict[int, tuple[list[Term], set[int]]] = {}

    def slopes(self, root: Term, bits: int = START_BITS) -> Slopes:
        """The slopes of one number, with balls of at least so many bits."""
        self._bits = bits
        before = precision.prec
        precision.prec = bits
        try:
            return self._swept(root)
        finally:
            precision.prec = before

    def number(self, term: Term, bits: int = START_BITS) -> Certain:
        """The value of a number. Raises `Unsure` where it has none."""
        found = self._reader.value(term)
        if isinstance(found, Ball) and bits > START_BITS:
            found = self._reader.ball(term, bits)
        if isinstance(found, (Unknown, bool, str)) or hasattr(found, "low"):
            raise Unsure
        return Certain(lifted(found))

    def _swept(self, root: Term) -> Slopes:
        terms, moving = self._order(root)
        slopes: dict[int, Certain | None] = {root.index: ONE} if root.index in moving else {}
        found: dict[str, Certain | None] = {}
        bent = False
        for term in reversed(terms):
            if term.index not in slopes:
                continue
            slope = slopes.pop(term.index)
            if term.kind == "input":
                found[term.path] = slope
                continue
            active = [part.index in moving for part in term.arguments]
            parts = self._parts(term, active)
            bent = bent or any(part is UP_TO_ONE or part is BOTH_WAYS for part in parts)
            for argument, part, moves in zip(term.arguments, parts, active, strict=True):
                if moves and not (part is not None and part.is_exact and not part):
                    _add(slopes, argument.index, None if slope is None or part is None else slope * part)
        return Slopes(dict(sorted(found.items())), bent)

    def _order(self, root: Term) -> tuple[list[Term], set[int]]:
        """The terms behind a number from its end, and those of them that move; a search over boxes asks many times."""
        if root.index not in self._orders:
            terms = cone([root])
            moving = resting_on(terms, self._paths, self._settled)
            self._orders[root.index] = ([term for term in terms if term.index in moving], moving)
        return self._orders[root.index]

    def _parts(self, term: Term, active: Sequence[bool]) -> Sequence[Certain | None]:
        """The partial of each argument; those of arguments that do not move are zero."""
        unknown = [None if moves else ZERO for moves in active]
        try:
            if term.kind == "branch":
                taken = self._flag(term.arguments[0])
                return [ZERO, ONE if taken else ZERO, ZERO if taken else ONE]
            operation = term.operation
            if operation is None or operation.partials is None or operation.jumps or operation.gives != "number":
                return unknown
            return self._partials(term, operation, active)
        except Unsure:
            return unknown

    def _partials(self, term: Term, operation: Operation, active: Sequence[bool]) -> Sequence[Certain | None]:
        if operation.name == "reconcile":
            return [ONE, ZERO]  # while it has a value, it is the declared one
        flags = [self._flag(part) if part.sort == "flag" else None for part in term.arguments]
        if operation.name in _LEAST + _GREATEST:
            return self._of_extreme(term, flags, least=operation.name in _LEAST)
        if operation.name == "abs":
            return [self._of_magnitude(self.number(term.arguments[0], self._bits))]
        values = [
            flag if flag is not None else self._operand(part, flags, place)
            for place, (part, flag) in enumerate(zip(term.arguments, flags, strict=True))
        ]
        found = operation.partials(SPACE, values) if operation.partials is not None else ()
        return [Certain(lifted(part)) if moves else ZERO for part, moves in zip(found, active, strict=True)]

    def _operand(self, part: Term, flags: Sequence[bool | None], place: int) -> Certain:
        """A number; of an element that is left out nothing need be known."""
        if place and flags[place - 1] is False:
            return ZERO
        return self.number(part, self._bits)

    def _of_extreme(self, term: Term, flags: Sequence[bool | None], *, least: bool) -> list[Certain | None]:
        """One for the operand that binds; a ball around zero and one for each of several that may."""
        aggregated = term.arguments[0].sort == "flag"
        places = [
            place
            for place, part in enumerate(term.arguments)
            if part.sort == "number" and not (aggregated and flags[place - 1] is not True)
        ]
        numbers = [self.number(term.arguments[place], self._bits) for place in places]
        values = numbers if least else [-number for number in numbers]
        parts: list[Certain | None] = [ZERO] * len(term.arguments)
        binding = [place for place, value in zip(places, values, strict=True) if _may_be_least(value, values)]
        for place in binding:
            parts[place] = ONE if len(binding) == 1 else UP_TO_ONE
        return parts

    def _of_magnitude(self, value: Certain) -> Certain:
        try:
            side = value.sign()
        except Unsure:
            side = 0
        return BOTH_WAYS if not side else ONE if side > 0 else -ONE

    def _flag(self, term: Term) -> bool:
        found = self._reader.truth(term)
        if isinstance(found, Unknown):
            raise Unsure
        return found


def _may_be_least(value: Certain, others: Sequence[Certain]) -> bool:
    """False where another is certainly below. Of equal ones each may be."""
    for other in others:
        if other is value:
            continue
        try:
            if other < value:
                return False
        except Unsure:
            continue
    return True


def _add(slopes: dict[int, Certain | None], index: int, slope: Certain | None) -> None:
    known = slopes.get(index, ZERO)
    slopes[index] = None if slope is None or known is None else known + slope
