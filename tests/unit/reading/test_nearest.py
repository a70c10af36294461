from __future__ import annotations

import pytest

from rulecheck.reading.nearest import nearest

PATHS = ["tyres.front.width", "tyres.rear.width", "tyres.rear.diameter", "dimensions.wheelbase", "masses.tub.mass"]


@pytest.mark.parametrize(
    ("written", "meant"),
    [
        ("tyres.rear.widht", "tyres.rear.width"),
        ("dimension.wheelbase", "dimensions.wheelbase"),
        ("Dimensions.Wheelbase", "dimensions.wheelbase"),
        ("wheelbase", "dimensions.wheelbase"),
        ("rear.width", "tyres.rear.width"),
    ],
)
def test_names_the_nearest(written: str, meant: str) -> None:
    assert nearest(written, PATHS) == f"did you mean '{meant}'?"


@pytest.mark.parametrize("written", ["", "gearbox", "q", "x" * 5_000])
def test_says_nothing_where_nothing_is_near(written: str) -> None:
    assert nearest(written, PATHS) == ""


def test_an_ending_that_two_names_share_is_no_nearest_name() -> None:
    assert nearest("width", ["tyres.front.width", "tyres.rear.width"]) == ""


def test_the_order_of_the_known_names_does_not_matter() -> None:
    assert nearest("b1", ["a1", "c1"]) == nearest("b1", ["c1", "a1"])


def test_never_suggests_the_name_itself() -> None:
    assert nearest("mass", ["mass"]) == ""


def test_many_names_are_searched_by_their_length() -> None:
    known = [f"{'n' * (index % 90)}{index}" for index in range(30_000)] + ["overall_width"]
    assert nearest("overal_width", known) == "did you mean 'overall_width'?"
