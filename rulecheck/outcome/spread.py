"""What the spread of inputs does to a rule: uncertainty, guard band, probability, stacks, worst case, contributors."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from rulecheck.outcome.amount import Amount

SpreadKind = Literal["uncertainty", "tolerance"]


@dataclass(frozen=True, slots=True)
class Contributor:
    """One input with a spread. `slope` is how far the margin moves for one unit of the input, as text with its unit.

    `contribution` is that slope times the input's standard uncertainty, or times half its tolerance, in the margin's
    unit. `share` is its part of the variance of the margin, or of the worst-case stack; `share_of_squares` its part of
    the root-sum-square stack, None for an uncertainty.
    """

    path: str
    kind: SpreadKind
    stated: str
    slope: str
    contribution: Amount
    share: float
    share_of_squares: float | None = None


@dataclass(frozen=True, slots=True)
class Measured:
    """Measurement uncertainty of a margin: standard and expanded (`coverage` times as large), to first order.

    `bound` marks that the margin has a kink here, and these are what they are at most.
    """

    standard: Amount
    expanded: Amount
    coverage: str
    bound: bool = False


@dataclass(frozen=True, slots=True)
class Stack:
    """What drawing tolerances make of a margin: least margin by the worst case of all (`at_worst`, to first order), and
    from `low` to `high` by root-sum-square."""

    at_worst: Amount
    low: Amount
    high: Amount


@dataclass(frozen=True, slots=True)
class WorstCase:
    """The least margin over the box of all tolerances and stated uncertainties; `proved` where it is just that.

    Where it is not proved, `margin` is what the least margin certainly is not below, and `found` the least that was met.
    """

    margin: Amount | None
    proved: bool
    found: Amount | None
    of: str


@dataclass(frozen=True, slots=True)
class Probability:
    """Probabilities: that the car conforms, and that the scrutineer finds that it does; None where there is none."""

    conforms: float | None
    fails: float | None
    found_conforming: float | None = None
    scrutineer: str = ""


@dataclass(frozen=True, slots=True)
class Trials:
    """What Monte Carlo trials give, held against the first order. `agrees` is None where the trials are too few to say."""

    trials: int
    seed: int
    mean: Amount
    standard: Amount
    low: Amount
    high: Amount
    conforms: float
    agrees: bool | None
    note: str = ""


@dataclass(frozen=True, slots=True)
class SpreadResult:
    """The spread of what decides a rule. What does not arise is None; `guard` is the guard band of a guarded rule."""

    decision: str
    measured: Measured | None
    guard: Amount | None
    probability: Probability | None
    stack: Stack | None
    worst_case: WorstCase | None
    contributors: tuple[Contributor, ...]
    trials: Trials | None = None
    notes: tuple[str, ...] = ()
