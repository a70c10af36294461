"""The results of `headroom`."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from rulecheck.outcome.results import Amount, Mark

Ending = Literal["stops", "opens", "mends", "free", "unsure"]


@dataclass(frozen=True, slots=True)
class Travel:
    """How far an input can go one way. `stops`: a rule breaks there; `opens`: a rule is not settled from
    there on, such as where a declared value begins to contradict the parts; `mends`: a broken rule is met from there on;
    `free`: no rule stops it as far as was looked; `unsure`: beyond this nothing is certain."""

    ending: Ending
    travel: Amount | None
    at: Amount | None
    rules: tuple[str, ...]
    is_exact: bool


@dataclass(frozen=True, slots=True)
class Headroom:
    """One input: its value, and its travel down and up."""

    path: str
    value: Amount
    basis: str
    down: Travel
    up: Travel
    restrained_by: int


@dataclass(frozen=True, slots=True)
class HeadroomReport:
    """The outcome of `headroom`: the least travel first; inputs that no rule reads are named apart.

    `left_out` are rules that rest on a solver, each with the inputs that move it: along these nothing is certain.
    """

    design: str
    file: str
    date: str
    inputs: tuple[Headroom, ...]
    unread: tuple[str, ...]
    breached: tuple[str, ...]
    cautions: tuple[str, ...]
    version: str
    marks: tuple[Mark, ...] = ()
    left_out: tuple[tuple[str, tuple[str, ...]], ...] = ()
