"""Mutants of small files through reading and checking: nothing but diagnostics or a report comes out."""

from __future__ import annotations

import random
import time
from collections import Counter

import pytest
from mutating import mutant
from small_files import CAR, RULES, check_files

from rulecheck.diagnostics import Diagnostic, Refused
from rulecheck.outcome.results import VERDICTS

SECONDS = 20.0
"""Processor time that no single check may take; a hundredth of a second is usual."""

FILES = {
    "car.design.yaml": CAR
    + """\
ledger: [parts.csv]
dimensions: {wheelbase: 2870 mm ± 0.8 mm, overall_width: {value: 1904 mm, uncertainty: 0.6 mm, coverage: 2}}
tyres: {front: {width: 300 mm}, rear: {width: 330 +0/-2 mm}}
masses:
  fuel: {mass: 52 kg, at: 1640 0 270 mm, growth: 5 %}
edges: {sill: {radius: 3 mm, exposed: yes}, lip: {radius: 2 mm, exposed: no}}
points: {knee: {datum: rear_axle, at: -500 0 300 mm}, foot: 1 2 3 mm}
lamps: {left: {area: 3 cm^2, proof: hoop}, complete: yes}
powertrain: {kind: hybrid, displacement: 2 L}
states: {fuel: {empty: {masses.fuel.mass: 0 kg}, full: {}}}
evidence: {hoop: {kind: certificate, until: 2028-01-31}}
judgements: {finish: {verdict: complies, role: scrutineer, date: 2027-02-01, reason: felt}}
dispensations: {d: {rule: width, reference: L-1, until: 2027-12-31}}
claims: {tube: thick}
""",
    "cup.ruleset.yaml": RULES
    + """\
valid: {from: 2027-01-01, until: 2031-12-31}
states_needed: {fuel: [empty, full]}
inputs:
  lamps: {kind: collection, meaning: Lamps, items: [left], element: {area: {unit: cm^2, meaning: a}, proof: {kind: text, meaning: p}}}
tables:
  least: {over: powertrain.displacement, steps: [{up_to: 2 L, value: 700 kg}, {otherwise: 800 kg}]}
lists: {kinds: [hybrid, electric]}
derived: {room: {formula: dimensions.overall_width - 2 * tyres.rear.width, unit: mm}}
groups: {g: {when: powertrain.kind == hybrid, rules: [width]}}
rules:
  width: {clause: "1", require: 1 m <= dimensions.overall_width <= 1900 mm}
  reach: {envelope: {dimensions.wheelbase: [2 m, 3 m]}, require: dimensions.wheelbase <= 3100 mm}
  weight: {states: every, require: "sum(m.mass for m in masses) >= least"}
  edge: {each: "e in edges where e.exposed == yes", empty: complies, require: e.radius >= 1.5 mm}
  lamp: {each: l in lamps, evidence: {kind: certificate, name: l.proof}}
  tube: {branches: {thick: {require: room >= 1 m}, other: {evidence: {kind: certificate, name: hoop}}}}
  hoop: {evidence: {kind: certificate, name: hoop, due: 2027-06-30}}
  finish: {judgement: Is it smooth?}
  knee: {require: "distance(points.knee, points.foot) >= 1 m", unless: {when: present(edges.vane), because: vane}, scale: 1 m}
  both: {standing: should, require: rule(width) and margin(weight) >= 1 kg}
""",
    "parts.csv": "item,mass [kg],x [mm],y [mm],z [mm],datum,quantity,mirror,basis\ntub,700,1190,0,318,,,,weighed\nwheel,9.1,0,790,331,rear_axle,1,yes,\n",
    "wet.change.yaml": "set:\n  tyres.rear.width: 320 mm\n  edges.vane: {radius: 1 mm, exposed: yes}\n  points.foot: none\n",
}
"""Every kind of file, each small."""


def one(source: random.Random) -> str:
    """One mutant of one of the files, checked; what came out."""
    name = source.choice(list(FILES))
    others = list(FILES.values())
    files = {**FILES, name: mutant(source, FILES[name], others)}
    changes = ["wet.change.yaml"] if name.startswith("wet") or source.random() < 0.2 else []
    start = time.process_time()
    report, said = None, ()
    try:
        report = check_files(files, changes=changes)
    except Refused as refused:
        said = refused.diagnostics
    assert time.process_time() - start < SECONDS, files[name]
    if report is None:
        _are_sound(said, files)
        return "refused"
    assert {finding.verdict for finding in report.rules} <= set(VERDICTS)
    return "report"


def _are_sound(said: tuple[Diagnostic, ...], files: dict[str, str]) -> None:
    assert said
    for item in said:
        assert item.message
        if item.span is not None and item.span.file in files:
            assert 0 <= item.span.start <= item.span.end <= len(files[item.span.file]), item
        assert str(item)


def test_the_files_as_written_are_checked() -> None:
    report = check_files(FILES, changes=["wet.change.yaml"])
    assert len({finding.verdict for finding in report.rules}) >= 3


def test_mutants_of_files_end_in_diagnostics_or_a_report() -> None:
    source = random.Random(3)
    outcomes = Counter(one(source) for _ in range(700))
    assert min(outcomes["refused"], outcomes["report"]) > 50


@pytest.mark.long
@pytest.mark.parametrize("seed", range(200, 210))
def test_many_mutants_of_files_end_in_diagnostics_or_a_report(seed: int) -> None:
    source = random.Random(seed)
    assert Counter(one(source) for _ in range(6_000))["refused"]
