"""The verbs of the program: the only place that chains the stages.

>>> from rulecheck import check
>>> check  # doctest: +ELLIPSIS
<function check at ...>
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from fractions import Fraction
from os.path import relpath
from pathlib import Path
from typing import TYPE_CHECKING

from rulecheck.binding.bind import bind
from rulecheck.diagnostics import Faults
from rulecheck.graph.figures import Graph
from rulecheck.graph.terms import Term
from rulecheck.loading import (
    File,
    Loaded,
    Session,
    load,
    load_design,
    load_ruleset,
    overlay_of,
    reserve_text,
    reserves_of,
)
from rulecheck.model.design import Design, Overlay
from rulecheck.outcome.results import ClosedFormResult, Report, Workings
from rulecheck.physics.modules import BUILT_IN, built_in
from rulecheck.reading.nodes import Located
from rulecheck.studies.check import Checker
from rulecheck.studies.reporting import Asked, report

if TYPE_CHECKING:
    from rulecheck.outcome.changes import WhatIf
    from rulecheck.outcome.travel import HeadroomReport
    from rulecheck.studies.whatif import Column


def check(
    design: File,
    *,
    rules: Sequence[File] = (),
    settings: Mapping[str, str] | Iterable[tuple[str, str]] = (),
    changes: Sequence[File] = (),
    states: Mapping[str, str] | None = None,
    on: date | None = None,
    reserve: Fraction | None = None,
    session: Session | None = None,
) -> Report:
    """Check a design file against its rulesets, or those given. Raises `Refused` with every fault.

    `settings` are changes laid over the design (path to text as the file would write it), after the `changes` files;
    `states` lays one state an axis over it; `on` is the evaluation date (default today); `reserve` is room that is
    kept beyond every limit, as a share of it, and replaces the reserves of the house file.
    """
    session = session or Session()
    day = on or date.today()
    loaded = load(session, design, rules, settings, changes, states)
    graph = _bind(loaded, day)
    checker = Checker(graph, reserves_of(loaded, graph, reserve))
    decision = loaded.house.decision if loaded.house else "simple"
    asked = Asked(day, loaded.changes, reserve_text(loaded.house, reserve), decision)
    return report(checker, loaded.design, loaded.rulesets, asked, session.digests)


def workings(
    design: File,
    names: Sequence[str],
    *,
    rules: Sequence[File] = (),
    settings: Mapping[str, str] | Iterable[tuple[str, str]] = (),
    changes: Sequence[File] = (),
    states: Mapping[str, str] | None = None,
    on: date | None = None,
    closed_form: bool = False,
    solve_for: str = "",
    session: Session | None = None,
) -> Workings:
    """The calculation behind rules, derived or physics figures, or whole physics modules. Raises `Refused`.

    With `closed_form` each also comes as one formula of the inputs with its derivatives, solved for `solve_for`
    where it can be.
    """
    # Studies beyond `check` are loaded by the verb that needs them, so that `check` starts sooner.
    from rulecheck.studies.workings import workings_of

    session = session or Session()
    day = on or date.today()
    loaded = load(session, design, rules, settings, changes, states, needs_rules=False)
    graph = _bind(loaded, day, [name for name in names if name.partition(".")[0] in BUILT_IN])
    checker = Checker(graph, reserves_of(loaded, graph, None))
    describe = None
    if closed_form or solve_for:
        # sympy takes longer to load than all the rest: only where a closed form is asked for.
        from rulecheck.studies.closed_form import closed_form as form

        def describe(term: Term) -> ClosedFormResult:
            return form(graph, term, solve_for)

    return workings_of(checker, loaded.design, loaded.rulesets, names, day, describe=describe)


@dataclass(frozen=True, slots=True)
class Change:
    """One change to try: change files first, then settings (path to text)."""

    changes: tuple[File, ...] = ()
    settings: tuple[tuple[str, str], ...] = ()


def whatif(
    design: File,
    columns: Sequence[Change],
    *,
    rules: Sequence[File] = (),
    states: Mapping[str, str] | None = None,
    on: date | None = None,
    session: Session | None = None,
) -> WhatIf:
    """Every margin and figure before and after each change. Raises `Refused` with every fault.

    A change is laid over the design as it stands; several changes stand side by side. What lies inside a reserve of
    the house file is `tight`, as in `check`.
    """
    from rulecheck.studies.whatif import what_if

    session = session or Session()
    day = on or date.today()
    base = load(session, design, rules, (), (), states)
    made = []
    for change in columns:
        loaded = load(session, design, rules, change.settings, change.changes, states)
        made.append(_column(loaded, base, change, day))
    return what_if(_checker(base, day), made, base.design, base.rulesets, day)


def headroom(
    design: File,
    names: Sequence[str] = (),
    *,
    rules: Sequence[File] = (),
    settings: Mapping[str, str] | Iterable[tuple[str, str]] = (),
    changes: Sequence[File] = (),
    states: Mapping[str, str] | None = None,
    on: date | None = None,
    session: Session | None = None,
) -> HeadroomReport:
    """How far each input may move, alone, before the first rule breaks. Raises `Refused` with every fault.

    `names` are paths of numbers; without them every number that a rule reads is tried.
    """
    from rulecheck.studies.headroom import headroom as travels

    session = session or Session()
    day = on or date.today()
    loaded = load(session, design, rules, settings, changes, states)
    checker = Checker(_bind(loaded, day))
    checker.read_all()
    return travels(checker, loaded.design, names, day)


def kept_variant(design: File, columns: Sequence[Change], target: File, session: Session) -> str:
    """One change as the text of a variant file that changes the design. Raises `Refused`."""
    from rulecheck.model.variant_writer import variant_text

    faults = Faults()
    if len(columns) != 1:
        faults.add(
            "usage",
            f"--keep writes one change, and there are {len(columns)}",
            advice="give one --change, or --set alone",
        )
    overlay = Overlay()
    for column in columns[:1]:
        overlay, _ = overlay_of(session, column.settings, column.changes, faults)
    faults.settle()
    reference = Path(relpath(Path(design).resolve(), Path(target).resolve().parent)).as_posix()
    return variant_text(reference, overlay)


def _column(loaded: Loaded, base: Loaded, change: Change, day: date) -> Column:
    from rulecheck.studies.whatif import Column

    checker = _checker(loaded, day)
    name = ", ".join(Path(path).name.removesuffix(".change.yaml") for path in change.changes)
    structural = _structure(loaded.design) != _structure(base.design)
    return Column(name or "change", loaded.changes, checker, structural)


def _checker(loaded: Loaded, day: date) -> Checker:
    """A design judged with every physics figure and the reserves of the house file."""
    graph = _bind(loaded, day, BUILT_IN)
    return Checker(graph, reserves_of(loaded, graph, None))


def _structure(design: Design) -> tuple[object, ...]:
    """What a design has beside its numbers: names, and the texts of leaves that are no numbers."""
    words = {
        path: node for path, node in design.leaves.items() if isinstance(node, Located) and node.text[:1].isalpha()
    }
    return (sorted(design.leaves), sorted((path, node.text) for path, node in words.items()))


def _bind(loaded: Loaded, day: date, figures: Sequence[str] = ()) -> Graph:
    return bind(
        loaded.design,
        loaded.rulesets,
        day=day,
        physics=built_in,
        physics_names=BUILT_IN,
        also_known=loaded.also_known,
        figures=figures,
    )


__all__ = ["Session", "check", "headroom", "load_design", "load_ruleset", "whatif", "workings"]
