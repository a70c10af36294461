"""Decision rules, and what the scrutineer's instrument is: how rules say it, and how it is read."""

from __future__ import annotations

from collections.abc import Mapping as Units
from fractions import Fraction

from rulecheck.diagnostics import Faults
from rulecheck.model.ruleset import Decision, DecisionName, Scrutineer
from rulecheck.quantity.dimension import PURE, Dimension
from rulecheck.quantity.quantity import SHAPES, Quantity, Uncertainty
from rulecheck.quantity.reading_values import read_quantity
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node

DECISIONS: tuple[DecisionName, ...] = ("simple", "guarded", "worst case")
_KEYS = ("rule", "coverage")
_SCRUTINEER = ("uncertainty", "coverage", "shape", "tolerance")


def read_decision(node: Node | None, faults: Faults) -> Decision | None:
    """`guarded`, or `{rule: guarded, coverage: 1.65}`; None where nothing is said or a fault was noted."""
    if node is None:
        return None
    if isinstance(node, Located):
        name = _name(node, faults)
        return None if name is None else Decision(name)
    said = _leaves(node, _KEYS, "a decision rule", faults)
    if said is None:
        return None
    if "rule" not in said:
        faults.add("missing-key", "'rule:' is missing here", node.span, expected=" or ".join(DECISIONS))
        return None
    name = _name(said["rule"], faults)
    if "coverage" not in said:
        return None if name is None else Decision(name)
    factor = _factor(said["coverage"], faults)
    if name is not None and name != "guarded":
        told = f"the decision rule '{name}' has no coverage factor"
        faults.add("bad-value", told, said["coverage"].span, advice="leave it out; it is the guard band's")
        return None
    return None if name is None or factor is None else Decision(name, factor)


def _name(where: Located, faults: Faults) -> DecisionName | None:
    for name in DECISIONS:
        if where.text == name:
            return name
    faults.add(
        "unknown-choice", f"'{where.text}' is no decision rule", where.span,
        expected=" or ".join(DECISIONS), advice=nearest(where.text, DECISIONS),
    )  # fmt: skip
    return None


def _factor(where: Located, faults: Faults) -> Fraction | None:
    read = read_quantity(where, PURE, faults=faults)
    if read is not None and read.value <= 0:
        faults.add("bad-value", "a coverage factor is above zero", where.span, advice="write 'coverage: 2'")
        return None
    return read.si()[0] if read is not None else None


def read_scrutineer(node: Node | None, own: Units[str, Dimension], faults: Faults) -> Scrutineer | None:
    """`{uncertainty: 1 mm, coverage: 2, tolerance: 0 mm}`; None where nothing is said or a fault was noted."""
    if node is None:
        return None
    said = _leaves(node, _SCRUTINEER, "what the scrutineer measures with", faults)
    if said is None:
        return None
    before = len(faults.found)
    width, leniency = (_width(said.get(key), key, own, faults) for key in ("uncertainty", "tolerance"))
    for key in ("coverage", "shape"):
        if key in said and "uncertainty" not in said:
            told = f"'{key}' stands beside an 'uncertainty' alone"
            faults.add("bad-value", told, said[key].span, advice="state the uncertainty too")
    factor = _factor(said["coverage"], faults) if "coverage" in said else None
    shape = said["shape"].text if "shape" in said else "normal" if factor is not None else "rectangular"
    if shape not in SHAPES:
        faults.add("unknown-choice", f"'{shape}' is no shape", said["shape"].span, expected=" or ".join(SHAPES))
    elif "shape" in said and (shape == "normal") != ("coverage" in said):
        told = "a coverage factor and the shape 'normal' belong together"
        faults.add("bad-value", told, said["shape"].span, advice="state both, or neither")
    if len(faults.found) > before:
        return None
    stated = Uncertainty(width.value, factor, shape) if width is not None else None  # type: ignore[arg-type]
    return Scrutineer(stated, width.unit if width is not None else None, leniency, node.span)


def _width(where: Located | None, key: str, own: Units[str, Dimension], faults: Faults) -> Quantity | None:
    if where is None:
        return None
    read = read_quantity(where, None, own=own, faults=faults)
    if read is not None and (read.value < 0 or read.spread is not None):
        advice = "write a half width with its unit, such as '1 mm'"
        faults.add("bad-value", f"the scrutineer's {key} is a width that is not negative", where.span, advice=advice)
        return None
    return read


def _leaves(node: Node, known: tuple[str, ...], what: str, faults: Faults) -> dict[str, Located] | None:
    if not isinstance(node, Mapping):
        faults.add("bad-structure", f"{what} has keys", node.span, expected=", ".join(known))
        return None
    before = len(faults.found)
    said: dict[str, Located] = {}
    for entry in node:
        if entry.key.text not in known:
            faults.add(
                "unknown-key", f"{what} has no key '{entry.key.text}'", entry.key.span,
                expected=" or ".join(known), advice=nearest(entry.key.text, known),
            )  # fmt: skip
        elif not isinstance(entry.value, Located):
            faults.add("bad-value", f"'{entry.key.text}' is a single value", entry.value.span)
        else:
            said[entry.key.text] = entry.value
    return said if len(faults.found) == before else None
