"""Runs mutants: each in a forked process of its own, against the tests that reach what it changes."""

from __future__ import annotations

import os
import pickle
import signal
import sys
from collections import Counter
from collections.abc import Callable, Sequence
from dataclasses import dataclass, field
from functools import cache
from typing import TypeVar

import pydantic
import pytest
from mutant_making import Mutant
from mutant_patching import CodeKey, Line, called, exchanged, install, lines_run, living, needs_import, patch
from mutant_targets import ROOT, SUITE, TARGETS

R = TypeVar("R")
PATIENCE = 60
"""Seconds of computing after which a mutant counts as killed: it does not end."""
FILES = frozenset(str(ROOT / target.file) for target in TARGETS)
SURVIVED, KILLED, UNFIT = 0, 1, 7


@dataclass(slots=True)
class Outcome:
    """What became of the mutants: who lived, and which test killed whom."""

    survivors: list[Mutant] = field(default_factory=list)
    killers: dict[Mutant, str] = field(default_factory=dict)
    left: list[Mutant] = field(default_factory=list)


def run(
    mutants: Sequence[Mutant], suite: Sequence[str] = SUITE, told: Callable[[str], None] = lambda line: None
) -> Outcome:
    """Run all mutants. Raises `RuntimeError` where the tests fail without any change."""
    import_time = _in_child(_import_time)
    first = _in_child(lambda: _session(mutants, suite, import_time, told))
    if isinstance(first, str):
        raise RuntimeError(first)
    told(f"{len(first.left)} mutants of what runs at import")
    second = Pool(lambda mutant: _whole_session(mutant, suite), told).run(first.left)
    for mutant, status in second.items():
        if status == SURVIVED:
            first.survivors.append(mutant)
        else:
            first.killers[mutant] = "at import"
    first.left = []
    return first


def _import_time() -> frozenset[CodeKey]:
    import importlib

    return called(lambda: importlib.import_module("rulecheck.api"), FILES)


def _paths(suite: Sequence[str]) -> list[str]:
    return [str(path) for pattern in suite for path in sorted(ROOT.glob(pattern))]


def _arguments(suite: Sequence[str]) -> list[str]:
    """Without what only helps to read a failure: nobody reads these."""
    unused = [word for name in ("cacheprovider", "logging", "unraisableexception") for word in ("-p", f"no:{name}")]
    where = ["--rootdir", str(ROOT), "-c", str(ROOT / "pyproject.toml")]
    return ["-q", "-x", "-s", "--assert=plain", *unused, *where, *_paths(suite)]


def _silent() -> None:
    nowhere = os.open(os.devnull, os.O_WRONLY)
    os.dup2(nowhere, 1)
    os.dup2(nowhere, 2)


def _whole_session(mutant: Mutant, suite: Sequence[str]) -> int:
    """Import everything with the mutant in it, and run the tests until one fails."""
    install(mutant)
    return SURVIVED if pytest.main(_arguments(suite)) == pytest.ExitCode.OK else KILLED


# --- one session, forked for each mutant -----------------------------------------------------------------------------


def _session(
    mutants: Sequence[Mutant], suite: Sequence[str], import_time: frozenset[CodeKey], told: Callable[[str], None]
) -> Outcome | str:
    plugin = _Mutating(mutants, import_time, told)
    screen = os.dup(1)
    _silent()
    plugin.told = lambda line: (os.write(screen, f"{line}\n".encode()), None)[1]
    pytest.main(_arguments(suite), plugins=[plugin])
    return plugin.outcome if not plugin.fault else plugin.fault


class _Mutating:
    """Takes the place of pytest's own loop over the tests it has collected."""

    def __init__(self, mutants: Sequence[Mutant], import_time: frozenset[CodeKey], told: Callable[[str], None]) -> None:
        self.mutants, self.import_time, self.told = mutants, import_time, told
        self.outcome = Outcome()
        self.fault = "no test was collected"

    def pytest_runtestloop(self, session: pytest.Session) -> bool:
        self.fault = ""
        for item in {item.path: item for item in session.items}.values():
            _run_item(item)  # what is built once is built before the first fork
        reached = _in_child(lambda: _reached(session))
        if isinstance(reached, str):
            self.fault = f"the tests fail without any change: {reached}"
            return True
        self.told(f"{len(session.items)} tests, {len(self.mutants)} mutants")
        hunt = _Hunt(session, reached, self.import_time)
        pool = Pool(hunt, self.told, hunt.deadly)
        for mutant, status in pool.run(self.mutants).items():
            if status == UNFIT:
                self.outcome.left.append(mutant)
            elif status == SURVIVED:
                self.outcome.survivors.append(mutant)
            else:
                self.outcome.killers[mutant] = pool.said.get(mutant, "")
        return True


def _reached(session: pytest.Session) -> list[frozenset[Line]] | str:
    """For each test the lines that it runs; a text where one fails."""
    found = []
    for item in session.items:
        found.append(lines_run(lambda item=item: _run_item(item), FILES))  # type: ignore[misc]
        if session.testsfailed:
            return item.nodeid
    return found


def _run_item(item: pytest.Item) -> None:
    item.config.hook.pytest_runtest_protocol(item=item, nextitem=None)


def _covering(reached: Sequence[frozenset[Line]]) -> list[int]:
    """The tests in an order in which each runs as many lines as it can that none before it ran."""
    left = dict(enumerate(reached))
    order: list[int] = []
    while left:
        best = max(left, key=lambda index: len(left[index]))
        news = left.pop(best)
        order.append(best)
        if not news:
            return [*order, *left]
        left = {index: lines - news for index, lines in left.items()}
    return order


class _Hunt:
    """Runs the tests that reach a change, until one fails."""

    def __init__(
        self, session: pytest.Session, reached: Sequence[frozenset[Line]], import_time: frozenset[CodeKey]
    ) -> None:
        self.session, self.reached, self.import_time = session, reached, import_time
        self.order = _covering(reached)
        self.functions = living(FILES)
        self.deadly: Counter[tuple[str, int]] = Counter()

    def __call__(self, mutant: Mutant) -> int | tuple[int, int]:
        changed = exchanged(mutant)
        if needs_import(changed, self.import_time) or not patch(changed, self.functions):
            return UNFIT
        lines = {(str(ROOT / mutant.file), line) for line in mutant.lines}
        able = [index for index in self.order if not lines.isdisjoint(self.reached[index])]
        # Those first that killed most of this function's mutants.
        able.sort(key=lambda index: self.deadly.get((mutant.function, index), 0), reverse=True)
        for index in able:
            _run_item(self.session.items[index])
            if self.session.testsfailed:
                return KILLED, index
        return SURVIVED


# --- processes -------------------------------------------------------------------------------------------------------


def _in_child(work: Callable[[], R]) -> R:
    """The result of a call in a forked process."""
    read, write = os.pipe()
    child = os.fork()
    if child == 0:
        os.close(read)
        try:
            with os.fdopen(write, "wb") as file:
                pickle.dump(work(), file)
        finally:
            os._exit(0)
    os.close(write)
    with os.fdopen(read, "rb") as file:
        data = file.read()
    os.waitpid(child, 0)
    found: R = pickle.loads(data)
    return found


@dataclass(slots=True)
class Pool:
    """As many forked processes at a time as there are processors."""

    work: Callable[[Mutant], int | tuple[int, int]]
    told: Callable[[str], None]
    deadly: Counter[tuple[str, int]] = field(default_factory=Counter)
    said: dict[Mutant, str] = field(default_factory=dict)
    _running: dict[int, tuple[Mutant, int]] = field(default_factory=dict)
    _done: dict[Mutant, int] = field(default_factory=dict)

    def run(self, mutants: Sequence[Mutant]) -> dict[Mutant, int]:
        """How each mutant ended."""
        most = os.cpu_count() or 1
        for number, mutant in enumerate(mutants):
            if number % 200 == 0:
                self.told(f"{number} of {len(mutants)}")
            while len(self._running) >= most:
                self._wait()
            self._start(mutant)
        while self._running:
            self._wait()
        return self._done

    def _start(self, mutant: Mutant) -> None:
        read, write = os.pipe()
        child = os.fork()
        if child == 0:
            os.close(read)
            self._be(mutant, write)
        os.close(write)
        self._running[child] = (mutant, read)

    def _be(self, mutant: Mutant, write: int) -> None:
        status = KILLED
        try:
            signal.setitimer(signal.ITIMER_PROF, PATIENCE)
            _silent()
            ended = self.work(mutant)
            status, killer = ended if isinstance(ended, tuple) else (ended, -1)
            os.write(write, str(killer).encode())
        finally:
            # Whatever goes wrong in a mutant is noticed, so it kills.
            os._exit(status)

    def _wait(self) -> None:
        child, status = os.wait()
        if child not in self._running:
            return
        mutant, read = self._running.pop(child)
        with os.fdopen(read, "rb") as file:
            killer = file.read().decode()
        self._done[mutant] = os.waitstatus_to_exitcode(status) if os.WIFEXITED(status) else KILLED
        if self._done[mutant] == SURVIVED:
            self.told(f"lives: {mutant}")
        if killer not in ("", "-1"):
            self.deadly[mutant.function, int(killer)] += 1
            self.said[mutant] = killer


def prepare() -> None:
    """Load what is heavy and not ours, so that every process has it from the start."""
    import importlib

    for name in ("flint", "yaml", "click", "jsonschema", "_pytest.assertion.rewrite"):
        importlib.import_module(name)
    # An adapter takes longer to build than a small check takes in all: each is built once for all processes.
    pydantic.TypeAdapter = cache(pydantic.TypeAdapter)  # type: ignore[assignment,misc]
    for place in (ROOT, ROOT / "tests"):
        if str(place) not in sys.path:
            sys.path.insert(0, str(place))
    assert not any(name.startswith("rulecheck") for name in sys.modules), "rulecheck must not be loaded yet"
    os.chdir(ROOT)
