"""Nothing missing is met: what is taken out of a design never makes a rule comply that did not.

Taken out are single stated values, needed states and whole documents, out of the demonstration cars and out of a small
car for a ruleset with every shape. So that rules stand in breach that a deletion could mend wrongly, each ruleset is
also taken with its conditions turned into their opposites.
"""

from __future__ import annotations

import random
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import replace
from datetime import date
from itertools import combinations
from pathlib import Path
from tempfile import TemporaryDirectory

import pytest
from shapes_car import GOOD, OLD, SHAPES, bad

from rulecheck.api import load_design, load_ruleset
from rulecheck.binding.bind import bind
from rulecheck.diagnostics import Refused
from rulecheck.model.core_table import CORE
from rulecheck.model.design import Design, holders
from rulecheck.model.ruleset import Rule, Ruleset
from rulecheck.model.vocabulary import Vocabulary
from rulecheck.physics.library import Library
from rulecheck.reading.nodes import Located
from rulecheck.reading.nodes import Mapping as MappingNode
from rulecheck.studies.check import Checker

ROOT = Path(__file__).resolve().parents[2]
DAY = date(2027, 3, 1)
MET = ("complies", "tight")
NOT_MET = ("breach", "open", "unproven", "not followed")

OPTIONAL = ("quantity", "mirror", "datum", "growth", "basis", "issued")
"""Fields that may be left out: to leave them out is a change of the design, not a gap in it.

`issued` is one of them (no rule asks for it), and so is the last day of kinds that do not run out; what leaving them out
may do, and no more, is held by `test_what_striking_out_the_dates_of_a_document_can_do`.
"""


def verdicts(design: Design, ruleset: Ruleset) -> dict[str, str]:
    """The verdict of every rule."""
    graph = bind(design, [ruleset], day=DAY, physics=Library())
    checker = Checker(graph)
    return {bound.name: checker.finding(bound, ruleset.rules[bound.name]).verdict for bound in graph.rules}


def opposed(ruleset: Ruleset) -> Ruleset:
    """The ruleset with every condition turned into its opposite."""

    def turned(rule: Rule) -> Rule:
        own, require = rule.own, rule.own.require
        if require is None:
            return rule
        return replace(rule, own=replace(own, require=Located(f"not ({require.text})", require.span)))

    return replace(ruleset, rules={name: turned(rule) for name, rule in ruleset.rules.items()})


# --- what is taken out -----------------------------------------------------------------------------------------------


def without(design: Design, *gone: str) -> Design:
    """The design without some leaves, items or needed states."""
    leaves = {path: node for path, node in design.leaves.items() if not set(holders(path)) & set(gone)}
    items = {
        path: tuple(name for name in names if (f"{path}.{name}" if path else name) not in gone)
        for path, names in design.items.items()
        if not set(holders(path)) & set(gone)
    }
    states = {
        axis: {name: state for name, state in named.items() if f"states.{axis}.{name}" not in gone}
        for axis, named in design.states.items()
    }
    return replace(
        design, leaves=leaves, items=items, states=states,
        complete=frozenset(path for path in design.complete if f"{path}.complete" not in gone),
        absent=frozenset(path for path in design.absent if path not in gone),
    )  # fmt: skip


def takeable(design: Design, ruleset: Ruleset) -> list[str]:
    """Every value, needed state, document and required item; without what is optional."""
    vocabulary = Vocabulary(CORE).extended(ruleset.inputs)
    made = [path for path in design.leaves if _is_needed(vocabulary, path)]
    made.extend(f"states.{axis}.{name}" for axis, named in ruleset.needed.items() for name in named)
    made.extend(f"evidence.{name}" for name in design.items.get("evidence", ()))
    made.extend(f"records.{name}" for name in design.items.get("records", ()))
    made.extend(f"judgements.{name}" for name in design.items.get("judgements", ()))
    made.extend(f"{path}.complete" for path in design.complete)
    for entry in vocabulary:
        if entry.kind == "collection" and entry.path in design.items:
            made.append(entry.path)
            made.extend(f"{entry.path}.{name}" for name in entry.items)
    return list(dict.fromkeys(made))


def _is_needed(vocabulary: Vocabulary, path: str) -> bool:
    entry = vocabulary.entry(path)
    if path.rpartition(".")[2] in OPTIONAL or path.partition(".")[0] in ("claims", "dispensations", "datums"):
        return False
    return entry is None or not (entry.default or entry.computed)


def mended(design: Design, ruleset: Ruleset, gone: Iterable[str], before: Mapping[str, str]) -> list[str]:
    """The rules that did not comply before, and do now that something is gone."""
    try:
        after = verdicts(without(design, *gone), ruleset)
    except Refused:  # something else names what is gone
        return []
    return [name for name, said in after.items() if said in MET and before[name] in NOT_MET]


# --- a ruleset with every shape --------------------------------------------------------------------------------------


def shapes(design: str) -> tuple[Design, Ruleset]:
    with TemporaryDirectory() as folder:
        place = Path(folder)
        (place / "car.design.yaml").write_text(design, encoding="utf-8")
        (place / "old.design.yaml").write_text(OLD, encoding="utf-8")
        (place / "cup.ruleset.yaml").write_text(SHAPES, encoding="utf-8")
        return load_design(place / "car.design.yaml"), load_ruleset(place / "cup.ruleset.yaml")


def cars() -> Iterator[tuple[str, Design, Ruleset]]:
    """The small car well and badly made, against the rules and against their opposites."""
    for name, text in (("good", GOOD), ("bad", bad())):
        design, ruleset = shapes(text)
        yield name, design, ruleset
        yield f"{name}, opposed", design, opposed(ruleset)


CARS = {name: (design, ruleset) for name, design, ruleset in cars()}


def test_the_good_car_complies_and_the_bad_one_does_not() -> None:
    good, worse = verdicts(*CARS["good"]), verdicts(*CARS["bad"])
    assert {name: said for name, said in good.items() if said != "complies"} == {}
    unmoved = {name for name, said in worse.items() if said in MET}
    assert len(unmoved) <= 14, unmoved
    assert sum(said in NOT_MET for said in verdicts(*CARS["good, opposed"]).values()) >= 35


@pytest.mark.parametrize("name", CARS)
@pytest.mark.parametrize("share", [pytest.param(4, id="a quarter"), pytest.param(1, id="all", marks=pytest.mark.long)])
def test_no_single_deletion_makes_a_rule_of_any_shape_comply(name: str, share: int) -> None:
    design, ruleset = CARS[name]
    before = verdicts(design, ruleset)
    whole = takeable(design, ruleset)
    assert len(whole) > 110
    gaps = random.Random(name).sample(whole, len(whole) // share)
    found = {gone: rules for gone in gaps if (rules := mended(design, ruleset, [gone], before))}
    assert found == {}


@pytest.mark.parametrize("name", CARS)
def test_no_second_deletion_makes_a_rule_comply(name: str) -> None:
    design, ruleset = CARS[name]
    source = random.Random(len(name))
    pairs = list(combinations(takeable(design, ruleset), 2))
    for first, second in source.sample(pairs, 10):
        _held_in_pairs(design, ruleset, first, second)


def _held_in_pairs(design: Design, ruleset: Ruleset, first: str, second: str) -> None:
    for alone in (first, second):
        try:
            before = verdicts(without(design, alone), ruleset)
        except Refused:
            continue
        assert mended(design, ruleset, [first, second], before) == [], (first, second)


@pytest.mark.long
@pytest.mark.parametrize("name", CARS)
def test_no_second_deletion_makes_a_rule_comply_at_length(name: str) -> None:
    design, ruleset = CARS[name]
    pairs = list(combinations(takeable(design, ruleset), 2))
    for first, second in random.Random(5).sample(pairs, 250):
        _held_in_pairs(design, ruleset, first, second)


def test_every_deletion_is_felt_by_some_rule_of_the_good_car() -> None:
    """The test above would see nothing if what is taken out were never read."""
    design, ruleset = CARS["good"]
    whole = takeable(design, ruleset)
    unfelt = []
    for gone in random.Random(2).sample(whole, len(whole) // 3):
        try:
            said = verdicts(without(design, gone), ruleset)
        except Refused:
            continue
        if all(verdict == "complies" for verdict in said.values()):
            unfelt.append(gone)
    # What is shown and not judged, what decides only beside other values, what a state sets anyway.
    harmless = ("reference", "belt.kind", "material", "loaded_radius", "vane.radius", "power_steering", "bolt")
    assert [gone for gone in unfelt if not gone.endswith(harmless)] == []


# --- the demonstration cars ------------------------------------------------------------------------------------------


def demo(name: str) -> tuple[Design, Ruleset]:
    design = load_design(ROOT / "designs_demo" / f"{name}.design.yaml")
    return design, load_ruleset(ROOT / "rulesets_demo" / "saltmere.ruleset.yaml")


def is_ledger(path: str) -> bool:
    return path.startswith("masses.")


@pytest.mark.parametrize("is_opposed", [False, True], ids=["rules", "opposites"])
def test_no_deletion_of_the_demo_makes_a_rule_comply(is_opposed: bool) -> None:
    design, ruleset = demo("marram-p2-breach")
    ruleset = opposed(ruleset) if is_opposed else ruleset
    before = verdicts(design, ruleset)
    gaps = takeable(design, ruleset)
    source = random.Random(3)
    stated, ledger = [gone for gone in gaps if not is_ledger(gone)], [gone for gone in gaps if is_ledger(gone)]
    for gone in (*source.sample(stated, 2), *source.sample(ledger, 1)):
        assert mended(design, ruleset, [gone], before) == [], gone


@pytest.mark.long
@pytest.mark.parametrize("is_opposed", [False, True], ids=["rules", "opposites"])
@pytest.mark.parametrize("name", ["marram-p2", "marram-p2-breach"])
def test_no_deletion_of_any_stated_value_of_the_demo_makes_a_rule_comply(name: str, is_opposed: bool) -> None:
    design, ruleset = demo(name)
    ruleset = opposed(ruleset) if is_opposed else ruleset
    before = verdicts(design, ruleset)
    gaps = takeable(design, ruleset)
    ledger = [gone for gone in gaps if is_ledger(gone)]
    taken = [*(gone for gone in gaps if not is_ledger(gone)), *random.Random(7).sample(ledger, 40)]
    found = {gone: rules for gone in taken if (rules := mended(design, ruleset, [gone], before))}
    assert found == {}


@pytest.mark.long
def test_no_two_deletions_of_the_demo_make_a_rule_comply() -> None:
    design, ruleset = demo("marram-p2-breach")
    stated = [gone for gone in takeable(design, ruleset) if not is_ledger(gone)]
    source = random.Random(9)
    for _ in range(100):
        _held_in_pairs(design, opposed(ruleset), *source.sample(stated, 2))


def test_a_value_in_the_long_form_is_one_value() -> None:
    design, ruleset = CARS["good"]
    assert isinstance(design.leaves["dimensions.rear_track"], MappingNode)
    assert "dimensions.rear_track" in takeable(design, ruleset)


PAPERS = """\
design: Heron 4
rulesets: [cup.ruleset.yaml]
evidence:
  hoop: {{kind: {kind}, reference: R1{issued}{until}}}
"""
PAPER_RULE = "ruleset: Dunmere Cup\nrules:\n  it: {{evidence: {{kind: {kind}, name: hoop}}}}\n"


def paper_verdict(kind: str, issued: str, until: str) -> str:
    with TemporaryDirectory() as folder:
        place = Path(folder)
        dates = {"issued": f", issued: {issued}" if issued else "", "until": f", until: {until}" if until else ""}
        (place / "car.design.yaml").write_text(PAPERS.format(kind=kind, **dates), encoding="utf-8")
        (place / "cup.ruleset.yaml").write_text(PAPER_RULE.format(kind=kind), encoding="utf-8")
        return verdicts(load_design(place / "car.design.yaml"), load_ruleset(place / "cup.ruleset.yaml"))["it"]


RUNS_OUT = ("certificate", "homologation", "licence")
EARLIER, LATER = "2027-02-28", "2027-03-02"


@pytest.mark.parametrize("kind", next(entry for entry in CORE if entry.path == "evidence.*.kind").choices)
def test_what_striking_out_the_dates_of_a_document_can_do(kind: str) -> None:
    """It mends a document of a later day, and the last day of one that need not run out; never one that must."""
    for issued in ("", EARLIER, str(DAY), LATER):
        for until in ("", EARLIER, str(DAY), LATER):
            before = paper_verdict(kind, issued, until)
            if paper_verdict(kind, "", until) in MET and before not in MET:
                assert issued == LATER
            if paper_verdict(kind, issued, "") in MET and before not in MET:
                assert (until, kind in RUNS_OUT) == (EARLIER, False)
    assert paper_verdict(kind, EARLIER, "") == ("open" if kind in RUNS_OUT else "complies")
    assert paper_verdict(kind, LATER, LATER) == "open"
    assert paper_verdict(kind, EARLIER, EARLIER) == "breach"
