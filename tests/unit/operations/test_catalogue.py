"""Every operation through every reader: exact, balls, arrays, symbolic; and all of its facts are there."""

from __future__ import annotations

import re
from fractions import Fraction as F

import numpy
import pytest
import sympy
from operation_samples import CASES, POWERS, SAMPLES, label

from rulecheck.operations import arithmetic
from rulecheck.operations.catalogue import CATALOGUE
from rulecheck.operations.exact import Ball, PiNumber, Rational, from_fraction, precision, to_ball
from rulecheck.operations.operation import UNDECIDED, DimensionFault
from rulecheck.operations.script_library import SCRIPT_LIBRARY
from rulecheck.quantity.dimension import CALENDAR, LENGTH, MASS, PURE

ALL = [*CATALOGUE.values(), *POWERS]


def exact_of(value):
    return from_fraction(F(value)) if isinstance(value, (F, int)) and not isinstance(value, bool) else value


def ball_of(value):
    """A ball with some width, so that no rule can lean on an exact midpoint."""
    if isinstance(value, (F, int)) and not isinstance(value, bool):
        return to_ball(from_fraction(F(value))) + Ball(0, 1e-25)
    return value


def number_of(found):
    if isinstance(found, (bool, numpy.bool_)):
        return bool(found)
    if isinstance(found, PiNumber):
        return float(found.to_ball().mid())
    return float(found.mid()) if isinstance(found, Ball) else float(found)


def expected(operation, sample):
    """By the exact rule, else by the ball rule."""
    values = [exact_of(value) for value in sample]
    found = operation.exact(values)
    return number_of(operation.ball(values) if found is None else found)


def test_every_operation_has_samples():
    assert set(SAMPLES) == set(CATALOGUE)


def test_names_are_unique_and_stand_in_their_family():
    assert CATALOGUE["abs"] is arithmetic.absolute
    assert len({operation.name for operation in ALL}) == len(ALL)
    assert all(name == operation.name for name, operation in CATALOGUE.items())


@pytest.mark.parametrize(("operation", "sample"), CASES, ids=label)
def test_arrays_agree_with_exact(operation, sample):
    columns = [
        numpy.full(3, float(value)) if isinstance(value, (F, int)) and not isinstance(value, bool) else value
        for value in sample
    ]
    found = operation.array(numpy, columns)
    for lane in numpy.broadcast_to(numpy.asarray(found), 3):
        assert number_of(lane) == pytest.approx(expected(operation, sample), rel=1e-12, abs=1e-15)


@pytest.mark.parametrize(("operation", "sample"), CASES, ids=label)
def test_symbolic_agrees_with_exact(operation, sample):
    values = [
        sympy.Rational(value.numerator, value.denominator)
        if isinstance(value, (F, int)) and not isinstance(value, bool)
        else (sympy.true if value else sympy.false)
        if isinstance(value, bool)
        else value
        for value in sample
    ]
    found = operation.symbolic(sympy, values)
    number = bool(found) if operation.gives == "flag" else float(sympy.N(found, 20))
    assert number == pytest.approx(expected(operation, sample), rel=1e-14, abs=1e-17)


@pytest.mark.parametrize(("operation", "sample"), CASES, ids=label)
def test_balls_hold_the_exact_value(operation, sample):
    before = precision.prec
    precision.prec = 128
    try:
        found = operation.ball([ball_of(value) for value in sample])
        if found is UNDECIDED:
            assert_undecided_is_due(operation, sample)
        elif isinstance(found, (bool, Rational)):
            assert number_of(found) == expected(operation, sample)
        else:
            value = operation.exact([exact_of(value) for value in sample])
            if value is not None:
                assert found.overlaps(to_ball(value))
            assert float(found.mid()) == pytest.approx(expected(operation, sample), rel=1e-12, abs=1e-15)
    finally:
        precision.prec = before


def assert_undecided_is_due(operation, sample):
    """Balls cannot tell equal numbers apart, nor which side of a jump they are on, nor handle dates and texts."""
    numbers = [value for value in sample if isinstance(value, F)]
    jump = operation.name in ("floor", "ceil", "round", "floor_to", "ceil_to", "round_to", "even_to")
    if jump:
        ratio = numbers[0] / (numbers[1] if len(numbers) == 2 else 1)
        assert (2 * ratio).denominator == 1
    elif operation.name in ("at_most", "below", "equal"):
        assert numbers[0] == numbers[1]
    elif operation.name == "power":
        assert numbers[0] <= 0
    else:
        assert {"text", "date"} & {*operation.takes, operation.gives}


@pytest.mark.parametrize("operation", ALL, ids=label)
def test_facts_are_complete(operation):
    assert operation.meaning
    assert operation.takes
    if operation.many:
        assert len(operation.takes) == operation.repeats
        assert f"const {operation.script} = " in SCRIPT_LIBRARY
    else:
        places = set(re.findall(r"\{(\d)\}", operation.script))
        assert places == {str(index) for index in range(len(operation.takes))}
    if operation.form == "infix":
        assert operation.sign
        assert operation.precedence < 100
    if operation.gives == "number":
        assert operation.partials is not None
    else:
        assert operation.partials is None
    assert (operation.binds is not None) == (operation.sign in ("min", "max"))


@pytest.mark.parametrize("operation", ALL, ids=label)
def test_scripts_call_functions_that_there_are(operation):
    for called in re.findall(r"(?<![\w.])([a-z_0-9]+)\(", operation.script):
        assert f"const {called} = " in SCRIPT_LIBRARY


@pytest.mark.parametrize("operation", ALL, ids=label)
def test_arrays_never_warn_on_masked_lanes(operation):
    """Lanes with nan, zero and wild values; warnings are errors here."""
    wild = numpy.array([numpy.nan, 0.0, -1.0, 1e300, -1e300, numpy.inf])
    if "text" in operation.takes:
        columns = [numpy.array(["a", "b"] * 3)] * 2
    else:
        takes = operation.takes * (3 if operation.many else 1)
        columns = [wild > 0 if sort == "flag" else wild for sort in takes]
    assert numpy.shape(operation.array(numpy, columns)) == (6,)


@pytest.mark.parametrize(
    "name", ["add", "subtract", "total", "minimum", "maximum", "at_most", "below", "equal", "atan2", "floor_to"]
)
def test_unlike_dimensions_are_refused(name):
    with pytest.raises(DimensionFault, match=r"\[m\] and \[kg\] cannot be"):
        CATALOGUE[name].dimension([LENGTH, MASS])


@pytest.mark.parametrize("name", ["exp", "ln", "log10", "sin", "asin", "tanh", "floor", "round"])
def test_pure_numbers_are_asked_for(name):
    assert CATALOGUE[name].dimension([PURE]) == PURE
    with pytest.raises(DimensionFault, match=rf"{name} takes a pure number, not \[m\]"):
        CATALOGUE[name].dimension([LENGTH])


def test_dimensions_of_results():
    assert CATALOGUE["multiply"].dimension([LENGTH, MASS]) == LENGTH * MASS
    assert CATALOGUE["divide"].dimension([LENGTH, MASS]) == LENGTH / MASS
    assert CATALOGUE["sqrt"].dimension([LENGTH**2]) == LENGTH
    assert arithmetic.rational_power(F(-3, 2)).dimension([LENGTH**2]) == LENGTH**-3
    assert CATALOGUE["least_where"].dimension([PURE, LENGTH, PURE, LENGTH]) == LENGTH
    assert CATALOGUE["round_to"].dimension([LENGTH, LENGTH]) == LENGTH
    assert CATALOGUE["atan2"].dimension([LENGTH, LENGTH]) == PURE
    assert CATALOGUE["ordinal"].dimension([PURE]) == CALENDAR
    with pytest.raises(DimensionFault, match="a date plus days takes"):
        CATALOGUE["add_days"].dimension([PURE, PURE])
    with pytest.raises(DimensionFault):
        CATALOGUE["total_where"].dimension([PURE, LENGTH, PURE, MASS])
