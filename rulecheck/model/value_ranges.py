"""A path with the values that it is to run through: `PATH=a..b`, `PATH=a..b:step`, `PATH=a,b,c`."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction

from rulecheck.diagnostics import Faults, Refused, Span
from rulecheck.model.names import is_name
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.numbers import show_exact
from rulecheck.quantity.quantity import Quantity
from rulecheck.quantity.reading_values import read_quantity
from rulecheck.quantity.units import Unit
from rulecheck.reading.nodes import Located
from rulecheck.reading.yaml_reader import parse_yaml

MOST_VALUES = 1000
MOST_CURVES = 4
"""A second path, of which each value gives a curve, has at most so many."""
MOST_INTERVALS = 25
"""A range without a step has at most so many intervals, each 1, 2 or 5 times a power of ten long."""

_RANGE = re.compile(r"([^'\",]*?)\.\.([^'\",:]*)(?::([^'\",]*))?")
_ITEM = re.compile(r"\"[^\"]*\"|'[^']*'|[^,'\"]+|(?<=,)(?=,|$)|^(?=,)")


@dataclass(frozen=True, slots=True)
class Setting:
    """One value of the path: as text, and as a number where it is one of a range."""

    text: Located
    number: Fraction | None = None


@dataclass(frozen=True, slots=True)
class Varying:
    """A path with its values in order. `unit` is that of a range, None for a list; `step` says its step in words."""

    path: str
    settings: tuple[Setting, ...]
    unit: Unit | None = None
    step: str = ""


def read_varying(path: str, text: str, own: Mapping[str, Dimension], faults: Faults) -> Varying | None:
    """The values that a text of the command line names; None where a fault was noted.

    `own` are base units of the rulesets. Within a range the unit may stand once, behind the last bound; the last
    bound is always a value. Values of a list stand for themselves, each with its unit.

    >>> found = read_varying("vehicle.speed", "60..320km/h:100km/h", {}, Faults())
    >>> [setting.text.text for setting in found.settings], found.step
    (['60 km/h', '160 km/h', '260 km/h', '320 km/h'], '100 km/h')
    >>> len(read_varying("vehicle.speed", "60..320km/h", {}, Faults()).settings)
    14
    """
    before = len(faults.found)
    whole = Located(text, Span(f"--vary {path}", 0, len(text), 1, 1))
    if not all(is_name(part) for part in path.split(".")):
        told = "--vary vehicle.speed=60..320km/h"
        faults.add("bad-name", f"'{path}' cannot be a path", whole.part(0, 1), expected=told)
        return None
    matched = _RANGE.fullmatch(text)
    made = _range(path, whole, matched, own, faults) if matched else _list(path, whole, faults)
    return made if len(faults.found) == before else None


# --- a range ---------------------------------------------------------------------------------------------------------


def _range(
    path: str, whole: Located, matched: re.Match[str], own: Mapping[str, Dimension], faults: Faults
) -> Varying | None:
    parts = [
        _part(whole, matched.start(group), matched.end(group)) for group in (1, 2, 3) if matched[group] is not None
    ]
    read = [_bound(part, own, faults) for part in parts]
    if any(bound is None for bound in read):
        return None
    first, last, *rest = [bound for bound in read if bound is not None]
    unit = last.unit
    _same_unit(parts[0], first, unit, faults)
    if first.value > last.value:
        faults.add("bad-value", "the range ends below its beginning", whole.span, expected="the lesser bound first")
    step = _step(parts[2], rest[0], unit, faults) if rest else _round_step(last.value - first.value)
    if faults.found or step is None:
        return None
    numbers = _numbers(first.value, last.value, step)
    if len(numbers) > MOST_VALUES:
        told = f"these are more than {MOST_VALUES} values"
        faults.add("too-large", told, parts[-1].span, advice="take a longer step")
        return None
    symbol = "" if unit.symbol == "1" else f" {unit.symbol}"
    settings = tuple(
        Setting(Located(f"{show_exact(number)}{symbol}", whole.span, whole.text), number) for number in numbers
    )
    return Varying(path, settings, unit, f"{show_exact(step)}{symbol}" if len(numbers) > 1 else "")


def _part(whole: Located, start: int, end: int) -> Located:
    """A part of the text without the blanks around it."""
    text = whole.text[start:end]
    start += len(text) - len(text.lstrip())
    return Located(text.strip(), whole.part(start, start + max(len(text.strip()), 1)))


def _bound(part: Located, own: Mapping[str, Dimension], faults: Faults) -> Quantity | None:
    read = read_quantity(part, None, own=own, missing_blank=True, faults=faults)
    if read is not None and (read.spread is not None or read.pressure):
        faults.add("bad-value", "a bound is a bare value", part.span, advice="leave out what stands behind the unit")
        return None
    return read


def _same_unit(part: Located, bound: Quantity, unit: Unit, faults: Faults) -> None:
    """The first bound without a unit takes that of the last."""
    if bound.unit.symbol not in ("1", unit.symbol):
        told = f"the bounds are in '{bound.unit.symbol}' and '{unit.symbol}'"
        faults.add("bad-value", told, part.span, advice="write the unit once, behind the last bound")


def _step(part: Located, step: Quantity, unit: Unit, faults: Faults) -> Fraction | None:
    """The step in the unit of the range; of a temperature it is a difference."""
    if step.unit.dimension != unit.dimension or step.unit.power != unit.power:
        told = f"the step is in '{step.unit.symbol}' and the range in '{unit.symbol}'"
        faults.add("wrong-dimension", told, part.span, advice=f"write the step in '{unit.symbol}'")
        return None
    width = step.value * step.unit.factor / unit.factor
    if width <= 0:
        faults.add("bad-value", "the step is not above zero", part.span, expected="a step that leads upwards")
        return None
    if "/" in show_exact(width):
        told = f"this step is no decimal number in '{unit.symbol}'"
        faults.add("bad-value", told, part.span, advice=f"write the step in '{unit.symbol}'")
        return None
    return width


def _round_step(width: Fraction) -> Fraction:
    """The least of 1, 2, 5 times a power of ten with which a range has no more than `MOST_INTERVALS`.

    >>> str(_round_step(Fraction(260))), str(_round_step(Fraction(1, 4))), str(_round_step(Fraction(0)))
    ('20', '1/100', '1')
    """
    if width <= 0:
        return Fraction(1)
    least = width / MOST_INTERVALS
    power = Fraction(1)
    while power > least:
        power /= 10
    while power * 10 <= least:
        power *= 10
    return next(power * factor for factor in (1, 2, 5, 10) if power * factor >= least)


def _numbers(first: Fraction, last: Fraction, step: Fraction) -> list[Fraction]:
    """From the first by steps, and the last in any case; one more than the bound where there are too many."""
    count = min((last - first) // step, MOST_VALUES)
    numbers = [first + index * step for index in range(count + 1)]
    return numbers if numbers[-1] == last else [*numbers, last]


# --- a list ----------------------------------------------------------------------------------------------------------


def _list(path: str, whole: Located, faults: Faults) -> Varying | None:
    settings: list[Setting] = []
    for found in _ITEM.finditer(whole.text):
        part = _part(whole, found.start(), found.end())
        node = _value(part, faults) if part.text else None
        if not part.text:
            faults.add("bad-value", "a value is missing", part.span, expected="PATH=a,b,c or PATH=a..b:step")
        elif isinstance(node, Located):
            settings.append(Setting(node))
        elif node is not None:
            faults.add("bad-value", "a value is one number or word", part.span, advice="write '250 mm,300 mm'")
    if len(settings) > MOST_VALUES:
        faults.add("too-large", f"these are more than {MOST_VALUES} values", whole.span, advice="write fewer values")
    return Varying(path, tuple(settings))


def _value(part: Located, faults: Faults) -> object:
    """A value as `--set` reads it, at its place in the text."""
    try:
        node = parse_yaml(part.text, part.span.file)
    except Refused:
        faults.add("bad-value", "this cannot be read as a value", part.span, expected="PATH=a,b,c or PATH=a..b:step")
        return None
    return Located(node.text, part.span, part.text, node.quoted) if isinstance(node, Located) else node
