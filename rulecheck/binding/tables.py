"""Tables and lists of a ruleset."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from itertools import pairwise

from rulecheck.binding.bound import BROKEN, Bound, Broken, Choices, Number, Truth, Words, kind_of
from rulecheck.binding.comparing import compare
from rulecheck.binding.linear_tables import linear_value
from rulecheck.binding.scope import Scope
from rulecheck.binding.table_rows import Parse, no_row, rising, table_unit
from rulecheck.diagnostics import Span
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import Comparison, Name, Syntax
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import Row, Ruleset, Table
from rulecheck.operations.operation import Sort
from rulecheck.quantity.dimension import PURE
from rulecheck.reading.nodes import Located


def table_value(scope: Scope, table: Table, keys: Sequence[Syntax] | None, parse: Parse) -> Bound:
    """The value of a table for its own keys, or for others."""
    marker = table.name if keys is None else f"{table.name}({', '.join(show(key) for key in keys)})"
    if not scope.shared.enter(marker, table.span, f"table '{table.name}' rests on itself"):
        return BROKEN
    made = _looked_up(scope, table, keys, parse)
    scope.shared.leave()
    return made


def _looked_up(scope: Scope, table: Table, keys: Sequence[Syntax] | None, parse: Parse) -> Bound:
    given = [parse(scope, over) for over in table.over] if keys is None else list(keys)
    sound = [key for key in given if key is not None and not isinstance(scope.express(key), Broken)]
    if len(sound) < len(given):
        return BROKEN
    if table.linear:
        return linear_value(scope, table, sound, parse)
    return _steps(scope, table, sound[0] if len(sound) == 1 else None, parse)


def _steps(scope: Scope, table: Table, key: Syntax | None, parse: Parse) -> Bound:
    rows: list[tuple[Term | None, Bound]] = []
    for row in table.steps:
        test = _test(scope, row, key, parse)
        value = _value(scope, row.value, parse)
        if isinstance(test, Broken) or isinstance(value, Broken):
            return BROKEN
        rows.append((test, value))
    _in_order(scope, table, parse)
    return _chain(scope, table, rows)


def _in_order(scope: Scope, table: Table, parse: Parse) -> None:
    """Steps rise, and no key stands twice: a row behind one that takes in its keys would never be reached."""
    keys: list[tuple[Span, Number]] = []
    for row, later in pairwise((None, *table.steps)):
        if later is None or later.key is None or later.test not in ("up_to", "below"):
            continue
        syntax = parse(scope, later.key)
        bound = scope.express(syntax) if syntax is not None else None
        if isinstance(bound, Number):
            keys.append((later.key.span, bound))
        touches = row is not None and row.test == "below" and later.test == "up_to"
        # `below 3 m` and then `up_to 3 m` leaves just 3 m to the second row, which is in order.
        rising(scope, table, keys[-2:], repeated=touches)
    words = [row.key for row in table.steps if row.test == "is" and row.key is not None]
    for index, key in enumerate(words):
        if key in words[:index]:
            told = f"'{key.text}' stands twice in table '{table.name}'"
            scope.fault("bad-structure", told, key.span, advice="take one of the rows out")


def _value(scope: Scope, where: Located, parse: Parse) -> Bound:
    """The value of a row: a formula; a bare word that is no name is a text."""
    syntax = parse(scope, where)
    if syntax is None:
        return BROKEN
    if isinstance(syntax, Name) and len(syntax.path) == 1 and not _is_own(scope, syntax.path[0]):
        before = list(scope.shared.faults.found)
        bound = scope.express(syntax)
        if isinstance(bound, Broken):
            scope.shared.faults.found[:] = before
            return Words(scope.bank.text(syntax.path[0]))
        return bound
    return scope.express(syntax)


def _is_own(scope: Scope, name: str) -> bool:
    owner = scope.owner
    return isinstance(owner, Ruleset) and any(
        name in named for named in (owner.derived, owner.tables, owner.lists, owner.rules)
    )


def _test(scope: Scope, row: Row, key: Syntax | None, parse: Parse) -> Term | Broken | None:
    """The flag of a row; None for `otherwise`."""
    if row.key is None:
        return None
    syntax = parse(scope, row.key)
    if syntax is None:
        return BROKEN
    if row.test == "when":
        bound = scope.express(syntax)
        if isinstance(bound, (Truth, Broken)):
            return bound.term if isinstance(bound, Truth) else BROKEN
        return scope.fault("kind-mismatch", f"'when' takes a condition, and this is {kind_of(bound)}", syntax.span)
    if key is None:
        return scope.fault(
            "bad-structure",
            "a table over several keys has rows with a condition each",
            row.key.span,
            expected="{when: condition, value: value}",
        )
    operator = {"up_to": "<=", "below": "<", "is": "=="}[row.test]
    compared = compare(scope, Comparison((key, syntax), (operator,), span=syntax.span))  # type: ignore[arg-type]
    return BROKEN if isinstance(compared, Broken) else compared[0].holds


def _chain(scope: Scope, table: Table, rows: list[tuple[Term | None, Bound]]) -> Bound:
    first = rows[0][1] if rows else None
    if not isinstance(first, (Number, Words)):
        return scope.fault(
            "kind-mismatch", f"the values of table '{table.name}' are neither numbers nor texts", table.span
        )
    sort: Sort = "number" if isinstance(first, Number) else "text"
    dimension = first.dimension if isinstance(first, Number) else PURE
    for _, value in rows:
        if type(value) is not type(first) or (isinstance(value, Number) and value.dimension != dimension):
            return scope.fault(
                "dimension-mismatch", f"the values of table '{table.name}' are not all of one dimension", table.span
            )
    term = scope.bank.unknown(no_row(table, "this key"), sort, dimension)
    for test, value in reversed(rows):
        assert isinstance(value, (Number, Words))
        term = value.term if test is None else scope.bank.branch(test, value.term, term, table.span)
    if isinstance(first, Words):
        texts = tuple(str(v.term.value) for _, v in rows if isinstance(v, Words) and v.term.kind == "constant")
        return Words(term, texts)
    unit = table_unit(scope, table, dimension) or next(
        (v.unit for _, v in rows if isinstance(v, Number) and v.unit), None
    )
    return replace(first, term=term, unit=unit, bare=False)


def list_of(scope: Scope, members: tuple[Located, ...], name: str, parse: Parse) -> Bound:
    """A list: numbers with units are numbers, everything else is text."""
    bound: list[Bound] = []
    for member in members:
        if member.text.lstrip("-")[:1].isdigit() and not member.quoted:
            syntax = parse(scope, member)
            bound.append(scope.express(syntax) if syntax is not None else BROKEN)
        else:
            bound.append(Words(scope.bank.text(member.text)))
    return Choices(tuple(bound), name)
