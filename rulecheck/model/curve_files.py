"""Curves and maps of a design whose rows stand in a file of columns: the rows take the place of the file's name."""

from __future__ import annotations

from dataclasses import dataclass

from rulecheck.diagnostics import Faults, Refused
from rulecheck.model.design import LeafNode, Overlay
from rulecheck.model.signal_files import is_signal, logged
from rulecheck.reading.columns import Columns, chosen, read_columns
from rulecheck.reading.nodes import Entry, Located, Mapping, Node, Sequence
from rulecheck.reading.workspace import Workspace

OF_THE_FILE = ("file", "column", "delimiter", "decimal")
"""Keys that say where the rows stand."""
_SIGNS = {"comma": ",", "semicolon": ";", "tab": "\t"}


@dataclass(frozen=True, slots=True)
class CurveFiles:
    """Reads the rows that curves of one design file leave to files beside it."""

    workspace: Workspace
    beside: str
    faults: Faults

    def filled(self, path: str, node: LeafNode) -> LeafNode:
        """The node with rows in place of a file's name; other nodes as they are."""
        if not isinstance(node, Mapping) or not isinstance(node.get("file"), Located):
            return node
        if is_signal(path):
            return logged(node, self.workspace, self.beside, self.faults)
        name = node.get("file")
        assert isinstance(name, Located)
        if node.get("rows") is not None:
            self.faults.add(
                "bad-structure", "a curve has its rows here or in a file, not both", name.span, advice="take one out"
            )
            return node
        try:
            target = self.workspace.resolve(name.text, self.beside, name.span)
            signs = {"delimiter": self._sign(node, "delimiter", ","), "decimal": self._sign(node, "decimal", ".")}
            columns = read_columns(self.workspace, target, **signs, asked=name.span)
        except Refused as refused:
            self.faults.take(refused)
            return node
        rows = chosen(columns, _names(path, node, columns), name.span, self.faults)
        if rows is None:
            return node
        listed = Sequence(tuple(Sequence(row, row[0].span) for row in rows), name.span)
        kept = tuple(entry for entry in node if entry.key.text not in OF_THE_FILE)
        return Mapping((*kept, Entry(Located("rows", name.span), listed)), node.span)

    def filled_all(self, overlay: Overlay) -> Overlay:
        """An overlay with the rows of its curves."""
        return Overlay(tuple((path, self.filled(path, node)) for path, node in overlay.settings))

    def _sign(self, node: Mapping, key: str, otherwise: str) -> str:
        said = node.get(key)
        if said is None or not isinstance(said, Located):
            return otherwise
        return _SIGNS.get(said.text, said.text)


def _names(path: str, node: Mapping, columns: Columns) -> list[str]:
    """The columns that are wanted, keys first: by the names that the curve is stated over, else all in order."""
    column = node.get("column")
    value = column.text if isinstance(column, Located) else path.rpartition(".")[2]
    if column is None and columns.place(value) is None and len(columns.names) == 2:
        value = columns.names[-1]
    over = [own.text for own in names_of(node.get("over"))]
    if over:
        return [*(name if columns.place(name) is not None else name.rpartition(".")[2] for name in over), value]
    return [*(name for name in columns.names if name != value), value]


def names_of(node: Node | None) -> tuple[Located, ...]:
    """`over:` as names: one, or a list of them."""
    items = (node,) if isinstance(node, Located) else tuple(node) if isinstance(node, Sequence) else ()
    return tuple(item for item in items if isinstance(item, Located))
