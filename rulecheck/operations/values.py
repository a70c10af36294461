"""The values that terms have when they are evaluated exactly.

A number is a rational (`exact.Rational`), a quotient of polynomials in pi (`exact.PiNumber`), a ball
(`exact.Ball`), or `Bounds` (a count with unknown elements). A flag is `bool`, a text `str`, a date its
ordinal day as `exact.Rational`. Anything may be `Unknown`, with the reasons.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from fractions import Fraction
from typing import Any, Literal

from rulecheck.diagnostics import Span

ReasonKind = Literal["missing", "contradiction", "undefined", "tie", "budget", "uncertain"]


@dataclass(frozen=True, slots=True)
class Monomial:
    """An exact constant `rational * pi^power`, in SI units: the value of every number in a file.

    >>> Monomial(Fraction(7, 180), 1).is_rational
    False
    """

    rational: Fraction
    power: int = 0

    @property
    def is_rational(self) -> bool:
        """True where pi does not occur."""
        return self.power == 0 or not self.rational


@dataclass(frozen=True, slots=True)
class Reason:
    """Why a value is not known: what is missing (its name), or where and how it is undefined."""

    kind: ReasonKind
    text: str
    span: Span | None = None


@dataclass(frozen=True, slots=True)
class Unknown:
    """A value that is not known; reasons in the order in which they were met, each once."""

    reasons: tuple[Reason, ...]


@dataclass(frozen=True, slots=True)
class Bounds:
    """A count, or a number made of one, that unknown elements leave open: from `low` to `high`."""

    low: Any
    high: Any
    reasons: tuple[Reason, ...]


def merged(values: Iterable[object]) -> Unknown:
    """One unknown value with the reasons of all that are unknown or between bounds, each once.

    >>> missing = Reason("missing", "tyres.rear.width")
    >>> merged([Unknown((missing,)), Unknown((missing,))]) == Unknown((missing,))
    True
    """
    found: dict[Reason, None] = {}
    for value in values:
        if isinstance(value, (Unknown, Bounds)):
            found.update(dict.fromkeys(value.reasons))
    return Unknown(tuple(found))
