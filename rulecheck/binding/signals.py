"""Signals that a design states: logged channels, read from their file where a rule asks for them."""

from __future__ import annotations

from fractions import Fraction
from itertools import pairwise
from math import gcd

from rulecheck.binding.bound import BROKEN, Broken, Signal
from rulecheck.binding.inputs import scope_units, stated, unit_of
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Refused, Span
from rulecheck.graph.figures import InputFact
from rulecheck.model.design import NONE, LeafNode
from rulecheck.model.signal_files import KEYS, Logged
from rulecheck.model.vocabulary import Entry
from rulecheck.operations.samples import Base, Samples, base_of, linear, samples_of
from rulecheck.quantity.dimension import TIME
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.quantity import Quantity
from rulecheck.quantity.reading_values import read_quantity
from rulecheck.quantity.units import Unit, UnitFault, find_unit
from rulecheck.reading.logs import Channel, Log, channel, read_log
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence

MOST_ROWS = 5_000
"""So many rows may a signal have that is written into the design itself."""
_SIGNS = {"comma": ",", "semicolon": ";", "tab": "\t"}
_EXPECTED = "{file: NAME.csv, time: COLUMN, column: COLUMN}, or {rows: [[time, value], …]}"


def bind_signal(scope: Scope, path: str, entry: Entry, span: Span) -> Signal | Broken:
    """A signal as the design states it in this state, without samples where nothing is stated; read once."""
    scope.touched.add(path)
    key = ("signal", path, scope.view.states if scope.view.changes(path) else ())
    made: Signal | Broken | None = scope.shared.memo.get(key)
    if made is None:
        made = scope.shared.memo[key] = _bound(scope, path, entry, span)
    return made


def _bound(scope: Scope, path: str, entry: Entry, span: Span) -> Signal | Broken:
    if not entry.unit:
        told = f"no ruleset declares '{path}', so its kind is not known"
        return scope.fault("missing-key", told, span, expected=f"inputs: {{{path}: {{kind: signal, unit: …}}}}")
    node, unit = stated(scope, path), unit_of(entry, scope)
    counted = entry.unit == "1"
    if node is None or (isinstance(node, Located) and node.text == NONE):
        return Signal(path, None, unit.dimension, unit, path, span, counted)
    if not check_statement(scope, path, node):
        return BROKEN
    assert isinstance(node, Mapping)
    samples = _of_file(scope, path, node, unit) if isinstance(node, Logged) else _of_rows(scope, path, node, unit)
    if samples is None:
        return BROKEN
    basis, reference = _text(node, "basis"), _text(node, "reference")
    shown = f"{len(samples.values)} samples"
    scope.shared.facts[path] = InputFact(path, unit, node.span, basis, reference, shown)
    return Signal(path, samples, unit.dimension, unit, "", node.span, counted)


def check_statement(scope: Scope, path: str, node: LeafNode) -> bool:
    """Note what is wrong with the statement of a signal itself; its file is not looked at."""
    if isinstance(node, Located) and node.text == NONE:
        return True
    file, rows = (node.get(key) if isinstance(node, Mapping) else None for key in ("file", "rows"))
    if not isinstance(node, Mapping) or not (isinstance(file, Located) or isinstance(rows, Sequence)):
        scope.fault("bad-value", f"'{path}' is a signal", node.span, expected=_EXPECTED)
        return False
    sound = file is None or rows is None
    if file is not None and rows is not None:
        told = "a signal has its rows here or in a file, not both"
        scope.fault("bad-structure", told, file.span, advice="take one out")
    for item in node:
        if item.key.text not in KEYS:
            told, advice = f"a signal has no '{item.key.text}'", nearest(item.key.text, KEYS)
            scope.fault("unknown-key", told, item.key.span, expected=" or ".join(KEYS), advice=advice)
            sound = False
        elif item.key.text != "rows" and not isinstance(item.value, Located):
            scope.fault("bad-structure", f"'{item.key.text}' of a signal is a single text", item.value.span)
            sound = False
    return sound


def _text(node: Mapping, key: str, otherwise: str = "") -> str:
    said = node.get(key)
    return said.text if isinstance(said, Located) else otherwise


# --- from a file -----------------------------------------------------------------------------------------------------


def _of_file(scope: Scope, path: str, node: Logged, unit: Unit) -> Samples | None:
    log = _log(scope, node)
    if log is None:
        return None
    if len(log.lines) < 2:
        place = log.headings[0].span
        told = f"{log.file} has {len(log.lines)} row{'' if len(log.lines) == 1 else 's'}"
        scope.fault("log-file", told, place, expected="two samples at least, the last of which ends the record")
        return None
    base = _base(scope, log, node)
    column = _text(node, "column", path.rpartition(".")[2])
    read = channel(log, column, _asked(node, "column"), scope.shared.faults)
    own = _unit(scope, node, "unit", column, read) if read is not None else None
    if read is None or own is None:
        return None
    if own.dimension != unit.dimension:
        told = f"the column '{column}' is {name_of(own.dimension)}, and '{path}' is {name_of(unit.dimension)}"
        scope.fault("wrong-dimension", told, read.heading.span, expected=f"a unit such as {unit.symbol}")
        return None
    if base is None:
        return None
    return linear(Samples(base, read.values, read.over), own.factor, own.offset, own.power)


def _asked(node: Logged, key: str) -> Span:
    said = node.get(key) or node.get("file")
    assert said is not None
    return said.span


def _log(scope: Scope, node: Logged) -> Log | None:
    delimiter, decimal = (_text(node, key, sign) for key, sign in (("delimiter", ","), ("decimal", ".")))
    delimiter, decimal = _SIGNS.get(delimiter, delimiter), _SIGNS.get(decimal, decimal)
    key = ("log", node.file, delimiter, decimal)
    if key not in scope.shared.memo:
        assert node.workspace is not None
        asked = _asked(node, "file")
        try:
            made = read_log(node.workspace, node.file, delimiter=delimiter, decimal=decimal, asked=asked)
        except Refused as refused:
            scope.shared.faults.take(refused)
            return None
        scope.shared.memo[key] = made
    found: Log = scope.shared.memo[key]
    return found


def _base(scope: Scope, log: Log, node: Logged) -> Base | None:
    """The time base; channels of one log share one."""
    column = _text(node, "time", "time")
    key = ("base", id(log), column, _text(node, "time_unit"))
    if key not in scope.shared.memo:
        scope.shared.memo[key] = _timed(scope, log, node, column)
    found: Base | None = scope.shared.memo[key]
    return found


def _timed(scope: Scope, log: Log, node: Logged, column: str) -> Base | None:
    read = channel(log, column, _asked(node, "time"), scope.shared.faults)
    unit = _unit(scope, node, "time_unit", column, read) if read is not None else None
    if read is None or unit is None:
        return None
    if unit.dimension != TIME:
        told = f"the column '{column}' is {name_of(unit.dimension)}, and not a time"
        scope.fault("wrong-dimension", told, read.heading.span, expected="a unit of time, such as s or ms")
        return None
    for row, (sooner, later) in enumerate(pairwise(read.values), 1):
        if later <= sooner:
            told = f"row {log.lines[row].number}: the time does not rise"
            advice = "put the rows in order of time, each time once"
            place = log.place(row, ",".join(log.lines[row].cells))
            scope.fault("log-file", told, place, expected="a later time than in the row above", advice=advice)
            return None
    top, bottom = unit.factor.numerator, read.over * unit.factor.denominator
    shared = gcd(bottom, *(value * top for value in read.values))
    return Base(tuple(value * top // shared for value in read.values), bottom // shared)


def _unit(scope: Scope, node: Logged, key: str, column: str, read: Channel) -> Unit | None:
    """The unit of a column: of its heading, or as the design declares it where the heading has none."""
    said = node.get(key)
    declared = said.text if isinstance(said, Located) else ""
    place = said.span if declared and said is not None else read.heading.span
    if not declared and not read.unit:
        expected = f"`{column} [unit]` in the header, or {key}: in the design"
        scope.fault("unit-missing", f"the column '{column}' has no unit", place, expected=expected)
        return None
    if declared and read.unit and declared != read.unit:
        told = f"the column '{column}' is in {read.unit} by its heading, and in {declared} by the design"
        scope.fault("bad-value", told, place, advice=f"take '{key}' out, or mend the heading")
        return None
    try:
        return find_unit(declared or read.unit, scope_units(scope))
    except UnitFault as fault:
        scope.fault("unknown-unit", str(fault), place, advice=fault.advice)
        return None


# --- from rows in the design -----------------------------------------------------------------------------------------


def _of_rows(scope: Scope, path: str, node: Mapping, unit: Unit) -> Samples | None:
    rows = node.get("rows")
    assert isinstance(rows, Sequence)
    if not 2 <= len(rows) <= MOST_ROWS:
        told = f"'{path}' has {len(rows)} row{'' if len(rows) == 1 else 's'}"
        scope.fault("log-file", told, rows.span, expected=f"2 to {MOST_ROWS} rows here, or a file")
        return None
    pairs = [_pair(scope, path, row, unit) for row in rows]
    whole = [pair for pair in pairs if pair is not None]
    if len(whole) < len(pairs):
        return None
    times = [time.si()[0] for time, _ in whole]
    for row, (sooner, later) in zip(list(rows)[1:], pairwise(times), strict=True):
        if later <= sooner:
            told, expected = f"the times of '{path}' do not rise", "a later time than in the row above"
            scope.fault("log-file", told, row.span, expected=expected, advice="put the rows in order of time")
            return None
    values = [value.si() for _, value in whole]
    powers = {power for value, power in values if value} or {0}
    if len(powers) > 1:
        told = f"the values of '{path}' mix units that cannot be put in order"
        scope.fault("log-file", told, rows.span, advice="state one unit in all rows")
        return None
    return samples_of(base_of(times), [Fraction(value) for value, _ in values], powers.pop())


def _pair(scope: Scope, path: str, row: Node, unit: Unit) -> tuple[Quantity, Quantity] | None:
    cells = tuple(row) if isinstance(row, Sequence) else ()
    time, value = cells if len(cells) == 2 else (None, None)
    if not isinstance(time, Located) or not isinstance(value, Located):
        scope.fault("log-file", f"a row of '{path}' is a time and a value", row.span, expected="[0.2 s, 12 V]")
        return None
    faults = scope.shared.faults
    at = read_quantity(time, TIME, own=scope_units(scope), declared=find_unit("s"), faults=faults)
    read = read_quantity(value, unit.dimension, own=scope_units(scope), declared=unit, faults=faults)
    return (at, read) if at is not None and read is not None else None
