"""What tables of a ruleset share: why there is no row, their unit, and the order of their keys."""

from __future__ import annotations

from collections.abc import Callable, Iterable

from rulecheck.binding.bound import Number
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.formula.syntax import Syntax
from rulecheck.model.ruleset import Table
from rulecheck.operations.values import Monomial, Reason
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.units import Unit, UnitFault, find_unit
from rulecheck.reading.nodes import Located

Parse = Callable[[Scope, Located], Syntax | None]


def no_row(table: Table, what: str) -> Reason:
    """Why a table has no value for a key."""
    return Reason("missing", f"a row of table '{table.name}' for {what}", table.span)


def table_unit(scope: Scope, table: Table, dimension: Dimension) -> Unit | None:
    """The unit that the table declares; None where it declares none, or a wrong one, which is noted."""
    if table.unit is None:
        return None
    try:
        unit = find_unit(table.unit.text, scope.units)
    except UnitFault as fault:
        scope.fault("unknown-unit", str(fault), table.unit.span, advice=fault.advice)
        return None
    if unit.dimension != dimension:
        told = f"table '{table.name}' is declared in {unit.symbol}, and its values are {name_of(dimension)}"
        scope.fault("wrong-dimension", told, table.unit.span, advice="mend the values or the unit")
    return unit


def rising(scope: Scope, table: Table, keys: Iterable[tuple[Span, Number]], *, repeated: bool = False) -> None:
    """Note a row whose written key does not lie above the one before: it would never be reached."""
    before: Number | None = None
    for span, key in keys:
        if key.term.kind != "constant":
            continue
        if before is not None and not _lies_above(before, key, repeated=repeated):
            told = f"the keys of table '{table.name}' do not rise"
            scope.fault("bad-structure", told, span, advice="put the rows in order; each is read from the one before")
        before = key


def _lies_above(before: Number, key: Number, *, repeated: bool) -> bool:
    low, high = before.term.value, key.term.value
    if not isinstance(low, Monomial) or not isinstance(high, Monomial) or low.power != high.power:
        return True
    return low.rational <= high.rational if repeated else low.rational < high.rational
