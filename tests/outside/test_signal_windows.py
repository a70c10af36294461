"""Signals against numpy on a grid of milliseconds, and margins against the quantitative semantics of always and eventually.

Sources: numpy (repeat, cumsum, flatnonzero) as a second way to compute; G. E. Fainekos and G. J. Pappas, Robustness of
temporal logic specifications for continuous-time signals, Theoretical Computer Science 410 (2009): the robustness of
"always p" is the least robustness of p over time, of "eventually p" the greatest, and of `s <= c` it is `c - s`.
"""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import numpy
import pytest
from small_files import only

from rulecheck.operations.exact import Rational
from rulecheck.operations.samples import (
    Samples,
    base_of,
    duration,
    greatest,
    integral,
    longest,
    multiplied,
    rolling_mean,
    samples_of,
)
from rulecheck.operations.signals import Against, Joint, held_time

SEEDS = range(6)


def record(seed: int, count: int = 120) -> tuple[Any, Any, Samples]:
    """Irregular times in ms, values in tenths, and the same as samples."""
    random = numpy.random.default_rng(seed)
    times = numpy.cumsum(random.integers(1, 25, count))
    values = random.integers(-50, 50, count)
    base = base_of([Fraction(int(time), 1000) for time in times])
    return times, values, samples_of(base, [Fraction(int(value), 10) for value in values])


def held(times: Any, values: Any) -> Any:
    """The value of every millisecond from the first time to the last."""
    return numpy.repeat(values[:-1], numpy.diff(times))


def longest_run(flags: Any) -> int:
    edges = numpy.flatnonzero(numpy.diff(numpy.concatenate(([0], flags.astype(int), [0]))))
    return int(max(edges[1::2] - edges[::2], default=0))


@pytest.mark.parametrize("seed", SEEDS)
def test_times_of_a_condition(seed: int) -> None:
    times, values, samples = record(seed)
    grid = held(times, values)
    for level in (-60, -20, 0, 7, 49):
        flags = [value > Fraction(level, 10) * samples.over for value in samples.values]
        assert duration(samples.base, flags) == Fraction(int((grid > level).sum()), 1000)
        assert longest(samples.base, flags) == Fraction(longest_run(grid > level), 1000)


@pytest.mark.parametrize("seed", SEEDS)
def test_rolling_means_over_every_millisecond(seed: int) -> None:
    times, values, samples = record(seed)
    sums = numpy.concatenate(([0], numpy.cumsum(held(times, values))))
    for window in (1, 13, 40, 200):
        mean = rolling_mean(samples, Fraction(window, 1000))
        assert mean is not None
        means = sums[window:] - sums[:-window]
        assert greatest(mean).rational == Fraction(int(means.max()), window * 10)
        assert min(mean.values) * Fraction(1, mean.over) == Fraction(int(means.min()), window * 10)


@pytest.mark.parametrize("seed", SEEDS)
def test_integrals_and_products_of_two_records(seed: int) -> None:
    times, values, samples = record(seed)
    other_times, other_values, other = record(seed + 100)
    assert integral(samples).rational == Fraction(int(held(times, values).sum()), 10_000)
    start, end = max(times[0], other_times[0]), min(times[-1], other_times[-1])
    one = held(times, values)[start - times[0] : end - times[0]]
    two = held(other_times, other_values)[start - other_times[0] : end - other_times[0]]
    assert integral(multiplied(samples, other)).rational == Fraction(int((one * two).sum()), 100_000)


@pytest.mark.parametrize("seed", SEEDS)
def test_joined_conditions_on_two_records(seed: int) -> None:
    times, values, samples = record(seed)
    other_times, other_values, other = record(seed + 200)
    start, end = max(times[0], other_times[0]), min(times[-1], other_times[-1])
    one = held(times, values)[start - times[0] : end - times[0]]
    two = held(other_times, other_values)[start - other_times[0] : end - other_times[0]]
    for every, flags in ((True, (one > 10) & (two <= 5)), (False, (one > 10) | (two <= 5))):
        condition = Joint((Against(samples, ">", 0), Against(other, "<=", 1)), every)
        for measure, due in (("duration", int(flags.sum())), ("longest", longest_run(flags))):
            found = held_time(measure, condition, 2).exact([Rational(1), Rational(1, 2)])
            assert found == Rational(due, 1000)


@pytest.mark.parametrize("seed", SEEDS)
def test_margins_are_the_robustness_of_always_and_eventually(seed: int) -> None:
    times, values, _ = record(seed, 30)
    rows = ", ".join(f"[{time} ms, {value / 10} V]" for time, value in zip(times, values, strict=True))
    design = f"signals: {{a: {{rows: [{rows}]}}}}\n"
    inputs = "inputs: {signals.a: {kind: signal, unit: V, meaning: One}}\n"
    for condition, robustness in (
        ("peak(signals.a) <= 3 V", min(30 - int(value) for value in values)),
        ("-peak(-signals.a) >= -2 V", min(int(value) + 20 for value in values)),
        ("peak(signals.a) >= 4 V", max(int(value) - 40 for value in values)),
        ("peak(abs(signals.a)) <= 4 V", min(40 - abs(int(value)) for value in values)),
    ):
        finding = only(design, inputs + f'rules:\n  it: {{require: "{condition}"}}\n')
        assert finding.margin is not None
        assert Fraction(finding.margin.exact) == Fraction(robustness, 10)
