"""Along the values of one input: every point is what a check or the workings say of the design with that value."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest
from small_files import write_files

from rulecheck.api import check, vary, workings
from rulecheck.diagnostics import Refused
from rulecheck.outcome.varied import VariedPoint

DAY = date(2027, 3, 1)
FILES = {
    "cup.ruleset.yaml": """\
ruleset: Reedbank Sprint
edition: "1"
inputs:
  options.skirt: {choices: [long, short], meaning: Skirt}
  dimensions.rear_track: {definition: contact centres}
  setup.name: {kind: text, meaning: Name of the set-up}
derived:
  room: {formula: dimensions.rear_track - tyres.rear.width, unit: mm, meaning: Room between the tyres}
  half: {formula: 1 / (tyres.rear.width - 300 mm), unit: 1/m}
  kind: {formula: '"wide" if tyres.rear.width > 310 mm else "narrow"'}
  angle: {formula: "atan2(room, dimensions.wheelbase)", unit: deg}
rules:
  tunnel: {clause: "1", title: Tunnel, require: room >= 1170 mm}
  skirt: {clause: "2", when: options.skirt == long, require: tyres.rear.width <= 305 mm}
  track: {require: dimensions.rear_track <= 1500 mm}
  states: {states: {fuel: [empty]}, require: mass.total <= 200 kg}
""",
    "car.design.yaml": """\
design: Grebe
rulesets: [cup.ruleset.yaml]
options: {skirt: short}
dimensions: {wheelbase: 2400 mm, rear_track: {value: 1480 mm, definition: contact centres}}
tyres: {rear: {width: 300 mm}}
masses:
  tub: {mass: 150 kg, at: 1000 0 300 mm}
  fuel: {mass: 40 kg, at: 1200 0 200 mm}
states: {fuel: {empty: {masses.fuel.mass: 0 kg}}}
""",
}


@pytest.fixture
def car(tmp_path: Path) -> Path:
    write_files(tmp_path, FILES)
    return tmp_path / "car.design.yaml"


def points(car: Path, name: str, path: str, values: str, **options: object) -> tuple[VariedPoint, ...]:
    found = vary(car, [name], {path: values}, on=DAY, **options)  # type: ignore[arg-type]
    (figure,) = found.figures
    (curve,) = figure.curves
    return curve


def said(curve: tuple[VariedPoint, ...]) -> list[tuple[str, str | None]]:
    return [(str(point.amount), point.verdict) for point in curve]


def test_a_margin_along_a_number(car: Path) -> None:
    assert said(points(car, "tunnel", "tyres.rear.width", "300..320mm:10mm")) == [
        ("10 mm", "complies"), ("0 mm", "complies"), ("-10 mm", "breach"),
    ]  # fmt: skip


@pytest.mark.parametrize(
    ("path", "values"),
    [
        ("tyres.rear.width", "295..321 mm:5.2 mm"),
        ("dimensions.rear_track", "1470..1510mm"),
        ("masses.fuel.mass", "0..80kg:7kg"),
        ("masses.tub.mass", "140..220kg:9kg"),
        ("masses.fuel.at.x", "1000..1200mm:50mm"),
        ("options.skirt", "long,short"),
        ("masses.fuel.quantity", "1..3:1"),
    ],
)
def test_each_point_is_what_a_check_says(car: Path, path: str, values: str) -> None:
    names = ["tunnel", "skirt", "track", "states", "room", "half", "angle", "kind", "mass.total"]
    found = vary(car, names, {path: values}, on=DAY)
    # A check takes over nothing of the old value, nor which definition it meets; the text says it anew.
    with_definition = path == "dimensions.rear_track"
    for place, value in enumerate(found.along.values):
        exact = f"{value.exact} {value.unit}" if value.exact else value.shown
        text = f"{{value: {exact}, definition: contact centres}}" if with_definition else exact
        report = check(car, settings={path: text}, on=DAY)
        rules = {finding.name: (finding.margin, finding.verdict) for finding in report.rules}
        steps = {item.name: item.steps[-1] for item in workings(car, names[4:], settings={path: text}, on=DAY).items}
        for figure in found.figures:
            point = figure.curves[0][place]
            if figure.is_rule:
                assert (point.amount, point.verdict) == rules[figure.name]
            else:
                result = steps[figure.name].result
                assert str(point.amount) == result or (point.amount is None and result.startswith("unknown"))


def test_an_unknown_point_has_its_reason_and_no_number(car: Path) -> None:
    first, second = points(car, "half", "tyres.rear.width", "300..310mm:10mm")
    assert (first.amount, str(second.amount)) == (None, "100 1/m")
    assert first.reason.startswith("division by zero")


def test_what_is_not_stated_becomes_known(car: Path) -> None:
    curve = points(car, "air.relative_speed", "vehicle.speed", "36..72km/h:36km/h", settings={"air.wind": "0 m/s"})
    assert said(curve) == [("10 m/s", None), ("20 m/s", None)]


def test_outside_validity_is_marked_also_of_what_a_figure_rests_on(car: Path) -> None:
    settings = {
        "aero_surfaces.wing": "{kind: wing, at: 0 0 0 mm, downforce_area: 1 m^2, drag_area: 1 m^2}",
        "air": "{wind: 0 m/s, altitude: 0 m, temperature: 15 degC, humidity: 0 %}",
    }
    curve = points(car, "aero.downforce", "vehicle.speed", "90m/s,110m/s", settings=settings)
    assert [point.outside for point in curve] == [False, True]


def test_a_choice_binds_anew(car: Path) -> None:
    curve = points(car, "skirt", "options.skirt", "long,short", settings={"tyres.rear.width": "310 mm"})
    assert [point.verdict for point in curve] == ["breach", "not applicable"]


def test_a_definition_stays_with_the_value(car: Path) -> None:
    assert said(points(car, "track", "dimensions.rear_track", "1490..1510mm:20mm")) == [
        ("10 mm", "complies"), ("-10 mm", "breach"),
    ]  # fmt: skip


def test_a_state_keeps_what_it_sets(car: Path) -> None:
    assert said(points(car, "states", "masses.fuel.mass", "0..80kg:80kg")) == [("50 kg", "complies")] * 2


def test_a_second_path_gives_curves(car: Path) -> None:
    along = [("tyres.rear.width", "300..310mm:10mm"), ("dimensions.rear_track", "1470mm,1480mm")]
    found = vary(car, ["tunnel"], along, on=DAY)
    assert found.curves is not None
    assert [str(value) for value in found.curves.values] == ["1470mm", "1480mm"]
    assert [[str(point.amount) for point in curve] for curve in found.figures[0].curves] == [
        ["0 mm", "-10 mm"],
        ["10 mm", "0 mm"],
    ]


def test_modules_give_all_their_figures(car: Path) -> None:
    names = [figure.name for figure in vary(car, ["rollover"], {"masses.tub.mass": "1..2kg:1kg"}, on=DAY).figures]
    assert "rollover.threshold" in names
    assert all(name.startswith("rollover.") for name in names)


@pytest.mark.parametrize(
    ("along", "said"),
    [
        ({"tyres.rear.width": "1..2kg"},
         "--vary tyres.rear.width:1:5: wrong-dimension: 'kg' is a unit of mass [kg], and length [m] is due; "
         "expected length [m]; write a unit such as 'mm'"),
        ({"tyres.rear.widht": "1..2mm"},
         "--vary tyres.rear.widht:1:1: unknown-key: no input is called 'tyres.rear.widht'; expected width or "
         "section_width or diameter or loaded_radius or rim_width or rim_diameter or tread_depth or growth or grip or "
         "grip_fade or cornering_factor or cornering_load_factor; did you mean "
         "'tyres.rear.width'?"),
        ({"setup.name": "a..2"},
         "--vary setup.name:1:1: bad-value: 'a' does not begin with a number; expected a number with its unit; write "
         "a value such as '1900 mm'"),
        ({"tyres.rear.width": "1..2mm", "dimensions.wheelbase": "1..3mm", "dimensions.rear_track": "1mm"},
         "usage: one path is varied, or two: the first runs, and the second gives a curve for each of its values; "
         "give --vary once or twice, with a path each"),
        ({}, "usage: one path is varied, or two: the first runs, and the second gives a curve for each of its values; "
         "give --vary once or twice, with a path each"),
        ({"tyres.rear.width": "1..2mm", "dimensions.wheelbase": "1..5mm:1mm"},
         "--vary dimensions.wheelbase:1:1: too-large: 'dimensions.wheelbase' gives 5 curves; name at most 4 values, "
         "and let the first --vary have the many"),
        ({"options.skirt": ",".join(["long"] * 101)},
         "--vary options.skirt:1:1: too-large: 'options.skirt' is settled before anything is computed, and has 101 "
         "values; name at most 100 values"),
    ],
)  # fmt: skip
def test_what_is_refused(car: Path, along: dict[str, str], said: str) -> None:
    with pytest.raises(Refused) as refused:
        vary(car, ["tunnel"], along, on=DAY)
    assert [str(item) for item in refused.value.diagnostics] == [said]


def test_an_unknown_name(car: Path) -> None:
    with pytest.raises(Refused, match="there is no rule, figure or module 'tunel'; did you mean 'tunnel'"):
        vary(car, ["tunel"], {"tyres.rear.width": "1..2mm"}, on=DAY)


def test_the_decision_of_the_house_holds_at_every_value(car: Path) -> None:
    """A spread of another input guards every verdict along the way, as in a check."""
    car.with_name("rulecheck.yaml").write_text("house: Fen office\ndecision: {rule: guarded, coverage: 2}\n", "utf-8")
    settings = {"dimensions.rear_track": "{value: 1480 mm ± 4 mm (k=2), definition: contact centres}"}
    curve = points(car, "tunnel", "tyres.rear.width", "304..312mm:2mm", settings=settings)
    told = [
        check(car, settings={**settings, "tyres.rear.width": f"{width} mm"}, on=DAY).rules[0]
        for width in (304, 306, 308, 310, 312)
    ]
    assert [(point.amount, point.verdict) for point in curve] == [(rule.margin, rule.verdict) for rule in told]
    assert [point.verdict for point in curve] == ["complies", "complies", "unproven", "unproven", "unproven"]
