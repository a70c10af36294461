"""An equation's formula while its variable runs over a ball: what it certainly lies in, and its slope.

Values follow the rules of the exact reader. Where a ball cannot tell which arm a branch takes, both arms enclose the
value and there is no slope, since the formula may jump there; where it cannot tell which operand of a minimum binds, the
slope lies between theirs. A slope that is finite therefore says that the formula is continuous over the ball.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from fractions import Fraction
from typing import Any

from rulecheck.graph.terms import Bank, Equation, Term
from rulecheck.operations.exact import BITS, Ball, PiNumber, Rational, size, to_ball
from rulecheck.operations.operation import UNDECIDED, Undefined
from rulecheck.operations.powers import rational_power_of_ball
from rulecheck.operations.values import Reason, Unknown
from rulecheck.readers.applying import on_any

Slopes = dict[int, Any]
# How a solve inside the formula is found: the term, the values and slopes of its arguments; value and slope.
Inner = Callable[[Term, Sequence[Any], Sequence[Any]], tuple[Any, Any]]


class BallSpace:
    """The functions that partial derivatives need, on balls."""

    sqrt = staticmethod(lambda value: to_ball(value).sqrt())
    exp = staticmethod(lambda value: to_ball(value).exp())
    log = staticmethod(lambda value: Ball(value).log() if isinstance(value, int) else to_ball(value).log())
    sin = staticmethod(lambda value: to_ball(value).sin())
    cos = staticmethod(lambda value: to_ball(value).cos())
    tan = staticmethod(lambda value: to_ball(value).tan())
    sinh = staticmethod(lambda value: to_ball(value).sinh())
    cosh = staticmethod(lambda value: to_ball(value).cosh())
    tanh = staticmethod(lambda value: to_ball(value).tanh())


# Operations whose partials are continuous wherever they are finite.
SMOOTH = frozenset(
    [
        "add",
        "subtract",
        "multiply",
        "divide",
        "negate",
        "total",
        "power",
        "reconcile",
        "sqrt",
        "exp",
        "ln",
        "log10",
        "sin",
        "cos",
        "tan",
        "asin",
        "acos",
        "atan",
        "sinh",
        "cosh",
        "tanh",
        "atan2",
        "total_where",
    ]
)


class Enclosing:
    """The formula of one equation, with the values that it takes from outside."""

    def __init__(self, bank: Bank, term: Term, values: Sequence[Any], inner: Inner) -> None:
        assert isinstance(term.value, Equation)
        self._bank, self._inner = bank, inner
        self.equation = term.value
        self.outside = dict(zip((part.index for part in term.arguments[2:]), values[2:], strict=True))

    def inside(self, term: Term, values: Sequence[Any]) -> Enclosing:
        """The formula of a solve that stands inside this one."""
        return Enclosing(self._bank, term, values, self._inner)

    def values(self, x: Any) -> dict[int, Any]:
        """Every term of the formula while the variable is in `x`."""
        found = dict(self.outside)
        for term in self.equation.moving:
            found[term.index] = x if term is self.equation.variable else self._value(term, found)
        return found

    def value(self, x: Any) -> Any:
        """The formula while the variable is in `x`."""
        return self.values(x)[self.equation.body.index]

    def slope(self, x: Any, found: Mapping[int, Any] | None = None, outside: Mapping[int, Any] | None = None) -> Any:
        """How the formula grows with its variable; with `outside`, with what moves the terms from outside so.

        None where it may jump, or has no slope that could be bounded.
        """
        found = self.values(x) if found is None else found
        slopes: Slopes = dict(outside) if outside else {}
        for term in self.equation.moving:
            if term is self.equation.variable:
                slopes[term.index] = 0 if outside else 1
            else:
                slopes[term.index] = self._slope(term, found, slopes)
        total = slopes[self.equation.body.index]
        if total is None:
            return None
        total = to_ball(total)
        return total if total.is_finite() else None

    def _value(self, term: Term, found: Mapping[int, Any]) -> Any:
        values = [found[part.index] for part in term.arguments]
        if term.kind == "branch":
            return _arm(values)
        if term.kind == "solve":
            return self._inner(term, values, ())[0]
        assert term.operation is not None
        made = on_any(term.operation, values)
        if isinstance(made, Undefined):
            return Unknown((Reason(made.kind, made.text, self._bank.spans[term.index]),))
        if isinstance(made, (Rational, PiNumber)) and size(made) > BITS:
            made = to_ball(made)
        return UNDECIDED if isinstance(made, Ball) and not made.is_finite() else made

    def _slope(self, term: Term, found: Mapping[int, Any], slopes: Slopes) -> Any:
        parts = term.arguments
        moved = [slopes.get(part.index, 0) for part in parts]
        if term.sort != "number" or all(map(_stays, moved)):
            return 0 if term.sort == "number" else _settled(found[term.index])
        values = [found[part.index] for part in parts]
        if term.kind == "branch":
            taken = values[0]
            return moved[1 if taken else 2] if isinstance(taken, bool) and moved[0] is not None else None
        if term.operation is not None and term.operation.name == "reconcile":
            return moved[0]
        if not all(_is_number(value) or isinstance(value, bool) for value in values):
            return None
        if term.kind == "solve":
            return self._inner(term, values, moved)[1]
        return _chained(term, values, moved)


def _settled(flag: Any) -> Any:
    """A flag that is certain over the whole ball does not move; one that is not may jump."""
    return 0 if isinstance(flag, (bool, str)) else None


def _arm(values: Sequence[Any]) -> Any:
    condition, then, otherwise = values
    if isinstance(condition, bool):
        return then if condition else otherwise
    if condition is UNDECIDED and _is_number(then) and _is_number(otherwise):
        return to_ball(then).union(to_ball(otherwise))
    return condition


def _is_number(value: Any) -> bool:
    return isinstance(value, (Rational, PiNumber, Ball))


def _chained(term: Term, values: Sequence[Any], moved: Sequence[Any]) -> Any:
    """The chain rule on balls."""
    name = term.operation.name if term.operation is not None else ""
    if name in ("minimum", "maximum"):
        return _of_extreme(name, [to_ball(value) for value in values], moved)
    partials = _partials(term, values)
    if partials is None:
        return None
    total: Any = 0
    for partial, step in zip(partials, moved, strict=True):
        if step is None and partial is not None and not _is_nothing(partial):
            return None
        if not _stays(step):
            if partial is None:
                return None
            total = total + to_ball(partial) * to_ball(step)
    return total


def _stays(step: Any) -> bool:
    """True for a slope that certainly is zero; a ball that holds zero differs from it and does not."""
    return step is not None and (step.is_zero() if isinstance(step, Ball) else not step)


def _is_nothing(partial: Any) -> bool:
    return isinstance(partial, (int, float)) and partial == 0


def _partials(term: Term, values: Sequence[Any]) -> Sequence[Any] | None:
    operation = term.operation
    assert operation is not None
    name = operation.name
    if name == "abs":
        ball = to_ball(values[0])
        return (1 if ball >= 0 else -1 if ball <= 0 else Ball(0, 1),)
    if name.startswith("power["):
        return (_of_power(to_ball(values[0]), Fraction(name[6:-1])),)
    if name not in SMOOTH or operation.partials is None:
        return None
    balls = [value if isinstance(value, bool) else to_ball(value) for value in values]
    return [
        Ball(part) if isinstance(part, float) and part != 0 else part for part in operation.partials(BallSpace, balls)
    ]


def _of_power(base: Ball, exponent: Fraction) -> Any:
    lowered = rational_power_of_ball(base, exponent - 1)
    return lowered * Rational(exponent.numerator, exponent.denominator) if isinstance(lowered, Ball) else None


def _of_extreme(name: str, balls: Sequence[Ball], moved: Sequence[Any]) -> Any:
    """The slope lies between those of the operands that may bind."""
    sign = 1 if name == "maximum" else -1
    signed = [sign * ball for ball in balls]
    found: Any = None
    for index, ball in enumerate(signed):
        if any(bool(other > ball) for place, other in enumerate(signed) if place != index):
            continue
        if moved[index] is None:
            return None
        step = to_ball(moved[index])
        found = step if found is None else found.union(step)
    return found
