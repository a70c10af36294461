"""Ruleset files to `Ruleset`, with what they extend merged in."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from typing import Any

from rulecheck.diagnostics import Faults, Refused, Related, Span
from rulecheck.model.clauses import read_answers, read_clauses
from rulecheck.model.consequences import read_consequence
from rulecheck.model.decisions import read_decision, read_scrutineer
from rulecheck.model.declarations import declared_entries, needed_states, own_units
from rulecheck.model.edge import BranchShape, EvidenceShape, FigureShape, RulesetShape, RuleShape, shaped
from rulecheck.model.envelope_reader import read_envelope
from rulecheck.model.examples import read_examples
from rulecheck.model.frozen import read_frozen
from rulecheck.model.groups import group_conditions
from rulecheck.model.layers import layered
from rulecheck.model.names import check_name
from rulecheck.model.records import read_record
from rulecheck.model.rule_parts import read_states, read_unless
from rulecheck.model.ruleset import (
    Alternative,
    Book,
    Decision,
    EvidenceWanted,
    Formula,
    Rule,
    Ruleset,
    Standing,
    Window,
)
from rulecheck.model.rulings import read_ruling
from rulecheck.model.table_reader import read_table
from rulecheck.model.zone_reader import place_conditions, read_template, read_zone
from rulecheck.quantity.reading_values import read_day
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node
from rulecheck.reading.workspace import Workspace
from rulecheck.reading.yaml_reader import read_yaml

EXPIRING = frozenset(("certificate", "homologation", "licence"))
STANDINGS = ("shall", "should", "may", "note")
VALIDITIES = ("noted", "required")
EMPTY = ("open", "complies", "breach", "not applicable")
MOST_LAYERS = 20
_SHARING = "rules, derived figures, tables, lists, zones and templates"


def read_ruleset(workspace: Workspace, file: str, asked: Span | None = None, day: date | None = None) -> Ruleset:
    """Read a ruleset and all that it extends, as `layered` on the day. Raises `Refused` with the faults of all files."""
    return _read(workspace, file, asked, (), day)


def _read(workspace: Workspace, file: str, asked: Span | None, above: tuple[str, ...], day: date | None) -> Ruleset:
    faults = Faults()
    if file in above or len(above) >= MOST_LAYERS:
        faults.add("cycle", f"rulesets extend each other: {' extends '.join((*above, file))}", asked)
        faults.settle()
    root = read_yaml(workspace, file, asked)
    shape = shaped(RulesetShape, root, faults)
    bases: list[Ruleset] = []
    for reference in _references(root.get("extends")):
        try:
            target = workspace.resolve(reference.text, file, reference.span)
            bases.append(_read(workspace, target, reference.span, (*above, file), day))
        except Refused as refused:
            faults.take(refused)
    faults.settle()
    assert shape is not None
    made = layered(bases, _Reader(file, root, shape, faults).ruleset(), root.get("withdrawn"), faults, day)
    decision = read_decision(root.get("decision"), faults)
    faults.settle()
    return made if decision is None else _decided(made, decision)


def _decided(ruleset: Ruleset, decision: Decision) -> Ruleset:
    """Every rule that has no decision rule of its own takes that of the rule book, also what it extends."""
    rules = {
        name: replace(rule, decision=decision) if rule.decision is None else rule
        for name, rule in ruleset.rules.items()
    }
    return replace(ruleset, rules=rules)


def _references(node: Node | None) -> tuple[Located, ...]:
    if isinstance(node, Located):
        return (node,)
    if node is None or isinstance(node, Mapping):
        return ()
    return tuple(item for item in node if isinstance(item, Located))


class _Reader:
    """Turns the shape of one file into frozen values, with the place of each name."""

    def __init__(self, file: str, root: Mapping, shape: RulesetShape, faults: Faults) -> None:
        self.file, self.root, self.shape, self.faults = file, root, shape, faults
        self.units = own_units(shape.units or {}, faults)

    def key(self, *path: str) -> Located:
        """The key at a path of the file."""
        node: Node | None = self.root
        for part in path[:-1]:
            node = node.get(part) if isinstance(node, Mapping) else None
        found = node.key(path[-1]) if isinstance(node, Mapping) else None
        assert found is not None
        return found

    def named(self, section: str, entries: dict[str, Any] | None) -> list[tuple[str, Located, Any]]:
        """Entries of a section whose keys are fit to be names."""
        pairs = [(name, self.key(section, name), value) for name, value in (entries or {}).items()]
        return [pair for pair in pairs if check_name(pair[1], self.faults)]

    def ruleset(self) -> Ruleset:
        shape, faults = self.shape, self.faults
        units = self.units
        groups = group_conditions(self.root.get("groups"), shape.rules or {}, faults)
        rules = {name: self.rule(name, key, value, groups) for name, key, value in self.named("rules", shape.rules)}
        self._one_name_space()
        self._said(shape.ruleset, "the name of the rule book")
        return Ruleset(
            file=self.file,
            name=shape.ruleset.text,
            edition=text(shape.edition),
            note=text(shape.note),
            valid=window(shape.valid, faults),
            units=units,
            inputs=declared_entries(
                self.root.get("inputs"), shape.inputs or {}, shape.definitions or {}, self.file, faults
            ),
            tables={n: read_table(n, key, value, faults) for n, key, value in self.named("tables", shape.tables)},
            lists={name: self._list(name, key, value) for name, key, value in self.named("lists", shape.lists)},
            derived={n: formula_of(n, key, value) for n, key, value in self.named("derived", shape.derived)},
            needed=needed_states(self.root.get("states_needed"), faults),
            rules=rules,
            withdrawn=(),
            books=(Book(shape.ruleset.text, text(shape.edition), self.file),),
            span=shape.ruleset.span,
            zones=self._nodes("zones", shape.zones, read_zone),
            templates=self._nodes("templates", shape.templates, read_template),
            validity=self._word(shape.validity, VALIDITIES, "noted"),
            physics=_references(self.root.get("physics")),
            clauses=read_clauses(self.root.get("clauses"), faults),
        )

    def _nodes(self, section: str, entries: dict[str, Any] | None, read: Any) -> dict[str, Any]:
        """The entries of a section that is read from its nodes; those at fault are left out."""
        node = self.root.get(section)
        made = {}
        for name, key, _ in self.named(section, entries):
            inner = _inside(node, name)
            if inner is not None:
                made[name] = read(name, key, inner, self.faults)
        return {name: value for name, value in made.items() if value is not None}

    def _list(self, name: str, key: Located, members: list[Located]) -> tuple[Located, ...]:
        if not members:
            self.faults.add("bad-structure", f"list '{name}' has no members", key.span, expected="[a, b]")
        return tuple(members)

    def _said(self, where: Located | None, what: str) -> None:
        """Note a fault where a leaf is there and empty."""
        if where is not None and not where.text:
            self.faults.add("bad-value", f"{what} is empty", where.span, advice="write it, or take the key out")

    def _one_name_space(self) -> None:
        """Rules, derived figures, tables, lists, zones and templates share one name space."""
        seen: dict[str, Located] = {}
        for section in ("derived", "tables", "lists", "zones", "templates", "rules"):
            node = self.root.get(section)
            for entry in node if isinstance(node, Mapping) else ():
                other = seen.setdefault(entry.key.text, entry.key)
                if other is not entry.key:
                    self.faults.add(
                        "name-taken",
                        f"'{entry.key.text}' is used twice: {_SHARING} share one name space",
                        entry.key.span,
                        advice="give one of them another name",
                        related=(Related("the other one is here", other.span),),
                    )

    def rule(self, name: str, key: Located, shape: RuleShape, groups: dict[str, tuple[Located, ...]]) -> Rule:
        node = self.root.get("rules")
        inner = node.get(name) if isinstance(node, Mapping) else None
        own = self.alternative("", shape, inner)
        branches = tuple(self._branch(name, label, branch) for label, branch in (shape.branches or {}).items())
        standing: Standing = self._word(shape.standing, STANDINGS, "shall")  # type: ignore[assignment]
        if standing in ("shall", "should") and not branches and not asks(shape):
            self.faults.add(
                "missing-key",
                f"rule '{name}' asks for nothing",
                key.span,
                expected="require, inside, outside, branches, evidence, record, frozen or judgement",
            )
        return Rule(
            name=name,
            span=key.span,
            ruleset=self.file,
            clause=text(shape.clause),
            title=text(shape.title),
            note=text(shape.note),
            standing=standing,
            own=replace(own, when=None),
            branches=branches,
            each=self._each(shape.each, name, key),
            empty=self._word(shape.empty, EMPTY, "open"),  # type: ignore[arg-type]
            states=read_states(shape.states, key, self.faults),
            when=(*groups.get(name, ()), *((shape.when,) if shape.when else ())),
            unless=read_unless(shape.unless, inner, self.faults),
            envelope=read_envelope(_inside(inner, "envelope"), self.faults),
            scale=shape.scale,
            valid=window(shape.valid, self.faults),
            measure=_inside(inner, "measure"),
            scrutineer=read_scrutineer(_inside(inner, "scrutineer"), self.units, self.faults),
            decision=read_decision(_inside(inner, "decision"), self.faults),
            consequence=read_consequence(_inside(inner, "consequence"), self.faults),
            answers=read_answers(_inside(inner, "answers"), self.faults),
            examples=read_examples(_inside(inner, "examples"), self.faults),
        )

    def _word(self, where: Located | None, known: tuple[str, ...], default: str) -> str:
        if where is None or where.text in known:
            return where.text if where else default
        self.faults.add(
            "unknown-choice",
            f"'{where.text}' is not one of the words here",
            where.span,
            expected=" or ".join(known),
            advice=nearest(where.text, known),
        )
        return default

    def _each(self, each: Any, rule: str, key: Located) -> tuple[Located, ...]:
        if isinstance(each, list) and not each:
            self.faults.add(
                "bad-structure", f"'each' of rule '{rule}' names no collection", key.span, expected="each: t in tyres"
            )
        return (each,) if isinstance(each, Located) else tuple(each or ())

    def _branch(self, rule: str, label: str, shape: BranchShape) -> Alternative:
        if not asks(shape):
            self.faults.add(
                "missing-key",
                f"branch '{label}' of rule '{rule}' asks for nothing",
                self.key("rules", rule, "branches", label).span,
                expected="require, inside, outside, evidence, record, frozen or judgement",
            )
        node = self.root.get("rules")
        for part in (rule, "branches", label):
            node = _inside(node, part)
        return self.alternative(label, shape, node)

    def alternative(self, name: str, shape: BranchShape, node: Node | None) -> Alternative:
        """The conditions of a rule or branch."""
        self._said(shape.judgement, "the question")
        wanted = self._evidence(shape.evidence) if shape.evidence else None
        places = place_conditions(node, self.faults)
        record = read_record(_inside(node, "record"), self.units, self.faults)
        kept = read_frozen(_inside(node, "frozen"), self.units, self.faults)
        ruling = read_ruling(node, self.units, self.faults)
        return Alternative(name, shape.require, wanted, shape.judgement, shape.when, places, record, kept, ruling)

    def _evidence(self, shape: EvidenceShape) -> EvidenceWanted:
        self._said(shape.kind, "the kind of document")
        self._said(shape.name, "the name of the document")
        expires = shape.kind.text in EXPIRING
        if shape.expires is not None:
            expires = self._word(shape.expires, ("yes", "no"), "no") == "yes"
        return EvidenceWanted(shape.kind, shape.name, shape.due, expires)


def asks(shape: BranchShape) -> bool:
    """True where a rule or branch has a condition of its own."""
    plain = shape.require or shape.evidence or shape.judgement
    return (
        bool(plain)
        or shape.record is not None
        or shape.frozen is not None
        or any(getattr(shape, word) is not None for word in PLACES)
    )


PLACES = ("inside", "outside", "passes", "stops", "sight", "cover")


def _inside(node: Node | None, key: str) -> Node | None:
    return node.get(key) if isinstance(node, Mapping) else None


def text(where: Located | None) -> str:
    """The text of a leaf that may be left out."""
    return where.text if where else ""


def formula_of(name: str, key: Located, shape: FigureShape) -> Formula:
    """A named formula."""
    return Formula(
        name,
        key.span,
        shape.formula,
        shape.unit,
        text(shape.meaning),
        text(shape.source),
        shape.valid,
        shape.loop,
        shape.of,
        shape.solve,
        tuple(shape.between or ()),
    )


def window(shape: dict[str, Located] | None, faults: Faults) -> Window:
    """`{from, until}` as a window."""
    days = {}
    for key, where in (shape or {}).items():
        if key not in ("from", "until"):
            faults.add("unknown-key", f"a window has no '{key}'", where.span, expected="from or until")
        else:
            days[key] = read_day(where, faults)
    first, last = days.get("from"), days.get("until")
    if first is not None and last is not None and last < first:
        place = (shape or {})["until"].span
        faults.add("bad-date", "this window ends before it begins", place, expected=f"{first} or a later day")
    return Window(first, last)
