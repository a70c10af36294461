"""The results of `whatif`."""

from __future__ import annotations

from dataclasses import dataclass

from rulecheck.outcome.results import Amount, Mark, Verdict


@dataclass(frozen=True, slots=True)
class Moved:
    """A margin or a figure under one change: after, difference, and what the first order foretold."""

    verdict: Verdict | None
    after: Amount | None
    difference: Amount | None
    foretold: Amount | None
    binding: str = ""


@dataclass(frozen=True, slots=True)
class RuleChange:
    """A rule before, and under each of the changes."""

    name: str
    clause: str
    title: str
    verdict: Verdict
    before: Amount | None
    binding: str
    moved: tuple[Moved, ...]


@dataclass(frozen=True, slots=True)
class FigureChange:
    """A physics or derived figure before, and under each of the changes."""

    name: str
    meaning: str
    before: Amount | None
    moved: tuple[Moved, ...]


@dataclass(frozen=True, slots=True)
class WhatIf:
    """Every rule and figure that moves, most affected first."""

    design: str
    file: str
    date: str
    columns: tuple[tuple[str, tuple[str, ...]], ...]
    verdict: Verdict
    verdicts: tuple[Verdict, ...]
    rules: tuple[RuleChange, ...]
    figures: tuple[FigureChange, ...]
    unchanged: int
    cautions: tuple[str, ...]
    version: str
    marks: tuple[Mark, ...] = ()
