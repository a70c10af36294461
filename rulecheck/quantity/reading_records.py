"""Values that are stated with what is known about them: `{value, uncertainty, coverage, basis, ...}`."""

from __future__ import annotations

from collections.abc import Mapping as Units
from dataclasses import replace
from fractions import Fraction

from rulecheck.diagnostics import Faults
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.quantity import SHAPES, Quantity, Shape, Tolerance, Uncertainty
from rulecheck.quantity.reading_spread import in_unit_of, read_spread
from rulecheck.quantity.reading_values import read_point, read_quantity
from rulecheck.quantity.units import NONE_OWN, Unit
from rulecheck.quantity.value_parts import Pieces
from rulecheck.reading.nodes import Located, Mapping, Node

BASES = ("measured", "weighed", "calculated", "drawing", "supplier", "estimated")
KEYS = ("value", "uncertainty", "coverage", "shape", "tolerance", "basis", "reference", "definition")


def read_stated(
    node: Node,
    expected: Dimension | None,
    *,
    own: Units[str, Dimension] = NONE_OWN,
    missing_blank: bool = False,
    declared: Unit | None = None,
    faults: Faults,
) -> Quantity | None:
    """A value as text, or as a mapping with what is known about it; None where a fault was noted.

    `{value: 1895 mm, uncertainty: 0.6 mm, coverage: 2}`, `{value: 1895 mm, tolerance: +0/-2 mm}`, with `shape`,
    `basis`, `reference` and `definition` where they are stated. The rest is as `read_quantity` has it.
    """
    if isinstance(node, Located):
        return read_quantity(node, expected, own=own, missing_blank=missing_blank, declared=declared, faults=faults)
    if not isinstance(node, Mapping):
        faults.add("bad-value", "a list stands where one value is due", node.span, expected="a value such as '1900 mm'")
        return None
    before = len(faults.found)
    texts = _texts(node, faults)
    value = texts.get("value")
    if value is None:
        faults.add("missing-key", "this value has no 'value'", node.span, expected="value: a number with its unit")
        return None
    quantity = read_quantity(value, expected, own=own, missing_blank=missing_blank, declared=declared, faults=faults)
    spread = _spread(texts, quantity, own, faults) if quantity is not None else None
    if quantity is None or len(faults.found) > before:
        return None
    basis, reference, definition = (_text(texts, key) for key in ("basis", "reference", "definition"))
    stated = spread or quantity.spread
    return replace(quantity, spread=stated, basis=basis, reference=reference, definition=definition)


def read_stated_point(
    node: Located | Mapping, own: Units[str, Dimension], faults: Faults
) -> tuple[Quantity, Quantity, Quantity] | None:
    """A point as text, or as `{value: 1250 0 310 mm, uncertainty: 1 mm}`: the spread is that of each coordinate."""
    if isinstance(node, Located):
        return read_point(node, own, faults)
    before = len(faults.found)
    texts = _texts(node, faults)
    read = read_point(texts["value"], own, faults) if "value" in texts else None
    if read is None:
        return None
    x, y, z = (replace(item, spread=_spread(texts, item, own, faults)) for item in read)
    return (x, y, z) if len(faults.found) == before else None


def _text(texts: dict[str, Located], key: str) -> str:
    return texts[key].text if key in texts else ""


def _texts(node: Mapping, faults: Faults) -> dict[str, Located]:
    """The entries by key; a key that no value has, and what is no text, is a fault."""
    texts = {}
    for entry in node:
        if entry.key.text not in KEYS:
            faults.add("unknown-key", f"a value has no '{entry.key.text}'", entry.key.span, expected=", ".join(KEYS))
        elif not isinstance(entry.value, Located):
            faults.add("bad-value", f"'{entry.key.text}' is a single value", entry.value.span)
        else:
            texts[entry.key.text] = entry.value
    for key, choices in (("basis", BASES), ("shape", SHAPES)):
        if key in texts and texts[key].text not in choices:
            faults.add(
                "unknown-choice", f"'{texts[key].text}' is no {key}", texts[key].span, expected=" or ".join(choices)
            )
    return texts


def _spread(
    texts: dict[str, Located], quantity: Quantity, own: Units[str, Dimension], faults: Faults
) -> Uncertainty | Tolerance | None:
    stated = [key for key in ("uncertainty", "tolerance") if key in texts]
    if len(stated) > 1 or (stated and quantity.spread is not None):
        faults.add("bad-value", "this value has two spreads", texts[stated[-1]].span, advice="state one of them")
        return None
    for key in ("coverage", "shape"):
        if key in texts and "uncertainty" not in texts:
            faults.add(
                "bad-value",
                f"'{key}' stands beside an 'uncertainty' alone",
                texts[key].span,
                advice="state the uncertainty too",
            )
    if "uncertainty" in texts:
        return _uncertainty(texts, quantity, own, faults)
    return _tolerance(texts["tolerance"], quantity, own, faults) if "tolerance" in texts else None


def _uncertainty(
    texts: dict[str, Located], quantity: Quantity, own: Units[str, Dimension], faults: Faults
) -> Uncertainty | None:
    width = _width(texts["uncertainty"], quantity, own, faults)
    coverage = read_quantity(texts["coverage"], Dimension(), faults=faults) if "coverage" in texts else None
    if coverage is not None and coverage.value <= 0:
        faults.add("bad-value", "a coverage factor is above zero", texts["coverage"].span, advice="write 'coverage: 2'")
        return None
    shape = _shape(texts, coverage is not None, faults)
    if width is None or shape is None:
        return None
    return Uncertainty(width, coverage.si()[0] if coverage is not None else None, shape)


def _shape(texts: dict[str, Located], covered: bool, faults: Faults) -> Shape | None:
    """The shape that is stated, else normal with a coverage factor and rectangular without one."""
    if "shape" not in texts:
        return "normal" if covered else "rectangular"
    where = texts["shape"]
    shape = next((shape for shape in SHAPES if shape == where.text), None)
    if shape is not None and (shape == "normal") != covered:
        message = "a coverage factor and the shape 'normal' belong together"
        faults.add("bad-value", message, where.span, advice="state both, or neither")
        return None
    return shape


def _width(where: Located, quantity: Quantity, own: Units[str, Dimension], faults: Faults) -> Fraction | None:
    pieces = Pieces(where, faults, own)
    first = pieces.take() if pieces.next_is("number") else None
    width = pieces.number(first) if first else None
    piece = pieces.take() if pieces.next_is("word") else None
    unit = pieces.unit(piece) if piece else None
    if first is None or width is None or pieces.waiting or first.text[0] in "+-":
        pieces.fault(
            "bad-value", "an uncertainty is the half width with its unit", advice="write 'uncertainty: 0.6 mm'"
        )
        return None
    if piece is None and quantity.unit.symbol != "1":
        advice = f"write '{where.text} {quantity.unit.symbol}'"
        pieces.fault("unit-missing", "this uncertainty has no unit", expected="the unit of the value", advice=advice)
        return None
    if piece is not None and unit is None:
        return None
    return in_unit_of(pieces, width, unit, piece, quantity.value, quantity.unit)


def _tolerance(where: Located, quantity: Quantity, own: Units[str, Dimension], faults: Faults) -> Tolerance | None:
    """`+0/-2 mm`, or `1 mm` for as much above as below."""
    pieces = Pieces(where, faults, own)
    if not pieces.next_is("tolerance"):
        width = _width(where, quantity, own, faults)
        return Tolerance(width, -width) if width is not None else None
    before = len(faults.found)
    spread = read_spread(pieces, quantity.value, quantity.unit)
    if spread.unit_piece is None and quantity.unit.symbol != "1":
        pieces.fault(
            "unit-missing", "this tolerance has no unit", expected="the unit of the value", advice="write '+0/-2 mm'"
        )
    if pieces.waiting:
        pieces.fault("bad-value", "a tolerance is two limits with their unit", advice="write '+0/-2 mm'")
    if len(faults.found) > before or not isinstance(spread.stated, Tolerance):
        return None
    return spread.stated
