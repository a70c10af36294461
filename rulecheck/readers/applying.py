"""What the exact reader does with one operation at one precision."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any

from rulecheck.diagnostics import Span
from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.exact import BITS, Ball, PiNumber, Rational, size, to_ball
from rulecheck.operations.operation import UNDECIDED, Operation, Undecided, Undefined
from rulecheck.operations.values import Bounds, Reason, Unknown, merged
from rulecheck.readers.algebraic import Algebraic
from rulecheck.readers.external import solver_behind

START_BITS = 64
"""The precision with which readers begin."""
# From this precision on a proof that roots cancel is tried before the precision is doubled again.
PROOF_BITS = 256

EXACT_KINDS = frozenset((Rational, PiNumber, bool, str))
_DOUBTFUL = (Unknown, Undecided, Bounds)


class Applying:
    """Applies operations to values; `exact` are the values that no precision changes, by term."""

    def __init__(self, bank: Bank, exact: dict[int, Any], most_bits: int) -> None:
        self._bank = bank
        self._exact = exact
        self._most = most_bits
        self._algebraic = Algebraic(exact)

    def on_exact(self, term: Term, found: Any, bits: int) -> Any:
        """What an operation gives whose operands are exact and whose exact rule gave `found`."""
        return self._finished(term, self._values(term, {}), found, bits)

    def on_any(self, term: Term, rough: dict[int, Any], bits: int) -> Any:
        """What an operation gives whose operands are of any kind."""
        assert term.operation is not None
        values = self._values(term, rough)
        return self._finished(term, values, on_any(term.operation, values), bits)

    def is_zero(self, term: Term, bits: int) -> bool:
        """True where a proof says that a term, whose ball holds zero, is zero."""
        return bits >= PROOF_BITS and self._algebraic.equals(term, Rational(0))

    def _values(self, term: Term, rough: dict[int, Any]) -> list[Any]:
        exact = self._exact
        return [exact[part.index] if part.index in exact else rough[part.index] for part in term.arguments]

    def _proved(self, term: Term, values: list[Any]) -> Any:
        """The operation again, on operands that are proved to be equal or rational."""
        operation, arguments = term.operation, term.arguments
        assert operation is not None
        if any(isinstance(value, _DOUBTFUL) for value in values):
            return UNDECIDED
        if operation.gives == "flag" and len(values) == 2:
            if self._algebraic.same(arguments[0], arguments[1]):
                return operation.exact([Rational(0), Rational(0)])
            return UNDECIDED
        proved = [self._rational(part, value) for part, value in zip(arguments, values, strict=True)]
        return on_any(operation, proved)

    def _rational(self, term: Term, value: Any) -> Any:
        if not isinstance(value, Ball):
            return value
        candidate = _candidate(value)
        if candidate is not None and self._algebraic.equals(term, candidate):
            return candidate
        return value

    def _finished(self, term: Term, values: list[Any], found: Any, bits: int) -> Any:
        """A value, an unknown with its reason, or UNDECIDED while more precision may help."""
        assert term.operation is not None
        if found is None:
            found = term.operation.ball(values)
        if found is UNDECIDED and bits >= PROOF_BITS:
            found = self._proved(term, values)
        if isinstance(found, Undefined):
            return Unknown((Reason(found.kind, found.text, self._bank.spans[term.index]),))
        if isinstance(found, (Rational, PiNumber)) and size(found) > BITS:
            found = to_ball(found)
        if isinstance(found, Ball) and not found.is_finite():
            return self._outgrown(term) if bits >= self._most else UNDECIDED
        if found is UNDECIDED and bits >= self._most:
            return tie(bits, self._bank.spans[term.index], term)
        return found

    def _outgrown(self, term: Term) -> Unknown:
        text = f"a number is too large to be held in {BITS} bits"
        return Unknown((Reason("budget", text, self._bank.spans[term.index]),))


def tie(bits: int, span: Span | None, term: Term) -> Unknown:
    """Not decided at the highest precision: `a tie at 1233 digits`, or within the bound of a solver."""
    solver = solver_behind(term)
    if solver:
        return Unknown((Reason("tie", f"within the bound of solver '{solver}'", span),))
    return Unknown((Reason("tie", f"a tie at {int(bits * math.log10(2))} digits", span),))


def on_any(operation: Operation, values: Sequence[Any]) -> Any:
    """The rules of an operation on values of any kind."""
    if operation.strict:
        doubt = _doubt(operation, values)
        if doubt is not None:
            return doubt
    if not operation.strict or all(type(value) in EXACT_KINDS for value in values):
        found = operation.exact(values)
        if found is not None:
            return found
    return operation.ball(values)


def _doubt(operation: Operation, values: Sequence[Any]) -> Any:
    """What a strict operation gives where an operand is unknown, undecided or between bounds; else None."""
    kinds = {type(value) for value in values}
    if Unknown in kinds:
        return merged(values)
    if Undecided in kinds:
        return UNDECIDED
    if Bounds not in kinds:
        return None
    found = operation.bounds(values) if operation.bounds is not None and Ball not in kinds else None
    return merged(values) if found is None else found


def _candidate(ball: Ball) -> Rational | None:
    """The simplest number that a ball may stand for: zero, or a fraction with a small denominator."""
    if ball.contains(0):
        return Rational(0)
    near = float(ball.mid())
    if not math.isfinite(near) or abs(near) > 1 << 40:
        return None
    for denominator in (1, 2, 60, 7):
        found = Rational(round(near * denominator), denominator)
        if ball.contains(found):
            return found
    return None
