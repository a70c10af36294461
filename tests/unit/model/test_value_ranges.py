"""A path with its values, as the command line writes them, and what is said of a text that is none."""

from __future__ import annotations

from fractions import Fraction
from itertools import pairwise

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.diagnostics import Faults
from rulecheck.model.value_ranges import MOST_INTERVALS, MOST_VALUES, read_varying


def texts(text: str) -> list[str]:
    faults = Faults()
    found = read_varying("vehicle.speed", text, {}, faults)
    assert found is not None, faults.found
    return [setting.text.text for setting in found.settings]


def fault(text: str) -> str:
    faults = Faults()
    assert read_varying("vehicle.speed", text, {}, faults) is None
    (found,) = faults.found
    return str(found)


@pytest.mark.parametrize(
    ("text", "values"),
    [
        ("60..100km/h:20km/h", ["60 km/h", "80 km/h", "100 km/h"]),
        ("60 km/h..100 km/h:20 km/h", ["60 km/h", "80 km/h", "100 km/h"]),
        ("60km/h .. 100km/h : 20km/h", ["60 km/h", "80 km/h", "100 km/h"]),
        ("1.2..1.5:0.1", ["1.2", "1.3", "1.4", "1.5"]),
        ("-2..2deg:2deg", ["-2 deg", "0 deg", "2 deg"]),
        ("50..55%:2%", ["50 %", "52 %", "54 %", "55 %"]),
        ("10..20degC:5K", ["10 degC", "15 degC", "20 degC"]),
        ("0..36km/h:5m/s", ["0 km/h", "18 km/h", "36 km/h"]),
        ("7..7mm", ["7 mm"]),
        ("1e3..2e3 mm:500 mm", ["1000 mm", "1500 mm", "2000 mm"]),
        ("front,rear", ["front", "rear"]),
        ("250 mm, 300mm", ["250 mm", "300mm"]),
        ('"one, two",three', ["one, two", "three"]),
        ("yes", ["yes"]),
        ("2027-03-01,2027-04-01", ["2027-03-01", "2027-04-01"]),
    ],
)
def test_values(text: str, values: list[str]) -> None:
    assert texts(text) == values


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("60..", "--vary vehicle.speed:1:5: bad-value: a value is missing; expected a number with its unit; write a "
         "value such as '1900 mm'"),
        ("..60km/h", "--vary vehicle.speed:1:1: bad-value: a value is missing; expected a number with its unit; write a "
         "value such as '1900 mm'"),
        ("60..80km/h:", "--vary vehicle.speed:1:12: bad-value: a value is missing; expected a number with its unit; "
         "write a value such as '1900 mm'"),
        ("80..60km/h", "--vary vehicle.speed:1:1: bad-value: the range ends below its beginning; expected the lesser "
         "bound first"),
        ("60..80km/h:-5km/h", "--vary vehicle.speed:1:12: bad-value: the step is not above zero; expected a step that "
         "leads upwards"),
        ("60..80km/h:5mm", "--vary vehicle.speed:1:12: wrong-dimension: the step is in 'mm' and the range in 'km/h'; "
         "write the step in 'km/h'"),
        ("60..80km/h:5", "--vary vehicle.speed:1:12: wrong-dimension: the step is in '1' and the range in 'km/h'; "
         "write the step in 'km/h'"),
        ("0..90deg:0.1rad", "--vary vehicle.speed:1:10: wrong-dimension: the step is in 'rad' and the range in 'deg'; "
         "write the step in 'deg'"),
        ("0..30m/s:1km/h", "--vary vehicle.speed:1:10: bad-value: this step is no decimal number in 'm/s'; write the "
         "step in 'm/s'"),
        ("60m/s..80km/h", "--vary vehicle.speed:1:1: bad-value: the bounds are in 'm/s' and 'km/h'; write the unit "
         "once, behind the last bound"),
        ("60..80 km/h ± 1 km/h", "--vary vehicle.speed:1:5: bad-value: a bound is a bare value; leave out what stands "
         "behind the unit"),
        ("60..80kmh", "--vary vehicle.speed:1:7: unknown-unit: no unit is written 'kmh'; write 'km/h'"),
        ("0..9000km/h:1km/h", "--vary vehicle.speed:1:13: too-large: these are more than 1000 values; take a longer "
         "step"),
        ("60,,80", "--vary vehicle.speed:1:4: bad-value: a value is missing; expected PATH=a,b,c or PATH=a..b:step"),
        ("60,", "--vary vehicle.speed:1:4: bad-value: a value is missing; expected PATH=a,b,c or PATH=a..b:step"),
        ("{a: b}", "--vary vehicle.speed:1:1: bad-value: a value is one number or word; write '250 mm,300 mm'"),
        ("*a,b", "--vary vehicle.speed:1:1: bad-value: this cannot be read as a value; expected PATH=a,b,c or "
         "PATH=a..b:step"),
    ],
)  # fmt: skip
def test_what_is_said(text: str, said: str) -> None:
    assert fault(text) == said


def test_a_path_is_a_name() -> None:
    faults = Faults()
    assert read_varying("3x", "1..2", {}, faults) is None
    assert [item.code for item in faults.found] == ["bad-name"]


_DECIMALS = st.decimals(min_value=-10_000, max_value=10_000, places=3).map(Fraction)


@settings(deadline=None)
@given(_DECIMALS, _DECIMALS)
def test_a_range_without_a_step_has_few_round_steps(one: Fraction, other: Fraction) -> None:
    low, high = min(one, other), max(one, other)
    found = read_varying("x", f"{float(low)!r}..{float(high)!r} mm", {}, Faults())
    assert found is not None
    numbers = [setting.number for setting in found.settings]
    assert (numbers[0], numbers[-1]) == (low, high)
    assert len(numbers) <= MOST_INTERVALS + 2
    steps = [after - before for before, after in pairwise(numbers)]
    assert all(step == steps[0] for step in steps[:-1])
    if len(steps) > 1:
        digits = str(steps[0].numerator if steps[0].numerator != 1 else steps[0].denominator).rstrip("0")
        assert digits in ("1", "2", "5")
        assert len(steps) >= 10


@settings(deadline=None)
@given(_DECIMALS, st.integers(1, 1000), st.integers(0, MOST_VALUES - 1))
def test_steps_are_exact(first: Fraction, thousandths: int, count: int) -> None:
    step = Fraction(thousandths, 1000)
    last = first + count * step
    found = read_varying("x", f"{float(first)!r}..{float(last)!r}mm:{float(step)!r}mm", {}, Faults())
    assert found is not None
    assert [setting.number for setting in found.settings] == [first + index * step for index in range(count + 1)]
