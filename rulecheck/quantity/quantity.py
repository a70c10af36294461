"""Quantities: an exact value with its unit, its spread, and where it comes from."""

from __future__ import annotations

from dataclasses import dataclass, replace
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

    def spread_si(self) -> Uncertainty | Tolerance | None:
        """The spread with its widths in SI units, without the power of pi that the value has too.

        >>> from rulecheck.quantity.units import find_unit
        >>> Quantity(Fraction(1895), find_unit("mm"), Tolerance(Fraction(0), Fraction(-2))).spread_si()
        Tolerance(upper=Fraction(0, 1), lower=Fraction(-1, 500))
        """
        return spread_in_si(self.spread, self.unit)

    def __str__(self) -> str:
        """The value as the language writes it, exactly: `1895 mm ± 0.6 mm (k=2)`."""
        parts = [show_exact(self.value), show_unit(self.unit), self.pressure, show_spread(self.spread, self.unit)]
        return " ".join(part for part in parts if part)


def show_spread(spread: Uncertainty | Tolerance | None, unit: Unit) -> str:
    """A spread as the language writes it behind a value, empty where there is none.

    >>> from rulecheck.quantity.units import find_unit
    >>> show_spread(Uncertainty(Fraction(3, 5), Fraction(2), "normal"), find_unit("mm"))
    '± 0.6 mm (k=2)'
    """
    match spread:
        case Uncertainty(half_width=width, coverage=coverage, shape=shape):
            said = f"(k={show_exact(coverage)})" if coverage is not None else ""
            parts = ["±", show_exact(width), show_unit(unit), said or ("" if shape == "rectangular" else f"({shape})")]
        case Tolerance(upper=upper, lower=lower):
            parts = [f"{_signed(upper, '+')}/{_signed(lower, '-')}", show_unit(unit)]
        case _:
            return ""
    return " ".join(part for part in parts if part)


def spread_of_si(spread: Uncertainty | Tolerance | None, unit: Unit) -> Uncertainty | Tolerance | None:
    """A spread whose widths are in SI units with its widths in a unit."""
    match spread:
        case Uncertainty(half_width=width):
            return replace(spread, half_width=unit.width_of_si(width)[0])
        case Tolerance(upper=upper, lower=lower):
            return Tolerance(unit.width_of_si(upper)[0], unit.width_of_si(lower)[0])
    return None


def spread_in_si(spread: Uncertainty | Tolerance | None, unit: Unit) -> Uncertainty | Tolerance | None:
    """A spread that is stated in a unit with its widths in SI units."""
    match spread:
        case Uncertainty(half_width=width):
            return replace(spread, half_width=unit.width_in_si(width)[0])
        case Tolerance(upper=upper, lower=lower):
            return Tolerance(unit.width_in_si(upper)[0], unit.width_in_si(lower)[0])
    return None


def _signed(value: Fraction, sign_of_zero: str) -> str:
    return f"{sign_of_zero}0" if not value else f"{'+' if value > 0 else ''}{show_exact(value)}"
