"""`proofread` as Markdown, for a review comment."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from rulecheck.outcome.proofreading import Proof, ProofBook, Proofreading
from rulecheck.output.markdown_text import cell, escaped
from rulecheck.output.terminal_proofreading import coverage_line, covered_by, rule_lines, tally


def proofreading_markdown(found: Proofreading) -> str:
    """The whole Markdown form of `proofread`."""
    lines = [told for book in found.books for told in _book(book, found.date)]
    return "\n".join([*lines, *(f"Caution: {escaped(caution)}" for caution in found.cautions)]) + "\n"


def _book(book: ProofBook, day: str) -> Iterator[str]:
    edition = f", {book.edition}" if book.edition else ""
    yield from (f"## Proofreading of {escaped(book.name + edition)}", "")
    yield from (f"`{cell(book.file)}` on {day}: {tally(book)}.", "")
    if book.findings:
        yield from _table(("weight", "what", "where"), [_finding(finding) for finding in book.findings])
    if book.coverage:
        yield from (f"### {escaped(coverage_line(book))}", "")
        rows = [(item.number, item.title, covered_by(item), ", ".join(item.rules)) for item in book.coverage]
        yield from _table(("clause", "title", "covered by", "rules"), [tuple(map(escaped, row)) for row in rows])
    if book.rules:
        yield from ("### The rules in force, and where each is from", "")
        for rule in book.rules:
            head = f"{rule.clause} {rule.title or rule.name}".strip()
            yield f"- **{escaped(head)}** (`{cell(rule.name)}`, {escaped(str(rule.place))})"
            yield from (f"  - {escaped(told)}" for told in rule_lines(rule))
        yield ""


def _finding(finding: Proof) -> tuple[str, ...]:
    clause = f"{finding.clause} " if finding.clause else ""
    advice = f" *{escaped(finding.advice)}*" if finding.advice else ""
    return (finding.weight, f"{escaped(clause + finding.message)}{advice}", escaped(str(finding.place or "")))


def _table(heads: Sequence[str], rows: Sequence[Sequence[str]]) -> Iterator[str]:
    yield f"| {' | '.join(heads)} |"
    yield f"|{'---|' * len(heads)}"
    yield from (f"| {' | '.join(row)} |" for row in rows)
    yield ""
