"""Rules to cases: for each element in each combination of states, what applies and what is asked."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from itertools import product

from rulecheck.binding.aggregates import Loop, loop
from rulecheck.binding.bound import Broken, Element, Number, Truth, kind_of
from rulecheck.binding.comparing import all_of, any_of, opposite
from rulecheck.binding.conditions import Builder, certain, holds, open_part, scales_agree
from rulecheck.binding.dispensations import dispensation
from rulecheck.binding.documents import evidence, judgement
from rulecheck.binding.parsing import parsed, parsed_each
from rulecheck.binding.scope import Scope, Shared
from rulecheck.binding.states import Stance, stances
from rulecheck.graph.conditions import AllOf, AnyOf, BoundRule, Case, Condition
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import Alternative, Rule, Ruleset
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located

MOST_CASES = 20_000


def bind_rule(shared: Shared, ruleset: Ruleset, name: str) -> BoundRule | None:
    """Bind a rule once; None where it is at fault."""
    key = ("rule", ruleset.file, name)
    if key not in shared.memo:
        shared.stack.append(f"rule({name})")
        shared.memo[key] = _Binding(shared, ruleset, ruleset.rules[name], Scope(shared, shared.base, ruleset)).bound()
        shared.stack.pop()
    rule: BoundRule | None = shared.memo[key]
    return rule


@dataclass(frozen=True, slots=True)
class _Binding:
    """One rule on its way; `record` gathers what it touches."""

    shared: Shared
    ruleset: Ruleset
    rule: Rule
    record: Scope

    def bound(self) -> BoundRule | None:
        faults = len(self.shared.faults.found)
        cases = [case for stance in stances(self.shared, self.ruleset, self.rule) for case in self._in_stance(stance)]
        if len(self.shared.faults.found) > faults:
            return None
        if not all(scales_agree(case.condition) for case in cases):
            self.record.fault(
                "scale-needed",
                f"rule '{self.rule.name}' compares margins that have no common measure",
                self.rule.span,
                expected="scale: a value that margins are measured by",
            )
            return None
        touched = sorted(self.record.touched)
        permit = dispensation(self.record, self.rule.name)
        met = self.record.bank.flag(True) if permit is not None else self._met(cases)
        estimated = tuple(
            path for path in touched if self.shared.facts.get(path) and self.shared.facts[path].basis == "estimated"
        )
        return BoundRule(
            self.rule.name, self.ruleset.file, met, tuple(cases), self.rule.empty, estimated, tuple(touched),
            tuple(sorted(self.record.figures)), permit,
        )  # fmt: skip

    def _met(self, cases: Sequence[Case]) -> Term:
        scope = self.record
        flags = [
            any_of(scope, [opposite(scope, case.applies), case.exempt, holds(scope, case.condition)]) for case in cases
        ]
        return all_of(scope, flags)

    def _in_stance(self, stance: Stance) -> list[Case]:
        scope = self.record
        if stance.view is None:
            part = open_part(scope, stance.missing, self.rule.span)
            return [Case("", stance.states, scope.bank.flag(True), scope.bank.flag(False), part)]
        scope = replace(scope, view=stance.view)
        if not self.rule.valid.holds(self.shared.day):
            return [self._idle(scope, "not in force on the evaluation date")]
        if self.rule.standing in ("may", "note"):
            return [self._idle(scope, "it binds nothing")]
        if not self.rule.each:
            case = self._case(scope, "", None)
            return [] if case is None else [case]
        return self._for_each(scope)

    def _idle(self, scope: Scope, because: str) -> Case:
        never = scope.bank.flag(False)
        return Case("", scope.view.states, never, never, certain(scope, True, because, self.rule.span), because)

    # --- each --------------------------------------------------------------------------------------------------------

    def _for_each(self, scope: Scope) -> list[Case]:
        loops = [self._loop(scope, where) for where in self.rule.each]
        whole = [item for item in loops if item is not None]
        if len(whole) < len(loops):
            return []
        count = 1
        for item in whole:
            count *= max(1, len(item.elements))
        if count > MOST_CASES:
            scope.fault(
                "too-large",
                f"rule '{self.rule.name}' has {count} elements",
                self.rule.span,
                expected=f"at most {MOST_CASES}",
            )
            return []
        cases = [self._lacking(scope, item) for item in whole if item.lacking]
        for elements in product(*(item.elements for item in whole)):
            inner = scope.inside([pair for element in elements for pair in element.variables], loop=False)
            label = " with ".join(element.label for element in elements)
            case = self._case(inner, label, self._takes_part(scope, elements))
            cases.extend([case] if case is not None else [])
        if not cases:
            self._check_stand_in(scope, whole)
            cases.append(self._empty(scope))
        return cases

    def _loop(self, scope: Scope, where: Located) -> Loop | None:
        head = parsed_each(scope, where)
        if head is None:
            return None
        made = loop(scope, head.variables, head.collection, head.where, head.span)
        return None if isinstance(made, Broken) else made

    def _takes_part(self, scope: Scope, elements: tuple[Element, ...]) -> Term:
        return all_of(scope, [element.condition for element in elements if element.condition is not None])

    def _lacking(self, scope: Scope, item: Loop) -> Case:
        part = open_part(scope, item.lacking, self.rule.span)
        return Case("", scope.view.states, scope.bank.flag(True), scope.bank.flag(False), part)

    def _check_stand_in(self, scope: Scope, loops: list[Loop]) -> None:
        """Bind the rule once for an element that is not there, so that its faults are found."""
        self._case(scope.inside([pair for item in loops for pair in item.empty_name], loop=False), "", None)

    def _empty(self, scope: Scope) -> Case:
        if self.rule.empty == "not applicable":
            return self._idle(scope, "there is no element that it is about")
        if self.rule.empty == "open":
            part = open_part(scope, "an element that the rule is about", self.rule.span)
        else:
            part = certain(scope, self.rule.empty == "complies", "there is no element that it is about", self.rule.span)
        return Case("", scope.view.states, scope.bank.flag(True), scope.bank.flag(False), part)

    # --- one case ----------------------------------------------------------------------------------------------------

    def _case(self, scope: Scope, element: str, takes_part: Term | None) -> Case | None:
        scope = replace(scope, uses={})
        gates = [self._gate(scope, where) for where in self.rule.when]
        exempt = self._flag(scope, self.rule.unless.when, "'unless'") if self.rule.unless else scope.bank.flag(False)
        condition = self._condition(scope, element)
        whole = [gate for gate in gates if not isinstance(gate, Broken)]
        if len(whole) < len(gates) or exempt is None or isinstance(condition, Broken):
            return None
        flags = [holds(scope, gate) for gate in whole]
        applies = all_of(scope, [*flags, *([takes_part] if takes_part is not None else [])])
        because = self.rule.unless.because if self.rule.unless else ""
        return Case(
            element, scope.view.states, applies, exempt, condition, because, tuple(whole), tuple(scope.uses.values())
        )

    def _gate(self, scope: Scope, where: Located) -> Condition | Broken:
        """A condition under which the rule applies, with its margin."""
        syntax = parsed(scope, where)
        return Broken() if syntax is None else Builder(scope).build(syntax)

    def _flag(self, scope: Scope, where: Located, what: str) -> Term | None:
        syntax = parsed(scope, where)
        bound = scope.express(syntax) if syntax is not None else Broken()
        if isinstance(bound, Truth):
            return bound.term
        if not isinstance(bound, Broken):
            scope.fault("kind-mismatch", f"{what} takes a condition, and this is {kind_of(bound)}", where.span)
        return None

    def _condition(self, scope: Scope, element: str) -> Condition | Broken:
        own = self._alternative(scope, self.rule.own, element)
        branches = self._branches(scope, element) if self.rule.branches else None
        parts = [*own, *([branches] if branches is not None else [])]
        if any(isinstance(part, Broken) for part in parts):
            return Broken()
        whole = tuple(part for part in parts if not isinstance(part, Broken))
        return whole[0] if len(whole) == 1 else AllOf(whole)

    def _alternative(self, scope: Scope, alternative: Alternative, element: str) -> list[Condition | Broken]:
        parts: list[Condition | Broken] = []
        if alternative.when is not None:
            flag = self._flag(scope, alternative.when, "'when'")
            parts.append(
                Broken()
                if flag is None
                else replace(
                    certain(scope, True, f"open to it: {alternative.when.text}", alternative.when.span), holds=flag
                )
            )
        if alternative.require is not None:
            syntax = parsed(scope, alternative.require)
            parts.append(Broken() if syntax is None else Builder(scope, self._scale(scope)).build(syntax))
        if alternative.evidence is not None:
            parts.append(evidence(scope, alternative.evidence))
        if alternative.judgement is not None:
            parts.append(judgement(scope, self.rule.name, element, alternative.judgement))
        return parts

    def _scale(self, scope: Scope) -> Number | None:
        if self.rule.scale is None:
            return None
        syntax = parsed(scope, self.rule.scale)
        bound = scope.express(syntax) if syntax is not None else Broken()
        if isinstance(bound, Number):
            return bound
        if not isinstance(bound, Broken):
            scope.fault(
                "kind-mismatch", f"'scale' is {kind_of(bound)}", self.rule.scale.span, expected="a value such as 10 mm"
            )
        return None

    def _branches(self, scope: Scope, element: str) -> Condition | Broken:
        claim = scope.view.design.leaves.get(f"claims.{self.rule.name}")
        branches = self.rule.branches
        if isinstance(claim, Located):
            scope.touched.add(f"claims.{self.rule.name}")
            names = tuple(branch.name for branch in branches)
            if claim.text not in names:
                return scope.fault(
                    "unknown-choice",
                    f"rule '{self.rule.name}' has no branch '{claim.text}'",
                    claim.span,
                    expected=" or ".join(names),
                    advice=nearest(claim.text, names),
                )
            branches = tuple(branch for branch in branches if branch.name == claim.text)
        made: list[Condition] = []
        for branch in branches:
            parts = self._alternative(scope, branch, element)
            if any(isinstance(part, Broken) for part in parts):
                return Broken()
            whole = tuple(part for part in parts if not isinstance(part, Broken))
            unused = claim is None and (branch.evidence is not None or branch.judgement is not None)
            if unused:
                whole = (certain(scope, False, f"branch '{branch.name}' is not claimed", self.rule.span),)
            made.append(whole[0] if len(whole) == 1 else AllOf(whole))
        return AnyOf(tuple(made), tuple(branch.name for branch in branches))
