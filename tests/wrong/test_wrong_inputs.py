"""What is said of wrong inputs, word for word, and that no code of a diagnostic goes without an example."""

from __future__ import annotations

import re
from pathlib import Path

import pytest
from small_files import CAR, RULES, check_files
from wrong_curves import WRONG_CURVES
from wrong_designs import WRONG_DESIGNS
from wrong_inputs import Wrong
from wrong_modules import WRONG_MODULES
from wrong_records import WRONG_RECORDS
from wrong_rulesets import WRONG_RULESETS
from wrong_signals import WRONG_SIGNALS
from wrong_spread import WRONG_SPREAD
from wrong_zones import WRONG_ZONES

from rulecheck import cli
from rulecheck.diagnostics import CODES, Refused
from rulecheck.physics.modules import read_module
from rulecheck.reading.workspace import Workspace

WRONG = (
    *WRONG_DESIGNS,
    *WRONG_CURVES,
    *WRONG_MODULES,
    *WRONG_RECORDS,
    *WRONG_RULESETS,
    *WRONG_SIGNALS,
    *WRONG_SPREAD,
    *WRONG_ZONES,
)
_CODE = re.compile(r"^(?:\S.*?:\d+:\d+: )?([a-z0-9-]+): ")
OF_THE_COMMAND = frozenset(("usage", "cannot-write", "internal"))
OF_PHYSICS = frozenset(("bad-physics",))
OF_WORKINGS = frozenset(("no-closed-form",))
"""Said inside of an answer: tests/unit/physics/test_lap_workings.py."""


def code_of(line: str) -> str:
    found = _CODE.match(line)
    assert found is not None, line
    return found[1]


@pytest.mark.parametrize("wrong", WRONG, ids=lambda wrong: wrong.name)
def test_what_is_said(wrong: Wrong) -> None:
    files = {"car.design.yaml": CAR + wrong.design, "cup.ruleset.yaml": RULES + wrong.ruleset, **wrong.files}
    with pytest.raises(Refused) as refused:
        check_files(files, **wrong.options)
    assert [str(item) for item in refused.value.diagnostics] == list(wrong.said)


@pytest.mark.parametrize("wrong", WRONG, ids=lambda wrong: wrong.name)
def test_places_point_at_the_text(wrong: Wrong) -> None:
    """Line and column of a span agree with its offset in the file."""
    files = {"car.design.yaml": CAR + wrong.design, "cup.ruleset.yaml": RULES + wrong.ruleset, **wrong.files}
    with pytest.raises(Refused) as refused:
        check_files(files, **wrong.options)
    for item in refused.value.diagnostics:
        text = files.get(item.span.file) if item.span else None
        if item.span is not None and isinstance(text, str):
            before = text[: item.span.start]
            assert (item.span.line, item.span.column) == (before.count("\n") + 1, len(before.split("\n")[-1]) + 1)
            assert item.span.start <= item.span.end <= len(text)


def test_names_of_cases_are_used_once() -> None:
    assert len({wrong.name for wrong in WRONG}) == len(WRONG)


def test_every_code_has_an_example() -> None:
    shown = {code_of(line) for wrong in WRONG for line in wrong.said} | OF_THE_COMMAND | OF_PHYSICS | OF_WORKINGS
    assert shown == set(CODES)


def test_a_fault_says_what_was_expected_or_what_to_do() -> None:
    bare = ("wrong-arguments: 'sqrt' takes 1 argument, not 2", "cycle: rulesets extend each other")
    for wrong in WRONG:
        for line in wrong.said:
            assert "; " in line or any(text in line for text in bare), line


# --- codes that no file brings about ---------------------------------------------------------------------------------


@pytest.fixture
def car(tmp_path: Path) -> Path:
    (tmp_path / "cup.ruleset.yaml").write_text(f"{RULES}rules:\n  it: {{require: dimensions.wheelbase >= 1 m}}\n")
    place = tmp_path / "car.design.yaml"
    place.write_text(f"{CAR}dimensions: {{wheelbase: 2 m}}\n")
    return place


@pytest.mark.parametrize(
    ("arguments", "said"),
    [
        (["chek"], "usage: "),
        (["check", "--chnge", "x"], "usage: "),
        (["check", "CAR", "--on", "yesterday"], "usage: "),
        (["check", "CAR", "--output", "nowhere/x.json", "--form", "json"], "usage: "),
    ],
)
def test_a_command_line_that_cannot_be_understood(
    arguments: list[str], said: str, car: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    assert cli.run([str(car) if item == "CAR" else item for item in arguments]) == cli.UNUSABLE
    out, err = capsys.readouterr()
    assert out == ""
    assert said in err


def test_an_output_that_cannot_be_written(car: Path, capsys: pytest.CaptureFixture[str]) -> None:
    target = car.parent / "nowhere" / "report.json"
    assert cli.run(["check", str(car), "--form", "json", "--output", str(target)]) == cli.UNUSABLE
    out, err = capsys.readouterr()
    assert out == ""
    assert "cannot-write: " in err
    assert str(target.name) in err


def test_a_crash_is_told_as_a_fault_of_the_program(
    car: Path, capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    def crash(*_arguments: object, **_options: object) -> None:
        raise KeyError("lost")

    monkeypatch.setattr("rulecheck.api.check", crash)
    assert cli.run(["check", str(car)]) == cli.UNUSABLE
    out, err = capsys.readouterr()
    assert out == ""
    assert "internal: KeyError in test_wrong_inputs.py, line " in err
    assert "Traceback" not in err


def test_a_physics_module_without_its_source(tmp_path: Path) -> None:
    (tmp_path / "tides.yaml").write_text(
        "module: tides\nmeaning: Heights of water\nsources: {almanac: A table}\n"
        "figures:\n  height: {formula: 2 m, unit: m, meaning: Height, source: almanack}\n"
    )
    with pytest.raises(Refused) as refused:
        read_module(Workspace(tmp_path), "tides.yaml")
    assert [str(item) for item in refused.value.diagnostics] == [
        "tides.yaml:5:60: bad-physics: there is no source 'almanack'; expected almanac"
    ]
