"""`python -m tests.benchmark`: the measures of the program, as ratios within one run."""

from __future__ import annotations

import statistics
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import Any
from unittest import mock

from rulecheck import api
from rulecheck.graph.terms import External
from rulecheck.loading import load
from rulecheck.model.track import Segment
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.program import Program
from tests.benchmark import rule_book_work, sensitivities_work
from tests.benchmark.reference_work import Work, write

# What `check` loads from others, as a bare import.
LIBRARIES = "import yaml, pydantic, flint, click, rich.console, rich.table, rich.text"
RUNS = 9


def seconds(action: Callable[[], Any]) -> float:
    """One run."""
    started = time.perf_counter()
    action()
    return time.perf_counter() - started


def paired(first: Callable[[], Any], second: Callable[[], Any], runs: int = RUNS) -> tuple[float, float, float]:
    """Medians of two actions in turn, and of their ratio pair by pair."""
    first(), second()
    pairs = [(seconds(first), seconds(second)) for _ in range(runs)]
    ratio = statistics.median(a / b for a, b in pairs)
    return statistics.median(a for a, _ in pairs), statistics.median(b for _, b in pairs), ratio


def run(*arguments: str) -> None:
    """A command as a whole process."""
    subprocess.run([sys.executable, *arguments], check=False, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)


def cold_check(work: Work) -> None:
    """The whole command against the bare import of its libraries."""
    ours, theirs, ratio = paired(
        lambda: run("-m", "rulecheck", "check", str(work.design), "--on", "2027-03-01"),
        lambda: run("-c", LIBRARIES),
    )
    print(
        f"cold check                 {ours:8.3f} s   bare import of its libraries {theirs:8.3f} s   ratio {ratio:6.2f}  (goal <= 1.5)"
    )


def certified_verdicts(work: Work) -> None:
    """Verdicts of 200 rules on a bound graph against generated float Python."""
    graph = _graph(work)
    parts = [case.condition for rule in graph.rules for case in rule.cases]
    space: dict[str, Any] = {}
    exec(compile(work.python, "reference", "exec"), space)  # the generated float program
    floats = space["margins_of"]

    flags = [part.holds for part in parts]
    program = Program(graph.bank, graph.inputs, flags)
    once = ExactReader(graph.bank, graph.inputs)
    assert [program.reader(graph.inputs).truth(flag) for flag in flags] == [once.truth(flag) for flag in flags]

    def exact() -> None:
        reader = program.reader(graph.inputs)
        for flag in flags:
            reader.truth(flag)

    def single() -> None:
        reader = ExactReader(graph.bank, graph.inputs)
        for flag in flags:
            reader.truth(flag)

    ours, theirs, ratio = paired(exact, lambda: floats(*work.values), 201)
    print(
        f"certified verdicts         {ours * 1e3:8.3f} ms  float Python                {theirs * 1e3:8.3f} ms  ratio {ratio:6.2f}  (goal <= 10)"
    )
    ours, theirs, ratio = paired(single, lambda: floats(*work.values), 51)
    print(
        f"the same in a single check {ours * 1e3:8.3f} ms  float Python                {theirs * 1e3:8.3f} ms  ratio {ratio:6.2f}"
    )


def all_sensitivities(work: Work) -> None:
    """The slopes of 200 margins by 60 inputs against vectorised central differences of the same formulas."""
    _, ours_once = sensitivities_work.program(work, _graph(work))
    theirs_once = sensitivities_work.differences(work)
    # The last rule is on the mass, which the formulas of the reference work leave out.
    apart = abs(ours_once().matrix - theirs_once())[:-1].max()
    assert apart < 1e-6, apart
    ours, theirs, ratio = paired(ours_once, theirs_once, 51)
    print(
        f"all sensitivities          {ours * 1e3:8.3f} ms  central differences         {theirs * 1e3:8.3f} ms  ratio {ratio:6.2f}  (goal < 1)"
    )


def headroom_of_all(work: Work) -> None:
    """How far each of the 60 inputs may move before the first of 200 rules breaks."""
    loaded = load(api.Session(), work.design, (), (), (), None)
    graph = api._bind(loaded, date(2027, 3, 1))
    paths = [path for path in graph.inputs if path.startswith("v.")]
    started = time.process_time()
    api.headroom(work.design, paths, on=date(2027, 3, 1))
    taken = time.process_time() - started
    print(
        f"headroom of 60 inputs      {taken:8.3f} s   of processor time, certified over 200 rules             (goal < 0.5 s)"
    )
    few = paths[:4]
    started = time.process_time()
    with mock.patch("rulecheck.studies.headroom._look_ahead"):
        api.headroom(work.design, few, on=date(2027, 3, 1))
    middle = time.process_time()
    api.headroom(work.design, few, on=date(2027, 3, 1))
    slow, quick = middle - started, time.process_time() - middle
    print(
        f"headroom of {len(few)} inputs       {quick:8.3f} s   the exact reader alone       {slow:8.3f} s   ratio {quick / slow:6.2f}"
    )


def long_rule_book() -> None:
    """Proofreading and checking a rule book of 2,000 rules, all imports done."""
    with tempfile.TemporaryDirectory() as folder:
        book, car = rule_book_work.write_rule_book(Path(folder))
        read = seconds(lambda: api.proofread([book], on=date(2027, 3, 1)))
        checked = seconds(lambda: api.check(car, on=date(2027, 3, 1)))
    print(f"proofread 2,000 rules      {read:8.3f} s   (goal < 10 s)   check {checked:8.3f} s   (goal < 1 s)")


def _graph(work: Work) -> Any:
    session = api.Session()
    loaded = load(session, work.design, (), (), (), None)
    return api._bind(loaded, date(2027, 3, 1))


def lap() -> None:
    """A lap of 5 km: one run in steps of 1 m, and the whole with its bound, in which a coarse lap is driven twice."""
    root = Path(__file__).parents[2]
    car = root / "designs_demo" / "marram-p2-lap.design.yaml"
    graph = api._bind(load(api.Session(), car, (), (), (), None), date(2027, 3, 1), ["lap.time"])
    term = graph.figures["lap.time"].term
    assert isinstance(term.value, External)
    solver, track = term.value.question.solver, term.value.question.track
    assert track is not None
    longer = (*track.segments, Segment("more", 5000 - track.length))
    reader = ExactReader(graph.bank, graph.inputs)
    values = [reader.approximate(part) if part.sort == "number" else reader.value(part) for part in term.arguments]
    named = {item.name: value for item, value in zip(solver.inputs, values, strict=True)}
    named["fuel_flow"] = 0.0

    def run(step: float, quick: bool) -> Any:
        return solver.run(named, replace(track, segments=longer, step=step), quick)  # type: ignore[arg-type]

    # A quick run is one lap in steps of twice the track's.
    ours, whole, ratio = paired(lambda: run(0.5, True), lambda: run(1.0, False))
    print(
        f"lap of 5 km, 1 m steps     {ours * 1e3:8.3f} ms  the same with its bound     {whole * 1e3:8.3f} ms  ratio {ratio:6.2f}  (goal <= 100 ms)"
    )


def main() -> None:
    """All measures."""
    with tempfile.TemporaryDirectory() as folder:
        work = write(Path(folder))
        cold_check(work)
        certified_verdicts(work)
        lap()
        all_sensitivities(work)
        headroom_of_all(work)
        long_rule_book()


if __name__ == "__main__":
    main()
