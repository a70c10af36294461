"""Formulas that YAML reads as something else, and files that are right as they stand."""

from __future__ import annotations

import pytest

from rulecheck.diagnostics import Diagnostic, Refused
from rulecheck.reading.nodes import Located, Mapping
from rulecheck.reading.yaml_reader import parse_yaml
from rulecheck.reading.yaml_traps import openness, quoted, value_end


def refused(text: str) -> tuple[Diagnostic, ...]:
    with pytest.raises(Refused) as caught:
        parse_yaml(text, "a.yaml")
    return caught.value.diagnostics


@pytest.mark.parametrize(
    ("text", "formula"),
    [
        ("a: {formula: max(a, b), unit: mm}", "max(a, b)"),
        ("a: {formula: max(a, b, b, min(c, d)) * 2, unit: mm}", "max(a, b, b, min(c, d)) * 2"),
        ("a: {unit: mm, formula: f(a,\n  b)}", "f(a,\n  b)"),
        ("a: {formula: max(b, [c, d]), unit: mm}", "max(b, [c, d])"),
        ("[min(a, b) <= c]", "min(a, b) <= c"),
        ("a: {require: x in [a, b], clause: 3}", "x in [a, b]"),
        ("a: {each: t in [a, b]}", "t in [a, b]"),
        ('a: {require: "25CrMo4" in grades, clause: 3}', '"25CrMo4" in grades'),
        ("a: *b + c", "*b + c"),
        ("a: * 2", "* 2"),
        ("a: {b: *x + 1, c: 2}", "*x + 1"),
        ("- *a", "*a"),
        ("a: >= 1525 mm  # least", ">= 1525 mm"),
        ("a: > 3 mm", "> 3 mm"),
        ("a: >3\nb: 1", ">3"),
        ("- >= 3", ">= 3"),
        ("a: {b: >= 3, c: 1}", ">= 3"),
        ("a: != rear", "!= rear"),
        ("a: % of x", "% of x"),
        ("a: @x", "@x"),
        ("a: `x`", "`x`"),
        ("a: & b", "& b"),
        ("a: - x", "- x"),
        ("a: ? x", "? x"),
        ("a: [b, c] and d", "[b, c] and d"),
        ('a: "25CrMo4" in grades', '"25CrMo4" in grades'),
        ('- "25CrMo4" in grades', '"25CrMo4" in grades'),
        ("a: (b) and max(c, # the first\n  d)", "(b) and max(c, # the first"),
        ("a: [max(c # the first", "max(c # the first"),
        ('a: grade == "no # 5"', 'grade == "no # 5"'),
        ("a: x in [b, # the first\n  c]", "x in [b, # the first"),
    ],
)
def test_is_answered_with_quote_this(text: str, formula: str) -> None:
    (item,) = refused(text)
    assert item.code == "quote-this"
    assert item.span is not None
    assert text[item.span.start : item.span.end] == formula
    assert item.advice.startswith("quote this formula")


@pytest.mark.parametrize(
    "text",
    [
        "a: {formula: max(a, b), unit: mm}",
        "a: {require: x in [a, b], clause: 3}",
        "a: *b + c",
        "a: >= 1525 mm",
        "a: != rear",
        'a: "25CrMo4" in grades',
        "a: {b: it's max(a, b)}",
    ],
)
def test_the_advice_is_right(text: str) -> None:
    """Putting in what the advice shows gives a file that reads, with the formula as the value."""
    (item,) = refused(text)
    assert item.span is not None
    formula = text[item.span.start : item.span.end]
    shown = item.advice.removeprefix("quote this formula: ")
    node = parse_yaml(text[: item.span.start] + shown + text[item.span.end :], "a.yaml")
    values: list[str] = []
    while isinstance(node, Mapping):
        values += [entry.value.text for entry in node if isinstance(entry.value, Located)]
        node = node.entries[0].value
    assert formula in values


@pytest.mark.parametrize(
    "text",
    [
        "a: max(b, c) <= 3 mm  # the larger",
        "a: f(max(b, c),\n  d)  # over two lines",
        "a: t in [corners.front_left, corners.front_right]  # two of four",
        "a: {note: see (a}",
        "a: [1) first, 2) second]",
        "a: {at: 1250 0 310 mm, basis: weighed}",
        'a: ["a, b in pairs(lamps)", "p in points"]',
        "a: {note: (see 3), other: (see 4)}",
        'a: rim 13"   # of 14"',
        'a: "max(b"  # quoted',
        "a: 'x # y'",
        "a: x#y",
        "a: -x",
        "a: {b: -x, c: +0/-2 mm}",
        "a: >\n  > 3 # kept\n  (open\n",
        "a: >2\n   text\n",
        "a: |\n  max(b, # remark\n  c)\n",
        "a: {b: [(1), (2)], c: 'x), ('}",
        "- - x\n- - y",
        "a: {b: 1895 mm ± 0.6 mm (k=2), c: 3 mm ± 1 mm (k=2)}",
    ],
)
def test_files_that_are_right_are_left_alone(text: str) -> None:
    parse_yaml(text, "a.yaml")


def test_a_formula_that_is_long_is_not_shown_again() -> None:
    (item,) = refused("a: {b: max(" + "x, " * 500 + "y)}")
    assert item.advice == "quote this formula"


@pytest.mark.parametrize(
    ("formula", "written"),
    [
        ("max(a, b)", '"max(a, b)"'),
        ('x in ["A"]', "'x in [\"A\"]'"),
        ('"A" == driver\'s', "'\"A\" == driver''s'"),
        ("a\n   b", '"a b"'),
        ("a \\ b", "'a \\ b'"),
    ],
)
def test_quoted(formula: str, written: str) -> None:
    assert quoted(formula) == written
    value = parse_yaml(written, "a.yaml")
    assert isinstance(value, Located)
    assert value.text == " ".join(formula.split())


@pytest.mark.parametrize(
    ("text", "flow", "value"),
    [
        ("a, b", False, "a, b"),
        ("a, b", True, "a"),
        ("f(a, [b]), c", True, "f(a, [b])"),
        ("a]", True, "a"),
        ("a]", False, "a]"),
        ('"x, y" in z, b', True, '"x, y" in z'),
        ("a   # b", False, "a"),
        ("a \nb", False, "a"),
        ('"a', True, '"a'),
    ],
)
def test_where_a_value_ends(text: str, flow: bool, value: str) -> None:
    assert text[: value_end(text, 0, flow)] == value


def test_openness_leaves_quoted_text_out() -> None:
    assert openness('f("(((", (') == 2
    assert openness("a))") == -2
    assert openness("[(", "([", ")]") == 2
