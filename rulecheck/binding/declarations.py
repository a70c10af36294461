"""What rulesets declare, held against the core vocabulary and against each other."""

from __future__ import annotations

from rulecheck.binding.functions import NAMES
from rulecheck.binding.inputs import unit_of
from rulecheck.binding.names import DIRECTIONS
from rulecheck.binding.scope import Scope
from rulecheck.model.core_table import CORE
from rulecheck.model.ruleset import Ruleset
from rulecheck.model.vocabulary import Entry, Vocabulary
from rulecheck.quantity.dimension_names import name_of
from rulecheck.reading.nearest import nearest

WORDS = ("pi", "on", *DIRECTIONS)


def check_declarations(scope: Scope, rulesets: tuple[Ruleset, ...]) -> None:
    """Note every input that is declared with an unknown unit, or otherwise than it is known already."""
    known = Vocabulary(CORE)
    for ruleset in rulesets:
        for entry in ruleset.inputs:
            _declared(scope, known, entry)
        known = known.extended(ruleset.inputs)
        _names(scope, ruleset)


def _declared(scope: Scope, known: Vocabulary, entry: Entry) -> None:
    unit = unit_of(entry, scope)
    completes = (entry.definition or entry.basis) and known.entry(entry.path) is not None
    if entry.kind in ("number", "curve", "map", "signal") and not entry.unit and not completes:
        scope.fault(
            "missing-key", f"the {entry.kind} '{entry.path}' has no unit", entry.span, expected='unit: mm, or "1"'
        )
    if entry.kind == "item" and entry.of:
        holder = scope.shared.vocabulary.entry(entry.of)
        if holder is None or holder.kind != "collection":
            collections = [other.path for other in scope.shared.vocabulary if other.kind == "collection"]
            told = f"'{entry.path}' is an item of '{entry.of}', which is no collection"
            scope.fault("unknown-name", told, entry.span, advice=nearest(entry.of, collections))
    before = known.entry(entry.path)
    if before is None:
        if known.knows_inside(entry.path) and entry.kind != "collection":
            scope.fault("name-taken", f"'{entry.path}' holds other inputs already", entry.span, advice="rename it")
    elif before.kind != entry.kind:
        scope.fault("kind-mismatch", f"'{entry.path}' is a {before.kind} already, not a {entry.kind}", entry.span)
    elif entry.unit and before.unit and unit.dimension != (was := unit_of(before, scope)).dimension:
        told = f"'{entry.path}' is {name_of(was.dimension)} already, and is declared as {name_of(unit.dimension)}"
        scope.fault("wrong-dimension", told, entry.span, expected=f"a unit such as {before.unit}")


def _names(scope: Scope, ruleset: Ruleset) -> None:
    """A figure or table that could never be read by its name."""
    spans = {name: figure.span for name, figure in ruleset.derived.items()}
    spans.update((name, table.span) for name, table in ruleset.tables.items())
    for name, span in spans.items():
        called = name in ruleset.tables or ruleset.derived[name].loop or ruleset.derived[name].of
        taken = name in WORDS or (called and name in NAMES) or scope.shared.vocabulary.entry(name) is not None
        if taken:
            scope.fault(
                "name-taken", f"'{name}' has a meaning already, and cannot name a figure or table", span,
                advice="give it another name",
            )  # fmt: skip
    for name, members in ruleset.lists.items():
        if name in WORDS or scope.shared.vocabulary.entry(name) is not None:
            place = members[0].span if members else None
            scope.fault("name-taken", f"'{name}' has a meaning already, and cannot name a list", place)
