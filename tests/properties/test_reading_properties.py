"""What holds of reading for every file: places, values, and never anything but a diagnostic."""

from __future__ import annotations

import csv
import io
from collections.abc import Iterator

import pytest
import yaml
from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.diagnostics import Diagnostic, Faults, Refused
from rulecheck.reading.characters import decode
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence
from rulecheck.reading.rows import Scanner
from rulecheck.reading.yaml_reader import parse_yaml
from rulecheck.reading.yaml_traps import quoted

# Without parentheses: texts of a flow list that open one and close it in a later text are taken for a formula.
CHARACTERS = st.sampled_from("ab zµ±\U0001d4b30.5-:,#'\"[]{}&*!|>%@`?\\=<\t")
TEXTS = st.text(CHARACTERS, max_size=12)
KEYS = st.text(CHARACTERS, min_size=1, max_size=6).filter(lambda key: key != "<<")
TREES = st.recursive(
    TEXTS,
    lambda inner: st.lists(inner, max_size=3) | st.dictionaries(KEYS, inner, max_size=3),
    max_leaves=12,
)


def plain(node: Node) -> object:
    if isinstance(node, Mapping):
        return {entry.key.text: plain(entry.value) for entry in node}
    if isinstance(node, Sequence):
        return [plain(item) for item in node]
    return node.text


def leaves(node: Node) -> Iterator[Located]:
    if isinstance(node, Mapping):
        for entry in node:
            yield entry.key
            yield from leaves(entry.value)
    elif isinstance(node, Sequence):
        for item in node:
            yield from leaves(item)
    else:
        yield node


def attempt(text: str) -> tuple[Node | None, tuple[Diagnostic, ...]]:
    try:
        return parse_yaml(text, "a.yaml"), ()
    except Refused as refused:
        return None, refused.diagnostics


@settings(max_examples=300, deadline=None)
@given(TREES, st.sampled_from([None, False, True]), st.sampled_from([None, '"', "'", "|", ">"]))
def test_what_the_library_writes_reads_back_with_places(tree: object, flow: bool | None, style: str | None) -> None:
    text = yaml.dump(tree, default_flow_style=flow, default_style=style, width=20, allow_unicode=True)
    if style is not None:
        text = text.replace("!!map ", "").replace("!!seq ", "")
    node = parse_yaml(text, "a.yaml")
    assert plain(node) == tree
    for leaf in leaves(node):
        span = leaf.span
        assert text[span.start : span.end] == (leaf.text if leaf.raw is None else leaf.raw)
        assert span.line == text.count("\n", 0, span.start) + 1
        assert span.column == span.start - text.rfind("\n", 0, span.start)
        whole = leaf.part(0, len(leaf.text))
        assert span.start <= whole.start <= whole.end <= span.end


@settings(max_examples=400, deadline=None)
@given(st.text(st.sampled_from("ab: \n-,[]{}()#'\"&*!|>%@`?\\=<~\t.1"), max_size=60))
def test_any_text_gives_what_the_library_reads_or_a_diagnostic(text: str) -> None:
    node, refusals = attempt(text)
    for item in refusals:
        assert item.span is not None
        assert 0 <= item.span.start <= item.span.end <= len(text)
        assert item.advice
    if node is not None:
        # The library's loader that resolves nothing: an outside check of values.
        loaded = yaml.load(text, yaml.CBaseLoader)
        assert plain(node) == ("" if loaded is None else loaded)


@settings(max_examples=200, deadline=None)
@given(st.binary(max_size=60))
def test_any_bytes_give_text_or_a_diagnostic(content: bytes) -> None:
    try:
        text = decode(content, "a.yaml")
    except Refused as refused:
        codes = {item.code for item in refused.diagnostics}
    else:
        codes = {"not-utf8"}
        assert "\r" not in text
        assert text.encode().replace(b"\n", b"") == content.removeprefix(b"\xef\xbb\xbf").replace(b"\r", b"").replace(
            b"\n", b""
        )
    assert codes == {"not-utf8"}


CELLS = st.text(st.sampled_from('ab,;"\n#±'), max_size=6)


@settings(max_examples=300, deadline=None)
@given(st.lists(st.lists(CELLS, min_size=1, max_size=4), max_size=5), st.sampled_from([",", ";"]))
def test_rows_that_the_standard_library_writes_read_back(rows: list[list[str]], delimiter: str) -> None:
    handle = io.StringIO()
    csv.writer(handle, delimiter=delimiter, lineterminator="\n", quoting=csv.QUOTE_ALL).writerows(rows)
    faults = Faults()
    read = list(Scanner("a.csv", handle.getvalue(), delimiter, faults).rows())
    assert not faults
    assert [[cell.text for cell in row.cells] for row in read] == rows
    text = handle.getvalue()
    for row in read:
        for cell in row.cells:
            assert text[cell.span.start : cell.span.end] == cell.raw
            assert cell.span.line == text.count("\n", 0, cell.span.start) + 1


@settings(deadline=None)
@given(st.text(st.sampled_from("ab (),[]\"'#:*>\\\n"), min_size=1, max_size=30).filter(str.strip))
def test_what_is_quoted_reads_back(formula: str) -> None:
    node = parse_yaml(quoted(formula), "a.yaml")
    assert isinstance(node, Located)
    assert node.text == " ".join(formula.split())


@settings(max_examples=50, deadline=None)
@given(st.text(max_size=20), st.lists(st.text(max_size=20), max_size=8))
def test_what_is_nearest_is_known(name: str, known: list[str]) -> None:
    advice = nearest(name, known)
    assert advice == "" or any(advice == f"did you mean '{other}'?" for other in known if other != name)


def test_the_outside_check_resolves_nothing() -> None:
    assert yaml.load("a: no", yaml.CBaseLoader) == {"a": "no"}
    with pytest.raises(yaml.YAMLError):
        yaml.load("a: [", yaml.CBaseLoader)
