"""The reader of Monte Carlo trials: a number for many draws of its uncertain inputs at once (JCGM 101:2008).

Doubles in blocks, for comparison and display: no verdict rests on them. Draws follow a generator with a stated seed, so
the same question has the same answer. Correlated inputs are drawn together as normal deviates with the stated
coefficients, each then brought to its own shape (a normal copula); for shapes that are not normal the coefficient of
the values then differs a little from that of the deviates.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

import numpy

from rulecheck.graph.terms import Term, cone
from rulecheck.operations.values import Monomial
from rulecheck.quantity.quantity import Shape

SEED = 1
BLOCK = 10_000
"""Trials of a block: the least that JCGM 101:2008, 7.9.4 takes for a 95 % interval."""


@dataclass(frozen=True, slots=True)
class Draw:
    """One uncertain input: its estimate, standard uncertainty and shape."""

    path: str
    estimate: float
    standard: float
    shape: Shape


def values_of(root: Term, inputs: Mapping[str, Any], settled: Mapping[int, bool]) -> Any:
    """A number as an array, for inputs some of which are arrays; not a number where it has no value."""
    found: dict[int, Any] = {}
    for term in cone([root]):
        if term.index in settled:
            found[term.index] = settled[term.index]
        elif term.kind == "constant":
            found[term.index] = _plain(term.value)
        elif term.kind == "input":
            found[term.index] = _plain(inputs.get(term.path, math.nan))
        elif term.kind == "branch":
            condition, then, otherwise = (found[part.index] for part in term.arguments)
            found[term.index] = numpy.where(condition, then, otherwise)
        elif term.operation is not None:
            with numpy.errstate(all="ignore"):
                found[term.index] = term.operation.array(numpy, [found[part.index] for part in term.arguments])
        else:
            found[term.index] = math.nan
    return found[root.index]


def _plain(value: Any) -> Any:
    return float(value.rational) * math.pi**value.power if isinstance(value, Monomial) else value


def blocks(
    root: Term,
    inputs: Mapping[str, Any],
    draws: Sequence[Draw],
    correlations: Sequence[Sequence[float]],
    settled: Mapping[int, bool],
) -> Iterator[Any]:
    """Blocks of values of a number, without end; `correlations` is the matrix of the draws, in their order."""
    generator = numpy.random.default_rng(SEED)
    together = _root_of(numpy.asarray(correlations, dtype=float)) if correlations else None
    while True:
        deviates = generator.standard_normal((len(draws), BLOCK))
        if together is not None:
            deviates = together @ deviates
        drawn = {draw.path: _shaped(draw, row) for draw, row in zip(draws, deviates, strict=True)}
        found = values_of(root, {**inputs, **drawn}, settled)
        yield numpy.broadcast_to(numpy.asarray(found, dtype=float), (BLOCK,))


def _shaped(draw: Draw, deviates: Any) -> Any:
    """Normal deviates as values of the shape, by the inverse of its distribution."""
    if draw.shape == "normal":
        return draw.estimate + draw.standard * deviates
    share = _normal_share(deviates)
    if draw.shape == "rectangular":
        return draw.estimate + draw.standard * math.sqrt(3) * (2 * share - 1)
    rising = numpy.sqrt(2 * numpy.minimum(share, 1 - share)) - 1
    return draw.estimate + draw.standard * math.sqrt(6) * numpy.where(share < 0.5, rising, -rising)


def _normal_share(deviates: Any) -> Any:
    """The standard normal distribution function, to 1e-7 (Abramowitz and Stegun 1964, 26.2.17)."""
    size = numpy.abs(deviates)
    t = 1 / (1 + 0.2316419 * size)
    series = t * (0.319381530 + t * (-0.356563782 + t * (1.781477937 + t * (-1.821255978 + t * 1.330274429))))
    upper = numpy.exp(-size * size / 2) / math.sqrt(2 * math.pi) * series
    return numpy.where(deviates > 0, 1 - upper, upper)


def _root_of(matrix: Any) -> Any:
    """A square root of a matrix that has no negative square, also where it has none at all in some direction."""
    sizes, directions = numpy.linalg.eigh(matrix)
    return directions * numpy.sqrt(numpy.maximum(sizes, 0))
