from __future__ import annotations

import dataclasses
import typing

from rulecheck.diagnostics import Span
from rulecheck.formula.parser import parse_formula
from rulecheck.formula.syntax import Syntax
from rulecheck.formula.walk import names, parts, walk
from rulecheck.reading.nodes import Located

EVERY_KIND = (
    'f(-a, g(b).x) + [c, 5 mm] == (d if not e and yes else 2027-03-01) within h or sum(i * "j" for k in l where m) < n'
)


def parse(text: str) -> Syntax:
    return parse_formula(Located(text, Span("a.yaml", 0, len(text), 1, 1)))


def test_names_stand_in_the_order_of_the_text() -> None:
    assert [".".join(name.path) for name in names(parse(EVERY_KIND))] == list("abcdehilmn")


def test_walk_meets_every_kind_of_node() -> None:
    assert {type(node) for node in walk(parse(EVERY_KIND))} == set(typing.get_args(Syntax))


def test_parts_leave_out_no_field_that_holds_syntax() -> None:
    kinds = typing.get_args(Syntax)
    for node in walk(parse(EVERY_KIND)):
        held: list[object] = []
        for field in dataclasses.fields(node):
            value = getattr(node, field.name)
            held.extend(value if isinstance(value, tuple) else [value])
        assert set(parts(node)) == {item for item in held if isinstance(item, kinds)}


def test_a_node_comes_before_its_parts() -> None:
    tree = parse("a + b * c")
    assert [type(node).__name__ for node in walk(tree)] == ["Binary", "Name", "Binary", "Name", "Name"]
    assert next(iter(walk(tree))) is tree
