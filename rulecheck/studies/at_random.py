"""Monte Carlo trials held against first-order uncertainty, as JCGM 101:2008 has it (clauses 7.9 and 8).

Blocks of trials are drawn until the results of the blocks are stable, or the trials asked for are spent. The first
order agrees where the ends of both 95 % intervals differ by no more than half a unit in the second figure of the
standard uncertainty.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, field
from typing import Any

import numpy

from rulecheck.graph.figures import Graph
from rulecheck.graph.terms import Term
from rulecheck.operations.values import Monomial
from rulecheck.outcome.spread import Measured, Trials
from rulecheck.quantity.quantity import Uncertainty
from rulecheck.quantity.units import Unit
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.trials import BLOCK, SEED, Draw, blocks
from rulecheck.studies.amounts import float_amount
from rulecheck.studies.sources import Sources
from rulecheck.studies.spread import AtRandom

MOST_TRIALS = 10_000_000
_NORMAL_95 = 1.959963984540054
_FIGURES = 3


def at_random_of(graph: Graph, most: int) -> AtRandom:
    """Trials of the margins of one graph, at most so many for each."""
    sources, reader = Sources(graph), ExactReader(graph.bank, graph.inputs)
    # A flag that is not known counts as agreement, as it does in `reconcile`.
    settled = {term.index: reader.truth(term) is not False for term in sources.settled}

    def at_random(margin: Term, unit: Unit, measured: Measured, limits: Sequence[Term]) -> Trials | None:
        paths = sources.uncertain(margin)
        draws = [_draw(graph, sources, path) for path in paths]
        matrix: list[list[float]] = []
        if sources.correlated(paths):
            matrix = [[float(sources.coefficient(one, other)) for other in paths] for one in paths]
        rooms = [blocks(term, graph.inputs, draws, matrix, settled) for term in limits]
        own = list(limits).index(margin)
        estimate = reader.approximate(margin)
        factor = float(unit.factor) * math.pi**unit.power
        standard = (measured.standard.value or 0.0) * factor
        tally = _Tally()
        while tally.trials + BLOCK <= max(most, BLOCK) and not tally.is_stable(_closeness(standard) / 5):
            values = [next(room) for room in rooms]
            tally.add(values[own], numpy.all([value >= 0 for value in values], axis=0))
        if estimate is None or tally.lost == tally.trials or not tally.is_finite:
            return None
        return tally.result(estimate, standard, unit)

    return at_random


def _draw(graph: Graph, sources: Sources, path: str) -> Draw:
    value, spread = graph.inputs[path], sources.spreads[path]
    assert isinstance(value, Monomial) and isinstance(spread, Uncertainty)
    scale = math.pi**value.power
    shape = "normal" if spread.coverage is not None else spread.shape
    return Draw(path, float(value.rational) * scale, math.sqrt(spread.variance()) * scale, shape)


def _closeness(standard: float) -> float:
    """Half a unit in the second figure of a standard uncertainty (JCGM 101:2008, 7.9.2).

    >>> _closeness(2.0), round(_closeness(0.0347), 6)
    (0.05, 0.0005)
    """
    if not standard > 0 or not math.isfinite(standard):
        return 0.0
    return 0.5 * 10.0 ** (math.floor(math.log10(standard)) - 1)


@dataclass(slots=True)
class _Tally:
    """What the blocks gave: mean, deviation, both ends of the 95 % interval, and how many conform."""

    rows: list[tuple[float, float, float, float]] = field(default_factory=list)
    conforming: int = 0
    lost: int = 0

    @property
    def trials(self) -> int:
        return BLOCK * len(self.rows)

    @property
    def is_finite(self) -> bool:
        """False where doubles cannot hold what the trials gave."""
        return bool(numpy.all(numpy.isfinite(self.rows)))

    def add(self, values: Any, conforms: Any) -> None:
        known = values[numpy.isfinite(values)]
        self.lost += len(values) - len(known)
        self.conforming += int(numpy.count_nonzero(conforms))
        if not len(known):
            self.rows.append((math.nan,) * 4)
            return
        with numpy.errstate(all="ignore"):
            low, high = numpy.quantile(known, [0.025, 0.975])
            self.rows.append((float(known.mean()), float(known.std(ddof=1)), float(low), float(high)))

    def noise(self) -> float:
        """Twice the largest standard deviation of the four averages (JCGM 101:2008, 7.9.4)."""
        if len(self.rows) < 2:
            return math.inf
        return 2 * float(numpy.max(numpy.std(self.rows, axis=0, ddof=1))) / math.sqrt(len(self.rows))

    def is_stable(self, closeness: float) -> bool:
        return self.noise() <= closeness

    def result(self, estimate: float, standard: float, unit: Unit) -> Trials:
        mean, deviation, low, high = (float(value) for value in numpy.mean(self.rows, axis=0))
        ends = (abs(estimate - _NORMAL_95 * standard - low), abs(estimate + _NORMAL_95 * standard - high))
        apart, allowed, noise = max(ends), _closeness(standard), self.noise()
        agrees = False if apart > allowed + noise else True if noise <= allowed else None
        return Trials(
            self.trials, SEED, float_amount(mean, unit), float_amount(deviation, unit, _FIGURES),
            float_amount(low, unit), float_amount(high, unit), self.conforming / self.trials, agrees,
            self._note(agrees),
        )  # fmt: skip

    def _note(self, agrees: bool | None) -> str:
        notes = []
        if agrees is None:
            notes.append("too few trials to say whether the first order agrees")
        elif not agrees:
            notes.append("the first order and the trials part: trust the trials")
        if self.lost:
            notes.append(f"{self.lost} trials have no value")
        return "; ".join(notes)
