"""The report of `check`: every rule, the total, and what has to be said beside them."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from datetime import date

from rulecheck import __version__
from rulecheck.graph.figures import DeclaredCheck
from rulecheck.model.design import Design
from rulecheck.model.ruleset import Ruleset
from rulecheck.outcome.results import VERDICTS, Finding, Report, RulesetInfo
from rulecheck.reading.nodes import Located
from rulecheck.studies.amounts import amount
from rulecheck.studies.check import Checker
from rulecheck.studies.marks import marks
from rulecheck.studies.totals import binds, total

CAUTION = (
    "A check here is not approval: the event's officials decide. Brakes, high voltage, impact structures, ballast and "
    "roll-over structures need licensed or qualified practice and local rules."
)


@dataclass(frozen=True, slots=True)
class Asked:
    """The question: the evaluation date, the changes laid over the design, the reserve."""

    day: date
    changes: tuple[str, ...] = ()
    reserve: str = ""


def report(
    checker: Checker, design: Design, rulesets: Sequence[Ruleset], asked: Asked, files: Mapping[str, str]
) -> Report:
    """All findings in the order of the rule books."""
    books = {ruleset.file: ruleset for ruleset in rulesets}
    names = {book.file: book.name for ruleset in rulesets for book in ruleset.books}
    rules = [(bound, books[bound.ruleset].rules[bound.name]) for bound in checker.graph.rules]
    findings = tuple(checker.finding(bound, rule, names[rule.ruleset]) for bound, rule in rules)
    return Report(
        design=design.name,
        revision=design.revision,
        file=design.file,
        date=asked.day.isoformat(),
        verdict=total(findings),
        rulesets=tuple(_info(ruleset, asked.day) for ruleset in rulesets),
        rules=findings,
        counts=counts(findings),
        tightest=_tightest(findings),
        notes=(*_notes(checker), *_stray(design, rulesets)),
        cautions=(CAUTION,),
        changes=asked.changes,
        reserve=asked.reserve,
        version=__version__,
        files=dict(sorted(files.items())),
        marks=marks([checker]),
    )


def counts(findings: Iterable[Finding]) -> dict[str, int]:
    """How many rules have each verdict, in the order of the words."""
    said = [finding.verdict for finding in findings]
    return {verdict: said.count(verdict) for verdict in VERDICTS}


def _tightest(findings: Iterable[Finding]) -> str:
    """The binding rule with the least relative margin; a count may well stand on its limit, and is left out."""
    measured = [finding for finding in findings if binds(finding) and _is_measured(finding)]
    return min(measured, key=lambda finding: finding.relative_margin or 0.0).name if measured else ""


def _is_measured(finding: Finding) -> bool:
    if finding.relative_margin is None or finding.verdict not in ("complies", "tight", "breach"):
        return False
    return not finding.counted or finding.verdict == "breach"


def _info(ruleset: Ruleset, day: date) -> RulesetInfo:
    note = "" if ruleset.valid.holds(day) else f"not in force on {day.isoformat()}"
    withdrawn = tuple(f"{item.rule.name}: {item.reason}" for item in ruleset.withdrawn)
    extends = tuple(
        RulesetInfo(book.name, book.edition, book.file) for book in ruleset.books if book.file != ruleset.file
    )
    return RulesetInfo(ruleset.name, ruleset.edition, ruleset.file, withdrawn, note, extends)


def _stray(design: Design, rulesets: Sequence[Ruleset]) -> Iterable[str]:
    """What the design says of rules that none of the rule books has: it has no effect, and may be a slip."""
    rules = {name for ruleset in rulesets for name in ruleset.rules}
    named = [(f"claims.{name}", name) for name in design.names("claims") or ()]
    named += [(f"judgements.{name}", name) for name in design.names("judgements") or ()]
    for name in design.names("dispensations") or ():
        said = design.leaves.get(f"dispensations.{name}.rule")
        named.append((f"dispensations.{name}", said.text if isinstance(said, Located) else ""))
    for path, rule in named:
        if rule not in rules:
            place = f" ({design.keys[path]})" if path in design.keys else ""
            yield f"{path} speaks of a rule '{rule}' that these rule books do not have{place}; it has no effect"


def _notes(checker: Checker) -> Iterable[str]:
    for item in checker.graph.declared:
        if checker.reader.truth(item.agrees) is False:
            yield _contradiction(checker, item)


def _contradiction(checker: Checker, item: DeclaredCheck) -> str:
    declared = amount(checker.reader, checker.bank, item.declared, item.unit)
    computed = amount(checker.reader, checker.bank, item.computed, item.unit)
    must = "at least" if item.relation == "at least" else "equal to"
    return (
        f"{item.path} is declared as {declared} ({item.span}) and must be {must} {item.figure} = {computed}; "
        "the rules on it stay open until one of the two is mended"
    )
