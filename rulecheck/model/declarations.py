"""Declarations of a ruleset: inputs, base units of its own, states that it needs."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

from rulecheck.diagnostics import Faults, Span
from rulecheck.model.edge import InputShape
from rulecheck.model.names import check_name, is_name
from rulecheck.model.vocabulary import Entry
from rulecheck.quantity.dimension import Dimension
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence

KINDS = ("number", "flag", "choice", "text", "date", "point", "item", "collection")


def own_units(declared: dict[str, Located], faults: Faults) -> dict[str, Dimension]:
    """Base units of a ruleset's own: each is a dimension of its own."""
    units = {}
    for symbol, what in declared.items():
        if not symbol.isalpha():
            faults.add("bad-name", f"'{symbol}' cannot be a unit", what.span, expected="letters alone")
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
        if not all(part == "*" or is_name(part) for part in path.split(".")):
            faults.add(
                "bad-name",
                f"'{path}' cannot be the path of an input",
                span,
                expected="names joined by dots; * for any item",
            )
            continue
        entries.extend(_rows(path, shape, rivals, file, span, faults))
    return tuple(entries)


def _rows(
    path: str, shape: InputShape, rivals: dict[str, tuple[str, ...]], file: str, span: Span | None, faults: Faults
) -> list[Entry]:
    kind = _kind(path, shape, span, faults)
    entry = Entry(
        path,
        kind,
        _text(shape.meaning),
        unit=_text(shape.unit),
        choices=tuple(item.text for item in shape.choices or ()),
        items=tuple(item.text for item in shape.items or ()),
        at_least=_count(shape.at_least, faults),
        of=_text(shape.of),
        datum_required=_text(shape.datum) == "required",
        definition=_text(shape.definition),
        origin=file,
        span=span,
    )
    word = path.rpartition("_")[2].rpartition(".")[2]
    rows = [replace(entry, definitions=rivals.get(word, ()))]
    for name, inner in (shape.element or {}).items():
        rows.extend(_rows(f"{path}.*.{name}", inner, rivals, file, span, faults))
        if inner.kind is not None and inner.kind.text == "point":
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
    if shape.unit is None and shape.definition is None:
        faults.add(
            "missing-key",
            f"the input '{path}' has neither a unit nor a kind",
            span,
            expected="unit: mm, or kind: flag, …",
        )
    return "number"


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
        states = needed.setdefault(axis.key.text, {})
        if isinstance(axis.value, Mapping):
            for state in axis.value:
                states[state.key.text] = _sets(state.value, faults)
        else:
            for item in axis.value if isinstance(axis.value, Sequence) else (axis.value,):
                if isinstance(item, Located):
                    states[item.text] = ()
    return needed


def _sets(node: Node, faults: Faults) -> tuple[Located, ...]:
    paths = node.get("sets") if isinstance(node, Mapping) else None
    if paths is None and not (isinstance(node, Mapping) and not len(node)):
        faults.add("bad-structure", "a needed state may say which paths it sets", node.span, expected="{sets: [paths]}")
        return ()
    if isinstance(paths, Located):
        return (paths,)
    return tuple(item for item in paths if isinstance(item, Located)) if isinstance(paths, Sequence) else ()
