"""Envelopes: cases that must hold throughout ranges of inputs, and the same cases at one point of them."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from fractions import Fraction

from rulecheck.graph.conditions import Case, Condition, Either, Envelope, Part, Ruled, Use
from rulecheck.graph.terms import Bank, Equation, External, Term, Throughout, cone

Point = Mapping[str, Fraction]
"""A value in SI (without its power of pi) by the path of the input that stands for an axis."""


@dataclass(frozen=True, slots=True)
class Placing:
    """Terms with the numbers of one point in place of the axes of an envelope."""

    bank: Bank
    known: dict[int, Term]

    @classmethod
    def at(cls, bank: Bank, envelope: Envelope, point: Point) -> Placing:
        """Everything at one point."""
        known = {
            axis.term.index: bank.number(point[axis.term.path], axis.term.dimension, axis.power)
            for axis in envelope.axes
        }
        return cls(bank, known)

    def term(self, root: Term) -> Term:
        """A term at the point; the same where it rests on no axis."""
        for term in cone([root]):
            if term.index not in self.known:
                parts = tuple(self.known[part.index] for part in term.arguments)
                same = all(one is other for one, other in zip(parts, term.arguments, strict=True))
                self.known[term.index] = term if same else self._made(term, parts)
        return self.known[root.index]

    def _made(self, term: Term, parts: tuple[Term, ...]) -> Term:
        bank, span, value = self.bank, self.bank.spans[term.index], term.value
        if term.operation is not None:
            return bank.apply(term.operation, parts, term.dimension, span)
        if isinstance(value, Equation):
            said = {"said": value.said, "unit": value.unit, "factor": value.factor}
            body, variable = self.term(value.body), value.variable
            return bank.solve(body, variable, (parts[0], parts[1]), span, **said)
        if isinstance(value, External):
            return bank.external(value, parts, term.sort, term.dimension, span)
        if isinstance(value, Throughout):
            own = {axis.term.index for axis in value.axes}
            inner = Placing(bank, {index: made for index, made in self.known.items() if index not in own})
            return bank.throughout(inner.term(value.body), value.axes, span)
        return bank.branch(parts[0], parts[1], parts[2], span)

    def maybe(self, term: Term | None) -> Term | None:
        """A term that may be left out."""
        return None if term is None else self.term(term)

    def part(self, part: Part) -> Part:
        """A part at the point."""
        return replace(
            part,
            holds=self.term(part.holds),
            margin=self.maybe(part.margin),
            scale=self.maybe(part.scale),
            value=self.maybe(part.value),
            limit=self.maybe(part.limit),
            ruled=self._ruled(part.ruled),
        )

    def _ruled(self, ruled: Ruled | None) -> Ruled | None:
        if ruled is None:
            return None
        return replace(ruled, margin=self.term(ruled.margin), value=self.maybe(ruled.value))

    def condition(self, condition: Condition) -> Condition:
        """A tree of conditions at the point."""
        if isinstance(condition, Part):
            return self.part(condition)
        if isinstance(condition, Either):
            return Either(
                self.condition(condition.gate),
                self.term(condition.chooses),
                self.condition(condition.then),
                self.condition(condition.otherwise),
            )
        return replace(condition, parts=tuple(self.condition(part) for part in condition.parts))

    def use(self, use: Use) -> Use:
        """A name in a formula with what it stands for at the point."""
        return replace(use, term=self.term(use.term))


def case_at(bank: Bank, case: Case, point: Point) -> Case:
    """A case of an envelope at one point of it."""
    envelope = case.envelope
    assert envelope is not None
    placing = Placing.at(bank, envelope, point)
    return replace(
        case,
        applies=placing.term(case.applies),
        exempt=placing.term(case.exempt),
        condition=placing.condition(case.condition),
        gates=tuple(placing.condition(gate) for gate in case.gates),
        uses=tuple(placing.use(use) for use in case.uses),
        at=tuple((axis, point[axis.term.path]) for axis in envelope.axes),
    )
