"""Uncertainty, stacks, worst cases, probabilities and contributors of a margin."""

from __future__ import annotations

import math

import pytest
from small_files import only

from rulecheck.outcome.spread import SpreadResult


def spread(design: str, rules: str, **options: object) -> SpreadResult:
    """The spread of the rule called `it`."""
    found = only(design, rules, **options).spread
    assert found is not None
    return found


def of(condition: str, design: str, more: str = "", **options: object) -> SpreadResult:
    return spread(design, f"rules:\n  it:\n    require: {condition}\n{more}", **options)


WING = "inputs: {wing.angle: {unit: deg, meaning: Angle}, wing.span: {unit: m, meaning: Span}}\n"
TRACKS = "dimensions: {front_track: 1500 mm ± 1 mm (k=2), rear_track: 1510 mm ± 2 mm (k=2)}\n"
BOTH = "correlations: [{between: [dimensions.front_track, dimensions.rear_track], coefficient: %s}]\n"
SUM = "dimensions.front_track + dimensions.rear_track <= 3020 mm"


@pytest.mark.parametrize(
    ("coefficient", "standard"), [(None, math.sqrt(1.25)), ("0.5", math.sqrt(1.75)), ("1", 1.5), ("-1", 0.5)]
)
def test_correlations_count(coefficient: str | None, standard: float) -> None:
    found = of(SUM, TRACKS + (BOTH % coefficient if coefficient else ""))
    assert found.measured is not None
    assert found.measured.standard.value == pytest.approx(standard, rel=1e-12)
    assert found.measured.expanded.value == pytest.approx(2 * standard, rel=1e-12)
    assert sum(item.share for item in found.contributors) == pytest.approx(1)


def test_contributors_stand_by_their_share_with_slope_and_statement() -> None:
    found = of(SUM, TRACKS)
    assert [(item.path, item.stated, item.slope) for item in found.contributors] == [
        ("dimensions.rear_track", "± 2 mm (k=2)", "-1 mm/mm"),
        ("dimensions.front_track", "± 1 mm (k=2)", "-1 mm/mm"),
    ]
    assert [item.share for item in found.contributors] == pytest.approx([0.8, 0.2])
    assert [item.contribution.exact for item in found.contributors] == ["1", "0.5"]


def test_drawing_tolerances_stack_by_worst_case_and_by_root_of_squares() -> None:
    car = "dimensions: {front_track: 1500 mm +3/-1 mm, rear_track: 1510 mm +4/-4 mm}\n"
    found = of(SUM, car)
    assert found.measured is None
    assert found.probability is None
    assert found.stack is not None
    assert found.worst_case is not None
    assert found.stack.at_worst.exact == "3"
    assert found.worst_case.proved
    assert found.worst_case.margin is not None
    assert found.worst_case.margin.exact == "3"
    middle, root = 10 - 1, math.sqrt(2**2 + 4**2)
    assert found.stack.low.value == pytest.approx(middle - root)
    assert found.stack.high.value == pytest.approx(middle + root)
    assert [(item.share, item.share_of_squares) for item in found.contributors] == [
        (pytest.approx(4 / 6), pytest.approx(16 / 20)),
        (pytest.approx(2 / 6), pytest.approx(4 / 20)),
    ]


def test_the_two_kinds_are_kept_apart() -> None:
    found = of(SUM, "dimensions: {front_track: 1500 mm +1/-1 mm, rear_track: 1510 mm ± 2 mm (k=2)}\n")
    assert found.measured is not None
    assert found.measured.standard.exact == "1"
    assert found.stack is not None
    assert found.stack.at_worst.exact == "9"
    assert found.worst_case is not None
    assert found.worst_case.margin is not None
    assert (found.worst_case.margin.exact, found.worst_case.of) == ("7", "tolerances and stated uncertainties")
    assert "probabilities take drawing tolerances at their stated value" in found.notes


def test_both_sides_of_a_range_count_in_the_probability() -> None:
    found = of("1490 mm <= dimensions.front_track <= 1505 mm", "dimensions: {front_track: 1500 mm ± 20 mm (k=2)}\n")
    assert found.probability is not None
    assert found.probability.conforms is not None
    phi = lambda z: 0.5 * math.erfc(-z / math.sqrt(2))  # noqa: E731
    assert found.probability.conforms == pytest.approx(phi(0.5) - phi(-1.0))


def test_the_scrutineers_instrument_and_leniency() -> None:
    more = "    scrutineer: {uncertainty: 3 mm, coverage: 3, tolerance: 2 mm}\n"
    found = of("dimensions.front_track <= 1501 mm", TRACKS, more)
    assert found.probability is not None
    both = math.sqrt(0.5**2 + 1.0**2)
    assert found.probability.found_conforming == pytest.approx(0.5 * math.erfc(-3 / both / math.sqrt(2)))
    assert found.probability.scrutineer == "instrument ± 3 mm (k=3), leniency 2 mm"
    alone = of("dimensions.front_track <= 1501 mm", "dimensions: {front_track: 1500 mm}\n", more)
    assert alone.probability is not None
    assert alone.probability.conforms is None
    assert alone.probability.found_conforming == pytest.approx(0.5 * math.erfc(-3 / math.sqrt(2)))


def test_at_a_kink_the_uncertainty_is_a_bound_and_there_is_no_probability() -> None:
    car = "dimensions: {front_track: 1500 mm ± 2 mm (k=2), rear_track: 1500 mm ± 2 mm (k=2)}\n"
    found = of("abs(dimensions.front_track - dimensions.rear_track) <= 5 mm", car)
    assert found.measured is not None
    assert found.measured.bound
    assert found.probability is None
    assert found.measured.standard.value == pytest.approx(math.sqrt(2), rel=1e-6)
    assert found.worst_case is not None
    assert found.worst_case.margin is not None
    assert found.worst_case.margin.value == pytest.approx(1, abs=1e-3)


def test_what_cancels_plays_no_part() -> None:
    found = only(
        "dimensions: {wheelbase: 2700 mm ± 1 mm, overall_length: 4000 mm}\n",
        "rules:\n  it: {require: dimensions.overall_length + dimensions.wheelbase - dimensions.wheelbase <= 5 m}\n",
    )
    assert found.spread is None


def test_the_spread_of_a_point_is_that_of_each_coordinate() -> None:
    car = "points: {nose: {value: 0 0 100 mm, uncertainty: 1 mm, coverage: 2}, tail: {x: 4000 mm ± 1 mm, y: 0 mm, z: 0 mm}}\n"
    found = of("points.nose.z <= 110 mm", car)
    assert found.measured is not None
    assert found.measured.expanded.exact == "1"
    assert [item.path for item in found.contributors] == ["points.nose.z"]
    tail = of("points.tail.x <= 4100 mm", car)
    assert [item.stated for item in tail.contributors] == ["± 1 mm"]


def test_a_batch_that_is_weighed_once_adds_linearly() -> None:
    car = "masses: {wheel: {mass: 10 kg ± 0.2 kg (k=2), quantity: 4, at: 0 0 0 mm}}\n"
    found = of("mass.total <= 50 kg", car)
    assert found.measured is not None
    assert found.measured.standard.value == pytest.approx(0.4)


def test_angles_carry_pi_through() -> None:
    found = spread("wing: {angle: 8 deg ± 0.5 deg (k=2)}\n", WING + "rules: {it: {require: wing.angle <= 10 deg}}\n")
    assert found.measured is not None
    assert found.measured.expanded.exact == "0.5"


def test_trials_agree_where_the_margin_is_straight_and_part_where_it_is_not() -> None:
    straight = of(SUM, TRACKS + BOTH % "-0.5", trials=1_000_000).trials
    assert straight is not None
    assert straight.agrees is True
    assert straight.standard.value == pytest.approx(math.sqrt(0.75), rel=0.01)
    rules = WING + "rules: {it: {require: wing.span * wing.span <= 3 m^2}}\n"
    bent = spread("wing: {span: 0.1 m ± 0.2 m (k=2)}\n", rules, trials=200_000).trials
    assert bent is not None
    assert bent.agrees is False
    assert "part" in bent.note


def test_trials_repeat_to_the_last_figure() -> None:
    assert of(SUM, TRACKS, trials=20_000).trials == of(SUM, TRACKS, trials=20_000).trials


def test_trials_that_doubles_cannot_hold_are_left_out() -> None:
    tiny = "wing: {span: 1e-300 m ± 1e-300 m}\n"
    rules = WING + "rules: {it: {require: 1 m^2 / wing.span <= 10 m}}\n"
    assert spread(tiny, rules, trials=10_000).trials is None
