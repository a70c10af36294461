"""A ruleset with every shape, a small car that complies with all of it, and what makes the car a bad one."""

from __future__ import annotations

SHAPES = """\
ruleset: Dunmere Cup
states_needed: {fuel: [empty, full], load: {low: {sets: ["tyres.*.loaded_radius"]}}}
definitions: {track: [contact centres, wheel planes]}
inputs:
  dimensions.rear_track: {unit: mm, definition: contact centres, meaning: Track}
  tub.approved: {kind: date, meaning: Day}
  tub.material: {kind: text, meaning: Grade}
  nose.tip: {kind: point, meaning: Foremost point}
  options.traction_control: {kind: flag, meaning: Fitted}
  bolt: {unit: mm, meaning: Bolt}
  records.*.setup.mass: {unit: kg, meaning: Mass of the sledge}
  records.*.result.pull: {unit: kN, meaning: Greatest pull}
  lamps:
    kind: collection
    meaning: Lamps
    items: [left, right]
    element:
      at: {kind: point, meaning: Place}
      area: {unit: cm^2, meaning: Area}
      carrier: {kind: item, of: members, meaning: What holds it}
      proof: {kind: text, meaning: Its paper}
  anchors:
    kind: collection
    meaning: Anchors
    at_least: 3
    element: {strength: {unit: kN, meaning: Load}}
tables:
  least: {over: powertrain.displacement, steps: [{up_to: 2 L, value: 700 kg}, {below: 3 L, value: 800 kg}]}
  thin_air: {over: air.altitude, unit: "%", linear: [[0 m, 100 %], [1000 m, 95 %]]}
  power: {over: recovery.axle, steps: [{is: front, value: 90 kW}, {is: rear, value: 115 kW}]}
  two: {over: [powertrain.kind, powertrain.aspiration], steps: [{when: powertrain.kind == hybrid and powertrain.aspiration == forced, value: 70 L}, {otherwise: 80 L}]}
lists: {steels: ["25CrMo4", "30CrMo4"]}
derived:
  room: {formula: dimensions.rear_track - tyres.rear.width, unit: mm}
  section: {for: m in members, formula: "pi * m.wall * (m.outer_diameter - m.wall)", unit: mm^2}
  thick: {for: m in members, formula: "m.wall >= 2 mm"}
groups: {electric: {when: powertrain.kind == hybrid, rules: [grouped]}}
rules:
  least_length: {require: dimensions.wheelbase >= 1525 mm}
  range: {require: 30 % <= brakes.distribution <= 55 %}
  ratio: {require: "min(dimensions.front_track, dimensions.rear_track) >= 75 % * max(dimensions.front_track, dimensions.rear_track)"}
  by_formula: {require: powertrain.fuel_flow <= (90 kg/h if powertrain.speed >= 9000 rpm else 0.01 kg/(h*rpm) * powertrain.speed)}
  steps: {require: "sum(m.mass for m in masses) >= least"}
  lines: {require: powertrain.power <= 400 kW * thin_air}
  choices: {require: recovery.power <= power}
  two_keys: {require: powertrain.tank_volume <= two}
  condition: {when: recovery.axle == rear, require: recovery.voltage <= 700 V}
  grouped: {require: electrical.system_voltage <= 700 V}
  each_tyre: {each: t in tyres, require: t.width <= 356 mm}
  each_where: {each: "e in edges where e.exposed == yes", require: e.radius >= 1.5 mm}
  each_pair: {each: "a, b in pairs(lamps)", require: "distance(a.at, b.at) >= 1 m"}
  each_empty: {each: b in ballast, empty: complies, require: b.sealed == yes}
  count_strong: {require: "count(for a in anchors where a.strength >= 13 kN) >= 3"}
  count_at_most: {require: "count(for a in anchors where a.strength >= 13 kN) <= 3"}
  count_lamps: {require: count(for l in lamps) == 2}
  share_strong: {require: "share(for a in anchors where a.strength >= 13 kN) >= 60 %"}
  every_lamp: {require: "every(l.area >= 20 cm^2 for l in lamps)"}
  some_lamp: {require: "some(l.area >= 30 cm^2 for l in lamps)"}
  mean_anchor: {require: "mean(a.strength for a in anchors) >= 13 kN"}
  ballast_sum: {require: "sum(b.mass for b in ballast) <= 20 kg"}
  greatest: {require: "max(b.mass for b in ballast) <= 12 kg"}
  symmetry: {require: "abs(lamps.left.at.y + lamps.right.at.y) <= 3 mm"}
  angle: {require: "angle(line(points.foot, points.top), vertical, side) <= 12 deg"}
  below_line: {require: "above(nose.tip, line(points.foot, points.top)) >= 1 mm", scale: 1 m}
  ground: {states: "{}", require: above_ground(points.foot) >= 20 mm}
  in_states: {states: {fuel: every}, require: "sum(m.mass for m in masses) <= 880 kg"}
  every_state: {states: every, each: t in tyres, require: "t.loaded_radius >= 300 mm and sum(m.mass for m in masses) >= 700 kg"}
  throughout: {envelope: {vehicle.speed: [60 km/h, 320 km/h]}, require: "vehicle.speed * 1 s <= dimensions.wheelbase * 50"}
  steel: {require: members.hoop.material in steels}
  present: {require: present(aero_surfaces.wing)}
  banned: {require: not present(aero_surfaces.fan)}
  closed: {require: not present(members.spare)}
  no_control: {require: options.traction_control == no}
  definition: {require: room >= 1200 mm}
  with_argument: {each: m in members, require: section(m) >= 200 mm^2}
  flag_argument: {each: m in members, require: thick(m)}
  through_item: {each: l in lamps, require: l.carrier.wall >= 2 mm}
  paper: {evidence: {kind: certificate, name: hoop}}
  drawing: {evidence: {kind: drawing, name: layout}}
  papers: {each: l in lamps, evidence: {kind: inspection, name: l.proof}}
  due: {evidence: {kind: drawing, name: later, due: 2027-12-31}}
  dates: {require: "on <= end_of_year(evidence.belt.made + 5 years)"}
  judged: {judgement: Is it smooth?}
  judged_each: {each: e in edges, judgement: Is it smooth?}
  unless: {unless: {when: options.power_steering == yes, because: powered}, require: dimensions.steering_wheel_diameter >= 300 mm}
  branches: {branches: {tube: {require: members.hoop.wall >= 2.5 mm}, equal: {evidence: {kind: certificate, name: hoop}}}}
  refers: {require: rule(least_length) and rule(each_where)}
  margin_of: {require: margin(least_length) >= 100 mm}
  either: {require: bolt >= 6 mm or bolt >= 0.25 in or options.traction_control == no}
  computed: {require: mass.total >= 700 kg and mass.front_share >= 30 %}
  tolerance: {require: dimensions.overall_height <= 990 mm, tolerance: 15 mm}
  rounding: {require: electrical.system_voltage <= 685 V, rounding: {to: 10 V, how: down}, tolerance: 1 %}
  impact: {record: {name: nose, setup: setup.mass >= 300 kg, require: result.pull <= 20 kN}}
  impacts: {record: {name: rear, setup: setup.mass >= 300 kg, require: result.pull <= 20 kN, runs: 2}}
  pulls: {each: l in lamps, record: {of: l, require: result.pull >= 5 kN}}
  kept: {frozen: {baseline: homologated, paths: ["members.hoop.**"], tolerance: 1 mm}}
  kept_but_one: {frozen: {baseline: homologated, paths: ["members.hoop.**"], changes_allowed: 1}}
  advice: {standing: should, require: dimensions.overall_height <= 1100 mm}
""".replace('  ground: {states: "{}", require', "  ground: {require")

GOOD = """\
design: Heron 4
dimensions: {wheelbase: 2800 mm, front_track: 1590 mm, overall_height: 1000 mm, steering_wheel_diameter: 320 mm,
  front_ride_height: 40 mm, rear_ride_height: 60 mm, rear_track: {value: 1560 mm, definition: contact centres}}
brakes: {distribution: 50 %}
powertrain: {kind: hybrid, aspiration: forced, displacement: 2 L, power: 350 kW, speed: 8000 rpm, fuel_flow: 79 kg/h, tank_volume: 65 L}
air: {altitude: 500 m}
recovery: {axle: rear, power: 100 kW, voltage: 650 V}
electrical: {system_voltage: 690 V}
masses:
  tub: {mass: 700 kg, at: 1000 0 300 mm}
  fuel: {mass: 50 kg, at: 1600 0 270 mm}
  driver: {mass: 75 kg, at: 1100 0 330 mm}
tyres: {front: {width: 300 mm, loaded_radius: 331 mm}, rear: {width: 330 mm, loaded_radius: 343 mm}}
edges: {sill: {radius: 3 mm, exposed: yes}, lip: {radius: 2 mm, exposed: yes}, vane: {radius: 0.2 mm, exposed: no}}
lamps:
  left: {at: 0 -600 700 mm, area: 31 cm^2, carrier: hoop, proof: p1}
  right: {at: 0 601 700 mm, area: 32 cm^2, carrier: brace, proof: p2}
anchors: {a: {strength: 15 kN}, b: {strength: 14 kN}, c: {strength: 13 kN}, d: {strength: 12 kN}}
ballast: {front: {mass: 9 kg, sealed: yes}, rear: {mass: 4 kg, sealed: yes}}
points: {foot: 1400 0 100 mm, top: 1480 0 990 mm}
nose: {tip: -900 0 200 mm}
members: {complete: yes, hoop: {material: "25CrMo4", wall: 2.5 mm, outer_diameter: 45 mm}, brace: {material: "E355", wall: 2 mm, outer_diameter: 40 mm}}
aero_surfaces: {wing: {kind: wing}, fan: none}
options: {traction_control: no, power_steering: no}
bolt: 6 mm
baselines: {homologated: {design: old.design.yaml}}
tub: {material: "25CrMo4"}
evidence:
  hoop: {kind: certificate, until: 2028-01-31}
  layout: {kind: drawing, reference: D1}
  later: {kind: drawing, reference: D2}
  belt: {kind: declaration, made: 2024-05-05}
  p1: {kind: inspection, reference: A}
  p2: {kind: inspection, reference: B}
records:
  nose: {date: 2027-01-10, report: T1, setup: {mass: 302 kg}, result: {pull: 18 kN}}
  rear: {date: 2027-01-11, report: T2, runs: {a: {setup: {mass: 301 kg}, result: {pull: 18 kN}}, b: {setup: {mass: 305 kg}, result: {pull: 19 kN}}}}
  lamp_one: {of: left, date: 2027-01-12, report: T3, result: {pull: 6 kN}}
  lamp_two: {of: right, date: 2027-01-12, report: T3, result: {pull: 7 kN}}
judgements:
  judged: {verdict: complies, role: scrutineer, date: 2027-02-01, reason: felt}
  judged_each:
    sill: {verdict: complies, role: scrutineer, date: 2027-02-01, reason: felt}
    lip: {verdict: complies, role: scrutineer, date: 2027-02-01, reason: felt}
    vane: {verdict: complies, role: scrutineer, date: 2027-02-01, reason: felt}
states:
  fuel: {empty: {masses.fuel.mass: 0 kg}, full: {}}
  load: {low: {tyres.front.loaded_radius: 320 mm, tyres.rear.loaded_radius: 330 mm}}
"""

OLD = """\
design: Heron 3
members: {hoop: {material: "25CrMo4", wall: 2.5 mm, outer_diameter: 45 mm}}
"""

BAD = {
    "302 kg}, result: {pull: 18": "302 kg}, result: {pull: 28", "305 kg}, result: {pull: 19": "305 kg}, result: {pull: 29",
    "result: {pull: 6": "result: {pull: 4",
    "wheelbase: 2800": "wheelbase: 1500", "front_track: 1590": "front_track: 900", "distribution: 50": "distribution: 60",
    "displacement: 2 L": "displacement: 2.5 L", "power: 350": "power: 420", "fuel_flow: 79": "fuel_flow: 85",
    "tank_volume: 65": "tank_volume: 90", "axle: rear, power: 100": "axle: rear, power: 120", "voltage: 650": "voltage: 800",
    "system_voltage: 690": "system_voltage: 780", "mass: 700": "mass: 600", "width: 300": "width: 360",
    "radius: 3 mm, exposed": "radius: 1 mm, exposed", "0 601 700": "0 300 700", "area: 31": "area: 11", "area: 32": "area: 12",
    "strength: 14": "strength: 4", "mass: 9 kg": "mass: 19 kg", "sealed: yes}, rear": "sealed: no}, rear",
    "foot: 1400 0 100": "foot: 1000 0 10", '"25CrMo4", wall: 2.5': '"E355", wall: 1.5', "wing: {kind: wing}, fan: none": "wing: none, fan: {kind: other}",
    "traction_control: no": "traction_control: yes", "bolt: 6": "bolt: 5", "until: 2028": "until: 2027", "-900 0 200": "-900 0 -90000",
    "made: 2024": "made: 2019", "{verdict: complies, role: scrutineer, date: 2027-02-01, reason: felt}\n  judged_each": "{verdict: breach, role: scrutineer, date: 2027-02-01, reason: felt}\n  judged_each",
    "sill: {verdict: complies": "sill: {verdict: breach", "diameter: 320": "diameter: 280", "height: 1000 mm, st": "height: 1200 mm, st",
}  # fmt: skip


def bad() -> str:
    """The car badly made."""
    text = GOOD
    for old, new in BAD.items():
        assert old in text, old
        text = text.replace(old, new, 1)
    return text
