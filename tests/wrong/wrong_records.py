"""Wrong tolerances, roundings, tests and consequences, with what is said of them."""

from __future__ import annotations

from wrong_inputs import NUMBERS, Wrong

TEST = "inputs: {records.*.result.pull: {unit: kN, meaning: Greatest pull}}\n"


def ruled(said: str, condition: str = "a <= 10 mm") -> str:
    """A ruleset of one rule with something beside its condition."""
    return f"{NUMBERS}rules:\n  it:\n    require: {condition}\n    {said}\n"


def tested(said: str) -> str:
    """A ruleset of one rule on a test."""
    return f"{TEST}rules:\n  it:\n    record: {said}\n"


def kept(said: str) -> str:
    """A ruleset of one rule on what is frozen."""
    return f"{NUMBERS}rules:\n  it:\n    frozen: {said}\n"


CASES = (
    ("a tolerance of another dimension", ruled("tolerance: 3 kg")),
    ("a tolerance below zero", ruled("tolerance: -3 mm")),
    ("a tolerance with its sides turned round", ruled("tolerance: +2/+1 mm")),
    ("a tolerance with an uncertainty", ruled("tolerance: 3 mm ± 1 mm")),
    ("a tolerance without a unit", ruled("tolerance: much")),
    ("a share of a limit that is a share", ruled("tolerance: 3 %", "a / b <= 60 %")),
    ("a tolerance with two sides on an equality", ruled("tolerance: +2/-1 mm", "a == 10 mm within 1 mm")),
    ("a tolerance on what is forbidden", ruled("tolerance: 1 mm", "a != 10 mm within 1 mm")),
    ("a tolerance where there is no number", ruled("tolerance: 1 mm", "present(aero_surfaces.wing)")),
    ("a rounding that is no mapping", ruled("rounding: 1 kg")),
    ("a rounding without a way", ruled("rounding: {to: 1 mm}")),
    ("a rounding with a word that is none", ruled("rounding: {to: 1 mm, how: upp}")),
    ("a rounding with an unknown key", ruled("rounding: {to: 1 mm, how: up, step: 1}")),
    ("a rounding to nothing", ruled("rounding: {to: 0 mm, how: up}")),
    ("a rounding of another dimension", ruled("rounding: {to: 1 kg, how: up}")),
    ("a test without a name", tested("{require: result.pull >= 1 kN}")),
    ("a test with a name and an element", tested("{name: t, of: o, require: result.pull >= 1 kN}")),
    ("a test that asks for nothing", tested("{name: t}")),
    ("a test with an unknown key", tested("{name: t, require: result.pull >= 1 kN, set_up: 1}")),
    ("a test with no runs", tested("{name: t, require: result.pull >= 1 kN, runs: 0}")),
    ("a test of no element", tested("{of: o, require: result.pull >= 1 kN}")),
    ("a test with an unknown field", tested("{name: t, require: result.push >= 1 kN}")),
    ("a test that is a word", tested("nose")),
    ("what is frozen without a baseline", kept('{paths: ["tub.**"]}')),
    ("what is frozen without paths", kept("{baseline: old}")),
    ("nothing frozen", kept("{baseline: old, paths: []}")),
    ("a frozen path that is none", kept('{baseline: old, paths: ["tub.***"]}')),
    ("what is frozen with a tolerance below zero", kept("{baseline: old, paths: a, tolerance: -1 mm}")),
    ("what is frozen with changes that are no count", kept("{baseline: old, paths: a, changes_allowed: few}")),
    ("what is frozen from no day", kept("{baseline: old, paths: a, since: 2027-02-30}")),
    ("what is frozen with an unknown key", kept("{baseline: old, paths: a, until: 2027-02-03}")),
    ("a consequence without a kind", ruled("consequence: {points: 3}")),
    ("a consequence with points that are none", ruled("consequence: {kind: penalty, points: many}")),
    ("a consequence with an unknown key", ruled("consequence: {kind: penalty, point: 3}")),
)
SAID: dict[str, tuple[str, ...]] = {
    "a tolerance of another dimension": (
        "cup.ruleset.yaml:7:16: wrong-dimension: no limit of this rule is touched by its tolerance of 3 kg; expected a width of what is compared: length [m]",
    ),
    "a tolerance below zero": (
        "cup.ruleset.yaml:7:16: bad-value: '-3 mm' is no tolerance on a limit; expected a width such as '3 mm', '3 %' of the limit, or '+0/-5 deg'",
    ),
    "a tolerance with its sides turned round": (
        "cup.ruleset.yaml:7:16: bad-value: '+2/+1 mm' is no tolerance on a limit; expected a width such as '3 mm', '3 %' of the limit, or '+0/-5 deg'",
    ),
    "a tolerance with an uncertainty": (
        "cup.ruleset.yaml:7:16: bad-value: '3 mm ± 1 mm' is no tolerance on a limit; expected a width such as '3 mm', '3 %' of the limit, or '+0/-5 deg'",
    ),
    "a tolerance without a unit": (
        "cup.ruleset.yaml:7:16: bad-value: 'much' does not begin with a number; expected a number with its unit; write a value such as '1900 mm'",
    ),
    "a share of a limit that is a share": (
        "cup.ruleset.yaml:7:16: bad-value: '3 %' may be a share of the limit or a number of its own here; expected a number without unit, such as '0.015', which is added to the limit",
    ),
    "a tolerance with two sides on an equality": (
        "cup.ruleset.yaml:7:16: bad-value: 'a == 10 mm within 1 mm' has no upper and lower side; expected one width, such as '3 mm'",
    ),
    "a tolerance on what is forbidden": (
        "cup.ruleset.yaml:7:16: bad-value: 'a != 10 mm within 1 mm' forbids a value: it has no limit that a tolerance could loosen; expected a rule without it",
    ),
    "a tolerance where there is no number": (
        "cup.ruleset.yaml:7:16: wrong-dimension: no limit of this rule is touched by its tolerance of 1 mm; expected a width of what is compared: no number",
    ),
    "a rounding that is no mapping": (
        "cup.ruleset.yaml:7:15: bad-structure: a rounding says to what, and how; expected {to: 1 kg, how: down}",
    ),
    "a rounding without a way": (
        "cup.ruleset.yaml:7:15: missing-key: a rounding says to what, and how: 'how:' is missing here; expected {to: 1 kg, how: down}",
    ),
    "a rounding with a word that is none": (
        "cup.ruleset.yaml:7:31: unknown-choice: 'upp' is no way of rounding; expected up or down or nearest or even; did you mean 'up'?",
    ),
    "a rounding with an unknown key": (
        "cup.ruleset.yaml:7:35: unknown-key: a rounding has no key 'step'; expected to or how",
    ),
    "a rounding to nothing": (
        "cup.ruleset.yaml:7:20: bad-value: what is rounded to is a step above zero; expected a step such as '1 kg' ('1 K' for a temperature)",
    ),
    "a rounding of another dimension": (
        "cup.ruleset.yaml:7:15: wrong-dimension: no limit of this rule is touched by its rounding of up to 1 kg; expected a width of what is compared: length [m]",
    ),
    "a test without a name": (
        "cup.ruleset.yaml:6:13: bad-structure: a test has a 'name', or says of which element it is, and not both; expected name: nose_impact, or of: o under each",
    ),
    "a test with a name and an element": (
        "cup.ruleset.yaml:6:13: bad-structure: a test has a 'name', or says of which element it is, and not both; expected name: nose_impact, or of: o under each",
    ),
    "a test that asks for nothing": (
        "cup.ruleset.yaml:6:13: missing-key: 'require:' is missing here; expected {name: nose_impact, setup: setup.mass >= 300 kg, require: result.mean_deceleration <= 20 gn}",
    ),
    "a test with an unknown key": (
        "cup.ruleset.yaml:6:53: unknown-key: a test has no key 'set_up'; expected name or of or setup or require or runs or tolerance or rounding; did you mean 'setup'?",
    ),
    "a test with no runs": (
        "cup.ruleset.yaml:6:59: bad-number: 'runs' is how many valid runs are asked for; expected 1 to 1000",
    ),
    "a test of no element": (
        "cup.ruleset.yaml:6:18: unknown-name: 'o' is no element of this rule's 'each'; expected its variable: of: o under each: o in …",
    ),
    "a test with an unknown field": (
        "cup.ruleset.yaml:6:32: unknown-name: 'result' has no field 'push'; expected pull",
    ),
    "a test that is a word": (
        "cup.ruleset.yaml:6:13: bad-structure: a test has keys; expected {name: nose_impact, setup: setup.mass >= 300 kg, require: result.mean_deceleration <= 20 gn}",
    ),
    "what is frozen without a baseline": (
        "cup.ruleset.yaml:6:13: missing-key: 'baseline:' is missing here; expected {baseline: homologated, since: 2027-02-01, paths: [\"tub.**\"]}",
    ),
    "what is frozen without paths": (
        "cup.ruleset.yaml:6:13: missing-key: 'paths:' is missing here; expected {baseline: homologated, since: 2027-02-01, paths: [\"tub.**\"]}",
    ),
    "nothing frozen": ('cup.ruleset.yaml:6:36: bad-structure: nothing is frozen here; expected paths: ["tub.**"]',),
    "a frozen path that is none": (
        'cup.ruleset.yaml:6:37: bad-name: this is no path that could be frozen; expected names joined by dots, * for any, ** for all below: ["tub.**"]',
    ),
    "what is frozen with a tolerance below zero": (
        "cup.ruleset.yaml:6:50: bad-value: the tolerance of what is frozen is a width that is not negative; expected such as '1 mm'",
    ),
    "what is frozen with changes that are no count": (
        "cup.ruleset.yaml:6:56: bad-number: 'changes_allowed' is a count; expected 0 to 10000",
    ),
    "what is frozen from no day": (
        "cup.ruleset.yaml:6:46: bad-date: the calendar has no 2027-02-30; expected a day of the calendar",
    ),
    "what is frozen with an unknown key": (
        "cup.ruleset.yaml:6:39: unknown-key: what is frozen has no key 'until'; expected baseline or since or paths or tolerance or changes_allowed",
    ),
    "a consequence without a kind": (
        "cup.ruleset.yaml:7:18: missing-key: 'kind:' is missing here; expected {kind: penalty, points: 20}",
    ),
    "a consequence with points that are none": (
        "cup.ruleset.yaml:7:42: bad-number: 'many' is no number of points; expected such as 20 or 2.5",
    ),
    "a consequence with an unknown key": (
        "cup.ruleset.yaml:7:34: unknown-key: a consequence has no key 'point'; expected kind or points or amount or time or text; did you mean 'points'?",
    ),
}
WRONG_RECORDS = tuple(
    Wrong(name, SAID.get(name, ()), "" if ruleset.startswith(TEST) else "a: 5 mm\n", ruleset) for name, ruleset in CASES
)
