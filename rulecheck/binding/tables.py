"""Tables and lists of a ruleset."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from itertools import pairwise

from rulecheck.binding.bound import BROKEN, Bound, Broken, Choices, Number, Truth, Words, kind_of
from rulecheck.binding.comparing import compare
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import Comparison, Name, Syntax
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import Row, Ruleset, Table
from rulecheck.operations.arithmetic import add, divide, multiply, subtract
from rulecheck.operations.comparison import at_most, below
from rulecheck.operations.operation import Operation, Sort
from rulecheck.operations.values import Monomial, Reason
from rulecheck.quantity.dimension import PURE, Dimension
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.units import Unit, UnitFault, find_unit
from rulecheck.reading.nodes import Located

Parse = Callable[[Scope, Located], Syntax | None]


def table_value(scope: Scope, table: Table, key: Syntax | None, parse: Parse) -> Bound:
    """The value of a table for its own key, or for another one."""
    marker = table.name if key is None else f"{table.name}({show(key)})"
    if not scope.shared.enter(marker, table.span, f"table '{table.name}' rests on itself"):
        return BROKEN
    made = _looked_up(scope, table, key, parse)
    scope.shared.leave()
    return made


def _looked_up(scope: Scope, table: Table, key: Syntax | None, parse: Parse) -> Bound:
    if key is None and len(table.over) == 1:
        key = parse(scope, table.over[0])
        if key is None or isinstance(scope.express(key), Broken):
            return BROKEN
    if len(table.over) > 1:
        for over in table.over:
            syntax = parse(scope, over)
            if syntax is None or isinstance(scope.express(syntax), Broken):
                return BROKEN
    return _linear(scope, table, key, parse) if table.linear else _steps(scope, table, key, parse)


def _no_row(table: Table, what: str) -> Reason:
    return Reason("missing", f"a row of table '{table.name}' for {what}", table.span)


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
        _rising(scope, table, keys[-2:], repeated=touches)
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
    term = scope.bank.unknown(_no_row(table, "this key"), sort, dimension)
    for test, value in reversed(rows):
        assert isinstance(value, (Number, Words))
        term = value.term if test is None else scope.bank.branch(test, value.term, term, table.span)
    if isinstance(first, Words):
        texts = tuple(str(v.term.value) for _, v in rows if isinstance(v, Words) and v.term.kind == "constant")
        return Words(term, texts)
    unit = _unit(scope, table, dimension) or next((v.unit for _, v in rows if isinstance(v, Number) and v.unit), None)
    return replace(first, term=term, unit=unit, bare=False)


def _unit(scope: Scope, table: Table, dimension: Dimension) -> Unit | None:
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


def _linear(scope: Scope, table: Table, key: Syntax | None, parse: Parse) -> Bound:
    """Straight lines between rows; left of the first row and right of the last there is no value.

    A single row has a value on its own key.
    """
    at = scope.express(key) if key is not None else BROKEN
    rows: list[tuple[Number, Number]] = []
    for left, right in table.linear:
        syntaxes = parse(scope, left), parse(scope, right)
        bound = [scope.express(item) if item is not None else BROKEN for item in syntaxes]
        if not all(isinstance(item, Number) for item in bound):
            return (
                BROKEN
                if any(isinstance(item, Broken) for item in bound)
                else scope.fault("kind-mismatch", f"a row of table '{table.name}' holds two numbers", left.span)
            )
        rows.append((bound[0], bound[1]))  # type: ignore[arg-type]
    if isinstance(at, Broken):
        return BROKEN
    if not isinstance(at, Number):
        return scope.fault(
            "kind-mismatch", f"the key of table '{table.name}' is {kind_of(at)}", table.span, expected="a number"
        )
    for x, y in rows:
        if x.dimension != at.dimension or y.dimension != rows[0][1].dimension:
            return scope.fault(
                "dimension-mismatch",
                f"table '{table.name}' has a row of {name_of(x.dimension)} and {name_of(y.dimension)}",
                table.span,
            )
    _rising(scope, table, [(pair[0].span, number) for pair, (number, _) in zip(table.linear, rows, strict=True)])
    return _lines(scope, table, at, rows)


def _rising(scope: Scope, table: Table, keys: list[tuple[Span, Number]], *, repeated: bool = False) -> None:
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


def _lines(scope: Scope, table: Table, at: Number, rows: list[tuple[Number, Number]]) -> Bound:
    dimension = rows[0][1].dimension
    term = scope.bank.unknown(_no_row(table, "a key beyond its last row"), "number", dimension)
    if len(rows) == 1:  # no line, yet a row gives its value on its key, as every row does
        key, value = rows[0]
        term = scope.bank.branch(_do(scope, at_most, at.term, key.term), value.term, term, table.span)
    for (x0, y0), (x1, y1) in reversed(list(pairwise(rows))):
        run = _do(scope, subtract, x1.term, x0.term)
        share = _do(scope, divide, _do(scope, subtract, at.term, x0.term), run)
        height = _do(scope, add, y0.term, _do(scope, multiply, share, _do(scope, subtract, y1.term, y0.term)))
        term = scope.bank.branch(_do(scope, at_most, at.term, x1.term), height, term, table.span)
    before = scope.bank.unknown(_no_row(table, "a key left of its first row"), "number", dimension)
    term = scope.bank.branch(_do(scope, below, at.term, rows[0][0].term), before, term, table.span)
    return Number(term, _unit(scope, table, dimension) or rows[0][1].unit)


def _do(scope: Scope, operation: Operation, *terms: Term) -> Term:
    made = scope.apply(operation, terms, None)
    assert made is not None
    return made


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
