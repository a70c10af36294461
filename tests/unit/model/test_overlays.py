"""Overlays laid over a design: what is set, what is added, what goes, and that the order of laying is all that counts."""

from __future__ import annotations

from itertools import permutations

import pytest

from rulecheck.diagnostics import Span
from rulecheck.model.design import Design, Overlay, holders
from rulecheck.reading.yaml_reader import parse_yaml

SPAN = Span("a.yaml", 0, 0, 1, 1)
EMPTY = Design("a.yaml", "A", "", "", (), {}, {}, frozenset(), frozenset(), {}, {})


def overlay(**settings: str) -> Overlay:
    return Overlay.of((path.replace("__", "."), parse_yaml(text, "a.yaml")) for path, text in settings.items())


BASE = EMPTY.with_overlay(overlay(masses__fuel="{mass: 5 kg, at: 1 2 3 mm}", masses__tub="{mass: 9 kg}"))


def shown(design: Design) -> dict[str, str]:
    return {path: getattr(node, "text", "…") for path, node in sorted(design.leaves.items())}


def test_mappings_are_laid_flat() -> None:
    assert shown(BASE) == {"masses.fuel.at": "1 2 3 mm", "masses.fuel.mass": "5 kg", "masses.tub.mass": "9 kg"}
    assert BASE.names("masses") == ("fuel", "tub")


def test_a_value_is_replaced_and_the_design_below_stays() -> None:
    changed = BASE.with_overlay(overlay(masses__fuel__mass="0 kg"))
    assert shown(changed)["masses.fuel.mass"] == "0 kg"
    assert shown(BASE)["masses.fuel.mass"] == "5 kg"
    assert BASE.with_overlay(Overlay()) is BASE


def test_none_removes_and_setting_again_brings_back() -> None:
    gone = BASE.with_overlay(overlay(masses__fuel="none"))
    assert gone.names("masses") == ("tub",)
    assert gone.states_none("masses.fuel.mass")
    back = gone.with_overlay(overlay(masses__fuel__mass="1 kg"))
    assert back.names("masses") in (("tub", "fuel"), ("fuel", "tub"))
    assert not back.states_none("masses.fuel")
    assert shown(back) == {"masses.fuel.mass": "1 kg", "masses.tub.mass": "9 kg"}


def test_removing_what_is_not_there_adds_no_item() -> None:
    assert BASE.with_overlay(overlay(masses__ghost="none")).names("masses") == ("fuel", "tub")


@pytest.mark.parametrize("first", ["masses__fuel", "masses__fuel__mass", "masses__tub__mass"])
def test_laying_one_after_another_is_laying_what_they_come_to(first: str) -> None:
    parts = [overlay(**{first: "none"}), overlay(masses__fuel__at="4 5 6 mm"), overlay(masses__fuel__mass="7 kg")]
    for a, b, c in permutations(parts):
        step_by_step = BASE.with_overlay(a).with_overlay(b).with_overlay(c)
        assert shown(BASE.with_overlay(a.then(b).then(c))) == shown(step_by_step)
        assert a.then(b.then(c)) == a.then(b).then(c)


def test_holders_end_at_the_top() -> None:
    assert list(holders("masses.fuel.mass")) == ["masses.fuel.mass", "masses.fuel", "masses"]
