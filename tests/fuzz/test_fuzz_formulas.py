"""Formula texts by the thousand through parsing, binding and evaluation: nothing but diagnostics or values comes out."""

from __future__ import annotations

import random
import time
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from tempfile import TemporaryDirectory

import pytest
from mutating import PIECES, mutant
from small_files import CAR, DAY, RULES, write_files

from rulecheck.api import load_design, load_ruleset
from rulecheck.binding.bind import bind
from rulecheck.diagnostics import Diagnostic, Refused, Span
from rulecheck.formula.parser import parse_each, parse_formula
from rulecheck.model.design import Design
from rulecheck.model.ruleset import Ruleset
from rulecheck.physics.library import Library
from rulecheck.reading.nodes import Located
from rulecheck.studies.check import Checker

SECONDS = 20.0
"""Processor time that no single bundle of formulas may take; a hundredth is usual."""

DESIGN = """\
a: 5 mm
b: 7 mm
c: 3 kg
f: yes
dimensions: {wheelbase: 2800 mm, overall_width: 1890 mm}
tyres: {front: {width: 300 mm}, rear: {width: 330 mm}}
masses: {tub: {mass: 700 kg, at: 1 0 0 m}, fuel: {mass: 50 kg, at: 2 0 0 m}}
edges: {sill: {radius: 3 mm, exposed: yes}, lip: {exposed: no}}
points: {knee: 1 2 3 mm, foot: 4 5 600 mm, hip: 0 9 9 mm}
powertrain: {kind: hybrid}
evidence: {hoop: {kind: certificate, made: 2024-02-29}}
"""
RULESET = """\
inputs: {a: {unit: mm, meaning: a}, b: {unit: mm, meaning: b}, c: {unit: kg, meaning: c}, f: {kind: flag, meaning: f}, g: {kind: flag, meaning: g}}
tables: {least: {over: a, steps: [{up_to: 5 mm, value: 1 kg}, {below: 9 mm, value: 2 kg}]}}
lists: {steels: ["25CrMo4", "30CrMo4"]}
derived: {room: {formula: a - b, unit: mm}, thick: {for: e in edges, formula: e.radius >= 1 mm}}
rules:
  other: {require: a <= 10 mm}
  it: {require: a <= 10 mm}
"""
FORMULAS = (
    "a <= 10 mm", "30 mm <= a + b < 60 mm", "not (f and g) or a >= 1 mm", "a == 5 mm within 0.1 mm", "room * 2 <= 3 mm",
    "(a if f else b) <= 10 mm", "sqrt(a * b) <= 6 mm", "min(a, b, 3 mm) >= 75 % * max(a, b)", "a ^ 2 <= (3 mm)^2",
    "sum(m.mass for m in masses) <= 900 kg", "count(for e in edges where e.exposed == yes) >= 1",
    "max(t.width for t in tyres) <= 356 mm", "every(e.radius >= 1 mm for e in edges)", "share(for e in edges where thick(e)) >= 50 %",
    "distance(points.knee, line(points.foot, points.hip)) >= 1 mm", "angle(line(points.knee, points.foot), vertical, side) <= 12 deg",
    "distance(points.knee, plane(points.foot, points.hip, point(0 mm, 0 mm, 1 mm))) <= 1 m", "turn_angle(points.knee, points.foot, points.hip) <= 3 rad",
    "on <= end_of_year(evidence.hoop.made + 5 years)", "years_between(evidence.hoop.made, on) < 5", "powertrain.kind in [hybrid, electric]",
    '"25CrMo4" in steels', "least >= 1 kg", "least(b) >= 1 kg", "rule(other) and margin(other) >= 1 mm", "present(points.knee)", "sin(a / b) <= 0.5",
    "sum(distance(p, q) for p, q in pairs(points)) >= 1 mm", "round(a, 1 mm) == 5 mm within 0 mm", "exp(a / b) * ln(b / a) >= atan2(a, b) / 1 rad",
    "a <= 3/8 in", "tyres.rear.width - a <= 0.3 m", "pi * a * (b - a) <= 90 mm^2", "deviation(t.width for t in tyres) <= 1 m", "mass.total >= 1 kg",
)  # fmt: skip
LOOPS = ("t in tyres where t.width >= 1 mm", "p, q in pairs(points)", "e in [edges.sill, edges.lip]", "m in masses")


def made() -> tuple[Design, Ruleset]:
    with TemporaryDirectory() as folder:
        write_files(Path(folder), {"car.design.yaml": CAR + DESIGN, "cup.ruleset.yaml": RULES + RULESET})
        return load_design(Path(folder, "car.design.yaml")), load_ruleset(Path(folder, "cup.ruleset.yaml"))


CAR_MADE, BOOK = made()


def soup(source: random.Random) -> str:
    """Pieces of formulas in any order."""
    words = [piece for formula in FORMULAS for piece in formula.split()]
    return " ".join(source.choice(words if source.random() < 0.8 else PIECES) for _ in range(source.randint(1, 14)))


def formula(source: random.Random) -> str:
    if source.random() < 0.3:
        return soup(source)
    return mutant(source, source.choice(FORMULAS), FORMULAS)


def located(text: str, number: int) -> Located:
    return Located(text, Span("fuzz", number, number + len(text), number + 1, 1))


def readable(texts: list[str]) -> list[Located]:
    """The texts that parse, each at a place of its own."""
    kept = []
    for number, text in enumerate(texts):
        where = located(text, number)
        said = faults_of(lambda where=where: parse_formula(where))
        if not said:
            kept.append(where)
    return kept


def faults_of(action: Callable[[], object]) -> tuple[Diagnostic, ...]:
    """The diagnostics with which an action is refused; none where it is not."""
    try:
        action()
    except Refused as refused:
        said = refused.diagnostics
    else:
        return ()
    assert said
    assert all(item.message for item in said)
    return said


def bound(texts: list[Located]) -> list[Located]:
    """The texts that bind, each as a rule of one ruleset; a text that is at fault is left out, and the rest judged."""
    kept = texts
    while kept:
        said = faults_when_judged(kept)
        if not said:
            break
        faulty = {item.span.line for item in said if item.span is not None and item.span.file == "fuzz"}
        fewer = [text for text in kept if text.span.line not in faulty]
        # A fault may point into a table that a text uses; then each is tried by itself.
        kept = fewer if len(fewer) < len(kept) else [text for text in kept if not faults_when_judged([text])]
    return kept


def faults_when_judged(texts: list[Located]) -> tuple[Diagnostic, ...]:
    return faults_of(lambda: judged(book_of(texts)))


def book_of(texts: list[Located]) -> Ruleset:
    """The ruleset with a rule for each text."""
    rule = BOOK.rules["it"]
    named = {f"r{number}": text for number, text in enumerate(texts)}
    rules = {name: replace(rule, name=name, own=replace(rule.own, require=text)) for name, text in named.items()}
    return replace(BOOK, rules={**BOOK.rules, **rules})


def judged(book: Ruleset) -> None:
    """Every rule of a ruleset with its verdict."""
    graph = bind(CAR_MADE, [book], day=DAY, physics=Library())
    checker = Checker(graph)
    for rule in graph.rules:
        finding = checker.finding(rule, book.rules[rule.name])
        assert finding.verdict in ("complies", "breach", "open", "unproven", "not applicable")


def run(seed: int, count: int, bundle: int = 100) -> tuple[int, int]:
    """So many formulas; how many of them were read, and how many were judged."""
    source = random.Random(seed)
    read = good = 0
    for _ in range(count // bundle):
        texts = [formula(source) for _ in range(bundle)]
        start = time.process_time()
        parsed = readable(texts)
        kept = bound(parsed)
        assert time.process_time() - start < SECONDS, texts
        read, good = read + len(parsed), good + len(kept)
    return read, good


def test_formulas_as_written_are_judged() -> None:
    assert len(bound(readable(list(FORMULAS)))) == len(FORMULAS) - 1  # one is answered with advice


def test_formulas_end_in_diagnostics_or_verdicts() -> None:
    read, good = run(1, 18_000)
    assert read > 1_500
    assert good > 300


def test_loops_end_in_diagnostics_or_are_read() -> None:
    source = random.Random(5)
    read = 0
    for number in range(1_500):
        where = located(mutant(source, source.choice(LOOPS), FORMULAS), number)
        read += not faults_of(lambda where=where: parse_each(where))
    assert read > 50


@pytest.mark.long
@pytest.mark.parametrize("seed", range(100, 110))
def test_many_formulas_end_in_diagnostics_or_verdicts(seed: int) -> None:
    assert run(seed, 30_000)[0]
