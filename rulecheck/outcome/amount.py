"""A number in a unit, as outcomes carry it."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Amount:
    """A number in a unit: `shown` for the screen, `exact` as a rational where it is one, `value` as a double."""

    shown: str
    unit: str
    value: float | None = None
    exact: str = ""

    def __str__(self) -> str:
        return self.shown if self.unit in ("", "1") else f"{self.shown} {self.unit}"
