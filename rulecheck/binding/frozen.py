"""What is frozen, held against the baseline that the design names: bound as one more view of the car, value by value."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace
from functools import reduce

from rulecheck.binding.bound import Bound, Broken, Number, Place
from rulecheck.binding.comparing import opposite, same
from rulecheck.binding.conditions import certain, open_part
from rulecheck.binding.documents import is_later, stated_day, stated_words
from rulecheck.binding.inputs import bind_input
from rulecheck.binding.names import term_of
from rulecheck.binding.points import distance_points, place_of
from rulecheck.binding.scope import Scope, View
from rulecheck.diagnostics import Span
from rulecheck.graph.conditions import AllOf, Condition, Part
from rulecheck.graph.terms import Term
from rulecheck.model.design import NONE, LeafNode
from rulecheck.model.frozen import FrozenWanted, matches
from rulecheck.model.vocabulary import Entry
from rulecheck.operations.arithmetic import absolute, add, subtract
from rulecheck.operations.comparison import at_most, equal
from rulecheck.operations.operation import Operation
from rulecheck.quantity.units import Unit, find_unit
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence

MOST_FROZEN = 5000
"""Values that one rule may freeze."""
BOUND = ("number", "flag", "choice", "text", "date", "item")


def frozen(scope: Scope, wanted: FrozenWanted) -> Condition | Broken:
    """Every value under the paths is as it was in the baseline, or as many changes are borne as the rule book allows."""
    if wanted.since is not None and scope.shared.day < wanted.since:
        return certain(scope, True, f"frozen from {wanted.since.isoformat()}", wanted.span)
    name = wanted.baseline.text
    base = f"baselines.{name}"
    scope.touched.add(base)
    said = scope.view.design.leaves.get(f"{base}.design")
    baseline = scope.view.design.baselines.get(name)
    if not isinstance(said, Located) or baseline is None:
        return open_part(scope, f"{base}.design, the file of the baseline", wanted.span)
    if said.text != baseline.reference:
        return open_part(scope, f"{base}.design as the design file names it: a change of it is not read", said.span)
    return _Hand(scope, wanted, _view(scope, name)).judged()


def _view(scope: Scope, name: str) -> Scope:
    """The baseline as one more view of the car, all of whose values stand as they are."""
    design, baseline = scope.view.design, scope.view.design.baselines[name].design
    paths = frozenset((*design.leaves, *baseline.leaves))
    view = View(baseline, (*scope.view.states, ("baseline", name)), paths, design)
    return replace(scope, view=view, touched=set(), uses={})


@dataclass(frozen=True, slots=True)
class _Hand:
    """Holds the car (`scope`) against the baseline (`then`)."""

    scope: Scope
    wanted: FrozenWanted
    then: Scope

    def judged(self) -> Condition | Broken:
        paths = list(dict.fromkeys(self._paths()))
        if not paths:
            told = ", ".join(pattern.text for pattern in self.wanted.paths)
            return open_part(self.scope, f"a value under {told}, in the design or its baseline", self.wanted.span)
        if len(paths) > MOST_FROZEN:
            told = f"{len(paths)} values are frozen by one rule"
            return self.scope.fault("too-large", told, self.wanted.span, expected=f"at most {MOST_FROZEN}")
        parts = [self._part(path) for path in paths]
        whole = [part for part in parts if not isinstance(part, Broken)]
        if len(whole) < len(parts):
            return Broken()
        consents = list(self._consents())
        asked = [self._excused(part, path, consents) for part, path in zip(whole, paths, strict=True)]
        if self.wanted.allowed is None:
            return asked[0] if len(asked) == 1 else AllOf(tuple(asked))
        yes = self.scope.bank.flag(True)
        shown = (replace(part, holds=yes, margin=None, scale=None) for part in asked)
        return AllOf((self._counted([part.holds for part in asked]), *shown))

    # --- what is frozen ----------------------------------------------------------------------------------------------

    def _paths(self) -> Iterable[str]:
        """The values that are meant, of the car and of the baseline; a point is one value."""
        vocabulary = self.scope.shared.vocabulary
        for path in (*self.scope.view.design.leaves, *self.then.view.design.leaves):
            if not any(matches(pattern.text, path) for pattern in self.wanted.paths):
                continue
            holder = path.rpartition(".")[0]
            above = vocabulary.entry(holder) if vocabulary.entry(path) is None and holder else None
            yield holder if above is not None and above.kind == "point" else path

    def _part(self, path: str) -> Part | Broken:
        entry = self.scope.shared.vocabulary.entry(path)
        now, before = (self._stated(scope, path) for scope in (self.scope, self.then))
        self.scope.touched.add(path)
        if entry is None or now is None or before is None:
            return self._plain(path, _same_node(now, before))
        if entry.kind in BOUND:
            bounds = [bind_input(scope, path, entry, self.wanted.span) for scope in (self.scope, self.then)]
            return self._held(path, *bounds)
        if entry.kind == "point":
            return self._held(path, *self._places(path, entry))
        return self._plain(path, _same_node(now, before))

    def _places(self, path: str, entry: Entry) -> list[Bound]:
        return [place_of(scope, path, entry, self.wanted.span) for scope in (self.scope, self.then)]

    def _stated(self, scope: Scope, path: str) -> LeafNode | Span | None:
        """What is stated under a path; of a point by its coordinates, where it stands."""
        design = scope.view.design
        node = design.leaves.get(path)
        if node is None:
            return design.keys.get(path) if path in design.items else None
        return None if isinstance(node, Located) and node.text == NONE else node

    def _held(self, path: str, now: Bound, before: Bound) -> Part | Broken:
        if isinstance(now, Broken) or isinstance(before, Broken):
            return Broken()
        if isinstance(now, Place) and isinstance(before, Place):
            apart = distance_points(self.scope, now, before, "")
            return self._measured(path, apart, find_unit("mm"), None, None)
        first, second = term_of(now), term_of(before)
        if isinstance(now, Number) and isinstance(before, Number) and first is not None and second is not None:
            apart_by = self._make(absolute, self._make(subtract, first, second))
            return self._measured(path, apart_by, now.unit, first, second)
        flag = same(self.scope, now, before)
        assert flag is not None
        return self._made(path, flag, value=first, limit=second)

    def _measured(self, path: str, apart: Term, unit: Unit | None, now: Term | None, before: Term | None) -> Part:
        """A number: the tolerance less the change, or no change at all where no tolerance is of its kind."""
        width = self.wanted.tolerance
        bank = self.scope.bank
        if width is None or width.dimension != apart.dimension:
            nothing = bank.number(0, apart.dimension)
            return self._made(path, self._make(equal, apart, nothing), unit=unit, value=now, limit=before)
        rational, power = width.unit.width_in_si(width.value)
        room = bank.number(rational, width.dimension, power)
        part = self._made(path, self._make(at_most, apart, room), unit=unit, value=now, limit=before)
        return replace(part, margin=self._make(subtract, room, apart), scale=room if width.value else None)

    def _plain(self, path: str, is_same: bool) -> Part:
        return self._made(path, self.scope.bank.flag(is_same))

    def _made(
        self, path: str, holds: Term, *, unit: Unit | None = None, value: Term | None = None, limit: Term | None = None
    ) -> Part:
        """A part that says where both values stand."""
        keys = [scope.view.design.keys.get(path) for scope in (self.scope, self.then)]
        before = f"as at {keys[1]}" if keys[1] is not None else f"not in {self.then.view.design.file}"
        here = f"{path} {before}" + ("" if keys[0] is not None else ", and gone here")
        return Part(
            "frozen", here, holds, unit=unit, value=value, limit=limit, sense="frozen at", span=self.wanted.span, place=keys[0]
        )  # fmt: skip

    # --- consents ----------------------------------------------------------------------------------------------------

    def _consents(self) -> Iterable[tuple[str, str]]:
        """Written consents to changes, in force on the evaluation date: the paths they speak of, and their reference."""
        base = f"baselines.{self.wanted.baseline.text}.consents"
        span = self.wanted.span
        for name in self.scope.view.design.names(base) or ():
            path, reference = (stated_words(self.scope, f"{base}.{name}.{key}", span) for key in ("path", "reference"))
            day = stated_day(self.scope, f"{base}.{name}.date", span)
            if path and reference and day is not None and not is_later(self.scope, day):
                yield path, reference

    def _excused(self, part: Part, path: str, consents: list[tuple[str, str]]) -> Part:
        """A part whose change is consented to: it holds whatever it is."""
        reference = next((said for pattern, said in consents if matches(pattern, path)), "")
        if not reference:
            return part
        yes = self.scope.bank.flag(True)
        return replace(part, text=f"{part.text}, free by consent {reference}", holds=yes, margin=None, scale=None)

    # --- counting ----------------------------------------------------------------------------------------------------

    def _counted(self, flags: list[Term]) -> Part:
        bank, allowed = self.scope.bank, self.wanted.allowed
        assert allowed is not None
        one, none = bank.number(1), bank.number(0)
        changes = [bank.branch(opposite(self.scope, flag), one, none) for flag in flags]
        total = reduce(lambda so_far, more: self._make(add, so_far, more), changes)
        limit = bank.number(allowed)
        return Part(
            "frozen", f"changes of {', '.join(item.text for item in self.wanted.paths)}",
            self._make(at_most, total, limit), self._make(subtract, limit, total), unit=find_unit("1"), value=total,
            limit=limit, scale=limit if allowed else None, sense="at most", span=self.wanted.span, counted=True,
        )  # fmt: skip

    def _make(self, operation: Operation, *terms: Term) -> Term:
        made = self.scope.apply(operation, terms, None)
        assert made is not None
        return made


def _same_node(now: LeafNode | Span | None, before: LeafNode | Span | None) -> bool:
    """True where two leaves are written alike, wherever they stand, or nothing is stated in both."""
    if now is None or before is None or isinstance(now, Span) or isinstance(before, Span):
        return type(now) is type(before)
    return _text(now) == _text(before)


def _text(node: Node) -> object:
    if isinstance(node, Located):
        return node.text
    if isinstance(node, Mapping):
        return {entry.key.text: _text(entry.value) for entry in node}
    assert isinstance(node, Sequence)
    return [_text(item) for item in node]
