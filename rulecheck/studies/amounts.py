"""Terms as amounts for the eye: in the unit that is spoken of, exact where they are rational."""

from __future__ import annotations

import math
from datetime import date
from decimal import ROUND_CEILING, Decimal
from fractions import Fraction

from rulecheck.diagnostics import Span
from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.arithmetic import divide
from rulecheck.operations.exact import Ball, Rational, exact_number, to_fraction
from rulecheck.operations.values import Bounds, Monomial, Reason, Unknown
from rulecheck.outcome.results import Amount, Place
from rulecheck.quantity.dimension_names import preferred
from rulecheck.quantity.numbers import show_exact, show_number
from rulecheck.quantity.units import Unit
from rulecheck.readers.certain import Certain
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.external import solver_behind

PI = Fraction("3.14159265358979323846264338328")
"""Pi with more digits than a screen shows or a double holds."""
DIGITS = 6
_SHOWN_BITS = 20
"""A number that is known more closely than this is shown with its six digits alone."""
MOST_DIGITS = 10_000
"""A number with more digits before or behind the point is shown from its decimal form."""


def place(span: Span | None) -> Place | None:
    """A span as the place that outputs name."""
    return Place(span.file, span.line, span.column) if span is not None else None


def amount(reader: ExactReader, bank: Bank, term: Term, unit: Unit | None, *, width: bool = False) -> Amount | None:
    """A term in a unit, None where it is not known. With `width` the zero of the unit plays no part."""
    if term.sort == "date":
        return _day(reader, term)
    if term.sort != "number":
        return _word(reader, term)
    unit = unit or preferred(term.dimension)
    symbol = unit.symbol
    if width and unit.offset:
        symbol = "K"
    value = reader.value(term)
    if isinstance(value, Unknown):
        return None
    if isinstance(value, Bounds):
        return Amount(f"{_text(value.low)} to {_text(value.high)}", symbol)
    exact = _exact(reader, bank, term, unit, width)
    if exact is not None:
        return Amount(show_number(exact, DIGITS), symbol, _double(exact), show_exact(exact))
    return _rounded(reader, bank, term, unit, symbol)


def certain_amount(number: Certain, unit: Unit | None, digits: int = DIGITS) -> Amount:
    """A width in SI units as an amount in a unit: exact where it is rational, else to so many figures."""
    scaled = number if unit is None else number / Certain(exact_number(Monomial(unit.factor, unit.power)))
    symbol = "" if unit is None else "K" if unit.offset else unit.symbol
    if isinstance(scaled.value, Rational):
        exact = to_fraction(scaled.value)
        return Amount(show_number(exact, digits), symbol, _double(exact), show_exact(exact))
    value = float(scaled)
    return Amount(show_number(Fraction(value), digits) if math.isfinite(value) else "", symbol, value)


def float_amount(value: float, unit: Unit | None, digits: int = 4) -> Amount:
    """A width in SI units that is a double, in a unit."""
    return certain_amount(Certain(Ball(value)), unit, digits)


def _text(value: object) -> str:
    return show_number(Fraction(str(value)))


def _double(value: Fraction) -> float | None:
    try:
        return float(value)
    except OverflowError:
        return None


def _exact(reader: ExactReader, bank: Bank, term: Term, unit: Unit | None, width: bool) -> Fraction | None:
    if unit is None:
        return reader.exact_fraction(term)
    if not unit.power:
        found = reader.exact_fraction(term)
        if found is None:
            return None
        return found / unit.factor if width else unit.of_si(found)[0]
    return reader.exact_fraction(_in_unit(bank, term, unit))


def _in_unit(bank: Bank, term: Term, unit: Unit) -> Term:
    one = bank.constant(Monomial(unit.factor, unit.power), "number", unit.dimension)
    return bank.apply(divide, [term, one], divide.dimension([term.dimension, unit.dimension]))


def _rounded(reader: ExactReader, bank: Bank, term: Term, unit: Unit | None, symbol: str) -> Amount | None:
    scaled = _in_unit(bank, term, unit) if unit is not None else term
    digits = reader.decimal(scaled, DIGITS)
    if digits is None:
        return None
    if abs(digits.adjusted()) > MOST_DIGITS:
        # As a fraction such a number would fill the memory.
        return Amount(_far(digits), symbol, reader.approximate(scaled))
    offset = unit.offset / unit.factor if unit is not None and symbol != "K" else Fraction(0)
    value, bound = reader.approximate(scaled), _bound(reader, scaled)
    if bound and value is not None:
        return Amount(_with_bound(Fraction(value) - offset, bound), symbol, value)
    return Amount(show_number(Fraction(digits) - offset, DIGITS), symbol, value)


def _bound(reader: ExactReader, term: Term) -> Decimal:
    """The bound of a number that a solver found, where it shows in the digits of the screen; else 0."""
    if not solver_behind(term):
        return Decimal(0)
    found = reader.value(term)
    if not isinstance(found, Ball) or found.rel_accuracy_bits() > _SHOWN_BITS:
        return Decimal(0)
    return Decimal(float(found.rad()))


def _with_bound(value: Fraction, bound: Decimal) -> str:
    """A number with its bound, both to the place of the bound's first digit, and the bound rounded up.

    >>> _with_bound(Fraction("66.38413"), Decimal("0.001796"))
    '66.384 ± 0.002'
    """
    place = Decimal(1).scaleb(bound.adjusted())
    wide = bound.quantize(place, rounding=ROUND_CEILING)
    steps = math.floor(value / Fraction(place) + Fraction(1, 2))
    return f"{Decimal(steps) * place:f} ± {wide:f}"


def _far(digits: Decimal) -> str:
    """A number whose exponent is beyond what `Decimal` computes with."""
    figures = "".join(map(str, digits.as_tuple().digits)).rstrip("0")
    mantissa = figures[0] + (f".{figures[1:]}" if figures[1:] else "")
    return f"{'-' if digits.is_signed() else ''}{mantissa}e{digits.adjusted()}"


def _day(reader: ExactReader, term: Term) -> Amount | None:
    found = reader.value(term)
    if isinstance(found, Unknown):
        return None
    ordinal = int(Fraction(str(found)))
    return Amount(date.fromordinal(ordinal).isoformat(), "", float(ordinal))


def _word(reader: ExactReader, term: Term) -> Amount | None:
    found = reader.truth(term) if term.sort == "flag" else reader.value(term)
    if isinstance(found, Unknown):
        return None
    return Amount({True: "yes", False: "no"}.get(found, str(found)) if isinstance(found, bool) else str(found), "")


def reason_text(reasons: tuple[Reason, ...], most: int = 4) -> str:
    """Reasons in words: what is missing, and where something is undefined."""
    missing = list(dict.fromkeys(reason.text for reason in reasons if reason.kind == "missing"))
    others = [_where(reason) for reason in reasons if reason.kind != "missing"]
    told = []
    if missing:
        more = f" and {len(missing) - most} more" if len(missing) > most else ""
        told.append(f"missing: {', '.join(missing[:most])}{more}")
    told.extend(dict.fromkeys(others[:most]))
    return "; ".join(told)


def _where(reason: Reason) -> str:
    place = f" ({reason.span})" if reason.span is not None else ""
    return f"{reason.text}{place}"
