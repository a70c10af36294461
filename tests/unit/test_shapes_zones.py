"""Zones, templates, lines of sight: what rules on places come to. Margins by hand."""

from __future__ import annotations

import tempfile
from fractions import Fraction
from pathlib import Path

import pytest
from small_files import CAR as HEAD
from small_files import DAY, RULES, check_texts, findings, margin, only, refused, write_files

from rulecheck import headroom

CAR = """\
dimensions: {wheelbase: 2800 mm, front_ride_height: 40 mm, rear_ride_height: 68 mm}
points:
  nose: -900 0 200 mm
  a: 400 -100 10 mm
  b: 400 100 10 mm
  c: 400 0 700 mm
aero_surfaces:
  wing: {kind: wing, datum: rear_axle, extent: {x: [100 mm, 700 mm], y: [-890 mm, 890 mm], z: [700 mm, 940 mm]}}
outlines:
  tank: {side: "1000 100, 1400 100, 1200 500 mm", extent: {y: {from: -300 mm, to: 280 mm}}}
  horn: {plan: "0 200, 300 200, 0 500 mm", mirror: yes}
"""


def asked(zone: str, what: str, word: str = "inside", *, design: str = CAR, zones: str = "", **options: object):  # type: ignore[no-untyped-def]
    """The finding of a rule that holds one thing against one zone."""
    text = f"zones:\n  it_is: {zone}\n{zones}rules:\n  it: {{{word}: {{zone: it_is, what: {what}}}}}\n"
    return only(design, text, **options)  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("zone", "what", "word", "verdict", "room"),
    [
        # points: the nearest border from inside, squares added from outside
        ("{x: [-1000 mm, 0 mm], z: {to: 250 mm}}", "points.nose", "inside", "complies", 50),
        ("{x: [-1000 mm, 0 mm], z: {to: 250 mm}}", "points.nose", "outside", "breach", -50),
        ("{x: {from: -860 mm}, z: {to: 170 mm}}", "points.nose", "inside", "breach", -50),  # 40, 30: 50
        ("{x: {from: -860 mm}, z: {to: 170 mm}}", "points.nose", "outside", "complies", 50),
        ("{x: {from: -900 mm}}", "points.nose", "inside", "complies", 0),
        ("{x: {from: -900 mm}}", "points.nose", "outside", "complies", 0),
        # height above ground: 200 + 40 - 900 * 28 / 2800 = 231
        ("{above_ground: {to: 250 mm}}", "points.nose", "inside", "complies", 19),
        # planes and lines; the plane stands at x = 400
        ('{ahead_of: "plane(points.a, points.b, points.c)"}', "points.nose", "inside", "complies", 1300),
        ('{behind: "plane(points.a, points.c, points.b)"}', "points.nose", "inside", "breach", -1300),
        ('{view: side, above: "line(points.a, point(0 mm, 0 mm, 10 mm))"}', "points.nose", "inside", "complies", 190),
        # a box: its worst side; from outside the worst corner
        (
            "{x: [2800 mm, 3550 mm], y: [-900 mm, 900 mm], z: {to: 950 mm}}",
            "aero_surfaces.wing",
            "inside",
            "complies",
            10,
        ),
        ("{x: [2800 mm, 3470 mm], z: {to: 900 mm}}", "aero_surfaces.wing", "inside", "breach", -50),
        ("{x: {from: 3530 mm}, z: {from: 980 mm}}", "aero_surfaces.wing", "outside", "complies", 50),
        ("{x: [3000 mm, 3100 mm]}", "aero_surfaces.wing", "outside", "breach", -50),
        ("{x: {from: 3400 mm}, z: {to: 720 mm}}", "aero_surfaces.wing", "outside", "breach", -20),
        # an outline against ranges: its corners, not its box
        ("{x: {to: 1430 mm}, z: {to: 460 mm}}", "outlines.tank", "inside", "breach", -40),
        ("{x: {to: 1370 mm}, z: {to: 460 mm}}", "outlines.tank", "inside", "breach", -40),
        ("{x: {from: 1400 mm}, z: {from: 400 mm}}", "outlines.tank", "outside", "complies", Fraction("134.164")),
        # both sides of a thing that is mirrored
        ("{y: [-600 mm, 520 mm]}", "outlines.horn", "inside", "complies", 20),
        ("{y: {from: -450 mm}}", "outlines.horn", "inside", "breach", -50),
        # alone an axis that it offers counts
        ("{y: [-310 mm, 310 mm]}", "outlines.tank", "inside", "complies", 10),
    ],
)
def test_one_thing_against_one_zone(zone: str, what: str, word: str, verdict: str, room: Fraction) -> None:
    found = asked(zone, what, word)
    assert found.verdict == verdict
    if isinstance(room, int):
        assert margin(found) == room
    else:
        assert found.margin is not None
        assert float(found.margin.value) == pytest.approx(float(room), abs=0.01)


STEP = "{any: [{x: {to: 3000 mm}, z: {to: 2000 mm}}, {x: {from: 2990 mm}, z: {to: 990 mm}}]}"


def test_a_body_may_lie_across_ranges_that_hold_it_together() -> None:
    # x from 2900 to 3500 goes across x = 3000; above z = 990 nothing is free behind it: 990 - 940 = 50.
    assert margin(asked(STEP, "aero_surfaces.wing")) == 50
    gap = STEP.replace("2990 mm", "3001 mm")
    assert asked(gap, "aero_surfaces.wing").verdict == "breach"
    touching = STEP.replace("2990 mm", "3000 mm")
    assert margin(asked(touching, "aero_surfaces.wing")) == 50


def test_clear_of_several_is_clear_of_each() -> None:
    zone = "{any: [{x: {to: 2890 mm}}, {z: {from: 960 mm}}]}"
    assert margin(asked(zone, "aero_surfaces.wing", "outside")) == 10


POLYGON = (
    "{view: side, points: [[800 mm, 0 mm], [1700 mm, 0 mm], [1700 mm, 600 mm], [1250 mm, 300 mm], [800 mm, 600 mm]]}"
)


def test_a_notch_of_the_zone_counts_between_corners_of_the_outline() -> None:
    # Every corner lies inside, and the notch at (1250, 300) reaches into an edge: 100 in x alone from (1200, 500).
    wide = CAR.replace('"1000 100, 1400 100, 1200 500 mm"', '"900 100, 1600 100, 1600 350, 900 350 mm"')
    found = asked(POLYGON, "outlines.tank", design=wide)
    assert found.verdict == "breach"
    low = wide.replace("1600 350, 900 350", "1600 290, 900 290")
    assert margin(asked(POLYGON, "outlines.tank", design=low)) == 10


def test_an_outline_that_fills_a_notch_lies_outside() -> None:
    fill = CAR.replace('"1000 100, 1400 100, 1200 500 mm"', '"1700 600, 1250 300, 800 600 mm"')
    assert asked(POLYGON, "outlines.tank", design=fill).verdict == "breach"
    assert margin(asked(POLYGON, "outlines.tank", "outside", design=fill)) == 0


def test_a_zone_within_an_outline_is_not_clear_of_it() -> None:
    small = "{view: side, points: [[1190 mm, 200 mm], [1210 mm, 200 mm], [1200 mm, 220 mm]]}"
    assert asked(small, "outlines.tank", "outside").verdict == "breach"


@pytest.mark.parametrize(
    ("zone", "what", "missing"),
    [
        ("{z: {to: 900 mm}}", "outlines.horn", "outlines.horn.extent.z"),
        ("{above_ground: {to: 900 mm}}", "points.none_such", ""),
        ("{x: {to: dimensions.overall_length}}", "points.nose", "dimensions.overall_length"),
        ("{view: front, points: [[0 mm, 0 mm], [9 m, 0 mm], [0 mm, 9 m]]}", "outlines.horn", "outlines.horn.extent.z"),
    ],
)
@pytest.mark.parametrize("word", ["inside", "outside"])
def test_what_is_missing_leaves_the_rule_open(zone: str, what: str, missing: str, word: str) -> None:
    found = asked(zone, what, word)
    assert found.verdict == "open"
    assert missing in found.reason


def test_a_surface_without_shape_is_open_though_it_has_a_place() -> None:
    car = CAR.replace("extent: {x: [100 mm, 700 mm], y: [-890 mm, 890 mm], z: [700 mm, 940 mm]}", "at: 400 0 900 mm")
    found = asked("{x: {from: 0 mm}}", "aero_surfaces.wing", design=car)
    assert (found.verdict, "aero_surfaces.wing.extent.x" in found.reason) == ("open", True)


def test_a_border_that_is_broken_decides_though_another_axis_is_not_known() -> None:
    found = asked("{x: {from: 100 mm}, z: {to: 900 mm}}", "outlines.horn")
    assert found.verdict == "breach"
    assert found.margin is None


def test_the_element_of_the_rule_and_of_the_zone() -> None:
    rules = """\
zones:
  behind_tyre: {for: t in tyres, x: {from: dimensions.wheelbase + t.diameter / 2}}
rules:
  boxes: {each: s in aero_surfaces where s.kind == wing, inside: high}
  tyres: {each: t in tyres where t.axle == rear, outside: {zone: behind_tyre, what: points.nose}}
"""
    found = findings(
        check_texts(CAR + "tyres: {front: {diameter: 600 mm}, rear: {diameter: 700 mm}}\n",
                    rules.replace("zones:\n", "zones:\n  high: {z: {from: 650 mm}}\n"))
    )  # fmt: skip
    assert (found["boxes"].verdict, margin(found["boxes"])) == ("complies", 50)
    assert found["boxes"].binding is not None
    assert found["boxes"].binding.element == "wing"
    # 2800 + 350 - (-900)
    assert margin(found["tyres"]) == 4050


def test_states_move_zones_and_bodies() -> None:
    rules = """\
states_needed: {ride: [high, low]}
zones: {low: {above_ground: {to: 290 mm}}, tall: {z: {to: 1000 mm}}}
rules:
  it: {states: every, inside: {zone: low, what: points.nose}}
  flap: {states: every, inside: {zone: tall, what: aero_surfaces.wing}}
"""
    states = """\
states:
  ride:
    high: {dimensions.front_ride_height: 140 mm, dimensions.rear_ride_height: 140 mm}
    low: {aero_surfaces.wing.extent.z: [700 mm, 980 mm]}
"""
    found = findings(check_texts(CAR + states, rules))
    assert (found["it"].verdict, margin(found["it"])) == ("breach", -50)
    assert found["it"].binding is not None
    assert found["it"].binding.state == {"ride": "high"}
    assert margin(found["flap"]) == 20
    assert found["flap"].binding is not None
    assert found["flap"].binding.state == {"ride": "low"}


def test_scale_gives_a_relative_margin_and_lets_margins_be_mixed() -> None:
    rules = "zones: {z: {x: {from: -1000 mm}}}\nrules: {it: {inside: {zone: z, what: points.nose}, require: dimensions.wheelbase <= 3000 mm%s}}\n"
    assert refused(CAR, rules % "")[0].code == "scale-needed"
    found = only(CAR, rules % ", scale: 1000 mm")
    assert (margin(found), found.relative_margin) == (100, pytest.approx(0.1))


def test_extents_one_end_at_a_time() -> None:
    changed = [("aero_surfaces.wing.extent.z.to", "900 mm")]
    assert margin(asked("{z: {to: 1000 mm}}", "aero_surfaces.wing", settings=changed)) == 100


def test_a_formula_may_name_an_end_of_an_extent() -> None:
    asks = "aero_surfaces.wing.extent.x.to <= dimensions.wheelbase + 750 mm"
    assert margin(only(CAR, f"rules: {{it: {{require: {asks}}}}}\n")) == 50
    each = "rules: {it: {each: s in aero_surfaces, require: s.extent.y.from >= -900 mm}}\n"
    assert margin(only(CAR, each)) == 10


def test_things_of_a_ruleset_may_have_shapes() -> None:
    rules = """\
inputs:
  pods:
    kind: collection
    meaning: Pods
    element: {outline: {kind: outline, meaning: Shape}, extent: {kind: extent, meaning: Reach}}
zones: {low: {z: {to: 400 mm}}}
rules: {it: {each: p in pods, inside: low}}
"""
    pods = 'pods:\n  left: {datum: rear_axle, outline: {side: "0 0, 9 0, 9 350 mm"}}\n  right: {extent: {z: [0 mm, 380 mm]}}\n'
    assert margin(only(CAR + pods, rules)) == 20
    wrong = rules.replace("{outline: {kind: outline", "{body: {kind: outline")
    assert refused(CAR, wrong)[0].code == "bad-name"


def test_headroom_reaches_the_border_of_a_zone() -> None:
    rules = "zones: {box: {x: {to: dimensions.wheelbase + 750 mm}, z: {to: 950 mm}}}\nrules: {it: {each: s in aero_surfaces, inside: box}}\n"
    with tempfile.TemporaryDirectory() as folder:
        write_files(Path(folder), {"car.design.yaml": HEAD + CAR, "cup.ruleset.yaml": RULES + rules})
        report = headroom(Path(folder, "car.design.yaml"), ["aero_surfaces.wing.extent.z.to"], on=DAY)
    (row,) = report.inputs
    assert row.up.travel is not None
    assert row.up.travel.shown == "10"
    assert row.up.rules == ("it",)


def test_a_datum_moves_extents_and_outlines() -> None:
    longer = CAR.replace("wheelbase: 2800", "wheelbase: 2810")
    assert margin(asked("{x: {to: 3550 mm}}", "aero_surfaces.wing")) == 50
    assert margin(asked("{x: {to: 3550 mm}}", "aero_surfaces.wing", design=longer)) == 40
    moved = CAR.replace("tank: {", "tank: {datum: rear_axle, ")
    assert margin(asked("{x: {to: 4250 mm}}", "outlines.tank", design=moved)) == 50
    ground = CAR.replace("tank: {", "tank: {datum: ground, ")
    # Ground lies 40 + 28 x / 2800 below the plane: at x = 1200 by 52, so the top is at 448.
    assert margin(asked("{z: {to: 500 mm}}", "outlines.tank", design=ground)) == 52


def test_a_polygon_of_formulas_that_crosses_itself_is_unproven() -> None:
    zone = "{view: side, points: [points.a, [1000 mm, 10 mm], points.c, [1000 mm, 700 mm]]}"
    assert asked(zone, "points.nose").verdict == "unproven"
    fine = "{view: side, points: [points.a, [1000 mm, 10 mm], [1000 mm, 700 mm], points.c]}"
    assert asked(fine, "points.nose").verdict == "breach"
    assert margin(asked(fine, '"point(500 mm, 0 mm, 300 mm)"')) == 100


def test_a_rule_about_a_zone_is_referred_to_by_its_margin() -> None:
    rules = "zones: {z: {x: {from: -1000 mm}}}\nrules:\n  it: {require: margin(nose) >= 30 mm}\n  nose: {inside: {zone: z, what: points.nose}}\n"
    assert margin(only(CAR, rules)) == 70


PROBE = "templates: {probe: {view: side, points: [[0 mm, 0 mm], [50 mm, 0 mm], [0 mm, 100 mm]]}}\n"


@pytest.mark.parametrize(
    ("rule", "verdict", "room"),
    [
        ("passes: {template: probe, through: hole, at: points.a}", "complies", 10),
        ("stops: {template: probe, through: hole, at: points.a}", "breach", -10),
        ("passes: {template: probe, through: hole, at: points.nose}", "breach", -900),
        ("stops: {template: probe, through: hole, at: points.nose}", "complies", 900),
        ('passes: {template: probe, through: outlines.tank, at: "point(1150 mm, 0 mm, 120 mm)"}', "complies", 20),
        ("passes: {template: probe, through: outlines.horn, at: points.a}", "open", None),
    ],
)
def test_templates(rule: str, verdict: str, room: int | None) -> None:
    hole = "zones: {hole: {view: side, points: [[0 mm, 0 mm], [900 mm, 0 mm], [900 mm, 900 mm], [0 mm, 900 mm]]}}\n"
    found = only(CAR, f"{PROBE}{hole}rules: {{it: {{{rule}}}}}\n")
    assert found.verdict == verdict
    shown = None if found.margin is None else found.margin.shown
    assert shown == (None if room is None else str(room))


@pytest.mark.parametrize(
    ("rule", "verdict", "room"),
    [
        # the line at z = 600, the top of the tank at 500
        ('sight: {from: "point(0 m, 0 m, 0.6 m)", to: "point(3 m, 0 m, 0.6 m)", past: outlines.tank, view: side}', "complies", 100),
        ('cover: {from: "point(0 m, 0 m, 0.6 m)", to: "point(3 m, 0 m, 0.6 m)", past: outlines.tank, view: side}', "breach", -100),
        # the line at z = 200: 300 to the top, 100 to the bottom
        ('cover: {from: "point(0 m, 0 m, 0.2 m)", to: "point(3 m, 0 m, 0.2 m)", past: outlines.tank, view: side}', "complies", 100),
        # in space the box of the tank: y from -300 to 280
        ('sight: {from: "point(0 m, 0 m, 0.2 m)", to: "point(3 m, 0 m, 0.2 m)", past: outlines.tank}', "breach", None),
        ('sight: {from: "point(0 m, 0.28 m, 0.2 m)", to: "point(3 m, 0.28 m, 0.2 m)", past: outlines.tank}', "complies", None),
        ('sight: {from: "point(0 m, 0 m, 0.2 m)", to: "point(0.9 m, 0 m, 0.2 m)", past: outlines.tank}', "complies", None),
        ('sight: {from: points.nose, to: points.a, past: outlines}', "open", None),
        ('cover: {from: points.nose, to: points.a, past: aero_surfaces, view: plan}', "breach", None),
    ],
)  # fmt: skip
def test_lines_of_sight(rule: str, verdict: str, room: int | None) -> None:
    found = only(CAR, f"rules: {{it: {{{rule}}}}}\n")
    assert found.verdict == verdict
    if room is not None:
        assert margin(found) == room


def test_a_line_of_sight_past_nothing_known_is_open() -> None:
    rule = "rules: {it: {sight: {from: points.nose, to: points.a, past: outlines, view: side}}}\n"
    bare = CAR.partition("outlines:")[0]
    assert only(bare, rule).verdict == "open"
    assert only(bare + "outlines: {}\n", rule).verdict == "complies"
    covered = rule.replace("sight", "cover")
    assert only(bare + "outlines: {}\n", covered).verdict == "breach"
