"""Values of which a ruleset asks where they come from: a maker's limit needs its data sheet."""

from __future__ import annotations

import pytest
from small_files import margin, only, refused, require

LIMIT = "inputs: {tyres.*.load_rating: {basis: supplier}}\n"
RULE = "tyres.front.load_rating >= 6 kN"


@pytest.mark.parametrize(
    ("stated", "said", "reason"),
    [
        ("{value: 6.5 kN, basis: supplier, reference: TD-12}", "complies", ""),
        ("{value: 5.5 kN, basis: supplier, reference: TD-12}", "breach", ""),
        ("{value: 6.5 kN, basis: supplier}", "open", "the reference of tyres.front.load_rating"),
        ("{value: 6.5 kN, basis: supplier, reference: ' '}", "open", "the reference of tyres.front.load_rating"),
        ("{value: 6.5 kN, reference: TD-12}", "open", "basis 'supplier' (stated: none)"),
        ("{value: 6.5 kN, basis: measured, reference: TD-12}", "open", "basis 'supplier' (stated: measured)"),
        ("{value: 5.5 kN}", "open", "basis 'supplier' (stated: none)"),
        ("6.5 kN", "open", "basis 'supplier' (stated: none)"),
        ("none", "open", "tyres.front.load_rating"),
    ],
)
def test_a_makers_limit(stated: str, said: str, reason: str) -> None:
    design = f"tyres: {{front: {{load_rating: {stated}}}}}\n"
    found = require(RULE, design, LIMIT)
    assert found.verdict == said
    assert reason in found.reason
    assert bool(found.reason) == (said == "open")
    # Without the declaration the value alone counts.
    if "kN" in stated:
        assert require(RULE, design).verdict == ("breach" if "5.5" in stated else "complies")


def test_without_any_statement_it_is_open() -> None:
    assert require(RULE, "", LIMIT).verdict == "open"


DECLARED = """\
inputs:
  rig.gap: {unit: mm, basis: measured, meaning: Gap}
  rig.kind: {choices: [a, b], basis: supplier, meaning: Kind}
  rig.sealed: {kind: flag, basis: drawing, meaning: Sealed}
  rig.made: {kind: date, basis: supplier, meaning: Day}
  rig.grade: {kind: text, basis: supplier, meaning: Grade}
"""


@pytest.mark.parametrize(
    ("condition", "path", "value", "basis"),
    [
        ("rig.gap <= 3 mm", "gap", "2 mm", "measured"),
        ("rig.kind == a", "kind", "a", "supplier, reference: S1"),
        ("rig.sealed == yes", "sealed", "yes", "drawing"),
        ("rig.sealed", "sealed", "yes", "drawing"),
        ("rig.made <= on", "made", "2026-01-01", "supplier, reference: S1"),
        ('rig.grade == "E355"', "grade", "E355", "supplier, reference: S1"),
    ],
)
def test_every_kind_of_single_value(condition: str, path: str, value: str, basis: str) -> None:
    whole = f"rig: {{{path}: {{value: {value}, basis: {basis}}}}}\n"
    assert require(condition, whole, DECLARED).verdict == "complies"
    assert require(condition, f"rig: {{{path}: {value}}}\n", DECLARED).verdict == "open"
    assert require(f"not ({condition})", f"rig: {{{path}: {value}}}\n", DECLARED).verdict == "open"


def test_an_item_may_state_the_basis_of_all_its_values() -> None:
    rule = "inputs: {masses.*.mass: {basis: weighed}}\nrules: {it: {require: sum(m.mass for m in masses) >= 90 kg}}\n"
    tub = "masses: {tub: {mass: 96 kg, at: 0 0 0 mm, basis: weighed}, seat: {mass: 4 kg, at: 0 0 0 mm%s}}\n"
    assert margin(only(tub % ", basis: weighed", rule)) == 10
    assert only(tub % "", rule).verdict == "open"  # an item without a basis is estimated


def test_a_state_that_sets_the_value_states_its_basis_too() -> None:
    rule = f"{LIMIT}states_needed: {{tyre: [hard]}}\nrules: {{it: {{states: every, require: {RULE}}}}}\n"
    design = "states: {tyre: {hard: {tyres.front.load_rating: %s}}}\n"
    assert only(design % "{value: 6.5 kN, basis: supplier, reference: TD-12}", rule).verdict == "complies"
    assert only(design % "6.5 kN", rule).verdict == "open"


@pytest.mark.parametrize(
    ("declared", "code"),
    [
        ("tyres.*.load_rating: {basis: suplier}", "unknown-choice"),
        ("points.nose: {kind: point, basis: supplier, meaning: Nose}", "bad-structure"),
        ("rods: {kind: collection, basis: supplier, meaning: Rods, element: {}}", "bad-structure"),
        ("rig.new: {basis: supplier, meaning: New}", "missing-key"),
    ],
)
def test_what_basis_can_be_asked(declared: str, code: str) -> None:
    found = refused("", f"inputs: {{{declared}}}\nrules: {{it: {{require: {RULE}}}}}\n")
    assert [item.code for item in found] == [code]
