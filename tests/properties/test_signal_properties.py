"""What must hold of signals whatever the samples are: splitting a sample, other units, parts that make the whole."""

from __future__ import annotations

from fractions import Fraction

from hypothesis import given
from hypothesis import strategies as st
from small_files import only

from rulecheck.operations.exact import Rational
from rulecheck.operations.samples import (
    Samples,
    added,
    base_of,
    greatest,
    integral,
    linear,
    rolling_mean,
    samples_of,
    within,
)
from rulecheck.operations.signals import Against, held_time

FRACTIONS = st.fractions(min_value=-50, max_value=50, max_denominator=12)
STEPS = st.fractions(min_value=Fraction(1, 100), max_value=2, max_denominator=100)


@st.composite
def records(draw: st.DrawFn) -> Samples:
    steps = draw(st.lists(STEPS, min_size=1, max_size=12))
    times = [sum(steps[:index], Fraction(0)) for index in range(len(steps) + 1)]
    return samples_of(base_of(times), [draw(FRACTIONS) for _ in times])


def pairs(samples: Samples) -> list[tuple[Fraction, Fraction]]:
    base = samples.base
    return [
        (Fraction(tick, base.per), Fraction(value, samples.over))
        for tick, value in zip(base.ticks, samples.values, strict=True)
    ]


def split(samples: Samples, place: int) -> Samples:
    """The same signal with one sample more, of the value that holds there."""
    rows = pairs(samples)
    index = place % (len(rows) - 1)
    rows.insert(index + 1, ((rows[index][0] + rows[index + 1][0]) / 2, rows[index][1]))
    return samples_of(base_of([time for time, _ in rows]), [value for _, value in rows])


def time_above(samples: Samples, level: Fraction, measure: str = "duration", order: str = ">") -> Fraction:
    condition = Against(samples, order, 0)  # type: ignore[arg-type]
    found = held_time(measure, condition, 1).exact([Rational(level.numerator, level.denominator)])
    return Fraction(int(found.p), int(found.q))


@given(records(), st.integers(0, 50), FRACTIONS, STEPS)
def test_a_sample_split_in_two_changes_nothing(samples: Samples, place: int, level: Fraction, window: Fraction) -> None:
    parted = split(samples, place)
    assert greatest(parted) == greatest(samples)
    assert integral(parted) == integral(samples)
    for measure in ("duration", "longest"):
        assert time_above(parted, level, measure) == time_above(samples, level, measure)
    one, two = rolling_mean(samples, window), rolling_mean(parted, window)
    assert (one is None) == (two is None)
    if one is not None and two is not None:
        assert greatest(one) == greatest(two)


@given(records(), FRACTIONS)
def test_a_condition_and_its_opposite_make_the_record(samples: Samples, level: Fraction) -> None:
    for order, opposite in ((">", "<="), (">=", "<"), ("==", "!=")):
        above, below = time_above(samples, level, order=order), time_above(samples, level, order=opposite)
        assert above + below == samples.base.length
    assert time_above(samples, level, "longest") <= time_above(samples, level)


@given(records(), FRACTIONS, st.fractions(min_value=Fraction(1, 9), max_value=9, max_denominator=9))
def test_a_scale_on_both_sides_changes_no_time(samples: Samples, level: Fraction, scale: Fraction) -> None:
    scaled = linear(samples, scale, Fraction(1, 3))
    assert time_above(scaled, level * scale + Fraction(1, 3)) == time_above(samples, level)


@given(records(), records())
def test_sums_are_of_both(left: Samples, right: Samples) -> None:
    both = added(left, right)
    assert both is not None
    end = Fraction(both.base.ticks[-1], both.base.per)
    parts = (within(left, Fraction(0), end), within(right, Fraction(0), end))
    assert integral(both).rational == sum(integral(part).rational for part in parts)
    nothing = added(left, left, -1)
    assert nothing is not None
    assert nothing.is_zero


@given(records(), STEPS)
def test_a_mean_stays_between_the_samples(samples: Samples, window: Fraction) -> None:
    mean = rolling_mean(samples, window)
    assert (mean is None) == (window > samples.base.length)
    if mean is not None:
        assert greatest(mean).rational <= greatest(samples).rational
        assert all(value >= min(value for _, value in pairs(samples)) for _, value in pairs(mean))


def test_units_of_log_and_rule_change_nothing() -> None:
    inputs = "inputs: {signals.a: {kind: signal, unit: UNIT, meaning: One}}\n"
    rule = 'rules:\n  it: {require: "longest(signals.a > LEVEL) <= LIMIT"}\n'
    told = set()
    for unit, level, rows, limit in (
        ("V", "2 V", "[0 s, 1 V], [1 s, 3 V], [3 s, 2 V]", "4 s"),
        ("mV", "2000 mV", "[0 min, 1 V], [1000 ms, 3000 mV], [3 s, 2 V]", "4000 ms"),
        ("kV", "2e-3 kV", "[5 s, 1 V], [6 s, 3 V], [8 s, 0.002 kV]", "4 s"),
    ):
        ruleset = (inputs + rule).replace("UNIT", unit).replace("LEVEL", level).replace("LIMIT", limit)
        finding = only(f"signals: {{a: {{rows: [{rows}]}}}}\n", ruleset)
        assert finding.margin is not None
        told.add((finding.verdict, finding.relative_margin))
    assert told == {("complies", 0.5)}
