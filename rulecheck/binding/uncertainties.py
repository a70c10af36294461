"""`standard_uncertainty(x)`: how uncertain a stated value is, as the design says beside it."""

from __future__ import annotations

from fractions import Fraction

from rulecheck.binding.bound import BROKEN, Bound, Item, Number
from rulecheck.binding.inputs import axis_entry, quantity, stated, unit_of
from rulecheck.binding.scope import Scope
from rulecheck.formula.syntax import Call, Name
from rulecheck.model.design import NONE
from rulecheck.model.vocabulary import Entry
from rulecheck.operations.arithmetic import multiply
from rulecheck.operations.roots_and_exponentials import sqrt
from rulecheck.quantity.quantity import Uncertainty
from rulecheck.reading.nodes import Located


def standard_uncertainty(scope: Scope, syntax: Call) -> Bound:
    """The standard uncertainty of an input; unknown where none is stated, and a drawing tolerance is none.

    Source: JCGM 100:2008 (GUM), 4.3.
    """
    name = syntax.arguments[0] if len(syntax.arguments) == 1 else None
    path = _path(scope, name) if isinstance(name, Name) else ""
    entry = _entry(scope, path)
    if entry is None or entry.kind != "number":
        return scope.fault(
            "wrong-arguments", "'standard_uncertainty' takes an input that is a number", syntax.span,
            expected="standard_uncertainty(dimensions.wheelbase)",
        )  # fmt: skip
    scope.touched.add(path)
    unit = unit_of(entry, scope)
    node = stated(scope, path)
    if node is None or (isinstance(node, Located) and node.text == NONE):
        return Number(scope.missing(f"the uncertainty of {path}", "number", unit.dimension, syntax.span))
    read = quantity(scope, entry, node)
    if read is None:
        return BROKEN
    if not isinstance(read.spread, Uncertainty):
        return Number(scope.missing(f"the uncertainty of {path}", "number", unit.dimension, node.span))
    size, power = read.unit.width_in_si(Fraction(1))
    root = scope.apply(sqrt, [scope.bank.number(read.spread.variance())], syntax.span)
    term = scope.apply(multiply, [root, scope.bank.number(size, unit.dimension, power)], syntax.span) if root else None
    return Number(term, None if unit.offset else unit) if term else BROKEN


def _path(scope: Scope, name: Name) -> str:
    variable = scope.variables.get(name.path[0])
    return ".".join((variable.path, *name.path[1:])) if isinstance(variable, Item) else ".".join(name.path)


def _entry(scope: Scope, path: str) -> Entry | None:
    """The row of an input, or of a coordinate of a point."""
    entry = scope.shared.vocabulary.entry(path)
    holder, _, axis = path.rpartition(".")
    point = scope.shared.vocabulary.entry(holder) if entry is None and axis in ("x", "y", "z") else None
    return axis_entry(scope, point, axis) if point is not None and point.kind == "point" else entry
