"""Wrong correlations, decision rules and scrutineers' instruments, with what is said of them."""

from __future__ import annotations

from wrong_inputs import Wrong

TRACKS = "dimensions: {front_track: 1500 mm ± 1 mm, rear_track: 1510 mm ± 1 mm, wheelbase: 2700 mm ± 1 mm}\n"
A_RULE = "rules:\n  it: {require: dimensions.wheelbase >= 2 m%s}\n"


def _correlated(text: str) -> str:
    return f"{TRACKS}correlations: {text}\n"


def _ruled(text: str) -> str:
    return A_RULE % f", {text}"


CASES: tuple[tuple[str, str, str], ...] = (
    ("correlations that are no list", _correlated("{between: [a, b]}"), A_RULE % ""),
    ("a correlation without keys", _correlated("[dimensions.front_track]"), A_RULE % ""),
    (
        "a correlation with a slip",
        _correlated("[{betwen: [dimensions.front_track, dimensions.rear_track], coefficient: 1}]"),
        A_RULE % "",
    ),
    ("a correlation of one input", _correlated("[{between: [dimensions.front_track], coefficient: 1}]"), A_RULE % ""),
    (
        "a correlation of an input with itself",
        _correlated("[{between: [dimensions.front_track, dimensions.front_track], coefficient: 1}]"),
        A_RULE % "",
    ),
    (
        "a correlation of what is not stated",
        _correlated("[{between: [dimensions.front_track, dimensions.rear_trak], coefficient: 1}]"),
        A_RULE % "",
    ),
    (
        "a correlation without a coefficient",
        _correlated("[{between: [dimensions.front_track, dimensions.rear_track]}]"),
        A_RULE % "",
    ),
    (
        "a correlation above one",
        _correlated("[{between: [dimensions.front_track, dimensions.rear_track], coefficient: 1.2}]"),
        A_RULE % "",
    ),
    (
        "two correlations of one pair",
        _correlated(
            "[{between: [dimensions.front_track, dimensions.rear_track], coefficient: 0.5}, "
            "{between: [dimensions.rear_track, dimensions.front_track], coefficient: 0.6}]"
        ),
        A_RULE % "",
    ),
    (
        "correlations that contradict each other",
        _correlated(
            "[{between: [dimensions.front_track, dimensions.rear_track], coefficient: 0.9}, "
            "{between: [dimensions.rear_track, dimensions.wheelbase], coefficient: 0.9}, "
            "{between: [dimensions.front_track, dimensions.wheelbase], coefficient: -0.9}]"
        ),
        A_RULE % "",
    ),
    ("a decision rule that is none", TRACKS, _ruled("decision: gaurded")),
    ("a decision rule without its name", TRACKS, _ruled("decision: {coverage: 2}")),
    ("a decision rule with a factor that is not its own", TRACKS, _ruled("decision: {rule: simple, coverage: 2}")),
    ("a guard band of no width", TRACKS, _ruled("decision: {rule: guarded, coverage: 0}")),
    ("a decision rule as a list", TRACKS, _ruled("decision: [guarded]")),
    ("a decision rule of the rule book that is none", TRACKS, "decision: bold\n" + A_RULE % ""),
    ("a scrutineer of one word", TRACKS, _ruled("scrutineer: tape")),
    ("a scrutineer with a slip", TRACKS, _ruled("scrutineer: {uncertanty: 1 mm}")),
    ("a scrutineer's shape without a width", TRACKS, _ruled("scrutineer: {shape: triangular}")),
    ("a scrutineer's shape that is none", TRACKS, _ruled("scrutineer: {uncertainty: 1 mm, shape: round}")),
    ("a scrutineer's negative width", TRACKS, _ruled("scrutineer: {uncertainty: -1 mm}")),
    (
        "a scrutineer's normal shape without a factor",
        TRACKS,
        _ruled("scrutineer: {uncertainty: 1 mm, shape: normal}"),
    ),
    ("a scrutineer with a scale at a length", TRACKS, _ruled("scrutineer: {uncertainty: 1 kg, tolerance: 1 deg}")),
    (
        "a point with two spreads",
        TRACKS + "points: {nose: {value: 0 0 100 mm, uncertainty: 1 mm, tolerance: 1 mm}}\n",
        A_RULE % "",
    ),
)

SAID: dict[str, tuple[str, ...]] = {
    "correlations that are no list": (
        "car.design.yaml:5:15: bad-structure: correlations are a list; expected [{between: [path, path], coefficient: 0.8}]",
    ),
    "a correlation without keys": (
        "car.design.yaml:5:16: bad-structure: a correlation has keys; expected {between: [path, path], coefficient: 0.8}",
    ),
    "a correlation with a slip": (
        "car.design.yaml:5:16: bad-structure: 'between' names two inputs or more; expected between: [path, path]",
        "car.design.yaml:5:17: unknown-key: a correlation has no key 'betwen'; expected between or coefficient or because; did you mean 'between'?",
    ),
    "a correlation of one input": (
        "car.design.yaml:5:26: bad-structure: 'between' names two inputs or more; expected between: [path, path]",
    ),
    "a correlation of an input with itself": (
        "car.design.yaml:5:51: name-taken: 'dimensions.front_track' stands twice in one correlation; name it once",
    ),
    "a correlation of what is not stated": (
        "car.design.yaml:5:51: unknown-name: the design gives nothing under 'dimensions.rear_trak'; did you mean 'dimensions.rear_track'?",
    ),
    "a correlation without a coefficient": (
        "car.design.yaml:5:16: missing-key: 'coefficient:' is missing here; expected a number from -1 to 1",
    ),
    "a correlation above one": (
        "car.design.yaml:5:88: bad-value: a correlation lies between -1 and 1; expected a number from -1 to 1",
    ),
    "two correlations of one pair": (
        "car.design.yaml:5:94: name-taken: 'dimensions.rear_track' and 'dimensions.front_track' are correlated twice; state each pair once",
    ),
    "correlations that contradict each other": (
        "car.design.yaml:5:15: bad-value: these correlations contradict each other: a sum of the values would have a negative variance; lower the coefficients, or correlate the third pair of such a triangle too",
    ),
    "a decision rule that is none": (
        "cup.ruleset.yaml:4:56: unknown-choice: 'gaurded' is no decision rule; expected simple or guarded or worst case; did you mean 'guarded'?",
    ),
    "a decision rule without its name": (
        "cup.ruleset.yaml:4:56: missing-key: 'rule:' is missing here; expected simple or guarded or worst case",
    ),
    "a decision rule with a factor that is not its own": (
        "cup.ruleset.yaml:4:81: bad-value: the decision rule 'simple' has no coverage factor; leave it out; it is the guard band's",
    ),
    "a guard band of no width": (
        "cup.ruleset.yaml:4:82: bad-value: a coverage factor is above zero; write 'coverage: 2'",
    ),
    "a decision rule as a list": (
        "cup.ruleset.yaml:4:56: bad-structure: a decision rule has keys; expected rule, coverage",
    ),
    "a decision rule of the rule book that is none": (
        "cup.ruleset.yaml:3:11: unknown-choice: 'bold' is no decision rule; expected simple or guarded or worst case",
    ),
    "a scrutineer of one word": (
        "cup.ruleset.yaml:4:58: bad-structure: what the scrutineer measures with has keys; expected uncertainty, coverage, shape, tolerance",
    ),
    "a scrutineer with a slip": (
        "cup.ruleset.yaml:4:59: unknown-key: what the scrutineer measures with has no key 'uncertanty'; expected uncertainty or coverage or shape or tolerance; did you mean 'uncertainty'?",
    ),
    "a scrutineer's shape without a width": (
        "cup.ruleset.yaml:4:66: bad-value: 'shape' stands beside an 'uncertainty' alone; state the uncertainty too",
    ),
    "a scrutineer's shape that is none": (
        "cup.ruleset.yaml:4:85: unknown-choice: 'round' is no shape; expected normal or rectangular or triangular",
    ),
    "a scrutineer's negative width": (
        "cup.ruleset.yaml:4:72: bad-value: the scrutineer's uncertainty is a width that is not negative; write a half width with its unit, such as '1 mm'",
    ),
    "a scrutineer's normal shape without a factor": (
        "cup.ruleset.yaml:4:85: bad-value: a coverage factor and the shape 'normal' belong together; state both, or neither",
    ),
    "a scrutineer with a scale at a length": (
        "cup.ruleset.yaml:4:58: wrong-dimension: the scrutineer's uncertainty of rule 'it' is mass [kg], and its margin is not; expected length [m]",
        "cup.ruleset.yaml:4:58: wrong-dimension: the scrutineer's tolerance of rule 'it' is pure number [1], and its margin is not; expected length [m]",
    ),
    "a point with two spreads": ("car.design.yaml:5:66: bad-value: this value has two spreads; state one of them",),
}

WRONG_SPREAD = tuple(Wrong(name, SAID[name], design, ruleset) for name, design, ruleset in CASES)
