"""Wrong designs, ledgers and questions, with what is said of them."""

from __future__ import annotations

from wrong_inputs import NUMBERS, Wrong, rule

_HILL = "track: Combe\nkind: hill\naltitude: 90 m\nsegments:\n"

WRONG_DESIGNS: tuple[Wrong, ...] = (
    Wrong(
        "a track that is not there",
        (
            "car.design.yaml:4:8: no-such-file: there is no file combe.track.yml; expected the name of a file, relative to the file that names it; did you mean 'combe.track.yaml'?",
        ),
        design="track: combe.track.yml\n",
        files={"combe.track.yaml": _HILL + "  - {length: 90 m}\n"},
    ),
    Wrong(
        "a track outside the folder",
        (
            "car.design.yaml:4:8: outside-root: ../combe.track.yaml lies outside the design's own folder, which is the root where no git work tree and no rulecheck.yaml is above it; expected a file below that folder, named relative to the file that names it; put a file 'rulecheck.yaml' with the line 'house: NAME' into the folder above, or make that a git work tree",
        ),
        design="track: ../combe.track.yaml\n",
    ),
    Wrong(
        "a track that a state names, with two faults",
        (
            "combe.track.yaml:5:31: bad-track: a straight has no direction; add its radius, or take the key out",
            "combe.track.yaml:6:14: bad-track: '0 m' is too small; expected at least 0.1 m",
        ),
        design="states: {place: {here: {track: combe.track.yaml}}}\n",
        files={"combe.track.yaml": _HILL + "  - {length: 90 m, direction: left}\n  - {length: 0 m}\n"},
    ),
    Wrong(
        "a ruleset that is not there",
        (
            "car.design.yaml:2:12: no-such-file: there is no file cup.rulset.yaml; expected the name of a file, relative to the file that names it; did you mean 'cup.ruleset.yaml'?",
        ),
        files={"car.design.yaml": "design: Heron 4\nrulesets: [cup.rulset.yaml]\n"},
    ),
    Wrong(
        "a ruleset that is a folder",
        (
            "car.design.yaml:2:12: not-a-file: books is not a regular file; expected a text file; name a file, not a folder, a pipe or a device",
        ),
        files={"car.design.yaml": "design: Heron 4\nrulesets: [books]\n", "books/cup.ruleset.yaml": ""},
    ),
    Wrong(
        "a ruleset outside the folder",
        (
            "car.design.yaml:2:12: outside-root: ../cup.ruleset.yaml lies outside the design's own folder, which is the root where no git work tree and no rulecheck.yaml is above it; expected a file below that folder, named relative to the file that names it; put a file 'rulecheck.yaml' with the line 'house: NAME' into the folder above, or make that a git work tree",
        ),
        files={"car.design.yaml": "design: Heron 4\nrulesets: [../cup.ruleset.yaml]\n"},
    ),
    Wrong(
        "a ruleset in the place of the design",
        (
            "car.design.yaml:1:1: missing-key: this is a ruleset, not a design; name the design first, and its rulesets in the design or with --rules",
        ),
        files={"car.design.yaml": "ruleset: Dunmere Cup\ninputs:\n  tub.depth: {unit: mm, meaning: Depth}\n"},
    ),
    Wrong(
        "a house file in the place of the design",
        (
            "car.design.yaml:1:1: missing-key: this is a house file, not a design; name the design; the house file at the root of its folder is read with it",
        ),
        files={"car.design.yaml": "house: Heron office\n"},
    ),
    Wrong(
        "a number with an exponent too great",
        (
            "car.design.yaml:4:4: too-large: the exponent of '1e5000' is out of bounds; write an exponent from -999 to 999",
        ),
        design="a: 1e5000 mm\n",
    ),
    Wrong(
        "a file in another encoding",
        (
            "car.design.yaml:3:9: not-utf8: byte 54 of car.design.yaml is 0xB5, which is not UTF-8 there; expected UTF-8 text; save the file as UTF-8",
        ),
        files={"car.design.yaml": b"design: Heron 4\nrulesets: [cup.ruleset.yaml]\nnote: 5 \xb5m\n"},
    ),
    Wrong(
        "a bracket that is not closed",
        (
            "car.design.yaml:5:8: yaml-syntax: the bracket `{` that opens here is never closed; expected `}`; close the bracket",
        ),
        design="a: 5 mm\ntyres: {front: {width: 305 mm}\n",
    ),
    Wrong(
        "a tab for indentation",
        (
            "car.design.yaml:5:1: yaml-syntax: a tab stands where blanks indent a line; expected blanks; replace the tab by blanks",
        ),
        design="tyres:\n\tfront: {width: 305 mm}\n",
    ),
    Wrong(
        "a tag",
        (
            "car.design.yaml:4:4: yaml-refused: tags are refused: what a value is follows from its place; delete the tag, or put the value between quotes",
        ),
        design="a: !!float 5\n",
    ),
    Wrong(
        "a merge key",
        ("car.design.yaml:6:10: yaml-refused: merge keys are refused; write out the keys",),
        design="tyres:\n  front: &f {width: 305 mm}\n  rear: {<<: *f}\n",
    ),
    Wrong(
        "a key that stands twice",
        (
            "car.design.yaml:6:1: duplicate-key: the key 'a' stands on line 4 and again on line 6; expected each key once in a mapping; delete one of the two, or rename it",
        ),
        design="a: 5 mm\nb: 1 mm\na: 6 mm\n",
    ),
    Wrong(
        "a ledger row with a cell too many",
        (
            'parts.csv:3:21: ledger-row: row 3: 6 cells stand under 5 columns; the first too many is cell 6; expected 5 cells; put a cell that holds the delimiter between quotes; a file with decimal commas declares `delimiter: ";"` and `decimal: ","`',
        ),
        design="a: 5 mm\nledger: [parts.csv]\n",
        files={"parts.csv": "item,mass [kg],x [mm],y [mm],z [mm]\ntub,92,1190,0,318\nnose,7.6,-520,0,240,9\n"},
    ),
    Wrong(
        "a ledger without units",
        ("parts.csv:2:5: unit-missing: '92' has no unit; expected mass [kg]; write the unit, for example '92 kg'",),
        design="a: 5 mm\nledger: [parts.csv]\n",
        files={"parts.csv": "item,mass,x [mm],y [mm],z [mm]\ntub,92,1190,0,318\n"},
    ),
    Wrong(
        "a ledger with an unknown column",
        (
            "parts.csv:1:37: ledger-header: no column is called 'qantity'; expected a header of item, mass, x, y, z, datum, quantity, mirror, basis, maturity, growth, inertia_xx, inertia_yy, inertia_zz, unsprung, owner, group, of which item and mass must be there; did you mean 'quantity'?",
        ),
        design="a: 5 mm\nledger: [parts.csv]\n",
        files={"parts.csv": "item,mass [kg],x [mm],y [mm],z [mm],qantity\ntub,92,1190,0,318,2\n"},
    ),
    Wrong(
        "a decimal comma",
        (
            "car.design.yaml:4:4: bad-number: '5,5' is not a number; write the decimal mark as a point and thousands without a mark",
        ),
        design="a: 5,5 mm\n",
    ),
    Wrong(
        "digits in groups",
        ("car.design.yaml:4:4: bad-number: '1_900' is not a number; write the digits without underscores",),
        design="a: 1_900 mm\n",
    ),
    Wrong(
        "an unknown unit",
        ("car.design.yaml:4:6: unknown-unit: no unit is written 'mmm'; did you mean 'mm'?",),
        design="a: 5 mmm\n",
    ),
    Wrong(
        "a value without a unit",
        (
            "car.design.yaml:4:4: unit-missing: '5' has no unit; expected length [m]; write the unit, for example '5 mm'",
        ),
        design="a: 5\n",
    ),
    Wrong(
        "a mass for a length",
        (
            "car.design.yaml:4:6: wrong-dimension: 'kg' is a unit of mass [kg], and length [m] is due; expected length [m]; write a unit such as 'mm'",
        ),
        design="a: 5 kg\n",
    ),
    Wrong(
        "a flag that is neither yes nor no",
        ("car.design.yaml:4:27: bad-value: 'options.power_steering' is a flag; expected yes or no",),
        design="options: {power_steering: perhaps}\n",
    ),
    Wrong(
        "a list for a value",
        ("car.design.yaml:4:4: bad-value: 'a' is a number; expected a value in mm, such as '10 mm'",),
        design="a: [5 mm, 6 mm]\n",
    ),
    Wrong(
        "two numbers for a point",
        (
            "car.design.yaml:4:16: bad-value: a point is three lengths; write '1250 0 310 mm': one unit at the end, or one behind each number",
        ),
        design="points: {knee: 5 6 mm}\n",
    ),
    Wrong(
        "a key of the design with a slip",
        (
            "car.design.yaml:4:17: unknown-key: no input is called 'tyres.front.widht'; expected width or section_width or diameter or loaded_radius or rim_width or rim_diameter or tread_depth or growth or grip or grip_fade or cornering_factor or cornering_load_factor; did you mean 'tyres.front.width'?",
        ),
        design="tyres: {front: {widht: 305 mm}}\n",
    ),
    Wrong(
        "a collection written as a value",
        ("car.design.yaml:4:8: bad-structure: 'tyres' is a collection; expected {name: {field: value}}, or none",),
        design="tyres: 305 mm\n",
    ),
    Wrong(
        "a part that stands twice",
        (
            "parts.csv:2:1: name-taken: the ledger has two entries called 'tub'; give one of them another name, or use the quantity column",
        ),
        design="ledger: [parts.csv]\nmasses: {tub: {mass: 9 kg, at: 0 0 0 mm}}\n",
        files={"parts.csv": "item,mass [kg],x [mm],y [mm],z [mm]\ntub,92,1190,0,318\n"},
    ),
    Wrong(
        "a name with a blank",
        (
            "car.design.yaml:4:9: bad-name: 'door sill' cannot be a name; expected letters, digits and underscores, a letter first; join words by underscores",
        ),
        design="edges: {door sill: {radius: 2 mm}}\n",
    ),
    Wrong(
        "a choice with a slip",
        (
            "car.design.yaml:4:20: unknown-choice: 'hybird' is not a choice of 'powertrain.kind'; expected combustion or hybrid or electric; did you mean 'hybrid'?",
        ),
        design="powertrain: {kind: hybird}\n",
    ),
    Wrong(
        "a branch that is not there",
        (
            "car.design.yaml:4:14: unknown-choice: rule 'it' has no branch 'stel tube'; expected steel tube or other; did you mean 'steel tube'?",
        ),
        design="claims: {it: stel tube}\n",
        ruleset=NUMBERS
        + "rules:\n  it: {branches: {steel tube: {require: a <= 10 mm}, other: {require: b <= 10 mm}}}\n",
    ),
    Wrong(
        "two states that set one path",
        (
            "car.design.yaml:7:12: state-clash: two states set 'masses.fuel.mass'; let each path be set on one axis only",
        ),
        design="masses: {fuel: {mass: 5 kg}}\nstates:\n  fuel: {empty: {masses.fuel.mass: 0 kg}}\n  driver: {light: {masses.fuel.mass: 1 kg}}\n",
        ruleset="states_needed: {fuel: [empty], driver: [light]}\nrules:\n  it: {states: every, require: masses.fuel.mass <= 10 kg}\n",
    ),
    Wrong(
        "a state that is asked for and not there",
        ("unknown-state: the design has no state fuel=full; expected fuel=empty",),
        design="states: {fuel: {empty: {}}}\n",
        options={"states": {"fuel": "full"}},
    ),
    Wrong(
        "a design without a ruleset",
        (
            "no-rules: car.design.yaml names no ruleset; expected rulesets: [name.ruleset.yaml] in the design, or --rules FILE",
        ),
        files={"car.design.yaml": "design: Heron 4\n"},
    ),
    Wrong(
        "a date the wrong way round",
        ("car.design.yaml:4:45: bad-date: '31.12.2027' is not a date; expected year-month-day; write '2027-03-01'",),
        design="evidence: {hoop: {kind: certificate, until: 31.12.2027}}\n",
    ),
    Wrong(
        "a change to no path",
        ("--set tyres..width:1:1: bad-name: 'tyres..width' cannot be a path; expected --set tyres.rear.width=250mm",),
        options={"settings": {"tyres..width": "5 mm"}},
    ),
    Wrong(
        "several faults at once",
        (
            "car.design.yaml:4:6: wrong-dimension: 'kg' is a unit of mass [kg], and length [m] is due; expected length [m]; write a unit such as 'mm'",
            "car.design.yaml:5:23: unit-missing: '1' has no unit; expected length [m]; write the unit, for example '1 mm'",
            "cup.ruleset.yaml:6:23: unknown-unit: no unit is written 'mmm'; did you mean 'mm'?",
        ),
        design="a: 5 kg\ntyres: {frnt: {width: 1}}\n",
        ruleset=rule("a + c <= 10 mmm"),
    ),
)
