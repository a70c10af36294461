"""The lap as people meet it: in workings, in rules beside its bound, in what-ifs and headroom."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest
from small_files import DAY

from rulecheck import check, headroom, whatif, workings
from rulecheck.api import Change
from rulecheck.diagnostics import Refused
from rulecheck.handbook.pages import FOLDER


@pytest.fixture
def shrike(tmp_path: Path) -> Path:
    """The car, track and targets of the handbook."""
    for name, text in _files((FOLDER / "tracks-and-laps.md").read_text("utf-8")):
        (tmp_path / name).write_text(text, encoding="utf-8")
    return tmp_path / "shrike.design.yaml"


def _files(page: str) -> Iterator[tuple[str, str]]:
    for block in page.split("```yaml file=")[1:]:
        name, _, rest = block.partition("\n")
        yield name, rest.partition("```")[0]


def _targets(design: Path, condition: str) -> Path:
    path = design.parent / "other.ruleset.yaml"
    path.write_text(f"ruleset: Other\nrules: {{it: {{require: {condition}}}}}\n", encoding="utf-8")
    return path


def test_workings_say_how_it_was_found(shrike: Path) -> None:
    (item,) = workings(shrike, ["lap.time"], on=DAY).items
    last = item.steps[-1]
    assert last.formula.startswith("solver lap on Quarry Ring (quarry.track.yaml): quasi-steady;")
    assert last.numbers == ""
    assert " ± " in last.result
    assert "Perantoni" in last.source
    assert {"mass.total", "performance.wheel_power", "lap.front_grip"} <= {step.name for step in item.steps}
    assert "officials" in item.caution


def test_there_is_no_closed_form(shrike: Path) -> None:
    (item,) = workings(shrike, ["lap.time"], on=DAY, closed_form=True).items
    assert item.closed_form is not None
    assert item.closed_form.formula == ""
    assert item.closed_form.conditions == ("there is no closed form: a solver stands behind this figure",)


def test_a_limit_inside_the_bound_is_unproven(shrike: Path) -> None:
    (item,) = workings(shrike, ["lap.time"], on=DAY).items
    value = item.steps[-1].result.partition(" ±")[0]
    (finding,) = check(shrike, rules=[_targets(shrike, f"lap.time <= {value} s")], on=DAY).rules
    assert (finding.verdict, finding.margin) == ("unproven", None)
    assert finding.reason.startswith("within the bound of solver 'lap'")
    for wider, verdict in ((1, "complies"), (-1, "breach")):
        limit = f"lap.time <= {float(value) + wider} s"
        assert check(shrike, rules=[_targets(shrike, limit)], on=DAY).rules[0].verdict == verdict


def test_a_what_if_foretells_by_differences(shrike: Path) -> None:
    found = whatif(shrike, [Change(settings=(("vehicle.grip", "1.41"),))], on=DAY)
    figure = next(item for item in found.figures if item.name == "lap.time")
    (moved,) = figure.moved
    assert moved.difference is not None
    assert moved.foretold is not None
    assert moved.difference.value < 0  # type: ignore[operator]
    assert moved.foretold.value == pytest.approx(moved.difference.value, rel=0.05)


def test_headroom_says_what_it_leaves_out(shrike: Path) -> None:
    found = headroom(shrike, ["vehicle.grip"], on=DAY)
    assert found.left_out == (("time", ("vehicle.grip",)), ("slowest", ("vehicle.grip",)))
    assert found.inputs == ()
    assert found.unread == ()


def test_without_a_track_the_lap_is_open(shrike: Path) -> None:
    report = check(shrike, on=DAY, settings={"track": "none"})
    assert {(item.verdict, item.reason) for item in report.rules} == {("open", "missing: track")}


def test_an_equation_cannot_rest_on_a_lap(shrike: Path) -> None:
    book = shrike.parent / "solve.ruleset.yaml"
    book.write_text(
        "ruleset: Solve\nderived:\n  grip_needed:\n    solve: vehicle.grip\n    between: [1, 2]\n"
        "    formula: lap.time - 25 s\n    unit: \"1\"\nrules: {it: {require: grip_needed <= 2}}\n",
        encoding="utf-8",
    )  # fmt: skip
    with pytest.raises(Refused, match="rests on a figure that a solver finds"):
        check(shrike, rules=[book], on=DAY)
