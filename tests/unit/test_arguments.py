from fractions import Fraction
from pathlib import Path

import click
import pytest

from rulecheck.arguments import day, deliveries, pair, share


def test_pairs_keep_what_stands_behind_the_first_sign() -> None:
    assert pair(" a.b = x=y ", "PATH=VALUE") == ("a.b", "x=y")


@pytest.mark.parametrize("text", ["", "a", "=3", "a=", " = "])
def test_a_pair_needs_both_sides(text: str) -> None:
    with pytest.raises(ValueError, match="PATH=VALUE"):
        pair(text, "PATH=VALUE")


@pytest.mark.parametrize("text", ["2027-3-1", "20270301", "2027-W09-1", "01.03.2027", "2027-02-30", "٢٠٢٧-03-01", ""])
def test_days_have_one_form(text: str) -> None:
    with pytest.raises(ValueError, match="is not a da"):
        day(text)


def test_shares_are_exact() -> None:
    assert share("0.1") == Fraction(1, 10)
    assert share("12.5%") == Fraction(1, 8)
    assert share("0") == 0


@pytest.mark.parametrize("text", ["-1%", "101%", "1.01", "1e-2", "nan", "1/3", "1" * 30, "5 %%", ""])
def test_other_shares_are_refused(text: str) -> None:
    with pytest.raises(ValueError, match="is not a share"):
        share(text)


def test_each_form_has_the_file_that_follows_it() -> None:
    order = ["form", "output", "form", "form", "output"]
    assert deliveries(["json", "terminal", "json"], ["a", "b"], order) == (
        ("json", Path("a")),
        ("terminal", None),
        ("json", Path("b")),
    )
    assert deliveries([], [], []) == (("terminal", None),)
    assert deliveries([], ["a"], ["output"]) == (("terminal", Path("a")),)


@pytest.mark.parametrize(
    ("forms", "outputs", "order"),
    [
        (["json"], ["a"], ["output", "form"]),
        (["json"], ["a", "b"], ["form", "output", "output"]),
        ([], ["a", "b"], ["output", "output"]),
        (["json", "terminal"], [], ["form", "form"]),
        (["json", "terminal"], ["a", "./a"], ["form", "output", "form", "output"]),
    ],
)
def test_what_does_not_go_together_is_refused(forms: list[str], outputs: list[str], order: list[str]) -> None:
    with pytest.raises(click.UsageError):
        deliveries(forms, outputs, order)
