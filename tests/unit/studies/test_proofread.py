from __future__ import annotations

import json
from datetime import date
from pathlib import Path

import pytest

from rulecheck import Proofreading, proofread
from rulecheck.cli import run

DAY = date(2027, 3, 1)
HEAD = "ruleset: Heron Cup\n"
SOUND = """\
rules:
  width: {clause: "1", title: Width, require: dimensions.overall_width <= 1900 mm}
"""


def proofs(folder: Path, text: str, **others: str) -> Proofreading:
    """What is found in a ruleset of this text, with others beside it."""
    for name, other in others.items():
        (folder / f"{name}.ruleset.yaml").write_text(other, encoding="utf-8")
    path = folder / "cup.ruleset.yaml"
    path.write_text(text, encoding="utf-8")
    return proofread([path], on=DAY, listed=True)


def found(folder: Path, text: str, **others: str) -> list[tuple[str, str, str]]:
    """Weight, code and subject of each finding."""
    book = proofs(folder, text, **others).books[0]
    return [(item.weight, item.code, item.subject) for item in book.findings]


def test_a_sound_rule_book_has_no_finding(tmp_path: Path) -> None:
    assert found(tmp_path, HEAD + SOUND) == []


@pytest.mark.parametrize(
    ("rule", "code"),
    [
        ("require: dimensions.overal_width <= 1900 mm", "unknown-name"),
        ("require: dimensions.overall_width <= 1900 kg", "dimension-mismatch"),
        ('require: rule(width) and dimensions.wheelbase >= 1 m, valid: {from: "2028-01-01"}', "cycle"),
        ("each: t in tyres, require: t.girth <= 2 m", "unknown-name"),
        ("each: t in tyres where t.colour == red, require: t.width <= 2 m", "unknown-name"),
        ("states: every, require: dimensions.overall_width <= 1900 kg", "unknown-state"),
        ("standing: note, require: dimensions.overal_width <= 1900 mm", "unknown-name"),
    ],
)
def test_faults_of_binding_are_findings_with_their_rule(tmp_path: Path, rule: str, code: str) -> None:
    text = f'{HEAD}rules:\n  width: {{clause: "1", title: Width, {rule}}}\n'
    assert found(tmp_path, text) == [("fault", code, "width")]


def test_a_sound_rule_is_read_beside_a_faulty_one(tmp_path: Path) -> None:
    text = f"{HEAD}inputs: {{lamp.area: {{unit: cm^2, meaning: Lit area}}}}\n{SOUND}"
    text += '  lamp: {clause: "2", title: Lamp, require: lamp.area >= 20 cm^2 and lamp.heigth >= 1 mm}\n'
    assert found(tmp_path, text) == [("fault", "unknown-name", "lamp")]


def test_a_fault_of_a_derived_figure_is_of_no_rule(tmp_path: Path) -> None:
    text = f"{HEAD}{SOUND}derived: {{room: {{formula: dimensions.wheelbase + 1 kg, unit: mm}}}}\n"
    assert ("fault", "dimension-mismatch", "") in found(tmp_path, text)


def test_what_cannot_be_read_is_refused(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (tmp_path / "cup.ruleset.yaml").write_text(HEAD + "rulse: {}\n")
    assert run(["proofread", str(tmp_path / "cup.ruleset.yaml")]) == 2
    assert "unknown-key" in capsys.readouterr().err


@pytest.mark.parametrize(
    ("declared", "what"),
    [
        ("inputs: {lamp.area: {unit: cm^2, meaning: Lit area}}", "lamp.area"),
        ("derived: {room: {formula: dimensions.wheelbase, unit: mm}}", "room"),
        ('lists: {steels: ["25CrMo4"]}', "steels"),
        (
            "tables: {least: {over: dimensions.wheelbase, steps: [{up_to: 1 m, value: 1 kg}, {otherwise: 2 kg}]}}",
            "least",
        ),
        ("zones: {box: {x: [0 mm, 1 mm]}}", "box"),
        ("templates: {gauge: {view: side, points: [[0 mm, 0 mm], [1 mm, 0 mm], [0 mm, 1 mm]]}}", "gauge"),
    ],
)
def test_what_nothing_reads(tmp_path: Path, declared: str, what: str) -> None:
    assert found(tmp_path, f"{HEAD}{declared}\n{SOUND}") == [("question", "unused-name", what)]


@pytest.mark.parametrize(
    "text",
    [
        "inputs: {lamp.area: {unit: cm^2, meaning: Lit area}}\nderived: {lit: {formula: lamp.area, unit: cm^2}}\n"
        'rules: {l: {clause: "1", title: Lamp, require: lit >= 2 cm^2}}\n',
        "inputs: {tyres.*.pressure: {unit: bar, meaning: Cold}}\n"
        'rules: {l: {clause: "1", title: Tyre, each: t in tyres, require: t.pressure >= 1 bar}}\n',
        "inputs: {lamps: {kind: collection, meaning: Lamps, element: {at: {kind: point, meaning: Middle}}}}\n"
        'rules: {l: {clause: "1", title: Lamp, require: lamps.left.at.z >= 1 mm}}\n',
        "inputs: {options.roof: {kind: flag, meaning: Roof}}\n"
        'rules: {l: {clause: "1", title: Roof, when: options.roof == yes, judgement: Is it tight?}}\n',
        "inputs: {setup.fuel: {unit: kg, meaning: Fuel}}\nstates_needed: {fuel: {full: {sets: [setup.fuel]}}}\n"
        'rules: {l: {clause: "1", title: Mass, states: every, require: mass.total >= 1 kg}}\n',
        "inputs: {dimensions.rear_track: {unit: mm, definition: contact centres, meaning: Track}}\n" + SOUND,
    ],
    ids=["through a figure", "a field", "inside an item", "a condition", "a state", "completes a known one"],
)
def test_what_something_reads(tmp_path: Path, text: str) -> None:
    assert found(tmp_path, HEAD + text) == []


def test_no_default_counts_as_stated(tmp_path: Path) -> None:
    text = f'{HEAD}rules: {{one: {{clause: "1", title: One piece, each: m in masses, require: m.quantity <= 1}}}}\n'
    assert found(tmp_path, text) == []


@pytest.mark.parametrize(("margin", "expected"), [("10 mm", []), ("11 mm", [("fault", "failed-example", "width")])])
def test_examples_are_run(tmp_path: Path, margin: str, expected: list[tuple[str, str, str]]) -> None:
    examples = f"[{{given: {{dimensions.overall_width: 1890 mm}}, margin: {margin}}}]"
    text = SOUND.replace("1900 mm}", f"1900 mm, examples: {examples}}}")
    assert found(tmp_path, HEAD + text) == expected


# --- the command -----------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(("rest", "code"), [("", 0), ('  more: {clause: "1", title: More, require: a <= 1 mm}\n', 1)])
def test_strict_fails_on_faults_alone(tmp_path: Path, rest: str, code: int) -> None:
    path = tmp_path / "cup.ruleset.yaml"
    path.write_text(f"{HEAD}lists: {{never: [a]}}\n{SOUND}{rest}")
    assert run(["proofread", str(path), "--strict"]) == code
    assert run(["proofread", str(path)]) == 0


def test_several_rule_books(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    paths = [tmp_path / f"{name}.ruleset.yaml" for name in ("one", "two")]
    for path in paths:
        path.write_text(HEAD + SOUND)
    assert run(["proofread", *map(str, paths), "--form", "json"]) == 0
    answer = json.loads(capsys.readouterr().out)
    assert [book["file"] for book in answer["rulesets"]] == ["one.ruleset.yaml", "two.ruleset.yaml"]
    assert sorted(answer["files"]) == ["one.ruleset.yaml", "two.ruleset.yaml"]


def test_both_files_are_refused_at_once(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert run(["proofread", str(tmp_path / "a.ruleset.yaml"), str(tmp_path / "b.ruleset.yaml"), "--form", "json"]) == 2
    assert [item["code"] for item in json.loads(capsys.readouterr().out)] == ["no-such-file"] * 2
