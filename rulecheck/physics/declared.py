"""Declared values that the car's own parts can contradict."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal


@dataclass(frozen=True, slots=True)
class Declared:
    """An input must be `at_least` a computed figure, or equal it as closely as it is written."""

    path: str
    relation: Literal["at least", "equal"]
    module: str
    figure: str


DECLARED: dict[str, Declared] = {
    item.path: item
    for item in (
        Declared("dimensions.overall_width", "at least", "platform", "width_over_tyres"),
        Declared("dimensions.overall_length", "equal", "platform", "length_over_overhangs"),
        Declared("mass.total", "equal", "mass", "total"),
        Declared("platform.width_over_tyres", "equal", "platform", "width_over_tyres"),
    )
}
