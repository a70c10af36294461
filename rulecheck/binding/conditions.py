"""Conditions of a rule: syntax to parts joined by `and` and `or`, each with its margin."""

from __future__ import annotations

from dataclasses import dataclass, replace

from rulecheck.binding.aggregates import loop
from rulecheck.binding.bound import Broken, Element, Number, Truth, kind_of
from rulecheck.binding.comparing import Compared, all_of, any_of, compare, opposite
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import Aggregate, Comparison, Conditional, Joined, Not, Syntax
from rulecheck.graph.conditions import AllOf, AnyOf, Condition, Either, Part, numeric_parts
from rulecheck.graph.terms import Term
from rulecheck.operations.arithmetic import absolute
from rulecheck.operations.extremes import maximum
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import PURE, Dimension
from rulecheck.quantity.dimension_names import preferred
from rulecheck.quantity.units import Unit

_NO_SCALE = ("degC", "degF", "dB", "dBA", "dBC")


@dataclass(frozen=True, slots=True)
class Builder:
    """Builds the conditions of one rule; `scale` is what the rule's relative margins are measured by."""

    scope: Scope
    scale: Number | None = None

    def build(self, syntax: Syntax, *, negated: bool = False) -> Condition | Broken:
        """A condition; `negated` pushes `not` down to the parts."""
        if isinstance(syntax, Not):
            return self.build(syntax.operand, negated=not negated)
        if isinstance(syntax, Joined):
            return self._joined(
                [self.build(item, negated=negated) for item in syntax.operands], (syntax.word == "and") != negated
            )
        if isinstance(syntax, Comparison):
            return self._comparison(syntax, negated)
        if isinstance(syntax, Conditional):
            return self._either(syntax, negated)
        if isinstance(syntax, Aggregate) and syntax.function in ("every", "some"):
            return self._quantified(syntax, negated)
        return self._flag(syntax, negated)

    def _joined(self, parts: list[Condition | Broken], together: bool) -> Condition | Broken:
        whole = tuple(part for part in parts if not isinstance(part, Broken))
        if len(whole) < len(parts):
            return Broken()
        if len(whole) == 1:
            return whole[0]
        return AllOf(whole) if together else AnyOf(whole)

    def _either(self, syntax: Conditional, negated: bool) -> Condition | Broken:
        gate = replace(self, scale=None).build(syntax.condition)
        arms = [self.build(arm, negated=negated) for arm in (syntax.then, syntax.otherwise)]
        whole = [arm for arm in arms if not isinstance(arm, Broken)]
        if isinstance(gate, Broken) or len(whole) < len(arms):
            return Broken()
        return Either(gate, holds(self.scope, gate), whole[0], whole[1])

    def _flag(self, syntax: Syntax, negated: bool) -> Condition | Broken:
        bound = self.scope.express(syntax)
        if isinstance(bound, Broken):
            return bound
        if not isinstance(bound, Truth):
            return self.scope.fault(
                "kind-mismatch",
                f"a rule asks for a condition, and '{show(syntax)}' is {kind_of(bound)}",
                syntax.span,
                expected="a comparison such as x <= 10 mm",
            )
        holds = opposite(self.scope, bound.term) if negated else bound.term
        text = show(Not(syntax, span=syntax.span)) if negated else show(syntax)
        return Part("flag", text, holds, span=syntax.span, formula=syntax, where=bound.place)

    def _quantified(self, syntax: Aggregate, negated: bool) -> Condition | Broken:
        """`every` and `some` keep the margins of their elements, where it is certain which take part."""
        assert syntax.expression is not None
        turns = loop(self.scope, syntax.variables, syntax.collection, syntax.where, syntax.span)
        if isinstance(turns, Broken):
            return turns
        if turns.lacking or not turns.elements or any(element.condition for element in turns.elements):
            return self._flag(syntax, negated)
        parts = [self._element(element, syntax.expression, negated) for element in turns.elements]
        return self._joined(parts, (syntax.function == "every") != negated)

    def _element(self, element: Element, syntax: Syntax, negated: bool) -> Condition | Broken:
        inner = replace(self, scope=self.scope.inside(element.variables))
        made = inner.build(syntax, negated=negated)
        return labelled(made, element.label) if not isinstance(made, Broken) else made

    # --- comparisons -------------------------------------------------------------------------------------------------

    def _comparison(self, syntax: Comparison, negated: bool) -> Condition | Broken:
        pairs = compare(self.scope, syntax, negated=negated)
        if isinstance(pairs, Broken):
            return pairs
        scale = self._chain_scale(pairs)
        parts = tuple(self._part(pair, scale) for pair in pairs)
        if len(parts) == 1:
            return parts[0]
        return AnyOf(parts) if negated else AllOf(parts)

    def _part(self, pair: Compared, scale: Term | None) -> Part:
        if pair.margin is None:
            value = pair.value.term if pair.value else None
            limit = pair.limit.term if pair.limit else None
            unit = (pair.limit.unit if pair.limit else None) or (pair.value.unit if pair.value else None)
            return Part(
                "flag", pair.text, pair.holds, value=value, limit=limit, unit=unit, sense=pair.sense, span=pair.span,
                formula=pair.formula,
            )  # fmt: skip
        assert pair.value is not None and pair.limit is not None
        return Part(
            "comparison", pair.text, pair.holds, pair.margin, pair.strict, scale, self._unit(pair),
            pair.value.term, pair.limit.term, pair.sense, pair.span, formula=pair.formula,
            counted=pair.value.counted and pair.limit.counted, where=pair.value.place or pair.limit.place,
        )  # fmt: skip

    def _unit(self, pair: Compared) -> Unit:
        assert pair.value is not None and pair.limit is not None
        limit = pair.limit.unit
        if limit is None or (pair.limit.bare and pair.value.unit is not None):
            limit = pair.value.unit or limit
        return limit or preferred(pair.limit.dimension)

    def _chain_scale(self, pairs: list[Compared]) -> Term | None:
        """One scale for both sides of a range: the rule's own, else the larger magnitude of the limits."""
        widths = [pair.width for pair in pairs if pair.width is not None]
        if widths:
            return widths[0]
        dimension = pairs[0].margin.dimension if pairs[0].margin is not None else None
        if self.scale is not None and dimension == self.scale.dimension:
            return self.scale.term
        limits = [pair.limit for pair in pairs if pair.margin is not None and pair.limit is not None]
        if not limits or (any(not _measures(limit) for limit in limits) and len(limits) == 1):
            return None
        if any((limit.unit.symbol if limit.unit else "") in (*_NO_SCALE, "days", "day") for limit in limits):
            return None
        sizes = [self._make(absolute, [limit.term]) for limit in limits]
        return sizes[0] if len(sizes) == 1 else self._make(maximum, sizes)

    def _make(self, operation, terms: list[Term]) -> Term:  # type: ignore[no-untyped-def]
        made = self.scope.apply(operation, terms, None)
        assert made is not None
        return made


def _measures(limit: Number) -> bool:
    """False for a limit that is zero as written: nothing can be measured by it."""
    value = limit.term.value
    return not (limit.term.kind == "constant" and isinstance(value, Monomial) and not value.rational)


def labelled(condition: Condition, label: str) -> Condition:
    """The parts of a condition with the element named in front."""
    if isinstance(condition, Part):
        return replace(condition, text=f"{label}: {condition.text}")
    if isinstance(condition, Either):
        return replace(
            condition, then=labelled(condition.then, label), otherwise=labelled(condition.otherwise, label)
        )  # fmt: skip
    parts = tuple(labelled(part, label) for part in condition.parts)
    return AllOf(parts) if isinstance(condition, AllOf) else AnyOf(parts, condition.labels)


def holds(scope: Scope, condition: Condition) -> Term:
    """A condition as one flag."""
    if isinstance(condition, Part):
        return condition.holds
    if isinstance(condition, Either):
        return scope.bank.branch(
            condition.chooses, holds(scope, condition.then), holds(scope, condition.otherwise)
        )  # fmt: skip
    flags = [holds(scope, part) for part in condition.parts]
    return any_of(scope, flags) if isinstance(condition, AnyOf) else all_of(scope, flags)


def certain(scope: Scope, value: bool, text: str, span: Span | None) -> Part:
    """A part that is settled."""
    return Part("flag", text, scope.bank.flag(value), span=span)


def open_part(scope: Scope, what: str, span: Span | None, text: str = "") -> Part:
    """A part that is open because something is missing."""
    return Part("flag", text or what, scope.missing(what, "flag", PURE, span), span=span)


def scales_agree(condition: Condition) -> bool:
    """False where margins without a common measure would be compared: `scale` is then needed.

    The arms of a conditional are not compared with each other.
    """
    if isinstance(condition, Either):
        return scales_agree(condition.then) and scales_agree(condition.otherwise)
    parts = list(numeric_parts(condition))
    bare = [part for part in parts if part.scale is None]
    if len(parts) < 2 or not bare:
        return True
    dimensions: set[Dimension] = {part.margin.dimension for part in parts if part.margin is not None}
    return len(bare) == len(parts) and len(dimensions) == 1
