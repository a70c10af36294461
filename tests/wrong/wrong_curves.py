"""Wrong curves and maps, in the design and in files of columns, with what is said of them."""

from __future__ import annotations

from wrong_inputs import Wrong

INPUTS = """\
inputs:
  rig.speed: {unit: rpm, meaning: Speed}
  rig.torque: {kind: curve, over: rpm, unit: N*m, meaning: Torque}
  rig.lift: {kind: map, over: [mm, mm], unit: m^2, meaning: Lift}
"""
RULE = INPUTS + "rules:\n  it: {require: rig.torque(rig.speed) <= 500 N*m}\n"


def torque(rows: str, more: str = "") -> str:
    return f"rig: {{torque: {{rows: {rows}{more}}}}}\n"


def filed(text: str) -> dict[str, str | bytes]:
    return {"torque.csv": text}


FILE = "rig: {torque: {file: torque.csv}}\n"

WRONG_CURVES: tuple[Wrong, ...] = (
    Wrong(
        "a curve that is a number",
        (
            "car.design.yaml:4:15: bad-value: 'rig.torque' is a curve; expected {over: names, rows: [[key, value], …]}, or {over: names, file: NAME.csv} in a design or change file",
        ),
        design="rig: {torque: 300 N*m}\n",
        ruleset=RULE,
    ),
    Wrong(
        "a curve without rows",
        ("car.design.yaml:4:22: bad-curve: 'rig.torque' has no rows; expected two rows at least",),
        design=torque("[]"),
        ruleset=RULE,
    ),
    Wrong(
        "a curve of one row",
        ("car.design.yaml:4:22: bad-curve: 'rig.torque' has a key that takes one value only; expected two rows",),
        design=torque("[[1 rpm, 1 N*m]]"),
        ruleset=RULE,
    ),
    Wrong(
        "a row of a curve with three cells",
        ("car.design.yaml:4:39: bad-curve: a row of 'rig.torque' is 1 key and a value; expected [key, value]",),
        design=torque("[[1 rpm, 1 N*m], [2 rpm, 1 N*m, 3 N*m]]"),
        ruleset=RULE,
    ),
    Wrong(
        "keys of a curve that fall",
        ("car.design.yaml:4:39: bad-curve: the keys of 'rig.torque' do not rise; put them in order",),
        design=torque("[[2 rpm, 1 N*m], [1 rpm, 2 N*m]]"),
        ruleset=RULE,
    ),
    Wrong(
        "a key of a curve that stands twice",
        ("car.design.yaml:4:55: bad-curve: two rows of 'rig.torque' have one key; delete one",),
        design=torque("[[1 rpm, 1 N*m], [2 rpm, 1 N*m], [2 rpm, 2 N*m]]"),
        ruleset=RULE,
    ),
    Wrong(
        "a curve in a unit of another kind",
        (
            "car.design.yaml:4:33: wrong-dimension: 'kg' is a unit of mass [kg], and energy or torque [J] is due; expected energy or torque [J]; write a unit such as 'N*m'",
        ),
        design=torque("[[2 rpm, 1 kg], [3 rpm, 2 N*m]]"),
        ruleset=RULE,
    ),
    Wrong(
        "keys of a curve in units that cannot be put in order",
        (
            "car.design.yaml:4:22: bad-curve: column 1 of 'rig.torque' mixes units that cannot be put in order; state one unit a column",
        ),
        design=torque("[[2 rpm, 1 N*m], [3 rad/s, 2 N*m]]"),
        ruleset=RULE,
    ),
    Wrong(
        "a rule between rows that there is none of",
        (
            "car.design.yaml:4:71: unknown-choice: 'rig.torque' cannot be read between rows by 'cubic'; expected linear or steps",
        ),
        design=torque("[[2 rpm, 1 N*m], [3 rpm, 2 N*m]]", ", interpolation: cubic"),
        ruleset=RULE,
    ),
    Wrong(
        "a curve that says what no curve says",
        (
            "car.design.yaml:4:56: unknown-key: a curve or map has no 'smooth'; expected over or rows or interpolation or basis or reference or note or file or column or delimiter or decimal",
        ),
        design=torque("[[2 rpm, 1 N*m], [3 rpm, 2 N*m]]", ", smooth: yes"),
        ruleset=RULE,
    ),
    Wrong(
        "a map that is no full grid",
        ("car.design.yaml:4:20: bad-curve: the grid of 'rig.lift' has no row for 2 mm and 4 mm; add the row",),
        design="rig: {lift: {rows: [[1 mm, 3 mm, 1 m^2], [1 mm, 4 mm, 1 m^2], [2 mm, 3 mm, 1 m^2]]}}\n",
        ruleset=RULE,
    ),
    Wrong(
        "a map stated over one name",
        ("car.design.yaml:4:20: bad-curve: 'rig.lift' has 2 keys, and is stated over 1; expected mm and mm",),
        design="rig: {lift: {over: rig.speed, rows: [[1 mm, 3 mm, 1 m^2]]}}\n",
        ruleset=RULE,
    ),
    Wrong(
        "a curve that is called with two keys",
        (
            "cup.ruleset.yaml:8:18: wrong-arguments: 'rig.torque' takes 1 key, not 2; expected a key for each axis of its rows",
        ),
        design=torque("[[2 rpm, 1 N*m], [3 rpm, 2 N*m]]"),
        ruleset=INPUTS + "rules:\n  it: {require: 'rig.torque(1 rpm, 2 rpm) <= 500 N*m'}\n",
    ),
    Wrong(
        "a curve that is called at a key of another kind",
        (
            "cup.ruleset.yaml:8:17: dimension-mismatch: the key of 'rig.torque' is frequency or angular speed [1/s], and this is length [m]; expected a key in rpm",
        ),
        design=torque("[[2 rpm, 1 N*m], [3 rpm, 2 N*m]]"),
        ruleset=INPUTS + "rules:\n  it: {require: rig.torque(1 mm) <= 500 N*m}\n",
    ),
    Wrong(
        "a curve that is not called",
        (
            "cup.ruleset.yaml:8:17: kind-mismatch: 'rig.torque' is a curve that is not called at a key and '500 N*m' is a number: these have no order; expected numbers of one dimension, or dates",
        ),
        design=torque("[[2 rpm, 1 N*m], [3 rpm, 2 N*m]]"),
        ruleset=INPUTS + "rules:\n  it: {require: rig.torque <= 500 N*m}\n",
    ),
    Wrong(
        "a curve at its own key that the design does not name",
        (
            "car.design.yaml:4:22: bad-curve: the design does not say what 'rig.torque' is stated over; expected over: the name of a figure, or of several",
        ),
        design=torque("[[2 rpm, 1 N*m], [3 rpm, 2 N*m]]"),
        ruleset=INPUTS + "rules:\n  it: {require: rig.torque() <= 500 N*m}\n",
    ),
    Wrong(
        "a curve over what is no number",
        (
            "car.design.yaml:4:22: bad-curve: 'tyres.front.axle' is not the name of a number; expected over: the name of a figure, or of several",
        ),
        design="rig: {torque: {over: tyres.front.axle, rows: [[2 rpm, 1 N*m], [3 rpm, 2 N*m]]}}\n",
        ruleset=INPUTS + "rules:\n  it: {require: rig.torque() <= 500 N*m}\n",
    ),
    Wrong(
        "a declared curve without its key",
        ("cup.ruleset.yaml:3:10: missing-key: the curve 'rig.a' has one key; expected over: the unit of its key",),
        ruleset="inputs: {rig.a: {kind: curve, unit: N*m, meaning: a}}\nrules: {it: {require: 2 mm <= 3 mm}}\n",
    ),
    Wrong(
        "a declared map with one key",
        (
            "cup.ruleset.yaml:3:10: missing-key: the map 'rig.a' has two keys or more; expected over: [unit, unit], the units of its keys",
        ),
        ruleset="inputs: {rig.a: {kind: map, over: mm, unit: N*m, meaning: a}}\nrules: {it: {require: 2 mm <= 3 mm}}\n",
    ),
    Wrong(
        "a declared number with a key",
        ("cup.ruleset.yaml:3:10: unknown-key: 'rig.a' is no curve and no map, and has no keys; kind: curve",),
        ruleset="inputs: {rig.a: {over: mm, unit: N*m, meaning: a}}\nrules: {it: {require: 2 mm <= 3 mm}}\n",
    ),
    Wrong(
        "a file of a curve that is not there",
        (
            "car.design.yaml:4:22: no-such-file: there is no file torque.csv; expected the name of a file, relative to the file that names it; look at the spelling and at the folder",
        ),
        design=FILE,
        ruleset=RULE,
    ),
    Wrong(
        "a file of a curve outside the folder",
        (
            "car.design.yaml:4:22: outside-root: ../torque.csv lies outside the design's own folder, which is the root where no git work tree and no rulecheck.yaml is above it; expected a file below that folder, named relative to the file that names it; put a file 'rulecheck.yaml' with the line 'house: NAME' into the folder above, or make that a git work tree",
        ),
        design="rig: {torque: {file: ../torque.csv}}\n",
        ruleset=RULE,
    ),
    Wrong(
        "an empty file of a curve",
        (
            "torque.csv:1:1: column-file: torque.csv has no header; expected a header such as `engine_speed [rpm], torque [N*m]`",
        ),
        design=FILE,
        ruleset=RULE,
        files=filed("# nothing\n"),
    ),
    Wrong(
        "a file of a curve without the column",
        (
            "car.design.yaml:4:39: column-file: torque.csv has no column 'speed'; expected sped or torque; did you mean 'sped'?",
        ),
        design="rig: {torque: {over: rig.speed, file: torque.csv}}\n",
        ruleset=RULE,
        files=filed("sped [rpm],torque [N*m]\n1,2\n2,3\n"),
    ),
    Wrong(
        "a file of a curve with rows amiss",
        (
            "torque.csv:2:5: column-file: row 2: 3 cells stand under 2 columns; expected 2 cells",
            "torque.csv:4:1: column-file: row 4: 1 cells stand under 2 columns; expected 2 cells",
        ),
        design=FILE,
        ruleset=RULE,
        files=filed("speed [rpm],torque [N*m]\n1,2,3\n2,x\n3\n"),
    ),
    Wrong(
        "a file of a curve with headings amiss",
        (
            "torque.csv:1:13: column-file: column 2 has no name; expected `name [unit]`",
            "torque.csv:1:14: column-file: the column 'speed' stands twice; delete one of the two",
        ),
        design=FILE,
        ruleset=RULE,
        files=filed("speed [rpm],,speed [rpm]\n1,2,3\n"),
    ),
    Wrong(
        "a file of a curve with commas for points",
        (
            "torque.csv:2:3: column-file: row 2: the decimal sign of this file is `.`, and '2,5' has another; declare `decimal:` as the file writes it",
        ),
        design="rig: {torque: {file: torque.csv, delimiter: semicolon}}\n",
        ruleset=RULE,
        files=filed("speed [rpm];torque [N*m]\n1;2,5\n2;3\n"),
    ),
    Wrong(
        "a curve with rows here and in a file",
        ("car.design.yaml:4:22: bad-structure: a curve has its rows here or in a file, not both; take one out",),
        design="rig: {torque: {file: torque.csv, rows: [[2 rpm, 1 N*m], [3 rpm, 2 N*m]]}}\n",
        ruleset=RULE,
        files=filed("speed [rpm],torque [N*m]\n1,2\n2,3\n"),
    ),
    Wrong(
        "a file of a curve on the command line",
        (
            "--set rig.torque:1:1: bad-value: 'rig.torque' is a curve; expected {over: names, rows: [[key, value], …]}, or {over: names, file: NAME.csv} in a design or change file",
        ),
        design="",
        ruleset=RULE,
        options={"settings": {"rig.torque": "{file: torque.csv}"}},
    ),
    Wrong(
        "a table over two keys that lacks a row",
        (
            "cup.ruleset.yaml:3:114: bad-structure: table 't' lacks rows: every key of one column goes with every key of the others; expected 4 rows",
        ),
        design="",
        ruleset="tables: {t: {over: [dimensions.wheelbase, dimensions.front_track], linear: [[1 m, 1 m, 1 kg], [2 m, 1 m, 1 kg], [1 m, 2 m, 1 kg]]}}\nrules: {it: {require: t <= 3 kg}}\n",
    ),
    Wrong(
        "a table over two keys with the same keys twice",
        ("cup.ruleset.yaml:3:96: bad-structure: two rows of table 't' have the same keys; take one of them out",),
        design="",
        ruleset="tables: {t: {over: [dimensions.wheelbase, dimensions.front_track], linear: [[1 m, 1 m, 1 kg], [1 m, 1 m, 1 kg]]}}\nrules: {it: {require: t <= 3 kg}}\n",
    ),
    Wrong(
        "a table over two keys with a formula for a key",
        (
            "cup.ruleset.yaml:3:78: bad-structure: a table over several keys has its keys as plain values, and 't' has a formula; write the value",
        ),
        design="",
        ruleset="tables: {t: {over: [dimensions.wheelbase, dimensions.front_track], linear: [[1 m + 1 m, 1 m, 1 kg]]}}\nrules: {it: {require: t <= 3 kg}}\n",
    ),
    Wrong(
        "a table over two keys that is called with one",
        (
            "cup.ruleset.yaml:4:23: wrong-arguments: the table 't' takes 2 keys; expected a key for each name that it is over",
        ),
        design="",
        ruleset="tables: {t: {over: [dimensions.wheelbase, dimensions.front_track], linear: [[1 m, 1 m, 1 kg], [2 m, 1 m, 1 kg], [1 m, 2 m, 1 kg], [2 m, 2 m, 1 kg]]}}\nrules: {it: {require: t(1 m) <= 3 kg}}\n",
    ),
    *(
        Wrong(name, (said,), design="", ruleset=RULE.replace("rig.torque(rig.speed) <= 500 N*m", f'"{condition}"'))
        for name, condition, said in (
            (
                "a rise of a number",
                "rising(rig.speed)",
                "cup.ruleset.yaml:8:25: kind-mismatch: 'rising' takes a curve, and 'rig.speed' is a number; expected rising(curve)",
            ),
            (
                "a rise of a map",
                "rising(rig.lift)",
                "cup.ruleset.yaml:8:25: kind-mismatch: 'rising' takes a curve, and 'rig.lift' is a map; expected rising(curve)",
            ),
            (
                "a rise of two curves",
                "rising(rig.torque, rig.torque)",
                "cup.ruleset.yaml:8:18: wrong-arguments: 'rising' takes 1 argument, not 2; expected rising(curve)",
            ),
            (
                "a slope that is calculated with",
                "2 * slope(rig.torque, 1 rpm, 2 rpm) <= 1 N*m/rpm",
                "cup.ruleset.yaml:8:18: kind-mismatch: cannot multiply a number and the slopes of a curve; expected numbers, or a date with a period",
            ),
            (
                "a slope between keys of another kind",
                "slope(rig.torque, 1 m, 2 m) <= 1 N",
                "cup.ruleset.yaml:8:36: dimension-mismatch: the key of 'rig.torque' is frequency or angular speed [1/s], and '1 m' is length [m]; expected slope(curve, from, to)",
            ),
            (
                "a curve over a flag",
                "over(rig.torque, yes, 1 rpm, 2 rpm) >= 1 N*m",
                "cup.ruleset.yaml:8:35: kind-mismatch: 'over' takes a curve or a number to lie over, and 'yes' is a flag; expected over(curve, other, from, to)",
            ),
            (
                "a curve over what is of another kind",
                "over(rig.torque, 5 m, 1 rpm, 2 rpm) >= 1 N*m",
                "cup.ruleset.yaml:8:35: dimension-mismatch: 'rig.torque' is energy or torque [J], '5 m' is length [m]; the two must be of one dimension",
            ),
        )
    ),
    *(
        Wrong(
            name,
            (said,),
            design=torque("[[1 rpm, 2 N*m], [3 rpm, 4 N*m]]", more),
            ruleset=RULE.replace("rig.torque(rig.speed) <= 500 N*m", f'"{condition}"'),
        )
        for name, condition, more, said in (
            (
                "a range that falls",
                "slope(rig.torque, 2 rpm, 1 rpm) <= 1 N*m/rpm",
                "",
                "cup.ruleset.yaml:8:43: bad-value: the range from '2 rpm' to '1 rpm' does not rise; expected the lower end first",
            ),
            (
                "a range that moves",
                "slope(rig.torque, 1 rpm, rig.speed) <= 1 N*m/rpm",
                "",
                "cup.ruleset.yaml:8:43: kind-mismatch: an end of the range is a constant, and 'rig.speed' is not; expected a number with unit; write the key, as in 2000 rpm",
            ),
            (
                "a slope of steps",
                "slope(rig.torque, 1 rpm, 2 rpm) <= 1 N*m/rpm",
                ", interpolation: steps",
                "cup.ruleset.yaml:8:18: kind-mismatch: 'rig.torque' runs in steps, and has no slope; expected a curve with straight lines between its rows",
            ),
        )
    ),
)
