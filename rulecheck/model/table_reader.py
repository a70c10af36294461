"""Tables of a ruleset, from their shape."""

from __future__ import annotations

from itertools import pairwise

from rulecheck.diagnostics import Faults
from rulecheck.model.edge import TableShape
from rulecheck.model.ruleset import Row, Table
from rulecheck.reading.nodes import Located

_TESTS = ("up_to", "below", "is", "when", "otherwise")


def read_table(name: str, key: Located, shape: TableShape, faults: Faults) -> Table:
    """A table with its rows; what is wrong with their form is noted."""
    over = (shape.over,) if isinstance(shape.over, Located) else tuple(shape.over)
    if not over:
        faults.add("bad-structure", f"table '{name}' has no key", key.span, expected="over: a figure")
    if (shape.steps is None) == (shape.linear is None):
        faults.add(
            "bad-structure",
            f"table '{name}' has either steps or linear rows",
            key.span,
            expected="steps: [...] or linear: [...]",
        )
    elif not shape.steps and not shape.linear:
        faults.add("bad-structure", f"table '{name}' has no rows", key.span, expected="at least one row with a value")
    rows = tuple(row for step in shape.steps or () if (row := _row(name, key, step, faults)) is not None)
    for row, later in pairwise(rows):
        if row.test == "otherwise":
            faults.add(
                "bad-structure", f"a row of table '{name}' stands behind 'otherwise' and is never reached",
                later.value.span, advice="put 'otherwise' last",
            )  # fmt: skip
    return Table(name, key.span, over, rows, _linear(name, key, shape, faults), shape.unit, _text(shape.meaning))


def _linear(name: str, key: Located, shape: TableShape, faults: Faults) -> tuple[tuple[Located, ...], ...]:
    keys = 1 if isinstance(shape.over, Located) else len(shape.over)
    linear = []
    for row in shape.linear or ():
        if len(row) == keys + 1:
            linear.append(tuple(row))
        else:
            faults.add(
                "bad-structure",
                f"a linear row of table '{name}' is {'a key' if keys == 1 else f'{keys} keys'} and a value",
                row[0].span if row else key.span,
                expected="[key, value]" if keys == 1 else "[key, …, value]",
            )
    return tuple(linear)


def _row(table: str, key: Located, step: dict[str, Located], faults: Faults) -> Row | None:
    if set(step) == {"otherwise"}:
        return Row("otherwise", None, step["otherwise"])
    tests = [test for test in step if test in _TESTS]
    if len(tests) != 1 or "value" not in step or len(step) != 2:
        place = next(iter(step.values())).span if step else key.span
        faults.add(
            "bad-structure",
            f"a row of table '{table}' has one test and a value",
            place,
            expected="{up_to: key, value: value}, or below, is, when; or {otherwise: value}",
        )
        return None
    return Row(tests[0], step[tests[0]], step["value"])


def _text(where: Located | None) -> str:
    return where.text if where else ""
