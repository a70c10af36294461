"""Declarations of a ruleset: inputs, base units of its own, states that it needs."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

from rulecheck.diagnostics import Faults, Span
from rulecheck.model.edge import InputShape
from rulecheck.model.names import RESERVED_KEYS, check_name, is_name
from rulecheck.model.record_table import RECORDS
from rulecheck.model.shape_table import extent_rows, outline_rows
from rulecheck.model.signal_files import is_signal
from rulecheck.model.vocabulary import Entry
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.reading_records import BASES
from rulecheck.quantity.units import is_unit
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence

WITH_BASIS = ("number", "flag", "choice", "text", "date")
KINDS = (
    "number", "flag", "choice", "text", "date", "point", "item", "collection", "curve", "map", "signal", "outline",
    "extent",
)  # fmt: skip


def own_units(declared: dict[str, Located], faults: Faults) -> dict[str, Dimension]:
    """Base units of a ruleset's own: each is a dimension of its own."""
    units = {}
    for symbol, what in declared.items():
        if not symbol.isalpha():
            faults.add("bad-name", f"'{symbol}' cannot be a unit", what.span, expected="letters alone")
        elif is_unit(symbol):
            faults.add("name-taken", f"there is a unit '{symbol}' already", what.span, advice="give yours another name")
        else:
            units[symbol] = Dimension.of(**{symbol: 1})
    return units


def declared_entries(
    node: Node | None,
    inputs: dict[str, InputShape],
    definitions: dict[str, list[Located]],
    file: str,
    faults: Faults,
) -> tuple[Entry, ...]:
    """Vocabulary rows for the inputs of a ruleset."""
    rivals = {name: tuple(item.text for item in items) for name, items in definitions.items()}
    entries: list[Entry] = []
    for path, shape in inputs.items():
        key = node.key(path) if isinstance(node, Mapping) else None
        span = key.span if key else None
        if path.partition(".")[0] in (*RESERVED_KEYS, "*") or not all(
            part == "*" or is_name(part) for part in path.split(".")
        ):
            faults.add(
                "bad-name",
                f"'{path}' cannot be the path of an input",
                span,
                expected="names joined by dots; * for any item",
            )
            continue
        entries.extend(_rows(path, shape, rivals, file, span, faults))
    return tuple(row for entry in entries for row in (entry, *_of_records(entry)))


def _of_records(entry: Entry) -> tuple[Entry, ...]:
    """What goes with a field of a test: the same field of each of its runs, and what every record has."""
    parts = entry.path.split(".")
    if len(parts) < 3 or parts[0] != "records":
        return ()
    rows = []
    if len(parts) > 3 and parts[2] in ("setup", "result"):
        rows.append(replace(entry, path=".".join((*parts[:2], "runs", "*", *parts[2:])), origin=""))
    if parts[1] != "*":
        # A name with rows of its own would hide those of every record.
        common = (row for row in RECORDS if row.path.startswith("records.*."))
        own = (replace(row, path=row.path.replace("records.*", f"records.{parts[1]}", 1)) for row in common)
        rows.extend(own)
    return tuple(row for row in rows if row.path != entry.path)


def _rows(
    path: str, shape: InputShape, rivals: dict[str, tuple[str, ...]], file: str, span: Span | None, faults: Faults
) -> list[Entry]:
    kind = _kind(path, shape, span, faults)
    if kind in ("outline", "extent"):
        return _shape_rows(path, kind, file, span, faults)
    entry = Entry(
        path,
        kind,
        _text(shape.meaning),
        unit=_text(shape.unit),
        choices=tuple(item.text for item in shape.choices or ()),
        items=tuple(item.text for item in shape.items or ()),
        at_least=_count(shape.at_least, faults),
        of=_text(shape.of),
        over=tuple(item.text for item in _over(shape)),
        datum_required=_text(shape.datum) == "required",
        definition=_text(shape.definition),
        basis=_text(shape.basis),
        origin=file,
        span=span,
    )
    word = path.rpartition("_")[2].rpartition(".")[2]
    rows = [replace(entry, definitions=rivals.get(word, ()))]
    _whole(rows[0], shape, span, faults)
    if kind == "signal" and not (is_signal(path) and path.count(".") == 1):
        advice = f"call it 'signals.{path.rpartition('.')[2]}'"
        faults.add("bad-name", f"'{path}' cannot be the path of a signal", span, expected="signals.NAME", advice=advice)
    for name, inner in (shape.element or {}).items():
        rows.extend(_rows(f"{path}.*.{name}", inner, rivals, file, span, faults))
        if inner.kind is not None and inner.kind.text in ("point", "outline", "extent"):
            rows.append(
                Entry(
                    f"{path}.*.datum",
                    "datum",
                    "What its places are counted from",
                    default="front_axle",
                    origin=file,
                    span=span,
                )
            )
    return rows


def _shape_rows(path: str, kind: str, file: str, span: Span | None, faults: Faults) -> list[Entry]:
    """The rows of an outline or an extent, which an item has under that very name."""
    if path.rpartition(".")[2] != kind:
        told = f"'{path}' is an {kind}, and zones look for it under '{kind}'"
        faults.add("bad-name", told, span, expected=f"{kind}: {{kind: {kind}, …}} among the fields of an item")
    rows = outline_rows(path) if kind == "outline" else extent_rows(path)
    return [replace(row, origin=file, span=span) for row in rows]


def _kind(path: str, shape: InputShape, span: Span | None, faults: Faults) -> Any:
    if shape.kind is not None:
        if shape.kind.text not in KINDS:
            faults.add(
                "unknown-choice",
                f"there is no kind '{shape.kind.text}' of input",
                shape.kind.span,
                expected=" or ".join(KINDS),
                advice=nearest(shape.kind.text, KINDS),
            )
            return "number"
        return shape.kind.text
    if shape.choices is not None:
        return "choice"
    if shape.element is not None or shape.items is not None or shape.at_least is not None:
        return "collection"
    if shape.unit is None and shape.definition is None and shape.basis is None:
        faults.add(
            "missing-key",
            f"the input '{path}' has neither a unit nor a kind",
            span,
            expected="unit: mm, or kind: flag, …",
        )
    return "number"


def _whole(entry: Entry, shape: InputShape, span: Span | None, faults: Faults) -> None:
    """Note what a declaration of its kind lacks."""
    if entry.kind == "choice" and not entry.choices:
        faults.add("missing-key", f"the choice '{entry.path}' has no choices", span, expected="choices: [open, closed]")
    if entry.kind == "item" and not entry.of:
        faults.add("missing-key", f"'{entry.path}' is an item of nothing", span, expected="of: the collection")
    _keys(entry, shape, span, faults)
    _basis(entry, shape.basis, faults)
    said = shape.definition
    if said is not None and entry.definitions and said.text not in entry.definitions:
        faults.add(
            "unknown-choice", f"'definitions' of this file have no '{said.text}' for '{entry.path}'", said.span,
            expected=" or ".join(entry.definitions), advice=nearest(said.text, entry.definitions),
        )  # fmt: skip


def _basis(entry: Entry, said: Located | None, faults: Faults) -> None:
    """Where a value must come from is one of the bases, and is asked of single values."""
    if said is None:
        return
    if said.text not in BASES:
        faults.add(
            "unknown-choice", f"'{said.text}' is no basis", said.span, expected=" or ".join(BASES),
            advice=nearest(said.text, BASES),
        )  # fmt: skip
    if entry.kind not in WITH_BASIS:
        told = f"'{entry.path}' is a {entry.kind}, of which no basis can be asked"
        faults.add("bad-structure", told, said.span, expected=f"a {' or '.join(WITH_BASIS)}")


def _over(shape: InputShape) -> tuple[Located, ...]:
    if shape.over is None:
        return ()
    return (shape.over,) if isinstance(shape.over, Located) else tuple(shape.over)


def _keys(entry: Entry, shape: InputShape, span: Span | None, faults: Faults) -> None:
    """A curve has one key, a map two or more, and nothing else has any."""
    keys = len(entry.over)
    if entry.kind == "curve" and keys != 1:
        faults.add("missing-key", f"the curve '{entry.path}' has one key", span, expected="over: the unit of its key")
    elif entry.kind == "map" and keys < 2:
        expected = "over: [unit, unit], the units of its keys"
        faults.add("missing-key", f"the map '{entry.path}' has two keys or more", span, expected=expected)
    elif entry.kind not in ("curve", "map") and shape.over is not None:
        faults.add("unknown-key", f"'{entry.path}' is no curve and no map, and has no keys", span, advice="kind: curve")


def _count(where: Located | None, faults: Faults) -> int:
    if where is None:
        return 0
    if where.text.isdigit() and len(where.text) < 7:
        return int(where.text)
    faults.add("bad-number", f"'{where.text}' is not a count", where.span, expected="a whole number")
    return 0


def _text(where: Located | None) -> str:
    return where.text if where else ""


def needed_states(node: Node | None, faults: Faults) -> dict[str, dict[str, tuple[Located, ...]]]:
    """`states_needed`: names by axis, each with the paths that it must set."""
    needed: dict[str, dict[str, tuple[Located, ...]]] = {}
    for axis in node if isinstance(node, Mapping) else ():
        check_name(axis.key, faults)
        needed.setdefault(axis.key.text, {}).update(_axis(axis.value, faults))
        if not isinstance(axis.value, Located) and not len(axis.value):
            faults.add(
                "bad-structure", f"axis '{axis.key.text}' has no states", axis.key.span, expected="[empty, full]"
            )
    return needed


def _axis(node: Node, faults: Faults) -> dict[str, tuple[Located, ...]]:
    """The states of an axis: names alone, or names with the paths that each must set."""
    if isinstance(node, Mapping):
        return {state.key.text: _sets(state.value, faults) for state in node if check_name(state.key, faults)}
    states: dict[str, tuple[Located, ...]] = {}
    for item in node if isinstance(node, Sequence) else (node,):
        if not isinstance(item, Located):
            faults.add("bad-structure", "a state is a name", item.span, expected="[empty, full]")
        elif check_name(item, faults):
            states[item.text] = ()
    return states


def _sets(node: Node, faults: Faults) -> tuple[Located, ...]:
    paths = node.get("sets") if isinstance(node, Mapping) else None
    if paths is None and not (isinstance(node, Mapping) and not len(node)):
        faults.add("bad-structure", "a needed state may say which paths it sets", node.span, expected="{sets: [paths]}")
        return ()
    if paths is None:
        return ()
    items = (paths,) if isinstance(paths, (Located, Mapping)) else tuple(paths)
    for item in items:
        if not isinstance(item, Located) or not all(part == "*" or is_name(part) for part in item.text.split(".")):
            faults.add(
                "bad-structure", "this is not a path that a state can set", item.span, expected="{sets: [paths]}"
            )
    return tuple(item for item in items if isinstance(item, Located))
