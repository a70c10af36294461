"""Solvers: figures without a closed form, which a small program finds to within a bound.

A solver is a value that states its facts: what it is handed, what it gives, from which sources, and the function that
does the work. It is registered by the package that brings it, never by a file of a design repository.
"""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field

from rulecheck.model.track import Track

Argument = float | str | bool | None
"""A number in SI units, a word, a flag; None where the design does not say and no output that is asked for needs it."""
MOST_KEPT = 512
"""So many runs of one question are remembered."""


@dataclass(frozen=True, slots=True)
class Estimate:
    """A number in SI units with a bound: the true value of the solver's model lies within `value` ± `bound`."""

    value: float
    bound: float


@dataclass(frozen=True, slots=True)
class NoAnswer:
    """Why an output cannot be had."""

    text: str


Answer = Estimate | str | NoAnswer
Run = Callable[[Mapping[str, Argument], Track | None, bool], Mapping[str, Answer]]
"""Arguments by name, the track of a solver that drives on one, and whether a quick run without bounds will do."""


@dataclass(frozen=True, slots=True)
class SolverFormula:
    """A figure of the solver's module in the formula language, for what it hands to itself."""

    name: str
    formula: str
    unit: str
    meaning: str
    source: str


@dataclass(frozen=True, slots=True)
class SolverInput:
    """What the solver is handed: an input or figure, or a formula of them. `unit` is empty for a word or a flag;
    `serves` are the outputs that need it, none for all of them."""

    name: str
    formula: str
    unit: str = ""
    serves: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class SolverOutput:
    """What the solver gives; `unit` is empty for a word."""

    name: str
    unit: str
    meaning: str
    source: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Solver:
    """A named solver. Raises `ValueError` where its facts do not go together."""

    name: str
    meaning: str
    method: str
    caution: str
    sources: Mapping[str, str]
    inputs: tuple[SolverInput, ...]
    outputs: tuple[SolverOutput, ...]
    run: Run
    formulas: tuple[SolverFormula, ...] = ()
    valid: str = ""
    drives_track: bool = False
    traps: tuple[str, ...] = ()

    def __post_init__(self) -> None:
        """Hold the facts against each other."""
        outputs = {output.name for output in self.outputs}
        for item in self.inputs:
            unknown = set(item.serves) - outputs
            if unknown:
                raise ValueError(f"solver '{self.name}': '{item.name}' serves no output called {sorted(unknown)}")
        given = [(item.name, item.source) for item in self.outputs] + [
            (item.name, item.source) for item in self.formulas
        ]
        for name, source in given:
            if source not in self.sources:
                raise ValueError(f"solver '{self.name}': '{name}' has no source '{source}'")
        twice = _twice(name for name, _ in given) + _twice(item.name for item in self.inputs)
        if twice or not outputs:
            raise ValueError(f"solver '{self.name}': " + (f"{twice} stand twice" if twice else "it gives nothing"))


def _twice(names: Iterable[str]) -> list[str]:
    return [name for name, count in Counter(names).items() if count > 1]


@dataclass(slots=True, eq=False)
class Question:
    """A solver put to one track: answers by arguments, each found once."""

    solver: Solver
    track: Track | None
    _known: dict[tuple[object, ...], Mapping[str, Answer]] = field(default_factory=dict)

    def answer(self, output: str, arguments: tuple[Argument, ...], *, quick: bool = False) -> Answer:
        """One output for arguments in the order of the solver's inputs; one run serves all outputs."""
        key = (quick, *arguments)
        if key not in self._known:
            if len(self._known) >= MOST_KEPT:
                self._known.clear()
            self._known[key] = self._run(arguments, quick)
        return _sound(self._known[key].get(output, NoAnswer(f"solver '{self.solver.name}' gave no '{output}'")))

    def _run(self, arguments: tuple[Argument, ...], quick: bool) -> Mapping[str, Answer]:
        named = {item.name: value for item, value in zip(self.solver.inputs, arguments, strict=True)}
        try:
            return self.solver.run(named, self.track, quick)
        except (ArithmeticError, ValueError) as error:
            failed = NoAnswer(f"solver '{self.solver.name}' failed: {error}")
            return {output.name: failed for output in self.solver.outputs}


def _sound(answer: Answer) -> Answer:
    """An answer whose numbers are numbers."""
    if isinstance(answer, Estimate) and not (math.isfinite(answer.value) and 0 <= answer.bound < math.inf):
        return NoAnswer("the solver gave no finite number")
    return answer
