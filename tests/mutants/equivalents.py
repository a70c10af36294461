"""Mutants that no test can tell from the program, each with the reason."""

from __future__ import annotations

EQUIVALENTS: dict[tuple[str, str, str, int], str] = {}
