"""Tables of a ruleset with straight lines between their rows, over one key or several."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import product

from rulecheck.binding.bound import BROKEN, Bound, Broken, Number, kind_of
from rulecheck.binding.lookup import Axis, between
from rulecheck.binding.scope import Scope
from rulecheck.binding.table_rows import Parse, no_row, rising, table_unit
from rulecheck.diagnostics import Span
from rulecheck.formula.syntax import Syntax
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import Table
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension_names import name_of

Row = tuple[Number, ...]


def linear_value(scope: Scope, table: Table, keys: Sequence[Syntax], parse: Parse) -> Bound:
    """Straight lines between rows; left of the first row and right of the last there is no value."""
    rows = _rows(scope, table, parse)
    at = [scope.express(key) for key in keys]
    if rows is None or any(isinstance(key, Broken) for key in at):
        return BROKEN
    numbers = [key for key in at if isinstance(key, Number)]
    if len(numbers) < len(at):
        other = next(key for key in at if not isinstance(key, Number))
        told = f"the key of table '{table.name}' is {kind_of(other)}"
        return scope.fault("kind-mismatch", told, table.span, expected="a number")
    for row in rows:
        due = [*(number.dimension for number in numbers), rows[0][-1].dimension]
        if [number.dimension for number in row] != due:
            told = f"table '{table.name}' has a row of {' and '.join(name_of(cell.dimension) for cell in row)}"
            return scope.fault("dimension-mismatch", told, table.span)
    grid = _single(scope, table, rows) if len(numbers) == 1 else _grid(scope, table, rows)
    if isinstance(grid, Broken):
        return grid
    axes, values = grid
    term = between(scope, axes, values, [number.term for number in numbers], table.span, steps=False)
    return Number(term, table_unit(scope, table, rows[0][-1].dimension) or rows[0][-1].unit)


def _rows(scope: Scope, table: Table, parse: Parse) -> list[Row] | None:
    rows: list[Row] = []
    for written in table.linear:
        syntaxes = [parse(scope, cell) for cell in written]
        bound = [scope.express(item) if item is not None else BROKEN for item in syntaxes]
        row = tuple(item for item in bound if isinstance(item, Number))
        if len(row) < len(bound):
            if not any(isinstance(item, Broken) for item in bound):
                scope.fault("kind-mismatch", f"a row of table '{table.name}' holds numbers", written[0].span)
            return None
        rows.append(row)
    return rows


def _single(scope: Scope, table: Table, rows: list[Row]) -> tuple[list[Axis], list[Term]]:
    """One key, which may be a formula."""
    rising(scope, table, [(written[0].span, row[0]) for written, row in zip(table.linear, rows, strict=True)])
    return [_axis(table, [row[0].term for row in rows])], [row[1].term for row in rows]


def _axis(table: Table, keys: list[Term]) -> Axis:
    return Axis(tuple(keys), no_row(table, "a key left of its first row"), no_row(table, "a key beyond its last row"))


def _grid(scope: Scope, table: Table, rows: list[Row]) -> tuple[list[Axis], list[Term]] | Broken:
    """Several keys, which are written out: a row for each combination."""
    values: dict[tuple[Term, ...], Term] = {}
    for written, row in zip(table.linear, rows, strict=True):
        keys = tuple(number.term for number in row[:-1])
        odd = next((place for place, key in enumerate(keys) if not isinstance(key.value, Monomial)), None)
        if odd is not None:
            told = f"a table over several keys has its keys as plain values, and '{table.name}' has a formula"
            return scope.fault("bad-structure", told, written[odd].span, advice="write the value")
        if keys in values:
            told = f"two rows of table '{table.name}' have the same keys"
            return scope.fault("bad-structure", told, written[0].span, advice="take one of them out")
        values[keys] = row[-1].term
    steps = [_in_order({keys[axis] for keys in values}) for axis in range(len(table.over))]
    if any(len({_power(key) for key in axis}) > 1 for axis in steps):
        return scope.fault("bad-structure", f"a key of table '{table.name}' mixes units", table.span)
    if len(values) < len(list(product(*steps))):
        told = f"table '{table.name}' lacks rows: every key of one column goes with every key of the others"
        return scope.fault("bad-structure", told, _last(table), expected=f"{len(list(product(*steps)))} rows")
    return [_axis(table, axis) for axis in steps], [values[keys] for keys in product(*steps)]


def _in_order(keys: set[Term]) -> list[Term]:
    def size(key: Term) -> tuple[int, object]:
        assert isinstance(key.value, Monomial)
        return key.value.power, key.value.rational

    return sorted(keys, key=size)


def _power(key: Term) -> int:
    assert isinstance(key.value, Monomial)
    return key.value.power if key.value.rational else 0


def _last(table: Table) -> Span:
    return table.linear[-1][0].span
