"""Envelopes: the ranges of inputs throughout which a rule must hold, bound as inputs that no design states."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from fractions import Fraction

from rulecheck.binding.inputs import scope_units, unit_of
from rulecheck.binding.scope import Scope, View
from rulecheck.binding.states import Stance
from rulecheck.graph.conditions import Case, Envelope
from rulecheck.graph.terms import Axis, Term
from rulecheck.model.ruleset import Range as WrittenRange
from rulecheck.model.ruleset import Rule
from rulecheck.model.vocabulary import Entry
from rulecheck.quantity.quantity import Quantity
from rulecheck.quantity.reading_values import read_quantity
from rulecheck.quantity.units import Unit
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located

MOST_AXES = 4
"""So many inputs at once may run through a range."""


@dataclass(frozen=True, slots=True)
class _Bound:
    axis: Axis
    unit: Unit


def envelope_of(scope: Scope, rule: Rule) -> Envelope | None:
    """The envelope of a rule; None where it has none, or where a fault was noted."""
    if not rule.envelope:
        return None
    if len(rule.envelope) > MOST_AXES:
        told = f"rule '{rule.name}' has an envelope of {len(rule.envelope)} axes"
        scope.fault("too-large", told, rule.envelope[0].path.span, expected=f"at most {MOST_AXES}")
        return None
    made = [_axis(scope, written) for written in rule.envelope]
    bound = [item for item in made if item is not None]
    if len(bound) < len(made):
        return None
    label = ", ".join(f"{item.path.text} {item.low.text} to {item.high.text}" for item in rule.envelope)
    return Envelope(tuple(item.axis for item in bound), tuple(item.unit for item in bound), label)


def in_envelope(
    scope: Scope, rule: Rule, stance: Stance, envelope: Envelope | None, judge: Callable[[Stance], list[Case]]
) -> list[Case]:
    """The cases of a rule in one combination of states, throughout its envelope where it has one."""
    if stance.view is None or envelope is None:
        return judge(stance)
    if clashes(scope, stance.view, rule):
        return []
    cases = judge(replace(stance, view=within(stance.view, envelope)))
    return [replace(case, states=stance.states, envelope=envelope) for case in cases]


def within(view: View, envelope: Envelope) -> View:
    """The design with the axes of an envelope in place of the inputs for which they stand."""
    given: dict[str, Term] = {axis.path: axis.term for axis in envelope.axes}
    return View(
        view.design, (*view.states, ("over", envelope.label)), view.set_paths | set(given), view.base or view.design,
        {**view.given, **given},
    )  # fmt: skip


def clashes(scope: Scope, view: View, rule: Rule) -> bool:
    """True, with the fault noted, where a state sets what an envelope runs through."""
    found = False
    for written in rule.envelope:
        path = written.path.text
        if view.changes(path):
            told = f"a state sets '{path}', through which the envelope of rule '{rule.name}' runs"
            advice = "leave that axis out of 'states', or out of 'envelope'"
            scope.fault("state-clash", told, written.path.span, advice=advice)
            found = True
    return found


def _axis(scope: Scope, written: WrittenRange) -> _Bound | None:
    entry = _entry(scope, written.path)
    if entry is None:
        return None
    unit = unit_of(entry, scope)
    ends = [_end(scope, where, unit) for where in (written.low, written.high)]
    low, high = ends
    if low is None or high is None:
        return None
    (least, power), (greatest, other) = low.si(), high.si()
    power, other = (other if not least else power), (power if not greatest else other)
    if power != other:
        scope.fault("bad-value", "the ends of a range are in one unit", written.high.span, expected=f"in {unit.symbol}")
        return None
    if greatest <= least:
        told = f"the range of '{written.path.text}' runs from {written.low.text} to {written.high.text}"
        scope.fault("bad-value", told, written.low.span, expected="[least, greatest], the least first")
        return None
    return _Bound(_running(scope, written, unit, (least, greatest), power), low.unit)


def _running(scope: Scope, written: WrittenRange, unit: Unit, ends: tuple[Fraction, Fraction], power: int) -> Axis:
    name = f"{written.path.text} [{written.low.text} to {written.high.text}]"
    term = scope.bank.input(name, "number", unit.dimension, written.path.span)
    return Axis(written.path.text, term, ends[0], ends[1], power)


def _entry(scope: Scope, path: Located) -> Entry | None:
    entry = scope.shared.vocabulary.entry(path.text)
    if entry is None:
        known = [item.path for item in scope.shared.vocabulary if item.kind == "number" and "*" not in item.path]
        scope.fault(
            "unknown-name", f"there is no input '{path.text}'", path.span, expected="the path of an input",
            advice=nearest(path.text, known),
        )  # fmt: skip
        return None
    if entry.kind != "number" or entry.computed or "*" in path.text:
        what = "a computed figure" if entry.computed else "no single input" if "*" in path.text else f"a {entry.kind}"
        told = f"'{path.text}' is {what}, and an envelope runs through inputs that are numbers"
        scope.fault("kind-mismatch", told, path.span, expected="an input that is a number, such as vehicle.speed")
        return None
    return entry


def _end(scope: Scope, where: Located, unit: Unit) -> Quantity | None:
    found = read_quantity(
        where, unit.dimension, own=scope_units(scope), declared=unit, faults=scope.shared.faults
    )  # fmt: skip
    if found is not None and found.spread is not None:
        scope.fault("bad-value", "an end of a range has no spread", where.span, expected="a plain value")
        return None
    return found
