"""A proof throughout an envelope is never contradicted by a point of it, and its margin has the sign of its verdict."""

from __future__ import annotations

from fractions import Fraction

from hypothesis import given, settings
from hypothesis import strategies as st
from small_files import only

LEAVES = st.sampled_from(["x", "y", "x", "1", "2", "0.5", "3"])
FORMULAS = st.recursive(
    LEAVES,
    lambda inner: st.one_of(
        st.tuples(inner, st.sampled_from("+-*"), inner).map(lambda t: f"({t[0]} {t[1]} {t[2]})"),
        st.tuples(st.sampled_from(["min", "max"]), inner, inner).map(lambda t: f"{t[0]}({t[1]}, {t[2]})"),
        inner.map(lambda text: f"abs({text})"),
        st.tuples(inner, inner, inner).map(lambda t: f"({t[0]} if {t[1]} < 1.3 else {t[2]})"),
    ),
    max_leaves=6,
)
INPUTS = "inputs: {x: {unit: '1', meaning: x}, y: {unit: '1', meaning: y}}\n"


def value(formula: str, x: Fraction, y: Fraction) -> Fraction:
    """The formula by Python's own arithmetic, on fractions."""
    names = {"x": x, "y": y, "min": min, "max": max, "abs": abs, "F": Fraction}
    text = formula.replace("0.5", "F('1/2')").replace("1.3", "F('13/10')")
    return Fraction(eval(text, {"__builtins__": {}}, names))


@settings(max_examples=25, deadline=None)
@given(FORMULAS, st.sampled_from(["<=", "<"]), st.integers(-4, 12))
def test_proofs_are_never_contradicted_by_a_point(formula: str, sign: str, limit: int) -> None:
    book = f'{INPUTS}rules:\n  it: {{envelope: {{x: [-1, 2], y: [0, 1.5]}}, require: "{formula} {sign} {limit} + 0 * y", scale: 1}}\n'
    found = only("", book)
    points = [(Fraction(i, 5) - 1, Fraction(j, 4)) for i in range(16) for j in range(7)]
    rooms = [limit - value(formula, x, y) for x, y in points]
    worst = min(rooms)
    assert found.verdict in ("complies", "breach", "unproven")
    if found.verdict == "complies":
        assert worst > 0 or (worst == 0 and sign == "<=")
    if worst < 0:
        assert found.verdict == "breach"
    if found.verdict == "breach":
        assert found.binding is not None
        x, y = (Fraction(found.binding.at[path].exact) for path in "xy")
        room = limit - value(formula, x, y)
        assert -1 <= x <= 2
        assert 0 <= y <= Fraction(3, 2)
        assert room < 0 or (room == 0 and sign == "<")
        assert found.margin is not None
        assert Fraction(found.margin.exact) == room
    elif found.margin is not None:
        assert Fraction(found.margin.exact) <= worst
