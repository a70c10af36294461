from __future__ import annotations

from fractions import Fraction

import pytest

from rulecheck.diagnostics import Refused, Span
from rulecheck.formula.parser import parse_each, parse_formula
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import (
    Aggregate,
    Binary,
    Call,
    Comparison,
    Conditional,
    Day,
    Flag,
    Joined,
    Listing,
    Member,
    Name,
    Negative,
    Not,
    Number,
    Syntax,
    Text,
)
from rulecheck.formula.token_reader import MAXIMUM_DEPTH
from rulecheck.formula.walk import walk
from rulecheck.reading.nodes import Located

SPAN = Span("a.yaml", 0, 0, 1, 1)


def parse(text: str) -> Syntax:
    return parse_formula(Located(text, SPAN))


def name(path: str) -> Name:
    return Name(tuple(path.split(".")), span=SPAN)


def number(text: str, unit: str | None = None) -> Number:
    return Number(Fraction(text), unit, text, span=SPAN)


A, B, C, D, E = (name(letter) for letter in "abcde")


def binary(operator: str, left: Syntax, right: Syntax) -> Binary:
    return Binary(operator, left, right, span=SPAN)  # type: ignore[arg-type]


def compare(*parts: Syntax | str, within: Syntax | None = None) -> Comparison:
    operators = tuple(part for part in parts if isinstance(part, str))
    operands = tuple(part for part in parts if not isinstance(part, str))
    return Comparison(operands, operators, within, span=SPAN)  # type: ignore[arg-type]


TREES = {
    "a": A,
    "yes": Flag(True, span=SPAN),
    "no": Flag(False, span=SPAN),
    "2027-03-01": Day("2027-03-01", span=SPAN),
    '"25CrMo4"': Text("25CrMo4", span=SPAN),
    "1.5e-6": number("1.5e-6"),
    "1900 mm": number("1900", "mm"),
    # Rule 4: an area, and a squared length.
    "3 m^2": number("3", "m^2"),
    "(3 m)^2": binary("^", number("3", "m"), number("2")),
    "3 m ^ 2": binary("^", number("3", "m"), number("2")),
    "13 kN / h.strength": binary("/", number("13", "kN"), name("h.strength")),
    # Rule 13: from the left, from the right, and how closely each holds.
    "a - b - c": binary("-", binary("-", A, B), C),
    "a - (b - c)": binary("-", A, binary("-", B, C)),
    "a / b / c": binary("/", binary("/", A, B), C),
    "a / b * c": binary("*", binary("/", A, B), C),
    "a ^ b ^ c": binary("^", A, binary("^", B, C)),
    "(a ^ b) ^ c": binary("^", binary("^", A, B), C),
    "a + b * c ^ d": binary("+", A, binary("*", B, binary("^", C, D))),
    "-a ^ b": Negative(binary("^", A, B), span=SPAN),
    "a ^ -b": binary("^", A, Negative(B, span=SPAN)),
    "a ^ -b ^ c": binary("^", A, Negative(binary("^", B, C), span=SPAN)),
    "-a * b": binary("*", Negative(A, span=SPAN), B),
    "a - -b": binary("-", A, Negative(B, span=SPAN)),
    "--a": Negative(Negative(A, span=SPAN), span=SPAN),
    "-5 mm": Negative(number("5", "mm"), span=SPAN),
    "a + b <= c * d": compare(binary("+", A, B), "<=", binary("*", C, D)),
    "not a == b": Not(compare(A, "==", B), span=SPAN),
    "not not a": Not(Not(A, span=SPAN), span=SPAN),
    "not a and b": Joined("and", (Not(A, span=SPAN), B), span=SPAN),
    "a or b and c or d": Joined("or", (A, Joined("and", (B, C), span=SPAN), D), span=SPAN),
    "a and b and c": Joined("and", (A, B, C), span=SPAN),
    "(a and b) and c": Joined("and", (Joined("and", (A, B), span=SPAN), C), span=SPAN),
    "(a or b) and c": Joined("and", (Joined("or", (A, B), span=SPAN), C), span=SPAN),
    # Rule 8: chains, and comparisons in parentheses.
    "a <= b < c": compare(A, "<=", B, "<", C),
    "a >= b > c": compare(A, ">=", B, ">", C),
    "(a < b) == c": compare(compare(A, "<", B), "==", C),
    "a == b within c + d": compare(A, "==", B, within=binary("+", C, D)),
    "a == b within c and d": Joined("and", (compare(A, "==", B, within=C), D), span=SPAN),
    "(3) in a": compare(number("3"), "in", A),
    "3 mm in [a, b]": compare(number("3", "mm"), "in", Listing((A, B), span=SPAN)),
    "3 in in a": compare(number("3", "in"), "in", A),
    # Rule 7: conditionals.
    "a if b else c": Conditional(A, B, C, span=SPAN),
    "a if b else c if d else e": Conditional(A, B, Conditional(C, D, E, span=SPAN), span=SPAN),
    "(a if b else c) if d else e": Conditional(Conditional(A, B, C, span=SPAN), D, E, span=SPAN),
    "a + b if c < d or e else a": Conditional(
        binary("+", A, B), Joined("or", (compare(C, "<", D), E), span=SPAN), A, span=SPAN
    ),
    "a <= (b if c else d)": compare(A, "<=", Conditional(B, C, D, span=SPAN)),
    "(a <= b) if c else (not d)": Conditional(compare(A, "<=", B), C, Not(D, span=SPAN), span=SPAN),
    # Calls, fields and lists.
    "f()": Call("f", (), span=SPAN),
    "min(a, b)": Call("min", (A, B), span=SPAN),
    "f (a)": Call("f", (A,), span=SPAN),
    "engine.torque(a)": Call("engine.torque", (A,), span=SPAN),
    "f(a if b else c, d < e)": Call("f", (Conditional(A, B, C, span=SPAN), compare(D, "<", E)), span=SPAN),
    "f(a, b).x": Member(Call("f", (A, B), span=SPAN), ("x",), span=SPAN),
    "f(a).x.y": Member(Call("f", (A,), span=SPAN), ("x", "y"), span=SPAN),
    "(f(a).x).y": Member(Member(Call("f", (A,), span=SPAN), ("x",), span=SPAN), ("y",), span=SPAN),
    "(a if b else c).x": Member(Conditional(A, B, C, span=SPAN), ("x",), span=SPAN),
    "-f(a).x ^ b": Negative(binary("^", Member(Call("f", (A,), span=SPAN), ("x",), span=SPAN), B), span=SPAN),
    # Rule 9: aggregates.
    "sum(m.mass for m in masses)": Aggregate("sum", name("m.mass"), ("m",), name("masses"), span=SPAN),
    "count(for h in a where h.b >= 13 kN)": Aggregate(
        "count", None, ("h",), A, compare(name("h.b"), ">=", number("13", "kN")), span=SPAN
    ),
    "every(a.x < b.x for a, b in pairs(c))": Aggregate(
        "every", compare(name("a.x"), "<", name("b.x")), ("a", "b"), Call("pairs", (C,), span=SPAN), span=SPAN
    ),
    "max(t.x for t in [a, b] where c if d else e)": Aggregate(
        "max", name("t.x"), ("t",), Listing((A, B), span=SPAN), Conditional(C, D, E, span=SPAN), span=SPAN
    ),
}


@pytest.mark.parametrize(("text", "tree"), TREES.items(), ids=list(TREES))
def test_text_gives_its_tree(text: str, tree: Syntax) -> None:
    assert parse(text) == tree


@pytest.mark.parametrize(
    "text",
    [
        # The shapes of the language, one by one.
        "dimensions.wheelbase >= 1525 mm",
        "30 % <= aero.front_share <= 55 %",
        "min(dimensions.front_track, dimensions.rear_track) >= 75 % * max(dimensions.front_track, dimensions.rear_track)",
        "fuel.flow <= (90 kg/h if engine.speed >= 9000 rpm else k * engine.speed)",
        "powertrain.kind == electric",
        "count(for h in harness_points where h.strength >= 13 kN) >= 6",
        "sum(b.mass for b in ballast) <= 20 kg",
        "abs(points.left.y + points.right.y) <= 3 mm",
        "angle(line(a, b), vertical, side) <= 10 deg",
        "setup.mass >= 300 kg and result.mean_deceleration <= 20 gn",
        'members.hoop.material in ["25CrMo4", "15CDV6"]',
        "present(aero_surfaces.rear_wing)",
        "options.traction_control == no",
        "on <= end_of_year(evidence.belt.made + 5 years)",
        "rule(overall_width) and margin(overall_width) >= 10 mm",
        "longest(s > 5 V) <= 30 ms",
        "d >= 6 mm or d >= 0.25 in",
        "share(for s in samples where s.mass > 3 kg) >= 90 %",
        "depth(p, hull([a, b, c])) >= 0 mm",
        "a == b within 1 mm",
    ],
)
def test_the_forms_of_the_language_print_as_written(text: str) -> None:
    assert show(parse(text)) == text


@pytest.mark.parametrize(
    ("text", "variables", "collection", "where"),
    [
        ("t in tyres", ("t",), "tyres", None),
        ("t in tyres where t.axle == rear", ("t",), "tyres", "t.axle == rear"),
        ("a, b in pairs(lamps)", ("a", "b"), "pairs(lamps)", None),
        ("t in [corners.front_left, corners.front_right]", ("t",), "[corners.front_left, corners.front_right]", None),
    ],
)
def test_each(text: str, variables: tuple[str, ...], collection: str, where: str | None) -> None:
    each = parse_each(Located(text, SPAN))
    assert each.variables == variables
    assert each.collection == parse(collection)
    assert each.where == (None if where is None else parse(where))
    assert (each.span.start, each.span.end) == (0, len(text))


def test_places_of_parts() -> None:
    text = "(a + bb) * f(c).x <= 5 mm"
    where = Located(text, Span("a.yaml", 100, 125, 7, 11))
    found = [(text[node.span.start - 100 : node.span.end - 100], str(node.span)) for node in walk(parse_formula(where))]
    assert found == [
        ("(a + bb) * f(c).x <= 5 mm", "a.yaml:7:11"),
        ("(a + bb) * f(c).x", "a.yaml:7:11"),
        ("a + bb", "a.yaml:7:12"),
        ("a", "a.yaml:7:12"),
        ("bb", "a.yaml:7:16"),
        ("f(c).x", "a.yaml:7:22"),
        ("f(c)", "a.yaml:7:22"),
        ("c", "a.yaml:7:24"),
        ("5 mm", "a.yaml:7:32"),
    ]


def test_places_do_not_count_in_equality_and_values_do() -> None:
    assert parse("a+b") == parse("  (a)  + b")
    assert hash(parse("a+b")) == hash(parse("  (a)  + b"))
    assert parse("1.50 m") == parse("1.5 m")
    assert parse("1500 mm") != parse("1.5 m")


NESTS = {
    "parentheses": lambda count: "(" * count + "a" + ")" * count,
    "calls": lambda count: "f(" * count + "a" + ")" * count,
    "lists": lambda count: "[" * count + "a" + "]" * count,
    "minus": lambda count: "-" * count + "a",
    "not": lambda count: "not " * count + "a",
    "powers": lambda count: "a^" * count + "a",
    "sums": lambda count: "a + " * count + "a",
    "products": lambda count: "a / " * count + "a",
    "conditionals": lambda count: "a if b else " * count + "c",
    "aggregates": lambda count: "sum(" * count + "a" + " for a in b)" * count,
    "fields": lambda count: "(" * count + "f(a)" + ".x)" * count,
}


@pytest.mark.parametrize("kind", NESTS)
def test_what_is_deep_but_within_bounds_goes_all_the_way(kind: str) -> None:
    tree = parse(NESTS[kind](MAXIMUM_DEPTH - 2))
    again = parse(show(tree))
    assert again == tree
    assert hash(again) == hash(tree)
    assert repr(tree)


@pytest.mark.parametrize("kind", NESTS)
@pytest.mark.parametrize("count", [MAXIMUM_DEPTH, 600])
def test_what_is_too_deep_is_refused(kind: str, count: int) -> None:
    with pytest.raises(Refused) as refused:
        parse(NESTS[kind](count))
    (found,) = refused.value.diagnostics
    assert found.code == "too-large"
    assert found.message == "the formula has more than 100 levels"


def test_height_counts_where_long_and_deep_meet() -> None:
    # Neither the sum nor the brackets alone are too many; the tree has both on one path.
    deep = "-" * 60 + "a"
    parse(f"{deep} + b")
    with pytest.raises(Refused, match="more than 100 levels"):
        parse(f"{deep}" + " + b" * 60)


def test_twenty_thousand_parentheses_are_refused_at_once() -> None:
    with pytest.raises(Refused, match="the formula has 20001 characters, more than 10000"):
        parse("(" * 20_000 + "a")
    with pytest.raises(Refused, match="more than 100 levels"):
        parse("(" * 9_999)


def test_wide_formulas_are_no_deep_ones() -> None:
    joined = parse(" and ".join(["a"] * 1000))
    assert isinstance(joined, Joined)
    assert len(joined.operands) == 1000
    listing = parse("[" + ", ".join(["a"] * 1000) + "]")
    assert isinstance(listing, Listing)
    assert len(listing.items) == 1000


def test_the_bounds_of_numbers_hold() -> None:
    assert parse("1" * 400) == number("1" * 400)
    with pytest.raises(Refused) as refused:
        parse("a + " + "1" * 401 + " mm")
    (found,) = refused.value.diagnostics
    assert (found.code, str(found.span)) == ("too-large", "a.yaml:1:5")


def test_a_fault_in_quoted_text_points_into_the_file() -> None:
    where = Located("a + * b", Span("a.yaml", 20, 29, 4, 10), '"a + * b"', True)
    with pytest.raises(Refused) as refused:
        parse_formula(where)
    assert refused.value.diagnostics[0].span == Span("a.yaml", 25, 26, 4, 15)
