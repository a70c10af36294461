"""The rail: the limit as a post, the value as a marker on the safe side (right) or the unsafe side (left).

The distance from the post is the relative margin, in uneven steps, so that 1 % and 40 % both show.
"""

from __future__ import annotations

# Shares of the limit's magnitude at which the marker moves on by one place.
SAFE_STEPS = (0.01, 0.02, 0.05, 0.1, 0.2)
UNSAFE_STEPS = (0.02, 0.1)
LENGTH = len(SAFE_STEPS) + len(UNSAFE_STEPS) + 3


def rail(relative: float | None, *, holds: bool, unicode: bool = True) -> str:
    """The rail of a relative margin; empty where there is none.

    `holds` decides the side at the limit itself, where the margin is zero.

    >>> rail(0.03, holds=True), rail(-0.5, holds=False), rail(0.0, holds=True)
    ('╌╌╌┃──●───', '●╌╌┃──────', '╌╌╌◆──────')
    >>> rail(0.03, holds=True, unicode=False), rail(0.0, holds=False, unicode=False)
    ('...|--o---', '...#------')
    """
    if relative is None:
        return ""
    unsafe, post, safe, marker, touching = "╌┃─●◆" if unicode else ".|-o#"
    left, right = [unsafe] * (len(UNSAFE_STEPS) + 1), [safe] * (len(SAFE_STEPS) + 1)
    if relative == 0:
        post = touching
    elif holds:
        right[_steps(relative, SAFE_STEPS)] = marker
    else:
        left[-1 - _steps(-relative, UNSAFE_STEPS)] = marker
    return "".join((*left, post, *right))


def _steps(size: float, steps: tuple[float, ...]) -> int:
    return sum(size >= step for step in steps)


def legend(*, unicode: bool = True) -> str:
    """How to read a rail, with its steps.

    >>> print(legend(unicode=False))
    rail: | limit, o value (# on the limit); breach left (steps at 2, 10 %), room
    right (1, 2, 5, 10, 20 %)
    """
    post, marker, touching = "┃●◆" if unicode else "|o#"
    left, right = (", ".join(f"{step * 100:g}" for step in steps) for steps in (UNSAFE_STEPS, SAFE_STEPS))
    return (
        f"rail: {post} limit, {marker} value ({touching} on the limit); breach left (steps at {left} %), room\n"
        f"right ({right} %)"
    )
