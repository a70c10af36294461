from __future__ import annotations

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest
from jsonschema import Draft202012Validator

from rulecheck import __version__, api, cli
from rulecheck.cli import run
from rulecheck.output.report_schema import diagnostics_schema, report_schema

Output = pytest.CaptureFixture[str]
ROOT = Path(__file__).parents[2]

RULES = """\
ruleset: Heath Sprint rules
edition: "1"
inputs:
  safety.extinguisher_charge: {unit: kg, meaning: Mass of extinguishing agent}
rules:
  overall_width:
    clause: "1"
    title: Overall width
    require: dimensions.overall_width <= 1900 mm
  charge:
    clause: "2"
    title: Charge of the extinguisher
    when: dimensions.overall_width > 1000 mm
    require: safety.extinguisher_charge >= 2 kg
"""
DESIGN = """\
design: Linnet
rulesets: [heath.ruleset.yaml]
dimensions: {overall_width: 1890 mm}
safety: {extinguisher_charge: 2.5 kg}
states:
  trim: {wide: {dimensions.overall_width: 1910 mm}, narrow: {dimensions.overall_width: 1880 mm}}
"""


@pytest.fixture(autouse=True)
def folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    (tmp_path / "heath.ruleset.yaml").write_text(RULES)
    (tmp_path / "car.design.yaml").write_text(DESIGN)
    (tmp_path / "rulecheck.yaml").write_text("house: Heath office\n")
    monkeypatch.chdir(tmp_path)
    return tmp_path


def _check(*arguments: str) -> int:
    return run(["check", "car.design.yaml", "--on", "2027-03-01", *arguments])


# --- exit codes ------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("arguments", "code"),
    [
        ([], 0),
        (["--set", "dimensions.overall_width=1900mm"], 0),
        (["--reserve", "5%"], 0),
        (["--set", "dimensions.overall_width=1901mm"], 1),
        (["--state", "trim=wide"], 1),
        (["--set", "safety.extinguisher_charge=none"], 3),
        (["--set", "dimensions.overall_width=1901"], 2),
        (["--rules", "gone.ruleset.yaml"], 2),
    ],
)
def test_exit_codes(arguments: list[str], code: int) -> None:
    assert _check(*arguments) == code


def test_changes_are_shown(capsys: Output) -> None:
    _check("--set", "dimensions.overall_width=1901mm")
    assert "with dimensions.overall_width = 1901mm" in " ".join(capsys.readouterr().out.split())


def test_reserve_makes_tight(capsys: Output) -> None:
    _check("--reserve", "5%")
    assert "total: tight" in capsys.readouterr().out


def test_interruption_has_its_code(monkeypatch: pytest.MonkeyPatch, capsys: Output) -> None:
    def interrupted(*_: object, **__: object) -> None:
        raise KeyboardInterrupt

    monkeypatch.setattr(api, "check", interrupted)
    assert _check() == 130
    shown = capsys.readouterr()
    assert shown.out == ""
    assert shown.err.strip() == "interrupted"


def test_a_crash_is_no_breach_and_no_traceback(monkeypatch: pytest.MonkeyPatch, capsys: Output) -> None:
    def crash(*_: object, **__: object) -> None:
        raise RuntimeError("oh")

    monkeypatch.setattr(api, "check", crash)
    assert _check() == 2
    error = capsys.readouterr().err
    assert error.startswith("internal: RuntimeError in test_cli.py, line ")
    assert "Traceback" not in error


# --- the command line itself -----------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("arguments", "told"),
    [
        (["chekc"], "usage: no such command 'chekc'"),
        (["check"], "usage: missing argument 'DESIGN'"),
        (["check", "car.design.yaml", "--fom", "json"], "usage: no such option '--fom'"),
        (["check", "car.design.yaml", "--set", "a"], "'a' is not of the form PATH=VALUE"),
        (["check", "car.design.yaml", "--state", "a=b", "--state", "a=c"], "an axis is given two states"),
        (["check", "car.design.yaml", "--on", "tomorrow"], "'tomorrow' is not a date"),
        (["check", "car.design.yaml", "--reserve", "much"], "'much' is not a share"),
        (["check", "car.design.yaml", "--form", "html"], "html"),
        (["check", "car.design.yaml", "--output", "a", "--form", "json"], "every --output stands behind the --form"),
        (["workings", "car.design.yaml"], "missing argument 'NAME...'"),
        (["handbook", "nowhere"], "the handbook has no page 'nowhere'"),
        (["handbook", "schema"], "WHAT is one of design, ruleset"),
        (["handbook", "schema", "report", "--rules", "heath.ruleset.yaml"], "--rules goes with"),
        (["handbook", "units", "design"], "go with 'handbook schema'"),
    ],
)
def test_faults_of_the_command_line(arguments: list[str], told: str, capsys: Output) -> None:
    assert run(arguments) == 2
    shown = capsys.readouterr()
    assert shown.out == ""
    assert shown.err.startswith("usage: ")
    assert told in shown.err
    assert "    do: " in shown.err
    assert shown.err.endswith("1 fault\n")


def test_no_command_shows_the_help(capsys: Output) -> None:
    assert run([]) == 2
    shown = capsys.readouterr()
    assert shown.out == ""
    assert "check" in shown.err


def test_version_and_help(capsys: Output) -> None:
    assert run(["--version"]) == 0
    assert capsys.readouterr().out == f"rulecheck {__version__}\n"
    for command in ("check", "workings", "handbook"):
        assert run([command, "--help"]) == 0
        assert f"rulecheck {command}" in capsys.readouterr().out


# --- faults of the files ---------------------------------------------------------------------------------------------


def test_faults_go_to_standard_error_with_the_line(capsys: Output) -> None:
    assert _check("--set", "dimensions.overall_width=1901") == 2
    shown = capsys.readouterr()
    assert shown.out == ""
    assert "unit-missing" in shown.err
    assert "    1901\n    ^^^^\n" in shown.err


def test_faults_in_json_go_to_standard_output(capsys: Output) -> None:
    assert _check("--rules", "gone.ruleset.yaml", "--form", "json") == 2
    shown = capsys.readouterr()
    faults = json.loads(shown.out)
    Draft202012Validator(diagnostics_schema()).validate(faults)
    assert faults[0]["code"] == "no-such-file"
    assert "no-such-file" in shown.err


def test_nothing_is_written_where_the_input_is_refused(folder: Path) -> None:
    assert _check("--rules", "gone.ruleset.yaml", "--form", "json", "--output", "report.json") == 2
    assert not (folder / "report.json").exists()


# --- forms and files -------------------------------------------------------------------------------------------------


def test_several_forms(folder: Path, capsys: Output) -> None:
    assert _check("--form", "json", "--output", "report.json", "--form", "terminal") == 0
    assert "total: complies" in capsys.readouterr().out
    made = json.loads((folder / "report.json").read_text(encoding="utf-8"))
    Draft202012Validator(report_schema()).validate(made)
    assert made["verdict"] == "complies"


def test_a_form_in_a_file_leaves_standard_output_empty(folder: Path, capsys: Output) -> None:
    assert _check("--output", "report.txt") == 0
    assert capsys.readouterr() == ("", "")
    assert "total: complies" in (folder / "report.txt").read_text(encoding="utf-8")


def test_the_design_is_never_written_over(folder: Path) -> None:
    assert _check("--form", "json", "--output", "car.design.yaml") == 2
    assert (folder / "car.design.yaml").read_text() == DESIGN


def test_nothing_is_said_where_a_file_cannot_be_written(capsys: Output) -> None:
    assert _check("--form", "json", "--output", "gone/report.json", "--form", "terminal") == 2
    assert capsys.readouterr().out == ""


def test_workings(capsys: Output) -> None:
    assert run(["workings", "car.design.yaml", "overall_width", "--on", "2027-03-01"]) == 0
    assert "verdict: complies, margin 10 mm" in capsys.readouterr().out
    assert run(["workings", "car.design.yaml", "overall_widht"]) == 2
    assert "did you mean 'overall_width'?" in capsys.readouterr().err


def test_handbook(capsys: Output) -> None:
    assert run(["handbook"]) == 0
    assert capsys.readouterr().out.startswith("# ")
    assert run(["handbook", "units"]) == 0
    assert capsys.readouterr().out.startswith("# Units")


@pytest.mark.parametrize("what", cli.SCHEMAS)
def test_schemas(what: str, capsys: Output) -> None:
    assert run(["handbook", "schema", what]) == 0
    Draft202012Validator.check_schema(json.loads(capsys.readouterr().out))


def test_the_design_schema_knows_a_ruleset(capsys: Output) -> None:
    assert run(["handbook", "schema", "design", "--rules", "heath.ruleset.yaml"]) == 0
    assert "extinguisher_charge" in capsys.readouterr().out


# --- as a process ----------------------------------------------------------------------------------------------------


def _process(*arguments: str) -> subprocess.CompletedProcess[str]:
    environment = {**os.environ, "PYTHONPATH": str(ROOT)}
    return subprocess.run(
        [sys.executable, *arguments], env=environment, capture_output=True, text=True, encoding="utf-8", check=False
    )


def test_the_module_is_the_command() -> None:
    done = _process("-m", "rulecheck", "check", "car.design.yaml", "--set", "dimensions.overall_width=2m")
    assert done.returncode == 1
    assert "total: breach" in done.stdout


def test_help_does_not_load_the_engine() -> None:
    code = (
        "import sys; from rulecheck.cli import run; run(['check', '--help']);"
        "print(sorted({name.partition('.')[0] for name in sys.modules} & {'flint','sympy','pydantic','yaml','rich','numpy'}))"
    )
    assert _process("-c", code).stdout.endswith("[]\n")


def test_check_loads_nothing_heavy() -> None:
    code = (
        "import sys; from rulecheck.cli import run; run(['check', 'car.design.yaml']);"
        "print(sorted(set(sys.modules) & {'sympy', 'numpy', 'scipy', 'shapely', 'jsonschema', 'rich.markdown'}))"
    )
    assert _process("-c", code).stdout.endswith("[]\n")


def test_a_closed_pipe_is_no_fault() -> None:
    environment = {**os.environ, "PYTHONPATH": str(ROOT)}
    command = [sys.executable, "-m", "rulecheck", "check", "car.design.yaml", "--set", "dimensions.overall_width=2m"]
    process = subprocess.Popen(command, env=environment, stdout=subprocess.PIPE, stderr=subprocess.PIPE)
    assert process.stdout is not None
    assert process.stderr is not None
    process.stdout.close()
    with process.stderr as errors:
        assert errors.read() == b""
    # The verdict is known although nobody reads it.
    assert process.wait() == 1


def test_vary_draws_to_a_file_and_tells_on_the_stream(capsys: Output) -> None:
    asked = ["workings", "car.design.yaml", "overall_width", "--on", "2027-03-01"]
    vary = ["--vary", "dimensions.overall_width=1880..1910mm:10mm"]
    assert run([*asked, *vary, "--form", "csv", "--form", "svg", "--output", "plot.svg"]) == 0
    rows = capsys.readouterr().out.splitlines()
    assert rows[1:] == ["1880,20,complies,", "1890,10,complies,", "1900,0,complies,", "1910,-10,breach,"]
    assert Path("plot.svg").read_text(encoding="utf-8").startswith("<svg ")


@pytest.mark.parametrize(
    ("options", "said"),
    [
        (["--form", "svg"], "usage: there is no form 'svg' of this answer\n    expected: terminal or json\n"),
        (["--vary", "a"], "usage: invalid value for '--vary': 'a' is not of the form PATH=VALUES\n"),
        (
            ["--vary", "dimensions.overall_width=1..2mm", "--closed-form"],
            "usage: a closed form is of the design as it stands, and does not go with --vary\n",
        ),
        (
            ["--vary", "dimensions.overall_width=1..2kg"],
            "--vary dimensions.overall_width:1:5: wrong-dimension: 'kg' is a unit of mass [kg], and length [m] is due\n"
            "    1..2kg\n        ^^\n",
        ),
    ],
)
def test_vary_refuses(options: list[str], said: str, capsys: Output) -> None:
    assert run(["workings", "car.design.yaml", "overall_width", "--on", "2027-03-01", *options]) == 2
    assert capsys.readouterr().err.startswith(said)
