"""What is frozen as in a baseline: numbers within a tolerance, words alike, changes counted and consented to."""

from __future__ import annotations

from datetime import date
from fractions import Fraction

import pytest
from small_files import CAR, RULES, check_files, findings, margin

from rulecheck.diagnostics import Refused
from rulecheck.outcome.results import Finding

INPUTS = (
    "inputs:\n  tub.length: {unit: mm, meaning: Length}\n  tub.mass: {unit: kg, meaning: Mass}\n"
    "  tub.grade: {kind: text, meaning: Grade}\n  tub.primed: {kind: flag, meaning: Primed}\n"
    "  tub.pins.*.at: {kind: point, meaning: Place}\n"
)
OLD = "design: Heron 3\ntub: {length: 2000 mm, mass: 60 kg, grade: E1, primed: yes, pins: {a: {at: 0 0 300 mm}}}\n"
NAMES = "baselines: {homologated: {design: old.design.yaml}}\n"
NEW = "tub: {length: 2000 mm, mass: 60 kg, grade: E1, primed: yes, pins: {a: {at: 0 0 300 mm}}}\n"


def frozen(said: str, design: str = NAMES + NEW, old: str = OLD, **options: object) -> Finding:
    ruleset = f'{INPUTS}rules:\n  it: {{frozen: {{baseline: homologated, paths: ["tub.**"]{said}}}}}\n'
    files = {"car.design.yaml": CAR + design, "old.design.yaml": old, "cup.ruleset.yaml": RULES + ruleset}
    return findings(check_files(files, **options))["it"]  # type: ignore[arg-type]


def changed(old: str, new: str) -> str:
    assert old in NEW
    return NAMES + NEW.replace(old, new)


@pytest.mark.parametrize(
    ("old", "new", "said", "verdict", "room"),
    [
        ("", "", "", "complies", None),
        ("", "", ", tolerance: 1 mm", "complies", 1),
        ("length: 2000 mm", "length: 2.000 m", "", "complies", None),
        ("length: 2000 mm", "length: 2001 mm", ", tolerance: 1 mm", "complies", 0),
        ("length: 2000 mm", "length: 1998.9 mm", ", tolerance: 1 mm", "breach", Fraction(-1, 10)),
        ("length: 2000 mm", "length: 2000.1 mm", "", "breach", None),
        ("mass: 60 kg", "mass: 60.1 kg", ", tolerance: 1 mm", "breach", None),
        ("0 0 300 mm", "0.6 0 300.8 mm", ", tolerance: 1 mm", "complies", 0),
        ("0 0 300 mm", "0 0 302 mm", ", tolerance: 1 mm", "breach", -1),
        ("grade: E1", "grade: E2", ", tolerance: 1 mm", "breach", None),
        ("primed: yes", "primed: no", "", "breach", None),
        ("mass: 60 kg, ", "", "", "breach", None),
        ("pins: {a:", "pins: {b: {at: 0 0 1 mm}, a:", "", "breach", None),
        ("pins: {a: {at: 0 0 300 mm}}", "pins: {a: none}", "", "breach", None),
        ("length: 2000 mm", "length: 2003 mm", ", changes_allowed: 2", "complies", 1),
        ("length: 2000 mm, mass: 60 kg, grade: E1", "length: 2001 mm, mass: 61 kg, grade: E2", ", changes_allowed: 2", "breach", -1),
    ],
)  # fmt: skip
def test_what_may_change_and_what_may_not(old: str, new: str, said: str, verdict: str, room: Fraction | None) -> None:
    found = frozen(said, changed(old, new))
    assert found.verdict == verdict
    assert margin(found) == room


def test_a_change_is_named_with_both_values_and_places() -> None:
    found = frozen(", tolerance: 1 mm", changed("length: 2000 mm", "length: 2003 mm"))
    assert found.binding is not None
    assert found.binding.part == "tub.length as at old.design.yaml:2:7"
    assert (str(found.value), found.sense, str(found.limit)) == ("2003 mm", "frozen at", "2000 mm")
    assert str(found.value_place) == "car.design.yaml:5:7"
    gone = frozen("", changed("mass: 60 kg, ", ""))
    assert gone.binding is not None
    assert gone.binding.part.endswith(", and gone here")


def test_a_consent_frees_what_it_speaks_of_from_its_day_on() -> None:
    consent = "baselines: {homologated: {design: old.design.yaml, consents: {one: {path: tub.len*, reference: L9, date: 2027-03-01}}}}\n"
    consent = consent.replace("tub.len*", "tub.length")
    design = consent + NEW.replace("length: 2000 mm", "length: 2003 mm")
    assert frozen("", design).verdict == "complies"
    assert frozen("", design, on=date(2027, 2, 28)).verdict == "breach"
    assert frozen("", design.replace("reference: L9, ", "")).verdict == "breach"
    assert frozen("", design.replace("path: tub.length", "path: tub.mass")).verdict == "breach"
    assert any("free by consent L9" in part.text for part in frozen("", design).parts)


def test_it_is_frozen_from_its_day_on() -> None:
    design = changed("length: 2000 mm", "length: 2003 mm")
    assert frozen(", since: 2027-03-02", design).verdict == "complies"
    assert frozen(", since: 2027-03-01", design).verdict == "breach"


def test_without_a_baseline_or_with_nothing_in_it_the_rule_is_open() -> None:
    assert frozen("", NEW).verdict == "open"
    assert frozen("", "baselines: {other: {design: old.design.yaml}}\n" + NEW).verdict == "open"
    assert frozen("", NAMES, "design: Heron 3\n").verdict == "open"


def test_a_baseline_that_is_changed_for_one_run_is_not_read() -> None:
    found = frozen("", settings={"baselines.homologated.design": "other.design.yaml"})
    assert found.verdict == "open"
    assert "a change of it is not read" in found.reason


def test_a_change_laid_over_the_design_counts() -> None:
    assert frozen(", tolerance: 1 mm", settings={"tub.length": "2002 mm"}).verdict == "breach"


def test_a_baseline_that_cannot_be_read_is_refused() -> None:
    with pytest.raises(Refused) as refused:
        frozen("", NAMES.replace("old", "lost") + NEW)
    assert [item.code for item in refused.value.diagnostics] == ["no-such-file"]
    with pytest.raises(Refused) as refused:
        frozen("", NAMES.replace("old.design.yaml", "../../../etc/hostname") + NEW)
    assert [item.code for item in refused.value.diagnostics] == ["outside-root"]
    with pytest.raises(Refused) as refused:
        frozen("", old=OLD.replace("60 kg", "60 mm"))
    assert str(refused.value.diagnostics[0].span) == "old.design.yaml:2:33"
