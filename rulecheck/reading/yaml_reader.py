"""YAML files to located nodes: every value stays the text that the file writes.

Nothing is resolved: `1e3`, `no`, `12:30`, `010`, `0x10` and `~` read as written, and a value that is
not there reads as empty text. Refused are duplicate keys, keys that are no text, tags, merge keys,
further documents, and whatever goes beyond the bounds. Aliases are allowed; what they repeat counts.
"""

from __future__ import annotations

from rulecheck.diagnostics import Diagnostic, Faults, Refused, Span
from rulecheck.reading.bounds import MAXIMUM_BYTES
from rulecheck.reading.characters import refuse_characters, span_at
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence
from rulecheck.reading.store import too_large
from rulecheck.reading.workspace import Workspace
from rulecheck.reading.yaml_builder import Builder


def read_yaml(workspace: Workspace, file: str, asked: Span | None = None) -> Mapping:
    """The mapping that a YAML file of the workspace holds; `asked` is the place that names the file.

    Raises `Refused` with every fault that was found; an empty file, or one that holds a list or a
    plain text, is a fault too.
    """
    text = workspace.read(file, asked)
    node = parse_yaml(text, file)
    if isinstance(node, Mapping):
        return node
    raise Refused([_no_mapping(node, text, file)])


def parse_yaml(text: str, file: str) -> Node:
    r"""The node that a text holds; an empty text gives an empty `Located`. `file` is for the places.

    Line ends are line feeds (the workspace reads files so). Raises `Refused` with every fault found.

    >>> node = parse_yaml("width: 1900 mm\nopen: no", "a.yaml")
    >>> [(entry.key.text, entry.value.text, str(entry.value.span)) for entry in node]
    [('width', '1900 mm', 'a.yaml:1:8'), ('open', 'no', 'a.yaml:2:7')]
    """
    faults = Faults()
    refuse_characters(text, file, faults)
    faults.settle()
    if len(text) > MAXIMUM_BYTES:
        raise Refused([too_large(file, None)])
    node = Builder(file, text, faults).build()
    faults.settle()
    return node if node is not None else Located("", span_at(file, text, 0, 0))


def _no_mapping(node: Located | Sequence, text: str, file: str) -> Diagnostic:
    if isinstance(node, Sequence):
        message = f"{file} holds a list"
    elif node.text or node.quoted:
        message = f"{file} holds one text"
    else:
        message = f"{file} is empty" if not text.strip() else f"{file} holds no keys"
    return Diagnostic(
        "bad-structure",
        message,
        node.span,
        expected="keys with their values at the top of the file, `key: value`",
        advice="write a key, a colon, a blank and the value on a line",
    )
