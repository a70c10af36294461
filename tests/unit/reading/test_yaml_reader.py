from __future__ import annotations

from pathlib import Path

import pytest

from rulecheck.diagnostics import Diagnostic, Refused, Span
from rulecheck.reading.bounds import MAXIMUM_BYTES
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence
from rulecheck.reading.workspace import Workspace
from rulecheck.reading.yaml_reader import parse_yaml, read_yaml

DESIGN = """\
# A car of our own invention.
design: Heron K1   # the name
note: 'it''s light, ± 2 kg'
dimensions:
  wheelbase: 2860 mm ± 1 mm
  overall_width: {value: 1892 mm, reference: "sheet 14"}
ledger:
  - heron-parts.csv
  - spare: [a, b]
remark: >
  folded
  text
steps: |
  one
  two
empty:
"""


def plain(node: Node) -> object:
    """The node as Python's own lists, dictionaries and texts."""
    if isinstance(node, Mapping):
        return {entry.key.text: plain(entry.value) for entry in node}
    if isinstance(node, Sequence):
        return [plain(item) for item in node]
    return node.text


def refused(text: str) -> tuple[Diagnostic, ...]:
    with pytest.raises(Refused) as caught:
        parse_yaml(text, "a.yaml")
    return caught.value.diagnostics


def value(text: str) -> Located:
    node = parse_yaml(text, "a.yaml")
    assert isinstance(node, Mapping)
    found = node.get("a")
    assert isinstance(found, Located)
    return found


def test_a_whole_file() -> None:
    assert plain(parse_yaml(DESIGN, "a.yaml")) == {
        "design": "Heron K1",
        "note": "it's light, ± 2 kg",
        "dimensions": {"wheelbase": "2860 mm ± 1 mm", "overall_width": {"value": "1892 mm", "reference": "sheet 14"}},
        "ledger": ["heron-parts.csv", {"spare": ["a", "b"]}],
        "remark": "folded text\n",
        "steps": "one\ntwo\n",
        "empty": "",
    }


@pytest.mark.parametrize(
    "text",
    ["1e3", "no", "12:30", "010", "0x10", "~", "null", "1_000", "2027-03-01", ".inf", "+0/-2 mm", "1895 mm ± 0.6 mm (k=2)",
     "-x <= 3 mm", "a if b else c", "max(a, b) <= 75 % * min(a, b)", "t in [corners.front_left, corners.front_right]",
     "x#y", 'rim 13"', "a: b"[:1], "<<", "=", "(see part 3", "{a}"[1:], "x }", "- "[:1] + "5 mm"],
)  # fmt: skip
def test_values_read_as_written(text: str) -> None:
    found = value(f"a: {text}\nb: 1\n")
    assert found.text == text
    assert found.raw is None
    assert not found.quoted


@pytest.mark.parametrize(
    ("written", "text", "quoted"),
    [
        ('"max(a, b)"', "max(a, b)", True),
        ("'it''s'", "it's", True),
        (r'"\u00b1 3"', "± 3", True),
        ('""', "", True),
        ("one\n  two", "one two", False),
        ('"one\n  two"', "one two", True),
    ],
)
def test_raw_is_what_the_file_has(written: str, text: str, quoted: bool) -> None:
    found = value(f"a: {written}\n")
    assert (found.text, found.raw, found.quoted) == (text, written, quoted)


def test_a_value_that_is_not_there_is_empty_text() -> None:
    found = value("a:\nb: 1")
    assert (found.text, found.raw, found.quoted) == ("", None, False)
    assert found.span.start == found.span.end == 2


def test_the_place_of_a_text_on_its_own_lines_is_that_of_the_lines() -> None:
    text = "# ±\na: |2\n     max(x,\n   y)\n\nb: 1\n"
    found = value(text)
    assert found.text == "   max(x,\n y)\n"
    assert text[found.span.start : found.span.end] == "   max(x,\n   y)" == found.raw
    assert str(found.part(3, 6)) == "a.yaml:3:6"
    assert str(found.part(11, 12)) == "a.yaml:4:4"


def test_places_behind_characters_of_many_bytes() -> None:
    text = "± \U0001d4b3: 1\na: {µ: ± 2 mm, c: 3}\n"
    node = parse_yaml(text, "a.yaml")
    assert isinstance(node, Mapping)
    inner = node.get("a")
    assert isinstance(inner, Mapping)
    found = inner.get("c")
    assert isinstance(found, Located)
    assert (str(found.span), text[found.span.start : found.span.end]) == ("a.yaml:2:19", "3")


def test_places_of_mappings_and_lists() -> None:
    text = "a:\n  b: 1   # remark\n  c: [2, 3]  \n\n# end\nd: {e: 1}\n"
    node = parse_yaml(text, "a.yaml")
    assert isinstance(node, Mapping)
    places = [entry.value.span for entry in node]
    assert [text[place.start : place.end] for place in places] == ["b: 1   # remark\n  c: [2, 3]", "{e: 1}"]
    assert text[node.span.start : node.span.end] == text.rstrip()


def test_an_empty_text_is_an_empty_value() -> None:
    assert parse_yaml("", "--set") == Located("", Span("--set", 0, 0, 1, 1))
    assert parse_yaml("# only a remark\n", "a.yaml") == Located("", Span("a.yaml", 0, 0, 1, 1))


def test_a_single_value_as_a_change_on_the_command_line_has_it() -> None:
    assert plain(parse_yaml("250 mm", "--set")) == "250 mm"
    assert plain(parse_yaml("{width: 250 mm}", "--set")) == {"width": "250 mm"}


def test_characters_that_move_places_are_refused() -> None:
    assert [item.code for item in refused("a: \x1b[0m\nb: \u2028\n")] == ["not-utf8", "not-utf8"]
    assert [item.code for item in refused("a: \udc80")] == ["not-utf8"]


def test_the_bound_on_length() -> None:
    assert [item.code for item in refused("#" * (MAXIMUM_BYTES + 1))] == ["too-large"]


def test_reads_a_file_of_the_workspace(tmp_path: Path) -> None:
    (tmp_path / "car.design.yaml").write_bytes(b"\xef\xbb\xbf" + DESIGN.replace("\n", "\r\n").encode())
    workspace = Workspace(tmp_path)
    mapping = read_yaml(workspace, "car.design.yaml")
    name = mapping.get("design")
    assert isinstance(name, Located)
    text = workspace.texts["car.design.yaml"]
    assert text[name.span.start : name.span.end] == "Heron K1"
    assert str(name.span) == "car.design.yaml:2:9"


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("", "a.yaml is empty"),
        ("\n \n", "a.yaml is empty"),
        ("# remark\n", "a.yaml holds no keys"),
        ("---\n", "a.yaml holds no keys"),
        ("- a\n", "a.yaml holds a list"),
        ("width\n", "a.yaml holds one text"),
        ('""\n', "a.yaml holds one text"),
    ],
)
def test_a_file_without_keys_is_refused(tmp_path: Path, text: str, message: str) -> None:
    (tmp_path / "a.yaml").write_text(text)
    with pytest.raises(Refused) as caught:
        read_yaml(Workspace(tmp_path), "a.yaml")
    (item,) = caught.value.diagnostics
    assert (item.code, item.message) == ("bad-structure", message)
    assert item.expected


def test_a_file_that_is_not_there_is_refused_at_the_place_that_names_it(tmp_path: Path) -> None:
    asked = Span("car.design.yaml", 3, 9, 1, 4)
    with pytest.raises(Refused) as caught:
        read_yaml(Workspace(tmp_path), "none.yaml", asked)
    assert [(item.code, item.span) for item in caught.value.diagnostics] == [("no-such-file", asked)]


def test_all_faults_of_a_file_at_once() -> None:
    text = "a: !x 1\nb: {c: max(d, e)}\n<<: 3\na: 2\nf: *g\nh: [1\n"
    found = refused(text)
    assert [(item.code, item.span.line if item.span else 0) for item in found] == [
        ("yaml-refused", 1),
        ("quote-this", 2),
        ("quote-this", 5),
        ("yaml-syntax", 6),
    ]  # the list that is not closed ends reading before the keys of its mapping are compared
    found = refused(text.replace("h: [1\n", ""))
    assert [(item.code, item.span.line if item.span else 0) for item in found] == [
        ("yaml-refused", 1),
        ("quote-this", 2),
        ("yaml-refused", 3),
        ("duplicate-key", 4),
        ("quote-this", 5),
    ]
