"""`proofread` on a terminal: findings, then the coverage of clauses, then the effective rule book where asked for."""

from __future__ import annotations

from collections.abc import Iterable

from rich.console import RenderableType
from rich.table import Table
from rich.text import Text

from rulecheck.outcome.proofreading import COVERS, WEIGHTS, ClauseCover, ListedRule, Proof, ProofBook, Proofreading
from rulecheck.output.screen import BLUE, ORANGE, PAPER, VERMILION, Screen, draw, line, words
from rulecheck.output.wording import counted

STYLES = {"fault": f"bold {VERMILION}", "question": ORANGE, "remark": BLUE}


def proofreading_text(found: Proofreading, screen: Screen = PAPER) -> str:
    """The whole terminal form of `proofread`."""
    return draw(_parts(found), screen)


def _parts(found: Proofreading) -> Iterable[RenderableType]:
    for book in found.books:
        yield from _book(book, found.date)
    for caution in found.cautions:
        yield line(f"caution: {caution}")


def _book(book: ProofBook, day: str) -> Iterable[RenderableType]:
    edition = f", {book.edition}" if book.edition else ""
    yield words(f"proofreading of {book.name}{edition} ({book.file}) on {day}")
    if len(book.layers) > 1:
        yield line(f"made of {', '.join(book.layers)}", 2)
    yield words(tally(book))
    yield Text()
    for finding in book.findings:
        yield from _finding(finding)
        yield Text()
    yield from _coverage(book)
    if book.rules:
        yield words("the rules in force, and where each is from", "underline")
        for rule in book.rules:
            yield from _rule(rule)
        yield Text()


def tally(book: ProofBook) -> str:
    """`2 faults, 1 question, 0 remarks`."""
    weights = [finding.weight for finding in book.findings]
    return ", ".join(counted(weights.count(weight), weight) for weight in WEIGHTS)


def _finding(finding: Proof) -> Iterable[RenderableType]:
    head = Text(finding.weight, STYLES[finding.weight])
    head.append_text(words(f"  {finding.code}"))
    if finding.place is not None:
        head.append_text(words(f"  {finding.place}", "dim"))
    yield head
    clause = f"{finding.clause}  " if finding.clause else ""
    yield line(f"{clause}{finding.message}", 2)
    for other in finding.related:
        yield line(f"see {other.place}: {other.message}" if other.place else other.message, 4)
    if finding.advice:
        yield line(f"do: {finding.advice}", 4)


# --- coverage --------------------------------------------------------------------------------------------------------


def _coverage(book: ProofBook) -> Iterable[RenderableType]:
    if not book.coverage:
        yield words("no register of clauses, so coverage cannot be counted: 'clauses:' is one")
        yield Text()
        return
    yield words(coverage_line(book))
    table = Table(box=None, padding=(0, 2, 0, 0), pad_edge=False, expand=True, header_style="underline")
    table.add_column("clause", no_wrap=True)
    table.add_column("title", ratio=3)
    table.add_column("covered by", ratio=2)
    table.add_column("rules", ratio=3)
    for clause in book.coverage:
        style = STYLES["question"] if clause.covers == ("missing",) else ""
        rules = ", ".join(clause.rules)
        table.add_row(words(clause.number), words(clause.title), words(covered_by(clause), style), words(rules))
    yield table
    yield Text()


def coverage_line(book: ProofBook) -> str:
    """How many clauses are covered in each way."""
    said = [f"{book.totals[cover]} {cover}" for cover in COVERS if book.totals[cover]]
    return f"{counted(len(book.coverage), 'clause')}: {', '.join(said)}"


def covered_by(clause: ClauseCover) -> str:
    """The ways in which a clause is covered; of one that asks nothing, what it is."""
    return ", ".join(clause.kind if cover == "not a rule" else cover for cover in clause.covers)


# --- the effective rule book -----------------------------------------------------------------------------------------


def _rule(rule: ListedRule) -> Iterable[RenderableType]:
    said = f"{rule.clause}  " if rule.clause else ""
    yield line(f"{said}{rule.title or rule.name}  ({rule.name}, {rule.place})")
    for told in rule_lines(rule):
        yield line(told, 4)


def rule_lines(rule: ListedRule) -> Iterable[str]:
    """What a listed rule asks for, when, and what became of it, one line each."""
    standing = "" if rule.standing == "shall" else f"{rule.standing}: "
    yield from (f"{standing}{asked}" for asked in rule.asks)
    if rule.applies:
        yield "; ".join(rule.applies)
    if rule.withdrawn:
        yield f"withdrawn: {rule.withdrawn}"
    elif not rule.in_force:
        yield f"not in force on this day: {rule.window}"
    elif rule.window:
        yield f"in force {rule.window}"
    yield from (f"takes the place of the rule in {origin}" for origin in rule.replaced)
    for answer in rule.answers:
        yield f"answer {answer.reference}{f' of {answer.date}' if answer.date else ''}: {answer.text}"
