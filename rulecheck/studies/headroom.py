"""`headroom`: how far one input can move each way before the first rule breaks, and which.

The stretch from the value to the answer is covered without a gap by intervals on each of which every rule is certainly
met, so that no earlier breach is jumped over (interval exclusion by bisection): intervals of doubles for all inputs
together as far as they are certain, then the exact reader. Where the value stands on a limit the first billionth is
bridged by exact points. Where a margin is linear in the input the end itself is found exactly; else it is known to one
part in a billion of the stretch that was looked at.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from datetime import date
from fractions import Fraction
from functools import cached_property

from rulecheck import __version__
from rulecheck.diagnostics import Faults
from rulecheck.graph.conditions import BoundRule, numeric_parts
from rulecheck.graph.figures import InputFact
from rulecheck.graph.terms import Term
from rulecheck.model.design import Design
from rulecheck.operations.values import Monomial
from rulecheck.outcome.results import Amount
from rulecheck.outcome.travel import Headroom, HeadroomReport, Travel
from rulecheck.quantity.numbers import show_exact, show_number
from rulecheck.quantity.units import Unit
from rulecheck.readers.segment import SegmentReader
from rulecheck.readers.stretches import Movement
from rulecheck.reading.nearest import nearest
from rulecheck.studies.amounts import PI
from rulecheck.studies.certain_stretches import CELLS, Ask, Sure, certain_stretches
from rulecheck.studies.check import Checker
from rulecheck.studies.marks import marks
from rulecheck.studies.reporting import CAUTION

REACH = 100
FINENESS = Fraction(1, 10**9)
MOST_STEPS = 2000


def headroom(checker: Checker, design: Design, names: Sequence[str], day: date) -> HeadroomReport:
    """The headroom of the inputs named, or of all that a rule reads. Raises `Refused` where a name is no input."""
    graph = checker.graph
    numbers = {
        path: value
        for path, value in graph.inputs.items()
        if isinstance(value, Monomial) and not graph.facts[path].setting
    }
    faults = Faults()
    for name in names:
        if name not in numbers:
            faults.add("unknown-name", f"the design gives no number under '{name}'", advice=nearest(name, numbers))
    faults.settle()
    rows: list[Headroom] = []
    unread: list[str] = []
    left_out: dict[str, list[str]] = {}
    paths = list(names or numbers)
    roots = [root for rule in graph.rules if rule.binds for root in (rule.met, *_margins(rule))]
    movement = Movement(roots, paths)
    moves = [_Input(checker, movement, place, path) for place, path in enumerate(paths)]
    _look_ahead(checker, movement, paths, moves)
    for path, moved in zip(paths, moves, strict=True):
        found = moved.headroom()
        for rule in moved.left_out:
            left_out.setdefault(rule.name, []).append(path)
        if found is None:
            unread.extend(() if moved.left_out else (path,))
        else:
            rows.append(found)
    breached = tuple(rule.name for rule in graph.rules if rule.binds and checker.reader.truth(rule.met) is False)
    return HeadroomReport(
        design.name, design.file, day.isoformat(), tuple(sorted(rows, key=_least)), tuple(unread), breached,
        (CAUTION,), __version__, marks([checker]), tuple((rule, tuple(paths)) for rule, paths in left_out.items()),
    )  # fmt: skip


def _look_ahead(checker: Checker, movement: Movement, paths: Sequence[str], moves: Sequence[_Input]) -> None:
    """How far intervals of doubles are certain, for all inputs together; the exact reader goes on from there."""
    graph = checker.graph
    for again in (False, True):
        asked = [(moved, ask) for moved in moves for way in (-1, 1) if (ask := moved.ask(way, again=again)) is not None]
        found = certain_stretches(graph.inputs, checker.reader, movement, paths, [ask for _, ask in asked])
        for (moved, ask), sure in zip(asked, found, strict=True):
            moved.sure[-1 if ask.step < 0 else 1] = sure


def _least(row: Headroom) -> float:
    """Inputs with the least travel against their own size first."""
    size = abs(row.value.value or 0.0) or 1.0
    travels = [
        abs(side.travel.value)
        for side in (row.down, row.up)
        if side.travel is not None and side.travel.value is not None
    ]
    return min(travels, default=float("inf")) / size


@dataclass(frozen=True, slots=True)
class _Found:
    """Where the search ended: the last certain point, a point beyond, and the rules that turn between them."""

    inner: Fraction
    outer: Fraction
    turned: tuple[int, ...]


class _Input:
    """The search along one input."""

    def __init__(self, checker: Checker, movement: Movement, place: int, path: str) -> None:
        graph = checker.graph
        self.checker, self.movement, self.place, self.path = checker, movement, place, path
        self.fact: InputFact = graph.facts[path]
        value = graph.inputs[path]
        assert isinstance(value, Monomial)
        self.start, self.power = value.rational, value.power
        moved = [rule for rule in graph.rules if rule.binds and movement.moves(rule.met, place)]
        self.left_out = [rule for rule in moved if movement.is_solved_outside(rule.met, place)]
        rules = [rule for rule in moved if rule not in self.left_out] if self.left_out else moved
        self.met = [rule for rule in rules if checker.reader.truth(rule.met) is True]
        self.broken = [rule for rule in rules if checker.reader.truth(rule.met) is False]
        self.sure: dict[int, Sure] = {}

    @cached_property
    def along(self) -> SegmentReader:
        """The exact reader; made where intervals of doubles do not give the whole answer."""
        graph = self.checker.graph
        moving = self.movement.moving(self.place)
        return SegmentReader(graph.bank, graph.inputs, self.checker.reader, self.path, moving)

    def ask(self, direction: int, *, again: bool) -> Ask | None:
        """What is asked of intervals; again from the first cell on, where exact points bridge that one."""
        rules, holds = (self.broken, False) if self.broken else (self.met, True)
        flags = tuple(rule.met for rule in rules if self.movement.answers(rule.met, self.place))
        reach = self._reach(direction)
        if not flags or not reach:
            return None
        if again:
            sure = self.sure[direction]
            doubtful = [flags[place] for place in sure.doubtful]
            if sure.cells or not self._holds_beside(doubtful, direction, reach / CELLS, holds):
                return None
        return Ask(self.place, self.start, self.power, direction * reach / CELLS, flags, holds, int(again))

    def headroom(self) -> Headroom | None:
        """The travel both ways; None where no rule reads the input."""
        if not self.met and not self.broken:
            return None
        value = self._amount(self.start, width=False)
        down, up = (self._travel(direction) for direction in (-1, 1))
        return Headroom(self.path, value, self.fact.basis, down, up, len(self.met) + len(self.broken))

    def _travel(self, direction: int) -> Travel:
        if self.broken:
            return self._search(self.broken, direction, holds=False)
        return self._search(self.met, direction, holds=True)

    def _search(self, rules: Sequence[BoundRule], direction: int, *, holds: bool) -> Travel:
        """Go outwards while every rule certainly stays as it is."""
        flags = [rule.met for rule in rules]
        reach = self._reach(direction)
        # As far as each rule certainly stays: of a part of a stretch only those are asked that were not certain in all of it.
        far = self._surely(flags, direction, reach / CELLS)
        known = [edge for edge, flag in zip(far, flags, strict=True) if self.movement.answers(flag, self.place)]
        stop = min(known, default=reach) if direction in self.sure else reach
        inner, width, steps = min(far), reach / 1024, 0
        while inner < reach:
            steps += 1
            if inner == stop:
                # Intervals of doubles were certain up to here, and not in the finest step beyond.
                width = min(width, reach / CELLS)
            outer = min(inner + width, reach)
            if inner < stop:
                outer = min(outer, stop)
            truths = self._told(flags, far, direction, (inner, outer), holds)
            if all(truth is holds for truth in truths):
                inner, width = outer, width * 2
            elif width <= reach * FINENESS and not inner and self._holds_beside(flags, direction, outer, holds):
                # The value stands on a limit, and balls are wider than points: exact points bridge the first step.
                inner, width = outer, width * 2
            elif width <= reach * FINENESS or steps > MOST_STEPS:
                turned = tuple(index for index, truth in enumerate(truths) if truth is not holds)
                return self._ended(rules, direction, _Found(inner, outer, turned), holds=holds)
            else:
                width /= 2
        return Travel("free", None, None, (), False)

    def _surely(self, flags: Sequence[Term], direction: int, cell: Fraction) -> list[Fraction]:
        """As far as intervals of doubles are certain of each flag; nowhere where they were not asked."""
        sure = self.sure.get(direction)
        answered = [flag.index for flag in flags if self.movement.answers(flag, self.place)]
        if sure is None:
            return [Fraction(0)] * len(flags)
        doubtful = {answered[place] for place in sure.doubtful}
        edges = {index: cell * min(sure.cells + (index not in doubtful), CELLS) for index in answered}
        return [edges.get(flag.index, Fraction(0)) for flag in flags]

    def _told(
        self, flags: Sequence[Term], far: list[Fraction], direction: int, ends: tuple[Fraction, Fraction], holds: bool
    ) -> list[bool | None]:
        """What each flag certainly is over a part of the travel; those that are as they were are known so far."""
        truths: list[bool | None] = [holds] * len(flags)
        asked = [place for place, edge in enumerate(far) if edge < ends[1]]
        told = self._over([flags[place] for place in asked], direction, *ends)
        for place, truth in zip(asked, told, strict=True):
            truths[place] = truth
            if truth is holds:
                far[place] = ends[1]
        return truths

    def _reach(self, direction: int) -> Fraction:
        """How far is looked: a hundred times the value, and never to where the value would be a slip."""
        if direction < 0 and self.fact.sign:
            return self.start if self.fact.sign == "0 or more" else self.start * (1 - FINENESS)
        return REACH * (abs(self.start) or self._one())

    def _holds_beside(self, flags: Sequence[Term], direction: int, outer: Fraction, holds: bool) -> bool:
        points = (outer / 8, outer / 2, outer)
        return all(t is holds for point in points for t in self.along.at(flags, self.start + direction * point))

    def _over(self, flags: Iterable[Term], direction: int, inner: Fraction, outer: Fraction) -> list[bool | None]:
        ends = sorted((self.start + direction * inner, self.start + direction * outer))
        return self.along.truths(flags, ends[0], ends[1])

    def _one(self) -> Fraction:
        """One of the input's unit, in SI: what an input of zero is measured by."""
        return self.fact.unit.factor if self.fact.unit is not None else Fraction(1)

    def _ended(self, rules: Sequence[BoundRule], direction: int, found: _Found, *, holds: bool) -> Travel:
        """Name what turns: a little beyond the last certain point, since balls are wider than what they hold."""
        names = tuple(rules[index].name for index in found.turned)
        chosen = [rules[index] for index in found.turned]
        for factor in (1, 8, 64, 512):
            wider = _Found(found.inner, found.inner + factor * (found.outer - found.inner), found.turned)
            exact = self._exact_end(chosen, direction, wider, holds=holds)
            if exact is not None:
                return self._made("stops" if holds else "mends", exact, names, is_exact=True)
            beyond = self.along.at([rule.met for rule in chosen], self.start + direction * wider.outer)
            for ending, truth in (("stops" if holds else "mends", not holds), ("opens", None)):
                kept = tuple(name for name, found_there in zip(names, beyond, strict=True) if found_there is truth)
                if kept:
                    return self._made(ending, direction * found.inner, kept, is_exact=False)
        return self._made("unsure", direction * found.inner, names, is_exact=False)

    def _exact_end(self, rules: Sequence[BoundRule], direction: int, found: _Found, *, holds: bool) -> Fraction | None:
        """The end itself, where the margin that turns is linear between two points: it is zero there, exactly."""
        ends = self._zeros([term for rule in rules for term in _margins(rule)], direction, found)
        flags = [rule.met for rule in rules]
        for end in sorted(ends, key=abs):
            step = direction * max(found.outer - found.inner, FINENESS) / 1024
            here = self.along.at(flags, self.start + end)
            past = self.along.at(flags, self.start + end + step)
            before = self.along.at(flags, self.start + end - step)
            if all(truth is holds for truth in before) and (
                any(t is not holds for t in past) or any(t is not holds for t in here)
            ):
                return end
        return None

    def _zeros(self, margins: Sequence[Term], direction: int, found: _Found) -> list[Fraction]:
        """Where margins that are linear between two points are zero, as travel."""
        moved = [term for term in margins if self.movement.moves(term, self.place)]
        first, second = self.start + direction * found.inner, self.start + direction * found.outer
        ends: list[Fraction] = []
        at_first, at_second = (self.along.numbers(moved, point) for point in (first, second))
        for term, a, b in zip(moved, at_first, at_second, strict=True):
            if a is None or b is None or a == b:
                continue
            end = first - a * (second - first) / (b - a)
            if min(first, second) <= end <= max(first, second) and self.along.numbers([term], end) == [0]:
                ends.append(end - self.start)
        return ends

    def _made(self, ending: str, travel: Fraction, rules: tuple[str, ...], *, is_exact: bool) -> Travel:
        shown = self._amount(travel, width=True, is_exact=is_exact)
        at = self._amount(self.start + travel, width=False, is_exact=is_exact)
        return Travel(ending, shown, at, rules, is_exact)  # type: ignore[arg-type]

    def _amount(self, value: Fraction, *, width: bool, is_exact: bool = True) -> Amount:
        unit: Unit | None = self.fact.unit
        if unit is None:
            return Amount(show_number(value), "", float(value), show_exact(value))
        power = self.checker.graph.inputs[self.path].power  # type: ignore[union-attr]
        rational, rest = unit.width_of_si(value, power) if width else unit.of_si(value, power)
        shown = rational * PI**rest
        exact = show_exact(rational) if is_exact and not rest else ""
        return Amount(show_number(shown), unit.symbol, float(shown), exact)


def _margins(rule: BoundRule) -> Iterable[Term]:
    """The margins of all parts of a rule."""
    for case in rule.cases:
        yield from (part.margin for part in numeric_parts(case.condition) if part.margin is not None)
