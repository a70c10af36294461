"""The spread of what decides a rule: uncertainty, guard band, probabilities, stacks, worst case, contributors."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction

from rulecheck.graph.conditions import AllOf, Condition, Either, Part, every_part
from rulecheck.graph.figures import Graph
from rulecheck.graph.terms import Term, cone
from rulecheck.model.ruleset import SIMPLE, Decision, Scrutineer
from rulecheck.operations.exact import exact_number
from rulecheck.operations.values import Monomial
from rulecheck.outcome.spread import (
    Contributor,
    Measured,
    Probability,
    SpreadResult,
    Stack,
    Trials,
    WorstCase,
)
from rulecheck.quantity.dimension_names import preferred
from rulecheck.quantity.numbers import show_number
from rulecheck.quantity.quantity import Uncertainty, show_spread, spread_in_si, spread_of_si
from rulecheck.quantity.units import Unit
from rulecheck.readers.certain import ZERO, Certain, Unsure
from rulecheck.readers.slopes import Slopes
from rulecheck.studies.amounts import certain_amount
from rulecheck.studies.conformity import fails, normal_share
from rulecheck.studies.deciding import Decider
from rulecheck.studies.propagation import Propagated, Propagation
from rulecheck.studies.sources import box_of

FIGURES = 2
"""An uncertainty is given to two figures (JCGM 100:2008, 7.2.6)."""
NOTHING = 1e-12
"""An input that moves the margin by less than this share of it plays no part."""
AtRandom = Callable[[Term, Unit, Measured, Sequence[Term]], Trials | None]
"""Monte Carlo trials of a margin in a unit, beside its first-order uncertainty; the terms are all margins of its value."""


@dataclass(frozen=True, slots=True)
class Asked:
    """What decides a rule: the part, the conditions around it, and how the rule is decided."""

    part: Part
    around: Condition
    decision: Decision = SIMPLE
    scrutineer: Scrutineer | None = None


class SpreadStudy:
    """Spreads of the margins of one graph. `at_random` gives Monte Carlo trials where they are asked for."""

    def __init__(self, graph: Graph, decider: Decider, at_random: AtRandom | None = None) -> None:
        self._graph, self._decider, self._at_random = graph, decider, at_random
        self._sources, self._propagation = decider.sources, decider.propagation

    def of(self, asked: Asked) -> SpreadResult | None:
        """The spread of a part's margin; None where nothing that it rests on has one, and no scrutineer measures it."""
        margin = asked.part.margin
        if margin is None or margin.sort != "number":
            return None
        paths = self._sources.of(margin)
        if not paths and (asked.scrutineer is None or asked.scrutineer.uncertainty is None):
            return None
        try:
            room = _Margin(self._propagation, margin, asked.part.unit or preferred(margin.dimension))
        except Unsure:
            return None
        mattering = [path for path in paths if self._matters(path, room)]
        if not mattering and (asked.scrutineer is None or asked.scrutineer.uncertainty is None):
            return None
        return self._result(asked, margin, room, mattering)

    def _matters(self, path: str, room: _Margin) -> bool:
        """False where the input cancels out of the margin."""
        slope = room.slopes.by_path.get(path, ZERO)
        if slope is None:
            return True
        spread = self._sources.spreads[path]
        half = spread.half_width if isinstance(spread, Uncertainty) else max(abs(spread.upper), abs(spread.lower))
        moved = float((abs(slope) * self._propagation.width(path, half)).ball().upper())
        return moved > NOTHING * max(abs(float(room.number)), moved * NOTHING)

    def _result(self, asked: Asked, margin: Term, room: _Margin, paths: Sequence[str]) -> SpreadResult:
        propagated = self._propagation.of(margin)
        uncertain, drawn = self._kinds(paths)
        measured = room.measured(propagated, asked.decision.coverage) if uncertain and propagated is not None else None
        limits = limits_of(asked.around, asked.part)
        trials = None
        if measured is not None and self._at_random is not None:
            trials = self._at_random(margin, room.unit, measured, limits)
        return SpreadResult(
            decision=asked.decision.name,
            measured=measured,
            guard=measured.expanded if measured is not None and asked.decision.name == "guarded" else None,
            probability=self._probability(asked, propagated, limits, room.unit),
            stack=room.stack(drawn),
            worst_case=self._worst(margin, room.unit, paths),
            contributors=tuple(sorted(self._contributors(paths, room, propagated), key=lambda item: -item.share)),
            trials=trials,
            notes=tuple(self._notes(margin, uncertain, propagated, paths)),
        )

    def _notes(
        self, margin: Term, uncertain: Sequence[str], propagated: Propagated | None, paths: Sequence[str]
    ) -> Iterable[str]:
        if paths and _asks_solver(margin):
            yield "the margin rests on a solver: neither first-order figures nor a worst case are given"
        elif paths and propagated is None:
            yield "the margin jumps or is not smooth here: first-order figures are not given"
        elif propagated is not None and propagated.slopes.bent:
            yield "the margin has a kink here: the uncertainty is what it is at most, and no probability is given"
        if uncertain and len(uncertain) < len(paths):
            yield "probabilities take drawing tolerances at their stated value"

    # --- probabilities -----------------------------------------------------------------------------------------------

    def _probability(
        self, asked: Asked, propagated: Propagated | None, limits: Sequence[Term], unit: Unit
    ) -> Probability | None:
        if propagated is None or propagated.slopes.bent:
            return None
        rooms = [float(found.number) for term in limits if (found := self._propagation.of(term)) is not None]
        standard = _root(propagated.variance)
        risk = fails(rooms, standard) if standard else None
        accepted, told = _scrutinised(asked.scrutineer, rooms, standard)
        if risk is None and accepted is None:
            return None
        return Probability(None if risk is None else 1.0 - risk, risk, accepted, told)

    # --- tolerances --------------------------------------------------------------------------------------------------

    def _kinds(self, paths: Sequence[str]) -> tuple[list[str], list[str]]:
        """Inputs with an uncertainty, and those with a tolerance."""
        measured = [path for path in paths if isinstance(self._sources.spreads[path], Uncertainty)]
        return measured, [path for path in paths if path not in measured]

    def _worst(self, margin: Term, unit: Unit, paths: Sequence[str]) -> WorstCase | None:
        if not paths or _asks_solver(margin):
            return None
        found = self._decider.least(margin, paths, box_of(self._sources, self._graph, paths))
        drawn = len(self._kinds(paths)[1])
        kinds = [
            kind for kind, is_there in (("tolerances", drawn), ("stated uncertainties", len(paths) - drawn)) if is_there
        ]
        return WorstCase(
            None if found.low is None else certain_amount(found.low, unit),
            found.proved,
            None if found.found is None or found.proved else certain_amount(found.found, unit),
            " and ".join(kinds),
        )

    # --- contributors ------------------------------------------------------------------------------------------------

    def _contributors(
        self, paths: Sequence[str], room: _Margin, propagated: Propagated | None
    ) -> Iterable[Contributor]:
        slopes = room.slopes
        uncertain, drawn = self._kinds(paths)
        if propagated is not None and not slopes.bent:
            total = float(propagated.variance)
            for path in uncertain:
                share = float(self._propagation.weight(slopes, path, uncertain)) / total if total else 0.0
                width = self._propagation.standard_of(path)
                yield self._contributor(path, room, width, share, None)
        if slopes.bent or any(slopes.by_path.get(path, ZERO) is None for path in drawn):
            return
        halves = {path: abs(_slope(slopes, path) * self._propagation.half_of(path)) for path in drawn}
        whole = sum(float(half) for half in halves.values())
        squares = sum(float(half) ** 2 for half in halves.values())
        for path, half in halves.items():
            share = float(half) / whole if whole else 0.0
            of_squares = float(half) ** 2 / squares if squares else 0.0
            yield self._contributor(path, room, self._propagation.half_of(path), share, of_squares)

    def _contributor(
        self, path: str, room: _Margin, width: Certain, share: float, of_squares: float | None
    ) -> Contributor:
        fact = self._graph.facts[path]
        slope = _slope(room.slopes, path)
        return Contributor(
            path,
            "uncertainty" if of_squares is None else "tolerance",
            show_spread(spread_of_si(fact.spread, fact.unit), fact.unit) if fact.unit is not None else "",
            room.slope(slope, fact.unit),
            certain_amount(abs(slope) * width, room.unit, FIGURES),
            share,
            of_squares,
        )


def _asks_solver(term: Term) -> bool:
    """True where a number rests on a solver, which gives points and would have to run for each box of a search."""
    return any(part.kind == "external" for part in cone([term]))


class _Margin:
    """A margin with its slopes, in a unit."""

    def __init__(self, propagation: Propagation, term: Term, unit: Unit) -> None:
        self._propagation, self.unit = propagation, unit
        self.slopes = propagation.slopes(term)
        self.number = propagation.number(term)

    def measured(self, propagated: Propagated, coverage: Fraction) -> Measured | None:
        try:
            standard = propagated.standard
        except Unsure:
            return None
        return Measured(
            certain_amount(standard, self.unit, FIGURES),
            certain_amount(standard * coverage, self.unit, FIGURES),
            show_number(coverage),
            propagated.slopes.bent,
        )

    def stack(self, paths: Sequence[str]) -> Stack | None:
        """Worst case and root-sum-square of the tolerances alone, to first order."""
        if not paths or self.slopes.bent or any(self.slopes.by_path.get(path, ZERO) is None for path in paths):
            return None
        middle, fall, squares = self.number, ZERO, ZERO
        for path in paths:
            slope, half = _slope(self.slopes, path), self._propagation.half_of(path)
            middle = middle + slope * self._propagation.middle_of(path)
            fall = fall + abs(slope) * half
            squares = squares + (slope * half) ** 2
        root = squares ** Fraction(1, 2)
        low, high = (certain_amount(end, self.unit, 5) for end in (middle - root, middle + root))
        return Stack(certain_amount(middle - fall, self.unit), low, high)

    def slope(self, slope: Certain, unit: Unit | None) -> str:
        """`-1 mm/mm`, `0.62 kg/kg`: the margin's unit over the input's."""
        scale = Certain(exact_number(Monomial(unit.factor, unit.power))) if unit is not None else 1
        shown = certain_amount(slope * scale, self.unit, 4).shown
        below = unit.symbol if unit is not None else "1"
        above = self.unit.symbol
        return f"{shown} {above}/{f'({below})' if '/' in below or '*' in below else below}"


def limits_of(condition: Condition, part: Part) -> tuple[Term, ...]:
    """The margins of one value to all its limits that are joined by `and`: both sides of a range."""
    if isinstance(condition, Part) or part.margin is None:
        return (part.margin,) if part.margin is not None else ()
    if isinstance(condition, AllOf) and part in condition.parts:
        same = [
            other.margin
            for other in condition.parts
            if isinstance(other, Part) and other.margin is not None and other.value is part.value
        ]
        return tuple(dict.fromkeys(same)) if part.value is not None else (part.margin,)
    inside = (condition.then, condition.otherwise) if isinstance(condition, Either) else condition.parts
    for inner in inside:
        if not isinstance(inner, Part) and any(item is part for item in every_part(inner)):
            return limits_of(inner, part)
    return (part.margin,)


def _slope(slopes: Slopes, path: str) -> Certain:
    slope = slopes.by_path.get(path, ZERO)
    assert slope is not None, "asked only where every slope is known"
    return slope


def _root(variance: Certain) -> float:
    return math.sqrt(max(float(variance), 0.0))


def _scrutinised(scrutineer: Scrutineer | None, rooms: Sequence[float], standard: float) -> tuple[float | None, str]:
    """The probability that the scrutineer's reading, with the leniency that he gives, lies within the limits."""
    if scrutineer is None or scrutineer.uncertainty is None or scrutineer.unit is None:
        return None, ""
    own = spread_in_si(scrutineer.uncertainty, scrutineer.unit)
    assert isinstance(own, Uncertainty)
    leniency = 0.0
    if scrutineer.tolerance is not None:
        rational, _ = scrutineer.tolerance.unit.width_in_si(scrutineer.tolerance.value)
        leniency = float(rational)
    both = (standard**2 + float(own.variance())) ** 0.5
    if not both:
        return None, ""
    told = f"instrument {show_spread(scrutineer.uncertainty, scrutineer.unit)}"
    if scrutineer.tolerance is not None and scrutineer.tolerance.value:
        told = f"{told}, leniency {scrutineer.tolerance}"
    refused = sum(normal_share(-(room + leniency) / both) for room in rooms)
    return max(0.0, 1.0 - refused), told
