"""Rules to cases: for each element in each combination of states, what applies and what is asked."""

from __future__ import annotations

from dataclasses import dataclass, replace
from itertools import product

from rulecheck.binding.aggregates import Loop, loop, stand_ins
from rulecheck.binding.bound import Bound, Broken, Element, Number, Truth, kind_of
from rulecheck.binding.claims import claimed, rests_on_papers
from rulecheck.binding.comparing import all_of, any_of, opposite
from rulecheck.binding.conditions import Builder, certain, holds, open_part, scales_agree
from rulecheck.binding.dispensations import dispensation
from rulecheck.binding.documents import evidence, judgement
from rulecheck.binding.envelopes import envelope_of, in_envelope
from rulecheck.binding.frozen import frozen
from rulecheck.binding.meeting import met_by
from rulecheck.binding.parsing import parsed, parsed_each
from rulecheck.binding.placing import place_condition
from rulecheck.binding.records import record
from rulecheck.binding.ruling import ruled_parts
from rulecheck.binding.scope import Scope, Shared
from rulecheck.binding.scrutineers import check_scrutineer
from rulecheck.binding.states import Stance, stances
from rulecheck.diagnostics import Span
from rulecheck.formula.syntax import Each
from rulecheck.formula.walk import names
from rulecheck.graph.conditions import AllOf, AnyOf, BoundRule, Case, Condition, numeric_parts
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import Alternative, Rule, Ruleset
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension_names import name_of
from rulecheck.reading.nodes import Located

MOST_CASES = 20_000


def bind_rule(shared: Shared, ruleset: Ruleset, name: str, span: Span | None = None) -> BoundRule | None:
    """Bind a rule once; None where it is at fault. `span` is where another rule refers to it."""
    key = ("rule", ruleset.file, name)
    if key not in shared.memo:
        if not shared.enter(f"rule({name})", span, "rules refer to each other"):
            return None
        shared.memo[key] = _Binding(shared, ruleset, ruleset.rules[name], _record(shared, ruleset)).bound()
        shared.leave()
    rule: BoundRule | None = shared.memo[key]
    return rule


def _record(shared: Shared, ruleset: Ruleset) -> Scope:
    """Where a rule is bound, with a record of all that it rests on."""
    return Scope(shared, shared.base, ruleset, strict=shared.strict or ruleset.validity == "required")


@dataclass(frozen=True, slots=True)
class _Binding:
    """One rule on its way; `record` gathers what it touches."""

    shared: Shared
    ruleset: Ruleset
    rule: Rule
    record: Scope

    def bound(self) -> BoundRule | None:
        faults = len(self.shared.faults.found)
        envelope = envelope_of(self.record, self.rule)
        every = stances(self.shared, self.ruleset, self.rule)
        cases = [
            case for stance in every for case in in_envelope(self.record, self.rule, stance, envelope, self._in_stance)
        ]
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
        if not any(numeric_parts(case.condition) for case in cases):
            self._note_shape()
        elif self.shared.stand_ins:
            self._note_stand_in(cases)
        check_scrutineer(self.record, self.rule, cases)
        touched = sorted(self.record.touched - {written.path.text for written in self.rule.envelope})
        permit = dispensation(self.record, self.rule.name)
        met = self.record.bank.flag(True) if permit is not None else met_by(self.record, cases)
        estimated = tuple(
            path for path in touched if self.shared.facts.get(path) and self.shared.facts[path].basis == "estimated"
        )
        return BoundRule(
            self.rule.name, self.ruleset.file, met, tuple(cases), self.rule.empty, estimated, tuple(touched),
            tuple(sorted(self.record.figures)), permit, self.rule.standing == "shall",
            self.rule.decision,
        )  # fmt: skip

    def _note_shape(self) -> None:
        """What the rule asks of an element and state that are not there: the kind of margin that it would have."""
        scope = replace(self.record, touched=set(), figures=set())
        heads = self._heads(scope)
        pairs = stand_ins(item for head in heads if (item := self._loop(scope, head)))
        inner = scope.inside(pairs, loop=False)
        case = self._case(inner, "", self._where(inner, heads) if self.shared.stand_ins else None)
        if case is not None:
            self.shared.memo[("shape", self.ruleset.file, self.rule.name)] = case.condition
            self.shared.memo[("stand-in", self.ruleset.file, self.rule.name)] = case

    def _note_stand_in(self, cases: list[Case]) -> None:
        """The rule of any element, for proofreading."""
        if self.rule.each or self.rule.states is not None or len(cases) != 1:
            self._note_shape()
        else:
            self.shared.memo[("stand-in", self.ruleset.file, self.rule.name)] = cases[0]

    def _where(self, scope: Scope, heads: list[Each]) -> Term:
        """Whether the stand-ins take part."""
        flags = [scope.express(head.where) for head in heads if head.where is not None]
        return all_of(scope, [flag.term for flag in flags if isinstance(flag, Truth)])

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
        heads = self._heads(scope)
        loops = [self._loop(scope, head) for head in heads]
        whole = [item for item in loops if item is not None]
        if len(whole) < len(self.rule.each):
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
        variables = frozenset(name for head in heads for name in head.variables)
        cases = [
            self._case_of(scope, variables, open_part(scope, item.lacking, self.rule.span))
            for item in whole
            if item.lacking
        ]
        for elements in product(*(item.elements for item in whole)):
            inner = scope.inside([pair for element in elements for pair in element.variables], loop=False)
            label = " with ".join(element.label for element in elements)
            case = self._case(inner, label, self._takes_part(scope, elements))
            cases.extend([case] if case is not None else [])
        if not cases:
            self._check_stand_in(scope, whole)
        nobody = any_of(scope, [self._nobody(scope, item) for item in whole])
        lacks = any(item.lacking for item in whole)
        if not lacks and self.rule.empty != "not applicable" and not (nobody.kind == "constant" and not nobody.value):
            cases.append(self._case_of(scope, variables, self._empty(scope), nobody))
        return cases or [self._idle(scope, "there is no element that it is about")]

    def _heads(self, scope: Scope) -> list[Each]:
        """The loop heads; a variable must be used once."""
        heads = [head for where in self.rule.each if (head := parsed_each(scope, where)) is not None]
        seen: set[str] = set()
        for head in heads:
            for name in head.variables:
                if name in seen:
                    scope.fault("name-taken", f"two loops have a variable '{name}'", head.span, advice="rename one")
                seen.add(name)
        return heads

    def _loop(self, scope: Scope, head: Each) -> Loop | None:
        made = loop(scope, head.variables, head.collection, head.where, head.span)
        return None if isinstance(made, Broken) else made

    def _nobody(self, scope: Scope, item: Loop) -> Term:
        """Whether no element of a loop takes part."""
        if any(element.condition is None for element in item.elements):
            return scope.bank.flag(False)
        conditions = [element.condition for element in item.elements if element.condition is not None]
        return opposite(scope, any_of(scope, conditions))

    def _takes_part(self, scope: Scope, elements: tuple[Element, ...]) -> Term:
        return all_of(scope, [element.condition for element in elements if element.condition is not None])

    def _check_stand_in(self, scope: Scope, loops: list[Loop]) -> None:
        """Bind the rule once for an element that is not there, so that its faults are found."""
        self._case(scope.inside([pair for item in loops for pair in item.empty_name], loop=False), "", None)

    def _empty(self, scope: Scope) -> Condition:
        if self.rule.empty == "open":
            return open_part(scope, "an element that the rule is about", self.rule.span)
        return certain(scope, self.rule.empty == "complies", "there is no element that it is about", self.rule.span)

    def _case_of(
        self, scope: Scope, variables: frozenset[str], condition: Condition, takes_part: Term | None = None
    ) -> Case:
        """A case that no element stands for; of the conditions of the rule, those count that speak of no element."""
        gates = []
        for where in self.rule.when:
            syntax = parsed(scope, where)
            if syntax is not None and not any(name.path[0] in variables for name in names(syntax)):
                made = self._gate(scope, where)
                gates.extend([made] if not isinstance(made, Broken) else [])
        flags = [holds(scope, gate) for gate in gates]
        applies = all_of(scope, [*flags, *([takes_part] if takes_part is not None else [])])
        return Case("", scope.view.states, applies, scope.bank.flag(False), condition, gates=tuple(gates))

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
        condition = whole[0] if len(whole) == 1 else AllOf(whole)
        self._check_scale(scope, condition)
        return condition

    def _check_scale(self, scope: Scope, condition: Condition) -> None:
        """A scale that measures no margin of the rule is a mistake."""
        scale = self._scale(scope)
        if scale is None or self.rule.scale is None:
            return
        dimensions = {part.margin.dimension for part in numeric_parts(condition) if part.margin is not None}
        if dimensions and scale.dimension not in dimensions:
            told = f"'scale' is {name_of(scale.dimension)}, and no margin of rule '{self.rule.name}' is"
            scope.fault("wrong-dimension", told, self.rule.scale.span, advice="give it the unit of the limit")

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
        for wanted in alternative.places:
            parts.append(place_condition(scope, wanted, self._about(scope), self._scale(scope)))
        ruling = alternative.ruling.within(self.rule.own.ruling)
        parts = ruled_parts(scope, parts, ruling)
        if alternative.record is not None:
            parts.append(record(scope, alternative.record, self._scale(scope), ruling))
        if alternative.frozen is not None:
            parts.append(frozen(scope, alternative.frozen))
        if alternative.evidence is not None:
            parts.append(evidence(scope, alternative.evidence))
        if alternative.judgement is not None:
            about = element if self.rule.each else None
            parts.append(judgement(scope, self.rule.name, about, alternative.judgement))
        return parts

    def _about(self, scope: Scope) -> Bound | None:
        """The element that the rule is about, where it is one."""
        heads = (parsed_each(scope, where) for where in self.rule.each)
        names = [name for head in heads if head is not None for name in head.variables]
        return scope.variables.get(names[0]) if len(names) == 1 else None

    def _scale(self, scope: Scope) -> Number | None:
        if self.rule.scale is None:
            return None
        syntax = parsed(scope, self.rule.scale)
        bound = scope.express(syntax) if syntax is not None else Broken()
        if isinstance(bound, Number):
            value = bound.term.value
            if isinstance(value, Monomial) and value.rational <= 0:
                scope.fault(
                    "bad-value", "'scale' is above zero", self.rule.scale.span, expected="a value such as 10 mm"
                )
                return None
            return bound
        if not isinstance(bound, Broken):
            scope.fault(
                "kind-mismatch", f"'scale' is {kind_of(bound)}", self.rule.scale.span, expected="a value such as 10 mm"
            )
        return None

    def _branches(self, scope: Scope, element: str) -> Condition | Broken:
        found = claimed(scope, self.rule)
        if isinstance(found, Broken):
            return found
        branches, claim = found
        if claim is None and all(rests_on_papers(branch) for branch in branches):
            return open_part(scope, f"claims.{self.rule.name}, which says the branch that is used", self.rule.span)
        made: list[Condition] = []
        for branch in branches:
            parts = self._alternative(scope, branch, element)
            if any(isinstance(part, Broken) for part in parts):
                return Broken()
            whole = tuple(part for part in parts if not isinstance(part, Broken))
            if claim is None and rests_on_papers(branch) and not self.shared.stand_ins:
                whole = (certain(scope, False, f"branch '{branch.name}' is not claimed", self.rule.span),)
            made.append(whole[0] if len(whole) == 1 else AllOf(whole))
        return AnyOf(tuple(made), tuple(branch.name for branch in branches))
