"""The rule book's tolerance and rounding, laid over the parts of a condition.

The value is rounded, the limit is loosened, and the margin between the two decides; the margin without either is kept
beside it. An allowance never moves a strict limit to one that may be stood on.
"""

from __future__ import annotations

from dataclasses import dataclass, field, replace

from rulecheck.binding.bound import Broken
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.graph.conditions import AllOf, AnyOf, Condition, Either, Part, Ruled, every_part
from rulecheck.graph.terms import Term
from rulecheck.model.rulings import Allowance, Rounding, Ruling
from rulecheck.operations.arithmetic import absolute, add, multiply, subtract
from rulecheck.operations.comparison import at_most, below
from rulecheck.operations.operation import Operation
from rulecheck.operations.rounding import ceil_to, even_to, floor_to, round_to
from rulecheck.quantity.dimension_names import name_of

_WAYS: dict[str, Operation] = {"up": ceil_to, "down": floor_to, "nearest": round_to, "even": even_to}
_RULED = ("comparison", "zone")


def ruled(scope: Scope, condition: Condition, ruling: Ruling) -> Condition:
    """The condition with the ruling laid over every part that has a number of its dimension.

    A ruling that no part is touched by is noted as a fault.
    """
    if ruling.tolerance is None and ruling.rounding is None:
        return condition
    hand = _Hand(scope, ruling)
    made = hand.laid_over(condition)
    hand.note_idle(condition)
    return made


def ruled_parts(scope: Scope, parts: list[Condition | Broken], ruling: Ruling) -> list[Condition | Broken]:
    """Parts that hold together, with the ruling laid over those that have a number of its dimension."""
    whole = tuple(part for part in parts if not isinstance(part, Broken))
    if len(whole) < len(parts) or not whole:
        return parts
    made = ruled(scope, AllOf(whole), ruling)
    return list(made.parts) if isinstance(made, AllOf) else [made]


@dataclass(slots=True)
class _Hand:
    """Lays one ruling over one condition; `acted` are the words that touched a part, `refused` those at fault."""

    scope: Scope
    ruling: Ruling
    acted: set[str] = field(default_factory=set)

    def laid_over(self, condition: Condition) -> Condition:
        if isinstance(condition, Part):
            return self._part(condition) if condition.margin is not None and condition.kind in _RULED else condition
        if isinstance(condition, Either):
            then, otherwise = self.laid_over(condition.then), self.laid_over(condition.otherwise)
            return replace(condition, then=then, otherwise=otherwise)
        parts = tuple(self.laid_over(part) for part in condition.parts)
        return AllOf(parts) if isinstance(condition, AllOf) else AnyOf(parts, condition.labels)

    def note_idle(self, condition: Condition) -> None:
        """Note a ruling that touches nothing; what is open for want of an element has no part to say so by."""
        parts = [part for part in every_part(condition) if part.formula is not None or part.kind == "zone"]
        for word, said in (("tolerance", self.ruling.tolerance), ("rounding", self.ruling.rounding)):
            if said is None or word in self.acted or not parts:
                continue
            dimensions = {part.margin.dimension for part in parts if part.margin is not None}
            found = " or ".join(sorted(name_of(dimension) for dimension in dimensions)) or "no number"
            self.scope.fault(
                "wrong-dimension", f"no limit of this rule is touched by its {word} of {said.text}", said.span,
                expected=f"a width of what is compared: {found}",
            )  # fmt: skip

    def _part(self, part: Part) -> Part:
        assert part.margin is not None
        room, rounded = self._rounded(part)
        allowance = self._allowance(part)
        if rounded is None and allowance is None:
            return part
        margin = room if allowance is None else self._make(add, room, allowance)
        zero = self.scope.bank.number(0, margin.dimension)
        holds = self._make(below if part.strict else at_most, zero, margin)
        told = Ruled(
            part.margin,
            rounded,
            self.ruling.tolerance.text if allowance is not None and self.ruling.tolerance is not None else "",
            self.ruling.rounding.text if rounded is not None and self.ruling.rounding is not None else "",
        )
        return replace(part, holds=holds, margin=margin, ruled=told)

    # --- rounding ----------------------------------------------------------------------------------------------------

    def _rounded(self, part: Part) -> tuple[Term, Term | None]:
        """The room with the value rounded, and the rounded value; the room as it is where nothing is to be rounded."""
        said, value, limit = self.ruling.rounding, part.value, part.limit
        assert part.margin is not None
        if said is None or value is None or limit is None or value.sort != "number" or limit.sort != "number":
            return part.margin, None
        if value.dimension != said.step.dimension:
            return part.margin, None
        self.acted.add("rounding")
        made = self._make(_WAYS[said.how], value, self._step(said))
        if part.sense == "within":
            return self._room_within(part, made, value, limit), made
        greater = part.sense == "at least"
        return self._make(subtract, *((made, limit) if greater else (limit, made))), made

    def _room_within(self, part: Part, made: Term, value: Term, limit: Term) -> Term:
        """The room of an equality: what the rounding changes of the gap is taken off, or added where none may be."""
        assert part.margin is not None
        gaps = [self._make(absolute, self._make(subtract, one, limit)) for one in (made, value)]
        moved = self._make(subtract, *gaps)
        return self._make(add if part.strict else subtract, part.margin, moved)

    def _step(self, said: Rounding) -> Term:
        rational, power = said.step.unit.width_in_si(said.step.value)
        return self.scope.bank.number(rational, said.step.dimension, power)

    # --- tolerance ---------------------------------------------------------------------------------------------------

    def _allowance(self, part: Part) -> Term | None:
        said = self.ruling.tolerance
        assert part.margin is not None
        if said is None or not self._is_meant(said, part):
            return None
        self.acted.add("tolerance")
        if not said.is_even and part.sense not in ("at most", "at least"):
            self._refused(f"'{part.text}' has no upper and lower side", said.span, "one width, such as '3 mm'")
            return None
        if part.sense == "within" and part.strict:
            told = f"'{part.text}' forbids a value: it has no limit that a tolerance could loosen"
            self._refused(told, said.span, "a rule without it")
            return None
        width = said.lower if part.sense == "at least" else said.upper
        rational, power = said.unit.width_in_si(width.value)
        if not said.is_share:
            return self.scope.bank.number(rational, width.dimension, power)
        assert part.limit is not None
        size = self._make(absolute, part.limit)
        return self._make(multiply, self.scope.bank.number(rational, width.dimension, power), size)

    def _is_meant(self, said: Allowance, part: Part) -> bool:
        assert part.margin is not None
        if not said.is_share:
            return said.unit.dimension == part.margin.dimension
        limit = part.limit
        if limit is None or limit.sort != "number" or part.sense not in ("at most", "at least"):
            return False
        if not limit.dimension.is_pure:
            return True
        self.acted.add("tolerance")
        self._refused(
            f"'{said.text}' may be a share of the limit or a number of its own here", said.span,
            "a number without unit, such as '0.015', which is added to the limit",
        )  # fmt: skip
        return False

    def _refused(self, told: str, span: Span, expected: str) -> None:
        self.scope.fault("bad-value", told, span, expected=expected)

    def _make(self, operation: Operation, *terms: Term) -> Term:
        made = self.scope.apply(operation, terms, None)
        assert made is not None
        return made
