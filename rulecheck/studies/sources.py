"""Which inputs with a spread a term rests on, and how their measurements hang together."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from fractions import Fraction

from rulecheck.graph.figures import Graph
from rulecheck.graph.terms import Term
from rulecheck.operations.values import Monomial
from rulecheck.quantity.quantity import Tolerance, Uncertainty

MEASURED = ("measured", "weighed")
"""Values with such a basis have an uncertainty, whether it is stated or not."""

Spread = Uncertainty | Tolerance


class Sources:
    """The inputs with a spread of one graph.

    Of declared values that are held against computed ones, the comparison takes no part: it is made as stated.
    """

    def __init__(self, graph: Graph) -> None:
        self._bank = graph.bank
        numbers = {path: fact for path, fact in graph.facts.items() if isinstance(graph.inputs.get(path), Monomial)}
        self.spreads: Mapping[str, Spread] = {p: f.spread for p, f in sorted(numbers.items()) if f.spread is not None}
        self._silent = tuple(p for p, f in sorted(numbers.items()) if f.spread is None and f.basis in MEASURED)
        self._names = (*self.spreads, *self._silent)
        self._bits = {path: 1 << place for place, path in enumerate(self._names)}
        self._masks: list[int] = []
        self.settled = tuple(item.agrees for item in graph.declared)
        self._settled = {term.index for term in self.settled}
        self._coefficients: dict[tuple[str, str], Fraction] = {}
        for item in graph.correlations:
            self._coefficients[item.first, item.second] = item.coefficient
            self._coefficients[item.second, item.first] = item.coefficient

    def __bool__(self) -> bool:
        return bool(self.spreads)

    def of(self, *terms: Term) -> tuple[str, ...]:
        """The inputs with a spread that terms rest on, in order of their paths."""
        return self._named(self.spreads, terms)

    def uncertain(self, *terms: Term) -> tuple[str, ...]:
        """Those with a measurement uncertainty."""
        return tuple(path for path in self.of(*terms) if isinstance(self.spreads[path], Uncertainty))

    def toleranced(self, *terms: Term) -> tuple[str, ...]:
        """Those with a drawing tolerance."""
        return tuple(path for path in self.of(*terms) if isinstance(self.spreads[path], Tolerance))

    def silent(self, *terms: Term) -> tuple[str, ...]:
        """Measured or weighed inputs that terms rest on and that state no spread."""
        return self._named(self._silent, terms)

    def coefficient(self, first: str, second: str) -> Fraction:
        """How two measurements are correlated; 1 for one and the same."""
        return Fraction(1) if first == second else self._coefficients.get((first, second), Fraction(0))

    def correlated(self, paths: Iterable[str]) -> list[str]:
        """Those of some inputs that are correlated with another of them."""
        known = list(paths)
        return [one for one in known if any(one != other and self.coefficient(one, other) for other in known)]

    def _named(self, paths: Iterable[str], terms: Iterable[Term]) -> tuple[str, ...]:
        mask = 0
        for term in terms:
            mask |= self._mask(term)
        return tuple(path for path in paths if mask & self._bits[path]) if mask else ()

    def _mask(self, term: Term) -> int:
        """The inputs that a term rests on, one bit each; terms made since the last question are added."""
        masks = self._masks
        for new in self._bank.terms[len(masks) :]:
            mask = self._bits.get(new.path, 0) if new.kind == "input" else 0
            for part in new.arguments:
                mask |= masks[part.index]
            masks.append(0 if new.index in self._settled else mask)
        return masks[term.index]


def box_of(sources: Sources, graph: Graph, paths: Iterable[str]) -> dict[str, tuple[Fraction, Fraction]]:
    """From the least to the greatest value of each input that its spread states (SI, without the power of pi)."""
    box = {}
    for path in paths:
        value, spread = graph.inputs[path], sources.spreads[path]
        assert isinstance(value, Monomial)
        match spread:
            case Uncertainty(half_width=width):
                box[path] = (value.rational - width, value.rational + width)
            case Tolerance(upper=upper, lower=lower):
                box[path] = (value.rational + lower, value.rational + upper)
    return box
