"""Functions of the language by name."""

from __future__ import annotations

from collections.abc import Callable

from rulecheck.binding import figures
from rulecheck.binding.areas import front_area
from rulecheck.binding.bound import (
    BROKEN,
    Bound,
    Broken,
    Date,
    Number,
    Signal,
    kind_of,
)
from rulecheck.binding.curve_calls import CURVES, curve_property
from rulecheck.binding.curves import curve_call
from rulecheck.binding.geometry_calls import GEOMETRY, geometry
from rulecheck.binding.presence import present
from rulecheck.binding.references import margin_reference, rule_reference
from rulecheck.binding.scope import Scope
from rulecheck.binding.signal_arithmetic import without_sign
from rulecheck.binding.signal_calls import SIGNALS, signal_call
from rulecheck.binding.uncertainties import standard_uncertainty
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import Call, Negative, Syntax
from rulecheck.formula.syntax import Number as NumberSyntax
from rulecheck.graph.terms import Term
from rulecheck.operations.arithmetic import absolute
from rulecheck.operations.calendar import end_of_year, years_between
from rulecheck.operations.extremes import maximum, minimum
from rulecheck.operations.operation import Operation
from rulecheck.operations.roots_and_exponentials import exp, ln, log10, sqrt
from rulecheck.operations.rounding import ceil, ceil_to, floor, floor_to, round_to
from rulecheck.operations.rounding import round as round_whole
from rulecheck.operations.trigonometry import acos, asin, atan, atan2, cos, cosh, sin, sinh, tan, tanh
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.units import find_unit
from rulecheck.reading.nearest import nearest

_ONE: dict[str, Operation] = {
    "sqrt": sqrt, "exp": exp, "ln": ln, "log10": log10, "sin": sin, "cos": cos, "tan": tan, "asin": asin, "acos": acos,
    "atan": atan, "sinh": sinh, "cosh": cosh, "tanh": tanh, "abs": absolute,
}  # fmt: skip
_TRIGONOMETRIC = ("sin", "cos", "tan")
_INVERSE = ("asin", "acos", "atan")
_ROUND: dict[str, tuple[Operation, Operation]] = {
    "floor": (floor, floor_to), "ceil": (ceil, ceil_to), "round": (round_whole, round_to),
}  # fmt: skip
_AGGREGATES = ("sum", "mean", "deviation", "count", "share", "every", "some")


NAMES = (
    "present", "rule", "margin", "end_of_year", "years_between", "atan2", "min", "max", "pairs", "standard_uncertainty", "front_area", *_ONE, *_ROUND,
    *GEOMETRY, *CURVES, *SIGNALS, *_AGGREGATES,
)  # fmt: skip
"""The names of all functions of the language."""


def call(scope: Scope, syntax: Call) -> Bound:
    """Bind a call."""
    name = syntax.function
    special: dict[str, Callable[[Scope, Call], Bound]] = {
        "present": present,
        "rule": rule_reference,
        "margin": margin_reference,
        "end_of_year": _end_of_year,
        "years_between": _years_between,
        "atan2": _atan2,
        "min": _extreme,
        "max": _extreme,
        "standard_uncertainty": standard_uncertainty,
        "front_area": front_area,
    }
    if name in special:
        return special[name](scope, syntax)
    if name in _ONE:
        return _one(scope, syntax, _ONE[name])
    if name in _ROUND:
        return _round(scope, syntax)
    if name in GEOMETRY:
        return geometry(scope, syntax)
    if name in CURVES:
        return curve_property(scope, syntax)
    if name in SIGNALS:
        return signal_call(scope, syntax)
    if name in _AGGREGATES:
        return scope.fault(
            "wrong-arguments",
            f"'{name}' runs over a collection",
            syntax.span,
            expected=f"{name}(… for x in collection)",
        )
    own = curve_call(scope, syntax) or figures.called_figure(scope, syntax)
    if own is not None:
        return own
    known = (
        *special,
        *_ONE,
        *_ROUND,
        *GEOMETRY,
        *CURVES,
        *SIGNALS,
        *_AGGREGATES,
        *figures.callable_names(scope),
        *_curves(scope),
    )
    return scope.fault("unknown-function", f"there is no function '{name}'", syntax.span, advice=nearest(name, known))


def _curves(scope: Scope) -> list[str]:
    return [entry.path for entry in scope.shared.vocabulary if entry.kind in ("curve", "map")]


def arguments(scope: Scope, syntax: Call, least: int, most: int) -> list[Bound] | None:
    """The arguments bound, or None with the fault noted."""
    if not least <= len(syntax.arguments) <= most:
        count = str(least) if least == most else f"{least} to {most}"
        word = "argument" if most == 1 else "arguments"
        scope.fault(
            "wrong-arguments", f"'{syntax.function}' takes {count} {word}, not {len(syntax.arguments)}", syntax.span
        )
        return None
    bound = [scope.express(argument) for argument in syntax.arguments]
    return None if any(isinstance(item, Broken) for item in bound) else bound


def numbers(scope: Scope, syntax: Call, least: int, most: int) -> list[Number] | None:
    """The arguments as numbers, or None with the fault noted."""
    bound = arguments(scope, syntax, least, most)
    return None if bound is None else _all_numbers(scope, syntax, bound)


def _all_numbers(scope: Scope, syntax: Call, bound: list[Bound]) -> list[Number] | None:
    for item, argument in zip(bound, syntax.arguments, strict=True):
        if not isinstance(item, Number):
            scope.fault(
                "kind-mismatch",
                f"'{syntax.function}' takes numbers, and '{show(argument)}' is {kind_of(item)}",
                argument.span,
                advice="ask a figure of it first, such as peak(…)" if isinstance(item, Signal) else "",
            )
            return None
    return [item for item in bound if isinstance(item, Number)]


def _one(scope: Scope, syntax: Call, operation: Operation) -> Bound:
    bound = arguments(scope, syntax, 1, 1)
    if bound is not None and isinstance(bound[0], Signal) and operation is absolute:
        return without_sign(scope, bound[0])
    given = None if bound is None else _all_numbers(scope, syntax, bound)
    if given is None:
        return BROKEN
    operand = given[0]
    if syntax.function in _TRIGONOMETRIC and operand.bare and _is_literal(syntax.arguments[0]):
        shown = show(syntax.arguments[0])
        return scope.fault(
            "ambiguous-angle",
            f"{shown} is {shown} rad",
            syntax.arguments[0].span,
            advice=f"write {shown} deg or {shown} rad",
        )
    term = scope.apply(operation, [operand.term], syntax.span)
    if term is None:
        return BROKEN
    unit = find_unit("rad") if syntax.function in _INVERSE else None
    if syntax.function == "abs":
        return Number(term, operand.unit, operand.counted)
    return Number(term, unit)


def _is_literal(syntax: Syntax) -> bool:
    return isinstance(syntax, NumberSyntax) or (isinstance(syntax, Negative) and _is_literal(syntax.operand))


def _round(scope: Scope, syntax: Call) -> Bound:
    given = numbers(scope, syntax, 1, 2)
    if given is None:
        return BROKEN
    whole, stepped = _ROUND[syntax.function]
    if len(given) == 1 and not given[0].dimension.is_pure:
        return scope.fault(
            "wrong-arguments",
            f"'{syntax.function}' of {name_of(given[0].dimension)} needs the step",
            syntax.span,
            expected=f"{syntax.function}(x, 1 mm)",
        )
    term = scope.apply(stepped if len(given) == 2 else whole, [item.term for item in given], syntax.span)
    return Number(term, given[0].unit, counted=len(given) == 1) if term else BROKEN


def _extreme(scope: Scope, syntax: Call) -> Bound:
    given = numbers(scope, syntax, 2, 200)
    if given is None:
        return BROKEN
    term = scope.apply(minimum if syntax.function == "min" else maximum, [item.term for item in given], syntax.span)
    unit = next((item.unit for item in given if item.unit), None)
    return Number(term, unit, all(item.counted for item in given)) if term else BROKEN


def _atan2(scope: Scope, syntax: Call) -> Bound:
    given = numbers(scope, syntax, 2, 2)
    term = scope.apply(atan2, [item.term for item in given], syntax.span) if given else None
    return Number(term, find_unit("rad")) if term else BROKEN


def _dates(scope: Scope, syntax: Call, count: int) -> list[Term] | None:
    bound = arguments(scope, syntax, count, count)
    if bound is None:
        return None
    for item, argument in zip(bound, syntax.arguments, strict=True):
        if not isinstance(item, Date):
            scope.fault(
                "kind-mismatch",
                f"'{syntax.function}' takes dates, and '{show(argument)}' is {kind_of(item)}",
                argument.span,
            )
            return None
    return [item.term for item in bound if isinstance(item, Date)]


def _end_of_year(scope: Scope, syntax: Call) -> Bound:
    days = _dates(scope, syntax, 1)
    term = scope.apply(end_of_year, days, syntax.span) if days else None
    return Date(term) if term else BROKEN


def _years_between(scope: Scope, syntax: Call) -> Bound:
    days = _dates(scope, syntax, 2)
    term = scope.apply(years_between, days, syntax.span) if days else None
    return Number(term, find_unit("1"), counted=True) if term else BROKEN
