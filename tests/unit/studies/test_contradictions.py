from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from rulecheck import proofread

HEAD = """\
ruleset: Heron Cup
inputs:
  options.roof: {choices: [open, closed], meaning: Roof}
  options.aid: {kind: flag, meaning: Aid}
states_needed: {fuel: [empty, full]}
rules:
  use: {clause: "0", title: Use, when: options.roof == open and options.aid == yes, judgement: Is it so?}
"""


def found(folder: Path, *rules: str) -> list[tuple[str, str]]:
    """Code and subject of each finding."""
    lines = [f'  {rule.partition(":")[0]}: {{clause: "1", title: T, {rule.partition(": ")[2]}}}\n' for rule in rules]
    path = folder / "cup.ruleset.yaml"
    path.write_text(HEAD + "".join(lines), encoding="utf-8")
    return [(item.code, item.subject) for item in proofread([path], on=date(2027, 3, 1)).books[0].findings]


WIDE = "a: require: dimensions.overall_width <= 1900 mm"


@pytest.mark.parametrize(
    ("rule", "code"),
    [
        ("a: require: 2 m <= dimensions.wheelbase <= 1.9 m", "never-met"),
        ("a: require: dimensions.wheelbase >= 2 m and dimensions.wheelbase < 2000 mm", "never-met"),
        ("a: when: options.roof == open and options.roof == closed, require: mass.total >= 1 kg", "never-applies"),
        ("a: each: t in tyres where t.axle == front and t.axle == rear, require: t.width <= 1 m", "never-applies"),
        ("a: when: options.roof == open or options.roof == closed, require: mass.total >= 1 kg", "always-applies"),
        ("a: require: abs(dimensions.wheelbase) >= 0 mm, scale: 1 mm", "always-met"),
        ("a: require: options.roof == open or options.roof == closed", "always-met"),
        (
            "a: when: options.roof == open, unless: {when: options.roof == closed, because: no}, "
            "require: mass.total >= 1 kg",
            "never-exempt",
        ),
        (
            "a: when: options.roof == open, unless: {when: options.roof == open, because: no}, "
            "require: mass.total >= 1 kg",
            "always-exempt",
        ),
        (
            "a: require: dimensions.wheelbase >= (2 m if options.aid == yes else 1 m) and dimensions.wheelbase < 1 m",
            "never-met",
        ),
    ],
)
def test_a_rule_alone(tmp_path: Path, rule: str, code: str) -> None:
    assert found(tmp_path, rule) == [(code, "a")]


@pytest.mark.parametrize(
    ("other", "expected"),
    [
        ("b: require: dimensions.overall_width >= 1901 mm", [("contradiction", "b")]),
        ("b: require: dimensions.overall_width >= 1900 mm", []),
        ("b: require: dimensions.overall_width > 1900 mm", [("contradiction", "b")]),
        ("b: when: options.roof == open, require: dimensions.overall_width >= 2 m", [("contradiction", "b")]),
        ("b: require: dimensions.overall_width <= 1901 mm", [("implied-rule", "b")]),
        ("b: require: dimensions.overall_width < 1899 mm", [("implied-rule", "a")]),
        ("b: require: 2 * dimensions.overall_width <= 3.8 m", [("duplicate-rule", "b")]),
        ("b: when: options.roof == open, require: dimensions.overall_width <= 1800 mm", []),
        ("b: when: options.roof == open, require: dimensions.overall_width <= 1950 mm", [("implied-rule", "b")]),
        ("b: standing: should, require: dimensions.overall_width <= 1800 mm", []),
        ("b: states: every, require: dimensions.overall_width >= 2 m", []),
        ("b: require: rule(a) and dimensions.wheelbase >= 1 m", []),
        ("b: require: dimensions.overall_width >= 2 m, valid: {from: 2028-01-01}", []),
        ("b: require: dimensions.overall_width >= 2 m, unless: {when: options.aid == yes, because: aid}", []),
        (
            "b: branches: {wide: {require: dimensions.overall_width >= 2 m}, paper: {evidence: {kind: drawing, name: p}}}",
            [],
        ),
    ],
)
def test_two_rules(tmp_path: Path, other: str, expected: list[tuple[str, str]]) -> None:
    assert found(tmp_path, WIDE, other) == expected


@pytest.mark.parametrize(
    ("one", "other", "expected"),
    [
        (
            "a: each: t in tyres, require: t.width <= 300 mm",
            "b: each: w in tyres, require: w.width > 0.3 m",
            "contradiction",
        ),
        ("a: each: t in tyres, require: t.width <= 300 mm", "b: each: t in corners, require: t.width > 0.3 m", ""),
        (
            "a: each: t in tyres, require: t.width <= 300 mm",
            "b: each: t in tyres where t.axle == rear, require: t.width > 1 m",
            "contradiction",
        ),
        (
            "a: require: sum(b.mass for b in ballast) <= 20 kg",
            "b: require: sum(b.mass for b in ballast) >= 25 kg",
            "contradiction",
        ),
        ("a: require: sum(b.mass for b in ballast) <= 20 kg", "b: require: max(b.mass for b in ballast) >= 25 kg", ""),
        ("a: require: present(aero_surfaces.rear_wing)", "b: require: not present(aero_surfaces.rear_wing)", ""),
        ("a: require: on <= 2027-12-31", "b: require: on >= 2028-01-01", ""),
        ("a: require: tyres.front.width <= 300 mm", "b: each: t in tyres, require: t.width > 0.3 m", ""),
        (
            'a: each: "p, q in pairs(masses)", require: p.mass - q.mass <= 1 kg',
            'b: each: "p, q in pairs(masses)", require: p.mass - q.mass >= 2 kg',
            "contradiction",
        ),
    ],
)
def test_what_rules_are_about(tmp_path: Path, one: str, other: str, expected: str) -> None:
    assert [code for code, _ in found(tmp_path, one, other)] == ([expected] if expected else [])


def test_two_of_a_pair_are_not_one(tmp_path: Path) -> None:
    assert found(tmp_path, 'a: each: "p, q in pairs(masses)", require: p.mass - q.mass >= 2 kg') == []
