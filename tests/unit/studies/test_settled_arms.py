"""Workings of a formula whose condition is settled: the arm that is taken, with numbers, and what it rests on alone."""

from __future__ import annotations

from pathlib import Path

from small_files import CAR, DAY, RULES, write_files

from rulecheck import workings

DERIVED = """\
inputs: {rig.a: {unit: mm, meaning: a}, rig.b: {unit: mm, meaning: b}, rig.kind: {choices: [long, short], meaning: k}}
derived:
  whole: {formula: "2 * (rig.a + rig.b if rig.kind == long else (rig.b if rig.kind == short else rig.a))", unit: mm}
rules:
  it: {require: whole <= 100 mm}
"""


def steps(folder: Path, kind: str) -> dict[str, str]:
    write_files(
        folder,
        {
            "car.design.yaml": f"{CAR}rig: {{a: 3 mm, b: 4 mm{kind}}}\n",
            "cup.ruleset.yaml": RULES + DERIVED,
        },
    )
    found = workings(folder / "car.design.yaml", ["it"], on=DAY)
    return {step.name: step.numbers for step in found.items[0].steps}


def test_the_arm_that_is_taken(tmp_path: Path) -> None:
    long = steps(tmp_path, ", kind: long")
    assert long["whole"] == "2 * (3 mm + 4 mm)"
    assert {"rig.a", "rig.b"} <= set(long)
    short = steps(tmp_path, ", kind: short")
    assert short["whole"] == "2 * 4 mm"
    assert "rig.a" not in short


def test_an_unknown_condition_shows_both(tmp_path: Path) -> None:
    assert steps(tmp_path, "")["whole"].startswith("2 * (3 mm + 4 mm if rig.kind == long else ")
