"""Solvers by name: ours, those of other packages, and that nothing is loaded that no rule asks for."""

from __future__ import annotations

import subprocess
import sys
from importlib.metadata import EntryPoint
from pathlib import Path

import pytest
from small_files import CAR, DAY, RULES, check_files, findings, refused, write_files

from rulecheck import workings
from rulecheck.diagnostics import Refused
from rulecheck.model.core_table import CORE
from rulecheck.model.ruleset import PhysicsModule
from rulecheck.physics import solvers
from rulecheck.physics.modules import BUILT_IN
from rulecheck.physics.solvers import OWN, solver_module
from rulecheck.quantity.units import find_unit

HERE = "rulecheck.physics.lap.solver"
LAP_RULE = "rules: {it: {require: lap.time <= 60 s}}\n"


def lap() -> PhysicsModule:
    found = solver_module("lap")
    assert found is not None
    return found


def test_our_own_are_found_by_name_and_hide_no_module() -> None:
    assert not set(OWN) & set(BUILT_IN)
    assert solver_module("lap") is lap()
    assert solver_module("zorg") is None
    assert lap().solver is not None


@pytest.mark.parametrize("name", OWN)
def test_every_figure_says_what_it_is(name: str) -> None:
    module = solver_module(name)
    assert module is not None
    used = set()
    for figure in module.figures.values():
        assert figure.meaning
        assert not figure.meaning.endswith(".")
        assert figure.source in module.sources
        used.add(figure.source)
        if figure.unit is not None:
            find_unit(figure.unit.text)
    assert used == set(module.sources)
    assert "design comparison" in module.caution
    assert "officials" in module.caution


def test_no_input_hides_a_figure() -> None:
    inputs = {entry.path for entry in CORE}
    assert not inputs & {f"{name}.{figure}" for name in OWN for figure in solver_module(name).figures}  # type: ignore[union-attr]


def test_nothing_missing_counts_as_known(tmp_path: Path) -> None:
    """A car that says nothing has no figure of a lap; nor has one on a track that says nothing else."""
    track = "track: Bowl\nkind: circuit\naltitude: 0 m\nsegments: [{length: 200 m, radius: 31.83 m, direction: left}]\n"
    for said in ("", "track: bowl.track.yaml\n"):
        write_files(
            tmp_path,
            {"car.design.yaml": CAR.replace("rulesets: [cup.ruleset.yaml]\n", "") + said, "bowl.track.yaml": track},
        )
        found = {
            item.name: item.steps[-1].result for item in workings(tmp_path / "car.design.yaml", ["lap"], on=DAY).items
        }
        assert len(found) == len(lap().figures)
        ours = {f"lap.{name}" for name, figure in lap().figures.items() if figure.by_solver}
        assert all(found[name].startswith("unknown: ") for name in ours)
        assert ("track" in found["lap.time"]) == (not said)


def install(monkeypatch: pytest.MonkeyPatch, *entries: tuple[str, str]) -> None:
    made = [EntryPoint(name, value, solvers.GROUP) for name, value in entries]
    monkeypatch.setattr(solvers, "entry_points", lambda group: made if group == solvers.GROUP else [])
    solver_module.cache_clear()


@pytest.fixture(autouse=True)
def _forget() -> None:
    solver_module.cache_clear()


@pytest.mark.parametrize(
    ("value", "said"),
    [
        ("no.such.place:X", "solver 'zorg' (no.such.place:X) cannot be loaded: No module named 'no'"),
        (
            f"{HERE}:NOTHING",
            f"solver 'zorg' ({HERE}:NOTHING) cannot be loaded: module '{HERE}' has no attribute 'NOTHING'",
        ),
        (f"{HERE}:drive", f"solver 'zorg' ({HERE}:drive) is a function and no Solver"),
        (f"{HERE}:LAP", f"solver 'zorg' ({HERE}:LAP) calls itself 'lap'"),
    ],
)
def test_an_entry_point_that_cannot_be_used(monkeypatch: pytest.MonkeyPatch, value: str, said: str) -> None:
    install(monkeypatch, ("zorg", value))
    with pytest.raises(Refused) as refused_:
        solver_module("zorg")
    assert [item.message for item in refused_.value.diagnostics] == [said]
    solver_module.cache_clear()
    told = refused("", "rules: {it: {require: zorg.time <= 60 s}}\n")
    assert told[0].code == "bad-physics"


def test_entry_points_are_not_read_for_our_own(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(solvers, "entry_points", lambda group: pytest.fail("entry points were read"))
    assert solver_module("lap") is not None
    report = check_files({"car.design.yaml": CAR, "cup.ruleset.yaml": RULES + LAP_RULE})
    assert findings(report)["it"].reason == "missing: track"


CHECK = """
import sys
from rulecheck.cli import run
run(["check", sys.argv[1], "--on", "2027-03-01"])
print(sorted(name for name in sys.modules if name in ("numpy", "scipy", "sympy") or name.startswith("rulecheck.physics.lap")))
"""


@pytest.mark.parametrize(
    ("rules", "is_loaded"), [("rules: {it: {require: mass.total <= 900 kg}}\n", False), (LAP_RULE, True)]
)
def test_check_loads_the_lap_only_where_a_rule_asks_for_it(tmp_path: Path, rules: str, is_loaded: bool) -> None:
    write_files(tmp_path, {"car.design.yaml": CAR, "cup.ruleset.yaml": RULES + rules})
    found = subprocess.run(
        [sys.executable, "-c", CHECK, str(tmp_path / "car.design.yaml")], capture_output=True, text=True, check=True
    ).stdout
    loaded = found.splitlines()[-1]
    assert ("rulecheck.physics.lap.driving" in loaded) == is_loaded
    assert not any(f"'{heavy}'" in loaded for heavy in ("numpy", "scipy", "sympy"))
