"""The spread of a value as text: measurement uncertainty and drawing tolerance."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.numbers import quoted
from rulecheck.quantity.quantity import Tolerance, Uncertainty
from rulecheck.quantity.units import Unit, find_unit
from rulecheck.quantity.value_parts import Piece, Pieces

_PER_CENT = find_unit("%")


@dataclass(frozen=True, slots=True)
class Spread:
    """What was stated behind a value, and the unit that stood there."""

    stated: Uncertainty | Tolerance | None = None
    unit: Unit | None = None
    unit_piece: Piece | None = None


def read_spread(pieces: Pieces, value: Fraction, unit: Unit | None) -> Spread:
    """`± 0.6 mm (k=2)` or `+0/-2 mm`, in the unit of the value; faults are noted in `pieces`.

    A spread in `%` of a value with another unit is a share of the value. Where the value has no unit of
    its own yet, the unit behind the spread is that of both.
    """
    if pieces.next_is("plus-minus"):
        return _uncertainty(pieces, value, unit, pieces.take())
    if pieces.next_is("tolerance"):
        return _tolerance(pieces, value, unit)
    if pieces.next_is("coverage"):
        pieces.fault(
            "bad-value",
            "a coverage factor stands behind an uncertainty alone",
            pieces.take(),
            advice="write '± 0.6 mm (k=2)'",
        )
    return Spread()


def in_unit_of(
    pieces: Pieces, width: Fraction, own: Unit | None, piece: Piece | None, value: Fraction, unit: Unit | None
) -> Fraction | None:
    """A width with its own unit, in the unit of the value; None where they do not go together."""
    if own is None or unit is None or own == unit:
        return width
    if own == _PER_CENT and not unit.dimension.is_pure:
        if unit.offset:
            pieces.fault(
                "bad-value",
                "a share of a temperature with its own zero means nothing",
                piece,
                advice="write the spread in 'K'",
            )
            return None
        return abs(value) * width / 100
    if own.dimension != unit.dimension:
        message = f"'{own.symbol}' is a unit of {name_of(own.dimension)}, and the value is a {name_of(unit.dimension)}"
        pieces.fault(
            "wrong-dimension",
            message,
            piece,
            expected=name_of(unit.dimension),
            advice=f"write the spread in '{unit.symbol}'",
        )
        return None
    if own.power != unit.power:
        message = f"'{own.symbol}' and '{unit.symbol}' differ by a power of pi"
        pieces.fault("bad-value", message, piece, advice=f"write the spread in '{unit.symbol}'")
        return None
    return unit.width_of_si(own.width_in_si(width)[0])[0]


def _uncertainty(pieces: Pieces, value: Fraction, unit: Unit | None, sign: Piece) -> Spread:
    width = None
    if pieces.next_is("number"):
        piece = pieces.take()
        width = pieces.number(piece)
        if piece.text[0] in "+-":
            pieces.fault("bad-value", "the width of an uncertainty has no sign", piece, advice="write '± 0.6 mm'")
    else:
        pieces.fault(
            "bad-value", "behind ± the width of the uncertainty is missing", sign, advice="write '± 0.6 mm (k=2)'"
        )
    own, piece_of_unit = _unit(pieces)
    factor = pieces.coverage(pieces.take()) if pieces.next_is("coverage") else None
    if width is None:
        return Spread()
    converted = in_unit_of(pieces, width, own, piece_of_unit, value, unit)
    stated = (
        Uncertainty(converted, factor, "rectangular" if factor is None else "normal") if converted is not None else None
    )
    return Spread(stated, own, piece_of_unit)


def _tolerance(pieces: Pieces, value: Fraction, unit: Unit | None) -> Spread:
    piece = pieces.take()
    first, _, second = piece.text.partition("/")
    upper = pieces.number(Piece("number", first, piece.start))
    lower = pieces.number(Piece("number", second, piece.start + len(first) + 1))
    own, piece_of_unit = _unit(pieces)
    if upper is None or lower is None:
        return Spread()
    if second[0] not in "+-" or lower > upper:
        message = f"{quoted(piece.text)} is no tolerance"
        pieces.fault("bad-value", message, piece, advice="write the upper limit first, both with a sign: '+0/-2 mm'")
        return Spread()
    high = in_unit_of(pieces, upper, own, piece_of_unit, value, unit)
    low = in_unit_of(pieces, lower, own, piece_of_unit, value, unit)
    stated = Tolerance(high, low) if high is not None and low is not None else None
    return Spread(stated, own, piece_of_unit)


def _unit(pieces: Pieces) -> tuple[Unit | None, Piece | None]:
    if not pieces.next_is("word") or pieces.waiting[0].text in ("gauge", "absolute"):
        return None, None
    piece = pieces.take()
    return pieces.unit(piece), piece
