"""The results of `proofread`: findings about a rule book, the coverage of its clauses, and its rules in force."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

from rulecheck.outcome.results import Place

Weight = Literal["fault", "question", "remark"]
WEIGHTS: tuple[Weight, ...] = ("fault", "question", "remark")
"""A fault is a mistake; a question is for whoever wrote the rule book; a remark costs nothing if it stays."""

Cover = Literal["computed", "evidence", "record", "judgement", "advice", "note", "withdrawn", "missing", "not a rule"]
COVERS: tuple[Cover, ...] = (
    "computed",
    "evidence",
    "record",
    "judgement",
    "advice",
    "note",
    "withdrawn",
    "missing",
    "not a rule",
)
"""How a clause is covered: by what its rules ask for, or that it has none, or asks nothing of the car."""


@dataclass(frozen=True, slots=True)
class ProofPlace:
    """Another place that a finding speaks of."""

    message: str
    place: Place | None


@dataclass(frozen=True, slots=True)
class Proof:
    """One finding about a rule book: what is wrong or doubtful, where, and what to do."""

    code: str
    weight: Weight
    subject: str
    clause: str
    message: str
    advice: str
    place: Place | None
    related: tuple[ProofPlace, ...] = ()


@dataclass(frozen=True, slots=True)
class ClauseCover:
    """One clause of the register with the rules that stand for it."""

    number: str
    title: str
    kind: str
    covers: tuple[Cover, ...]
    rules: tuple[str, ...]
    place: Place


@dataclass(frozen=True, slots=True)
class ListedAnswer:
    """An answer of officials to a question about a rule."""

    reference: str
    date: str
    text: str


@dataclass(frozen=True, slots=True)
class ListedRule:
    """One rule of the effective rule book: what it asks for as text, from which file, and what it took the place of.

    `standing` is shall, should, may or note; `withdrawn` the reason where it no longer holds.
    """

    name: str
    clause: str
    title: str
    standing: str
    asks: tuple[str, ...]
    applies: tuple[str, ...]
    place: Place
    replaced: tuple[str, ...] = ()
    withdrawn: str = ""
    in_force: bool = True
    window: str = ""
    answers: tuple[ListedAnswer, ...] = ()


@dataclass(frozen=True, slots=True)
class ProofBook:
    """A rule book that was proofread: `layers` are the files that it is made of, the most general first."""

    name: str
    edition: str
    file: str
    layers: tuple[str, ...]
    findings: tuple[Proof, ...]
    coverage: tuple[ClauseCover, ...]
    totals: Mapping[str, int]
    rules: tuple[ListedRule, ...] = field(default=())
    window: str = ""


@dataclass(frozen=True, slots=True)
class Proofreading:
    """The outcome of `proofread`."""

    date: str
    books: tuple[ProofBook, ...]
    counts: Mapping[str, int]
    cautions: tuple[str, ...]
    version: str
    files: Mapping[str, str] = field(default_factory=dict)
