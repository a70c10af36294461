"""Schemas of designs, changes, rulesets and house files: sound by the standard's own schema, and neither too wide nor too narrow."""

from __future__ import annotations

import copy
import json
from functools import cache
from pathlib import Path
from typing import Any

import pytest
import yaml
from jsonschema import Draft202012Validator

from rulecheck.api import load_ruleset
from rulecheck.model.core_table import CORE
from rulecheck.model.schemas import change_schema, design_schema, house_schema, ruleset_schema

ROOT = Path(__file__).parents[3]
DESIGNS = sorted((ROOT / "designs_demo").glob("*.design.yaml"))
CHANGES = sorted((ROOT / "designs_demo").glob("*.change.yaml"))
RULESETS = sorted((ROOT / "rulesets_demo").glob("*.ruleset.yaml"))


def _read(text: str) -> Any:
    """YAML with every scalar as the text that stands there."""
    return yaml.load(text, Loader=yaml.BaseLoader)


@cache
def _validator(name: str) -> Draft202012Validator:
    extended = [load_ruleset(path) for path in RULESETS] if name.endswith("extended") else []
    made = {
        "design": design_schema,
        "design extended": lambda: design_schema(extended),
        "change extended": lambda: change_schema(extended),
        "ruleset": ruleset_schema,
        "house": house_schema,
    }[name]()
    return Draft202012Validator(made)


@pytest.mark.parametrize("name", ["design", "design extended", "change extended", "ruleset", "house"])
def test_the_schema_is_a_schema(name: str) -> None:
    schema = _validator(name).schema
    Draft202012Validator.check_schema(schema)
    assert schema["$schema"] == Draft202012Validator.META_SCHEMA["$id"]
    assert "$id" not in schema
    assert schema["title"]
    assert json.loads(json.dumps(schema)) == schema


def test_every_reference_leads_somewhere() -> None:
    schema = _validator("design extended").schema
    names = {text.split('"')[0] for text in json.dumps(schema).split('"#/$defs/')[1:]}
    assert {name.replace("%20", " ") for name in names} <= set(schema["$defs"])
    assert len(names) > 100


@pytest.mark.parametrize("path", DESIGNS, ids=lambda path: path.name)
def test_demo_designs_fit(path: Path) -> None:
    assert not list(_validator("design extended").iter_errors(_read(path.read_text("utf-8"))))


@pytest.mark.parametrize("path", CHANGES, ids=lambda path: path.name)
def test_demo_changes_fit(path: Path) -> None:
    assert not list(_validator("change extended").iter_errors(_read(path.read_text("utf-8"))))


@pytest.mark.parametrize("path", RULESETS, ids=lambda path: path.name)
def test_demo_rulesets_fit(path: Path) -> None:
    assert not list(_validator("ruleset").iter_errors(_read(path.read_text("utf-8"))))


def test_inputs_of_a_ruleset_are_not_in_the_core_schema() -> None:
    design = _read("{design: D, towing: {front: {opening: 65 mm}}}")
    assert _validator("design extended").is_valid(design)
    assert not _validator("design").is_valid(design)


SAMPLES = {"flag": "yes", "date": "2027-03-01", "point": "1 2 3 mm", "datum": "rear_axle", "text": "sheet 4", "outline": "0 0, 9 0, 9 9 mm", "range": ["1 mm", "2 mm"], "signal": {"file": "run.csv", "column": "a", "decimal": "comma"}}  # fmt: skip
ROWS = {"rows": [["1 mm", "5 mm"], ["2 mm", "6 mm"]], "over": "vehicle.speed"}


@pytest.mark.parametrize("entry", CORE, ids=lambda entry: entry.path)
def test_every_input_may_be_stated_and_changed(entry: Any) -> None:
    sample: Any = (ROWS if entry.kind in ("curve", "map") else SAMPLES.get(entry.kind)) or (
        entry.choices[0] if entry.choices else f"5 {entry.unit}"
    )
    if entry.kind == "collection":
        sample = {}
    path = entry.path.replace("*", "some")
    nested = sample
    for part in reversed(path.split(".")):
        nested = {part: nested}
    validator = _validator("design")
    assert validator.is_valid({"design": "D", **nested})
    assert validator.is_valid({"design": "D", "changes": "d.design.yaml", "set": {path: sample}})
    assert validator.is_valid({"design": "D", "states": {"axis": {"name": {path: sample}}}})
    said = validator.schema["$defs"][entry.path]["description"]
    assert entry.meaning in said
    assert entry.unit in said or entry.kind != "number" or entry.unit == "1"


GOOD = [
    "{design: D}",
    "{design: D, ledger: parts.csv}",
    "{design: D, ledger: [{file: parts.csv, delimiter: semicolon, decimal: ','}]}",
    "{design: D, rulesets: one.ruleset.yaml}",
    "{changes: d.design.yaml, set: {tyres.rear.width: 250 mm, masses.gone: none}}",
    "{design: D, dimensions: {wheelbase: 2860 mm ± 1 mm (k=2)}}",
    "{design: D, dimensions: {wheelbase: -3e2 mm}}",
    "{design: D, dimensions: {wheelbase: {value: 1 mm, uncertainty: 1 mm, coverage: 2, shape: normal, basis: drawing}}}",
    "{design: D, brakes: {circuits: 2}}",
    "{design: D, points: {nose: {datum: rear_axle, at: -1 0 2 mm}, tail: {x: 1 mm, y: 2 mm, z: 3 mm}}}",
    "{design: D, aero_surfaces: {complete: yes, wing: none}}",
    "{design: D, judgements: {finish: {verdict: complies, date: 2027-01-02}, lamps: {left: {verdict: breach}}}}",
    "{design: D, outlines: {tub: {side: '0 0, 9 0, 9 9 mm', plan: {value: '0 0, 9 0, 9 9 mm', basis: drawing}, mirror: yes}}}",
    "{design: D, aero_surfaces: {wing: {outline: {side: '0 0, 9 0, 9 9 mm'}, extent: {x: [1 mm, 2 mm], y: {from: 1 mm}}}}}",
    "{changes: d.design.yaml, set: {judgements.lamps.left.verdict: breach, masses.fuel.at.x: 1500 mm}}",
]


@pytest.mark.parametrize("text", GOOD)
def test_what_a_design_may_say(text: str) -> None:
    assert not list(_validator("design").iter_errors(_read(text)))


WRONG = [
    ("a signal without rows", "{design: D, signals: {brake: {column: a}}}"),
    ("a row of a signal with three cells", "{design: D, signals: {brake: {rows: [[0 s, 1 V, 2 V]]}}}"),
    ("neither name nor base", "{revision: C}"),
    ("set without a base", "{design: D, set: {}}"),
    ("unknown section", "{design: D, wheels: {}}"),
    ("unknown field", "{design: D, tyres: {rear: {widht: 300 mm}}}"),
    ("an outline of two corners", "{design: D, outlines: {tub: {side: '0 0, 9 9 mm'}}}"),
    ("an extent of one end", "{design: D, aero_surfaces: {wing: {extent: {x: [1 mm]}}}}"),
    ("number without its unit", "{design: D, dimensions: {wheelbase: '2860'}}"),
    ("blank left out", "{design: D, dimensions: {wheelbase: 2860mm}}"),
    ("list for a value", "{design: D, dimensions: {wheelbase: [1 mm]}}"),
    ("value mapping without its value", "{design: D, dimensions: {wheelbase: {uncertainty: 1 mm}}}"),
    ("unknown word about a value", "{design: D, dimensions: {wheelbase: {value: 1 mm, source: me}}}"),
    ("unknown basis", "{design: D, dimensions: {wheelbase: {value: 1 mm, basis: guessed}}}"),
    ("unknown choice", "{design: D, options: {driven_axle: middle}}"),
    ("flag in other words", "{design: D, options: {power_steering: fitted}}"),
    ("date the other way round", "{design: D, evidence: {hoop: {until: 01.02.2027}}}"),
    ("point of two numbers", "{design: D, points: {nose: 1 2 mm}}"),
    ("item that is no name", "{design: D, masses: {front wing: {mass: 1 kg}}}"),
    ("text for a collection", "{design: D, masses: heavy}"),
    ("unknown path set", "{changes: d.design.yaml, set: {tyres.rear.widht: 250 mm}}"),
    ("no unit in a state", "{design: D, states: {fuel: {empty: {masses.fuel.mass: '0'}}}}"),
    ("verdict that no person gives", "{design: D, judgements: {finish: {verdict: perhaps}}}"),
]


@pytest.mark.parametrize(("what", "text"), WRONG, ids=[what for what, _ in WRONG])
def test_what_a_design_may_not_say(what: str, text: str) -> None:
    assert not _validator("design").is_valid(_read(text)), what


def test_a_change_needs_its_set() -> None:
    validator = _validator("change extended")
    assert validator.is_valid({"set": {"tyres.rear.width": "250 mm"}})
    assert not validator.is_valid({"note": "nothing"})
    assert not validator.is_valid({"design": "D", "set": {}})


RULESET = """
ruleset: R
valid: {from: 2027-01-01}
inputs: {lamps: {kind: collection, items: [left], element: {role: {choices: [a, b]}}}}
tables: {t: {over: a.b, steps: [{up_to: 1 mm, value: 2 mm}, {otherwise: 3 mm}]}}
groups: {g: {when: a == b, rules: [width]}}
zones: {box: {x: [0 mm, 1 mm], any: [{z: {to: 1 mm}}, {view: side, points: [[0 mm, 0 mm], points.a, [0 mm, 1 mm]]}]}}
templates: {probe: {view: side, points: [[0 mm, 0 mm], [1 mm, 0 mm], [0 mm, 1 mm]]}}
rules: {width: {require: a.b <= 1 mm, inside: box, outside: {zone: box, what: points.a}, standing: should, unless: {when: c == yes, because: x}, states: {fuel: every}}}
"""

RULESET_FAULTS: list[tuple[list[str], Any]] = [
    (["ruleset"], None),
    (["edition_of"], "2"),
    (["valid", "from"], "January"),
    (["valid", "to"], "2027-01-01"),
    (["inputs", "lamps", "kind"], "list"),
    (["inputs", "lamps", "element", "role", "words"], ["a"]),
    (["tables", "t", "over"], None),
    (["tables", "t", "steps"], [{"up_to": "1 mm"}]),
    (["tables", "t", "linear"], [["1 mm"]]),
    (["groups", "g", "when"], None),
    (["zones", "box", "x"], ["0 mm"]),
    (["zones", "box", "y"], {"upto": "1 mm"}),
    (["zones", "box", "any"], []),
    (["zones", "box", "any"], [{"points": [["0 mm", "0 mm"], "points.a", "points.b"]}]),
    (["zones", "box", "round"], "1 mm"),
    (["templates", "probe", "view"], None),
    (["rules", "width", "outside", "zone"], None),
    (["rules", "width", "passes"], {"template": "probe"}),
    (["rules", "width", "sight"], {"from": "points.a", "to": "points.b"}),
    (["rules", "width", "requires"], "a"),
    (["rules", "width", "standing"], "must"),
    (["rules", "width", "empty"], "fine"),
    (["rules", "width", "unless", "when"], None),
    (["rules", "width", "evidence"], {"kind": "certificate"}),
    (["rules", "width", "require"], ["a"]),
]


@pytest.mark.parametrize(("place", "value"), RULESET_FAULTS, ids=lambda item: ".".join(map(str, item or ()))[:40])
def test_what_a_ruleset_may_not_say(place: list[str], value: Any) -> None:
    good = _read(RULESET)
    assert not list(_validator("ruleset").iter_errors(good))
    wrong = copy.deepcopy(good)
    inner = wrong
    for part in place[:-1]:
        inner = inner[part]
    if value is None:
        del inner[place[-1]]
    else:
        inner[place[-1]] = value
    assert not _validator("ruleset").is_valid(wrong)


def test_house_files() -> None:
    good = _read("{house: H, designs: ['*.design.yaml'], reserves: {width: 2 mm}, decision: guarded}")
    assert _validator("house").is_valid(good)
    assert not _validator("house").is_valid({**good, "decision": "bold"})
    assert not _validator("house").is_valid({**good, "reserve": {}})
    assert not _validator("house").is_valid({"designs": []})
