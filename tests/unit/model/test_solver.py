"""What a solver states, and how often it is run."""

from __future__ import annotations

import math
from collections.abc import Mapping

import pytest

from rulecheck.model import solver as module
from rulecheck.model.solver import (
    Answer,
    Argument,
    Estimate,
    NoAnswer,
    Question,
    Solver,
    SolverFormula,
    SolverInput,
    SolverOutput,
)
from rulecheck.model.track import Track

OUTPUTS = (SolverOutput("area", "m^2", "Area", "book"), SolverOutput("name", "", "Name", "book"))


def square(arguments: Mapping[str, Argument], track: Track | None, quick: bool) -> Mapping[str, Answer]:
    side = arguments["side"]
    assert isinstance(side, float)
    return {"area": Estimate(1 / side * side**3, 0.0 if quick else 0.5), "name": "square"}


def solver(**changes: object) -> Solver:
    facts: dict[str, object] = {
        "name": "tile", "meaning": "m", "method": "m", "caution": "", "sources": {"book": "A book"},
        "inputs": (SolverInput("side", "tile.side", "m"),), "outputs": OUTPUTS, "run": square,
    }  # fmt: skip
    return Solver(**{**facts, **changes})  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("changes", "said"),
    [
        ({"outputs": ()}, "it gives nothing"),
        ({"outputs": (OUTPUTS[0], OUTPUTS[0])}, r"\['area'\] stand twice"),
        ({"sources": {}}, "'area' has no source 'book'"),
        ({"formulas": (SolverFormula("area", "1", "1", "m", "book"),)}, r"\['area'\] stand twice"),
        ({"inputs": (SolverInput("side", "a", "m", ("volume",)),)}, r"'side' serves no output called \['volume'\]"),
    ],
)
def test_facts_that_do_not_go_together(changes: dict[str, object], said: str) -> None:
    with pytest.raises(ValueError, match=said):
        solver(**changes)


def test_one_run_serves_all_outputs_for_the_same_arguments() -> None:
    runs: list[tuple[float, bool]] = []

    def counted(arguments: Mapping[str, Argument], track: Track | None, quick: bool) -> Mapping[str, Answer]:
        runs.append((float(arguments["side"] or 0), quick))
        return square(arguments, track, quick)

    question = Question(solver(run=counted), None)
    assert question.answer("area", (3.0,)) == Estimate(9.0, 0.5)
    assert question.answer("name", (3.0,)) == "square"
    assert question.answer("area", (2.0,)) == Estimate(4.0, 0.5)
    assert question.answer("area", (2.0,), quick=True) == Estimate(4.0, 0.0)
    assert runs == [(3.0, False), (2.0, False), (2.0, True)]


def test_what_a_failing_solver_says() -> None:
    question = Question(solver(), None)
    assert question.answer("area", (0.0,)) == NoAnswer("solver 'tile' failed: float division by zero")
    assert question.answer("volume", (1.0,)) == NoAnswer("solver 'tile' gave no 'volume'")


@pytest.mark.parametrize("estimate", [Estimate(math.nan, 0.0), Estimate(1.0, math.inf), Estimate(1.0, -1.0)])
def test_numbers_that_are_none(estimate: Estimate) -> None:
    question = Question(solver(run=lambda *_: {"area": estimate}), None)
    assert question.answer("area", (1.0,)) == NoAnswer("the solver gave no finite number")


def test_not_more_runs_are_kept_than_the_bound(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(module, "MOST_KEPT", 3)
    question = Question(solver(), None)
    for side in range(1, 9):
        question.answer("area", (float(side),))
        assert len(question._known) <= 3
