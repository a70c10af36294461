"""Quantities: an exact value with its unit, its spread, and where it comes from."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.numbers import show_exact
from rulecheck.quantity.units import Unit, show_unit

Shape = Literal["normal", "rectangular", "triangular"]
SHAPES: tuple[Shape, ...] = ("normal", "rectangular", "triangular")
Pressure = Literal["", "gauge", "absolute"]


@dataclass(frozen=True, slots=True)
class Uncertainty:
    """Measurement uncertainty: value ± `half_width`, in the value's unit.

    With a coverage factor the half width is an expanded uncertainty, `k` times the standard one. Without
    one nothing but limits is stated, and the shape says how values lie between them: evenly (rectangular) or
    falling to both ends (triangular).
    """

    half_width: Fraction
    coverage: Fraction | None = None
    shape: Shape = "rectangular"

    def variance(self) -> Fraction:
        """The square of the standard uncertainty, in the square of the value's unit; exact.

        Source: JCGM 100:2008 (GUM), 4.3.3 (expanded), 4.3.7 (rectangular: a²/3), 4.3.9 (triangular: a²/6).

        >>> Uncertainty(Fraction(3)).variance(), Uncertainty(Fraction(3), Fraction(2), "normal").variance()
        (Fraction(3, 1), Fraction(9, 4))
        """
        if self.coverage is not None:
            return (self.half_width / self.coverage) ** 2
        return self.half_width**2 / (6 if self.shape == "triangular" else 3)


@dataclass(frozen=True, slots=True)
class Tolerance:
    """Drawing tolerance: the value may be made from value + `lower` to value + `upper`, in the value's unit."""

    upper: Fraction
    lower: Fraction


@dataclass(frozen=True, slots=True)
class Quantity:
    """A value as it is stated. `pressure` keeps the word `gauge` or `absolute`; nothing is converted by it.

    `basis` says where the value comes from, `reference` names the paper, `definition` names which of rival
    definitions the value meets.
    """

    value: Fraction
    unit: Unit
    spread: Uncertainty | Tolerance | None = None
    basis: str = ""
    reference: str = ""
    definition: str = ""
    pressure: Pressure = ""

    @property
    def dimension(self) -> Dimension:
        """The dimension of the unit."""
        return self.unit.dimension

    def si(self) -> tuple[Fraction, int]:
        """The value in SI units: a rational, and the power of pi that goes with it."""
        return self.unit.in_si(self.value)

    def limits(self) -> tuple[Fraction, Fraction]:
        """Least and greatest value that the spread allows, in the value's unit; exact."""
        match self.spread:
            case Uncertainty(half_width=width):
                return self.value - width, self.value + width
            case Tolerance(upper=upper, lower=lower):
                return self.value + lower, self.value + upper
        return self.value, self.value

    def __str__(self) -> str:
        """The value as the language writes it, exactly: `1895 mm ± 0.6 mm (k=2)`."""
        unit = show_unit(self.unit)
        parts = [show_exact(self.value), unit, self.pressure]
        match self.spread:
            case Uncertainty(half_width=width, coverage=coverage, shape=shape):
                stated = f"(k={show_exact(coverage)})" if coverage is not None else ""
                parts += ["±", show_exact(width), unit, stated or ("" if shape == "rectangular" else f"({shape})")]
            case Tolerance(upper=upper, lower=lower):
                parts += [f"{_signed(upper, '+')}/{_signed(lower, '-')}", unit]
        return " ".join(part for part in parts if part)


def _signed(value: Fraction, sign_of_zero: str) -> str:
    return f"{sign_of_zero}0" if not value else f"{'+' if value > 0 else ''}{show_exact(value)}"
