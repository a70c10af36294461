from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from rulecheck import proofread
from rulecheck.outcome.proofreading import ProofBook

TEXT = """\
ruleset: Heron Cup
clauses:
  "1": {title: General, kind: heading}
  "1.1": {title: What a wing is, kind: definition}
  "2.1": Width
  "2.2": Hoop
  "2.3": Finish
  "2.4": Advice
  "2.5": Words
  "2.6": Nothing yet
  "2.7": Gone
rules:
  width: {clause: "2.1", title: Width, require: dimensions.overall_width <= 1900 mm}
  width_paper: {clause: "2.1", title: Width, evidence: {kind: drawing, name: plan}}
  hoop:
    clause: "2.2"
    title: Hoop
    branches:
      tube: {require: dimensions.wheelbase >= 2 m}
      paper: {evidence: {kind: certificate, name: hoop}}
  finish: {clause: "2.3", title: Finish, judgement: Is it smooth?}
  low: {clause: "2.4", title: Low, standing: should, require: mass.total <= 900 kg}
  words: {clause: "2.5", title: Words, standing: note}
"""
TOP = 'ruleset: Event\nextends: cup.ruleset.yaml\nwithdrawn: {gone: bulletin 1}\nclauses: {"E.1": Local}\n'


def _book(folder: Path, text: str, top: str = "") -> ProofBook:
    path = folder / "cup.ruleset.yaml"
    path.write_text(text, encoding="utf-8")
    if top:
        path = folder / "top.ruleset.yaml"
        path.write_text(top, encoding="utf-8")
    return proofread([path], on=date(2027, 3, 1)).books[0]


def test_each_way_of_covering(tmp_path: Path) -> None:
    gone = '  gone: {clause: "2.7", title: Gone, require: dimensions.wheelbase >= 1 m}\n'
    book = _book(tmp_path, TEXT + gone, TOP)
    covers = {clause.number: clause.covers for clause in book.coverage}
    assert covers == {
        "1": ("not a rule",),
        "1.1": ("not a rule",),
        "2.1": ("computed", "evidence"),
        "2.2": ("computed", "evidence"),
        "2.3": ("judgement",),
        "2.4": ("advice",),
        "2.5": ("note",),
        "2.6": ("missing",),
        "2.7": ("withdrawn",),
        "E.1": ("missing",),
    }
    assert (book.totals["computed"], book.totals["missing"], book.totals["not a rule"]) == (2, 2, 2)
    assert [item.clause for item in book.findings if item.code == "clause-without-rule"] == ["2.6", "E.1"]


@pytest.mark.parametrize(
    ("rule", "expected"),
    [
        ("title: Wing, require: dimensions.wheelbase >= 1 m", ("question", "no-clause")),
        ('clause: "2.8", title: Wing, require: dimensions.wheelbase >= 1 m', ("fault", "unknown-clause")),
        ('clause: "1.1", title: Wing, require: dimensions.wheelbase >= 1 m', ("question", "not-a-rule")),
        ('clause: "2.6", require: dimensions.wheelbase >= 1 m', ("remark", "no-title")),
        (
            'clause: "2.6", title: A suitable length, require: dimensions.wheelbase >= 1 m',
            ("question", "judgement-word"),
        ),
        (
            'clause: "2.6", title: L, note: "Long enough, in the opinion of the stewards", '
            "require: dimensions.wheelbase >= 1 m",
            ("question", "judgement-word"),
        ),
    ],
)
def test_findings_about_clauses_and_titles(tmp_path: Path, rule: str, expected: tuple[str, str]) -> None:
    text = f"{TEXT}  more: {{{rule}}}\n"
    findings = [(item.weight, item.code) for item in _book(tmp_path, text).findings if item.subject == "more"]
    assert findings == [expected]


@pytest.mark.parametrize("rule", ["judgement: Is it suitable?", "standing: note, note: Suitable care is taken"])
def test_a_word_of_judgement_where_a_person_is_asked_or_nothing_is(tmp_path: Path, rule: str) -> None:
    text = f'{TEXT}  more: {{clause: "2.6", title: Suitable, {rule}}}\n'
    assert [item.code for item in _book(tmp_path, text).findings if item.subject == "more"] == []


def test_a_clause_without_a_title(tmp_path: Path) -> None:
    text = TEXT.replace("{title: What a wing is, kind: definition}", "{kind: definition}")
    assert ("no-title", "1.1") in [(item.code, item.clause) for item in _book(tmp_path, text).findings]


def test_a_rule_that_replaces_another_covers_its_clause_too(tmp_path: Path) -> None:
    top = "ruleset: Event\nextends: cup.ruleset.yaml\nclauses: {E.1: Local width}\nrules:\n"
    top += "  width: {clause: E.1, title: Width, require: dimensions.overall_width <= 1800 mm}\n"
    top += "  width_paper: {clause: E.1, title: Width, require: dimensions.overall_width >= 1 m}\n"
    covers = {clause.number: clause.rules for clause in _book(tmp_path, TEXT, top).coverage}
    assert covers["E.1"] == covers["2.1"] == ("width", "width_paper")


def test_a_test_record_covers_its_clause(tmp_path: Path) -> None:
    record = "{name: impact, require: result.load >= 10 kN}"
    inputs = "inputs: {records.*.result.load: {unit: kN, meaning: Load}}\n"
    text = f'{inputs}{TEXT}  impact: {{clause: "2.6", title: Impact, record: {record}}}\n'
    assert [clause.covers for clause in _book(tmp_path, text).coverage if clause.number == "2.6"] == [("record",)]
