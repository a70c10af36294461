"""What holds of every check: units and order change nothing, margins are the fractions that arithmetic gives."""

from __future__ import annotations

import random
from collections.abc import Iterable
from datetime import date
from fractions import Fraction
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from small_files import check_texts, findings, margin, require

from rulecheck.api import check, load_design
from rulecheck.model.design import Overlay
from rulecheck.outcome.results import Report
from rulecheck.quantity.units import find_unit
from rulecheck.reading.nodes import Located, Mapping
from rulecheck.reading.yaml_reader import parse_yaml

DEMO = Path(__file__).resolve().parents[2] / "designs_demo"
DAY = date(2027, 3, 1)


def said(report: Report) -> dict[str, tuple[object, ...]]:
    """What is decided of each rule."""
    return {
        finding.name: (finding.verdict, finding.strict, finding.margin and (finding.margin.exact, finding.margin.unit))
        for finding in report.rules
    }


# --- units -----------------------------------------------------------------------------------------------------------

SAME = {
    "mm": ("m", "cm", "in", "ft", "µm"),
    "kg": ("gram", "t", "lb"),
    "m^2": ("cm^2", "mm^2", "ft^2"),
    "kN": ("N", "lbf"),
    "kW": ("W", "MW"),
    "kg/h": ("kg/s", "gram/s"),
    "MJ": ("J", "kWh"),
    "cm^3": ("L", "m^3", "in^3"),
    "L": ("cm^3", "m^3"),
    "cm^2": ("mm^2", "m^2"),
    "%": ("1",),
    "V": ("kV", "mV"),
    "s": ("ms", "min"),
    "km/h": ("m/s", "mph"),
    "N/mm": ("N/m", "kN/m"),
    "rpm": ("turn/s", "deg/s"),
    "deg": ("turn",),
    "kohm": ("ohm", "Mohm"),
    "m": ("mm", "km", "ft"),
}


def decimal(value: Fraction) -> str | None:
    """A fraction as a decimal, where one of moderate length ends."""
    places = next((n for n in range(40) if not value.denominator or 10**n % value.denominator == 0), None)
    if places is None:
        return None
    whole = str(abs(value * 10**places).numerator).rjust(places + 1, "0")
    shown = f"{whole[: len(whole) - places]}.{whole[len(whole) - places :]}" if places else whole
    return f"-{shown}" if value < 0 else shown


def reworded(text: str) -> list[str]:
    """The same value in other units."""
    number, _, symbol = text.partition(" ")
    unit = find_unit(symbol)
    made = []
    for other in SAME.get(symbol, ()):
        shown = decimal(Fraction(number) * unit.factor / find_unit(other).factor)
        if shown is not None:
            made.append(f"{shown} {other}")
    return made


def plain_values() -> Iterable[tuple[str, str]]:
    """Inputs of the demo car that are one number with a unit, in the order of the file."""
    design = load_design(DEMO / "marram-p2.design.yaml")
    for path, node in design.leaves.items():
        if isinstance(node, Located) and node.text.count(" ") == 1 and node.text.split()[1] in SAME:
            yield path, node.text


def test_the_unit_of_an_input_changes_nothing_in_the_demo() -> None:
    written = said(check(DEMO / "marram-p2.design.yaml", on=DAY))
    values = list(plain_values())
    assert len(values) > 60
    source = random.Random(7)
    for _ in range(2):
        changes = {path: source.choice(other) for path, text in values if (other := reworded(text))}
        assert len(changes) > 60
        assert said(check(DEMO / "marram-p2.design.yaml", on=DAY, settings=changes)) == written


@given(st.fractions(Fraction(1, 1000), 5000, max_denominator=1000), st.sampled_from(sorted(SAME)), st.data())
@settings(max_examples=60, deadline=None)
def test_the_unit_of_an_input_changes_no_exact_margin(value: Fraction, symbol: str, data: st.DataObject) -> None:
    shown = decimal(value)
    if shown is None:
        shown = str(value.numerator)
    declared = f'inputs: {{a: {{unit: "{symbol}", meaning: a}}}}\n'
    first = require(f"3 * a <= 2000 {symbol}", f"a: {shown} {symbol}\n", declared)
    others = reworded(f"{shown} {symbol}")
    if others:
        other = data.draw(st.sampled_from(others))
        second = require(f"3 * a <= 2000 {symbol}", f"a: {other}\n", declared)
        assert (first.verdict, margin(first)) == (second.verdict, margin(second))


# --- order -----------------------------------------------------------------------------------------------------------

CAR = {
    "dimensions": "{wheelbase: 2870 mm, overall_width: 1904 mm, front_track: 1590 mm, rear_track: 1560 mm}",
    "tyres": "{front: {width: 300 mm, diameter: 684 mm}, rear: {width: 330 mm, diameter: 712 mm}}",
    "masses": "{tub: {mass: 96 kg, at: 1250 0 310 mm}, fuel: {mass: 52 kg, at: 1610 0 290 mm}, box: {mass: 41 kg, at: 2 0 0 m}}",
    "edges": "{sill: {radius: 3 mm, exposed: yes}, lip: {radius: 1 mm, exposed: yes}, vane: {radius: 1 mm, exposed: no}}",
    "states": "{fuel: {empty: {masses.fuel.mass: 0 kg}, full: {}}}",
    "evidence": "{hoop: {kind: certificate, until: 2028-01-31}}",
}
RULES = {
    "wheelbase": '{require: "2740 mm <= dimensions.wheelbase <= 2930 mm"}',
    "width": '{require: "dimensions.overall_width <= 1900 mm"}',
    "tyre": '{each: t in tyres, require: "t.width <= 320 mm and t.diameter >= 650 mm"}',
    "weight": '{states: every, require: "sum(m.mass for m in masses) >= 140 kg"}',
    "edge": '{each: "e in edges where e.exposed == yes", require: "e.radius >= 1.5 mm or e.radius >= 0.1 in"}',
    "hoop": "{evidence: {kind: certificate, name: hoop}}",
    "both": '{require: "rule(wheelbase) and not rule(width)"}',
    "track": '{require: "narrow >= 93 % * wide"}',
}
DERIVED = {
    "narrow": '{formula: "min(dimensions.front_track, dimensions.rear_track)", unit: mm}',
    "wide": '{formula: "max(dimensions.front_track, dimensions.rear_track)", unit: mm}',
}


def section(entries: dict[str, str], order: Iterable[str], indent: str = "") -> str:
    return "".join(f"{indent}{name}: {entries[name]}\n" for name in order)


def ordered(car: Iterable[str], rules: Iterable[str], derived: Iterable[str]) -> dict[str, tuple[object, ...]]:
    ruleset = (
        f"rules:\n{section(RULES, rules, '  ')}derived:\n{section(DERIVED, derived, '  ')}"
        "states_needed: {fuel: [empty, full]}\n"
    )
    return said(check_texts(section(CAR, car), ruleset))


AS_WRITTEN = ordered(CAR, RULES, DERIVED)


@given(st.permutations(sorted(CAR)), st.permutations(sorted(RULES)), st.permutations(sorted(DERIVED)))
@settings(max_examples=40, deadline=None)
def test_the_order_of_keys_and_rules_changes_nothing(car: list[str], rules: list[str], derived: list[str]) -> None:
    assert {verdict for verdict, *_ in AS_WRITTEN.values()} == {"complies", "breach"}
    assert ordered(car, rules, derived) == AS_WRITTEN


# --- rational margins ------------------------------------------------------------------------------------------------

INPUTS = 'inputs: {p: {unit: "1", meaning: p}, q: {unit: "1", meaning: q}, r: {unit: "1", meaning: r}}\n'
NAMES = "pqr"


def grown(source: random.Random, depth: int, values: dict[str, Fraction]) -> tuple[str, Fraction | None]:
    """A random rational formula with its value; None where it is undefined."""
    if not depth:
        name = source.choice(NAMES)
        number = Fraction(source.randint(0, 400), source.choice((1, 2, 4, 5, 8, 10)))
        return (name, values[name]) if source.random() < 0.6 else (f"{decimal(number)}", number)
    form = source.choice(("+", "-", "*", "/", "^", "negative", "abs", "min", "max", "if"))
    left, a = grown(source, depth - 1, values)
    right, b = grown(source, depth - 1, values)
    if a is None or b is None:
        return f"({left} + {right})", None
    if form == "/":
        return f"({left} / {right})", a / b if b else None
    if form == "if":
        return f"({left} if {left} < {right} else 2 * {right})", a if a < b else 2 * b
    power = source.randint(0, 3)
    made = {
        "+": (f"({left} + {right})", a + b),
        "-": (f"({left} - {right})", a - b),
        "*": (f"({left} * {right})", a * b),
        "^": (f"({left})^{power}", a**power),
        "negative": (f"(-{left})", -a),
        "abs": (f"abs({left} - {right})", abs(a - b)),
        "min": (f"min({left}, {right})", min(a, b)),
        "max": (f"max({left}, {right})", max(a, b)),
    }
    return made[form]


def held(seed: int) -> str:
    """One random formula through the check, against Python's fractions; what came out."""
    source = random.Random(seed)
    values = {name: Fraction(source.randint(-300, 300), source.choice((1, 2, 5, 10))) for name in NAMES}
    formula, value = grown(source, source.randint(1, 5), values)
    limit = Fraction(source.randint(-500, 500))
    design = "".join(f"{name}: {decimal(number)}\n" for name, number in values.items())
    found = require(f"{formula} <= {limit} + 0 * p", design, INPUTS)
    if value is None:
        assert found.verdict == "unproven", formula
        return "unproven"
    assert (found.verdict, margin(found)) == ("complies" if value <= limit else "breach", limit - value), formula
    return found.verdict


def test_rational_margins_are_those_of_fractions() -> None:
    outcomes = [held(seed) for seed in range(120)]
    assert {"complies", "breach", "unproven"} == set(outcomes)


@pytest.mark.long
def test_many_rational_margins_are_those_of_fractions() -> None:
    for seed in range(1000, 9000):
        held(seed)


# --- overlays --------------------------------------------------------------------------------------------------------

WORDS = st.sampled_from(
    ("1 mm", "2 kg", "none", "yes", "{u: 1 mm}", "{u: 1 mm, v: {w: 2 mm}}", "{value: 3 mm, basis: drawing}")
)
PATHS = st.lists(st.sampled_from("abc"), min_size=1, max_size=3).map(".".join)
OVERLAYS = st.lists(st.tuples(PATHS, WORDS), max_size=4).map(
    lambda pairs: Overlay.of([(path, parse_yaml(text, "x.yaml")) for path, text in pairs])
)


@given(OVERLAYS, OVERLAYS, OVERLAYS)
@settings(max_examples=300, deadline=None)
def test_overlays_are_associative_with_the_empty_one_as_identity(
    first: Overlay, second: Overlay, third: Overlay
) -> None:
    assert first.then(second).then(third) == first.then(second.then(third))
    assert first.then(Overlay()) == first == Overlay().then(first)


DEMO_PATHS = (
    "masses.fuel", "masses.fuel.mass", "masses.driver.at", "tyres.rear", "tyres.rear.width", "options", "evidence.cells",
    "points.knee", "points.knee.x", "dimensions.wheelbase", "ballast", "aero_surfaces.rear_wing.kind",
)  # fmt: skip
DEMO_WORDS = ("1 mm", "none", "{mass: 3 kg}", "{width: 1 mm, diameter: 2 mm}", "yes", "1 2 3 mm")


def laid(source: random.Random) -> Overlay:
    chosen = [(source.choice(DEMO_PATHS), source.choice(DEMO_WORDS)) for _ in range(source.randint(0, 4))]
    return Overlay.of([(path, parse_yaml(text, "x.yaml")) for path, text in chosen])


def test_laying_two_overlays_is_laying_their_sum() -> None:
    design = load_design(DEMO / "marram-p2.design.yaml")
    source = random.Random(11)
    for _ in range(150):
        first, second = laid(source), laid(source)
        apart, together = design.with_overlay(first).with_overlay(second), design.with_overlay(first.then(second))
        context = (first.settings, second.settings)
        assert apart.leaves == together.leaves, context
        assert apart.absent == together.absent, context
        assert {p: set(n) for p, n in apart.items.items()} == {p: set(n) for p, n in together.items.items()}, context


def test_an_empty_overlay_changes_nothing() -> None:
    design = load_design(DEMO / "marram-p2.design.yaml")
    assert design.with_overlay(Overlay()) == design
    assert design.with_overlay(Overlay.of([("", Mapping((), design.rulesets[0].span))])) == design
    assert said(check(DEMO / "marram-p2.design.yaml", on=DAY, settings={})) == said(
        check(DEMO / "marram-p2.design.yaml", on=DAY)
    )


# --- Kleene's logic --------------------------------------------------------------------------------------------------

FLAGS = ("f", "g", "h", "a <= 10 mm", "b >= 3 mm", "a < b")
FLAG_INPUTS = (
    "inputs: {f: {kind: flag, meaning: f}, g: {kind: flag, meaning: g}, h: {kind: flag, meaning: h}, "
    "a: {unit: mm, meaning: a}, b: {unit: mm, meaning: b}}\n"
)


def condition(source: random.Random, depth: int) -> str:
    if not depth:
        return source.choice(FLAGS)
    left, right = condition(source, depth - 1), condition(source, depth - 1)
    return source.choice(
        (f"({left} and {right})", f"({left} or {right})", f"not ({left})", f"(f if ({left}) else ({right}))")
    )


def stated(values: dict[str, str], names: Iterable[str]) -> str:
    return "".join(f"{name}: {values[name]}\n" for name in names)


def monotone(seed: int) -> str:
    """Less is known, and nothing that was decided turns: a verdict stays or becomes open."""
    source = random.Random(seed)
    values = {name: source.choice(("yes", "no")) for name in "fgh"}
    values.update({name: f"{source.randint(0, 20)} mm" for name in "ab"})
    rules = "rules:\n" + "".join(
        f'  r{n}: {{require: "{condition(source, source.randint(1, 4))}", scale: 1 mm}}\n' for n in range(6)
    )
    whole = findings(check_texts(stated(values, values), FLAG_INPUTS + rules))
    assert {finding.verdict for finding in whole.values()} <= {"complies", "breach"}
    known = [name for name in values if source.random() < 0.5]
    some = findings(check_texts(stated(values, known), FLAG_INPUTS + rules))
    for name, finding in some.items():
        assert finding.verdict in (whole[name].verdict, "open"), (rules, values, known)
    return " ".join(finding.verdict for finding in some.values())


def test_what_is_decided_with_less_known_stays_decided() -> None:
    outcomes = " ".join(monotone(seed) for seed in range(30))
    assert all(verdict in outcomes for verdict in ("complies", "breach", "open"))


@pytest.mark.long
def test_what_is_decided_with_less_known_stays_decided_at_length() -> None:
    for seed in range(1000, 4000):
        monotone(seed)


def test_the_same_question_has_the_same_answer() -> None:
    first, second = (check(DEMO / "marram-p2.design.yaml", on=DAY) for _ in range(2))
    assert first == second
    assert findings(first)
