"""A design laid flat, and overlays that change it."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from collections.abc import Mapping as MappingOf
from dataclasses import dataclass, field, replace
from fractions import Fraction

from rulecheck.diagnostics import Span
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence

LeafNode = Located | Mapping | Sequence
NONE = "none"


def is_leaf(node: Node) -> bool:
    """A scalar, a list, or a mapping that gives a value, or rows of a curve, with what is known about it."""
    return not isinstance(node, Mapping) or any(node.get(key) is not None for key in ("value", "rows", "file"))


def flat(path: str, node: Node) -> Iterator[tuple[str, LeafNode]]:
    """Paths and leaves of a node; an empty mapping gives nothing."""
    if is_leaf(node):
        yield path, node
    elif isinstance(node, Mapping):
        for entry in node:
            yield from flat(f"{path}.{entry.key.text}" if path else entry.key.text, entry.value)


@dataclass(frozen=True, slots=True)
class Overlay:
    """Settings in order, path and value; a later setting of a path, or of what holds it, wins.

    Laying one overlay after another is associative, and the empty overlay is the identity.

    >>> Overlay() .then(Overlay()) == Overlay()
    True
    """

    settings: tuple[tuple[str, LeafNode], ...] = ()

    @classmethod
    def of(cls, pairs: Iterable[tuple[str, Node]]) -> Overlay:
        """An overlay from paths and nodes; mappings are laid flat."""
        return cls(_settled([item for path, node in pairs for item in flat(path, node)]))

    def then(self, later: Overlay) -> Overlay:
        """This overlay with another laid over it."""
        if not self.settings or not later.settings:
            return later if not self.settings else self
        return Overlay(_settled([*self.settings, *later.settings]))

    @property
    def paths(self) -> tuple[str, ...]:
        """The paths that are set."""
        return tuple(path for path, _ in self.settings)

    def __bool__(self) -> bool:
        return bool(self.settings)


def _settled(settings: list[tuple[str, LeafNode]]) -> tuple[tuple[str, LeafNode], ...]:
    """Without the settings that a later one makes void."""
    kept: list[tuple[str, LeafNode]] = []
    later: set[str] = set()
    for path, node in reversed(settings):
        if not any(holder in later for holder in holders(path)):
            kept.append((path, node))
            later.add(path)
    return tuple(reversed(kept))


def holders(path: str) -> Iterator[str]:
    """The path itself and every path that holds it, longest first.

    >>> list(holders("a.b.c"))
    ['a.b.c', 'a.b', 'a']
    """
    yield path
    while "." in path:
        path = path.rpartition(".")[0]
        yield path


@dataclass(frozen=True, slots=True)
class State:
    """A named overlay on one axis."""

    axis: str
    name: str
    overlay: Overlay
    span: Span = field(compare=False)


@dataclass(frozen=True, slots=True)
class Correlation:
    """Two inputs whose measurements are off together, with the coefficient from -1 to 1."""

    first: str
    second: str
    coefficient: Fraction
    span: Span = field(compare=False)


@dataclass(frozen=True, slots=True)
class Baseline:
    """An older design that this one is held against: the file as it is named, and what stands in it."""

    reference: str
    design: Design


@dataclass(frozen=True, slots=True)
class Design:
    """One car. `leaves` has what is stated by path, `items` the names directly below each inner path in order.

    `complete` are the collections that are closed, `absent` what is stated `none`, `keys` where each key stands.
    `baselines` are the older designs by name.
    `chosen` are the states, by axis, that are laid over it for one run, and `plain` is the design without them.
    """

    file: str
    name: str
    revision: str
    note: str
    rulesets: tuple[Located, ...]
    leaves: MappingOf[str, LeafNode]
    items: MappingOf[str, tuple[str, ...]]
    complete: frozenset[str]
    absent: frozenset[str]
    states: MappingOf[str, MappingOf[str, State]]
    keys: MappingOf[str, Span]
    chosen: MappingOf[str, State] = field(default_factory=dict)
    plain: Design | None = None
    correlations: tuple[Correlation, ...] = ()
    baselines: MappingOf[str, Baseline] = field(default_factory=dict)

    def with_overlay(self, overlay: Overlay) -> Design:
        """The design with the changes laid over it; the design itself stays."""
        if not overlay:
            return self
        leaves, items, keys = dict(self.leaves), dict(self.items), dict(self.keys)
        absent = set(self.absent)
        for path, node in overlay.settings:
            _lay(path, node, leaves, items, absent)
            keys[path] = node.span
        plain = self.plain.with_overlay(overlay) if self.plain is not None else None
        return replace(self, leaves=leaves, items=items, absent=frozenset(absent), keys=keys, plain=plain)

    def in_states(self, chosen: Iterable[State]) -> Design:
        """The design with states laid over it for a whole run; rules may ask for others on the same axes."""
        overlay = Overlay()
        laid = {state.axis: state for state in chosen}
        for state in laid.values():
            overlay = overlay.then(state.overlay)
        plain = self.plain or self
        return replace(plain.with_overlay(overlay), chosen=laid, plain=plain) if laid else plain

    def names(self, path: str) -> tuple[str, ...] | None:
        """The names directly below a path without those stated `none`, or None where nothing is stated there."""
        names = self.items.get(path)
        if names is None or not self.absent:
            return names
        return tuple(name for name in names if f"{path}.{name}" not in self.absent)

    def states_none(self, path: str) -> bool:
        """True where the path, or what holds it, is stated `none`."""
        return any(holder in self.absent for holder in holders(path))


def _lay(
    path: str, node: LeafNode, leaves: dict[str, LeafNode], items: dict[str, tuple[str, ...]], absent: set[str]
) -> None:
    for holder in holders(path):
        absent.discard(holder)
        if _is_none(leaves.get(holder)):
            del leaves[holder]
    point, _, last = path.rpartition(".")
    if last == "at":
        leaves.pop(point, None)  # a point that was written in one piece
    if _is_none(node):
        absent.add(path)
    if path in items:
        _remove(path, leaves, items, absent)
    leaves[path] = node
    _register(path, items)


def _is_none(node: LeafNode | None) -> bool:
    return isinstance(node, Located) and node.text == NONE


def _remove(path: str, leaves: dict[str, LeafNode], items: dict[str, tuple[str, ...]], absent: set[str]) -> None:
    for name in items.pop(path, ()):
        below = f"{path}.{name}"
        leaves.pop(below, None)
        absent.discard(below)
        _remove(below, leaves, items, absent)
    holder, _, name = path.rpartition(".")
    if holder in items:
        items[holder] = tuple(item for item in items[holder] if item != name)


def _register(path: str, items: dict[str, tuple[str, ...]]) -> None:
    """Make the names of a path known to those that hold it."""
    while path:
        holder, _, name = path.rpartition(".")
        known = items.get(holder, ())
        if name not in known:
            items[holder] = (*known, name)
        path = holder


def structure_of(design: Design) -> tuple[object, ...]:
    """What a design has beside its numbers: names, and the texts of leaves that are no numbers."""
    words = {
        path: node for path, node in design.leaves.items() if isinstance(node, Located) and node.text[:1].isalpha()
    }
    return (sorted(design.leaves), sorted((path, node.text) for path, node in words.items()))
