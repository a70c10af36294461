"""Design files, variants and change files: located trees to `Design` and `Overlay`."""

from __future__ import annotations

from dataclasses import dataclass, field, replace

from rulecheck.diagnostics import Faults, Refused, Related, Span
from rulecheck.model.correlations import read_correlations
from rulecheck.model.curve_files import CurveFiles
from rulecheck.model.design import NONE, Baseline, Design, LeafNode, Overlay, State, is_leaf
from rulecheck.model.names import RESERVED_KEYS, check_name, check_path
from rulecheck.reading.ledger import LedgerRow, read_ledger
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence
from rulecheck.reading.workspace import Workspace
from rulecheck.reading.yaml_reader import read_yaml

MOST_VARIANTS = 20
_HELD = {
    **{axis: f"at.{axis}" for axis in "xyz"},
    **{f"inertia_{axis}": f"inertia.{axis}" for axis in ("xx", "yy", "zz")},
}
"""Columns of a ledger whose field lies inside another."""


@dataclass(slots=True)
class _Draft:
    """What is collected while a file is walked."""

    faults: Faults
    files: CurveFiles
    leaves: dict[str, LeafNode] = field(default_factory=dict)
    items: dict[str, tuple[str, ...]] = field(default_factory=dict)
    complete: set[str] = field(default_factory=set)
    absent: set[str] = field(default_factory=set)
    keys: dict[str, Span] = field(default_factory=dict)

    def walk(self, path: str, node: Node) -> None:
        """Lay a node flat under its path."""
        if is_leaf(node):
            self.leaves[path] = self.files.filled(path, node)
            if isinstance(node, Located) and node.text == NONE:
                self.absent.add(path)
            return
        assert isinstance(node, Mapping)
        names: list[str] = []
        for entry in node:
            if path and entry.key.text == "complete":
                self._close(path, entry.value)
            elif check_name(entry.key, self.faults):
                names.append(entry.key.text)
                below = f"{path}.{entry.key.text}" if path else entry.key.text
                self.keys[below] = entry.key.span
                self.walk(below, entry.value)
        self.items[path] = (*self.items.get(path, ()), *names)

    def _close(self, path: str, node: Node) -> None:
        if isinstance(node, Located) and node.text in ("yes", "no"):
            if node.text == "yes":
                self.complete.add(path)
        else:
            self.faults.add("bad-value", f"'{path}.complete' is a flag", node.span, expected="yes or no")

    def row(self, row: LedgerRow) -> None:
        """Add one row of a ledger as `masses.<item>`."""
        item = row.cells["item"]
        path = f"masses.{item.text}"
        if not check_name(item, self.faults):
            return
        if path in self.keys:
            self.faults.add(
                "name-taken",
                f"the ledger has two entries called '{item.text}'",
                item.span,
                advice="give one of them another name, or use the quantity column",
                related=(Related("the other one is here", self.keys[path]),),
            )
            return
        self.keys[path] = item.span
        self.items["masses"] = (*self.items.get("masses", ()), item.text)
        names: list[str] = []
        for column, cell in row.cells.items():
            if column == "item":
                continue
            name = _HELD.get(column, column)
            self.leaves[f"{path}.{name}"] = cell
            self.keys[f"{path}.{name}"] = cell.span
            names.append(name.partition(".")[0])
        self.items[path] = tuple(dict.fromkeys(names))
        for holder in ("at", "inertia"):
            held = [_HELD[column].partition(".") for column in row.cells if column in _HELD]
            if inner := tuple(last for first, _, last in held if first == holder):
                self.items[f"{path}.{holder}"] = inner


OTHER_FILES = (
    ("set", "a change file", "lay it over a design with --change"),
    ("ruleset", "a ruleset", "name the design first, and its rulesets in the design or with --rules"),
    ("house", "a house file", "name the design; the house file at the root of its folder is read with it"),
)
"""What another file than a design has, what it is, and what to do with it."""


def read_design(workspace: Workspace, file: str, asked: Span | None = None) -> Design:
    """Read a design file or a variant of one. Raises `Refused` with all faults of the files read."""
    design = _read_design(workspace, file, asked, ())
    names = design.names("baselines")
    return replace(design, baselines=_baselines(workspace, design, names)) if names else design


def _baselines(workspace: Workspace, design: Design, names: tuple[str, ...]) -> dict[str, Baseline]:
    """The older designs that a design names, each beside the file that names it; theirs are not read."""
    faults = Faults()
    found: dict[str, Baseline] = {}
    for name in names:
        said = design.leaves.get(f"baselines.{name}.design")
        if not isinstance(said, Located) or said.text == NONE:
            continue
        try:
            target = workspace.resolve(said.text, said.span.file, said.span)
            found[name] = Baseline(said.text, _read_design(workspace, target, said.span, ()))
        except Refused as refused:
            faults.take(refused)
    faults.settle()
    return found


def _read_design(workspace: Workspace, file: str, asked: Span | None, above: tuple[str, ...]) -> Design:
    if file in above or len(above) >= MOST_VARIANTS:
        chain = " changes ".join((*above, file))
        fault = Faults()
        fault.add("cycle", f"variants are based on each other: {chain}", asked, advice="base one of them on a design")
        fault.settle()
    root = read_yaml(workspace, file, asked)
    faults = Faults()
    base = root.get("changes")
    if isinstance(base, Located):
        return _variant(workspace, file, root, base, above, faults)
    if base is not None:
        faults.add("bad-structure", "'changes' names one design", base.span, expected="changes: base.design.yaml")
        faults.settle()
    if root.get("design") is None:
        for key, what, advice in OTHER_FILES:
            if root.get(key) is not None:
                faults.add("missing-key", f"this is {what}, not a design", root.span, advice=advice)
                faults.settle()
    return _plain_design(workspace, file, root, faults)


def _plain_design(workspace: Workspace, file: str, root: Mapping, faults: Faults) -> Design:
    files = CurveFiles(workspace, file, faults)
    draft = _Draft(faults, files)
    draft.walk("", Mapping(tuple(entry for entry in root if entry.key.text not in RESERVED_KEYS), root.span))
    for row in _ledger_rows(workspace, file, root.get("ledger"), faults):
        draft.row(row)
    changes = root.key("set")
    if changes is not None:
        faults.add(
            "unknown-key",
            "'set' stands in a file that changes nothing",
            changes.span,
            advice="add 'changes:' with the design that it changes",
        )
    design = Design(
        file=file,
        name=_text(root, "design", faults, needed=True),
        revision=_text(root, "revision", faults),
        note=_text(root, "note", faults),
        rulesets=tuple(_texts(root.get("rulesets"), "rulesets", faults)),
        leaves=draft.leaves,
        items=draft.items,
        complete=frozenset(draft.complete),
        absent=frozenset(draft.absent),
        states=_states(root.get("states"), files),
        keys=draft.keys,
        correlations=read_correlations(root.get("correlations"), draft.leaves, faults),
    )
    faults.settle()
    return design


def _variant(
    workspace: Workspace, file: str, root: Mapping, base: Located, above: tuple[str, ...], faults: Faults
) -> Design:
    _only(root, ("design", "revision", "note", "changes", "set", "rulesets"), "a variant", faults)
    overlay = _overlay(root.get("set"), CurveFiles(workspace, file, faults))
    design: Design | None = None
    try:
        design = _read_design(workspace, workspace.resolve(base.text, file, base.span), base.span, (*above, file))
    except Refused as refused:
        faults.take(refused)
    faults.settle()
    assert design is not None
    changed = design.with_overlay(overlay)
    rulesets = tuple(_texts(root.get("rulesets"), "rulesets", faults))
    kept = tuple(replace(item, text=_moved(workspace, item, file)) for item in design.rulesets)
    return replace(
        changed,
        file=file,
        name=_text(root, "design", faults) or design.name,
        revision=_text(root, "revision", faults) or design.revision,
        note=_text(root, "note", faults) or design.note,
        rulesets=rulesets or kept,
    )


def _moved(workspace: Workspace, item: Located, file: str) -> str:
    """A reference of the base design as the variant, which may lie in another folder, has to write it."""
    target = workspace.resolve(item.text, item.span.file, item.span)
    up = "../" * file.count("/")
    return f"{up}{target}"


def read_change(workspace: Workspace, file: str, asked: Span | None = None) -> Overlay:
    """Read a change file (`set:` alone) to an overlay. Raises `Refused`."""
    root = read_yaml(workspace, file, asked)
    faults = Faults()
    _only(root, ("note", "set"), "a change file", faults)
    if root.get("set") is None:
        faults.add("missing-key", "a change file needs 'set:'", root.span, expected="set: {path: value, …}")
    overlay = _overlay(root.get("set"), CurveFiles(workspace, file, faults))
    faults.settle()
    return overlay


def _overlay(node: Node | None, files: CurveFiles) -> Overlay:
    faults = files.faults
    if node is None:
        return Overlay()
    if not isinstance(node, Mapping):
        faults.add("bad-structure", "changes are given as paths and values", node.span, expected="{path: value, …}")
        return Overlay()
    pairs = ((entry.key.text, entry.value) for entry in node if check_path(entry.key, faults))
    return files.filled_all(Overlay.of(pairs))


def _states(node: Node | None, files: CurveFiles) -> dict[str, dict[str, State]]:
    faults = files.faults
    states: dict[str, dict[str, State]] = {}
    for axis in _entries(node, "states are given by axis", faults):
        check_name(axis.key, faults)
        states[axis.key.text] = {}
        for state in _entries(axis.value, f"the states of axis '{axis.key.text}' are given by name", faults):
            check_name(state.key, faults)
            overlay = _overlay(state.value, files)
            states[axis.key.text][state.key.text] = State(axis.key.text, state.key.text, overlay, state.key.span)
    return states


def _entries(node: Node | None, what: str, faults: Faults) -> tuple:  # type: ignore[type-arg]
    if node is None:
        return ()
    if isinstance(node, Mapping):
        return node.entries
    faults.add("bad-structure", what, node.span, expected="a mapping")
    return ()


def _ledger_rows(workspace: Workspace, file: str, node: Node | None, faults: Faults) -> list[LedgerRow]:
    rows: list[LedgerRow] = []
    if node is None:
        return rows
    for item in node if isinstance(node, Sequence) else (node,):
        reference, delimiter, decimal = _ledger_entry(item, faults)
        if reference is None:
            continue
        try:
            target = workspace.resolve(reference.text, file, reference.span)
            rows.extend(read_ledger(workspace, target, delimiter=delimiter, decimal=decimal, asked=reference.span))
        except Refused as refused:
            faults.take(refused)
    return rows


def _ledger_entry(node: Node, faults: Faults) -> tuple[Located | None, str, str]:
    if isinstance(node, Located):
        return node, ",", "."
    if isinstance(node, Mapping):
        _only(node, ("file", "delimiter", "decimal"), "a ledger", faults)
        reference = node.get("file")
        if isinstance(reference, Located):
            delimiter = {"tab": "\t", "semicolon": ";", "comma": ","}.get(_text(node, "delimiter", faults), "")
            return (
                reference,
                delimiter or _text(node, "delimiter", faults) or ",",
                _text(node, "decimal", faults) or ".",
            )
    faults.add(
        "bad-structure",
        "a ledger is a file name",
        node.span,
        expected="parts.csv, or {file: parts.csv, delimiter: ';', decimal: ','}",
    )
    return None, ",", "."


def _only(root: Mapping, known: tuple[str, ...], what: str, faults: Faults) -> None:
    for entry in root:
        if entry.key.text not in known:
            faults.add(
                "unknown-key",
                f"{what} has no key '{entry.key.text}'",
                entry.key.span,
                expected=" or ".join(known),
                advice=nearest(entry.key.text, known),
            )


def _text(root: Mapping, key: str, faults: Faults, *, needed: bool = False) -> str:
    node = root.get(key)
    if node is None:
        if needed:
            faults.add("missing-key", f"the file has no '{key}:'", root.span, expected=f"{key}: the name of the {key}")
        return ""
    if isinstance(node, Located):
        if needed and not node.text:
            faults.add("missing-key", f"'{key}:' is empty", node.span, expected=f"{key}: the name of the {key}")
        return node.text
    faults.add("bad-structure", f"'{key}' is a single text", node.span)
    return ""


def _texts(node: Node | None, key: str, faults: Faults) -> list[Located]:
    if node is None:
        return []
    if isinstance(node, Located):
        return [node]
    if isinstance(node, Sequence) and all(isinstance(item, Located) for item in node):
        return [item for item in node if isinstance(item, Located)]
    faults.add("bad-structure", f"'{key}' is a list of file names", node.span, expected=f"{key}: [name.ruleset.yaml]")
    return []
