"""Ruleset files to `Ruleset`, with what they extend merged in."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

from rulecheck.diagnostics import Faults, Refused, Related, Span
from rulecheck.model.declarations import declared_entries, needed_states, own_units
from rulecheck.model.edge import BranchShape, EvidenceShape, FigureShape, RulesetShape, RuleShape, TableShape, shaped
from rulecheck.model.names import check_name
from rulecheck.model.ruleset import (
    Alternative,
    Book,
    EvidenceWanted,
    Formula,
    Origin,
    Row,
    Rule,
    Ruleset,
    Standing,
    Table,
    Unless,
    Window,
    Withdrawn,
)
from rulecheck.quantity.reading_values import read_day
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node
from rulecheck.reading.workspace import Workspace
from rulecheck.reading.yaml_reader import read_yaml

EXPIRING = frozenset(("certificate", "homologation", "licence"))
STANDINGS = ("shall", "should", "may", "note")
EMPTY = ("open", "complies", "breach", "not applicable")
_TESTS = ("up_to", "below", "is", "when", "otherwise")
_MOST_LAYERS = 20


def read_ruleset(workspace: Workspace, file: str, asked: Span | None = None) -> Ruleset:
    """Read a ruleset and all that it extends. Raises `Refused` with the faults of all these files."""
    return _read(workspace, file, asked, ())


def _read(workspace: Workspace, file: str, asked: Span | None, above: tuple[str, ...]) -> Ruleset:
    faults = Faults()
    if file in above or len(above) >= _MOST_LAYERS:
        faults.add("cycle", f"rulesets extend each other: {' extends '.join((*above, file))}", asked)
        faults.settle()
    root = read_yaml(workspace, file, asked)
    shape = shaped(RulesetShape, root, faults)
    bases: list[Ruleset] = []
    for reference in _references(root.get("extends")):
        try:
            target = workspace.resolve(reference.text, file, reference.span)
            bases.append(_read(workspace, target, reference.span, (*above, file)))
        except Refused as refused:
            faults.take(refused)
    faults.settle()
    assert shape is not None
    ruleset = _Reader(file, root, shape, faults).ruleset()
    for base in reversed(bases):
        ruleset = _merged(base, ruleset, root, faults)
    faults.settle()
    return ruleset


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
        units = own_units(shape.units or {}, faults)
        groups = self._group_conditions()
        rules = {name: self.rule(name, key, value, groups) for name, key, value in self.named("rules", shape.rules)}
        self._one_name_space()
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
            tables={name: self.table(name, key, value) for name, key, value in self.named("tables", shape.tables)},
            lists={name: tuple(value) for name, _, value in self.named("lists", shape.lists)},
            derived={n: formula_of(n, key, value) for n, key, value in self.named("derived", shape.derived)},
            needed=needed_states(self.root.get("states_needed"), faults),
            rules=rules,
            withdrawn=(),
            books=(Book(shape.ruleset.text, text(shape.edition), self.file),),
            span=shape.ruleset.span,
        )

    def _one_name_space(self) -> None:
        """Rules, derived figures, tables and lists share one name space."""
        seen: dict[str, Located] = {}
        for section in ("derived", "tables", "lists", "rules"):
            node = self.root.get(section)
            for entry in node if isinstance(node, Mapping) else ():
                other = seen.setdefault(entry.key.text, entry.key)
                if other is not entry.key:
                    self.faults.add(
                        "name-taken",
                        f"'{entry.key.text}' is used twice: rules, derived figures, tables and lists share one name space",
                        entry.key.span,
                        advice="give one of them another name",
                        related=(Related("the other one is here", other.span),),
                    )

    def _group_conditions(self) -> dict[str, tuple[Located, ...]]:
        """Conditions that groups lay on rules, by rule."""
        conditions: dict[str, tuple[Located, ...]] = {}
        node = self.root.get("groups")
        for entry in node if isinstance(node, Mapping) else ():
            group = entry.value
            when = group.get("when") if isinstance(group, Mapping) else None
            rules = group.get("rules") if isinstance(group, Mapping) else None
            if not isinstance(when, Located) or rules is None or isinstance(rules, Mapping):
                self.faults.add(
                    "bad-structure",
                    f"group '{entry.key.text}' needs a condition and its rules",
                    entry.key.span,
                    expected="{when: condition, rules: [names]}",
                )
                continue
            for rule in (rules,) if isinstance(rules, Located) else rules:
                if not isinstance(rule, Located) or rule.text not in (self.shape.rules or {}):
                    name = rule.text if isinstance(rule, Located) else ""
                    self.faults.add(
                        "unknown-name",
                        f"there is no rule '{name}' in this file",
                        rule.span,
                        advice=nearest(name, self.shape.rules or ()),
                    )
                else:
                    conditions[rule.text] = (*conditions.get(rule.text, ()), when)
        return conditions

    def rule(self, name: str, key: Located, shape: RuleShape, groups: dict[str, tuple[Located, ...]]) -> Rule:
        node = self.root.get("rules")
        inner = node.get(name) if isinstance(node, Mapping) else None
        own = self.alternative("", shape)
        branches = tuple(self.alternative(label, branch) for label, branch in (shape.branches or {}).items())
        standing: Standing = self._word(shape.standing, STANDINGS, "shall")  # type: ignore[assignment]
        if standing in ("shall", "should") and not branches and not (own.require or own.evidence or own.judgement):
            self.faults.add(
                "missing-key",
                f"rule '{name}' asks for nothing",
                key.span,
                expected="require, branches, evidence or judgement",
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
            each=(shape.each,) if isinstance(shape.each, Located) else tuple(shape.each or ()),
            empty=self._word(shape.empty, EMPTY, "open"),  # type: ignore[arg-type]
            states=self._states(shape.states),
            when=(*groups.get(name, ()), *((shape.when,) if shape.when else ())),
            unless=self._unless(shape.unless, inner),
            scale=shape.scale,
            valid=window(shape.valid, self.faults),
            measure=_inside(inner, "measure"),
            scrutineer=_inside(inner, "scrutineer"),
            examples=tuple(_inside(inner, "examples") or ()),  # type: ignore[arg-type]
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

    def alternative(self, name: str, shape: BranchShape) -> Alternative:
        wanted = self._evidence(shape.evidence) if shape.evidence else None
        return Alternative(name, shape.require, wanted, shape.judgement, shape.when)

    def _evidence(self, shape: EvidenceShape) -> EvidenceWanted:
        expires = shape.kind.text in EXPIRING
        if shape.expires is not None:
            expires = self._word(shape.expires, ("yes", "no"), "no") == "yes"
        return EvidenceWanted(shape.kind, shape.name, shape.due, expires)

    def _states(self, node: Any) -> tuple[tuple[str, tuple[Located, ...]], ...] | None:
        if node is None:
            return None
        if isinstance(node, Located):
            if node.text != "every":
                self.faults.add(
                    "bad-value",
                    f"'{node.text}' does not say which states",
                    node.span,
                    expected="every, or {axis: every} or {axis: [names]}",
                )
            return ()
        chosen = []
        for axis, names in node.items():
            if isinstance(names, Located):
                chosen.append((axis, () if names.text == "every" else (names,)))
            else:
                chosen.append((axis, tuple(names)))
        return tuple(chosen)

    def _unless(self, shape: dict[str, Located] | None, inner: Node | None) -> Unless | None:
        if shape is None:
            return None
        if "when" not in shape or set(shape) - {"when", "because"}:
            node = _inside(inner, "unless")
            self.faults.add(
                "bad-structure",
                "an exemption has a condition and a reason",
                node.span if node else None,
                expected="{when: condition, because: text}",
            )
            return None
        return Unless(shape["when"], text(shape.get("because")))

    def table(self, name: str, key: Located, shape: TableShape) -> Table:
        over = (shape.over,) if isinstance(shape.over, Located) else tuple(shape.over)
        if (shape.steps is None) == (shape.linear is None):
            self.faults.add(
                "bad-structure",
                f"table '{name}' has either steps or linear rows",
                key.span,
                expected="steps: [...] or linear: [...]",
            )
        rows = tuple(row for step in shape.steps or () if (row := self._row(name, key, step)) is not None)
        linear = []
        for pair in shape.linear or ():
            if len(pair) == 2:
                linear.append((pair[0], pair[1]))
            else:
                self.faults.add(
                    "bad-structure",
                    f"a linear row of table '{name}' is a key and a value",
                    pair[0].span if pair else key.span,
                    expected="[key, value]",
                )
        return Table(name, key.span, over, rows, tuple(linear), shape.unit, text(shape.meaning))

    def _row(self, table: str, key: Located, step: dict[str, Located]) -> Row | None:
        if set(step) == {"otherwise"}:
            return Row("otherwise", None, step["otherwise"])
        tests = [test for test in step if test in _TESTS]
        if len(tests) != 1 or "value" not in step or len(step) != 2:
            place = next(iter(step.values())).span if step else key.span
            self.faults.add(
                "bad-structure",
                f"a row of table '{table}' has one test and a value",
                place,
                expected="{up_to: key, value: value}, or below, is, when; or {otherwise: value}",
            )
            return None
        return Row(tests[0], step[tests[0]], step["value"])


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
    )


def window(shape: dict[str, Located] | None, faults: Faults) -> Window:
    """`{from, until}` as a window."""
    days = {}
    for key, where in (shape or {}).items():
        if key not in ("from", "until"):
            faults.add("unknown-key", f"a window has no '{key}'", where.span, expected="from or until")
        else:
            days[key] = read_day(where, faults)
    return Window(days.get("from"), days.get("until"))


def _merged(base: Ruleset, top: Ruleset, root: Mapping, faults: Faults) -> Ruleset:
    """What extends laid over what is extended; replaced and withdrawn rules keep their origin."""
    rules = dict(base.rules)
    withdrawn = list(base.withdrawn)
    for name, rule in top.rules.items():
        old = rules.get(name)
        if old is not None:
            before = Origin(old.ruleset, old.span, "replaced")
            rule = replace(rule, history=(*old.history, before))
        rules[name] = rule
    node = root.get("withdrawn")
    for entry in node if isinstance(node, Mapping) else ():
        reason = entry.value.text if isinstance(entry.value, Located) else ""
        if not reason:
            faults.add(
                "quote-this",
                f"'{entry.key.text}' is withdrawn without a reason",
                entry.key.span,
                expected="rule: reason",
                advice="quote a reason that has a comma in it",
            )
            continue
        if entry.key.text in base.rules:
            withdrawn.append(Withdrawn(rules.pop(entry.key.text), reason, entry.key.span))
        elif entry.key.text not in {item.rule.name for item in withdrawn}:
            faults.add(
                "unknown-name",
                f"there is no rule '{entry.key.text}' to withdraw",
                entry.key.span,
                advice=nearest(entry.key.text, base.rules),
            )
    return replace(
        top,
        units={**base.units, **top.units},
        inputs=(*base.inputs, *top.inputs),
        tables={**base.tables, **top.tables},
        lists={**base.lists, **top.lists},
        derived={**base.derived, **top.derived},
        needed={
            axis: {**base.needed.get(axis, {}), **top.needed.get(axis, {})} for axis in {**base.needed, **top.needed}
        },
        rules=rules,
        withdrawn=tuple(withdrawn),
        books=(*base.books, *top.books),
    )
