"""Samples and equivalence: means and shares of a sample, its size as a condition, every part of a joined rule shown."""

from __future__ import annotations

import pytest
from small_files import check_texts, findings, margin

INPUTS = (
    "inputs:\n  samples: {kind: collection, meaning: Rivets of one batch, element: {mass: {unit: gram, meaning: Mass}, good: {kind: flag, meaning: Passed}}}\n"
    "  strap: {kind: collection, meaning: Straps, element: {wall: {unit: mm, meaning: Wall}, area: {unit: mm^2, meaning: Area}}}\n"
)
RULES = (
    "rules:\n"
    "  mean: {when: count(for s in samples) >= 3, require: 'mean(s.mass for s in samples) <= 10 gram'}\n"
    "  share: {when: count(for s in samples) >= 3, require: 'share(for s in samples where s.good == yes) >= 60 %'}\n"
    "  spread: {when: count(for s in samples) >= 3, require: 'deviation(s.mass for s in samples) <= 2 gram'}\n"
)


def sample(*masses: int, good: int) -> str:
    rows = ", ".join(f"s{i}: {{mass: {m} gram, good: {'yes' if i < good else 'no'}}}" for i, m in enumerate(masses))
    return f"samples: {{{rows}}}\n"


@pytest.mark.parametrize(
    ("masses", "good", "verdicts"),
    [
        ((8, 10, 12), 2, {"mean": ("complies", 0), "share": ("complies", None), "spread": ("complies", 0)}),
        ((9, 11, 13), 1, {"mean": ("breach", -1), "share": ("breach", None), "spread": ("complies", 0)}),
        ((8, 12), 2, {"mean": ("not applicable", 0), "share": ("not applicable", 40), "spread": ("not applicable", None)}),
    ],
)  # fmt: skip
def test_means_and_shares_of_a_sample_of_enough(
    masses: tuple[int, ...], good: int, verdicts: dict[str, tuple[str, int | None]]
) -> None:
    found = findings(check_texts(sample(*masses, good=good), INPUTS + RULES))
    for name, (verdict, room) in verdicts.items():
        assert found[name].verdict == verdict, name
        if room is not None:
            assert margin(found[name]) == room, name


def test_a_sample_that_is_not_stated_leaves_the_rules_open() -> None:
    found = findings(check_texts("", INPUTS + RULES))
    assert {item.verdict for item in found.values()} == {"open"}
    part = findings(check_texts("samples: {a: {mass: 8 gram}, b: {mass: 8 gram}, c: {good: yes}}\n", INPUTS + RULES))
    assert part["mean"].verdict == "open"


def test_equivalence_names_the_least_relative_margin_and_shows_every_part() -> None:
    rules = "rules:\n  it: {require: strap.own.wall >= 2 mm and strap.own.area >= 95 % * 200 mm^2}\n"
    report = check_texts("strap: {own: {wall: 2.2 mm, area: 191 mm^2}}\n", INPUTS + rules)
    found = findings(report)["it"]
    assert (found.verdict, margin(found)) == ("complies", 1)
    assert found.binding is not None
    assert found.binding.part.startswith("strap.own.area")
    assert [(str(part.margin), part.verdict) for part in found.parts] == [
        ("0.2 mm", "complies"),
        ("1 mm^2", "complies"),
    ]
