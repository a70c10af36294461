"""Reserves: room that the house keeps beyond the rule book, and whether a case that complies keeps it."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction

from rulecheck.graph.conditions import AnyOf, Case, Condition, Either, Part
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import Rule
from rulecheck.operations.comparison import at_most, below
from rulecheck.operations.logic import both
from rulecheck.quantity.dimension import PURE
from rulecheck.quantity.quantity import Quantity
from rulecheck.studies.envelopes import EnvelopeStudy, flag_of
from rulecheck.studies.judging import Judge


@dataclass(frozen=True, slots=True)
class Reserves:
    """Room that the house keeps: by rule in the margin's unit, and as a share for every rule."""

    by_rule: Mapping[str, Quantity] = field(default_factory=dict)
    share: Fraction | None = None


class Keeping:
    """Says whether cases keep the reserves."""

    def __init__(self, judge: Judge, envelopes: EnvelopeStudy, reserves: Reserves) -> None:
        self._judge, self._envelopes, self._reserves = judge, envelopes, reserves

    def is_roomy(self, rule: Rule, case: Case) -> bool:
        """True where a case that complies would still comply with the reserve taken off every margin."""
        if self._reserves.share is None and rule.name not in self._reserves.by_rule:
            return True
        if self._judge.reader.truth(case.applies) is False or self._judge.reader.truth(case.exempt) is True:
            return True
        placed = self._envelopes.of(case)
        if placed is not None:
            keeps = flag_of(self._judge.bank, placed.whole.condition, lambda part: self._keeping(rule, part))
            return self._envelopes.holds_throughout(placed.whole, keeps)
        return self._keeps_reserve(rule, case.condition)

    def _keeping(self, rule: Rule, part: Part) -> Term:
        """Whether a part holds with the reserve taken off its margin, as one flag."""
        flags = [part.holds]
        own = self._reserves.by_rule.get(rule.name)
        if part.margin is not None and own is not None and own.unit.dimension == part.margin.dimension:
            rational, power = own.unit.width_in_si(own.value)
            reserve = self._judge.bank.number(rational, part.margin.dimension, power)
            flags.append(self._judge.bank.apply(at_most, [reserve, part.margin], PURE))
        relative = self._judge.relative(part) if self._reserves.share is not None else None
        if relative is not None and self._reserves.share is not None:
            flags.append(
                self._judge.bank.apply(at_most, [self._judge.bank.number(self._reserves.share), relative], PURE)
            )
        return self._judge.bank.apply(both, flags, PURE)

    def _keeps_reserve(self, rule: Rule, condition: Condition) -> bool:
        if isinstance(condition, Part):
            return self._judge.reader.truth(condition.holds) is True and not self._is_tight(rule, condition)
        if isinstance(condition, Either):
            arm = self._judge.taken(condition)
            return arm is not None and self._keeps_reserve(rule, arm)
        kept = (self._keeps_reserve(rule, part) for part in condition.parts)
        return any(kept) if isinstance(condition, AnyOf) else all(kept)

    def _is_tight(self, rule: Rule, part: Part) -> bool:
        if part.margin is None:
            return False
        own = self._reserves.by_rule.get(rule.name)
        if own is not None and own.unit.dimension == part.margin.dimension:
            rational, power = own.unit.width_in_si(own.value)
            if self._is_below(part.margin, self._judge.bank.number(rational, part.margin.dimension, power)):
                return True
        relative = self._judge.relative(part) if self._reserves.share is not None else None
        if relative is None or self._reserves.share is None:
            return False
        return self._is_below(relative, self._judge.bank.number(self._reserves.share))

    def _is_below(self, margin: Term, reserve: Term) -> bool:
        return self._judge.reader.truth(self._judge.bank.apply(below, [margin, reserve], PURE)) is True
