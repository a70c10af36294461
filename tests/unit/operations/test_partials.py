"""Partial derivatives of every operation: against sympy's own, in floats, arrays and expressions."""

from __future__ import annotations

import math
from fractions import Fraction as F

import numpy
import pytest
import sympy
from operation_samples import CASES, label

from rulecheck.operations.arithmetic import absolute, power, rational_power
from rulecheck.operations.calendar import ordinal
from rulecheck.operations.extremes import maximum, minimum
from rulecheck.operations.roots_and_exponentials import sqrt
from rulecheck.operations.statistics import greatest_where, least_where

# What has jumps or kinks has no derivative that sympy gives in a usable form: central differences there.
STEPPED = {"floor", "ceil", "round", "floor_to", "ceil_to", "round_to", "even_to", "minimum", "maximum"}
CASES_WITH_PARTIALS = [case for case in CASES if case[0].partials is not None and not {"date"} & set(case[0].takes)]


def slopes_by_sympy(operation, sample):
    """The derivatives of the symbolic form, at the sample."""
    symbols = [
        sympy.Symbol(f"x{index}", real=True) if isinstance(value, F) else sympy.true if value else sympy.false
        for index, value in enumerate(sample)
    ]
    form = operation.symbolic(sympy, symbols)
    at = {
        symbol: sympy.Rational(value.numerator, value.denominator)
        for symbol, value in zip(symbols, sample, strict=True)
        if isinstance(value, F)
    }
    return [float(sympy.N(sympy.diff(form, symbol).subs(at).doit(), 20)) if symbol in at else 0.0 for symbol in symbols]


def slopes_by_differences(operation, sample, step=1e-6):
    found = []
    for index, value in enumerate(sample):
        if not isinstance(value, F):
            found.append(0.0)
            continue
        ends = []
        for move in (step, -step):
            moved = [float(other) if isinstance(other, F) else other for other in sample]
            moved[index] += move
            ends.append(float(operation.array(numpy, moved)))
        found.append((ends[0] - ends[1]) / (2 * step))
    return found


def at_a_kink(operation, sample):
    """Where values are equal, or on a jump, there is no derivative to compare with."""
    numbers = [value for value in sample if isinstance(value, F)]
    if operation.name in ("minimum", "maximum"):
        return len(set(numbers)) < len(numbers)
    if operation.name in STEPPED:
        return (2 * numbers[0] / (numbers[1] if len(numbers) == 2 else 1)).denominator == 1
    return False


SMOOTH = [case for case in CASES_WITH_PARTIALS if not at_a_kink(*case)]


@pytest.mark.parametrize(("operation", "sample"), SMOOTH, ids=label)
def test_partials_are_the_derivatives(operation, sample):
    stepped = operation.name in STEPPED
    due = slopes_by_differences(operation, sample) if stepped else slopes_by_sympy(operation, sample)
    floats = [float(value) if isinstance(value, F) else value for value in sample]
    found = operation.partials(math, floats)
    assert len(found) == len(sample)
    assert [float(slope) for slope in found] == pytest.approx(due, rel=1e-7 if stepped else 1e-12, abs=1e-9)


@pytest.mark.parametrize(("operation", "sample"), CASES_WITH_PARTIALS, ids=label)
def test_partials_agree_in_every_space(operation, sample):
    floats = [float(value) if isinstance(value, F) else value for value in sample]
    columns = [numpy.full(2, value) for value in floats]
    exact = [
        sympy.Rational(value.numerator, value.denominator)
        if isinstance(value, F)
        else sympy.true
        if value
        else sympy.false
        for value in sample
    ]
    due = [float(slope) for slope in operation.partials(math, floats)]
    by_arrays = [float(numpy.broadcast_to(slope, 2)[1]) for slope in operation.partials(numpy, columns)]
    by_sympy = [float(sympy.N(slope)) for slope in operation.partials(sympy, exact)]
    assert by_arrays == pytest.approx(due, rel=1e-12, abs=1e-15)
    assert by_sympy == pytest.approx(due, rel=1e-12, abs=1e-15)


def test_every_operation_with_partials_is_compared_away_from_kinks():
    due = {operation.name for operation, _ in CASES_WITH_PARTIALS}
    assert {operation.name for operation, _ in SMOOTH} == due


def test_first_of_equal_operands_binds():
    assert minimum.binds([2.0, 1.0, 1.0]) == 1
    assert maximum.binds([2.0, 1.0, 2.0]) == 0
    assert minimum.partials(math, [2.0, 1.0, 1.0]) == (0.0, 1.0, 0.0)
    found = minimum.partials(numpy, [numpy.array([2.0]), numpy.array([1.0]), numpy.array([1.0])])
    assert [float(slope[0]) for slope in found] == [0.0, 1.0, 0.0]


def test_unknown_numbers_never_bind():
    assert minimum.binds([math.nan, 3.0, 2.0]) == 2
    assert maximum.binds([3.0, math.nan]) == 0


def test_numbers_left_out_never_bind():
    assert least_where.binds([False, -9.0, True, 2.0, True, 1.0]) == 5
    assert greatest_where.binds([False, 9.0, True, 2.0, True, 1.0]) == 3


def test_no_derivative_where_there_is_none():
    assert math.isnan(sqrt.partials(math, [0.0])[0])
    assert math.isnan(power.partials(math, [-2.0, 3.0])[1])
    assert power.partials(math, [-2.0, 3.0])[0] == 12.0
    assert math.isnan(rational_power(F(-1)).partials(math, [0.0])[0])
    assert absolute.partials(math, [0.0]) == (0.0,)


def test_a_date_counts_in_days():
    assert ordinal.partials(math, [740000.0]) == (1.0,)
