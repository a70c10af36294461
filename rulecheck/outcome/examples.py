"""Outcomes of the examples of rules."""

from __future__ import annotations

from dataclasses import dataclass

from rulecheck.outcome.results import Place


@dataclass(frozen=True, slots=True)
class ExampleResult:
    """One example: what it expects and what was found, in words, and whether the two agree.

    `reason` says why the rule came to no more, such as what is missing of the values given.
    """

    rule: str
    clause: str
    place: Place
    expected: str
    found: str
    agrees: bool
    reason: str = ""
