"""All sensitivities of the reference work, and vectorised central differences of the same formulas."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from fractions import Fraction
from typing import Any

import numpy as np

from rulecheck.graph.conditions import AllOf, AnyOf, Condition
from rulecheck.graph.figures import Graph
from rulecheck.graph.terms import Term
from rulecheck.operations.values import Monomial
from rulecheck.readers.sensitivities import Sensitivities
from tests.benchmark.reference_work import Work

STEP = 1e-6


def margins(graph: Graph) -> list[Term]:
    """The margin of every rule, in order."""
    return [part for rule in graph.rules for case in rule.cases for part in _margins(case.condition)]


def _margins(condition: Condition) -> Iterable[Term]:
    if isinstance(condition, (AllOf, AnyOf)):
        for part in condition.parts:
            yield from _margins(part)
    elif condition.margin is not None:
        yield condition.margin


def differences(work: Work) -> Callable[[], Any]:
    """Central differences: one run of the formulas over whole arrays, two lanes for each input."""
    code = work.python.replace("max(", "maximum(").replace("min(", "minimum(").replace("[0.0] *", "[zero] *")
    space: dict[str, Any] = {"maximum": np.maximum, "minimum": np.minimum, "where": np.where}
    exec(compile(_choices(code), "differences", "exec"), space)
    run, count = space["margins_of"], len(work.values)
    base, step = np.array([float(value) for value in shifted(work)]), STEP * np.eye(len(work.values))
    lanes = np.concatenate([base + step, base - step])
    space["zero"] = np.zeros(2 * count)

    def action() -> Any:
        found = np.array([np.broadcast_to(row, 2 * count) for row in run(*lanes.T)])
        return (found[:, :count] - found[:, count:]) / (2 * STEP)

    return action


def _choices(code: str) -> str:
    """`(a if c else b)` as `where(c, a, b)`, from the inside outwards."""
    while " if " in code:
        middle = code.rindex(" if ")
        start, end = _opened(code, middle), _closed(code, middle)
        then, rest = code[start + 1 : middle], code[middle + 4 : end]
        condition, _, otherwise = rest.partition(" else ")
        code = f"{code[:start]}where({condition}, {then}, {otherwise}){code[end + 1 :]}"
    return code


def _opened(code: str, place: int) -> int:
    depth = 0
    while True:
        place -= 1
        depth += {")": 1, "(": -1}.get(code[place], 0)
        if depth < 0:
            return place


def _closed(code: str, place: int) -> int:
    depth = 0
    while True:
        place += 1
        depth += {"(": 1, ")": -1}.get(code[place], 0)
        if depth < 0:
            return place


def shifted(work: Work) -> list[Fraction]:
    """The values a little apart: as they stand many of the formulas tie, and there neither side is right."""
    return [Fraction(str(value)) + Fraction(index + 1, 10**5) for index, value in enumerate(work.values)]


def program(work: Work, graph: Graph) -> tuple[Sensitivities, Callable[[], Any]]:
    """All sensitivities by the inputs of the reference work."""
    paths = [path for path, value in graph.inputs.items() if path.startswith("v.") and isinstance(value, Monomial)]
    paths.sort(key=lambda path: int(path.removeprefix("v.a")))
    made = Sensitivities(margins(graph), paths)
    inputs = {**graph.inputs, **{path: Monomial(value) for path, value in zip(paths, shifted(work), strict=True)}}
    return made, lambda: made.at(inputs)
