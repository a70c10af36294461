"""Tables of a rule book: rows that are never reached, and keys that no row takes."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

from rulecheck.binding.bind import deep_formulas
from rulecheck.binding.bound import Number, Words
from rulecheck.binding.parsing import parsed
from rulecheck.binding.scope import Scope, Shared
from rulecheck.binding.tables import table_value
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import Row, Ruleset, Table
from rulecheck.outcome.proofreading import Proof
from rulecheck.readers.refuting import Claim, Refuter
from rulecheck.studies.amounts import place
from rulecheck.studies.contradictions import refuter_of


def table_findings(shared: Shared, ruleset: Ruleset) -> Iterator[Proof]:
    """What can be shown of the tables by rows; rows of straight lines are in order, or refused."""
    refuter = refuter_of(shared)
    for table in ruleset.tables.values():
        if table.steps:
            yield from _of_table(refuter, table, _tests(shared, ruleset, table))


def _tests(shared: Shared, ruleset: Ruleset, table: Table) -> list[Term]:
    """The flag of each row with a test, in order; nothing where the table is at fault."""
    scope = Scope(shared, shared.base, ruleset)
    before = list(shared.faults.found)
    with deep_formulas():
        bound = table_value(scope.fresh(scope.view, ruleset), replace(table), None, parsed)
    shared.faults.found[:] = before
    tests: list[Term] = []
    term = bound.term if isinstance(bound, (Number, Words)) else None
    rows = sum(row.key is not None for row in table.steps)
    while term is not None and term.kind == "branch" and len(tests) < rows:
        tests.append(term.arguments[0])
        term = term.arguments[2]
    return tests if len(tests) == rows else []


def _of_table(refuter: Refuter, table: Table, tests: list[Term]) -> Iterator[Proof]:
    missed: list[Claim] = []
    for row, test in zip(table.steps, tests, strict=False):
        if refuter.refuted([*missed, (test, True)]):
            yield _row(table, row, f"row '{_shown(row)}' of table '{table.name}' is never reached")
        missed.append((test, False))
    last = table.steps[-1]
    if tests and last.key is None and refuter.refuted(missed):
        yield _row(table, last, f"the row 'otherwise' of table '{table.name}' is never reached")
    elif tests and last.key is not None:
        yield from _gaps(refuter, table, missed)


def _row(table: Table, row: Row, told: str) -> Proof:
    where = (row.key or row.value).span
    return Proof("dead-row", "fault", table.name, "", told, "take it out, or mend the rows before it", place(where))


def _shown(row: Row) -> str:
    return f"{row.test}: {row.key.text}" if row.key is not None else row.test


def _gaps(refuter: Refuter, table: Table, missed: list[Claim]) -> Iterator[Proof]:
    """A key that no row takes, shown by naming it: a choice, or whatever lies above the last step."""
    where, rows = place(table.span), [row for row in table.steps if row.key is not None]
    lacking = ""
    if all(row.test in ("up_to", "below") for row in rows):
        word = "above" if rows[-1].test == "up_to" else "from"
        key = rows[-1].key
        lacking = f"keys {word} {key.text if key is not None else ''}" + ("" if word == "above" else " on")
    elif all(row.test == "is" for row in rows) and len(table.over) == 1:
        said = {row.key.text for row in rows if row.key is not None}
        lacking = ", ".join(word for word in refuter.choices(table.over[0].text) if word not in said)
    if lacking and not refuter.refuted(missed):
        told = f"table '{table.name}' has no row for {lacking}; rules on it are open there"
        yield Proof("table-gap", "question", table.name, "", told, "add the rows, or a row 'otherwise'", where)
