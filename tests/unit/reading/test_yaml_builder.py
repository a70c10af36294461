from __future__ import annotations

import tracemalloc

import pytest
import yaml

from rulecheck.diagnostics import Diagnostic, Faults, Refused
from rulecheck.reading import yaml_builder
from rulecheck.reading.bounds import MAXIMUM_ALIASES, MAXIMUM_DEPTH, MAXIMUM_FAULTS, MAXIMUM_NODES, MAXIMUM_SCALAR
from rulecheck.reading.nodes import Located, Mapping
from rulecheck.reading.yaml_builder import Builder
from rulecheck.reading.yaml_reader import parse_yaml


def refused(text: str) -> tuple[Diagnostic, ...]:
    with pytest.raises(Refused) as caught:
        parse_yaml(text, "a.yaml")
    return caught.value.diagnostics


def code(text: str) -> str:
    (item,) = refused(text)
    return item.code


def test_an_alias_repeats_the_value_with_its_place() -> None:
    node = parse_yaml("a: &w 1900 mm\nb: *w\nc: &m {x: 1}\nd: *m\n", "a.yaml")
    assert isinstance(node, Mapping)
    assert node.get("b") == node.get("a")
    assert str(node.get("b").span) == "a.yaml:1:7"  # type: ignore[union-attr]
    assert node.get("d") is node.get("c")


@pytest.mark.parametrize(
    "written", ["&w 1900 mm", '&w "1900 mm"', "&w\n  1900 mm", "&w # remark\n  1900 mm", "&w |-\n  1900 mm"]
)
def test_the_place_of_a_value_with_an_anchor_is_that_of_the_value(written: str) -> None:
    text = f"a: {written}\n"
    node = parse_yaml(text, "a.yaml")
    assert isinstance(node, Mapping)
    found = node.get("a")
    assert isinstance(found, Located)
    assert found.text == "1900 mm"
    assert text[found.span.start : found.span.end].strip('"') == "1900 mm"
    assert text.splitlines()[found.span.line - 1][found.span.column - 1 :].strip('"') == "1900 mm"


def test_an_alias_without_anchor_is_taken_for_a_formula() -> None:
    (item,) = refused("a: *width\n")
    assert item.code == "quote-this"
    assert "no anchor is called 'width'" in item.message


@pytest.mark.parametrize("text", ["&a [*a]", "a: &a {b: {c: *a}}", "- &a\n  - *a\n"])
def test_an_alias_inside_of_what_it_repeats_is_refused(text: str) -> None:
    assert code(text) == "yaml-refused"


def test_an_anchor_that_is_set_twice_is_refused() -> None:
    assert code("a: &x 1\nb: &x 2\n") == "yaml-refused"


def test_a_bomb_of_aliases_ends_in_a_diagnostic_with_little_memory() -> None:
    lines = ["a0: &a0 [x, x, x, x, x, x, x, x, x]"]
    lines += [f"a{level}: &a{level} [{', '.join([f'*a{level - 1}'] * 9)}]" for level in range(1, 30)]
    tracemalloc.start()
    (item,) = refused("\n".join(lines))
    _, peak = tracemalloc.get_traced_memory()
    tracemalloc.stop()
    assert item.code == "yaml-refused"
    assert str(MAXIMUM_NODES) in item.message
    assert peak < 5_000_000


def test_the_bound_on_aliases() -> None:
    text = "a: &a 1\nb: [{}]\n"
    parse_yaml(text.format(", ".join(["*a"] * MAXIMUM_ALIASES)), "a.yaml")
    assert code(text.format(", ".join(["*a"] * (MAXIMUM_ALIASES + 1)))) == "yaml-refused"


def test_the_bound_on_nodes(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(yaml_builder, "MAXIMUM_NODES", 1_000)  # the stated bound takes seconds
    text = "[{}]".format(", ".join(["x"] * 999))
    parse_yaml(text, "a.yaml")
    assert code(text.replace("[", "[x, ")) == "too-large"


def test_the_bound_on_the_length_of_a_value() -> None:
    parse_yaml("a: " + "x" * MAXIMUM_SCALAR, "a.yaml")
    assert code("a: " + "x" * (MAXIMUM_SCALAR + 1)) == "too-large"


@pytest.mark.parametrize("opening", ["[", "{a: ", "- ", "? "])
def test_a_bomb_of_depth(opening: str) -> None:
    (item,) = refused(opening * 20_000)
    assert item.code == "too-large"
    assert str(MAXIMUM_DEPTH) in item.message


def test_the_bound_on_depth() -> None:
    parse_yaml("[" * MAXIMUM_DEPTH + "]" * MAXIMUM_DEPTH, "a.yaml")
    assert code("[" * (MAXIMUM_DEPTH + 1) + "]" * (MAXIMUM_DEPTH + 1)) == "too-large"


def test_aliases_count_towards_depth() -> None:
    half = MAXIMUM_DEPTH // 2
    text = f"a: &a {'[' * half}{']' * half}\nb: {'[' * half}*a{']' * half}\n"
    assert code(text) == "too-large"
    parse_yaml(text.replace("[*a]", "*a"), "a.yaml")


def test_so_many_faults_end_at_the_bound() -> None:
    assert len(refused("a: [" + "!x 1, " * 5_000 + "]")) == MAXIMUM_FAULTS
    assert len(refused("a: [" + "*x, " * 900 + "]")) == MAXIMUM_FAULTS
    assert len(refused("- (a # b\n" * 5_000)) == MAXIMUM_FAULTS


@pytest.mark.parametrize(
    "text", ["a: !x 1", "a: !!str 1", "a: ! 1", "!x {a: 1}", "a: !!python/name:os.system x", "a: !x [1]"]
)
def test_tags_are_refused(text: str) -> None:
    (item,) = refused(text)
    assert item.code == "yaml-refused"
    assert "tags" in item.message


def test_a_second_document_is_refused() -> None:
    assert code("a: 1\n---\nb: 2\n") == "yaml-refused"
    parse_yaml("---\na: 1\n...\n", "a.yaml")


def test_both_parsers_of_the_library_give_the_same_nodes(monkeypatch: pytest.MonkeyPatch) -> None:
    text = "a: &x {b: [1, 'it''s', \"\\u00b1\"]}\nc: *x\nd: >\n  one\n  two\n\ne: |\n  x\nf:\n"
    fast = Builder("a.yaml", text, Faults()).build()
    monkeypatch.setattr(yaml_builder, "_LOADER", yaml.SafeLoader)
    slow = Builder("a.yaml", text, Faults()).build()
    assert fast == slow
    assert repr(fast) == repr(slow)  # with the places, which equality leaves out
