"""Terms: what formulas become. In SI units, without places, interned, acyclic.

A bank makes the terms of one graph. Equal terms of one bank are one object, so identity is equality;
`index` grows with creation and arguments come first, so order of index is a topological order.
Kinds: `constant`; `input` (a number a design gives under a path, or lacks); `apply` (an operation);
`branch` (condition, then, otherwise: reads its condition and the arm that it takes); `unknown`;
`variable` (what an equation is solved for; occurs in equations only); `solve` (the least solution of an equation
in a range: arguments are the ends of the range, then what the equation takes from outside);
`external` (an output of a solver, with what the solver is handed);
`throughout` (whether a flag holds at every point of some ranges: arguments are what it takes from outside them).
"""

from __future__ import annotations

from collections.abc import Collection, Iterable, Iterator, Mapping
from dataclasses import dataclass, field
from datetime import date
from fractions import Fraction
from typing import Any, Literal

from rulecheck.diagnostics import Span
from rulecheck.model.solver import Question
from rulecheck.operations.operation import Operation, Sort
from rulecheck.operations.values import Monomial, Reason
from rulecheck.quantity.dimension import PURE, Dimension

Kind = Literal["constant", "input", "apply", "branch", "unknown", "variable", "solve", "external", "throughout"]
Constant = Monomial | bool | str


@dataclass(frozen=True, slots=True, eq=False)
class Equation:
    """`body` is zero at the solution. `moving` are its terms that rest on the variable, arguments first; what they take
    from outside are the arguments of the solve behind the ends of the range. `said` names the variable and the range;
    `unit` and `factor` (in SI) say in what its values are told."""

    body: Term
    variable: Term
    moving: tuple[Term, ...]
    said: str = ""
    unit: str = ""
    factor: float = 1.0


@dataclass(frozen=True, slots=True, eq=False)
class External:
    """One output of a solver; `needs` says of each argument whether this output rests on it."""

    question: Question
    output: str
    needs: tuple[bool, ...]


@dataclass(frozen=True, slots=True)
class Axis:
    """One axis of an envelope: `term` is an input that no design states, and runs from `low` to `high` (SI, times pi to
    the `power`); `path` is the input for which it stands."""

    path: str
    term: Term
    low: Fraction
    high: Fraction
    power: int = 0


@dataclass(frozen=True, slots=True, eq=False)
class Throughout:
    """A flag that is to hold at every point of the axes."""

    body: Term
    axes: tuple[Axis, ...]


@dataclass(frozen=True, slots=True, eq=False)
class Term:
    """One node of the graph. `value` is the constant, the reason it is unknown, the equation that is solved, what a
    solver is asked, or what is to hold throughout."""

    index: int
    kind: Kind
    sort: Sort
    dimension: Dimension
    operation: Operation | None = None
    arguments: tuple[Term, ...] = ()
    value: Constant | Reason | Equation | External | Throughout | None = None
    path: str = ""


@dataclass(slots=True)
class Bank:
    """Makes and keeps the terms of one graph; `spans[index]` is where a term was first written.

    >>> bank = Bank()
    >>> bank.number(Fraction(2)) is bank.number(Fraction(2))
    True
    """

    terms: list[Term] = field(default_factory=list)
    spans: list[Span | None] = field(default_factory=list)
    _known: dict[tuple[object, ...], Term] = field(default_factory=dict)

    def number(self, value: Fraction | int, dimension: Dimension = PURE, power: int = 0) -> Term:
        """The constant `value * pi^power` in SI units."""
        return self.constant(Monomial(Fraction(value), power), "number", dimension)

    def day(self, value: date) -> Term:
        """A date as a constant: its ordinal day."""
        return self.constant(Monomial(Fraction(value.toordinal())), "date", PURE)

    def flag(self, value: bool) -> Term:
        """A constant flag."""
        return self.constant(value, "flag", PURE)

    def text(self, value: str) -> Term:
        """A constant text or choice."""
        return self.constant(value, "text", PURE)

    def constant(self, value: Constant, sort: Sort, dimension: Dimension, span: Span | None = None) -> Term:
        """Any constant."""
        return self._make(
            ("constant", sort, dimension, type(value), value), "constant", sort, dimension, span, value=value
        )

    def input(self, path: str, sort: Sort, dimension: Dimension, span: Span | None = None) -> Term:
        """What the design gives under a path."""
        return self._make(("input", path, sort, dimension), "input", sort, dimension, span, path=path)

    def unknown(self, reason: Reason, sort: Sort, dimension: Dimension = PURE) -> Term:
        """A value that cannot be had, and why."""
        return self._make(("unknown", reason, sort, dimension), "unknown", sort, dimension, reason.span, value=reason)

    def variable(self, label: str, dimension: Dimension) -> Term:
        """What the equation of that label is solved for."""
        return self._make(("variable", label, dimension), "variable", "number", dimension, None, path=label)

    def solve(self, body: Term, variable: Term, ends: tuple[Term, Term], span: Span | None = None, **said: Any) -> Term:
        """The least value of the variable between the ends for which `body` is zero; `said` as in `Equation`.

        >>> bank = Bank()
        >>> x = bank.variable("x", PURE)
        >>> bank.solve(x, x, (bank.number(0), bank.number(1))).arguments == (bank.number(0), bank.number(1))
        True
        """
        moving = _resting_on(cone([body]), {variable.index})
        arguments = (*ends, *_from_outside(moving))
        key = ("solve", body.index, variable.index, ends[0].index, ends[1].index)
        equation = Equation(body, variable, tuple(moving.values()), **said)
        return self._make(key, "solve", "number", variable.dimension, span, arguments=arguments, value=equation)

    @staticmethod
    def rests_on_its_variable(solve: Term) -> bool:
        """True where the equation of a solve has its variable in it."""
        return isinstance(solve.value, Equation) and bool(solve.value.moving)

    def apply(
        self,
        operation: Operation,
        arguments: Iterable[Term],
        dimension: Dimension,
        span: Span | None = None,
    ) -> Term:
        """An operation on terms. The caller has checked kinds and dimensions."""
        parts = tuple(arguments)
        key = ("apply", operation.name, dimension, *(part.index for part in parts))
        return self._make(key, "apply", operation.gives, dimension, span, operation=operation, arguments=parts)

    def branch(self, condition: Term, then: Term, otherwise: Term, span: Span | None = None) -> Term:
        """`then` where the condition holds, else `otherwise`; a known condition is settled here."""
        if condition.kind == "constant":
            return then if condition.value else otherwise
        if then is otherwise:
            # Not the same: an unknown condition makes the whole unknown (LANGUAGE, Meaning 1).
            pass
        parts = (condition, then, otherwise)
        key = ("branch", *(part.index for part in parts))
        return self._make(key, "branch", then.sort, then.dimension, span, arguments=parts)

    def external(
        self, asked: External, arguments: Iterable[Term], sort: Sort, dimension: Dimension, span: Span | None = None
    ) -> Term:
        """An output of a solver, of the arguments in the order of its inputs."""
        parts = tuple(arguments)
        key = ("external", id(asked.question), asked.output, *(part.index for part in parts))
        return self._make(key, "external", sort, dimension, span, arguments=parts, value=asked)

    def throughout(self, body: Term, axes: tuple[Axis, ...], span: Span | None = None) -> Term:
        """Whether a flag holds at every point of the axes; the flag itself where it rests on none of them."""
        moving = _resting_on(cone([body]), {axis.term.index for axis in axes})
        if body.index not in moving:
            return body
        arguments = _from_outside(moving)
        key = ("throughout", body.index, axes)
        value = Throughout(body, axes)
        return self._make(key, "throughout", "flag", PURE, span, arguments=arguments, value=value)

    def _make(
        self,
        key: tuple[object, ...],
        kind: Kind,
        sort: Sort,
        dimension: Dimension,
        span: Span | None,
        *,
        operation: Operation | None = None,
        arguments: tuple[Term, ...] = (),
        value: Constant | Reason | Equation | External | Throughout | None = None,
        path: str = "",
    ) -> Term:
        known = self._known.get(key)
        if known is not None:
            return known
        term = Term(len(self.terms), kind, sort, dimension, operation, arguments, value, path)
        self._known[key] = term
        self.terms.append(term)
        self.spans.append(span)
        return term

    def __iter__(self) -> Iterator[Term]:
        return iter(self.terms)


Inputs = Mapping[str, Monomial | bool | str]


def cone(roots: Iterable[Term]) -> list[Term]:
    """All terms that the roots rest on, arguments first, each once."""
    seen: dict[int, Term] = {}
    waiting = list(roots)
    while waiting:
        term = waiting.pop()
        if term.index not in seen:
            seen[term.index] = term
            waiting.extend(term.arguments)
    return [seen[index] for index in sorted(seen)]


def _resting_on(terms: Iterable[Term], roots: Collection[int]) -> dict[int, Term]:
    """Those of the terms, given arguments first, that rest on a root, by index; a root is among them where it is given."""
    found: dict[int, Term] = {}
    for term in terms:
        if term.index in roots or any(part.index in found for part in term.arguments):
            found[term.index] = term
    return found


def _from_outside(moving: Mapping[int, Term]) -> tuple[Term, ...]:
    """What terms that move take from those that do not."""
    outside = {part.index: part for term in moving.values() for part in term.arguments if part.index not in moving}
    return tuple(outside[index] for index in sorted(outside))
