"""Slopes of curves and heights between them against numpy (diff, interp) on random curves."""

from __future__ import annotations

from typing import Any

import numpy
import pytest
from small_files import check_texts, findings

INPUTS = """\
inputs:
  rig.a: {kind: curve, over: m, unit: N, meaning: One}
  rig.b: {kind: curve, over: m, unit: N, meaning: Another}
"""


def rows(keys: Any, values: Any) -> str:
    return ", ".join(f"[{key} m, {value} N]" for key, value in zip(keys, values, strict=True))


@pytest.mark.parametrize("seed", range(8))
def test_random_curves(seed: int) -> None:
    random = numpy.random.default_rng(seed)
    keys = [numpy.cumsum(random.integers(1, 9, 12)) for _ in range(2)]
    values = [random.integers(-40, 40, 12) for _ in range(2)]
    start, end = int(max(keys[0][0], keys[1][0])), int(min(keys[0][-1], keys[1][-1]))
    design = f"rig:\n  a: {{rows: [{rows(keys[0], values[0])}]}}\n  b: {{rows: [{rows(keys[1], values[1])}]}}\n"
    span = f"{start} m, {end} m"
    ruleset = INPUTS + (
        "rules:\n"
        f'  over: {{require: "over(rig.a, rig.b, {span}) >= 1 N"}}\n'
        f'  steep: {{require: "slope(rig.a, {span}) <= 1 N/m"}}\n'
        f'  fall: {{require: "slope(rig.a, {span}) >= 1 N/m"}}\n'
        "  rising: {require: rising(rig.b)}\n"
    )
    found = findings(check_texts(design, ruleset))
    # Both curves have their rows at whole metres: a grid of tenths holds every place where the least height can be.
    grid = numpy.linspace(start, end, 10 * (end - start) + 1)
    heights = numpy.interp(grid, keys[0], values[0]) - numpy.interp(grid, keys[1], values[1])
    slopes = numpy.diff(values[0]) / numpy.diff(keys[0])
    taken = slopes[(keys[0][:-1] < end) & (keys[0][1:] > start)]
    for name, due in (("over", heights.min() - 1), ("steep", 1 - taken.max()), ("fall", taken.min() - 1)):
        margin = found[name].margin
        assert margin is not None
        assert margin.value == pytest.approx(due, abs=1e-9)
    assert (found["rising"].verdict == "complies") == bool((numpy.diff(values[1]) > 0).all())
