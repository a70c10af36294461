"""Decision rules: what holds when the spread of inputs counts.

`simple` takes values as stated. `guarded` keeps a guard band of `k` standard uncertainties on both sides of a limit
(JCGM 106:2012, 8.3; ISO 14253-1): a margin inside the band is neither proved nor disproved, and so is unproven.
`worst case` asks that a rule hold all over the box of tolerances and stated uncertainties. Nothing here rests on
doubles: guard bands are compared by exact or certain numbers, boxes are certified.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from fractions import Fraction

from rulecheck.graph.conditions import Part
from rulecheck.graph.figures import Graph
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import SIMPLE, Decision
from rulecheck.operations.values import Monomial, Reason, Unknown
from rulecheck.quantity.numbers import show_number
from rulecheck.quantity.quantity import Uncertainty
from rulecheck.readers.box import Box, BoxReader
from rulecheck.readers.certain import Certain, Unsure
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.least import Least, least, truth_over
from rulecheck.studies.propagation import Propagation
from rulecheck.studies.sources import Sources, box_of

Truth = bool | Unknown


class Decider:
    """Says under each decision rule whether parts and flags of one graph hold."""

    def __init__(self, graph: Graph, reader: ExactReader) -> None:
        self._graph, self._reader = graph, reader
        self.sources = Sources(graph)
        self.propagation = Propagation(graph, reader, self.sources)
        self._boxes: dict[tuple[int, tuple[str, ...]], BoxReader] = {}
        self._known: dict[tuple[int, Decision], Truth] = {}

    def part(self, part: Part, decision: Decision = SIMPLE) -> Truth:
        """Whether a part holds."""
        if decision.name == "simple":
            return self._reader.truth(part.holds)
        key = (part.holds.index, decision)
        if key not in self._known:
            self._known[key] = self._decided(part.holds, part, decision)
        return self._known[key]

    def flag(self, flag: Term, decision: Decision = SIMPLE) -> Truth:
        """Whether a flag holds: that a rule applies, or that it exempts."""
        if decision.name == "simple" or flag.kind == "constant":
            return self._reader.truth(flag)
        key = (flag.index, decision)
        if key not in self._known:
            self._known[key] = self._decided(flag, None, decision)
        return self._known[key]

    def least(self, term: Term, paths: Sequence[str], box: Box) -> Least:
        """The least value of a number while these inputs run over a box."""
        return least(self._over(term, tuple(paths)), term, box)

    def box(self, flag: Term, decision: Decision) -> Box:
        """The inputs whose spread counts for a flag under a decision rule, each over what it may be; empty for none."""
        if decision.name == "guarded":
            return self._guard_box(self.sources.uncertain(flag), decision.coverage)
        return box_of(self.sources, self._graph, self.sources.of(flag))

    def _decided(self, holds: Term, part: Part | None, decision: Decision) -> Truth:
        truth = self._reader.truth(holds)
        if isinstance(truth, Unknown):
            return truth
        if decision.name == "guarded":
            return self._guarded(holds, part, truth, decision.coverage)
        return self._at_worst(holds, part, truth)

    # --- guarded -----------------------------------------------------------------------------------------------------

    def _guarded(self, holds: Term, part: Part | None, truth: bool, coverage: Fraction) -> Truth:
        silent = self.sources.silent(holds)
        if silent and truth:
            # A measured value always has an uncertainty: without it nothing is proved.
            place = self._graph.facts[silent[0]].span
            return Unknown(tuple(Reason("missing", f"uncertainty of {path}", place) for path in silent))
        paths = self.sources.uncertain(holds)
        if not paths:
            return truth
        margin = part.margin if part is not None else None
        if margin is not None and self.propagation.slopes(margin).are_known:
            told = f"the margin is less than its guard band, {show_number(coverage)} standard uncertainties"
            return truth if self.propagation.is_outside(margin, coverage) else within(told)
        found = self._over_box(holds, part, truth, paths, self._guard_box(paths, coverage))
        told = f"it does not stay so while every input keeps within {show_number(coverage)} standard uncertainties"
        return within(told) if found is None else found

    def _guard_box(self, paths: Sequence[str], coverage: Fraction) -> dict[str, tuple[Fraction, Fraction]]:
        """Every uncertain input within so many of its own standard uncertainties, rounded outwards."""
        box = {}
        for path in paths:
            value, spread = self._graph.inputs[path], self.sources.spreads[path]
            assert isinstance(value, Monomial) and isinstance(spread, Uncertainty)
            width = coverage * _root_above(spread.variance())
            box[path] = (value.rational - width, value.rational + width)
        return box

    # --- worst case --------------------------------------------------------------------------------------------------

    def _at_worst(self, holds: Term, part: Part | None, truth: bool) -> Truth:
        """All over the box it must hold; that tolerances alone can break it is a breach, what is left is unproven."""
        every = self.sources.of(holds)
        if not every:
            return truth
        found = self._over_box(holds, part, truth, every, box_of(self.sources, self._graph, every))
        if found is not None:
            return found
        drawn = self.sources.toleranced(holds)
        if drawn and (not truth or self._is_broken(holds, part, drawn)):
            return False
        return within("it does not stay so over all tolerances and uncertainties as stated")

    def _is_broken(self, holds: Term, part: Part | None, paths: tuple[str, ...]) -> bool:
        """True where a point within the tolerances is known at which it does not hold."""
        box = box_of(self.sources, self._graph, paths)
        if part is None or part.margin is None:
            return truth_over(self._over(holds, paths), holds, box) is False
        found = least(self._over(part.margin, paths), part.margin, box).found
        return found is not None and not _is_room(found, strict=part.strict)

    # --- boxes -------------------------------------------------------------------------------------------------------

    def _over_box(self, holds: Term, part: Part | None, truth: bool, paths: tuple[str, ...], box: Box) -> bool | None:
        """What certainly holds, or certainly does not, all over a box."""
        if not truth or part is None or part.margin is None:
            return truth_over(self._over(holds, paths), holds, box)
        low = least(self._over(part.margin, paths), part.margin, box).low
        return True if low is not None and _is_room(low, strict=part.strict) else None

    def _over(self, root: Term, paths: tuple[str, ...]) -> BoxReader:
        key = (root.index, paths)
        if key not in self._boxes:
            self._boxes[key] = BoxReader(
                self._graph.bank, self._graph.inputs, self._reader, paths, [root], self.sources.settled
            )
        return self._boxes[key]


def within(what: str) -> Unknown:
    """Neither proved nor disproved, for the spread of what the rule rests on."""
    return Unknown((Reason("uncertain", f"within uncertainty: {what}"),))


def _is_room(number: Certain, *, strict: bool) -> bool:
    """True where a margin is certainly enough."""
    try:
        return number > 0 if strict else number >= 0
    except Unsure:
        return False


def _root_above(square: Fraction) -> Fraction:
    """The square root where it is rational, else a number close above it.

    >>> float(_root_above(Fraction(2)))
    1.4142135623730951
    """
    top, bottom = math.isqrt(square.numerator), math.isqrt(square.denominator)
    if (top**2, bottom**2) == (square.numerator, square.denominator):
        return Fraction(top, bottom)
    scale = 1 << 60
    number = -(-square.numerator * scale * scale // square.denominator)
    return Fraction(math.isqrt(number) + 1, scale)
