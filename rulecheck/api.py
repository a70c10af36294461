"""The verbs of the program: the only place that chains the stages.

>>> from rulecheck import check
>>> check  # doctest: +ELLIPSIS
<function check at ...>
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from datetime import date
from fractions import Fraction
from os import PathLike
from os.path import relpath
from pathlib import Path

from rulecheck.binding.bind import bind
from rulecheck.binding.conditions import numeric_parts
from rulecheck.diagnostics import Faults, Refused, Span
from rulecheck.graph.figures import Graph
from rulecheck.graph.terms import Term
from rulecheck.model.design import Design, Overlay, State
from rulecheck.model.design_reader import read_change, read_design
from rulecheck.model.house import has_house, read_house
from rulecheck.model.names import is_name
from rulecheck.model.ruleset import House, Ruleset
from rulecheck.model.ruleset_reader import read_ruleset
from rulecheck.model.variant_writer import variant_text
from rulecheck.outcome.changes import WhatIf
from rulecheck.outcome.results import ClosedFormResult, Report, Workings
from rulecheck.outcome.travel import HeadroomReport
from rulecheck.physics.modules import BUILT_IN, built_in
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.quantity import Quantity
from rulecheck.quantity.reading_values import read_quantity
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located
from rulecheck.reading.workspace import Workspace
from rulecheck.reading.yaml_reader import parse_yaml
from rulecheck.studies.check import Checker, Reserves
from rulecheck.studies.headroom import headroom as travels
from rulecheck.studies.reporting import Asked, report
from rulecheck.studies.whatif import Column, what_if
from rulecheck.studies.workings import workings_of

File = str | PathLike[str]


@dataclass(slots=True)
class Session:
    """Files read for one question: where they lie, and their texts for diagnostics."""

    workspaces: list[Workspace] = field(default_factory=list)
    extra: dict[str, str] = field(default_factory=dict)

    def workspace(self, path: Path) -> Workspace:
        """The workspace of a file; one for each root."""
        made = Workspace.around(path)
        for known in self.workspaces:
            if known.root == made.root:
                return known
        self.workspaces.append(made)
        return made

    @property
    def texts(self) -> dict[str, str]:
        """All texts that were read, by file."""
        return {**self.extra, **{file: text for space in self.workspaces for file, text in space.texts.items()}}

    @property
    def digests(self) -> dict[str, str]:
        """SHA-256 of every file that was read."""
        return {file: digest for space in self.workspaces for file, digest in space.digests.items()}


def load_design(path: File, *, session: Session | None = None) -> Design:
    """Read a design or a variant. Raises `Refused` with every fault of the files read."""
    workspace = (session or Session()).workspace(Path(path))
    return read_design(workspace, workspace.name(Path(path)))


def load_ruleset(path: File, *, session: Session | None = None) -> Ruleset:
    """Read a ruleset with what it extends. Raises `Refused` with every fault of the files read."""
    workspace = (session or Session()).workspace(Path(path))
    return read_ruleset(workspace, workspace.name(Path(path)))


@dataclass(slots=True)
class _Loaded:
    """What a question is put to."""

    design: Design
    rulesets: tuple[Ruleset, ...]
    also_known: tuple[Ruleset, ...]
    house: House | None
    changes: tuple[str, ...]


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
    loaded = _load(session, design, rules, settings, changes, states)
    graph = _bind(loaded, day)
    checker = Checker(graph, _reserves(loaded, graph, reserve))
    decision = loaded.house.decision if loaded.house else "simple"
    asked = Asked(day, loaded.changes, _reserve_text(loaded.house, reserve), decision)
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
    session = session or Session()
    day = on or date.today()
    loaded = _load(session, design, rules, settings, changes, states, needs_rules=False)
    graph = _bind(loaded, day, [name for name in names if name.partition(".")[0] in BUILT_IN])
    checker = Checker(graph, _reserves(loaded, graph, None))
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

    A change is laid over the design as it stands; several changes stand side by side.
    """
    session = session or Session()
    day = on or date.today()
    base = _load(session, design, rules, (), (), states)
    made = []
    for change in columns:
        loaded = _load(session, design, rules, change.settings, change.changes, states)
        made.append(_column(loaded, base, change, day))
    return what_if(Checker(_bind(base, day, BUILT_IN)), made, base.design, base.rulesets, day)


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
    session = session or Session()
    day = on or date.today()
    loaded = _load(session, design, rules, settings, changes, states)
    checker = Checker(_bind(loaded, day))
    checker.read_all()
    return travels(checker, loaded.design, names, day)


def kept_variant(design: File, columns: Sequence[Change], target: File, session: Session) -> str:
    """One change as the text of a variant file that changes the design. Raises `Refused`."""
    faults = Faults()
    if len(columns) != 1:
        faults.add(
            "usage",
            f"--keep writes one change, and there are {len(columns)}",
            advice="give one --change, or --set alone",
        )
    overlay = Overlay()
    for column in columns[:1]:
        overlay, _ = _overlay(session, column.settings, column.changes, faults)
    faults.settle()
    reference = Path(relpath(Path(design).resolve(), Path(target).resolve().parent)).as_posix()
    return variant_text(reference, overlay)


def _column(loaded: _Loaded, base: _Loaded, change: Change, day: date) -> Column:
    checker = Checker(_bind(loaded, day, BUILT_IN))
    name = ", ".join(Path(path).name.removesuffix(".change.yaml") for path in change.changes)
    structural = _structure(loaded.design) != _structure(base.design)
    return Column(name or "change", loaded.changes, checker, structural)


def _structure(design: Design) -> tuple[object, ...]:
    """What a design has beside its numbers: names, and the texts of leaves that are no numbers."""
    words = {
        path: node for path, node in design.leaves.items() if isinstance(node, Located) and node.text[:1].isalpha()
    }
    return (sorted(design.leaves), sorted((path, node.text) for path, node in words.items()))


def _load(
    session: Session,
    path: File,
    rules: Sequence[File],
    settings: Mapping[str, str] | Iterable[tuple[str, str]],
    changes: Sequence[File],
    states: Mapping[str, str] | None,
    *,
    needs_rules: bool = True,
) -> _Loaded:
    faults = Faults()
    workspace = session.workspace(Path(path))
    design: Design | None = None
    house: House | None = None
    try:
        design = read_design(workspace, workspace.name(Path(path)))
    except Refused as refused:
        faults.take(refused)
    try:
        house = read_house(workspace) if has_house(workspace) else None
    except Refused as refused:
        faults.take(refused)
    rulesets, also_known = _rulesets(session, workspace, design, house, rules, faults)
    overlay, told = _overlay(session, settings, changes, faults)
    faults.settle()
    assert design is not None
    if needs_rules and not rulesets:
        faults.add(
            "no-rules",
            f"{design.file} names no ruleset",
            expected="rulesets: [name.ruleset.yaml] in the design, or --rules FILE",
        )
    elif needs_rules and not any(book.rules for book in rulesets):
        faults.add("no-rules", f"{rulesets[0].file} has no rules", rulesets[0].span, expected="rules: {name: {…}}")
    design = design.with_overlay(overlay)
    design, said = _in_states(design, states or {}, faults)
    faults.settle()
    return _Loaded(design, rulesets, also_known, house, (*told, *said))


def _rulesets(
    session: Session,
    workspace: Workspace,
    design: Design | None,
    house: House | None,
    rules: Sequence[File],
    faults: Faults,
) -> tuple[tuple[Ruleset, ...], tuple[Ruleset, ...]]:
    """The rulesets to check against, and those whose inputs the design may state besides."""
    own: list[Ruleset] = []
    named = design.rulesets if design is not None else ()
    beside = design.file if design is not None else ""
    if house is not None and not named:
        named, beside = house.rulesets, house.file
    quiet = Faults()
    for reference in named:
        try:
            target = workspace.resolve(reference.text, beside, reference.span)
            own.append(read_ruleset(workspace, target, reference.span))
        except Refused as refused:
            (quiet if rules else faults).take(refused)
    if not rules:
        return tuple(own), ()
    given: list[Ruleset] = []
    for path in rules:
        try:
            given.append(load_ruleset(path, session=session))
        except Refused as refused:
            faults.take(refused)
    return tuple(given), tuple(own)


def _overlay(
    session: Session,
    settings: Mapping[str, str] | Iterable[tuple[str, str]],
    changes: Sequence[File],
    faults: Faults,
) -> tuple[Overlay, tuple[str, ...]]:
    overlay = Overlay()
    told: list[str] = []
    for path in changes:
        try:
            space = session.workspace(Path(path))
            overlay = overlay.then(read_change(space, space.name(Path(path))))
            told.append(f"change {space.name(Path(path))}")
        except Refused as refused:
            faults.take(refused)
    pairs = settings.items() if isinstance(settings, Mapping) else settings
    for path, text in pairs:
        overlay = overlay.then(_setting(session, path, text, faults))
        told.append(f"{path} = {text}")
    return overlay, tuple(told)


def _setting(session: Session, path: str, text: str, faults: Faults) -> Overlay:
    """One change from the command line."""
    file = f"--set {path}"
    session.extra[file] = text
    if not all(is_name(part) for part in path.split(".")):
        faults.add(
            "bad-name", f"'{path}' cannot be a path", Span(file, 0, 0, 1, 1), expected="--set tyres.rear.width=250mm"
        )
        return Overlay()
    try:
        return Overlay.of([(path, parse_yaml(text, file))])
    except Refused as refused:
        faults.take(refused)
        return Overlay()


def _in_states(design: Design, states: Mapping[str, str], faults: Faults) -> tuple[Design, tuple[str, ...]]:
    for axis, name in states.items():
        state: State | None = design.states.get(axis, {}).get(name)
        if state is None:
            known = [f"{a}={s}" for a, named in design.states.items() for s in named]
            faults.add(
                "unknown-state",
                f"the design has no state {axis}={name}",
                expected=" or ".join(known),
                advice=nearest(f"{axis}={name}", known),
            )
            continue
        design = design.with_overlay(state.overlay)
    return design, tuple(f"state {axis}: {name}" for axis, name in states.items())


def _bind(loaded: _Loaded, day: date, figures: Sequence[str] = ()) -> Graph:
    return bind(
        loaded.design,
        loaded.rulesets,
        day=day,
        physics=built_in,
        physics_names=BUILT_IN,
        also_known=loaded.also_known,
        figures=figures,
    )


def _reserves(loaded: _Loaded, graph: Graph, share: Fraction | None) -> Reserves:
    if share is not None:
        return Reserves({}, share)
    by_rule: dict[str, Quantity] = {}
    faults = Faults()
    own = {symbol: unit for book in loaded.rulesets for symbol, unit in book.units.items()}
    for name, where in (loaded.house.reserves if loaded.house else {}).items():
        read = read_quantity(where, None, own=own, faults=faults)
        if read is not None:
            by_rule[name] = read
            _check_reserve(name, where, read, graph, faults)
    faults.settle()
    return Reserves(by_rule)


def _check_reserve(name: str, where: Located, read: Quantity, graph: Graph, faults: Faults) -> None:
    """A reserve that no margin of its rule can be held against is a mistake."""
    cases = [case for rule in graph.rules if rule.name == name for case in rule.cases]
    margins = [part.margin for case in cases for part in numeric_parts(case.condition)]
    dimensions = {margin.dimension for margin in margins if margin is not None}
    if dimensions and read.unit.dimension not in dimensions:
        told = f"the reserve of rule '{name}' is {name_of(read.unit.dimension)}, and its margin is not"
        expected = " or ".join(sorted(name_of(dimension) for dimension in dimensions))
        faults.add("wrong-dimension", told, where.span, expected=expected)


def _reserve_text(house: House | None, share: Fraction | None) -> str:
    if share is not None:
        return f"{float(share * 100):g} % of every limit"
    if house is None or not house.reserves:
        return ""
    count = len(house.reserves)
    return f"{count} rule{'s' if count > 1 else ''}, in {house.file}"


__all__ = ["Session", "check", "headroom", "load_design", "load_ruleset", "whatif", "workings"]
