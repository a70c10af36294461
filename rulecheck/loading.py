"""What a question is put to: files read, changes laid over the design, rulesets, house and reserves."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from datetime import date
from fractions import Fraction
from os import PathLike
from pathlib import Path

from rulecheck.diagnostics import Faults, Refused, Span
from rulecheck.graph.conditions import numeric_parts
from rulecheck.graph.figures import Graph
from rulecheck.model.design import Design, Overlay, State
from rulecheck.model.design_reader import read_change, read_design
from rulecheck.model.house import has_house, read_house
from rulecheck.model.house_rules import house_rule_names, rule_names
from rulecheck.model.names import is_name
from rulecheck.model.ruleset import House, PhysicsModule, Ruleset
from rulecheck.model.ruleset_reader import read_ruleset
from rulecheck.model.track import Track
from rulecheck.model.track_reader import read_track
from rulecheck.model.value_ranges import MOST_CURVES, Setting, Varying, read_varying
from rulecheck.physics.modules import read_module
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.quantity import Quantity
from rulecheck.quantity.reading_values import read_quantity
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Entry, Located
from rulecheck.reading.nodes import Mapping as Keyed
from rulecheck.reading.workspace import Workspace
from rulecheck.reading.yaml_reader import parse_yaml
from rulecheck.studies.reserves import Reserves

File = str | PathLike[str]


@dataclass(slots=True)
class Session:
    """Files read for one question, on its day: where they lie, and their texts for diagnostics."""

    workspaces: list[Workspace] = field(default_factory=list)
    extra: dict[str, str] = field(default_factory=dict)
    day: date | None = None

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
    session = session or Session()
    workspace = session.workspace(Path(path))
    return read_ruleset(workspace, workspace.name(Path(path)), None, session.day)


def load_books(paths: Sequence[File], session: Session) -> tuple[Ruleset, ...]:
    """Read several rulesets. Raises `Refused` with the faults of all of them."""
    faults = Faults()
    books = _given(paths, session, faults)
    faults.settle()
    return books


def _given(paths: Sequence[File], session: Session, faults: Faults) -> tuple[Ruleset, ...]:
    found: list[Ruleset] = []
    for path in paths:
        try:
            found.append(load_ruleset(path, session=session))
        except Refused as refused:
            faults.take(refused)
    return tuple(found)


@dataclass(slots=True)
class Loaded:
    """What a question is put to."""

    design: Design
    rulesets: tuple[Ruleset, ...]
    also_known: tuple[Ruleset, ...]
    house: House | None
    changes: tuple[str, ...]
    workspace: Workspace
    modules: tuple[PhysicsModule, ...] = ()


def load(
    session: Session,
    path: File,
    rules: Sequence[File],
    settings: Mapping[str, str] | Iterable[tuple[str, str]],
    changes: Sequence[File],
    states: Mapping[str, str] | None,
    *,
    needs_rules: bool = True,
) -> Loaded:
    """Read everything that a question is put to. Raises `Refused` with the faults of all files."""
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
    modules = modules_of(session, rulesets, faults)
    overlay, told = overlay_of(session, settings, changes, faults)
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
    return Loaded(design, rulesets, also_known, house, (*told, *said), workspace, modules)


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
            own.append(read_ruleset(workspace, target, reference.span, session.day))
        except Refused as refused:
            (quiet if rules else faults).take(refused)
    if not rules:
        return tuple(own), ()
    return _given(rules, session, faults), tuple(own)


def modules_of(session: Session, rulesets: Sequence[Ruleset], faults: Faults) -> tuple[PhysicsModule, ...]:
    """The physics modules that the rulesets name, each read from beside the file that names it."""
    found: dict[tuple[Path, str], PhysicsModule] = {}
    for reference in (reference for ruleset in rulesets for reference in ruleset.physics):
        beside = reference.span.file
        workspace = next(space for space in session.workspaces if beside in space.texts)
        try:
            target = workspace.resolve(reference.text, beside, reference.span)
            if (workspace.root, target) not in found:
                found[workspace.root, target] = read_module(workspace, target, reference.span)
        except Refused as refused:
            faults.take(refused)
    return tuple(found.values())


def overlay_of(
    session: Session,
    settings: Mapping[str, str] | Iterable[tuple[str, str]],
    changes: Sequence[File],
    faults: Faults,
) -> tuple[Overlay, tuple[str, ...]]:
    """Change files and then settings as one overlay, and what they set in words."""
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
    chosen: list[State] = []
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
        chosen.append(state)
    return design.in_states(chosen), tuple(f"state {axis}: {name}" for axis, name in states.items())


def varyings_of(
    session: Session, loaded: Loaded, along: Mapping[str, str] | Iterable[tuple[str, str]]
) -> tuple[Varying, Varying | None]:
    """The path to run along, and the one that gives a curve for each value. Raises `Refused` with every fault."""
    faults = Faults()
    own = {symbol: unit for book in (*loaded.also_known, *loaded.rulesets) for symbol, unit in book.units.items()}
    pairs = list(along.items() if isinstance(along, Mapping) else along)
    for path, text in pairs:
        session.extra[f"--vary {path}"] = text
    found = [read for path, text in pairs if (read := read_varying(path, text, own, faults)) is not None]
    if not 1 <= len(pairs) <= 2 or len({path for path, _ in pairs}) < len(pairs):
        told = "one path is varied, or two: the first runs, and the second gives a curve for each of its values"
        faults.add("usage", told, advice="give --vary once or twice, with a path each")
    elif len(found) == 2 and len(found[1].settings) > MOST_CURVES:
        told = f"'{found[1].path}' gives {len(found[1].settings)} curves"
        advice = f"name at most {MOST_CURVES} values, and let the first --vary have the many"
        faults.add("too-large", told, found[1].settings[0].text.span, advice=advice)
    faults.settle()
    return found[0], found[1] if len(found) == 2 else None


def with_value(design: Design, varying: Varying, setting: Setting) -> Design:
    """The design with one value of the path; which definition the value meets stays as the design says."""
    node: Located | Keyed = setting.text
    stated = design.leaves.get(varying.path)
    kept = stated.key("definition") if isinstance(stated, Keyed) else None
    if isinstance(stated, Keyed) and kept is not None:
        inner = stated.get("definition")
        assert inner is not None
        value = Entry(Located("value", node.span), node)
        node = Keyed((value, Entry(kept, inner)), node.span)
    return design.with_overlay(Overlay.of([(varying.path, node)]))


def tracks_of(workspace: Workspace, design: Design) -> Callable[[Located], Track]:
    """A reader of the tracks that a design names: beside the file that names them, else beside the design itself."""

    def read(where: Located) -> Track:
        beside = where.span.file if where.span.file in workspace.texts else design.file
        return read_track(workspace, workspace.resolve(where.text, beside, where.span), where.span)

    return read


def reserves_of(loaded: Loaded, graph: Graph, share: Fraction | None) -> Reserves:
    """The reserves of the house file, or one share for every rule in their place."""
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
    _check_names(loaded, faults)
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


def _check_names(loaded: Loaded, faults: Faults) -> None:
    """A reserve for a rule that is in none of the rule books that the house works to would have no effect."""
    house = loaded.house
    known = rule_names((*loaded.rulesets, *loaded.also_known))
    strange = {name: where for name, where in (house.reserves if house else {}).items() if name not in known}
    if house is None or not strange:
        return
    others = house_rule_names(loaded.workspace, house)
    if others is None:
        return
    for name, where in strange.items():
        if name not in others:
            told = f"the house keeps a reserve for a rule '{name}', which none of its rule books has"
            faults.add("unknown-name", told, where.span, advice=nearest(name, sorted(known | others)))


def reserve_text(house: House | None, share: Fraction | None) -> str:
    """The reserve in words, empty where there is none."""
    if share is not None:
        return f"{float(share * 100):g} % of every limit"
    if house is None or not house.reserves:
        return ""
    count = len(house.reserves)
    return f"{count} rule{'s' if count > 1 else ''}, in {house.file}"
