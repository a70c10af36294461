from __future__ import annotations

from fractions import Fraction

import pytest

from rulecheck.diagnostics import Faults, Span
from rulecheck.quantity.dimension import LENGTH
from rulecheck.quantity.quantity import Quantity
from rulecheck.quantity.reading_records import read_stated
from rulecheck.reading.nodes import Entry, Located, Mapping, Node, Sequence

SPAN = Span("a.yaml", 0, 1, 1, 1)


def stated(**texts: str) -> Mapping:
    return Mapping(tuple(Entry(Located(key, SPAN), Located(text, SPAN)) for key, text in texts.items()), SPAN)


def read(node: Node) -> tuple[Quantity | None, list[str]]:
    faults = Faults()
    found = read_stated(node, LENGTH, faults=faults)
    assert (found is None) == bool(faults)
    return found, [item.code for item in faults.found]


@pytest.mark.parametrize(
    ("node", "shown"),
    [
        (Located("1895 mm", SPAN), "1895 mm"),
        (stated(value="1895 mm"), "1895 mm"),
        (stated(value="1895 mm", uncertainty="0.6 mm", coverage="2"), "1895 mm ± 0.6 mm (k=2)"),
        (stated(value="1895 mm", uncertainty="0.06 cm"), "1895 mm ± 0.6 mm"),
        (stated(value="1895 mm", uncertainty="1 mm", shape="triangular"), "1895 mm ± 1 mm (triangular)"),
        (stated(value="1895 mm", uncertainty="1 mm", shape="normal", coverage="2"), "1895 mm ± 1 mm (k=2)"),
        (stated(value="1895 mm", tolerance="+0/-2 mm"), "1895 mm +0/-2 mm"),
        (stated(value="1895 mm", tolerance="1 mm"), "1895 mm +1/-1 mm"),
        (stated(value="1895 mm ± 1 mm", basis="measured"), "1895 mm ± 1 mm"),
    ],
)
def test_stated_values_are_read(node: Node, shown: str) -> None:
    found, _ = read(node)
    assert str(found) == shown


def test_what_is_said_of_a_value_is_kept() -> None:
    found, _ = read(stated(value="1 m", basis="measured", reference="sheet 14", definition="wheel planes"))
    assert found is not None
    assert (found.value, found.basis, found.reference, found.definition) == (
        Fraction(1),
        "measured",
        "sheet 14",
        "wheel planes",
    )


@pytest.mark.parametrize(
    ("node", "code"),
    [
        (stated(uncertainty="1 mm"), "missing-key"),
        (stated(value="1895"), "unit-missing"),
        (stated(value="1895 mm", colour="red"), "unknown-key"),
        (stated(value="1895 mm", basis="guessed"), "unknown-choice"),
        (stated(value="1895 mm", uncertainty="1 mm", shape="square"), "unknown-choice"),
        (stated(value="1895 mm", uncertainty="1"), "unit-missing"),
        (stated(value="1895 mm", uncertainty="1 kg"), "wrong-dimension"),
        (stated(value="1895 mm", uncertainty="-1 mm"), "bad-value"),
        (stated(value="1895 mm", uncertainty="1 mm", coverage="0"), "bad-value"),
        (stated(value="1895 mm", uncertainty="1 mm", coverage="2", shape="triangular"), "bad-value"),
        (stated(value="1895 mm", uncertainty="1 mm", shape="normal"), "bad-value"),
        (stated(value="1895 mm", coverage="2"), "bad-value"),
        (stated(value="1895 mm", uncertainty="1 mm", tolerance="+0/-2 mm"), "bad-value"),
        (stated(value="1895 mm ± 1 mm", uncertainty="1 mm"), "bad-value"),
        (stated(value="1895 mm", tolerance="+0/-2"), "unit-missing"),
        (stated(value="1895 mm", tolerance="+0/-2 mm more"), "bad-value"),
        (stated(value="1895 mm", tolerance="wide"), "unknown-unit"),
        (Sequence((), SPAN), "bad-value"),
    ],
)
def test_faults_of_stated_values(node: Node, code: str) -> None:
    found, codes = read(node)
    assert found is None
    assert codes[0] == code
