"""`proofread`: a rule book held against itself, without a design."""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from datetime import date

from rulecheck import __version__
from rulecheck.binding.scope import Shared
from rulecheck.diagnostics import Diagnostic
from rulecheck.model.ruleset import PhysicsModule, Rule, Ruleset
from rulecheck.outcome.proofreading import WEIGHTS, Proof, ProofBook, ProofPlace, Proofreading
from rulecheck.studies.amounts import place
from rulecheck.studies.contradictions import contradictions
from rulecheck.studies.coverage import coverage, register_findings, totals
from rulecheck.studies.examples import run_examples
from rulecheck.studies.reporting import CAUTION
from rulecheck.studies.rule_listing import listing, window_text
from rulecheck.studies.table_proofs import table_findings
from rulecheck.studies.unused_names import unused


@dataclass(frozen=True, slots=True)
class BoundBook:
    """A rule book bound for stand-ins, with the physics modules that it names."""

    ruleset: Ruleset
    shared: Shared
    modules: tuple[PhysicsModule, ...] = ()


def proofreading(
    books: Sequence[BoundBook], day: date, files: Mapping[str, str], *, listed: bool = False
) -> Proofreading:
    """Everything that is found in each rule book, in force on `day`. With `listed` also its rules one by one."""
    made = tuple(_book(book, day, listed=listed) for book in books)
    said = [finding.weight for book in made for finding in book.findings]
    return Proofreading(
        date=day.isoformat(),
        books=made,
        counts={weight: said.count(weight) for weight in WEIGHTS},
        cautions=(CAUTION,),
        version=__version__,
        files=dict(sorted(files.items())),
    )


def _book(book: BoundBook, day: date, *, listed: bool) -> ProofBook:
    ruleset = book.ruleset
    covered = coverage(ruleset)
    found = [*_findings(book, day), *register_findings(ruleset, covered)]
    return ProofBook(
        name=ruleset.name,
        edition=ruleset.edition,
        file=ruleset.file,
        layers=tuple(_layer(layer.file, ruleset, day) for layer in ruleset.books),
        findings=tuple(_in_order(found)),
        coverage=covered,
        totals=totals(covered),
        rules=listing(ruleset, day) if listed else (),
        window=window_text(ruleset.valid),
    )


def _layer(file: str, ruleset: Ruleset, day: date) -> str:
    return f"{file} (not in force on {day.isoformat()})" if file in ruleset.idle else file


def _in_order(found: Iterable[Proof]) -> list[Proof]:
    """The heaviest first, then by place; what is found twice at one place is told once."""
    return sorted(dict.fromkeys(found), key=_order)


def _order(finding: Proof) -> tuple[int, str, int, int]:
    where = finding.place
    spot = (where.file, where.line, where.column) if where is not None else ("", 0, 0)
    return (WEIGHTS.index(finding.weight), *spot)


def _findings(book: BoundBook, day: date) -> Iterator[Proof]:
    shared, ruleset = book.shared, book.ruleset
    starts = _starts(ruleset)
    for fault in shared.faults.found:
        yield _of_fault(fault, starts)
    yield from contradictions(shared, ruleset)
    yield from table_findings(shared, ruleset)
    yield from _failed_examples(book, day)
    yield from unused(ruleset, book.modules, _touched(shared))


Starts = list[tuple[str, int, Rule | None]]
"""Where each named thing of a rule book begins, and the rule that it is."""


def _starts(ruleset: Ruleset) -> Starts:
    rules: Starts = [(rule.span.file, rule.span.start, rule) for rule in ruleset.rules.values()]
    others = [item.span for named in (ruleset.derived, ruleset.tables) for item in named.values()]
    others += [item.span for named in (ruleset.zones, ruleset.templates) for item in named.values()]
    others += [entry.span for entry in ruleset.inputs if entry.span is not None]
    rules.extend((span.file, span.start, None) for span in others)
    return sorted(rules, key=lambda item: item[:2])


def _failed_examples(book: BoundBook, day: date) -> Iterator[Proof]:
    """Examples of rules that come to another verdict or margin than they say."""
    for item in run_examples(book.ruleset, book.shared.physics, day):
        if not item.agrees:
            reason = f" ({item.reason})" if item.reason else ""
            told = f"an example of rule '{item.rule}' expects {item.expected}, and gives {item.found}{reason}"
            advice = "mend the rule, or the example"
            yield Proof("failed-example", "fault", item.rule, item.clause, told, advice, item.place)


def _touched(shared: Shared) -> set[str]:
    """The inputs that rules read when they were bound."""
    return {key[1] for key in shared.memo if key[0] == "input" and isinstance(key[1], str)}


def _of_fault(fault: Diagnostic, starts: Starts) -> Proof:
    """A fault of binding as a finding, with the rule in which it lies."""
    rule = _rule_at(fault, starts)
    expected = f"expected {fault.expected}" if fault.expected else ""
    return Proof(
        fault.code, "fault", rule.name if rule else "", rule.clause if rule else "", fault.message,
        "; ".join(text for text in (expected, fault.advice) if text), place(fault.span),
        tuple(ProofPlace(other.message, place(other.span)) for other in fault.related),
    )  # fmt: skip


def _rule_at(fault: Diagnostic, starts: Starts) -> Rule | None:
    """The rule that a place lies in: what begins last before it, in its file."""
    if fault.span is None:
        return None
    at = bisect_right(starts, (fault.span.file, fault.span.start), key=lambda item: item[:2])
    found = starts[at - 1] if at else None
    return found[2] if found is not None and found[0] == fault.span.file else None
