"""JSON Schemas (2020-12) of the files that people write, for completion and checks in an editor.

The schema of designs comes from the vocabulary table, so it knows what a formula can name; those of rulesets and house
files come from the shapes at the edge. A schema sees one file alone: names across files, dimensions and formulas are
for `rulecheck check`.

>>> {"axle", "diameter", "width"} <= set(design_schema()["$defs"]["tyres.*"]["anyOf"][0]["properties"])
True
"""

from __future__ import annotations

import re
from collections.abc import Container, Iterable, Mapping, Sequence
from urllib.parse import quote

from rulecheck.model.core_table import CORE
from rulecheck.model.design import NONE
from rulecheck.model.ruleset import Ruleset
from rulecheck.model.shape_schemas import (
    DAY,
    DIALECT,
    TEXT,
    Schema,
    house_schema,
    physics_schema,
    ruleset_schema,
    track_schema,
)
from rulecheck.model.signal_schemas import SIGNAL
from rulecheck.model.vocabulary import Entry, Vocabulary
from rulecheck.quantity.quantity import SHAPES
from rulecheck.quantity.reading_records import BASES

__all__ = ["change_schema", "design_schema", "house_schema", "physics_schema", "ruleset_schema", "track_schema"]

_NUMBER = r"[+-]?[0-9][^ ]*"
_FILES: Schema = {"anyOf": [{"type": "string"}, {"type": "array", "items": {"type": "string"}}]}
_NAME = r"^[^0-9\W]\w*$"
_COMPLETE: Schema = {"enum": ["yes", "no", True, False], "description": "yes: what is not stated is not there"}
_KINDS: Mapping[str, Entry] = {
    "number": Entry("", "number", "", unit="mm"),
    "pure number": Entry("", "number", "", unit="1"),
    "flag": Entry("", "flag", ""),
    "date": Entry("", "date", ""),
    "text": Entry("", "text", ""),
    "point": Entry("", "point", ""),
    "datum": Entry("", "datum", ""),
    "item": Entry("", "item", ""),
    "curve": Entry("", "curve", ""),
    "map": Entry("", "map", ""),
    "signal": Entry("", "signal", ""),
    "outline": Entry("", "outline", ""),
    "range": Entry("", "range", ""),
}
"""Kinds of values that read alike wherever they stand; their names have a blank, which no path has."""


def design_schema(rulesets: Sequence[Ruleset] = ()) -> Schema:
    """The schema of a design or a variant: the core vocabulary with the inputs of the rulesets."""
    vocabulary = _vocabulary(rulesets)
    tops = {path: _reference(path) for path in _paths(vocabulary) if "." not in path}
    return {
        "$schema": DIALECT,
        "title": "Design",
        "description": "One car: dimensions, ledger of masses, tyres, aero surfaces, systems, evidence",
        "type": "object",
        "properties": {**_header(), **tops},
        "additionalProperties": False,
        "anyOf": [{"required": ["design"]}, {"required": ["changes"]}],
        "dependentRequired": {"set": ["changes"]},
        "$defs": _definitions(vocabulary),
    }


def change_schema(rulesets: Sequence[Ruleset] = ()) -> Schema:
    """The schema of a change file."""
    return {
        "$schema": DIALECT,
        "title": "Change",
        "description": "Changes that are laid over a design with --change",
        "type": "object",
        "properties": {
            "note": {"type": "string", "description": "A remark"},
            "set": {"$ref": "#/$defs/kind%20overlay"},
        },
        "required": ["set"],
        "additionalProperties": False,
        "$defs": _definitions(_vocabulary(rulesets)),
    }


def _vocabulary(rulesets: Sequence[Ruleset]) -> Vocabulary:
    vocabulary = Vocabulary(CORE)
    for ruleset in rulesets:
        vocabulary = vocabulary.extended(ruleset.inputs)
    return vocabulary


def _header() -> dict[str, Schema]:
    ledger = {
        "type": "object",
        "properties": {
            "file": {"type": "string", "description": "The file, beside this one"},
            "delimiter": {"description": "What parts cells", "enum": ["comma", "semicolon", "tab", ",", ";", "|"]},
            "decimal": {"description": "What parts decimals", "enum": [".", ","]},
        },
        "required": ["file"],
        "additionalProperties": False,
    }
    axes = {"type": "object", "additionalProperties": {"$ref": "#/$defs/kind%20overlay"}}
    one_ledger: list[Schema] = [{"type": "string"}, ledger]
    return {
        "design": {"type": "string", "description": "Name of the car"},
        "revision": {**TEXT, "description": "Revision of the design"},
        "note": {"type": "string", "description": "A remark"},
        "rulesets": {**_FILES, "description": "Rule books to check against, beside this file"},
        "ledger": {
            "anyOf": [*one_ledger, {"type": "array", "items": {"anyOf": one_ledger}}],
            "description": "Files of masses, one row each",
        },
        "states": {"type": "object", "additionalProperties": axes, "description": "What each state changes, by axis"},
        "correlations": {
            "type": "array",
            "description": "Measurements that are off together",
            "items": {
                "type": "object",
                "properties": {
                    "between": {"type": "array", "items": {"type": "string"}, "minItems": 2},
                    "coefficient": {**TEXT, "description": "From -1 to 1, for every pair of these inputs"},
                    "because": {"type": "string", "description": "A remark, such as the instrument that they share"},
                },
                "required": ["between", "coefficient"],
                "additionalProperties": False,
            },
        },
        "changes": {"type": "string", "description": "The design that this variant changes"},
        "set": {"$ref": "#/$defs/kind%20overlay", "description": "What the variant changes"},
    }


def _definitions(vocabulary: Vocabulary) -> dict[str, Schema]:
    """A definition for each path of the vocabulary, for each kind of value, and for overlays."""
    paths = _paths(vocabulary)
    kinds = {f"kind {name}": {"anyOf": _forms(entry)} for name, entry in _KINDS.items()}
    return {
        **kinds,
        **{path: _node(vocabulary, path, paths) for path in paths},
        "kind overlay": _overlay(vocabulary, paths),
    }


def _reference(name: str) -> Schema:
    return {"$ref": f"#/$defs/{quote(name, safe='*.')}"}


def _kind(name: str) -> Schema:
    return _reference(f"kind {name}")


def _paths(vocabulary: Vocabulary) -> dict[str, None]:
    """Every path of the vocabulary with what holds it, in order."""
    seen: dict[str, None] = {}
    for entry in vocabulary:
        parts = entry.path.split(".")
        for end in range(1, len(parts) + 1):
            seen.setdefault(".".join(parts[:end]))
    return seen


def _node(vocabulary: Vocabulary, path: str, paths: Container[str]) -> Schema:
    """What may stand under a path: a value, more paths, or either; or `none`."""
    entry = vocabulary.entry(path)
    forms: list[Schema] = []
    if vocabulary.knows_inside(path) or (entry is not None and entry.kind == "collection"):
        forms.append(_inside(vocabulary, path, entry, paths))
    if entry is not None and entry.kind != "collection":
        forms.extend(_leaf(entry))
    said = {"description": _said(entry)} if entry is not None else {}
    return {"anyOf": [*forms, {"const": NONE}], **said}


def _inside(vocabulary: Vocabulary, path: str, entry: Entry | None, paths: Container[str]) -> Schema:
    named: dict[str, Schema] = {name: _reference(f"{path}.{name}") for name in vocabulary.below(path)}
    rest: Schema | bool = False
    if f"{path}.*" in paths:
        rest = _reference(f"{path}.*")
        named = {**dict.fromkeys(entry.items if entry else (), rest), **named, "complete": _COMPLETE}
    elif entry is not None and entry.kind == "collection":
        rest = {"type": "object"}
    return {
        "type": "object",
        "properties": named,
        "additionalProperties": rest,
        "propertyNames": {"pattern": _NAME},
    }


def _said(entry: Entry) -> str:
    """The meaning with unit, term of a standard, default and rival definitions."""
    parts = [entry.meaning]
    if entry.kind in ("number", "curve", "map") or (entry.kind == "signal" and entry.unit):
        parts.append("pure number" if entry.unit == "1" else f"in {entry.unit} or another unit of its kind")
    if entry.term:
        parts.append(entry.term)
    if entry.definition:
        parts.append(f"by the definition '{entry.definition}'")
    if entry.basis:
        parts.append(f"with the basis '{entry.basis}'" + (" and a reference" if entry.basis == "supplier" else ""))
    if entry.sign:
        parts.append(entry.sign)
    if entry.default:
        parts.append(f"{entry.default} where not stated")
    return "; ".join(part for part in parts if part)


def _leaf(entry: Entry) -> list[Schema]:
    """The forms of a value; those that many inputs share stand once under the definitions."""
    if entry.kind == "number" and not entry.definitions:
        return [_kind("pure number" if entry.unit == "1" else "number")]
    if entry.kind in _KINDS and entry.kind != "number":
        return [_kind(entry.kind)]
    return _forms(entry)


_CURVE: Schema = {
    "type": "object",
    "properties": {
        "over": {"anyOf": [TEXT, {"type": "array", "items": TEXT}], "description": "Names of the figures it is over"},
        "rows": {"type": "array", "items": {"type": "array", "items": TEXT}, "description": "Keys, then the value"},
        "file": {"type": "string", "description": "A CSV file with the rows, beside this file"},
        "column": {"type": "string", "description": "Column of the values"},
        "delimiter": {"description": "What parts cells", "enum": ["comma", "semicolon", "tab", ",", ";", "|"]},
        "decimal": {"description": "What parts decimals", "enum": [".", ","]},
        "interpolation": {"enum": ["linear", "steps"], "description": "What holds between rows"},
        "basis": {"enum": list(BASES), "description": "Where the values come from"},
        "reference": {**TEXT, "description": "Sheet or document that it stands on"},
        "note": {**TEXT, "description": "A remark"},
    },
    "oneOf": [{"required": ["rows"]}, {"required": ["file"]}],
    "additionalProperties": False,
}


def _forms(entry: Entry) -> list[Schema]:
    if entry.kind in ("curve", "map"):
        return [_CURVE]
    if entry.kind == "signal":
        return [SIGNAL]
    plain = _plain(entry)
    axes: list[Schema] = []
    if entry.kind == "point":
        places = dict.fromkeys("xyz", _kind("number"))
        axes = [{"type": "object", "properties": places, "additionalProperties": False}]
    return [*plain, *axes, _stated(plain, entry)]


def _plain(entry: Entry) -> list[Schema]:
    if entry.kind == "number":
        behind = "( .+)?" if entry.unit == "1" else " .+"
        text = {"type": "string", "pattern": f"^{_NUMBER}{behind}$"}
        return [text, {"type": "number"}] if entry.unit == "1" else [text]
    if entry.kind == "flag":
        return [{"enum": ["yes", "no", True, False]}]
    if entry.kind == "choice":
        return [{"enum": list(entry.choices)}]
    if entry.kind == "date":
        return [dict(DAY)]
    if entry.kind == "point":
        return [{"type": "string", "pattern": f"^{_NUMBER} +{_NUMBER} +{_NUMBER} +[^ ]+$"}]
    if entry.kind == "outline":
        return [{"type": "string", "pattern": f"^ *{_NUMBER} .*,.*,"}]
    if entry.kind == "range":
        return [{"type": "array", "items": _kind("number"), "minItems": 2, "maxItems": 2}]
    return [dict(TEXT)]


def _stated(plain: list[Schema], entry: Entry) -> Schema:
    """A value with what is known about it."""
    known: dict[str, Schema] = {
        "value": {"anyOf": plain},
        "basis": {"enum": list(BASES), "description": "Where the value comes from"},
        "reference": {**TEXT, "description": "Sheet, drawing or document that it stands on"},
    }
    if entry.kind == "number":
        words = {"enum": list(entry.definitions)} if entry.definitions else dict(TEXT)
        known |= {
            "uncertainty": {**TEXT, "description": "Half width of what the measurement may be off by"},
            "coverage": {**TEXT, "description": "Coverage factor k of the uncertainty"},
            "shape": {"enum": list(SHAPES), "description": "Shape of its distribution"},
            "tolerance": {**TEXT, "description": "Drawing tolerance, such as +0/-2 mm"},
            "definition": {**words, "description": "Which of the rival definitions it meets"},
        }
    return {"type": "object", "properties": known, "required": ["value"], "additionalProperties": False}


def _overlay(vocabulary: Vocabulary, paths: Iterable[str]) -> Schema:
    """Paths and values; what a path may be set to is what may stand there."""
    exact: dict[str, Schema] = {}
    patterns: dict[str, Schema] = {}
    for path in paths:
        entry = vocabulary.entry(path)
        pattern = _pattern(vocabulary, path)
        if "*" in path.split("."):
            patterns[f"^{pattern}$"] = _reference(path)
        else:
            exact[path] = _reference(path)
        if entry is not None and entry.kind == "point":
            patterns[rf"^{pattern}\.[xyz]$"] = _kind("number")
    return {
        "type": "object",
        "properties": exact,
        "patternProperties": patterns,
        "additionalProperties": False,
    }


def _pattern(vocabulary: Vocabulary, path: str) -> str:
    """A path as a pattern; a star stands for no name that has a row of its own."""
    parts = path.split(".")
    found = []
    for index, part in enumerate(parts):
        if part != "*":
            found.append(re.escape(part))
            continue
        own = vocabulary.below(".".join(parts[:index]))
        barred = "|".join(re.escape(name) for name in own)
        found.append((rf"(?!(?:{barred})(?:\.|$))" if barred else "") + r"[^.]+")
    return r"\.".join(found)
