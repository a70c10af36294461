"""Published constrained problems as rulesets: margins, verdicts and best values at and around the best point.

Sources and their status stand beside each problem in `optimisation_problems.py`. The same text is evaluated apart from
this program: by Python itself with mpmath at fifty digits.
"""

from __future__ import annotations

import re
from fractions import Fraction

import mpmath
import pytest
from optimisation_problems import PROBLEMS, Problem
from writing import as_float, as_fraction, findings, write_design, write_ruleset

TOKEN = re.compile(r"\d+(?:\.\d+)?|[a-z_]\w*|\^")
FUNCTIONS = {"sqrt": mpmath.sqrt, "exp": mpmath.exp, "pi": mpmath.pi, "mpf": mpmath.mpf}
BY_NAME = {problem.name: problem for problem in PROBLEMS}


def apart(problem: Problem, text: str, point: dict[str, str]):
    """The formula's value by Python and mpmath."""
    values = {name: mpmath.mpf(number) for name, number in point.items()}
    for name, formula in problem.derived.items():
        values[name] = _evaluated(formula, values)
    return _evaluated(text, values)


def _evaluated(text: str, values: dict[str, object]):
    python = TOKEN.sub(lambda token: {"^": "**"}.get(token[0]) or _token(token[0]), text)
    return eval(python, {"__builtins__": {}}, {**FUNCTIONS, **values})


def _token(token: str) -> str:
    return f"mpf('{token}')" if token[0].isdigit() else token


def ours(problem: Problem, text: str) -> str:
    """The formula with the inputs' paths."""
    return TOKEN.sub(lambda token: f"trial.{token[0]}" if token[0] in problem.point else token[0], text)


def rules_of(problem: Problem) -> dict[str, str]:
    rules = {name: f"{ours(problem, text)} >= 0" for name, text in problem.margins.items()}
    for name, (low, text, high) in problem.ranges.items():
        rules[name] = f"{low} <= {ours(problem, text)} <= {high}"
    for name, (low, high) in problem.bounds.items():
        below = f"{low} <= " if high else ""
        rules[f"bound_{name}"] = f"{below}trial.{name} <= {high}" if high else f"trial.{name} >= {low}"
    rules["best_value"] = f"{ours(problem, problem.objective)} <= {problem.value}"
    return rules


def due_margins(problem: Problem, point: dict[str, str]):
    """The margins evaluated apart, by rule."""
    due = {name: apart(problem, text, point) for name, text in problem.margins.items()}
    for name, (low, text, high) in problem.ranges.items():
        value = apart(problem, text, point)
        due[name] = min(value - mpmath.mpf(low), mpmath.mpf(high) - value)
    for name, (low, high) in problem.bounds.items():
        value = mpmath.mpf(point[name])
        sides = [value - mpmath.mpf(low)] + ([mpmath.mpf(high) - value] if high else [])
        due[f"bound_{name}"] = min(sides)
    due["best_value"] = mpmath.mpf(problem.value) - apart(problem, problem.objective, point)
    return due


def write_problem(folder, problem: Problem, **more_rules: str) -> None:
    inputs = {f"trial.{name}": {"unit": "1", "meaning": "Variable"} for name in problem.point}
    derived = {
        name: {"formula": ours(problem, text), "unit": "1", "meaning": "Intermediate figure"}
        for name, text in problem.derived.items()
    }
    rules = {name: {"require": text} for name, text in {**rules_of(problem), **more_rules}.items()}
    write_ruleset(folder, inputs=inputs, **({"derived": derived} if derived else {}), rules=rules)
    write_design(folder, trial=problem.point)


def assert_as_due(found, due):
    for name, margin in due.items():
        finding = found[name]
        assert finding.verdict == ("complies" if margin >= 0 else "breach"), name
        assert as_float(finding.margin) == pytest.approx(float(margin), rel=1e-12, abs=1e-300), name


@pytest.fixture(autouse=True)
def _fifty_digits():
    with mpmath.workdps(50):
        yield


@pytest.mark.parametrize("problem", PROBLEMS, ids=[problem.name for problem in PROBLEMS])
def test_margins_at_the_best_point(tmp_path, problem):
    """Every margin and its sign, also where it is 1e-11; the published best value and the published active set."""
    write_problem(tmp_path, problem)
    found = findings(tmp_path)
    assert_as_due(found, due_margins(problem, problem.point))
    size = abs(float(problem.value))
    assert as_float(found["best_value"].value) == pytest.approx(float(problem.value), rel=1e-10, abs=1e-10 * size)
    volume = 1_296_000 if problem.name == "pressure vessel" else 1  # the one constraint that is not of order one
    for name in problem.margins:
        is_active = abs(as_float(found[name].margin)) <= 1e-9 * (volume if name == "g3" else 1)
        assert is_active == (name in problem.active), name


@pytest.mark.parametrize("problem", PROBLEMS, ids=[problem.name for problem in PROBLEMS])
def test_verdicts_on_both_sides_of_the_best_point(tmp_path, problem):
    """Each variable moved a little both ways; every active constraint is seen kept and broken."""
    write_problem(tmp_path, problem)
    seen: dict[str, set[str]] = {name: set() for name in problem.active}
    for name, number in problem.point.items():
        for step in ("0.001", "-0.001"):
            moved = str(mpmath.mpf(number) + mpmath.mpf(step))
            found = findings(tmp_path, {f"trial.{name}": moved})
            assert_as_due(found, due_margins(problem, {**problem.point, name: moved}))
            for active in problem.active:
                seen[active].add(found[active].verdict)
    assert all(verdicts == {"complies", "breach"} for verdicts in seen.values()), seen


def exact_margins(folder, name: str) -> list[Fraction]:
    problem = BY_NAME[name]
    write_problem(folder, problem)
    found = findings(folder)
    return [as_fraction(found[margin].margin) for margin in problem.margins]


def test_whole_margins_are_exact(tmp_path):
    """HS43 and HS44 have whole numbers throughout (read in the same source), and HS36 and HS21."""
    for name, due in (("HS43", [0, 1, 0]), ("HS44", [2, 9, 0, 4, 0, 1]), ("HS36", [0]), ("HS21", [10])):
        folder = tmp_path / name
        folder.mkdir()
        assert exact_margins(folder, name) == due


def test_the_exact_optimum_of_hs76_lies_on_its_constraint(tmp_path):
    """Exact: x = (3/11, 23/11, 0, 6/11) and f = -103/22 (derived from the published problem)."""
    problem = BY_NAME["HS76"]
    text = TOKEN.sub(lambda token: f"({token[0]}/11)" if token[0] in problem.point else token[0], problem.margins["g1"])
    objective = TOKEN.sub(
        lambda token: f"({token[0]}/11)" if token[0] in problem.point else token[0], problem.objective
    )
    inputs = {f"trial.{name}": {"unit": "1", "meaning": "Variable"} for name in problem.point}
    write_ruleset(
        tmp_path,
        inputs=inputs,
        rules={
            "constraint": {"require": f"{ours(problem, text)} >= 0"},
            "value": {"require": f"{ours(problem, objective)} <= 0"},
        },
    )
    write_design(tmp_path, trial={"x1": "3", "x2": "23", "x3": "0", "x4": "6"})
    found = findings(tmp_path)
    assert as_fraction(found["constraint"].margin) == 0
    assert found["constraint"].verdict == "complies"
    assert as_fraction(found["value"].value) == Fraction(-103, 22)


def test_the_equality_of_hs71(tmp_path):
    """h1 = x1^2 + x2^2 + x3^2 + x4^2 - 40 = 0: met to the published digits, not to more than were printed."""
    problem = BY_NAME["HS71"]
    sphere = ours(problem, "x1^2 + x2^2 + x3^2 + x4^2")
    write_problem(tmp_path, problem, wide=f"{sphere} == 40 within 0.000001", narrow=f"{sphere} == 40 within 1e-12")
    found = findings(tmp_path)
    gap = abs(apart(problem, "x1^2 + x2^2 + x3^2 + x4^2", problem.point) - 40)
    assert 1e-12 < gap < 1e-9
    assert (found["wide"].verdict, found["narrow"].verdict) == ("complies", "breach")
    assert as_float(found["wide"].margin) == pytest.approx(float(mpmath.mpf("0.000001") - gap), rel=1e-12)
    assert as_float(found["narrow"].margin) == pytest.approx(float(mpmath.mpf("1e-12") - gap), rel=1e-12)
    for moved in ("4.7431", "4.7428"):
        assert findings(tmp_path, {"trial.x2": moved})["wide"].verdict == "breach"


def test_printed_margins_of_the_pressure_vessel(tmp_path):
    """g2 = 0.0358808 and g4 = 63.3634 as printed; thicknesses stand in steps of 0.0625 in."""
    problem = BY_NAME["pressure vessel"]
    step = "abs(trial.x1 - round(trial.x1, 0.0625)) + abs(trial.x2 - round(trial.x2, 0.0625)) <= 0"
    write_problem(tmp_path, problem, steps=step)
    found = findings(tmp_path)
    assert as_float(found["g2"].margin) == pytest.approx(0.0358808, abs=5e-8)
    assert as_float(found["g4"].margin) == pytest.approx(63.3634, abs=5e-5)
    assert (found["steps"].verdict, as_fraction(found["steps"].margin)) == ("complies", 0)
    off = findings(tmp_path, {"trial.x2": "0.4376"})["steps"]
    assert (off.verdict, as_fraction(off.margin)) == ("breach", Fraction(-1, 10_000))


def test_printed_margins_of_the_truss(tmp_path):
    """At the closed form: g2 = 1.4641 and g3 = 0.5359, which are 2*sqrt 3 - 2 and 4 - 2*sqrt 3 (derived)."""
    write_problem(tmp_path, BY_NAME["three-bar truss"])
    found = findings(tmp_path)
    assert as_float(found["g2"].margin) == pytest.approx(2 * 3**0.5 - 2, abs=1e-12)
    assert as_float(found["g3"].margin) == pytest.approx(4 - 2 * 3**0.5, abs=1e-12)
