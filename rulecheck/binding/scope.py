"""What binding shares, and what an expression is bound in."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from datetime import date
from typing import Any

from rulecheck.binding.bound import BROKEN, Bound, Broken
from rulecheck.diagnostics import Faults, Related, Span
from rulecheck.formula.syntax import Syntax
from rulecheck.graph.conditions import BoundRule, Use
from rulecheck.graph.figures import DeclaredCheck, Figure, InputFact
from rulecheck.graph.terms import Bank, Constant, Term
from rulecheck.model.design import Design, LeafNode, holders
from rulecheck.model.ruleset import PhysicsModule, Ruleset
from rulecheck.model.track import Track
from rulecheck.model.vocabulary import Vocabulary
from rulecheck.operations.operation import DimensionFault, Operation
from rulecheck.operations.values import Reason
from rulecheck.physics.library import Library
from rulecheck.quantity.dimension import PURE, Dimension
from rulecheck.reading.nodes import Located


@dataclass(frozen=True, slots=True)
class View:
    """The design in one combination of states; `set_paths` are constants in it. `given` are inputs for which a term
    stands: what an equation is solved for, and its solution."""

    design: Design
    states: tuple[tuple[str, str], ...] = ()
    set_paths: frozenset[str] = frozenset()
    base: Design | None = None
    given: Mapping[str, Term] = field(default_factory=dict)
    _known: dict[str, bool] = field(default_factory=dict)

    def changes(self, path: str) -> bool:
        """True where the states change what is read under a path: it, what holds it, or what it holds."""
        known = self._known.get(path)
        if known is None:
            known = self._known[path] = self._changes(path)
        return known

    def _changes(self, path: str) -> bool:
        if any(holder in self.set_paths for holder in holders(path)):
            return True
        inside = f"{path}."
        if not any(changed.startswith(inside) for changed in self.set_paths):
            return False
        # A collection is changed by the items that it holds, a point by its coordinates.
        base = self.base or self.design
        return base.names(path) != self.design.names(path) or path in self.design.leaves

    def changes_any(self, paths: Iterable[str]) -> bool:
        """True where one of the paths is changed."""
        return bool(self.set_paths) and any(self.changes(path) for path in paths)


Owner = Ruleset | PhysicsModule
NO_RULES = PhysicsModule("", "", "", {}, {}, "")
"""An owner without names of its own."""
MOST_DEEP = 200
"""So many figures and rules may rest one on the other."""


@dataclass(slots=True)
class Shared:
    """One binding: what it reads, and what it makes. With `stand_ins` no design stands behind it, and nothing may be
    taken for settled that only a design could settle."""

    base: View
    vocabulary: Vocabulary
    rulesets: tuple[Ruleset, ...]
    physics: Library
    day: date
    faults: Faults
    express: Callable[[Scope, Syntax], Bound]
    bind_rule: Callable[[Shared, Ruleset, str, Span | None], BoundRule | None]
    units: Mapping[str, Dimension]
    bank: Bank = field(default_factory=Bank)
    inputs: dict[str, Constant] = field(default_factory=dict)
    facts: dict[str, InputFact] = field(default_factory=dict)
    figures: dict[str, Figure] = field(default_factory=dict)
    memo: dict[tuple[object, ...], Any] = field(default_factory=dict)
    parsed: dict[tuple[int, str], tuple[LeafNode, Any]] = field(default_factory=dict)
    stack: list[str] = field(default_factory=list)
    declared: dict[str, DeclaredCheck] = field(default_factory=dict)
    strict: bool = False
    tracks: Callable[[Located], Track] | None = None
    stand_ins: bool = False

    def enter(self, name: str, span: Span | None, what: str) -> bool:
        """Begin to bind a named thing; False, with the fault noted, where that would go round in a circle or too deep."""
        if name in self.stack:
            chain = " -> ".join((*self.stack[self.stack.index(name) :], name))
            self.faults.add("cycle", f"{what}: {chain}", span, advice="break the circle at one of them")
            return False
        if len(self.stack) >= MOST_DEEP:
            told = f"'{name}' rests on a chain of more than {MOST_DEEP} formulas and rules"
            self.faults.add("too-large", told, span, expected=f"at most {MOST_DEEP}, one resting on the other")
            return False
        self.stack.append(name)
        return True

    def leave(self) -> None:
        """What was begun last is bound."""
        self.stack.pop()


@dataclass(frozen=True, slots=True)
class Scope:
    """Where an expression is bound: the state, the file whose names hold, the variables of loops around it.

    `arms` are the conditionals that are settled; where it is `strict`, a figure outside its range of validity is unknown.
    """

    shared: Shared
    view: View
    owner: Owner
    variables: Mapping[str, Bound] = field(default_factory=dict)
    uses: dict[str, Use] = field(default_factory=dict)
    touched: set[str] = field(default_factory=set)
    figures: set[str] = field(default_factory=set)
    loop: bool = False
    arms: dict[Syntax, Syntax] = field(default_factory=dict)
    strict: bool = False

    @property
    def bank(self) -> Bank:
        """The terms of the graph."""
        return self.shared.bank

    @property
    def units(self) -> Mapping[str, Dimension]:
        """Base units of the owner's own."""
        return self.owner.units if isinstance(self.owner, Ruleset) else {}

    def express(self, syntax: Syntax) -> Bound:
        """Bind an expression here."""
        return self.shared.express(self, syntax)

    def inside(self, variables: Sequence[tuple[str, Bound]], *, loop: bool = True) -> Scope:
        """The scope inside a loop."""
        inner = {**self.variables, **dict(variables)}
        return Scope(
            self.shared, self.view, self.owner, inner, self.uses, self.touched, self.figures, self.loop or loop, self.arms, self.strict
        )  # fmt: skip

    def apart(self) -> Scope:
        """The same scope with a record of its own of what is read."""
        return Scope(
            self.shared, self.view, self.owner, self.variables, self.uses, set(), self.figures, self.loop, self.arms, self.strict
        )  # fmt: skip

    def fresh(self, view: View, owner: Owner, variables: Mapping[str, Bound] | None = None) -> Scope:
        """A scope for another formula, with its own record of what it uses."""
        return Scope(self.shared, view, owner, variables or {}, strict=self.strict)

    def fault(
        self,
        code: str,
        message: str,
        span: Span | None,
        *,
        expected: str = "",
        advice: str = "",
        related: tuple[Related, ...] = (),
    ) -> Broken:
        """Note a fault; what is bound is broken."""
        self.shared.faults.add(code, message, span, expected=expected, advice=advice, related=related)
        return BROKEN

    def apply(self, operation: Operation, arguments: Sequence[Term], span: Span | None) -> Term | None:
        """An operation on terms of the right sorts, or None with the fault of dimensions noted."""
        try:
            dimension = operation.dimension([term.dimension for term in arguments])
        except DimensionFault as fault:
            self.fault("dimension-mismatch", str(fault), span, advice=fault.advice)
            return None
        return self.bank.apply(operation, arguments, dimension, span)

    def missing(self, what: str, sort: Any, dimension: Dimension = PURE, span: Span | None = None) -> Term:
        """An unknown value: something that the design should say is missing."""
        return self.bank.unknown(Reason("missing", what, span), sort, dimension)


def located(text: str, span: Span) -> Located:
    """A text at a place, for formulas that the program itself supplies."""
    return Located(text, span)
