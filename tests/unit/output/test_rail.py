import pytest
from hypothesis import given
from hypothesis import strategies as st

from rulecheck.output.rail import LENGTH, SAFE_STEPS, UNSAFE_STEPS, legend, rail


def test_no_number_no_rail() -> None:
    assert rail(None, holds=True) == ""


@pytest.mark.parametrize(
    ("relative", "drawn"),
    [
        (0.005, "╌╌╌┃●─────"),
        (0.01, "╌╌╌┃─●────"),
        (0.2, "╌╌╌┃─────●"),
        (50.0, "╌╌╌┃─────●"),
        (0.0, "╌╌╌◆──────"),
        (-0.001, "╌╌●┃──────"),
        (-0.02, "╌●╌┃──────"),
        (-0.1, "●╌╌┃──────"),
    ],
)
def test_steps(relative: float, drawn: str) -> None:
    assert rail(relative, holds=relative >= 0) == drawn


@given(st.floats(allow_nan=False, allow_infinity=False), st.booleans())
def test_marker_is_on_the_side_of_the_verdict(relative: float, lines: bool) -> None:
    drawn = rail(relative, holds=relative >= 0, unicode=lines)
    assert len(drawn) == LENGTH
    post, marker, touching = "┃●◆" if lines else "|o#"
    if relative == 0:
        assert touching in drawn
    else:
        assert (drawn.index(marker) > drawn.index(post)) == (relative > 0)


@given(st.floats(0, 10), st.floats(0, 10))
def test_more_room_is_never_drawn_nearer(one: float, other: float) -> None:
    near, far = sorted((one, other))
    if near > 0:
        assert rail(near, holds=True).index("●") <= rail(far, holds=True).index("●")


def test_legend_names_every_step() -> None:
    for step in (*SAFE_STEPS, *UNSAFE_STEPS):
        assert f"{step * 100:g}" in legend()
    assert legend(unicode=False).isascii()
