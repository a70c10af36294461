"""The verbs of the program: the only place that chains the stages.

>>> from rulecheck import check
>>> check  # doctest: +ELLIPSIS
<function check at ...>
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from datetime import date
from fractions import Fraction
from os.path import relpath
from pathlib import Path
from typing import TYPE_CHECKING

from rulecheck.binding.bind import bind, bind_stand_ins
from rulecheck.binding.external import TRACK
from rulecheck.diagnostics import Diagnostic, Faults, Refused
from rulecheck.graph.figures import Graph
from rulecheck.graph.terms import Term
from rulecheck.loading import (
    File,
    Loaded,
    Session,
    load,
    load_books,
    load_design,
    load_ruleset,
    modules_of,
    overlay_of,
    reserve_text,
    reserves_of,
    tracks_of,
    varyings_of,
    with_value,
)
from rulecheck.model.design import Overlay, structure_of
from rulecheck.model.ruleset import SIMPLE, Decision, PhysicsModule
from rulecheck.outcome.results import ClosedFormResult, Report, Workings
from rulecheck.physics.library import Library, library
from rulecheck.physics.solvers import OWN, solver_module
from rulecheck.studies.check import Checker
from rulecheck.studies.reporting import Asked, report

if TYPE_CHECKING:
    from rulecheck.model.value_ranges import Varying
    from rulecheck.outcome.changes import WhatIf
    from rulecheck.outcome.proofreading import Proofreading
    from rulecheck.outcome.travel import HeadroomReport
    from rulecheck.outcome.varied import Varied
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
    trials: int = 0,
    session: Session | None = None,
) -> Report:
    """Check a design file against its rulesets, or those given. Raises `Refused` with every fault.

    `settings` are changes laid over the design (path to text as the file would write it), after the `changes` files;
    `states` lays one state an axis over it; `on` is the evaluation date (default today); `reserve` is room that is
    kept beyond every limit, as a share of it, and replaces the reserves of the house file; `trials` is how many Monte
    Carlo trials at most are held against each first-order uncertainty, none if 0.
    """
    session = session or Session()
    day = session.day = on or date.today()
    loaded = load(session, design, rules, settings, changes, states)
    graph = _bind(loaded, day)
    at_random = None
    if trials:
        # numpy takes longer to load than all the rest: only where trials are asked for.
        from rulecheck.studies.at_random import at_random_of

        at_random = at_random_of(graph, trials)
    checker = Checker(graph, reserves_of(loaded, graph, reserve), _decision(loaded), at_random)
    asked = Asked(day, loaded.changes, reserve_text(loaded.house, reserve))
    return report(checker, loaded.design, loaded.rulesets, asked, session.digests)


def proofread(
    rules: Sequence[File], *, on: date | None = None, listed: bool = False, session: Session | None = None
) -> Proofreading:
    """Hold rule books against themselves, without a design. Raises `Refused` where one of them cannot be read.

    Names, dimensions, limits that contradict or imply each other, conditions that never hold, tables, and the coverage
    of the register of clauses. With `listed` also the effective rule book of the day, rule by rule.
    """
    from rulecheck.studies.proofread import BoundBook, proofreading

    session = session or Session()
    day = session.day = on or date.today()
    faults, books = Faults(), []
    for ruleset in load_books(rules, session):
        modules = modules_of(session, (ruleset,), faults)
        shelf = library(modules, _installed, faults)
        faults.settle()
        books.append(BoundBook(ruleset, bind_stand_ins((ruleset,), day=day, physics=shelf), modules))
    return proofreading(books, day, session.digests, listed=listed)


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
    day = session.day = on or date.today()
    loaded = load(session, design, rules, settings, changes, states, needs_rules=False)
    graph = _bind(loaded, day, _figures_named(loaded, names))
    checker = Checker(graph, reserves_of(loaded, graph, None), _decision(loaded))
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
    day = session.day = on or date.today()
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
    day = session.day = on or date.today()
    loaded = load(session, design, rules, settings, changes, states)
    checker = Checker(_bind(loaded, day), decision=_decision(loaded))
    checker.read_all()
    return travels(checker, loaded.design, names, day)


def vary(
    design: File,
    names: Sequence[str],
    along: Mapping[str, str] | Iterable[tuple[str, str]],
    *,
    rules: Sequence[File] = (),
    settings: Mapping[str, str] | Iterable[tuple[str, str]] = (),
    changes: Sequence[File] = (),
    states: Mapping[str, str] | None = None,
    on: date | None = None,
    session: Session | None = None,
) -> Varied:
    """Margins of rules, figures or whole modules along the values of one input. Raises `Refused` with every fault.

    `along` is a path with its values, such as `{"vehicle.speed": "60..320km/h:20km/h"}` or
    `{"recovery.axle": "front,rear"}`; a second path gives a curve for each of its values. Every value is an exact
    evaluation of its own.
    """
    from rulecheck.studies.varying import Asked as AskedAlong
    from rulecheck.studies.varying import vary as along_values

    session = session or Session()
    day = session.day = on or date.today()
    loaded = load(session, design, rules, settings, changes, states, needs_rules=False)
    first, second = varyings_of(session, loaded, along)
    wanted = _figures_named(loaded, names)
    designs = [loaded.design]
    if second is not None:
        designs = [with_value(loaded.design, second, setting) for setting in second.settings]
    runs = (_run(replace(loaded, design=changed), first, day, wanted) for changed in designs)
    return along_values(AskedAlong(loaded.design, loaded.rulesets, names, day, first, second, loaded.changes), runs)


def _run(loaded: Loaded, varying: Varying, day: date, wanted: Sequence[str]) -> Iterator[Checker]:
    """A checker for each value: on one graph where the value is a number of it, else each bound by itself."""
    from rulecheck.studies.varying import MOST_BOUND, exchanged

    def bound(place: int) -> Checker:
        changed = replace(loaded, design=with_value(loaded.design, varying, varying.settings[place]))
        graph = _bind(changed, day, wanted)
        return Checker(graph, reserves_of(loaded, graph, None), _decision(loaded))

    base = bound(0)
    if varying.unit is not None and varying.path in base.graph.inputs:
        yield from exchanged(base, varying)
        return
    if len(varying.settings) > MOST_BOUND:
        message = f"'{varying.path}' is settled before anything is computed, and has {len(varying.settings)} values"
        advice = f"name at most {MOST_BOUND} values"
        raise Refused([Diagnostic("too-large", message, varying.settings[0].text.span, advice=advice)])
    yield base
    yield from (bound(place) for place in range(1, len(varying.settings)))


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


def _modules(loaded: Loaded) -> tuple[str, ...]:
    """Modules whose figures are compared: all that are known, the lap where the design names a track, the stop where it
    says how slow one ends."""
    asked = {"lap": TRACK, "stop": "vehicle.end_speed"}
    return (*_library(loaded).names, *(name for name in OWN if asked[name] in loaded.design.leaves))


def _column(loaded: Loaded, base: Loaded, change: Change, day: date) -> Column:
    from rulecheck.studies.whatif import Column

    checker = _checker(loaded, day)
    name = ", ".join(Path(path).name.removesuffix(".change.yaml") for path in change.changes)
    structural = structure_of(loaded.design) != structure_of(base.design)
    return Column(name or "change", loaded.changes, checker, structural, loaded.design)


def _checker(loaded: Loaded, day: date) -> Checker:
    """A design judged with every physics figure and the reserves of the house file."""
    graph = _bind(loaded, day, _modules(loaded))
    return Checker(graph, reserves_of(loaded, graph, None), _decision(loaded))


def _decision(loaded: Loaded) -> Decision:
    """The decision rule of the house, for rules that have none of their own."""
    return (loaded.house.decision if loaded.house else None) or SIMPLE


def _library(loaded: Loaded) -> Library:
    """The physics modules of a question. Raises `Refused` where names of theirs clash."""
    faults = Faults()
    found = library(loaded.modules, _installed, faults)
    faults.settle()
    return found


def _installed(name: str) -> PhysicsModule | None:
    """A solver of ours, else what an installed package brings: a module or a solver."""
    if name in OWN:
        return solver_module(name)
    # Looking through installed packages takes long: only for a name that nothing else has.
    from rulecheck.physics.installed import installed_module

    return installed_module(name) or solver_module(name)


def _figures_named(loaded: Loaded, names: Sequence[str]) -> list[str]:
    """Those of the names that are physics figures or modules."""
    known = {name for book in loaded.rulesets for name in (*book.rules, *book.derived)}
    shelf = _library(loaded)
    return [
        name
        for name in names
        if (prefix := name.partition(".")[0]) in shelf.names or (name not in known and shelf.module(prefix))
    ]


def _bind(loaded: Loaded, day: date, figures: Sequence[str] = ()) -> Graph:
    shelf = _library(loaded)
    return bind(
        loaded.design,
        loaded.rulesets,
        day=day,
        physics=shelf,
        validity_required=loaded.house is not None and loaded.house.validity == "required",
        also_known=loaded.also_known,
        figures=figures,
        tracks=tracks_of(loaded.workspace, loaded.design),
    )


__all__ = ["Session", "check", "headroom", "load_design", "load_ruleset", "proofread", "vary", "whatif", "workings"]
