"""Amounts, cases and verdicts in the words that the terminal form uses."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from decimal import ROUND_DOWN, Context, Decimal, InvalidOperation

from rulecheck.outcome.results import Amount

_DOWN = Context(prec=4, rounding=ROUND_DOWN)


def short(amount: Amount | None) -> str:
    """An amount for a narrow column: four figures, cut and not rounded, so that no room is promised that is not there.

    A bound is left out: the figures before it are those that it leaves sure.

    >>> short(Amount("0.00935039", "in")), short(Amount("13.66", "kg")), short(Amount("123456", "mm"))
    ('0.00935 in', '13.66 kg', '123456 mm')
    >>> short(Amount("69.265 ± 0.002", "s"))
    '69.26 s'
    """
    if amount is None:
        return ""
    return str(Amount(_four_figures(amount.shown.partition(" ±")[0]), amount.unit))


def _four_figures(shown: str) -> str:
    try:
        number = Decimal(shown)
    except InvalidOperation:
        return shown
    if not number.is_finite() or abs(number) >= 1000 or number.adjusted() < -6:
        return shown
    return f"{_DOWN.plus(number).normalize():f}"


def percent(share: float | None) -> str:
    """A relative margin in percent with two or three figures, cut and not rounded.

    >>> percent(0.02047), percent(-0.0034), percent(0.166), percent(1.4), percent(None)
    ('2.0 %', '-0.34 %', '16 %', '140 %', '')
    """
    if share is None:
        return ""
    size = Decimal(repr(share)) * 100
    if size == 0:
        return "0 %"
    places = 0 if abs(size) >= 10 else 1 if abs(size) >= 1 else 2
    if abs(size) >= 100_000:
        return f"{size:.0e} %"
    cut = size.quantize(Decimal(1).scaleb(-places), rounding=ROUND_DOWN)
    return f"{cut} %" if cut else f"{'-' if size < 0 else ''}0.00 %"


def state_words(state: Mapping[str, str]) -> str:
    """The case in which a margin arises.

    >>> state_words({"fuel": "empty", "driver": "heavy"})
    'fuel empty, driver heavy'
    """
    return ", ".join(f"{axis} {name}" for axis, name in state.items())


def at_words(point: Mapping[str, Amount]) -> str:
    """The point of an envelope at which a margin arises.

    >>> at_words({"vehicle.speed": Amount("320", "km/h")})
    'at vehicle.speed 320 km/h'
    """
    told = ", ".join(f"{path} {value}" for path, value in point.items())
    return f"at {told}" if told else ""


def counted(number: int, singular: str, plural: str = "") -> str:
    """A number with its noun.

    >>> counted(1, "rule"), counted(3, "rule")
    ('1 rule', '3 rules')
    """
    return f"{number} {singular if number == 1 else plural or singular + 's'}"


def common_unit(values: Sequence[Amount]) -> str:
    """The unit of values that are all numbers in one unit, else nothing; `1` for pure numbers.

    >>> common_unit([Amount("1", "mm", 1.0), Amount("2", "mm", 2.0)]), common_unit([Amount("rear", "")])
    ('mm', '')
    """
    units = {value.unit if value.value is not None else "" for value in values}
    return next(iter(units)) if len(units) == 1 else ""


def with_unit(name: str, unit: str) -> str:
    """The head of a column or an axis.

    >>> with_unit("vehicle.speed", "km/h"), with_unit("aero.downforce_to_drag", "1")
    ('vehicle.speed [km/h]', 'aero.downforce_to_drag')
    """
    return name if unit in ("", "1") else f"{name} [{unit}]"


def folded(name: str, room: int) -> str:
    """A name for a narrow column: what does not fit goes on behind a dot or an underscore, set apart by a blank.

    >>> folded("aero.coasting_rear_downforce_area", 30), folded("mass.x", 30)
    ('aero.coasting_rear_downforce_ area', 'mass.x')
    """
    if len(name) <= room:
        return name
    cut = max(name.rfind(".", 0, room), name.rfind("_", 0, room)) + 1
    return f"{name[:cut]} {name[cut:]}" if 0 < cut < len(name) else name
