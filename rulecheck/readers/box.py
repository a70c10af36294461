"""The exact reader over a box: several inputs run over intervals at once, and what is certain on the whole of it."""

from __future__ import annotations

from collections.abc import Collection, Mapping, Sequence
from fractions import Fraction
from typing import TYPE_CHECKING, Any

from rulecheck.graph.terms import Bank, Inputs, Term, cone
from rulecheck.operations.exact import Ball, from_fraction
from rulecheck.operations.values import Monomial, Unknown
from rulecheck.readers.slopes import SlopeReader, Slopes, resting_on

# The exact reader itself reads boxes, where something is to hold throughout a range.
if TYPE_CHECKING:
    from rulecheck.readers.exact import ExactReader

BITS = 64

Box = Mapping[str, tuple[Fraction, Fraction]]
"""From the least to the greatest value of each input, in SI units without the power of pi that its value has."""


class BoxReader:
    """Evaluates terms, and what they rest on, while some inputs run over intervals and all others stay.

    `roots` are all terms that will be asked for. `settled` are terms that keep the value that they have at the inputs as
    stated: whether declared and computed values agree is judged there. With `both_arms` a branch whose condition a box
    does not settle lies in what encloses both arms.

    >>> from rulecheck.operations.arithmetic import subtract
    >>> from rulecheck.operations.comparison import at_most
    >>> from rulecheck.quantity.dimension import PURE
    >>> from rulecheck.readers.exact import ExactReader
    >>> bank = Bank()
    >>> x, y = (bank.input(name, "number", PURE) for name in "xy")
    >>> holds = bank.apply(at_most, [bank.apply(subtract, [x, y], PURE), bank.number(3)], PURE)
    >>> inputs = {"x": Monomial(Fraction(5)), "y": Monomial(Fraction(4))}
    >>> over = BoxReader(bank, inputs, ExactReader(bank, inputs), ["x", "y"], [holds])
    >>> over.truth(holds, {"x": (Fraction(5), Fraction(6)), "y": (Fraction(4), Fraction(5))})
    True
    """

    def __init__(
        self,
        bank: Bank,
        inputs: Inputs,
        base: ExactReader,
        paths: Collection[str],
        roots: Sequence[Term],
        settled: Collection[Term] = (),
        *,
        both_arms: bool = False,
    ) -> None:
        self.bank = bank
        self._stated = inputs
        terms = cone(roots)
        self._moving = resting_on(terms, paths, {term.index for term in settled})
        self._inputs: dict[str, Any] = dict(inputs)
        self._points = base.alike(self._inputs)
        self._boxes = base.alike(self._inputs, bits=BITS, both_arms=both_arms)
        self._now: Box | None = None
        self._assumed: dict[int, bool] = {}
        known = dict(base.known())
        still = [(t.index, known[t.index]) for t in terms if t.index in known and t.index not in self._moving]
        agreed = [(term.index, found) for term in settled if isinstance(found := base.truth(term), bool)]
        for reader in (self._points, self._boxes):
            reader.take([*still, *agreed])
        self._slopes = SlopeReader(bank, self._boxes, paths, {term.index for term in settled})

    def truth(self, flag: Term, box: Box) -> bool | None:
        """What a flag certainly is all over a box; None where it is not certain."""
        self._over(box)
        found = self._boxes.truth(flag)
        return None if isinstance(found, Unknown) else found

    def assume(self, flags: Mapping[int, bool]) -> None:
        """Take some flags, by the index of their terms, for what is said until something else is assumed.

        For flags that are so all over the box that is asked about, but perhaps for a side of it.
        """
        self._assumed = dict(flags)
        self._now = None

    def ball(self, term: Term, box: Box) -> Ball | None:
        """A ball around all values of a number over a box; None where it has none somewhere."""
        self._over(box)
        found = self._boxes.ball(term, BITS)
        return found if isinstance(found, Ball) and found.is_finite() else None

    def slopes(self, term: Term, box: Box) -> Slopes:
        """Balls around the slopes of a number over a box."""
        self._over(box)
        return self._slopes.slopes(term)

    def at(self, point: Mapping[str, Fraction]) -> ExactReader:
        """The exact reader at one point of a box; good until the next question."""
        self._now = None
        self._exchange({path: Monomial(value, self._power(path)) for path, value in point.items()})
        return self._points

    def _power(self, path: str) -> int:
        value = self._stated[path]
        assert isinstance(value, Monomial)
        return value.power

    def _ball(self, path: str, low: Fraction, high: Fraction) -> Any:
        power = self._power(path)
        if low == high:
            return Monomial(low, power)
        middle, radius = from_fraction((low + high) / 2), from_fraction((high - low) / 2)
        ball = Ball(middle, Ball(radius).upper())
        return ball * Ball.pi() ** power if power else ball

    def _over(self, box: Box) -> None:
        """Read this box; what was found is kept while the same one is asked for."""
        if self._now is not box:
            self._exchange({path: self._ball(path, *ends) for path, ends in box.items()})
            self._now = box

    def _exchange(self, values: Mapping[str, Any]) -> None:
        self._inputs.update(values)
        # Both readers read the same inputs, so what either found for others is void.
        for each in (self._points, self._boxes):
            each.forget(self._moving)
            each.take(self._assumed.items())
