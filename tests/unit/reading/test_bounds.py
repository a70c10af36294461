"""The bounds hold what whole cars and rule books need, and stay counts."""

from __future__ import annotations

from rulecheck.reading import bounds


def test_every_bound_is_a_count() -> None:
    names = [name for name in vars(bounds) if name.startswith("MAXIMUM_")]
    assert len(names) >= 7
    assert all(isinstance(getattr(bounds, name), int) for name in names)


def test_the_stated_bounds() -> None:
    assert bounds.MAXIMUM_BYTES == 4 * 1024 * 1024
    assert bounds.MAXIMUM_NODES == 200_000
    assert bounds.MAXIMUM_DEPTH == 64
