"""Curves and maps that a design states: rows read to terms, and looked up where a formula calls them.

`engine.torque(engine.speed)` is the value at a key; `aero.map.drag_area()` the value at the keys that the design says
the map is stated over.
"""

from __future__ import annotations

from fractions import Fraction
from itertools import product

from rulecheck.binding.bound import BROKEN, Bound, Broken, Curve, Item, Number, kind_of
from rulecheck.binding.inputs import scope_units, stated, unit_of
from rulecheck.binding.lookup import Axis, between
from rulecheck.binding.parsing import parsed
from rulecheck.binding.scope import NO_RULES, Scope
from rulecheck.diagnostics import Span
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import Call, Name
from rulecheck.graph.conditions import Use
from rulecheck.graph.figures import InputFact
from rulecheck.graph.terms import Term
from rulecheck.model.curve_files import OF_THE_FILE, names_of
from rulecheck.model.design import NONE
from rulecheck.model.vocabulary import Entry
from rulecheck.operations.values import Monomial, Reason
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.quantity import Quantity
from rulecheck.quantity.reading_values import read_quantity
from rulecheck.quantity.units import Unit, UnitFault, find_unit, show_unit
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence

KEYS = ("over", "rows", "interpolation", "basis", "reference", "note")
"""What may be said of a curve, beside where its file is."""
RULES = ("linear", "steps")
MOST_POINTS = 5_000
"""So many rows may make a curve or a map."""


def bind_curve(scope: Scope, path: str, entry: Entry) -> Curve | Broken:
    """A curve or map as the design states it in this state, without rows where nothing is stated; read once."""
    scope.touched.add(path)
    key = ("curve", path, scope.view.states if scope.view.changes(path) else ())
    made: Curve | Broken | None = scope.shared.memo.get(key)
    if made is None:
        made = scope.shared.memo[key] = _read(scope, path, entry)
    return made


def _read(scope: Scope, path: str, entry: Entry) -> Curve | Broken:
    node = stated(scope, path)
    unit = unit_of(entry, scope)
    if node is None or (isinstance(node, Located) and node.text == NONE):
        return Curve(path, (), (), (), unit, (), False, None)
    if not isinstance(node, Mapping) or not isinstance(node.get("rows"), Sequence):
        told = f"'{path}' is a {entry.kind}"
        expected = "{over: names, rows: [[key, value], …]}, or {over: names, file: NAME.csv} in a design or change file"
        return scope.fault("bad-value", told, node.span, expected=expected)
    rule, sound = _said(scope, path, node)
    over = names_of(node.get("over"))
    rows = node.get("rows")
    assert isinstance(rows, Sequence)
    table = _numbers(scope, path, entry, rows, over)
    if table is None or not sound:
        return BROKEN
    made = _arranged(scope, path, entry, table, rows, over, steps=rule == "steps")
    if isinstance(made, Curve):
        basis, reference = (_text(node.get(key)) for key in ("basis", "reference"))
        scope.shared.facts[path] = InputFact(path, unit, node.span, basis, reference, f"{len(rows)} rows")
    return made


def _text(node: Node | None) -> str:
    return node.text if isinstance(node, Located) else ""


def _said(scope: Scope, path: str, node: Mapping) -> tuple[str, bool]:
    """The rule between rows, and whether everything that is said of the curve can be."""
    sound = True
    for item in node:
        if item.key.text not in KEYS:
            known = (*KEYS, *OF_THE_FILE)
            expected, advice = " or ".join(known), nearest(item.key.text, known)
            told = f"a curve or map has no '{item.key.text}'"
            scope.fault("unknown-key", told, item.key.span, expected=expected, advice=advice)
            sound = False
    said = node.get("interpolation")
    rule = _text(said) or "linear"
    if said is not None and rule not in RULES:
        told = f"'{path}' cannot be read between rows by '{rule}'"
        scope.fault("unknown-choice", told, said.span, expected=" or ".join(RULES), advice=nearest(rule, RULES))
        sound = False
    return rule, sound


def _numbers(
    scope: Scope, path: str, entry: Entry, rows: Sequence, over: tuple[Located, ...]
) -> list[list[Quantity]] | None:
    """The rows as quantities: keys, then the value; None with every fault noted."""
    count = len(entry.over) or (1 if entry.kind == "curve" else len(over) or 2)
    if over and len(over) != count:
        told = f"'{path}' has {count} key{'s' if count > 1 else ''}, and is stated over {len(over)}"
        scope.fault("bad-curve", told, over[-1].span, expected=" and ".join(entry.over) or "one name")
        return None
    if len(rows) > MOST_POINTS:
        scope.fault("too-large", f"'{path}' has more than {MOST_POINTS} rows", rows.span, advice="state fewer")
        return None
    units = [_unit(scope, symbol, entry) for symbol in entry.over] or [None] * count
    before = len(scope.shared.faults.found)
    table: list[list[Quantity]] = []
    for row in rows:
        if not isinstance(row, Sequence) or len(row) != count + 1:
            told = f"a row of '{path}' is {count} key{'s' if count > 1 else ''} and a value"
            scope.fault("bad-curve", told, row.span, expected="[key, value]" if count == 1 else "[key, …, value]")
            continue
        cells = zip(row, [*units, unit_of(entry, scope)], strict=True)
        read = [_cell(scope, cell, unit) for cell, unit in cells]
        table.append([item for item in read if item is not None])
    if not len(rows):
        scope.fault("bad-curve", f"'{path}' has no rows", rows.span, expected="two rows at least")
    return table if len(scope.shared.faults.found) == before else None


def _unit(scope: Scope, symbol: str, entry: Entry) -> Unit | None:
    try:
        return find_unit(symbol, scope_units(scope))
    except UnitFault as fault:
        scope.fault("unknown-unit", str(fault), entry.span, advice=fault.advice)
        return None


def _cell(scope: Scope, cell: Node, unit: Unit | None) -> Quantity | None:
    if not isinstance(cell, Located):
        scope.fault("bad-curve", "a row of a curve or map holds numbers", cell.span, expected="[key, value]")
        return None
    dimension = unit.dimension if unit else None
    return read_quantity(cell, dimension, own=scope_units(scope), declared=unit, faults=scope.shared.faults)


def _arranged(
    scope: Scope,
    path: str,
    entry: Entry,
    table: list[list[Quantity]],
    rows: Sequence,
    over: tuple[Located, ...],
    *,
    steps: bool,
) -> Curve | Broken:
    """The rows as a full grid, keys rising; noted where they make none."""
    count = len(table[0]) - 1
    for column in range(count + 1):
        if len({(row[column].unit.dimension, row[column].si()[1]) for row in table}) > 1:
            told = f"column {column + 1} of '{path}' mixes units that cannot be put in order"
            return scope.fault("bad-curve", told, rows.span, advice="state one unit a column")
    keys = [sorted({row[axis].si()[0] for row in table}) for axis in range(count)]
    if any(len(axis) < 2 for axis in keys):
        return scope.fault("bad-curve", f"'{path}' has a key that takes one value only", rows.span, expected="two rows")
    values: dict[tuple[Fraction, ...], Quantity] = {}
    before: tuple[Fraction, ...] | None = None
    for row, node in zip(table, rows, strict=True):
        key = tuple(cell.si()[0] for cell in row[:-1])
        if key in values:
            return scope.fault("bad-curve", f"two rows of '{path}' have one key", node.span, advice="delete one")
        if count == 1 and before is not None and key < before:
            return scope.fault("bad-curve", f"the keys of '{path}' do not rise", node.span, advice="put them in order")
        values[key] = row[-1]
        before = key
    lacking = next((key for key in product(*keys) if key not in values), None)
    if lacking is not None:
        found = " and ".join(_shown(table[0][axis], key) for axis, key in enumerate(lacking))
        return scope.fault("bad-curve", f"the grid of '{path}' has no row for {found}", rows.span, advice="add the row")
    axes = tuple(
        tuple(_number(scope, key, table[0][axis]) for key in keys[axis]) for axis in range(count)
    )  # fmt: skip
    made = tuple(_number(scope, values[key].si()[0], values[key]) for key in product(*keys))
    units = tuple(row.unit for row in table[0][:-1])
    return Curve(path, axes, made, units, unit_of(entry, scope), over, steps, rows.span)


def _shown(like: Quantity, key: Fraction) -> str:
    return f"{float(like.unit.of_si(key)[0]):g} {show_unit(like.unit)}"


def _number(scope: Scope, value: Fraction, like: Quantity) -> Number:
    return Number(scope.bank.number(value, like.unit.dimension, like.si()[1]), like.unit)


# --- looked up -------------------------------------------------------------------------------------------------------


def curve_call(scope: Scope, syntax: Call) -> Bound | None:
    """`engine.torque(x)`; None where the name is not that of a curve or map."""
    path = syntax.function.split(".")
    variable = scope.variables.get(path[0])
    name = ".".join((variable.path, *path[1:])) if isinstance(variable, Item) else syntax.function
    entry = scope.shared.vocabulary.entry(name)
    if entry is None or entry.kind not in ("curve", "map"):
        return None
    # A curve is a value, and not a number: bound as any other name, so that what is read is noted.
    curve = scope.express(Name(tuple(path), span=syntax.span))
    if not isinstance(curve, Curve):
        return BROKEN
    arguments = _arguments(scope, curve, syntax) if syntax.arguments else _own_keys(scope, curve, syntax.span)
    if arguments is None or isinstance(arguments, Broken):
        return arguments or BROKEN
    found = looked_up(scope, curve, arguments, syntax.span)
    if isinstance(found, Number):
        text = show(syntax)
        scope.uses.setdefault(text, Use(text, curve.path, found.term, found.unit))
    return found


def _arguments(scope: Scope, curve: Curve, syntax: Call) -> list[Number] | Broken:
    bound = [scope.express(argument) for argument in syntax.arguments]
    made: list[Number] = []
    for item, argument in zip(bound, syntax.arguments, strict=True):
        if isinstance(item, Number):
            made.append(item)
        elif not isinstance(item, Broken):
            told = f"a key of '{curve.path}' is a number, and this is {kind_of(item)}"
            scope.fault("kind-mismatch", told, argument.span, expected="a number")
    if len(made) < len(bound):
        return BROKEN
    due = len(curve.keys)
    if due and len(made) != due:
        told = f"'{curve.path}' takes {due} key{'s' if due > 1 else ''}, not {len(made)}"
        return scope.fault("wrong-arguments", told, syntax.span, expected="a key for each axis of its rows")
    return made


def _own_keys(scope: Scope, curve: Curve, span: Span) -> list[Number] | Broken:
    """The figures that the design says a curve is stated over, as they are now."""
    if curve.keys and not curve.over:
        told = f"the design does not say what '{curve.path}' is stated over"
        return scope.fault("bad-curve", told, curve.span, expected="over: the name of a figure, or of several")
    inner = scope.fresh(scope.view, NO_RULES)
    made: list[Number] = []
    for where in curve.over:
        syntax = parsed(scope, where)
        bound = inner.express(syntax) if isinstance(syntax, Name) else None
        if isinstance(bound, Number):
            made.append(bound)
            scope.uses.setdefault(where.text, Use(where.text, where.text, bound.term, bound.unit))
        elif not isinstance(bound, Broken):
            told = f"'{where.text}' is not the name of a number"
            scope.fault("bad-curve", told, where.span, expected="over: the name of a figure, or of several")
    scope.touched.update(inner.touched)
    scope.figures.update(inner.figures)
    return made if len(made) == len(curve.over) else BROKEN


def looked_up(scope: Scope, curve: Curve, at: list[Number], span: Span) -> Number | Broken:
    """The value of a curve or map at keys; unknown outside its rows, or where the design has none."""
    dimension = curve.unit.dimension
    if not curve.keys:
        return Number(scope.missing(curve.path, "number", dimension, span), curve.unit)
    for number, axis in zip(at, curve.keys, strict=True):
        if number.dimension != axis[0].dimension:
            told = f"the key of '{curve.path}' is {name_of(axis[0].dimension)}, and this is {name_of(number.dimension)}"
            return scope.fault("dimension-mismatch", told, span, expected=f"a key in {_spoken(curve, axis)}")
    axes = [_axis(curve, axis, unit) for axis, unit in zip(curve.keys, curve.key_units, strict=True)]
    values = [value.term for value in curve.values]
    term: Term = between(scope, axes, values, [number.term for number in at], curve.span, steps=curve.steps)
    return Number(term, curve.unit)


def _spoken(curve: Curve, axis: tuple[Number, ...]) -> str:
    return show_unit(curve.key_units[curve.keys.index(axis)]) or "1"


def _axis(curve: Curve, keys: tuple[Number, ...], unit: Unit) -> Axis:
    first, last = (_plain(number.term, unit) for number in (keys[0], keys[-1]))
    before = Reason("missing", f"{curve.path} below {first}, where its rows begin", curve.span)
    beyond = Reason("missing", f"{curve.path} beyond {last}, where its rows end", curve.span)
    return Axis(tuple(number.term for number in keys), before, beyond)


def _plain(term: Term, unit: Unit) -> str:
    assert isinstance(term.value, Monomial)
    return f"{float(unit.of_si(term.value.rational)[0]):g} {show_unit(unit)}"
