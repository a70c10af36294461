"""Wrong signals: statements in the design, logs, and what rules ask of them, with what is said of each."""

from __future__ import annotations

from wrong_inputs import Wrong

INPUTS = """\
inputs:
  signals.a: {kind: signal, unit: V, meaning: One}
  signals.b: {kind: signal, unit: m, meaning: Another}
"""
PEAK = INPUTS + "rules:\n  it: {require: peak(signals.a) <= 5 V}\n"
FILE = "signals: {a: {file: run.csv}}\n"


def asking(condition: str) -> str:
    return INPUTS + f'rules:\n  it: {{require: "{condition}"}}\n'


def run(text: str) -> dict[str, str | bytes]:
    return {"run.csv": text}


def filed(name: str, said: str, log: str, design: str = FILE) -> Wrong:
    return Wrong(name, (said,), design=design, ruleset=PEAK, files=run(log))


def asked(name: str, said: str, condition: str) -> Wrong:
    return Wrong(name, (said,), design="", ruleset=asking(condition))


WRONG_SIGNALS: tuple[Wrong, ...] = (
    filed(
        "times of a log that do not rise",
        "run.csv:4:1: log-file: row 4: the time does not rise; expected a later time than in the row above; put the rows in order of time, each time once",
        "time [s],a [V]\n0,1\n0.2,2\n0.2,3\n",
    ),
    filed(
        "times of a log that fall",
        "run.csv:3:1: log-file: row 3: the time does not rise; expected a later time than in the row above; put the rows in order of time, each time once",
        "time [ms],a [V]\n5,1\n4,2\n",
    ),
    filed(
        "a log without the column",
        "car.design.yaml:4:21: log-file: run.csv has no column 'a'; expected time or aa; did you mean 'aa'?",
        "time [s],aa [V]\n0,1\n1,2\n",
    ),
    filed(
        "a log without its time",
        "car.design.yaml:4:21: log-file: run.csv has no column 'time'; expected t or a",
        "t [s],a [V]\n0,1\n1,2\n",
    ),
    filed(
        "a log whose column has no unit",
        "run.csv:1:10: unit-missing: the column 'a' has no unit; expected `a [unit]` in the header, or unit: in the design",
        "time [s],a\n0,1\n1,2\n",
    ),
    filed(
        "a log whose time has no unit",
        "run.csv:1:1: unit-missing: the column 'time' has no unit; expected `time [unit]` in the header, or time_unit: in the design",
        "time,a [V]\n0,1\n1,2\n",
    ),
    filed(
        "a log with one sample",
        "run.csv:1:1: log-file: run.csv has 1 row; expected two samples at least, the last of which ends the record",
        "time [s],a [V]\n0,1\n",
    ),
    filed(
        "a log without samples",
        "run.csv:1:1: log-file: run.csv has 0 rows; expected two samples at least, the last of which ends the record",
        "time [s],a [V]\n",
    ),
    filed(
        "a log without a header",
        "run.csv:1:1: log-file: run.csv has no header; expected a header such as `time [s], deceleration [m/s^2]`",
        "\n",
    ),
    filed(
        "a sample that is nan",
        "run.csv:3:3: log-file: row 3, column 'a': 'nan' is not a number; expected a number without a unit",
        "time [s],a [V]\n0,1\n1,nan\n2,3\n",
    ),
    filed(
        "a sample that is infinite",
        "run.csv:3:3: log-file: row 3, column 'a': 'inf' is not a number; expected a number without a unit",
        "time [s],a [V]\n0,1\n1,inf\n2,3\n",
    ),
    filed(
        "a sample that is missing",
        "run.csv:3:3: log-file: row 3, column 'a': the cell is empty; expected a number without a unit; a logger's gap is no value: take the row out",
        "time [s],a [V]\n0,1\n1,\n2,3\n",
    ),
    filed(
        "a sample with its unit",
        "run.csv:3:3: log-file: row 3, column 'a': '2 V' is not a number; expected a number without a unit",
        "time [s],a [V]\n0,1\n1,2 V\n2,3\n",
    ),
    filed(
        "a sample without end",
        "run.csv:3:3: log-file: row 3, column 'a': '0.33333333333333333333333333333333333333' is longer than 40 characters; expected a number without a unit",
        "time [s],a [V]\n0,1\n1,0." + "3" * 60 + "\n",
    ),
    filed(
        "a row of a log with a cell too many",
        "run.csv:3:1: log-file: row 3: 3 cells stand under 2 columns; expected 2 cells",
        "time [s],a [V]\n0,1\n1,2,5\n2,3\n",
    ),
    filed(
        "a log whose decimal comma is not declared",
        "run.csv:2:3: log-file: row 2, column 'a': '1,5' has another decimal sign than `.`; expected a number without a unit; declare `decimal:` as the file writes it",
        "time [s];a [V]\n0;1,5\n1;2\n",
        "signals: {a: {file: run.csv, delimiter: semicolon}}\n",
    ),
    filed(
        "a log with a point where a comma is declared",
        "run.csv:2:3: log-file: row 2, column 'a': '1.5' has another decimal sign than the `,` that is declared; expected a number without a unit; declare `decimal:` as the file writes it",
        "time [s];a [V]\n0;1.5\n1;2\n",
        "signals: {a: {file: run.csv, delimiter: semicolon, decimal: comma}}\n",
    ),
    filed(
        "a column of a log that stands twice",
        "run.csv:1:16: log-file: the column 'a' stands twice; give each column a name of its own",
        "time [s],a [V],a [V]\n0,1,1\n1,2,2\n",
    ),
    filed(
        "a column of a log in a unit of another kind",
        "run.csv:1:10: wrong-dimension: the column 'a' is length [m], and 'signals.a' is voltage [V]; expected a unit such as V",
        "time [s],a [mm]\n0,1\n1,2\n",
    ),
    filed(
        "a time of a log that is a length",
        "run.csv:1:1: wrong-dimension: the column 'time' is length [m], and not a time; expected a unit of time, such as s or ms",
        "time [m],a [V]\n0,1\n1,2\n",
    ),
    filed(
        "a unit of a log that there is not",
        "run.csv:1:10: unknown-unit: no unit is written 'volts'; did you mean 'V'?",
        "time [s],a [volts]\n0,1\n1,2\n",
    ),
    filed(
        "a unit of a log that is said twice",
        "car.design.yaml:4:36: bad-value: the column 'a' is in mV by its heading, and in V by the design; take 'unit' out, or mend the heading",
        "time [s],a [mV]\n0,1\n1,2\n",
        "signals: {a: {file: run.csv, unit: V}}\n",
    ),
    filed(
        "a log that is not there",
        "car.design.yaml:4:21: no-such-file: there is no file runs.csv; expected the name of a file, relative to the file that names it; did you mean 'run.csv'?",
        "",
        "signals: {a: {file: runs.csv}}\n",
    ),
    filed(
        "a log outside of the folder",
        "car.design.yaml:4:21: outside-root: ../../run.csv lies outside the design's own folder, which is the root where no git work tree and no rulecheck.yaml is above it; expected a file below that folder, named relative to the file that names it; put a file 'rulecheck.yaml' with the line 'house: NAME' into the folder 2 levels above, or make that a git work tree",
        "",
        "signals: {a: {file: ../../run.csv}}\n",
    ),
    filed(
        "a signal that is a number",
        "car.design.yaml:4:14: bad-value: 'signals.a' is a signal; expected {file: NAME.csv, time: COLUMN, column: COLUMN}, or {rows: [[time, value], …]}",
        "",
        "signals: {a: 5 V}\n",
    ),
    filed(
        "a signal with a key that none has",
        "car.design.yaml:4:30: unknown-key: a signal has no 'columm'; expected file or time or column or time_unit or unit or delimiter or decimal or rows or basis or reference or note; did you mean 'column'?",
        "",
        "signals: {a: {file: run.csv, columm: a}}\n",
    ),
    filed(
        "a signal with rows and a file",
        "car.design.yaml:4:21: bad-structure: a signal has its rows here or in a file, not both; take one out",
        "",
        "signals: {a: {file: run.csv, rows: [[0 s, 1 V]]}}\n",
    ),
    filed(
        "a signal of one row",
        "car.design.yaml:4:21: log-file: 'signals.a' has 1 row; expected 2 to 5000 rows here, or a file",
        "",
        "signals: {a: {rows: [[0 s, 1 V]]}}\n",
    ),
    filed(
        "a row of a signal without its time",
        "car.design.yaml:4:34: log-file: a row of 'signals.a' is a time and a value; expected [0.2 s, 12 V]",
        "",
        "signals: {a: {rows: [[0 s, 1 V], [2 V]]}}\n",
    ),
    filed(
        "a row of a signal without a unit",
        "car.design.yaml:4:40: unit-missing: '2' has no unit; expected voltage [V]; write the unit, for example '2 V'",
        "",
        "signals: {a: {rows: [[0 s, 1 V], [1 s, 2]]}}\n",
    ),
    filed(
        "rows of a signal that do not rise",
        "car.design.yaml:4:34: log-file: the times of 'signals.a' do not rise; expected a later time than in the row above; put the rows in order of time",
        "",
        "signals: {a: {rows: [[0 s, 1 V], [0 s, 2 V]]}}\n",
    ),
    asked(
        "a signal that no ruleset declares",
        "cup.ruleset.yaml:7:23: missing-key: no ruleset declares 'signals.c', so its kind is not known; expected inputs: {signals.c: {kind: signal, unit: …}}",
        "peak(signals.c) <= 5 V",
    ),
    asked(
        "a signal that is held against a limit as a whole",
        "cup.ruleset.yaml:7:18: kind-mismatch: 'signals.a <= 5 V' holds for some samples and not for others; expected peak(…), longest(…) or duration(…) of a signal, held against a limit",
        "signals.a <= 5 V",
    ),
    asked(
        "a peak of a number",
        "cup.ruleset.yaml:7:23: kind-mismatch: 'peak' takes a signal, and 'dimensions.wheelbase' is a number; expected peak(signal)",
        "peak(dimensions.wheelbase) <= 5 m",
    ),
    asked(
        "a peak of two",
        "cup.ruleset.yaml:7:18: wrong-arguments: 'peak' takes 1 argument, not 2; expected peak(signal)",
        "peak(signals.a, signals.a) <= 5 V",
    ),
    asked(
        "a duration of a signal",
        "cup.ruleset.yaml:7:27: kind-mismatch: 'duration' takes a condition on a signal, and this is none; expected duration(signals.brake > 5 V), also joined by and, or, not",
        "duration(signals.a) <= 5 s",
    ),
    asked(
        "a duration of a condition without a signal",
        "cup.ruleset.yaml:7:27: kind-mismatch: 'dimensions.wheelbase > 2 m' holds no signal; put what does not change over time under 'when'",
        "duration(dimensions.wheelbase > 2 m) <= 5 s",
    ),
    asked(
        "a sample against another kind",
        "cup.ruleset.yaml:7:26: dimension-mismatch: 'signals.a' is voltage [V], '5 m' is length [m]; the two sides must be of one dimension",
        "longest(signals.a > 5 m) <= 5 s",
    ),
    asked(
        "a sample against a flag",
        "cup.ruleset.yaml:7:38: kind-mismatch: a sample is held against a number, and 'yes' is a flag; expected a number or a signal",
        "longest(signals.a > yes) <= 5 s",
    ),
    asked(
        "samples that are measured and equal",
        "cup.ruleset.yaml:7:26: formula-syntax: 'signals.a == 5 V' compares measured samples for equality; expected abs(a - b) <= width, or a signal in unit \"1\"",
        "longest(signals.a == 5 V) <= 5 s",
    ),
    asked(
        "signals of two kinds that are added",
        "cup.ruleset.yaml:7:23: dimension-mismatch: 'signals.a' is voltage [V], 'signals.b' is length [m]; the two sides must be of one dimension",
        "peak(signals.a + signals.b) <= 5 V",
    ),
    asked(
        "a signal and a flag",
        "cup.ruleset.yaml:7:35: kind-mismatch: a signal and a flag cannot be added; expected a signal or a number",
        "peak(signals.a + yes) <= 5 V",
    ),
    asked(
        "a signal that is a divisor",
        "cup.ruleset.yaml:7:23: kind-mismatch: a signal cannot be a divisor; expected +, -, * of signals, or / by a number",
        "peak(2 V / signals.a) <= 5 V",
    ),
    asked(
        "a signal to a power",
        "cup.ruleset.yaml:7:23: kind-mismatch: a signal cannot be raised to a power; expected +, -, * of signals, or / by a number",
        "peak(signals.a ^ 2) <= 5 V",
    ),
    asked(
        "a signal divided by zero",
        "cup.ruleset.yaml:7:35: bad-value: a signal is divided by zero; expected another number",
        "peak(signals.a / 0) <= 5 V",
    ),
    asked(
        "a signal with a figure that may change",
        "cup.ruleset.yaml:7:35: kind-mismatch: what a signal is calculated with is a constant, and 'dimensions.wheelbase' is not; expected a number with unit; put what may change into the limit, as in longest(s > limit), or outside of the function",
        "peak(signals.b + dimensions.wheelbase) <= 5 m",
    ),
    asked(
        "a window that is a length",
        "cup.ruleset.yaml:7:47: kind-mismatch: a window is a time, and this is length [m]; expected 500 ms",
        "peak(rolling_mean(signals.a, 5 m)) <= 5 V",
    ),
    asked(
        "a window of no length",
        "cup.ruleset.yaml:7:47: bad-value: a window is longer than nothing; expected such as 500 ms",
        "peak(rolling_mean(signals.a, 0 s)) <= 5 V",
    ),
    asked(
        "a root of a signal",
        "cup.ruleset.yaml:7:28: kind-mismatch: 'sqrt' takes numbers, and 'signals.a' is a signal; ask a figure of it first, such as peak(…)",
        "peak(sqrt(signals.a)) <= 5 V",
    ),
    Wrong(
        "a signal with a path of its own",
        (
            "cup.ruleset.yaml:3:10: bad-name: 'rig.a' cannot be the path of a signal; expected signals.NAME; call it 'signals.a'",
        ),
        design="",
        ruleset="inputs: {rig.a: {kind: signal, unit: V, meaning: a}}\nrules: {it: {require: 1 V <= 2 V}}\n",
    ),
    Wrong(
        "a signal that is declared without a unit",
        ("cup.ruleset.yaml:3:10: missing-key: the signal 'signals.a' has no unit; expected unit: mm, or \"1\"",),
        design="",
        ruleset="inputs: {signals.a: {kind: signal, meaning: a}}\nrules: {it: {require: 1 V <= 2 V}}\n",
    ),
)
