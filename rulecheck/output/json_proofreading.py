"""`proofread` as JSON, by the schema of `proofreading_schema`."""

from __future__ import annotations

from rulecheck.outcome.proofreading import ClauseCover, ListedRule, Proof, ProofBook, Proofreading
from rulecheck.outcome.results import Place
from rulecheck.output.json_report import Json, json_text


def proofreading_json(found: Proofreading) -> str:
    """The whole JSON form of `proofread`."""
    return json_text(
        {
            "form": "proofreading",
            "version": found.version,
            "date": found.date,
            "counts": dict(found.counts),
            "rulesets": [_book(book) for book in found.books],
            "cautions": list(found.cautions),
            "files": dict(found.files),
        }
    )


def _book(book: ProofBook) -> Json:
    return {
        "name": book.name,
        "edition": book.edition,
        "file": book.file,
        "window": book.window,
        "layers": list(book.layers),
        "findings": [_finding(finding) for finding in book.findings],
        "coverage": {"totals": dict(book.totals), "clauses": [_clause(clause) for clause in book.coverage]},
        "rules": [_rule(rule) for rule in book.rules],
    }


def _finding(finding: Proof) -> Json:
    return {
        "code": finding.code,
        "weight": finding.weight,
        "subject": finding.subject,
        "clause": finding.clause,
        "message": finding.message,
        "advice": finding.advice,
        "place": _place(finding.place),
        "related": [{"message": item.message, "place": _place(item.place)} for item in finding.related],
    }


def _clause(clause: ClauseCover) -> Json:
    return {
        "number": clause.number,
        "title": clause.title,
        "kind": clause.kind,
        "covered_by": list(clause.covers),
        "rules": list(clause.rules),
        "place": _place(clause.place),
    }


def _rule(rule: ListedRule) -> Json:
    return {
        "name": rule.name,
        "clause": rule.clause,
        "title": rule.title,
        "standing": rule.standing,
        "asks": list(rule.asks),
        "applies": list(rule.applies),
        "place": _place(rule.place),
        "replaced": list(rule.replaced),
        "withdrawn": rule.withdrawn,
        "in_force": rule.in_force,
        "window": rule.window,
        "answers": [{"reference": item.reference, "date": item.date, "text": item.text} for item in rule.answers],
    }


def _place(place: Place | None) -> Json | None:
    return {"file": place.file, "line": place.line, "column": place.column} if place is not None else None
