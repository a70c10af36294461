"""What a wrong input is: the files, and in full what is said of them."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

NUMBERS = (
    "inputs: {a: {unit: mm, meaning: a}, b: {unit: mm, meaning: b}, c: {unit: kg, meaning: c}, "
    "angle: {unit: deg, meaning: an angle}}\n"
)


def rule(condition: str) -> str:
    """A ruleset of one rule."""
    return f"{NUMBERS}rules:\n  it:\n    require: {condition}\n"


OK = rule("a <= 10 mm")


@dataclass(frozen=True, slots=True)
class Wrong:
    """A wrong input: what stands below the headers of the design and the ruleset, or whole files by name.

    `said` is every diagnostic in full: place, code, message, what was expected, what to do.
    """

    name: str
    said: tuple[str, ...]
    design: str = "a: 5 mm\n"
    ruleset: str = OK
    files: Mapping[str, str | bytes] = field(default_factory=dict)
    options: Mapping[str, object] = field(default_factory=dict)
