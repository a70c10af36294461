"""What must hold whatever else changes: no verdict is decided by rounding, and no small input takes the program down."""

from __future__ import annotations

import subprocess
import sys
from fractions import Fraction
from pathlib import Path

import pytest
from small_files import CAR, RULES, margin, require

GENEROUS = 120
"""Seconds that a run of its own may take; it should take one, but machines differ and stall."""

NUMBERS = "inputs: {a: {unit: mm, meaning: a}, b: {unit: m, meaning: b}, angle: {unit: deg, meaning: angle}}\n"


@pytest.mark.parametrize(
    ("design", "condition"),
    [
        ("a: 1.9 m\n", "a <= 1900 mm"),
        ("a: 1900 mm\n", "a >= 1.9 m"),
        # The inch is exactly 25.4 mm (international yard and pound agreement, 1959), so 14 in is 355.6 mm.
        ("a: 14 in\n", "a <= 355.6 mm"),
        ("a: 0.1 m\nb: 0.2 m\n", "a + b <= 0.3 m"),
        ("a: 1.1 mm\nb: 0.0022 m\n", "3 * a == a + b within 0 mm"),
        ("angle: 7 deg\n", "angle <= 7 deg"),
        ("angle: 7 deg\n", "angle >= 7 deg"),
        ("angle: 0.5 turn\n", "angle <= 180 deg"),
    ],
)
def test_on_the_limit_is_met_with_a_margin_of_exactly_zero(design: str, condition: str) -> None:
    found = require(condition, design, NUMBERS)
    assert (found.verdict, margin(found)) == ("complies", 0)


@pytest.mark.parametrize("condition", ["a < 1900 mm", "a > 1.9 m", "not a <= 1900 mm"])
def test_a_strict_limit_is_not_met_at_equality(condition: str) -> None:
    found = require(condition, "a: 1.9 m\n", NUMBERS)
    assert (found.verdict, margin(found), found.strict) == ("breach", 0, True)


def test_the_smallest_difference_decides() -> None:
    tiny = "a: 1900.000000000000000000000000000001 mm\n"
    found = require("a <= 1900 mm", tiny, NUMBERS)
    assert (found.verdict, margin(found)) == ("breach", -Fraction(1, 10**30))


@pytest.mark.parametrize("sides", ["sqrt(2) * sqrt(8) * 1 m <= 4 m", "sqrt(2) * sqrt(8) * a <= 4 * a"])
def test_a_tie_of_roots_is_never_a_breach(sides: str) -> None:
    assert require(sides, "a: 1 m\n", NUMBERS).verdict in ("complies", "unproven")


@pytest.mark.parametrize(
    ("condition", "said"),
    [("sqrt(2) * sqrt(8) * 1 m <= 4.0000001 m", "complies"), ("sqrt(2) * sqrt(8) * 1 m <= 3.9999999 m", "breach")],
)
def test_roots_beside_a_tie_are_decided(condition: str, said: str) -> None:
    assert require(condition, "a: 1 m\n", NUMBERS).verdict == said


# --- runs of their own -----------------------------------------------------------------------------------------------

_CHECK = """
import sys
from datetime import date
from rulecheck import Refused, check
try:
    report = check("car.design.yaml", on=date(2027, 3, 1))
    for finding in report.rules:
        print(finding.name, finding.verdict, sep=": ")
except Refused as refused:
    for item in refused.diagnostics:
        print("refused", item.code, sep=": ")
print("loaded", *sorted({"sympy", "numpy", "scipy"} & set(sys.modules)), sep=": ")
"""


def run(folder: Path, design: str, ruleset: str) -> list[str]:
    """What a check in a process of its own says, line by line."""
    (folder / "car.design.yaml").write_text(CAR + design, encoding="utf-8")
    (folder / "cup.ruleset.yaml").write_text(RULES + ruleset, encoding="utf-8")
    root = str(Path(__file__).resolve().parents[2])
    done = subprocess.run(
        [sys.executable, "-c", f"import sys; sys.path.insert(0, {root!r})\n{_CHECK}"],
        cwd=folder, capture_output=True, text=True, timeout=GENEROUS, check=False,
    )  # fmt: skip
    assert done.returncode == 0, done.stderr[-2000:]
    assert not done.stderr
    return done.stdout.splitlines()


def rule(condition: str) -> str:
    return f"{NUMBERS}rules:\n  it:\n    require: >-\n      {condition}\n"


def test_a_check_loads_no_heavy_library(tmp_path: Path) -> None:
    said = run(tmp_path, "a: 1 m\nangle: 7 deg\n", rule("sqrt(2) * a <= 2 m and sin(angle) <= 0.5"))
    assert said == ["it: complies", "loaded"]


def squarings(count: int) -> str:
    lines = ["derived:", '  d0: {formula: a / 1 mm + 1, unit: "1"}']
    lines += [f'  d{n}: {{formula: d{n - 1} * d{n - 1}, unit: "1"}}' for n in range(1, count + 1)]
    return "\n".join(lines) + "\n"


def bomb(levels: int) -> str:
    lines = ["x0: &x0 [1, 1, 1, 1, 1, 1, 1, 1, 1]"]
    lines += [f"x{n}: &x{n} [{', '.join([f'*x{n - 1}'] * 9)}]" for n in range(1, levels)]
    return "\n".join(lines) + "\n"


@pytest.mark.parametrize(
    ("condition", "said"),
    [
        ("a <= 9^9^9^9 * 1 mm", ("it: unproven", "refused: too-large")),
        ("a <= 9^9^9^9^9^9^9 * 1 mm", ("it: unproven", "refused: too-large")),
        ("a / 1 mm <= (a / 1 mm)^(10^9)", ("it: complies",)),
        ("a <= 1e999999999 mm", ("refused: too-large",)),
        ("exp(exp(exp(exp(exp(a / 1 mm))))) >= 1", ("it: unproven", "it: complies")),
        ("sin(exp(exp(exp(a / 1 mm)))) <= 0.5", ("it: unproven",)),
        ("(" * 20_000 + "a" + ")" * 20_000 + " <= 1 mm", ("refused: too-large",)),
        ("-" * 20_000 + "a <= 1 mm", ("refused: too-large",)),
        ("a <= 1 mm" + " and a <= 1 mm" * 20_000, ("refused: too-large", "refused: yaml-refused", "it: breach")),
    ],
    ids=["tower", "tall tower", "great power", "great exponent", "exponentials", "sine", "brackets", "signs", "joined"],
)
def test_a_hostile_formula_ends_in_a_diagnostic_or_unproven(
    tmp_path: Path, condition: str, said: tuple[str, ...]
) -> None:
    assert run(tmp_path, "a: 1.5 m\n", rule(condition))[0] in said


@pytest.mark.parametrize(
    ("condition", "said"),
    [("d64 <= 10", ("it: breach", "it: unproven")), ("d64 - d64 * d0 / d0 <= 1", ("it: unproven",))],
)
def test_sixty_four_squarings_end_at_once(tmp_path: Path, condition: str, said: tuple[str, ...]) -> None:
    # (1501)^(2^64) has more than 10^19 digits: it is above 10 without doubt, and cannot be held against its like.
    ruleset = squarings(64) + rule(condition)
    assert run(tmp_path, "a: 1.5 m\n", ruleset)[0] in said


def test_a_great_exponent_in_a_design_is_refused(tmp_path: Path) -> None:
    assert run(tmp_path, "a: 1e999999999 mm\n", rule("a <= 1 mm"))[0] == "refused: too-large"


def test_an_alias_bomb_is_refused(tmp_path: Path) -> None:
    assert run(tmp_path, bomb(9), rule("a <= 1 mm"))[0] in ("refused: yaml-refused", "refused: too-large")


def test_deep_lists_are_refused(tmp_path: Path) -> None:
    assert run(tmp_path, "a: " + "[" * 20_000 + "]" * 20_000 + "\n", rule("a <= 1 mm"))[0].startswith("refused: ")
