"""Sample operands of every operation, used by the tests that take each one through every reader."""

from __future__ import annotations

from datetime import date
from fractions import Fraction as F

from rulecheck.operations.arithmetic import rational_power
from rulecheck.operations.catalogue import CATALOGUE
from rulecheck.operations.operation import Operation

DAY = date(2028, 2, 29).toordinal()
LATER = date(2031, 7, 1).toordinal()

NUMBERS = [(F(3),), (F(-7, 3),), (F(1, 8),)]
PAIRS = [(F(3), F(2)), (F(-7, 3), F(5, 4)), (F(1, 8), F(-11, 7))]
MANY = [(F(3),), (F(3), F(1), F(-2)), (F(5, 7), F(5, 7), F(9)), (F(-2), F(4), F(4), F(1))]
KEPT = [
    (True, F(3), False, F(-9), True, F(5, 2)),
    (True, F(1, 3), True, F(2, 3), True, F(7)),
    (False, F(1), True, F(2), True, F(3)),
]
TURNS = [(F(7, 4), F(1, 4)), (F(-7, 4), F(1, 4)), (F(5, 8), F(1, 4)), (F(22, 7), F(1, 3)), (F(9, 2), F(3))]


def each(names, samples):
    """The same samples for several operations."""
    return {name: samples for name in names}


SAMPLES: dict[str, list[tuple[object, ...]]] = {
    **each(("add", "subtract", "multiply", "divide"), PAIRS),
    **each(("negate", "abs", "exp", "sin", "cos", "tan", "atan", "sinh", "cosh", "tanh"), NUMBERS),
    **each(("sqrt", "ln", "log10"), [(F(3),), (F(9, 4),), (F(1, 8),), (F(1000),)]),
    **each(("asin", "acos"), [(F(1, 3),), (F(-7, 9),), (F(0),)]),
    **each(("total", "minimum", "maximum"), MANY),
    **each(("total_where", "mean_where", "deviation_where", "least_where", "greatest_where"), KEPT),
    **each(("floor", "ceil", "round"), [(F(7, 3),), (F(-7, 3),), (F(5, 2),), (F(-5, 2),), (F(4),)]),
    **each(("floor_to", "ceil_to", "round_to", "even_to"), TURNS),
    **each(("at_most", "below", "equal"), [*PAIRS, (F(1, 3), F(1, 3)), (F(-1), F(2))]),
    **each(("both", "either"), [(True, True), (True, False), (False, False, False)]),
    "power": [(F(2), F(3)), (F(9, 4), F(-1, 2)), (F(3, 2), F(7, 5)), (F(5), F(1, 3))],
    "atan2": [(F(1), F(2)), (F(3, 2), F(-5)), (F(-2), F(-2)), (F(-1, 3), F(4))],
    "count_where": [(True, False, True), (False,), (True, True, True)],
    "same_text": [("rear", "rear"), ("rear", "front")],
    "negation": [(True,), (False,)],
    "reconcile": [(F(5, 2), True)],
    "ordinal": [(DAY,)],
    "add_days": [(DAY, F(400)), (DAY, F(-60))],
    "add_months": [(DAY, F(12)), (DAY, F(-3)), (DAY, F(48))],
    "end_of_year": [(DAY,), (LATER,)],
    "years_between": [(DAY, LATER), (LATER, DAY), (DAY, date(2029, 2, 28).toordinal())],
}

POWERS = [rational_power(F(text)) for text in ("2", "-1", "1/3", "-3/2", "0", "5")]

CASES: list[tuple[Operation, tuple[object, ...]]] = [
    *((CATALOGUE[name], sample) for name, samples in SAMPLES.items() for sample in samples),
    *((operation, sample) for operation in POWERS for sample in ((F(3),), (F(9, 4),), (F(1, 27),))),
]


def label(value: object) -> str:
    """The identity of a case in the test's name."""
    return value.name if isinstance(value, Operation) else ""
