"""Dimensions: products of powers of the SI base units, and of base units that a ruleset declares."""

from __future__ import annotations

from dataclasses import dataclass, field
from fractions import Fraction
from functools import lru_cache


@dataclass(frozen=True, slots=True)
class Dimension:
    """Exponents by base unit, none of them zero, sorted by the unit's symbol.

    The radian is 1, as in the SI. Calendar days are a base of their own (`day`): they are no time.

    >>> str(Dimension.of(m=1, s=-2))
    'm*s^-2'
    >>> (Dimension.of(m=1) ** 2).exponents
    (('m', Fraction(2, 1)),)
    """

    exponents: tuple[tuple[str, Fraction], ...] = ()
    # Computed once: dimensions are keys wherever terms are made.
    _hash: int = field(init=False, repr=False, compare=False, default=0)

    def __post_init__(self) -> None:
        object.__setattr__(self, "_hash", hash(self.exponents))

    def __hash__(self) -> int:
        return self._hash

    @classmethod
    def of(cls, **exponents: int | Fraction) -> Dimension:
        """A dimension by base units: `Dimension.of(kg=1, m=-3)`."""
        return cls(tuple(sorted((base, Fraction(power)) for base, power in exponents.items() if power)))

    def __mul__(self, other: Dimension) -> Dimension:
        return _times(self, other)

    def __truediv__(self, other: Dimension) -> Dimension:
        return _times(self, other**-1)

    def __pow__(self, power: int | Fraction) -> Dimension:
        return _power(self, Fraction(power))

    @property
    def is_pure(self) -> bool:
        """True for a pure number."""
        return not self.exponents

    def __str__(self) -> str:
        """In base units, `1` for a pure number."""
        return "*".join(base if power == 1 else f"{base}^{power}" for base, power in self.exponents) or "1"


@lru_cache(maxsize=4096)
def _times(left: Dimension, right: Dimension) -> Dimension:
    powers = dict(left.exponents)
    for base, power in right.exponents:
        powers[base] = powers.get(base, Fraction(0)) + power
    return Dimension(tuple(sorted((base, power) for base, power in powers.items() if power)))


@lru_cache(maxsize=4096)
def _power(dimension: Dimension, power: Fraction) -> Dimension:
    if not power:
        return PURE
    return Dimension(tuple((base, exponent * power) for base, exponent in dimension.exponents))


PURE = Dimension()
LENGTH = Dimension.of(m=1)
MASS = Dimension.of(kg=1)
TIME = Dimension.of(s=1)
CALENDAR = Dimension.of(day=1)
ACCELERATION = Dimension.of(m=1, s=-2)
TEMPERATURE = Dimension.of(K=1)
