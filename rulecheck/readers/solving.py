"""The least solution of an equation in a range, certified: what the exact reader does with a term of the kind `solve`.

From the low end on, stretches are excluded on which the formula certainly is not zero, or is monotone with one sign at
both ends (interval exclusion by bisection). The first stretch on which it is monotone and changes its sign holds one
solution, which interval Newton steps narrow down to the precision in force. Method: R. E. Moore, R. B. Kearfott, M. J.
Cloud, Introduction to Interval Analysis, SIAM 2009 (from memory). Nothing is taken as a solution that is not proved to
be one: a formula that touches zero without crossing it is not decided.
"""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from typing import Any

from rulecheck.graph.terms import Bank, Equation, Term
from rulecheck.operations.exact import Ball, PiNumber, Rational, precision, sign, to_ball
from rulecheck.operations.operation import UNDECIDED, Undecided
from rulecheck.operations.values import Bounds, Reason, Unknown, merged
from rulecheck.readers.enclosing import Enclosing

MOST_STRETCHES = 5000
"""So many stretches of a range are looked at before the search for a solution is given up."""
# Stretches are not made finer than this many bits of the range, or half of those in force.
_FINEST_BITS = 120
# From this precision on a solution that cannot be told from none is said to be undecided.
_TOLD_BITS = 256
_FIRST_PARTS = 8
# Steps by which each end of a wide bracket is moved inwards.
_TRIMS = 16
# A solution with a small denominator is tried as an exact one.
_LARGEST_DENOMINATOR = 10**9


class Solving:
    """Solves the equations of one bank; keeps the bracket of each between precisions."""

    def __init__(self, bank: Bank) -> None:
        self._bank = bank
        self._brackets: dict[int, Ball] = {}

    def forget(self) -> None:
        """What the equations take from outside has changed."""
        self._brackets.clear()

    def value(self, term: Term, values: Sequence[Any]) -> Any:
        """The solution at the precision in force: exact, a ball, an unknown with its reason, or UNDECIDED."""
        low, high = values[:2]
        for end in (low, high):
            if isinstance(end, (Unknown, Bounds)):
                return merged(values[:2])
            if isinstance(end, Undecided):
                return UNDECIDED
        search = _Search(self._bank, term, Enclosing(self._bank, term, values, self._inner), low, high)
        if term.index in self._brackets:
            return search.narrowed(self._brackets[term.index])
        found = search.least()
        if isinstance(found, Ball):
            self._brackets[term.index] = found
        return found

    def enclosing(self, term: Term, values: Sequence[Any]) -> Enclosing:
        """The formula of a solve with what it takes from outside."""
        return Enclosing(self._bank, term, values, self._inner)

    def _inner(self, term: Term, values: Sequence[Any], moved: Sequence[Any]) -> tuple[Any, Any]:
        """A solve inside the formula of another: its value, and how it moves with its arguments."""
        enclosing = Enclosing(self._bank, term, values, self._inner)
        low, high = values[:2]
        if not all(isinstance(end, (Rational, PiNumber, Ball)) for end in (low, high)):
            return (UNDECIDED if UNDECIDED in (low, high) else merged(values[:2])), None
        found = _Search(self._bank, term, enclosing, low, high).least()
        if not moved or not isinstance(found, (Rational, Ball)):
            return found, None
        return found, implicit_slope(term, enclosing, to_ball(found), moved)


def implicit_slope(term: Term, enclosing: Enclosing, x: Ball, moved: Sequence[Any]) -> Ball | None:
    """How a solution moves when its arguments move so: the implicit function theorem."""
    outside = {part.index: step for part, step in zip(term.arguments[2:], moved[2:], strict=True)}
    found = enclosing.values(x)
    by_variable, by_outside = enclosing.slope(x, found), enclosing.slope(x, found, outside)
    if by_variable is None or by_outside is None or by_variable.contains(0):
        return None
    slope = -by_outside / by_variable
    return slope if slope.is_finite() else None


class _Search:
    """One search at one precision."""

    def __init__(self, bank: Bank, term: Term, enclosing: Enclosing, low: Any, high: Any) -> None:
        assert isinstance(term.value, Equation)
        self._span = bank.spans[term.index]
        self._equation = term.value
        self._enclosing = enclosing
        self._ends = low, high
        self._low, self._high = _outer(low, -1), _outer(high, 1)

    def least(self) -> Any:
        """The least solution, from the low end on."""
        if self._low >= self._high:
            return self._unknown("undefined", "the range ends where it begins, or before")
        if _exact_sign(self._enclosing.value(self._low)) == 0:
            return self._held(self._low)
        finest = (self._high - self._low) / Rational(2 ** min(precision.prec // 2, _FINEST_BITS))
        at, width = self._low, (self._high - self._low) / _FIRST_PARTS
        for _ in range(MOST_STRETCHES):
            end = min(at + width, self._high)
            found = self._looked(at, end)
            if found is None:
                at, width = end, width * 2
                if at >= self._high:
                    return self._unknown("undefined", "there is no solution")
            elif found is not UNDECIDED:
                return found
            elif width <= finest:
                return self._grown(at, width)
            else:
                width = width / 4
        return self._unknown("budget", f"no solution was found in {MOST_STRETCHES} stretches")

    def _grown(self, at: Any, width: Any) -> Any:
        """Where what comes from outside is wide, the solution is too: a wider stretch may hold all of it."""
        while at + width < self._high:
            width = width * 4
            found = self._looked(at, min(at + width, self._high))
            if found is not None and found is not UNDECIDED:
                return found
        if precision.prec < _TOLD_BITS:
            return UNDECIDED
        return self._unknown("tie", f"the formula touches zero, jumps or has no value near {self._spoken(at)}")

    def _spoken(self, at: Any) -> str:
        """A place in the unit of the variable, to six digits; what is nothing against the range is zero."""
        value, span = float(Fraction(str(at))), float(Fraction(str(self._high - self._low)))
        shown = 0.0 if abs(value) < 1e-9 * span else value / self._equation.factor
        return f"{shown:.6g} {self._equation.unit}".strip()

    def _looked(self, low: Any, high: Any) -> Any:
        """A solution in a stretch, None where there certainly is none, UNDECIDED where a part of it may tell more."""
        across = Ball(low).union(Ball(high))
        found = self._enclosing.values(across)
        value = found[self._equation.body.index]
        if isinstance(value, (Unknown, Bounds)):
            return self._undefined(value)
        if _sign(value):
            return None
        slope = self._enclosing.slope(across, found)
        if slope is None or slope.contains(0):
            return UNDECIDED
        first, last = self._sign_at(low), self._sign_at(high)
        if first == 0 or last == 0:
            return self._held(low if first == 0 else high)
        if first is None or last is None:
            return UNDECIDED
        return None if first == last else self.narrowed(across)

    def _undefined(self, value: Unknown | Bounds) -> Unknown:
        """Of what is undefined over a whole stretch, say so; what is missing is missing everywhere."""
        if any(reason.kind != "undefined" for reason in value.reasons):
            return Unknown(value.reasons)
        told = ", ".join(dict.fromkeys(reason.text for reason in value.reasons))
        return self._unknown("undefined", f"the formula has no value in a part of it ({told})")

    def _unknown(self, kind: Any, text: str) -> Unknown:
        return Unknown((Reason(kind, f"{text} for {self._equation.said}", self._span),))

    def _sign_at(self, point: Any) -> int | None:
        """The sign of the formula at a point; None where this precision cannot tell it."""
        found = _sign(self._enclosing.value(Ball(point)))
        return found or _exact_sign(self._enclosing.value(point))

    def narrowed(self, bracket: Ball) -> Any:
        """A bracket with one solution, narrowed by interval Newton steps; exact where a simple number solves it."""
        x = bracket
        while True:
            middle = Ball(x.mid())
            value, slope = self._enclosing.value(middle), self._enclosing.slope(x)
            if not isinstance(value, (Rational, PiNumber, Ball)) or slope is None or slope.contains(0):
                break
            step = middle - to_ball(value) / slope
            if not step.is_finite() or not step.overlaps(x):
                break
            closer = x.intersection(step)
            if 2 * closer.rad() >= x.rad():
                x = closer
                break
            x = closer
        if x.rel_accuracy_bits() < precision.prec // 2 and slope is not None:
            x = self._trimmed(x, 1 if slope > 0 else -1)
        exact = self._simple(x)
        return self._held(x if exact is None else exact)

    def _trimmed(self, x: Ball, rises: int) -> Ball:
        """A wide bracket without what certainly lies before or behind the solution."""
        ends = [x.lower().fmpq(), x.upper().fmpq()]
        for place, outer in ((0, -rises), (1, rises)):
            near, far = ends[place], ends[1 - place]
            for _ in range(_TRIMS):
                middle = (near + far) / 2
                if _sign(self._enclosing.value(Ball(middle))) == outer:
                    near = middle
                else:
                    far = middle
            ends[place] = near
        return Ball(ends[0]).union(Ball(ends[1]))

    def _simple(self, x: Ball) -> Any:
        middle = Rational(x.mid().fmpq()) if x.is_finite() else Rational(0)
        near = Fraction(int(middle.p), int(middle.q)).limit_denominator(_LARGEST_DENOMINATOR)
        candidate = Rational(near.numerator, near.denominator)
        if not x.overlaps(Ball(candidate)) or (x.rel_accuracy_bits() < 32 and candidate):
            return None
        return candidate if _exact_sign(self._enclosing.value(candidate)) == 0 else None

    def _held(self, found: Any) -> Any:
        """The solution, where it certainly lies in the range: ends that are no rationals were widened for the search."""
        low, high = (to_ball(end) for end in self._ends)
        ball = to_ball(found)
        if ball < low or ball > high:
            return self._unknown("undefined", "there is no solution")
        is_exact = all(isinstance(end, Rational) for end in self._ends)
        return found if is_exact or (ball > low and ball < high) else UNDECIDED


def _outer(end: Any, direction: int) -> Any:
    if isinstance(end, Rational):
        return end
    ball = to_ball(end)
    return (ball.lower() if direction < 0 else ball.upper()).fmpq()


def _sign(value: Any) -> int:
    """1 or -1 where it is certain, else 0."""
    if isinstance(value, (Rational, PiNumber)):
        return sign(value)
    return (1 if value > 0 else -1 if value < 0 else 0) if isinstance(value, Ball) else 0


def _exact_sign(value: Any) -> int | None:
    if isinstance(value, (Rational, PiNumber)):
        return sign(value)
    if isinstance(value, Ball):
        return 0 if value.is_zero() else _sign(value) or None
    return None
