"""The results of `check` and `workings`."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

from rulecheck.outcome.amount import Amount
from rulecheck.outcome.spread import SpreadResult

__all__ = [
    "VERDICTS",
    "Amount",
    "BindingPart",
    "ClosedFormResult",
    "EnvelopeResult",
    "Finding",
    "PartResult",
    "Place",
    "RangeResult",
    "Report",
    "RuledResult",
    "RulesetInfo",
    "Step",
    "Verdict",
    "Working",
    "Workings",
]

Verdict = Literal["complies", "tight", "breach", "unproven", "open", "dispensed", "not applicable", "not followed"]
VERDICTS: tuple[Verdict, ...] = (
    "complies",
    "tight",
    "breach",
    "unproven",
    "open",
    "dispensed",
    "not applicable",
    "not followed",
)


@dataclass(frozen=True, slots=True)
class Place:
    """A place in a file."""

    file: str
    line: int
    column: int

    def __str__(self) -> str:
        return f"{self.file}:{self.line}:{self.column}"


@dataclass(frozen=True, slots=True)
class RuledResult:
    """What the rule book's tolerance and rounding, in its words, did: the margin as measured, and the rounded value."""

    margin: Amount | None
    value: Amount | None
    tolerance: str
    rounding: str


@dataclass(frozen=True, slots=True)
class PartResult:
    """One condition of a rule, for one element in one case."""

    text: str
    kind: str
    verdict: Verdict
    reason: str
    margin: Amount | None
    strict: bool
    relative_margin: float | None
    value: Amount | None
    limit: Amount | None
    sense: str
    element: str
    state: Mapping[str, str]
    place: Place | None
    branch: str = ""
    ruled: RuledResult | None = None
    at: Mapping[str, Amount] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class RangeResult:
    """One axis of an envelope, or a part of it: an input, from one value to another."""

    figure: str
    low: Amount
    high: Amount


@dataclass(frozen=True, slots=True)
class EnvelopeResult:
    """The envelope throughout which a case was judged; `bound` is what the margin is certainly not below, None where
    that is not certain; `undecided` is the part of the envelope on which nothing was proved."""

    ranges: tuple[RangeResult, ...]
    bound: Amount | None
    undecided: tuple[RangeResult, ...]


@dataclass(frozen=True, slots=True)
class BindingPart:
    """What decides a rule: the part, the element, the states, the point of an envelope."""

    part: str
    element: str
    state: Mapping[str, str]
    branch: str = ""
    at: Mapping[str, Amount] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class Finding:
    """A rule with its verdict. `margin` is None where there is no number."""

    name: str
    ruleset: str
    clause: str
    title: str
    standing: str
    verdict: Verdict
    reason: str
    margin: Amount | None
    strict: bool
    relative_margin: float | None
    value: Amount | None
    limit: Amount | None
    sense: str
    binding: BindingPart | None
    parts: tuple[PartResult, ...]
    rule_place: Place
    value_place: Place | None
    estimates: tuple[str, ...] = ()
    outside_validity: tuple[str, ...] = ()
    notes: tuple[str, ...] = ()
    dispensation: str = ""
    history: tuple[str, ...] = ()
    ruleset_name: str = ""
    counted: bool = False
    spread: SpreadResult | None = None
    ruled: RuledResult | None = None
    consequence: str = ""
    envelope: EnvelopeResult | None = None


@dataclass(frozen=True, slots=True)
class RulesetInfo:
    """A ruleset that was checked."""

    name: str
    edition: str
    file: str
    withdrawn: tuple[str, ...] = ()
    note: str = ""
    extends: tuple[RulesetInfo, ...] = ()


@dataclass(frozen=True, slots=True)
class Mark:
    """What must be known of a figure: whether it is used outside its range of validity (as it stands, then under each
    change), what it is replaced by and why (empty where it is not), and the rules that rest on it."""

    figure: str
    outside_validity: tuple[bool, ...]
    replaced: str
    rules: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Report:
    """The outcome of `check`."""

    design: str
    revision: str
    file: str
    date: str
    verdict: Verdict
    rulesets: tuple[RulesetInfo, ...]
    rules: tuple[Finding, ...]
    counts: Mapping[str, int]
    tightest: str
    notes: tuple[str, ...]
    cautions: tuple[str, ...]
    changes: tuple[str, ...]
    reserve: str
    version: str
    files: Mapping[str, str] = field(default_factory=dict)
    marks: tuple[Mark, ...] = ()


@dataclass(frozen=True, slots=True)
class Step:
    """One step of a calculation."""

    name: str
    meaning: str
    formula: str
    numbers: str
    result: str
    exact: str
    source: str
    place: Place | None
    outside_validity: bool = False
    depth: int = 0
    replaced: str = ""


@dataclass(frozen=True, slots=True)
class ClosedFormResult:
    """A margin as one formula of the inputs, in SI units."""

    formula: str
    derivatives: Mapping[str, str]
    solved: Mapping[str, tuple[str, ...]]
    conditions: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Working:
    """The workings of one rule or figure."""

    name: str
    title: str
    clause: str
    verdict: str
    margin: str
    binding: BindingPart | None
    conditions: tuple[PartResult, ...]
    steps: tuple[Step, ...]
    closed_form: ClosedFormResult | None = None
    caution: str = ""


@dataclass(frozen=True, slots=True)
class Workings:
    """The outcome of `workings`."""

    design: str
    file: str
    date: str
    items: tuple[Working, ...]
    version: str
