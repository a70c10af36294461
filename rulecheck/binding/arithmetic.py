"""Arithmetic: numbers, dates with periods, points with points."""

from __future__ import annotations

from fractions import Fraction

from rulecheck.binding.bound import BROKEN, Bound, Broken, Date, Number, Period, Place, Signal, kind_of
from rulecheck.binding.scope import Scope
from rulecheck.binding.signal_arithmetic import calculated, turned
from rulecheck.diagnostics import Span
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import Binary, Negative, Syntax
from rulecheck.formula.syntax import Number as NumberSyntax
from rulecheck.graph.terms import Term
from rulecheck.operations.arithmetic import add, divide, multiply, negate, power, rational_power, subtract
from rulecheck.operations.calendar import add_days, add_months, ordinal
from rulecheck.operations.operation import Operation
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import CALENDAR
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.units import Unit, UnitFault, find_unit

_OPERATIONS: dict[str, Operation] = {"+": add, "-": subtract, "*": multiply, "/": divide}
_VERBS = {"+": "add", "-": "subtract", "*": "multiply", "/": "divide", "^": "raise"}
_MOST_BITS = 256
MOST_POWER = 10**9
"""A constant exponent has at most this magnitude: beyond it nothing but 0 and 1 has a power that can be held."""


def literal(scope: Scope, syntax: NumberSyntax) -> Bound:
    """A number as written; a calendar period where its unit is one."""
    if syntax.unit is None:
        whole = syntax.value.denominator == 1
        return Number(scope.bank.number(syntax.value), None, counted=whole, bare=True)
    try:
        unit = find_unit(syntax.unit, scope.units)
    except UnitFault as fault:
        return scope.fault("unknown-unit", str(fault), syntax.span, advice=fault.advice)
    if unit.dimension == CALENDAR or str(unit.dimension) == "month":
        return _period(scope, syntax, unit)
    rational, pi_power = unit.in_si(syntax.value)
    term = scope.bank.constant(Monomial(rational, pi_power), "number", unit.dimension, syntax.span)
    counted = unit.symbol == "1" and syntax.value.denominator == 1
    return Number(term, unit, counted, offset=bool(unit.offset))


def _period(scope: Scope, syntax: NumberSyntax, unit: Unit) -> Bound:
    if syntax.value.denominator != 1 or syntax.value < 0:
        return scope.fault(
            "bad-number", "a calendar period is a whole number", syntax.span, expected="such as 5 years, 30 days"
        )
    count = int(syntax.value * unit.factor)
    if count > 120_000:
        return scope.fault(
            "too-large", "this period is longer than the calendar", syntax.span, expected="at most 10,000 years"
        )
    return Period(0, count) if unit.dimension == CALENDAR else Period(count, 0)


def negative(scope: Scope, syntax: Negative) -> Bound:
    """`-x`."""
    operand = scope.express(syntax.operand)
    if isinstance(operand, Broken):
        return BROKEN
    if isinstance(operand, Signal):
        return turned(scope, operand)
    if not isinstance(operand, Number):
        return scope.fault("kind-mismatch", f"'-' takes a number, and this is {kind_of(operand)}", syntax.operand.span)
    term = _folded_negative(scope, operand.term) or scope.apply(negate, [operand.term], syntax.span)
    return Number(term, operand.unit, operand.counted, operand.bare) if term else BROKEN


def _folded_negative(scope: Scope, term: Term) -> Term | None:
    if isinstance(term.value, Monomial) and term.kind == "constant":
        return scope.bank.constant(Monomial(-term.value.rational, term.value.power), "number", term.dimension)
    return None


def binary(scope: Scope, syntax: Binary) -> Bound:
    """Two operands; both are bound before either is found at fault."""
    left, right = scope.express(syntax.left), scope.express(syntax.right)
    if isinstance(left, Broken) or isinstance(right, Broken):
        return BROKEN
    if isinstance(left, Number) and isinstance(right, Number):
        return _numbers(scope, syntax, left, right)
    if isinstance(left, Signal) or isinstance(right, Signal):
        return calculated(scope, syntax, left, right)
    if isinstance(left, Date) and syntax.operator in "+-":
        return _dates(scope, syntax, left, right)
    if isinstance(left, Place) and isinstance(right, Place) and syntax.operator in "+-":
        return _places(scope, syntax, left, right)
    return scope.fault(
        "kind-mismatch",
        f"cannot {_VERBS[syntax.operator]} {kind_of(left)} and {kind_of(right)}",
        syntax.span,
        expected="numbers, or a date with a period",
    )


def _numbers(scope: Scope, syntax: Binary, left: Number, right: Number) -> Bound:
    for side, part in ((left, syntax.left), (right, syntax.right)):
        if side.offset:
            return scope.fault(
                "dimension-mismatch",
                f"'{show(part)}' is a point on a scale and cannot be calculated with",
                part.span,
                advice="write a difference in K",
            )
    if syntax.operator == "^":
        return _power(scope, syntax, left, right)
    if syntax.operator in "+-" and left.dimension != right.dimension:
        return mismatch(scope, _VERBS[syntax.operator], syntax.left, left, syntax.right, right, syntax.span)
    term = scope.apply(_OPERATIONS[syntax.operator], [left.term, right.term], syntax.span)
    if term is None:
        return BROKEN
    counted = left.counted and right.counted and syntax.operator != "/"
    return Number(term, result_unit(syntax.operator, left, right), counted, left.bare and right.bare)


def mismatch(
    scope: Scope, verb: str, left_syntax: Syntax, left: Number, right_syntax: Syntax, right: Number, span: Span
) -> Broken:
    """Two sides whose dimensions differ: both are named."""
    to, what = ("to", "add") if verb == "add" else ("with", verb)
    advice = "give the bare number a unit" if left.bare or right.bare else "the two sides must be of one dimension"
    return scope.fault(
        "dimension-mismatch",
        f"cannot {what} '{show(left_syntax)}', {name_of(left.dimension)}, {to} '{show(right_syntax)}', {name_of(right.dimension)}",
        span,
        advice=advice,
    )


def result_unit(operator: str, left: Number, right: Number) -> Unit | None:
    """The unit in which a result is spoken of, where one operand tells."""
    if operator in "+-":
        return left.unit or right.unit
    if operator == "*":
        if right.dimension.is_pure:
            return left.unit
        return right.unit if left.dimension.is_pure else None
    return left.unit if right.dimension.is_pure else None


def _power(scope: Scope, syntax: Binary, base: Number, exponent: Number) -> Bound:
    if not exponent.dimension.is_pure:
        return scope.fault(
            "dimension-mismatch",
            f"an exponent is a pure number, and '{show(syntax.right)}' is {name_of(exponent.dimension)}",
            syntax.right.span,
        )
    constant = constant_value(syntax.right)
    if constant is not None and abs(constant) > MOST_POWER:
        told = f"the exponent of '{show(syntax.left)}' is out of bounds"
        return scope.fault("too-large", told, syntax.right.span, expected=f"at most {MOST_POWER:,} either way")
    if constant is not None:
        term = scope.apply(rational_power(constant), [base.term], syntax.span)
        unit = (
            base.unit
            if constant == 1 or (base.dimension.is_pure and base.unit and not base.unit.power and base.unit.factor == 1)
            else None
        )
        counted = base.counted and constant.denominator == 1 and constant >= 0
        return Number(term, unit, counted) if term else BROKEN
    if not base.dimension.is_pure:
        return scope.fault(
            "dimension-mismatch",
            f"'{show(syntax.left)}', {name_of(base.dimension)}, can only be raised to a constant power",
            syntax.span,
            advice="divide it by a reference value first",
        )
    term = scope.apply(power, [base.term, exponent.term], syntax.span)
    return Number(term, None) if term else BROKEN


def constant_value(syntax: Syntax) -> Fraction | None:
    """The value of an exponent that is written out, such as 2, -1/2 or 0.67; None where it is none or huge."""
    if isinstance(syntax, NumberSyntax):
        return syntax.value if syntax.unit in (None, "1") else None
    if isinstance(syntax, Negative):
        inner = constant_value(syntax.operand)
        return None if inner is None else -inner
    if isinstance(syntax, Binary) and syntax.operator in "+-*/":
        left, right = constant_value(syntax.left), constant_value(syntax.right)
        if left is None or right is None or (syntax.operator == "/" and not right):
            return None
        made = {"+": left.__add__, "-": left.__sub__, "*": left.__mul__}.get(syntax.operator, left.__truediv__)(right)
        assert isinstance(made, Fraction)
        return made if max(made.numerator.bit_length(), made.denominator.bit_length()) < _MOST_BITS else None
    return None


def _dates(scope: Scope, syntax: Binary, left: Date, right: Bound) -> Bound:
    sign = 1 if syntax.operator == "+" else -1
    if isinstance(right, Period):
        term: Term | None = left.term
        if right.months:
            term = scope.apply(add_months, [left.term, scope.bank.number(sign * right.months)], syntax.span)
        if right.days and term is not None:
            term = scope.apply(add_days, [term, scope.bank.number(sign * right.days, CALENDAR)], syntax.span)
        return Date(term) if term else BROKEN
    if isinstance(right, Date) and sign < 0:
        days = [scope.apply(ordinal, [side.term], syntax.span) for side in (left, right)]
        if days[0] is None or days[1] is None:
            return BROKEN
        term = scope.apply(subtract, [days[0], days[1]], syntax.span)
        return Number(term, find_unit("days"), counted=True) if term else BROKEN
    if isinstance(right, Number):
        return scope.fault(
            "kind-mismatch", "a date takes a calendar period", syntax.right.span, expected="such as 30 days or 5 years"
        )
    return scope.fault(
        "kind-mismatch",
        f"a date does not go with {kind_of(right)} here",
        syntax.right.span,
        expected="a period, or for '-' a date",
    )


def _places(scope: Scope, syntax: Binary, left: Place, right: Place) -> Bound:
    operation = _OPERATIONS[syntax.operator]
    made = []
    for a, b in ((left.x, right.x), (left.y, right.y), (left.z, right.z)):
        term = scope.apply(operation, [a.term, b.term], syntax.span)
        if term is None:
            return BROKEN
        made.append(Number(term, a.unit))
    return Place(made[0], made[1], made[2])
