"""Wrong rulesets, with what is said of them."""

from __future__ import annotations

from wrong_inputs import NUMBERS, OK, Wrong, rule

WRONG_RULESETS: tuple[Wrong, ...] = (
    Wrong(
        "a clause of a kind that is none",
        (
            "cup.ruleset.yaml:7:39: unknown-choice: 'definiton' is no kind of clause; expected rule or definition or procedure or information or heading; did you mean 'definition'?",
        ),
        ruleset=f'{rule("a <= 10 mm")}clauses: {{"1.1": {{title: Width, kind: definiton}}}}\n',
    ),
    Wrong(
        "an answer without a reference",
        ("cup.ruleset.yaml:7:15: missing-key: this answer has no 'reference'; expected {reference, date, text}",),
        ruleset=f"{rule('a <= 10 mm')}    answers: [{{text: Mirrors do not count}}]\n",
    ),
    Wrong(
        "brackets too deep",
        (
            "cup.ruleset.yaml:6:114: too-large: the formula has more than 100 levels; split it into derived figures, or take an aggregate for a long sum",
        ),
        ruleset=rule("(" * 300 + "a" + ")" * 300 + " <= 10 mm"),
    ),
    Wrong(
        "an exponent out of bounds",
        (
            "cup.ruleset.yaml:6:25: too-large: the exponent of 'sin(angle)' is out of bounds; expected at most 1,000,000,000 either way",
        ),
        ruleset=rule("sin(angle)^2.1e400 <= 10"),
    ),
    Wrong(
        "a formula with a colon",
        (
            "cup.ruleset.yaml:6:29: yaml-syntax: a second `: ` stands on this line, so YAML cannot tell key from value; expected one `: ` between key and value; put the value between quotes",
        ),
        ruleset=rule("a <= 10 mm if b: 3"),
    ),
    Wrong(
        "a remark inside a formula",
        (
            'cup.ruleset.yaml:6:14: quote-this: YAML ends the value before `<`; expected a formula in quotes; quote this formula: "{a, b} <= 10 mm"',
        ),
        ruleset=rule("{a, b} <= 10 mm"),
    ),
    Wrong(
        "a formula in a list",
        (
            "cup.ruleset.yaml:7:14: yaml-syntax: the bracket `[` that opens here is never closed; expected `]`; close the bracket",
        ),
        ruleset=NUMBERS + "rules:\n  it:\n    each: t in [tyres.front, tyres.rear]\n    require: [t.width <= 305 mm\n",
    ),
    Wrong(
        "an unknown unit in a formula",
        ("cup.ruleset.yaml:6:19: unknown-unit: no unit is written 'milimetre'; did you mean 'm'?",),
        ruleset=rule("a <= 10 milimetre"),
    ),
    Wrong(
        "a lone g",
        (
            "cup.ruleset.yaml:6:19: unknown-unit: no unit is written 'g'; write 'gram' for a mass or 'gn' for an acceleration",
        ),
        ruleset=rule("c <= 500 g"),
    ),
    Wrong(
        "a formula that breaks off",
        (
            "cup.ruleset.yaml:6:18: formula-syntax: the formula ends behind '<='; expected a number, a name, a function or '('; write what follows '<=', or leave it out",
        ),
        ruleset=rule("a <= "),
    ),
    Wrong(
        "a bracket too few",
        ("cup.ruleset.yaml:6:14: formula-syntax: the bracket '(' is not closed; expected ')'; close it with ')'",),
        ruleset=rule("(a + b <= 10 mm"),
    ),
    Wrong(
        "a comparison of equality without a width",
        (
            "cup.ruleset.yaml:6:14: formula-syntax: 'a == 10 mm' compares measured numbers for equality and does not say how close; expected a == b within 1 mm",
        ),
        ruleset=rule("a == 10 mm"),
    ),
    Wrong(
        "no blank behind a unit",
        (
            "cup.ruleset.yaml:6:24: formula-syntax: '*' stands directly behind the unit 'mm'; put a blank behind the unit",
        ),
        ruleset=rule("a <= 10 mm*2"),
    ),
    Wrong(
        "a length added to a mass",
        (
            "cup.ruleset.yaml:6:14: dimension-mismatch: cannot add 'a', length [m], to 'c', mass [kg]; the two sides must be of one dimension",
        ),
        ruleset=rule("a + c <= 10 mm"),
    ),
    Wrong(
        "a length against a mass",
        (
            "cup.ruleset.yaml:6:14: dimension-mismatch: cannot compare 'a', length [m], with '10 kg', mass [kg]; the two sides must be of one dimension",
        ),
        ruleset=rule("a <= 10 kg"),
    ),
    Wrong(
        "a number for a condition",
        (
            "cup.ruleset.yaml:6:14: kind-mismatch: a rule asks for a condition, and 'a + b' is a number; expected a comparison such as x <= 10 mm",
        ),
        ruleset=rule("a + b"),
    ),
    Wrong(
        "a text in order",
        (
            "cup.ruleset.yaml:6:14: kind-mismatch: 'powertrain.kind' is a text and '5' is a number: these have no order; expected numbers of one dimension, or dates",
        ),
        ruleset=rule("powertrain.kind <= 5"),
    ),
    Wrong(
        "a name with a slip",
        (
            "cup.ruleset.yaml:6:14: unknown-name: nothing is called 'dimensions.wheelbas'; did you mean 'dimensions.wheelbase'?",
        ),
        ruleset=rule("dimensions.wheelbas >= 1 m"),
    ),
    Wrong(
        "a field with a slip",
        (
            "cup.ruleset.yaml:5:35: unknown-name: 't' has no field 'widht'; expected width or section_width or diameter or loaded_radius or rim_width or rim_diameter or tread_depth or growth or grip or grip_fade or cornering_factor or cornering_load_factor; did you mean 'width'?",
        ),
        ruleset=NUMBERS + "rules:\n  it: {each: t in tyres, require: t.widht <= 305 mm}\n",
    ),
    Wrong(
        "a function with a slip",
        ("cup.ruleset.yaml:6:14: unknown-function: there is no function 'squrt'; did you mean 'sqrt'?",),
        ruleset=rule("squrt(a * b) <= 10 mm"),
    ),
    Wrong(
        "too many arguments",
        ("cup.ruleset.yaml:6:15: wrong-arguments: 'sqrt' takes 1 argument, not 2",),
        ruleset=rule('"sqrt(a, b) <= 10 mm"'),
    ),
    Wrong(
        "an aggregate without a loop",
        ("cup.ruleset.yaml:6:14: wrong-arguments: 'sum' runs over a collection; expected sum(… for x in collection)",),
        ruleset=rule("sum(a) <= 10 mm"),
    ),
    Wrong(
        "a bare number as an angle",
        ("cup.ruleset.yaml:6:22: ambiguous-angle: 30 is 30 rad; write 30 deg or 30 rad",),
        ruleset=rule("a * sin(30) <= 10 mm"),
    ),
    Wrong(
        "a circle of rules",
        (
            "cup.ruleset.yaml:6:18: cycle: rules refer to each other: rule(one) -> rule(two) -> rule(one); break the circle at one of them",
        ),
        ruleset=NUMBERS + "rules:\n  one: {require: rule(two)}\n  two: {require: rule(one)}\n",
    ),
    Wrong(
        "a circle of figures",
        ("cup.ruleset.yaml:4:11: cycle: 'p' is defined by itself: p -> q -> p; break the circle at one of them",),
        ruleset=NUMBERS
        + "derived: {p: {formula: q + 1 mm, unit: mm}, q: {formula: p - 1 mm, unit: mm}}\nrules:\n  it: {require: p <= 1 mm}\n",
    ),
    Wrong(
        "a ruleset that extends itself",
        ("cup.ruleset.yaml:3:10: cycle: rulesets extend each other: cup.ruleset.yaml extends cup.ruleset.yaml",),
        ruleset="extends: cup.ruleset.yaml\n" + NUMBERS + "rules:\n  it:\n    require: a <= 10 mm\n",
    ),
    Wrong(
        "a key of a rule with a slip",
        ("cup.ruleset.yaml:5:8: unknown-key: there is no key 'requires' here; did you mean 'require'?",),
        ruleset=NUMBERS + "rules:\n  it: {requires: a <= 10 mm}\n",
    ),
    Wrong(
        "a rule that asks for nothing",
        (
            "cup.ruleset.yaml:5:3: missing-key: rule 'it' asks for nothing; expected require, inside, outside, branches, evidence, record, frozen or judgement",
        ),
        ruleset=NUMBERS + "rules:\n  it: {title: Width}\n",
    ),
    Wrong(
        "a ruleset without a name",
        ("cup.ruleset.yaml:1:1: missing-key: 'ruleset:' is missing here; add it",),
        files={"cup.ruleset.yaml": 'edition: "1"\n' + OK},
    ),
    Wrong(
        "a list for a condition",
        ("cup.ruleset.yaml:6:14: bad-structure: this is not what 'require' takes; expected a single value",),
        ruleset=rule("[a <= 10 mm, b <= 10 mm]"),
    ),
    Wrong(
        "a figure and a rule of one name",
        (
            "cup.ruleset.yaml:6:3: name-taken: 'it' is used twice: rules, derived figures, tables, lists, zones and templates share one name space; give one of them another name",
        ),
        ruleset=NUMBERS + "derived: {it: {formula: a + b, unit: mm}}\nrules:\n  it: {require: a <= 10 mm}\n",
    ),
    Wrong(
        "a word of the language as a name",
        (
            "cup.ruleset.yaml:5:3: bad-name: 'within' cannot be a name; expected letters, digits and underscores, a letter first; 'within' is a word of the language",
        ),
        ruleset=NUMBERS + "rules:\n  within: {require: a <= 10 mm}\n",
    ),
    Wrong(
        "a choice with a slip in a formula",
        (
            "cup.ruleset.yaml:6:33: unknown-choice: 'electirc' is not one of the choices here; expected combustion or hybrid or electric; did you mean 'electric'?",
        ),
        ruleset=rule("powertrain.kind == electirc"),
    ),
    Wrong(
        "margins without a common measure",
        (
            "cup.ruleset.yaml:5:3: scale-needed: rule 'it' compares margins that have no common measure; expected scale: a value that margins are measured by",
        ),
        ruleset=rule("a - b >= 0 mm and c >= 1 kg"),
    ),
    Wrong(
        "a state with a slip",
        (
            "cup.ruleset.yaml:5:24: unknown-state: axis 'fuel' has no state 'emtpy'; expected empty; did you mean 'empty'?",
        ),
        design="states: {fuel: {empty: {}}}\n",
        ruleset="states_needed: {fuel: [empty]}\nrules:\n  it: {states: {fuel: [emtpy]}, require: dimensions.wheelbase >= 1 m}\n",
    ),
    Wrong(
        "a day that the calendar has not",
        ("cup.ruleset.yaml:4:24: bad-date: the calendar has no 2027-02-30; expected a day of the calendar",),
        design="",
        ruleset='rules:\n  it: {require: "on <= 2027-02-30"}\n',
    ),
    *(
        Wrong(
            f"a solve {name}",
            (said,),
            ruleset=f"{NUMBERS}derived:\n  d: {{{text}}}\nrules:\n  it: {{require: d <= 10 mm}}\n",
        )
        for name, said, text in (
            (
                "without a range",
                "cup.ruleset.yaml:5:3: bad-structure: a solution is looked for between two ends, not 0; expected between: [from, to]",
                "solve: a, formula: a - b",
            ),
            (
                "with one end",
                "cup.ruleset.yaml:5:27: bad-structure: a solution is looked for between two ends, not 1; expected between: [from, to]",
                "solve: a, between: [1 mm], formula: a - b",
            ),
            (
                "of no input",
                "cup.ruleset.yaml:5:14: unknown-name: there is no input 'aa'; did you mean 'a'?",
                "solve: aa, between: [1 mm, 2 mm], formula: a - b",
            ),
            (
                "of a computed figure",
                "cup.ruleset.yaml:5:14: kind-mismatch: 'mass.total' is a computed figure; expected an input that is a number",
                "solve: mass.total, between: [1 kg, 2 kg], formula: a - b",
            ),
            (
                "that does not read its input",
                "cup.ruleset.yaml:5:49: wrong-arguments: the formula does not rest on 'c'; solve for an input that it reads",
                "solve: c, between: [1 kg, 2 kg], formula: a - b",
            ),
            (
                "of a condition",
                "cup.ruleset.yaml:5:49: kind-mismatch: the formula of a solve is a number that is zero at the solution, and this is a flag; write one side less the other",
                "solve: a, between: [1 mm, 2 mm], formula: a <= b",
            ),
            (
                "with an end in another dimension",
                "cup.ruleset.yaml:5:27: wrong-dimension: an end of the range of 'a' is length [m], and this is mass [kg]; expected a value in mm",
                "solve: a, between: [1 kg, 2 mm], formula: a - b",
            ),
            (
                "with a range and no input",
                "cup.ruleset.yaml:5:17: missing-key: 'between:' says where a solution is looked for; add 'solve:' with the input that is looked for, or take it out",
                "between: [1 mm, 2 mm], formula: a - b",
            ),
            (
                "of itself",
                "cup.ruleset.yaml:5:3: cycle: 'd' is defined by itself: d -> d; break the circle at one of them",
                "solve: a, between: [1 mm, 2 mm], formula: a - d",
            ),
        )
    ),
    Wrong(
        "an envelope: upside down",
        (
            "cup.ruleset.yaml:3:41: bad-value: the range of 'vehicle.speed' runs from 320 km/h to 60 km/h; expected [least, greatest], the least first",
        ),
        design="",
        ruleset="rules: {it: {envelope: {vehicle.speed: [320 km/h, 60 km/h]}, require: dimensions.wheelbase <= 3 m}}\n",
    ),
    Wrong(
        "an envelope: another dimension",
        (
            "cup.ruleset.yaml:3:44: wrong-dimension: 'km' is a unit of length [m], and speed [m/s] is due; expected speed [m/s]; write a unit such as 'km/h'",
        ),
        design="",
        ruleset="rules: {it: {envelope: {vehicle.speed: [60 km, 320 km/h]}, require: dimensions.wheelbase <= 3 m}}\n",
    ),
    Wrong(
        "an envelope: an unknown input",
        (
            "cup.ruleset.yaml:3:25: unknown-name: there is no input 'vehicle.sped'; expected the path of an input; did you mean 'vehicle.speed'?",
        ),
        design="",
        ruleset="rules: {it: {envelope: {vehicle.sped: [60 km/h, 320 km/h]}, require: dimensions.wheelbase <= 3 m}}\n",
    ),
    Wrong(
        "an envelope: a collection",
        (
            "cup.ruleset.yaml:3:25: kind-mismatch: 'masses' is a collection, and an envelope runs through inputs that are numbers; expected an input that is a number, such as vehicle.speed",
        ),
        design="",
        ruleset="rules: {it: {envelope: {masses: [1 kg, 2 kg]}, require: dimensions.wheelbase <= 3 m}}\n",
    ),
    Wrong(
        "an envelope: one end",
        (
            "cup.ruleset.yaml:3:40: bad-structure: the range of 'vehicle.speed' has two ends; expected {vehicle.speed: [60 km/h, 320 km/h]}",
        ),
        design="",
        ruleset="rules: {it: {envelope: {vehicle.speed: [60 km/h]}, require: dimensions.wheelbase <= 3 m}}\n",
    ),
    Wrong(
        "an envelope: nothing",
        (
            "cup.ruleset.yaml:3:24: bad-structure: an envelope has a range for each input; expected {vehicle.speed: [60 km/h, 320 km/h]}",
        ),
        design="",
        ruleset="rules: {it: {envelope: {}, require: dimensions.wheelbase <= 3 m}}\n",
    ),
    Wrong(
        "an envelope: not a mapping",
        (
            "cup.ruleset.yaml:3:24: bad-structure: an envelope has a range for each input; expected {vehicle.speed: [60 km/h, 320 km/h]}",
        ),
        design="",
        ruleset="rules: {it: {envelope: vehicle.speed, require: dimensions.wheelbase <= 3 m}}\n",
    ),
    Wrong(
        "an envelope: with a spread",
        ("cup.ruleset.yaml:3:41: bad-value: an end of a range has no spread; expected a plain value",),
        design="",
        ruleset="rules: {it: {envelope: {vehicle.speed: [60 km/h ± 1 km/h, 320 km/h]}, require: dimensions.wheelbase <= 3 m}}\n",
    ),
    Wrong(
        "an envelope through what a state sets",
        (
            "cup.ruleset.yaml:4:40: state-clash: a state sets 'vehicle.speed', through which the envelope of rule 'it' runs; leave that axis out of 'states', or out of 'envelope'",
        ),
        design="states: {pace: {slow: {vehicle.speed: 50 km/h}}}\n",
        ruleset="states_needed: {pace: [slow]}\nrules: {it: {states: every, envelope: {vehicle.speed: [60 km/h, 320 km/h]}, require: vehicle.speed <= 100 m/s}}\n",
    ),
)
