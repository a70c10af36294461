"""Whether a flag holds at every point of a box: proved by bisection, with a point where it does not, or with what is left.

On each part of the box the flag is read with balls. A comparison that balls leave open is settled by the least value of
its room on that part: exactly at a corner where the slopes keep their signs, else by the mean value. So a comparison
that stands on its limit at a border of the range is decided, and few boxes do.
"""

from __future__ import annotations

from collections import deque
from collections.abc import Collection, Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from fractions import Fraction
from itertools import product
from typing import TYPE_CHECKING

from rulecheck.graph.terms import Axis, Bank, Inputs, Term, Throughout, cone
from rulecheck.operations.arithmetic import negate, subtract
from rulecheck.operations.comparison import at_most, below
from rulecheck.operations.operation import Operation
from rulecheck.operations.values import Monomial, Reason, Unknown
from rulecheck.readers.box import Box, BoxReader
from rulecheck.readers.certain import Certain, Unsure
from rulecheck.readers.least import halves, lowest_alone, middle, never_below, widest
from rulecheck.readers.slopes import resting_on

# The exact reader itself asks whether something holds throughout.
if TYPE_CHECKING:
    from rulecheck.readers.exact import ExactReader

MOST_BOXES = 400
"""So many parts of a range are looked at for one flag."""
_FEW_BOXES = 48
"""So many once it is known that the flag is unknown somewhere: then only a breach is looked for."""
_FINEST = Fraction(1, 1 << 40)
"""A part that is this narrow, against the whole range, is not cut any more."""

Point = Mapping[str, Fraction]


@dataclass(frozen=True, slots=True)
class Proof:
    """What a flag is throughout a box. `at` is a point where it does not hold, or is unknown; `left` are the parts of
    the box on which nothing was proved. `boxes` counts the parts that were looked at."""

    truth: bool | Unknown
    at: Point | None = None
    left: tuple[Box, ...] = ()
    boxes: int = 0


@dataclass(frozen=True, slots=True)
class _Comparison:
    """A comparison of two numbers with its room, that room turned round, and what runs of what it rests on."""

    flag: Term
    room: Term
    turned: Term
    strict: bool
    paths: tuple[str, ...]


def holds_throughout(base: ExactReader, bank: Bank, inputs: Inputs, term: Term) -> bool | Unknown:
    """The value of a term that says whether a flag holds throughout its axes."""
    asked = term.value
    assert isinstance(asked, Throughout)
    return Prover(bank, inputs, base, asked.body, asked.axes).proof().truth


def box_of(axes: Sequence[Axis]) -> dict[str, tuple[Fraction, Fraction]]:
    """The box of an envelope, by the path of the input that stands for each axis."""
    return {axis.term.path: (axis.low, axis.high) for axis in axes}


class Prover:
    """Proofs of one flag over the axes of an envelope; `more` are other inputs that run over intervals with them.

    >>> from rulecheck.operations.arithmetic import multiply
    >>> from rulecheck.quantity.dimension import PURE
    >>> from rulecheck.readers.exact import ExactReader
    >>> bank = Bank()
    >>> x = bank.input("x", "number", PURE)
    >>> square = bank.apply(multiply, [x, x], PURE)
    >>> flag = bank.apply(at_most, [square, bank.number(9)], PURE)
    >>> reader = ExactReader(bank, {})
    >>> axis = Axis("x", x, Fraction(0), Fraction(3))
    >>> Prover(bank, {}, reader, flag, [axis]).proof().truth
    True
    """

    def __init__(
        self,
        bank: Bank,
        inputs: Inputs,
        base: ExactReader,
        flag: Term,
        axes: Sequence[Axis],
        *,
        also: Sequence[Term] = (),
        more: Box | None = None,
        settled: Collection[Term] = (),
    ) -> None:
        self.flag, self.bank = flag, bank
        self.box = {**box_of(axes), **(more or {})}
        self._comparisons = list(_comparisons(bank, flag, self.box))
        rooms = [room for item in self._comparisons for room in (item.room, item.turned)]
        placed = {**inputs, **{axis.term.path: Monomial(axis.low, axis.power) for axis in axes}}
        roots = [flag, *rooms, *also]
        self.over = BoxReader(bank, placed, base, list(self.box), roots, settled, both_arms=True)

    def proof(self) -> Proof:
        """Whether the flag holds throughout."""
        return _Search(self).found()

    def truth_at(self, point: Point) -> bool | Unknown:
        """What the flag is at one point."""
        return self.over.at(point).truth(self.flag)

    def truth_over(self, part: Box) -> bool | None:
        """What the flag certainly is all over a part; None where that is not certain."""
        plain = self.over.truth(self.flag, part)
        if plain is not None:
            return plain
        settled: dict[int, bool] = {}
        borders: list[Box] = []
        for item in self._comparisons:
            # What a comparison rests on comes before it: conditions are settled before what they choose.
            found = self._compared(item, part, borders)
            if found is not None:
                settled[item.flag.index] = found
                self.over.assume(settled)
        found = self.over.truth(self.flag, part)
        self.over.assume({})
        # On its limit at a corner or side a comparison may be other than beside it: there the flag itself is asked.
        return found if found is not True or all(self._holds_on(side) for side in borders) else None

    def _holds_on(self, side: Box) -> bool:
        if any(low != high for low, high in side.values()):
            return self.truth_over(side) is True
        return self.truth_at({path: low for path, (low, _) in side.items()}) is True

    def _compared(self, item: _Comparison, part: Box, borders: list[Box]) -> bool | None:
        """What a comparison is on a part, but perhaps for a corner or side, which then joins `borders`."""
        known = self.over.truth(item.flag, part)
        if known is not None:
            return known
        if _is_above(never_below(self.over, item.room, part), strict=item.strict):
            return True
        if _is_above(never_below(self.over, item.turned, part), strict=not item.strict):
            return False
        border = lowest_alone(self.over, item.room if item.strict else item.turned, part)
        if border is None:
            return None
        borders.append(border)
        return item.strict

    def cut(self, part: Box) -> list[dict[str, tuple[Fraction, Fraction]]]:
        """A part in two: where a comparison of one input turns, if that is found exactly, else in the middle."""
        for item in self._comparisons:
            running = [path for path in item.paths if part[path][0] != part[path][1]]
            place = self._turning(item.room, part, running[0]) if len(running) == 1 else None
            if place is not None:
                low, high = part[running[0]]
                return [{**part, running[0]: (low, place)}, {**part, running[0]: (place, high)}]
        path = widest(part, self.box)
        return [] if path is None or _is_finest(part[path], self.box[path]) else halves(part, path)

    def thresholds(self) -> list[tuple[str, Fraction]]:
        """Where comparisons of one input turn, as far as that is found exactly: by the path of the input."""
        found = []
        for item in self._comparisons:
            place = self._turning(item.room, self.box, item.paths[0]) if len(item.paths) == 1 else None
            if place is not None:
                found.append((item.paths[0], place))
        return found

    def _turning(self, room: Term, part: Box, path: str) -> Fraction | None:
        """Where a number is exactly zero between two ends at which it is not, as on a straight line."""
        low, high = part[path]
        point = dict(middle(part))
        first, last = (self.over.at({**point, path: end}).exact_fraction(room) for end in (low, high))
        if first is None or last is None or first * last >= 0:
            return None
        place = low - first * (high - low) / (last - first)
        return place if self.over.at({**point, path: place}).exact_fraction(room) == 0 else None


@dataclass(slots=True)
class _Search:
    """One proof on its way: parts are cut breadth first, so that what is left lies close to where it fails."""

    prover: Prover
    boxes: int = 0
    unknown: Unknown | None = None
    unknown_at: Point | None = None
    left: list[Box] = field(default_factory=list)

    def found(self) -> Proof:
        whole = self.prover.box
        for point in corners(whole):
            if self._fails_at(point):
                return Proof(False, point)
        waiting: deque[Box] = deque([whole])
        while waiting and self.boxes < (MOST_BOXES if self.unknown is None else _FEW_BOXES):
            self.boxes += 1
            part = waiting.popleft()
            truth = self.prover.truth_over(part)
            if truth is True:
                continue
            point = middle(part)
            if self._fails_at(point) or truth is False:
                return Proof(False, point, boxes=self.boxes)
            parts = self.prover.cut(part)
            waiting.extend(parts)
            self.left.extend([] if parts else [part])
        self.left.extend(waiting)
        return self._ended()

    def _ended(self) -> Proof:
        if self.unknown is not None:
            return Proof(self.unknown, self.unknown_at, tuple(self.left), self.boxes)
        if not self.left:
            return Proof(True, boxes=self.boxes)
        told = f"not proved throughout its envelope with {MOST_BOXES} boxes"
        return Proof(Unknown((Reason("budget", told),)), None, tuple(self.left), self.boxes)

    def _fails_at(self, point: Point) -> bool:
        truth = self.prover.truth_at(point)
        if isinstance(truth, Unknown) and self.unknown is None:
            self.unknown, self.unknown_at = truth, point
        return truth is False


def corners(box: Box) -> Iterator[dict[str, Fraction]]:
    """All corners of a box."""
    for ends in product(*(dict.fromkeys(pair) for pair in box.values())):
        yield dict(zip(box, ends, strict=True))


def _comparisons(bank: Bank, flag: Term, paths: Collection[str]) -> Iterator[_Comparison]:
    """The comparisons of numbers among what a flag rests on, as far as they rest on what runs."""
    terms = cone([flag])
    moving = resting_on(terms, paths)
    for term in terms:
        if term.index not in moving:
            continue
        if term.operation is at_most or term.operation is below:
            small, large = term.arguments
            room = _applied(bank, subtract, large, small)
            rests = tuple(part.path for part in cone([room]) if part.kind == "input" and part.path in paths)
            yield _Comparison(term, room, _applied(bank, negate, room), term.operation is below, rests)


def _is_finest(part: tuple[Fraction, Fraction], whole: tuple[Fraction, Fraction]) -> bool:
    return part[1] - part[0] <= _FINEST * (whole[1] - whole[0])


def _applied(bank: Bank, operation: Operation, *parts: Term) -> Term:
    return bank.apply(operation, parts, operation.dimension([part.dimension for part in parts]))


def _is_above(number: Certain | None, *, strict: bool) -> bool:
    if number is None:
        return False
    try:
        return number > 0 if strict else number >= 0
    except Unsure:
        return False
