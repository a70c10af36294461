"""Totals: what the verdicts of all rules come to."""

from __future__ import annotations

from collections.abc import Iterable

from rulecheck.outcome.results import Finding, Verdict

ORDER: tuple[Verdict, ...] = ("breach", "open", "unproven", "tight", "complies")


def binds(finding: Finding) -> bool:
    """True where a rule counts in the total: `shall` rules that are not dispensed or not applicable."""
    return finding.standing == "shall"


def total(findings: Iterable[Finding]) -> Verdict:
    """Breach, else open, else unproven, else tight, else complies; all not applicable is not applicable.

    A dispensed rule binds nothing; where nothing but dispensed rules binds, the total complies.
    """
    verdicts = {finding.verdict for finding in findings if binds(finding)}
    for verdict in ORDER:
        if verdict in verdicts:
            return verdict
    return "complies" if "dispensed" in verdicts else "not applicable"
