"""Whole outputs on a small invented car, held against files of the form's own extension.

The folder is copied away first, so that file names in the outputs do not hang on where the project lies.
"""

from __future__ import annotations

import json
import shutil
from collections.abc import Callable
from pathlib import Path

import pytest
from jsonschema import Draft202012Validator

from rulecheck import __version__
from rulecheck.cli import run
from rulecheck.output.json_varied import varied_schema
from rulecheck.output.proofreading_schema import proofreading_schema
from rulecheck.output.report_schema import diagnostics_schema, report_schema, workings_schema
from rulecheck.output.study_schemas import headroom_schema, whatif_schema

HERE = Path(__file__).parent
CASE = HERE / "plover"
DAY = ("--on", "2027-03-01")
Golden = Callable[[Path, str], None]


@pytest.fixture(autouse=True)
def _in_the_case(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    folder = tmp_path / "plover"
    shutil.copytree(CASE, folder, ignore=shutil.ignore_patterns("expected"))
    monkeypatch.chdir(folder)
    monkeypatch.delenv("FORCE_COLOR", raising=False)


def _without_version(text: str) -> str:
    return text.replace(f'"version": "{__version__}"', '"version": "VERSION"')


VARIED = ["workings", "plover.design.yaml", "diffuser_width", "extinguisher", "diffuser_room"]
CURVES = ["--vary", "tyres.rear.width=300..320mm:4mm", "--vary", "diffuser.gap=15mm,20mm"]
SHOWN = [
    ("check.txt", 1, ["check", "plover.design.yaml"]),
    ("check.json", 1, ["check", "plover.design.yaml", "--form", "json"]),
    ("check-heavy-reserve.txt", 1, ["check", "plover.design.yaml", "--state", "driver=heavy", "--reserve", "5 %"]),
    ("check-mended.txt", 3, ["check", "plover.design.yaml", "--change", "mended.change.yaml"]),
    ("check-settled.txt", 0, ["check", "plover.design.yaml", "--change", "settled.change.yaml"]),
    ("workings.txt", 0, ["workings", "plover.design.yaml", "tyre_width", "mass_with_driver", "diffuser_room"]),
    ("workings.json", 0, ["workings", "plover.design.yaml", "diffuser_width", "--form", "json"]),
    ("workings-closed-form.txt", 0, ["workings", "plover.design.yaml", "diffuser_width", "--closed-form"]),
    ("whatif.txt", 0, ["whatif", "plover.design.yaml", "--set", "tyres.rear.width=320mm"]),
    (
        "whatif-columns.txt",
        0,
        ["whatif", "plover.design.yaml", "--change", "mended.change.yaml", "--change", "settled.change.yaml"],
    ),
    ("whatif.json", 0, ["whatif", "plover.design.yaml", "--set", "tyres.rear.width=320mm", "--form", "json"]),
    ("whatif-nothing.txt", 0, ["whatif", "plover.design.yaml"]),
    ("headroom.txt", 0, ["headroom", "plover.design.yaml", "--change", "settled.change.yaml"]),
    ("headroom.json", 0, ["headroom", "plover.design.yaml", "tyres.rear.width", "--form", "json"]),
    ("varied.txt", 0, [*VARIED, "mass.height", "--vary", "tyres.rear.width=300..320mm:4mm"]),
    ("varied-curves.txt", 0, [*VARIED, *CURVES]),
    ("varied.json", 0, [*VARIED, *CURVES, "--form", "json"]),
    ("varied.csv", 0, [*VARIED, *CURVES, "--form", "csv"]),
    ("varied.svg", 0, [*VARIED, *CURVES, "--form", "svg"]),
    ("proofread.txt", 1, ["proofread", "tern-bulletin.ruleset.yaml", "--listing", "--strict"]),
    ("proofread.json", 0, ["proofread", "tern-bulletin.ruleset.yaml", "--listing", "--form", "json"]),
    ("proofread.md", 0, ["proofread", "tern-bulletin.ruleset.yaml", "--listing", "--form", "markdown"]),
    ("refused.json", 2, ["check", "faulty.design.yaml", "--form", "json"]),
]


@pytest.mark.parametrize(("name", "code", "arguments"), SHOWN, ids=[name for name, _, _ in SHOWN])
def test_standard_output(
    name: str, code: int, arguments: list[str], capsys: pytest.CaptureFixture[str], golden: Golden
) -> None:
    assert run([*arguments, *DAY]) == code
    golden(CASE / "expected" / name, _without_version(capsys.readouterr().out))


def test_diagnostics_on_standard_error(capsys: pytest.CaptureFixture[str], golden: Golden) -> None:
    assert run(["check", "faulty.design.yaml", *DAY]) == 2
    shown = capsys.readouterr()
    assert shown.out == ""
    golden(CASE / "expected" / "refused.txt", shown.err)


@pytest.mark.parametrize(
    ("name", "schema"),
    [
        ("check.json", report_schema()),
        ("workings.json", workings_schema()),
        ("varied.json", varied_schema()),
        ("whatif.json", whatif_schema()),
        ("headroom.json", headroom_schema()),
        ("proofread.json", proofreading_schema()),
        ("refused.json", diagnostics_schema()),
    ],
)
def test_json_meets_its_schema(name: str, schema: dict[str, object]) -> None:
    Draft202012Validator(schema).validate(json.loads((CASE / "expected" / name).read_text(encoding="utf-8")))


@pytest.mark.parametrize("name", [name for name, _, _ in SHOWN if name.endswith(".txt")])
def test_terminal_form_fits_80_columns_without_colour(name: str) -> None:
    text = (CASE / "expected" / name).read_text(encoding="utf-8")
    assert [line for line in text.splitlines() if len(line) > 80] == []
    assert "\x1b" not in text
