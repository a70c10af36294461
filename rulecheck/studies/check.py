"""`check`: does it comply, and by how much."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import replace

from rulecheck.diagnostics import Span
from rulecheck.graph.conditions import AnyOf, BoundRule, Case, Condition, Either, Part
from rulecheck.graph.figures import Graph
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import SIMPLE, Decision, Rule
from rulecheck.operations.values import Unknown
from rulecheck.outcome.results import Amount, BindingPart, Finding, PartResult, RuledResult, Verdict
from rulecheck.outcome.spread import SpreadResult
from rulecheck.quantity.units import Unit
from rulecheck.readers.exact import ExactReader
from rulecheck.studies.amounts import amount, place, reason_text
from rulecheck.studies.beside import NO_MEASURE, near_turning
from rulecheck.studies.deciding import Decider
from rulecheck.studies.envelopes import (
    EnvelopeStudy,
    place_of,
)
from rulecheck.studies.judging import Judge, Judged, all_of, verdict_of
from rulecheck.studies.reserves import Keeping, Reserves
from rulecheck.studies.spread import Asked as AskedSpread
from rulecheck.studies.spread import AtRandom, SpreadStudy


class Checker:
    """Judges the rules of one graph, with one reader.

    `decision` is the decision rule of the house, for rules that have none of their own or of their rule book;
    `at_random` gives Monte Carlo trials beside each uncertainty.
    """

    def __init__(
        self,
        graph: Graph,
        reserves: Reserves | None = None,
        decision: Decision = SIMPLE,
        at_random: AtRandom | None = None,
    ) -> None:
        self.graph, self.bank = graph, graph.bank
        self.reader = ExactReader(graph.bank, graph.inputs)
        self.judge = Judge(graph.bank, self.reader)
        self.decider = Decider(graph, self.reader)
        self.decision = decision
        self._spread = SpreadStudy(graph, self.decider, at_random)
        self.reserves = reserves or Reserves()
        self._amounts: dict[tuple[int, Unit | None, bool], Amount | None] = {}
        self._envelopes = EnvelopeStudy(graph, self.reader, self.decider)
        self._keeping = Keeping(self.judge, self._envelopes, self.reserves)

    def placed(self, bound: BoundRule) -> BoundRule:
        """The rule with each case of an envelope at the point that decides it."""
        return self._envelopes.placed_rule(bound)

    def finding(self, bound: BoundRule, rule: Rule, ruleset_name: str = "", *, with_spread: bool = True) -> Finding:
        """One rule with its verdict. The spread of its margin costs a search: studies that do not show it leave it out."""
        bound = self.placed(bound)
        verdict, binding, reason = self._rule(self._cases(bound))
        verdict, reason, permit = self._settled(bound, rule, verdict, binding, reason)
        part = binding.part if binding else None
        shown = part if part is not None and self._is_shown(part, bound, verdict) else None
        relative = self.judge.relative(shown) if shown else None
        spread = self._spread_of(bound, rule, binding) if shown and with_spread else None
        return Finding(
            name=rule.name,
            ruleset=rule.ruleset,
            clause=rule.clause,
            title=rule.title or rule.name.replace("_", " "),
            standing=rule.standing,
            verdict=verdict,
            reason=reason or self._at_worst(shown, verdict, spread),
            margin=self._amount(shown.margin, shown, width=True) if shown else None,
            strict=bool(shown and shown.strict),
            relative_margin=self.reader.approximate(relative) if relative is not None else None,
            value=self._amount(part.value, part) if part else None,
            limit=self._amount(part.limit, part) if part else None,
            sense=part.sense if part else "",
            binding=_binding(binding),
            parts=tuple(self._parts(bound)),
            rule_place=place(part.span if part and part.span else rule.span) or place(rule.span),  # type: ignore[arg-type]
            value_place=place(self._value_place(part)),
            estimates=bound.estimated,
            outside_validity=self._outside(bound),
            notes=(
                *([part.where] if part is not None and part.where else []),
                *near_turning(self.judge, bound.cases),
                *([NO_MEASURE] if binding is not None and binding.mixed else []),
            ),
            dispensation=permit,
            history=tuple(f"{origin.what}: {origin.span}" for origin in rule.history),
            ruleset_name=ruleset_name,
            counted=bool(part and part.counted),
            spread=spread,
            ruled=self._ruled(shown),
            consequence=str(rule.consequence or ""),
            envelope=self._envelopes.result(binding.case if binding else None),
        )

    def decision_of(self, bound: BoundRule) -> Decision:
        """The decision rule of a rule: its own, that of its rule book, or the house's."""
        return bound.decision or self.decision

    def read_all(self) -> None:
        """Evaluate what every rule rests on, so that studies start from what is known."""
        for rule in self.graph.rules:
            self.reader.truth(rule.met)

    def binding(self, bound: BoundRule) -> Judged | None:
        """What decides a rule."""
        return self._rule(self._cases(self.placed(bound)))[1]

    def _is_shown(self, part: Part, bound: BoundRule, verdict: Verdict) -> bool:
        """True where a margin is shown: it is known, and not left out of account for something that is missing."""
        if verdict not in ("open", "unproven"):
            return True
        return self.decision_of(bound).name != "simple" and not isinstance(self.reader.truth(part.holds), Unknown)

    def _at_worst(self, part: Part | None, verdict: Verdict, spread: SpreadResult | None) -> str:
        """Why a rule is in breach whose condition the values as stated meet."""
        if part is None or verdict not in ("breach", "not followed") or self.reader.truth(part.holds) is not True:
            return ""
        least = spread.worst_case.margin if spread is not None and spread.worst_case is not None else None
        return "its tolerances allow a breach" + (f": the least margin is {least}" if least is not None else "")

    def _spread_of(self, bound: BoundRule, rule: Rule, binding: Judged | None) -> SpreadResult | None:
        """The spread of what decides a rule."""
        if binding is None or binding.part is None or binding.case is None:
            return None
        if not self.decider.sources and rule.scrutineer is None:
            return None
        asked = AskedSpread(binding.part, binding.case.condition, self.decision_of(bound), rule.scrutineer)
        return self._spread.of(asked)

    # --- cases -------------------------------------------------------------------------------------------------------

    def _cases(self, bound: BoundRule) -> list[tuple[Case, Verdict, Judged, str]]:
        decision = self.decision_of(bound)
        judge = self._judge_under(decision)
        return [
            (case, *self._envelopes.throughout(case, self._case(case, judge, decision), decision))
            for case in bound.cases
        ]

    def _judge_under(self, decision: Decision) -> Judge:
        if decision.name == "simple":
            return self.judge
        return Judge(
            self.bank,
            self.reader,
            lambda part: self.decider.part(part, decision),
            lambda flag: self.decider.flag(flag, decision),
        )

    def _case(self, case: Case, judge: Judge, decision: Decision) -> tuple[Verdict, Judged, str]:
        applies = self.decider.flag(case.applies, decision)
        exempt = self.decider.flag(case.exempt, decision)
        found = replace(judge.condition(case.condition), case=case)
        if applies is False:
            return "not applicable", found, case.because if case.applies is case.exempt else ""
        if isinstance(applies, Unknown):
            return verdict_of(applies), found, reason_text(applies.reasons)
        if exempt is True:
            return "not applicable", found, case.because or "exempt"
        if isinstance(exempt, Unknown) and found.truth is not True:
            return verdict_of(exempt), found, reason_text(exempt.reasons)
        reason = reason_text(found.truth.reasons) if isinstance(found.truth, Unknown) else ""
        return verdict_of(found.truth), found, reason

    def _rule(self, judged: Sequence[tuple[Case, Verdict, Judged, str]]) -> tuple[Verdict, Judged | None, str]:
        order: tuple[Verdict, ...] = ("breach", "open", "unproven", "complies")
        for verdict in order:
            chosen = [(found, reason) for _, said, found, reason in judged if said == verdict]
            if not chosen:
                continue
            if verdict in ("open", "unproven"):
                reasons = dict.fromkeys(reason for _, reason in chosen if reason)
                found = chosen[0][0]
                return verdict, found, "; ".join(list(reasons)[:4])
            return verdict, all_of([found for found, _ in chosen]), ""
        if not judged:
            return "not applicable", None, ""
        numbered = [found for _, _, found, _ in judged if found.room is not None]
        worst = all_of(numbered) if numbered else judged[0][2]
        reason = next((said for _, _, _, said in judged if said), "its condition does not hold")
        return "not applicable", worst, reason

    def _settled(
        self, bound: BoundRule, rule: Rule, verdict: Verdict, binding: Judged | None, reason: str
    ) -> tuple[Verdict, str, str]:
        permit = ""
        if bound.permit is not None and verdict in ("breach", "open", "unproven"):
            permit = f"{bound.permit.reference}, until {bound.permit.until.isoformat()}"
            return "dispensed", f"dispensation {permit}", permit
        if verdict == "breach" and rule.standing == "should":
            return "not followed", reason, permit
        tight = (
            [case for case in bound.cases if not self._keeping.is_roomy(rule, case)] if verdict == "complies" else []
        )
        if tight:
            return "tight", _inside_reserve(tight, binding), permit
        return verdict, reason, permit

    # --- what is shown -----------------------------------------------------------------------------------------------

    def _amount(self, term: Term | None, part: Part, *, width: bool = False) -> Amount | None:
        if term is None:
            return None
        key = (term.index, part.unit, width)
        if key not in self._amounts:
            self._amounts[key] = amount(self.reader, self.bank, term, part.unit, width=width)
        return self._amounts[key]

    def _parts(self, bound: BoundRule) -> Iterable[PartResult]:
        decision = self.decision_of(bound)
        for case in bound.cases:
            if self.reader.truth(case.applies) is False:
                continue
            for part, branch in self._leaves(case.condition):
                yield self.part_result(part, case, branch, decision)

    def _leaves(self, condition: Condition, branch: str = "") -> Iterable[tuple[Part, str]]:
        """The parts that are asked: of a conditional those of the arm that is taken, else what chooses."""
        if isinstance(condition, Part):
            yield condition, branch
            return
        if isinstance(condition, Either):
            yield from self._leaves(self.judge.taken(condition) or condition.gate, branch)
            return
        own = condition.labels if isinstance(condition, AnyOf) else ()
        for part, label in zip(condition.parts, own or (branch,) * len(condition.parts), strict=True):
            yield from self._leaves(part, label)

    def part_result(self, part: Part, case: Case, branch: str, decision: Decision = SIMPLE) -> PartResult:
        """One part for the report."""
        truth = self.decider.part(part, decision)
        known = not isinstance(self.reader.truth(part.holds), Unknown)
        relative = self.judge.relative(part) if known else None
        return PartResult(
            part.text,
            part.kind,
            verdict_of(truth),
            reason_text(truth.reasons) if isinstance(truth, Unknown) else "",
            self._amount(part.margin, part, width=True) if known and part.margin is not None else None,
            part.strict,
            self.reader.approximate(relative) if relative is not None else None,
            self._amount(part.value, part),
            self._amount(part.limit, part),
            part.sense,
            case.element,
            dict(case.states),
            place(part.span),
            branch,
            self._ruled(part if known else None),
            place_of(case),
        )

    def _ruled(self, part: Part | None) -> RuledResult | None:
        """What tolerance and rounding did to a part."""
        said = part.ruled if part is not None else None
        if said is None or part is None:
            return None
        margin = self._amount(said.margin, part, width=True)
        return RuledResult(margin, self._amount(said.value, part), said.tolerance, said.rounding)

    def _value_place(self, part: Part | None) -> Span | None:
        if part is None:
            return None
        if part.place is not None:
            return part.place
        term = part.value
        if term is None:
            return None
        while term.arguments and term.kind != "input":
            inputs = [argument for argument in term.arguments if argument.kind not in ("constant", "unknown")]
            if not inputs:
                break
            term = inputs[0]
        fact = self.graph.facts.get(term.path) if term.kind == "input" else None
        return fact.span if fact else None

    def _outside(self, bound: BoundRule) -> tuple[str, ...]:
        names = []
        for name in bound.figures:
            figure = self.graph.figures.get(name)
            if figure is not None and figure.valid is not None and self.reader.truth(figure.valid) is False:
                names.append(name)
        return tuple(names)


def _inside_reserve(tight: Sequence[Case], binding: Judged | None) -> str:
    """The reason, with the element where it is another one than that which binds."""
    elements = [case.element for case in tight]
    bound = binding.case.element if binding is not None and binding.case is not None else ""
    return "inside the house reserve" + ("" if bound in elements else f": {', '.join(elements[:4])}")


def _binding(judged: Judged | None) -> BindingPart | None:
    if judged is None or judged.part is None:
        return None
    case = judged.case
    return BindingPart(
        judged.part.text,
        case.element if case else "",
        dict(case.states) if case else {},
        judged.branch,
        place_of(case) if case else {},
    )
