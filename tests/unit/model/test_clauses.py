from __future__ import annotations

from datetime import date

import pytest

from rulecheck.diagnostics import Faults
from rulecheck.model.clauses import CLAUSE_KINDS, read_answers, read_clauses
from rulecheck.reading.yaml_reader import parse_yaml


def test_a_register_keeps_its_order_and_numbers_as_written() -> None:
    faults = Faults()
    found = read_clauses(parse_yaml('{"3.10": Width, "3.2": {title: Wing, kind: definition, note: new}}', "a"), faults)
    assert not faults
    assert [(item.number, item.title, item.kind, item.note) for item in found.values()] == [
        ("3.10", "Width", "rule", ""),
        ("3.2", "Wing", "definition", "new"),
    ]


@pytest.mark.parametrize("kind", CLAUSE_KINDS)
def test_every_kind_is_read(kind: str) -> None:
    faults = Faults()
    assert read_clauses(parse_yaml(f'{{"1": {{kind: {kind}}}}}', "a"), faults)["1"].kind == kind
    assert not faults


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ('{"1": {kind: definiton}}', "unknown-choice"),
        ('{"1": {titel: Width}}', "unknown-key"),
        ('{"1": {title: [Width]}}', "bad-structure"),
        ('{"1": [Width]}', "bad-structure"),
        ("[Width]", "bad-structure"),
    ],
)
def test_a_faulty_register(text: str, code: str) -> None:
    faults = Faults()
    read_clauses(parse_yaml(text, "a"), faults)
    assert [item.code for item in faults.found] == [code]


def test_answers() -> None:
    faults = Faults()
    text = "[{reference: Q-1, date: 2027-02-01, text: Yes}, {reference: Q-2, text: No}]"
    found = read_answers(parse_yaml(text, "a"), faults)
    assert not faults
    assert [(item.reference, item.day, item.text) for item in found] == [
        ("Q-1", date(2027, 2, 1), "Yes"),
        ("Q-2", None, "No"),
    ]
    assert read_answers(None, faults) == ()


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("[{reference: Q-1}]", "missing-key"),
        ("[{text: Yes}]", "missing-key"),
        ("[{reference: Q-1, text: Yes, by: them}]", "unknown-key"),
        ("[{reference: Q-1, text: Yes, date: 2027-13-01}]", "bad-date"),
        ("[Yes]", "bad-structure"),
        ("{reference: Q-1, text: Yes}", "bad-structure"),
    ],
)
def test_faulty_answers(text: str, code: str) -> None:
    faults = Faults()
    read_answers(parse_yaml(text, "a"), faults)
    assert [item.code for item in faults.found] == [code]
