"""`rule(x, item)`: another rule, for one element."""

from __future__ import annotations

import pytest

from rulecheck.diagnostics import Refused
from tests.small_files import check_files

BOOK = """\
ruleset: Dunmere Cup
rules:
  width: {each: t in tyres, require: t.width <= 300 mm}
  depth: {each: t in tyres, require: "rule(width, t) and t.tread_depth >= 2 mm"}
  other: {each: m in masses, require: "rule(width, m)"}
"""
CAR = """\
design: Heron 4
rulesets: [cup.ruleset.yaml]
tyres:
  front: {width: 290 mm, tread_depth: 3 mm}
  rear: {width: 310 mm, tread_depth: 3 mm}
masses: {tub: {mass: 9 kg, at: 0 0 0 mm}}
"""


def findings(car: str = CAR, book: str = BOOK):
    report = check_files({"cup.ruleset.yaml": book, "car.design.yaml": car})
    return {finding.name: finding for finding in report.rules}


def test_the_element_is_judged_and_no_other():
    depth = findings()["depth"]
    assert depth.verdict == "breach"
    assert depth.binding is not None
    assert depth.binding.element == "rear"
    assert {part.element: part.verdict for part in depth.parts if "rule" in part.text} == {
        "front": "complies",
        "rear": "breach",
    }


def test_an_item_that_the_rule_does_not_speak_of_is_open():
    other = findings()["other"]
    assert other.verdict == "open"
    assert "rule 'width' for 'tub'" in other.reason


def test_what_is_missing_for_the_element_is_open():
    assert findings(CAR.replace("front: {width: 290 mm, ", "front: {").replace("310", "295"))["depth"].verdict == "open"


def test_the_second_argument_is_an_item():
    with pytest.raises(Refused, match=r"kind-mismatch: 'rule' takes an item behind the rule, and this is a number"):
        findings(book=BOOK.replace("rule(width, m)", "rule(width, m.mass)"))
