"""Cases with an envelope: proved throughout, and placed at the point that decides, where everything is exact."""

from __future__ import annotations

from collections.abc import Callable, Collection, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from itertools import product

from rulecheck.graph.conditions import AllOf, AnyOf, BoundRule, Case, Condition, Either, Envelope, Part, numeric_parts
from rulecheck.graph.envelopes import case_at
from rulecheck.graph.figures import Graph
from rulecheck.graph.terms import Axis, Bank, Term
from rulecheck.model.ruleset import Decision
from rulecheck.operations.arithmetic import divide
from rulecheck.operations.logic import both, either
from rulecheck.operations.values import Unknown
from rulecheck.outcome.results import Amount, EnvelopeResult, RangeResult, Verdict
from rulecheck.quantity.dimension import PURE
from rulecheck.quantity.numbers import show_exact, show_number
from rulecheck.quantity.units import Unit
from rulecheck.readers.box import Box
from rulecheck.readers.certain import Certain
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.least import least
from rulecheck.readers.throughout import MOST_BOXES, Proof, Prover, corners
from rulecheck.studies.amounts import PI, certain_amount
from rulecheck.studies.deciding import Decider
from rulecheck.studies.judging import Judge, Judged

_POINTS = {1: 17, 2: 5}
_FEW_POINTS = 3
"""A grid of so many points an axis is looked at for where the margin is least."""
_MOST_THRESHOLDS = 12
Point = Mapping[str, Fraction]
Found = tuple[Verdict, Judged, str]
"""A verdict, what decides it, and the reason."""


@dataclass(frozen=True, slots=True)
class Placed:
    """A case at the point that decides it. `whole` is the case throughout its envelope, `proof` whether it is met there,
    `bound` what the margin that binds is certainly not below, in `unit`; None where that is not certain."""

    case: Case
    whole: Case
    proof: Proof
    bound: Certain | None = None
    unit: Unit | None = None


class EnvelopeStudy:
    """Places the cases of one graph, and says what they come to throughout their envelopes."""

    def __init__(self, graph: Graph, reader: ExactReader, decider: Decider) -> None:
        self._graph, self._bank, self._reader = graph, graph.bank, reader
        self._decider = decider
        self._rules: dict[tuple[str, str], BoundRule] = {}
        self._places: dict[int, Placed] = {}

    def placed_rule(self, bound: BoundRule) -> BoundRule:
        """The rule with each case at the worst point of its envelope: where it is broken, else unknown, else nearest to
        its limit."""
        if all(case.envelope is None or case.at for case in bound.cases):
            return bound
        key = (bound.ruleset, bound.name)
        if key not in self._rules:
            self._rules[key] = replace(bound, cases=tuple(map(self._placed, bound.cases)))
        return self._rules[key]

    def _placed(self, case: Case) -> Case:
        if case.envelope is None:
            return case
        found = _Placing(self._graph, self._reader, case).placed()
        self._places[id(found.case)] = found
        return found.case

    def of(self, case: Case | None) -> Placed | None:
        """What a placed case stands for; None for a case without an envelope."""
        return None if case is None else self._places.get(id(case))

    def result(self, case: Case | None) -> EnvelopeResult | None:
        """The envelope of a placed case, for the report."""
        found = self.of(case)
        return None if found is None else envelope_result(found)

    def throughout(self, case: Case, found: Found, decision: Decision) -> Found:
        """What a case comes to throughout its envelope, by what it comes to at the point that decides it."""
        placed = self.of(case)
        verdict, judged, reason = found
        if placed is None or verdict == "breach":
            return found
        if verdict in ("open", "unproven") and reason:
            return verdict, judged, f"{reason}, at {at_words(place_of(case))}"
        if isinstance(placed.proof.truth, Unknown):
            return "unproven", judged, not_proved(placed)
        if verdict == "complies" and not self._complies(placed, decision):
            return "unproven", judged, "within uncertainty: not proved throughout the envelope under its decision rule"
        return found

    def _complies(self, placed: Placed, decision: Decision) -> bool:
        """True where values as stated count, or a box of what they may be is proved together with the envelope."""
        if decision.name == "simple":
            return True
        flag = holds(self._bank, placed.whole.condition)
        box = self._decider.box(met(self._bank, placed.whole, flag), decision)
        return not box or self.holds_throughout(placed.whole, flag, box, self._decider.sources.settled)

    def holds_throughout(self, case: Case, flag: Term, more: Box | None = None, settled: Collection[Term] = ()) -> bool:
        """True where a flag is proved to hold throughout the envelope of a case, wherever the case applies; `more` are
        inputs that run over intervals as well."""
        assert case.envelope is not None
        asked = met(self._bank, case, flag)
        axes = case.envelope.axes
        prover = Prover(self._bank, self._graph.inputs, self._reader, asked, axes, more=more, settled=settled)
        return prover.proof().truth is True


def met(bank: Bank, case: Case, flag: Term) -> Term:
    """Whether a case is met, where `flag` is its condition."""
    asked = bank.apply(either, [case.exempt, flag], PURE)
    return bank.branch(case.applies, asked, bank.flag(True))


class _Placing:
    """One case on its way to the point that decides it."""

    def __init__(self, graph: Graph, reader: ExactReader, case: Case) -> None:
        assert case.envelope is not None
        self.bank, self.case = graph.bank, case
        self.envelope: Envelope = case.envelope
        self.measures = [measure(graph.bank, part) for part in numeric_parts(case.condition)]
        margins = [part.margin for part in numeric_parts(case.condition) if part.margin is not None]
        flag = met(graph.bank, case, holds(graph.bank, case.condition))
        also = [*self.measures, *margins, case.applies, case.exempt]
        self.prover = Prover(graph.bank, graph.inputs, reader, flag, self.envelope.axes, also=also)

    def placed(self) -> Placed:
        proof = self.prover.proof()
        if isinstance(proof.truth, Unknown) and proof.at is not None:
            return Placed(self._at(proof.at), self.case, proof)
        judged = [(point, found) for point in self._points(proof) if (found := self._judged(point)) is not None]
        if proof.truth is False:
            broken = [(point, found) for point, found in judged if found.truth is False]
            point = min(broken, key=lambda pair: _room(pair[1]))[0] if broken else proof.at
            assert point is not None
            return Placed(self._at(point), self.case, proof)
        if not judged:
            return Placed(self._at(next(corners(self.prover.box))), self.case, proof)
        point, _ = min(judged, key=lambda pair: _room(pair[1]))
        return Placed(self._at(point), self.case, proof, *self._bound(point))

    def _at(self, point: Point) -> Case:
        return case_at(self.bank, self.case, point)

    def _points(self, proof: Proof) -> Iterator[Point]:
        """Corners, a grid with the thresholds of conditions, and where each margin is least."""
        yield from corners(self.prover.box)
        number = _POINTS.get(len(self.prover.box), _FEW_POINTS)
        stops = [
            [low + (high - low) * step / (number - 1) for step in range(number)]
            for low, high in self.prover.box.values()
        ]
        thresholds = self.prover.thresholds()[:_MOST_THRESHOLDS]
        for path, stop in zip(self.prover.box, stops, strict=True):
            stop.extend(place for where, place in thresholds if where == path)
        for values in product(*stops):
            yield dict(zip(self.prover.box, values, strict=True))
        for number_term in self.measures:
            at = least(self.prover.over, number_term, self.prover.box).at
            if at is not None:
                yield at
        if proof.at is not None:
            yield proof.at

    def _judged(self, point: Point) -> Judged | None:
        """The condition at a point; None where the rule does not apply there, or is exempt."""
        reader = self.prover.over.at(point)
        if reader.truth(self.case.applies) is False or reader.truth(self.case.exempt) is True:
            return None
        return Judge(self.bank, reader).condition(self.case.condition)

    def _bound(self, point: Point) -> tuple[Certain | None, Unit | None]:
        """What the margin that binds is certainly not below throughout; only where every part must hold everywhere."""
        fixed = self.case.applies.kind == "constant" and self.case.exempt.kind == "constant"
        judged = self._judged(point)
        if not fixed or judged is None or judged.part is None or judged.part.margin is None:
            return None, None
        if not _is_joint(self.case.condition):
            return None, None
        return least(self.prover.over, judged.part.margin, self.prover.box).low, judged.part.unit


def measure(bank: Bank, part: Part) -> Term:
    """What tells the worst point of a part: its relative margin, else its margin."""
    assert part.margin is not None
    if part.scale is None:
        return part.margin
    return bank.apply(
        divide, [part.margin, part.scale], divide.dimension([part.margin.dimension, part.scale.dimension])
    )


def holds(bank: Bank, condition: Condition) -> Term:
    """A condition as one flag."""
    return flag_of(bank, condition, lambda part: part.holds)


def flag_of(bank: Bank, condition: Condition, of: Callable[[Part], Term]) -> Term:
    """A condition as one flag, where `of` gives a flag for each of its parts."""
    if isinstance(condition, Part):
        return of(condition)
    if isinstance(condition, Either):
        then, otherwise = (flag_of(bank, arm, of) for arm in (condition.then, condition.otherwise))
        return bank.branch(condition.chooses, then, otherwise)
    flags = [flag_of(bank, part, of) for part in condition.parts]
    return bank.apply(either if isinstance(condition, AnyOf) else both, flags, PURE)


def _is_joint(condition: Condition) -> bool:
    """True where all parts must hold."""
    if isinstance(condition, AllOf):
        return all(_is_joint(part) for part in condition.parts)
    return isinstance(condition, Part)


def _room(judged: Judged) -> float:
    if judged.room is None:
        return float("-inf") if judged.truth is False else float("inf")
    return float(judged.room)


# --- in words --------------------------------------------------------------------------------------------------------


def place_of(case: Case) -> dict[str, Amount]:
    """The point of an envelope at which a case stands: each input with its value."""
    if case.envelope is None:
        return {}
    pairs = zip(case.at, case.envelope.units, strict=True)
    return {axis.path: _amount(axis, unit, value) for (axis, value), unit in pairs}


def at_words(point: Mapping[str, Amount]) -> str:
    """A point in words."""
    return ", ".join(f"{path} {value}" for path, value in point.items())


def envelope_result(placed: Placed) -> EnvelopeResult:
    """An envelope for the report."""
    envelope = placed.whole.envelope
    assert envelope is not None
    pairs = list(zip(envelope.axes, envelope.units, strict=True))
    ranges = tuple(_range(axis, unit, axis.low, axis.high) for axis, unit in pairs)
    left: tuple[RangeResult, ...] = ()
    if placed.proof.left:
        left = tuple(_range(axis, unit, *_hull(placed.proof.left, axis.term.path)) for axis, unit in pairs)
    bound = None if placed.bound is None else certain_amount(placed.bound, placed.unit)
    return EnvelopeResult(ranges, bound, left)


def not_proved(placed: Placed) -> str:
    """Why a rule is unproven over its envelope, with the part of it on which nothing was proved."""
    told = " and ".join(f"{item.figure} from {item.low} to {item.high}" for item in envelope_result(placed).undecided)
    return f"not proved for {told} with {MOST_BOXES} boxes"


def _hull(boxes: Sequence[Box], path: str) -> tuple[Fraction, Fraction]:
    return min(box[path][0] for box in boxes), max(box[path][1] for box in boxes)


def _range(axis: Axis, unit: Unit, low: Fraction, high: Fraction) -> RangeResult:
    return RangeResult(axis.path, _amount(axis, unit, low), _amount(axis, unit, high))


def _amount(axis: Axis, unit: Unit, value: Fraction) -> Amount:
    rational, rest = unit.of_si(value, axis.power)
    shown = rational * PI**rest
    return Amount(show_number(shown), unit.symbol, float(shown), "" if rest else show_exact(rational))
