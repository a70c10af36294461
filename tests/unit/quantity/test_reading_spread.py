from __future__ import annotations

from fractions import Fraction

import pytest

from rulecheck.diagnostics import Faults, Span
from rulecheck.quantity.quantity import Tolerance, Uncertainty
from rulecheck.quantity.reading_values import read_quantity
from rulecheck.reading.nodes import Located


def spread_of(text: str) -> tuple[Uncertainty | Tolerance | None, list[tuple[str, str]]]:
    faults = Faults()
    where = Located(text, Span("a.yaml", 0, len(text), 1, 1))
    found = read_quantity(where, None, faults=faults)
    places = [(item.code, text[item.span.start : item.span.end]) for item in faults.found if item.span]
    return (found.spread if found else None), places


def test_limits_without_a_coverage_factor_are_rectangular() -> None:
    assert spread_of("5 mm ± 1 mm") == (Uncertainty(Fraction(1), None, "rectangular"), [])


def test_with_a_coverage_factor_the_shape_is_normal() -> None:
    assert spread_of("5 mm ± 1 mm (k=1.96)") == (Uncertainty(Fraction(1), Fraction("1.96"), "normal"), [])


def test_a_spread_is_kept_in_the_unit_of_the_value() -> None:
    assert spread_of("1 in ± 0.254 mm")[0] == Uncertainty(Fraction(1, 100))
    assert spread_of("20 degC ± 0.9 degF")[0] == Uncertainty(Fraction(1, 2))
    assert spread_of("90 deg ± 0.25 turn")[0] == Uncertainty(Fraction(90))
    assert spread_of("-40 kg ± 5 %")[0] == Uncertainty(Fraction(2))
    assert spread_of("40 % ± 5 %")[0] == Uncertainty(Fraction(5))


@pytest.mark.parametrize(
    ("text", "code", "part"),
    [
        ("5 mm ± 1 kg", "wrong-dimension", "kg"),
        ("7 deg ± 0.01 rad", "bad-value", "rad"),
        ("20 degC ± 5 %", "bad-value", "%"),
        ("5 mm ± -1 mm", "bad-value", "-1"),
        ("5 mm ±", "bad-value", "±"),
        ("5 mm ± (k=2)", "bad-value", "±"),
        ("5 mm (k=2)", "bad-value", "(k=2)"),
        ("5 mm ± 1 mm (k=0)", "bad-value", "(k=0)"),
        ("5 mm ± 1 mm (k=2", "bad-value", "(k=2"),
        ("5 mm ± 1 mm (k=-2)", "bad-value", "(k=-2)"),
        ("5 mm ± 1,5 mm", "bad-number", "1,5"),
        ("5 mm ± 1 xx", "unknown-unit", "xx"),
        ("5 mm -2/+0 mm", "bad-value", "-2/+0"),
        ("5 mm +0/2 mm", "bad-value", "+0/2"),
        ("5 mm +0/-02 mm", "bad-number", "-02"),
        ("5 mm +0/-2 kg", "wrong-dimension", "kg"),
        ("5 mm ± 1 mm +0/-2 mm", "bad-value", "+0/-2"),
    ],
)
def test_faults_of_a_spread_point_at_it(text: str, code: str, part: str) -> None:
    spread, faults = spread_of(text)
    assert spread is None
    assert faults[0] == (code, part)
