"""Wrong zones, templates, lines of sight and shapes of things, with what is said of them."""

from __future__ import annotations

from wrong_inputs import Wrong

CAR = "points: {a: 0 0 0 mm, b: 1 0 0 mm}\naero_surfaces: {wing: {kind: wing}}\n"
NO_RULE = "rules: {it: {require: 1 <= 2}}\n"


def held(zone: str) -> str:
    """A ruleset of one zone and a rule on it."""
    return f"zones:\n  box: {zone}\nrules:\n  it: {{inside: {{zone: box, what: points.a}}}}\n"


WRONG_ZONES: tuple[Wrong, ...] = (
    Wrong(
        "a zone without borders",
        (
            "cup.ruleset.yaml:4:3: bad-structure: a zone has borders; expected {x: [a, b], z: {to: c}}, {behind: plane(a, b, c)}, {view: side, points: [[x, z], …]}, {all: […]} or {any: […]}",
        ),
        design=CAR,
        ruleset=held("{}"),
    ),
    Wrong(
        "a zone that is a list",
        (
            "cup.ruleset.yaml:4:3: bad-structure: a zone has borders; expected {x: [a, b], z: {to: c}}, {behind: plane(a, b, c)}, {view: side, points: [[x, z], …]}, {all: […]} or {any: […]}",
        ),
        design=CAR,
        ruleset=held("[1 mm, 2 mm]"),
    ),
    Wrong(
        "a border that no zone has",
        (
            "cup.ruleset.yaml:4:9: unknown-key: a zone has no key 'w'; expected x or y or z or above_ground or behind or ahead_of or right_of or left_of or above or below or view or points or all or any",
        ),
        design=CAR,
        ruleset=held("{w: [1 mm, 2 mm]}"),
    ),
    Wrong(
        "a range of one end",
        ("cup.ruleset.yaml:4:12: bad-structure: 'x' of a zone is a range; expected [a, b], {from: a} or {to: b}",),
        design=CAR,
        ruleset=held("{x: [1 mm]}"),
    ),
    Wrong(
        "a range by other words",
        ("cup.ruleset.yaml:4:12: bad-structure: 'x' of a zone is a range; expected [a, b], {from: a} or {to: b}",),
        design=CAR,
        ruleset=held("{x: {above: 1 mm}}"),
    ),
    Wrong(
        "a range that ends before it begins",
        (
            "cup.ruleset.yaml:4:19: bad-value: this range of x ends before it begins: nothing lies in it; expected the lesser end first",
        ),
        design=CAR,
        ruleset=held("{x: [2 mm, 1 mm]}"),
    ),
    Wrong(
        "a range of masses",
        ("cup.ruleset.yaml:4:17: wrong-dimension: '2 kg' is mass [kg]; expected a length",),
        design=CAR,
        ruleset=held("{x: {to: 2 kg}}"),
    ),
    Wrong(
        "a range without unit",
        (
            "cup.ruleset.yaml:4:13: wrong-dimension: '0' is pure number [1]; expected a length; give the bare number a unit",
            "cup.ruleset.yaml:4:16: wrong-dimension: '900' is pure number [1]; expected a length; give the bare number a unit",
        ),
        design=CAR,
        ruleset=held("{x: [0, 900]}"),
    ),
    Wrong(
        "a range of an unknown name",
        (
            "cup.ruleset.yaml:4:17: unknown-name: nothing is called 'dimensions.whelbase'; did you mean 'dimensions.wheelbase'?",
        ),
        design=CAR,
        ruleset=held("{x: {to: dimensions.whelbase}}"),
    ),
    Wrong(
        "a view that is none",
        ("cup.ruleset.yaml:4:15: unknown-choice: 'top' is not a view; expected side or plan or front",),
        design=CAR,
        ruleset=held("{view: top, points: [[0 mm, 0 mm], [1 mm, 0 mm], [0 mm, 1 mm]]}"),
    ),
    Wrong(
        "a polygon without a view",
        ("cup.ruleset.yaml:4:9: missing-key: 'points' stand without a view; expected view: side, plan or front",),
        design=CAR,
        ruleset=held("{points: [[0 mm, 0 mm], [1 mm, 0 mm], [0 mm, 1 mm]]}"),
    ),
    Wrong(
        "a polygon of two corners",
        (
            "cup.ruleset.yaml:4:21: bad-structure: a polygon has 3 to 60 corners, and this has 2; expected points: [[x, z], [x, z], [x, z]]",
        ),
        design=CAR,
        ruleset=held("{view: side, points: [[0 mm, 0 mm], [1 mm, 0 mm]]}"),
    ),
    Wrong(
        "a corner of three lengths",
        (
            'cup.ruleset.yaml:4:58: bad-structure: a corner is a point, or two lengths; expected [340 mm, 880 mm] or "points.nose"',
        ),
        design=CAR,
        ruleset=held("{view: side, points: [[0 mm, 0 mm], [1 mm, 0 mm], [0 mm, 1 mm, 2 mm]]}"),
    ),
    Wrong(
        "a polygon that crosses itself",
        (
            "cup.ruleset.yaml:4:59: bad-value: the outline crosses itself: the edge from corner 1 meets the edge from corner 3; give the corners in order around it",
        ),
        design=CAR,
        ruleset=held("{view: side, points: [[0 mm, 0 mm], [1 mm, 1 mm], [1 mm, 0 mm], [0 mm, 1 mm]]}"),
    ),
    Wrong(
        "a view and nothing in it",
        (
            "cup.ruleset.yaml:4:9: bad-structure: 'view' stands without points, plane or line; expected view: side, points: [[x, z], …]",
        ),
        design=CAR,
        ruleset=held("{view: side, x: [0 mm, 1 mm]}"),
    ),
    Wrong(
        "a line without a view",
        (
            "cup.ruleset.yaml:4:17: kind-mismatch: 'behind' does not go with a line; expected plane(a, b, c), or line(a, b) with view: side or plan",
        ),
        design=CAR,
        ruleset=held('{behind: "line(points.a, points.b)"}'),
    ),
    Wrong(
        "a line along what it bounds",
        (
            "cup.ruleset.yaml:4:29: bad-value: nothing lies 'behind' this border: it runs along x, or its points do not span it; take another word, or other points",
        ),
        design=CAR,
        ruleset=held('{view: side, behind: "line(point(0 mm, 0 mm, 0 mm), point(5 mm, 0 mm, 0 mm))"}'),
    ),
    Wrong(
        "a side across the view",
        (
            "cup.ruleset.yaml:4:30: kind-mismatch: 'left_of' does not go with a line in side view; expected plane(a, b, c), or line(a, b) with view: plan or front",
        ),
        design=CAR,
        ruleset=held('{view: side, left_of: "line(points.a, points.b)"}'),
    ),
    Wrong(
        "a plane that is a point",
        (
            "cup.ruleset.yaml:4:17: kind-mismatch: 'behind' does not go with a point; expected plane(a, b, c), or line(a, b) with view: side or plan",
        ),
        design=CAR,
        ruleset=held("{behind: points.a}"),
    ),
    Wrong(
        "nothing joined",
        ("cup.ruleset.yaml:4:9: bad-structure: 'any' takes a list of zones; expected any: [a_zone, {x: [a, b]}]",),
        design=CAR,
        ruleset=held("{any: []}"),
    ),
    Wrong(
        "a zone of an unknown zone",
        ("cup.ruleset.yaml:4:15: unknown-name: there is no zone 'bax'; expected box; did you mean 'box'?",),
        design=CAR,
        ruleset=held("{any: [bax, {x: {to: 1 mm}}]}"),
    ),
    Wrong(
        "a zone of itself",
        (
            "cup.ruleset.yaml:4:15: cycle: zones are made of each other: zone(box) -> zone(box); break the circle at one of them",
        ),
        design=CAR,
        ruleset=held("{any: [box, {x: {to: 1 mm}}]}"),
    ),
    Wrong(
        "a rule about an unknown zone",
        ("cup.ruleset.yaml:4:29: unknown-name: there is no zone 'bax'; expected box; did you mean 'box'?",),
        design=CAR,
        ruleset="zones: {box: {x: {to: 1 mm}}}\nrules: {it: {inside: {zone: bax, what: points.a}}}\n",
    ),
    Wrong(
        "a rule that does not say what",
        (
            "cup.ruleset.yaml:4:22: bad-structure: 'inside' does not say what: the rule has no single element; expected each: s in aero_surfaces, or {zone: name, what: points.nose}",
        ),
        design=CAR,
        ruleset="zones: {box: {x: {to: 1 mm}}}\nrules: {it: {inside: box}}\n",
    ),
    Wrong(
        "a rule about a number",
        (
            "cup.ruleset.yaml:4:14: kind-mismatch: a number has no place that could lie in a zone; expected a point, or an item with a place, an outline or an extent",
        ),
        design=CAR,
        ruleset="zones: {box: {x: {to: 1 mm}}}\nrules: {it: {inside: {zone: box, what: points.a.x}}}\n",
    ),
    Wrong(
        "a rule with a mistyped key",
        (
            "cup.ruleset.yaml:4:34: unknown-key: 'inside' has no key 'whta'; expected zone or what; did you mean 'what'?",
        ),
        design=CAR,
        ruleset="zones: {box: {x: {to: 1 mm}}}\nrules: {it: {inside: {zone: box, whta: points.a}}}\n",
    ),
    Wrong(
        "a zone of an element where none is",
        (
            "cup.ruleset.yaml:4:29: wrong-arguments: zone 'box' is of an element 't', and here is none; expected each: t in tyres",
        ),
        design=CAR,
        ruleset="zones: {box: {for: t in tyres, x: {to: t.width}}}\nrules: {it: {inside: {zone: box, what: points.a}}}\n",
    ),
    Wrong(
        "a zone in a formula",
        ("cup.ruleset.yaml:4:23: kind-mismatch: 'box' is a zone; use it in depth(p, box)",),
        design=CAR,
        ruleset="zones: {box: {x: {to: 1 mm}}}\nrules: {it: {require: box <= 3 mm}}\n",
    ),
    Wrong(
        "a zone that no rule uses",
        (
            "cup.ruleset.yaml:3:23: wrong-dimension: '1 kg' is mass [kg]; expected a length",
            "cup.ruleset.yaml:3:64: unknown-name: 't' has no field 'widht'; expected width or section_width or diameter or loaded_radius or rim_width or rim_diameter or tread_depth or growth or grip or grip_fade or cornering_factor or cornering_load_factor; did you mean 'width'?",
        ),
        design=CAR,
        ruleset="zones: {box: {x: {to: 1 kg}}, other: {for: t in tyres, x: {to: t.widht}}}\nrules: {it: {require: 1 <= 2}}\n",
    ),
    Wrong(
        "a zone with the name of a rule",
        (
            "cup.ruleset.yaml:4:9: name-taken: 'it' is used twice: rules, derived figures, tables, lists, zones and templates share one name space; give one of them another name",
        ),
        design=CAR,
        ruleset="zones: {it: {x: {to: 1 mm}}}\nrules: {it: {require: 1 <= 2}}\n",
    ),
    Wrong(
        "a hull of two points",
        (
            "cup.ruleset.yaml:3:40: wrong-arguments: a hull in a view has 3 to 12 points, and this has 2; expected hull([points.a, points.b, …])",
        ),
        design=CAR,
        ruleset='rules: {it: {require: "depth(points.a, hull([points.a, points.b]), side) >= 0 mm"}}\n',
    ),
    Wrong(
        "a depth in nothing",
        (
            "cup.ruleset.yaml:3:40: wrong-arguments: 'points.b' is no zone and no hull; expected depth(p, a_zone), depth(p, hull([a, b, c])) or depth(p, hull(points), side)",
        ),
        design=CAR,
        ruleset='rules: {it: {require: "depth(points.a, points.b) >= 0 mm"}}\n',
    ),
    Wrong(
        "a template that is not there",
        ("cup.ruleset.yaml:4:33: unknown-name: there is no template 'probe'; expected templates: in this file",),
        design=CAR,
        ruleset="zones: {hole: {view: side, points: [[0 mm, 0 mm], [9 mm, 0 mm], [0 mm, 9 mm]]}}\nrules: {it: {passes: {template: probe, through: hole, at: points.a}}}\n",
    ),
    Wrong(
        "a template through a box",
        (
            "cup.ruleset.yaml:5:49: kind-mismatch: zone 'hole' is no single polygon in side view; expected {view: side, points: […]}",
        ),
        design=CAR,
        ruleset="zones: {hole: {x: {to: 1 mm}}}\ntemplates: {probe: {view: side, points: [[0 mm, 0 mm], [9 mm, 0 mm], [0 mm, 9 mm]]}}\nrules: {it: {passes: {template: probe, through: hole, at: points.a}}}\n",
    ),
    Wrong(
        "a template without a place",
        ("cup.ruleset.yaml:3:14: missing-key: 'stops' lacks 'at:'; expected {template: a, through: b, at: points.c}",),
        design=CAR,
        ruleset="rules: {it: {stops: {template: probe, through: hole}}}\n",
    ),
    Wrong(
        "a template of points",
        (
            "cup.ruleset.yaml:3:42: bad-structure: a corner of a template is two lengths; expected [340 mm, 880 mm]",
            "cup.ruleset.yaml:3:52: bad-structure: a corner of a template is two lengths; expected [340 mm, 880 mm]",
            "cup.ruleset.yaml:3:62: bad-structure: a corner of a template is two lengths; expected [340 mm, 880 mm]",
        ),
        design=CAR,
        ruleset="templates: {probe: {view: side, points: [points.a, points.b, points.a]}}\nrules: {it: {require: 1 <= 2}}\n",
    ),
    Wrong(
        "a line of sight to nowhere",
        (
            "cup.ruleset.yaml:3:14: bad-structure: 'sight' is a line of sight; expected {from: points.eye, to: points.lamp, past: [aero_surfaces.rear_wing], view: side}",
        ),
        design=CAR,
        ruleset="rules: {it: {sight: {from: points.a, past: aero_surfaces}}}\n",
    ),
    Wrong(
        "a line of sight past a point",
        (
            "cup.ruleset.yaml:3:58: kind-mismatch: 'points.a' is a point without an outline or extent; expected items of outlines or aero_surfaces",
        ),
        design=CAR,
        ruleset="rules: {it: {sight: {from: points.a, to: points.b, past: points.a, view: side}}}\n",
    ),
    Wrong(
        "cover without a view",
        ("cup.ruleset.yaml:3:14: missing-key: 'cover' is judged in a view; expected view: side or plan or front",),
        design=CAR,
        ruleset="rules: {it: {cover: {from: points.a, to: points.b, past: aero_surfaces}}}\n",
    ),
    Wrong(
        "an outline that crosses itself",
        (
            "car.design.yaml:4:35: bad-value: the outline crosses itself: the edge from corner 1 meets the edge from corner 3; write the corners in order around the outline, each once, such as '340 880, 640 880, 640 940 mm'",
        ),
        design='outlines: {tub: {side: "0 0, 9 9, 9 0, 0 9 mm"}}\n',
        ruleset=NO_RULE,
    ),
    Wrong(
        "an outline of two corners",
        (
            "car.design.yaml:4:25: bad-value: an outline of 2 corners encloses nothing; write the corners in order around the outline, each once, such as '340 880, 640 880, 640 940 mm'",
        ),
        design='outlines: {tub: {side: "0 0, 9 9 mm"}}\n',
        ruleset=NO_RULE,
    ),
    Wrong(
        "an outline that turns back",
        (
            "car.design.yaml:4:30: bad-value: the outline turns back on itself at corner 2; write the corners in order around the outline, each once, such as '340 880, 640 880, 640 940 mm'",
        ),
        design='outlines: {tub: {side: "0 0, 9 0, 4 0, 4 4 mm"}}\n',
        ruleset=NO_RULE,
    ),
    Wrong(
        "an outline with a corner of one length",
        (
            "car.design.yaml:4:24: bad-value: a corner of an outline is two lengths; write '340 880, 640 880, 640 940 mm'",
        ),
        design='outlines: {tub: {side: "0 0, 9, 4 4 mm"}}\n',
        ruleset=NO_RULE,
    ),
    Wrong(
        "an outline in a formula",
        (
            "cup.ruleset.yaml:3:23: kind-mismatch: 'outlines.tub.side' is an outline, and formulas calculate with numbers; hold it against a zone with 'inside' or 'outside'",
        ),
        design='outlines: {tub: {side: "0 0, 9 0, 4 4 mm"}}\n',
        ruleset="rules: {it: {require: outlines.tub.side <= 3 mm}}\n",
    ),
    Wrong(
        "an extent of three ends",
        (
            "car.design.yaml:4:36: bad-value: 'aero_surfaces.wing.extent.x' is an extent; expected two lengths, such as [-40 mm, 310 mm]; or set 'aero_surfaces.wing.extent.x.from' and 'aero_surfaces.wing.extent.x.to'",
        ),
        design="aero_surfaces: {wing: {extent: {x: [1 mm, 2 mm, 3 mm]}}}\n",
        ruleset=NO_RULE,
    ),
    Wrong(
        "an extent without units",
        (
            "car.design.yaml:4:37: unit-missing: '1' has no unit; expected length [m]; write the unit, for example '1 mm'",
            "car.design.yaml:4:40: unit-missing: '2' has no unit; expected length [m]; write the unit, for example '2 mm'",
        ),
        design="aero_surfaces: {wing: {extent: {x: [1, 2]}}}\n",
        ruleset=NO_RULE,
    ),
    Wrong(
        "an extent the wrong way round",
        (
            "car.design.yaml:4:36: bad-value: the extent 'aero_surfaces.wing.extent.x' ends before it begins; expected the lesser end first",
        ),
        design="aero_surfaces: {wing: {extent: {x: [2 mm, 1 mm]}}}\n",
        ruleset=NO_RULE,
    ),
    Wrong(
        "an outline in a view that is none",
        (
            "car.design.yaml:4:18: unknown-key: no input is called 'outlines.tub.top'; expected side or plan or front or mirror or extent or datum; did you mean 'outlines.tub.plan'?",
        ),
        design='outlines: {tub: {top: "0 0, 9 0, 4 4 mm"}}\n',
        ruleset=NO_RULE,
    ),
)
