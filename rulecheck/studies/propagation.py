"""From the spread of inputs to that of a margin, to first order and with certain slopes.

Source: JCGM 100:2008 (GUM), equation (13): `u^2 = sum of c_i c_j u_i u_j r_ij`, with the slopes c at the estimates.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

from rulecheck.graph.figures import Graph
from rulecheck.graph.terms import Term
from rulecheck.operations.exact import exact_number
from rulecheck.operations.roots_and_exponentials import sqrt
from rulecheck.operations.values import Monomial
from rulecheck.quantity.quantity import Tolerance, Uncertainty
from rulecheck.readers.applying import START_BITS
from rulecheck.readers.certain import ZERO, Certain, Unsure, applied
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.slopes import SlopeReader, Slopes
from rulecheck.studies.sources import Sources

_MOST_BITS = 2048


@dataclass(frozen=True, slots=True)
class Propagated:
    """The variance of a number with its slopes; at a kink a ball around all that it may be."""

    number: Certain
    variance: Certain
    slopes: Slopes

    @property
    def standard(self) -> Certain:
        """The standard uncertainty; at a kink what it is at most. Raises `Unsure`."""
        if self.slopes.bent:
            return applied(sqrt, Certain(self.variance.ball().upper()))
        return applied(sqrt, self.variance)


class Propagation:
    """Spreads of the numbers of one graph."""

    def __init__(self, graph: Graph, reader: ExactReader, sources: Sources) -> None:
        self._graph, self._sources = graph, sources
        settled = {term.index for term in sources.settled}
        self._slopes = SlopeReader(graph.bank, reader, sources.spreads, settled)
        self._known: dict[tuple[int, int], Slopes] = {}

    def slopes(self, term: Term, bits: int = START_BITS) -> Slopes:
        """The slopes of a number by the inputs that have a spread."""
        key = (term.index, bits)
        if key not in self._known:
            self._known[key] = self._slopes.slopes(term, bits)
        return self._known[key]

    def number(self, term: Term) -> Certain:
        """The value of a number. Raises `Unsure` where it has none."""
        return self._slopes.number(term)

    def of(self, term: Term, bits: int = START_BITS) -> Propagated | None:
        """The variance of a number by measurement uncertainty; None where a slope is not known."""
        slopes = self.slopes(term, bits)
        paths = self._sources.uncertain(term)
        if any(slopes.by_path.get(path, ZERO) is None for path in paths):
            return None
        try:
            return Propagated(self._slopes.number(term, bits), self._variance(slopes, paths), slopes)
        except Unsure:
            return None

    def is_outside(self, term: Term, coverage: Fraction) -> bool | None:
        """True where the size of a number is at least `coverage` standard uncertainties; None where nobody can say."""
        bits = START_BITS
        while bits <= _MOST_BITS:
            found = self.of(term, bits)
            if found is None:
                return None
            try:
                return found.number * found.number >= found.variance * coverage**2
            except Unsure:
                bits *= 2
        return None

    def weight(self, slopes: Slopes, path: str, among: Sequence[str]) -> Certain:
        """What one input contributes to the variance: `c_i u_i` times the sum of `r_ij c_j u_j`."""
        total = ZERO
        for other in among:
            coefficient = self._sources.coefficient(path, other)
            if coefficient:
                total = total + self._together(path, other) * coefficient * self._slope(slopes, other)
        return self._slope(slopes, path) * total

    def width(self, path: str, width: Fraction) -> Certain:
        """A width of an input in SI units, with the power of pi that its value has."""
        value = self._graph.inputs[path]
        assert isinstance(value, Monomial)
        return Certain(exact_number(Monomial(width, value.power)))

    def standard_of(self, path: str) -> Certain:
        """The standard uncertainty of an input, SI."""
        spread = self._sources.spreads[path]
        assert isinstance(spread, Uncertainty)
        return applied(sqrt, Certain(exact_number(Monomial(spread.variance())))) * self.width(path, Fraction(1))

    def half_of(self, path: str) -> Certain:
        """Half the width of an input's tolerance, SI."""
        spread = self._sources.spreads[path]
        assert isinstance(spread, Tolerance)
        return self.width(path, (spread.upper - spread.lower) / 2)

    def middle_of(self, path: str) -> Certain:
        """How far the middle of an input's tolerance lies from its value, SI."""
        spread = self._sources.spreads[path]
        assert isinstance(spread, Tolerance)
        return self.width(path, (spread.upper + spread.lower) / 2)

    def _variance(self, slopes: Slopes, paths: Sequence[str]) -> Certain:
        total = ZERO
        for path in paths:
            total = total + self.weight(slopes, path, paths)
        return total

    def _slope(self, slopes: Slopes, path: str) -> Certain:
        slope = slopes.by_path.get(path, ZERO)
        if slope is None:
            raise Unsure
        return slope

    def _together(self, one: str, other: str) -> Certain:
        """The product of two standard uncertainties; exact where their shapes let it be."""
        first, second = self._sources.spreads[one], self._sources.spreads[other]
        assert isinstance(first, Uncertainty) and isinstance(second, Uncertainty)
        product = Certain(exact_number(Monomial(first.variance() * second.variance())))
        return applied(sqrt, product) * self.width(one, Fraction(1)) * self.width(other, Fraction(1))
