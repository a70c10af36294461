"""The symbolic reader: closed forms, their derivatives, and inputs solved for. The only module that loads sympy.

A closed form is for reading. sympy simplifies as it builds (`x / x` becomes 1), so what the operations
need of their operands is kept beside it as conditions, and no verdict passes through here. In SI units.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

import sympy

from rulecheck.diagnostics import Diagnostic, Refused
from rulecheck.graph.terms import Bank, Equation, Inputs, Term, cone
from rulecheck.operations.values import Monomial, Reason

# Larger forms help no reader, and sympy takes minutes for them.
MOST_TERMS = 400
MOST_OPERANDS = 24
_SIMPLIFIED_UP_TO = 40
_SOLVED_UP_TO = 60


@dataclass(frozen=True, slots=True)
class ClosedForm:
    """A term as text: the formula, the derivative by each input, the inputs that make it zero, and the conditions.

    `solved` has the values of an input for which the term is zero, by path, where they can be written down.
    """

    formula: str
    derivatives: Mapping[str, str]
    solved: Mapping[str, tuple[str, ...]]
    conditions: tuple[str, ...]


def describe(bank: Bank, term: Term, inputs: Inputs | None = None, kept: Iterable[str] | None = None) -> ClosedForm:
    """Everything that is known of a number in closed form, as text in the formula language.

    >>> from fractions import Fraction
    >>> from rulecheck.operations.arithmetic import multiply, subtract
    >>> from rulecheck.quantity.dimension import PURE
    >>> bank = Bank()
    >>> track = bank.input("dimensions.rear_track", "number", PURE)
    >>> share = bank.apply(multiply, [bank.number(Fraction(3, 4)), track], PURE)
    >>> margin = bank.apply(subtract, [bank.input("dimensions.front_track", "number", PURE), share], PURE)
    >>> form = describe(bank, margin)
    >>> form.formula
    'dimensions.front_track - 3*dimensions.rear_track/4'
    >>> form.solved["dimensions.rear_track"]
    ('4*dimensions.front_track/3',)
    """
    held = tuple(kept) if kept is not None else None
    made = _Forms(inputs or {}, held)
    formula = made.form(term)
    slopes = made.derivatives(term)
    return ClosedForm(
        written(formula),
        {path: written(slope) for path, slope in slopes.items()},
        {path: tuple(map(written, found)) for path in slopes if (found := _solutions(formula, path))},
        made.conditions(term),
    )


def closed_form(bank: Bank, term: Term, inputs: Inputs | None = None, kept: Iterable[str] | None = None) -> Any:
    """The sympy expression of a term in the inputs; inputs that are not `kept` become their values.

    Raises `Refused` where the term is too large to be written down.
    """
    return _Forms(inputs or {}, None if kept is None else tuple(kept)).form(term)


def derivatives(
    bank: Bank, term: Term, inputs: Inputs | None = None, kept: Iterable[str] | None = None
) -> dict[str, Any]:
    """The derivative by each input that the number depends on, by path, from the operations' own partials."""
    return _Forms(inputs or {}, None if kept is None else tuple(kept)).derivatives(term)


def solve_for(bank: Bank, term: Term, path: str, inputs: Inputs | None = None) -> list[Any]:
    """The values of one input for which a number is zero, as expressions; none where they cannot be written down."""
    return _solutions(_Forms(inputs or {}, None if inputs is None else (path,)).form(term), path)


def written(expression: Any) -> str:
    """An expression as text in the formula language: powers with `^`."""
    return str(expression).replace("**", "^")


def symbol(path: str) -> Any:
    """The sympy symbol of a numeric input."""
    return sympy.Symbol(path, real=True)


class _Forms:
    """Builds expressions, arguments first, each term once."""

    def __init__(self, inputs: Inputs, kept: tuple[str, ...] | None) -> None:
        self._inputs = inputs
        self._kept = kept
        self._forms: dict[int, Any] = {}

    def form(self, root: Term) -> Any:
        for term in self._cone(root):
            if term.index not in self._forms:
                self._forms[term.index] = self._step(term)
        return self._forms[root.index]

    def derivatives(self, root: Term) -> dict[str, Any]:
        """Backwards accumulation over the terms."""
        self.form(root)
        slopes: dict[int, Any] = {root.index: sympy.Integer(1)}
        found: dict[str, Any] = {}
        for term in reversed(self._cone(root)):
            slope = slopes.get(term.index, 0)
            if slope == 0:
                continue
            if term.kind == "input" and term.sort == "number" and self._forms[term.index].is_Symbol:
                found[term.path] = _simplified(slope)
            for part, partial in zip(term.arguments, self._partials(term), strict=True):
                slopes[part.index] = slopes.get(part.index, 0) + slope * partial
        return dict(sorted((path, slope) for path, slope in found.items() if slope != 0))

    def conditions(self, root: Term) -> tuple[str, ...]:
        """What operations need of operands that are not plain numbers: `the divisor is not zero: x`."""
        found: dict[str, None] = {}
        for term in self._cone(root):
            if isinstance(term.value, Equation):
                told = f"is the least {term.value.said} with"
                found[f"solution_{term.index} {told} {written(self._forms[term.value.body.index])} = 0"] = None
            if term.operation is not None and term.operation.domain:
                operands = [self._forms[part.index] for part in term.arguments]
                if any(getattr(operand, "free_symbols", None) for operand in operands):
                    found[f"{term.operation.domain}: {', '.join(map(written, operands))}"] = None
        return tuple(found)

    def _cone(self, root: Term) -> list[Term]:
        terms = cone([root])
        if any(term.kind == "external" for term in terms):
            message = "there is no closed form: a solver stands behind this figure"
            raise Refused([Diagnostic("no-closed-form", message, advice="ask for workings without a closed form")])
        widest = max(len(term.arguments) for term in terms)
        if len(terms) > MOST_TERMS or widest > MOST_OPERANDS:
            message = f"a closed form of {len(terms)} terms would help no reader; {MOST_TERMS} is the bound"
            raise Refused([Diagnostic("too-large", message, advice="ask for the closed form of one of its parts")])
        return terms

    def _step(self, term: Term) -> Any:
        operands = [self._forms[part.index] for part in term.arguments]
        if term.operation is not None:
            return term.operation.symbolic(sympy, operands)
        if term.kind == "branch":
            condition, then, otherwise = operands
            return sympy.Piecewise((then, condition), (otherwise, True))
        if term.kind == "input":
            return self._input(term)
        if term.kind == "solve":
            return self._solution(term)
        if isinstance(term.value, Reason):
            return symbol(term.value.text)
        return _constant(term.value)

    def _solution(self, term: Term) -> Any:
        """A solution has no closed form: it stands as a symbol of its own, and its formula is a condition."""
        assert isinstance(term.value, Equation)
        found = symbol(f"solution_{term.index}")
        self._forms[term.value.variable.index] = found
        for part in term.value.moving[1:]:
            self._forms[part.index] = self._step(part)
        return found

    def _input(self, term: Term) -> Any:
        value = self._inputs.get(term.path)
        if value is not None and self._kept is not None and term.path not in self._kept:
            return _constant(value)
        return sympy.Symbol(term.path) if term.sort in ("flag", "text") else symbol(term.path)

    def _partials(self, term: Term) -> list[Any]:
        operands = [self._forms[part.index] for part in term.arguments]
        if isinstance(term.value, Equation):
            return self._implicit(term, term.value)
        if term.kind == "branch":
            condition = operands[0]
            return [0, *(sympy.Piecewise((1, holds), (0, True)) for holds in (condition, sympy.Not(condition)))]
        if term.operation is None or term.operation.partials is None:
            return [0] * len(operands)
        return [_exactly(partial) for partial in term.operation.partials(sympy, operands)]

    def _implicit(self, term: Term, equation: Equation) -> list[Any]:
        """The implicit function theorem, with the solution's own symbol."""
        slopes: dict[int, Any] = {equation.body.index: sympy.Integer(1)}
        for part in reversed(equation.moving[1:]):
            slope = slopes.get(part.index, 0)
            if slope != 0:
                for below, partial in zip(part.arguments, self._partials(part), strict=True):
                    slopes[below.index] = slopes.get(below.index, 0) + slope * partial
        by_variable = slopes.get(equation.variable.index, sympy.nan)
        return [0, 0, *(-slopes.get(part.index, 0) / by_variable for part in term.arguments[2:])]


def _exactly(partial: Any) -> Any:
    """Partials state whole numbers as floats; in a formula they are whole."""
    return int(partial) if isinstance(partial, float) else sympy.nsimplify(partial, rational=True)


def _constant(value: Any) -> Any:
    if isinstance(value, Monomial):
        return sympy.Rational(value.rational.numerator, value.rational.denominator) * sympy.pi**value.power
    if isinstance(value, bool):
        return sympy.true if value else sympy.false
    return value


def _simplified(expression: Any) -> Any:
    """Simplified where that is quick: small expressions without arms."""
    small = sympy.count_ops(expression) <= _SIMPLIFIED_UP_TO
    return sympy.simplify(expression) if small and not expression.has(sympy.Piecewise) else expression


def _solutions(expression: Any, path: str) -> list[Any]:
    """Roots by one symbol: of polynomials up to degree 2, and of small expressions in which it stands once."""
    unknown = symbol(path)
    if not isinstance(expression, sympy.Expr) or unknown not in expression.free_symbols:
        return []
    top, bottom = sympy.fraction(sympy.together(expression))
    polynomial = top.as_poly(unknown)
    if polynomial is not None and unknown not in sympy.Tuple(*polynomial.all_coeffs()).free_symbols:
        found = sympy.roots(polynomial) if polynomial.degree() <= 2 else {}
        return [root for root in found if root.is_real is not False and bottom.subs(unknown, root) != 0]
    if expression.free_symbols == {unknown} and expression.has(sympy.Min, sympy.Max, sympy.Piecewise):
        return _on_arms(expression, unknown)
    # With one occurrence the functions around it are undone one by one; else sympy may search for minutes.
    if sympy.count_ops(expression) > _SOLVED_UP_TO or _occurrences(top, unknown) > 1 or expression.has(*_JUMPS):
        return []
    try:
        return [root for root in sympy.solve(expression, unknown) if root.is_real is not False]
    except NotImplementedError:
        return []


def _on_arms(expression: Any, unknown: Any) -> list[Any]:
    """Roots of a form in one symbol alone that has arms: each arm is solved, and holds where it is taken."""
    if sympy.count_ops(expression) > _SOLVED_UP_TO or expression.has(sympy.floor, sympy.ceiling):
        return []
    try:
        found = sympy.solve(expression.rewrite(sympy.Piecewise), unknown)
    except NotImplementedError:
        return []
    return [root for root in found if root.is_number and root.is_real is not False]


def numeric(expression: Any) -> Fraction | None:
    """A form without inputs as a rational: exact where it is one, else to 20 digits; None where it has no value."""
    if not expression.is_number or not expression.is_finite:
        return None
    if expression.is_Rational:
        return Fraction(int(expression.p), int(expression.q))
    return Fraction(str(sympy.N(expression, 20)))


def _occurrences(expression: Any, unknown: Any) -> int:
    return sum(part == unknown for part in sympy.preorder_traversal(expression))


_JUMPS = (sympy.Piecewise, sympy.Min, sympy.Max, sympy.floor, sympy.ceiling)
