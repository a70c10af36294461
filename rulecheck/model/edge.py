"""The shape of ruleset, physics and house files, held by pydantic; leaves stay `Located`.

A few models only, built when first used: each costs start-up time.
"""

from __future__ import annotations

from functools import cache
from typing import Annotated, Any, TypeVar, cast

from pydantic import BaseModel, ConfigDict, Field, GetPydanticSchema, TypeAdapter, ValidationError, WithJsonSchema
from pydantic_core import core_schema

from rulecheck.diagnostics import Faults, Span
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence

Leaf = Annotated[
    Located,
    GetPydanticSchema(lambda _source, _handler: core_schema.is_instance_schema(Located)),
    WithJsonSchema({"type": ["string", "number", "boolean"]}),
]
Leaves = dict[str, Leaf]


MOST_NAMED = 12
"""Where more keys than this are known, the nearest is named, and all of them only where none is near."""


class Shape(BaseModel):
    """What all shapes have: unknown keys are refused, values do not change."""

    model_config = ConfigDict(extra="forbid", frozen=True, defer_build=True, arbitrary_types_allowed=True)


class EvidenceShape(Shape):
    """`evidence:` of a rule or branch."""

    kind: Leaf = Field(description="Kind of document, such as certificate")
    name: Leaf = Field(description="Name under evidence: in the design; under each, a field such as t.proof")
    due: Leaf | None = Field(None, description="Day by which it must be there")
    expires: Leaf | None = Field(None, description="yes where the document must state its last day")


class BranchShape(Shape):
    """One of the alternatives under `branches:`."""

    require: Leaf | None = Field(None, description="Condition")
    evidence: EvidenceShape | None = Field(None, description="Document that is asked for")
    judgement: Leaf | None = Field(None, description="Question that a person answers")
    record: Any = Field(None, description="Test that is recorded: name, setup, require, runs")
    frozen: Any = Field(
        None, description="What stays as in a baseline: baseline, since, paths, tolerance, changes_allowed"
    )
    tolerance: Leaf | None = Field(None, description="The rule book's tolerance on the limit: 3 mm, +0/-5 deg, 3 %")
    rounding: Any = Field(None, description="How the value is rounded before it is compared: to, how")
    inside: Any = Field(None, description="Zone that the element, or what is named, lies inside of")
    outside: Any = Field(None, description="Zone that the element, or what is named, stays clear of")
    passes: Any = Field(None, description="Template that fits an opening at a place: template, through, at")
    stops: Any = Field(None, description="Template that does not fit an opening at a place: template, through, at")
    sight: Any = Field(None, description="Lines of sight that nothing may cut: from, to, past, view")
    cover: Any = Field(None, description="Lines of sight each of which something must cut: from, to, past, view")
    when: Leaf | None = Field(None, description="The branch is open only to cars for which this holds")


class RuleShape(BranchShape):
    """A rule."""

    clause: Leaf | None = Field(None, description="Number of the clause in the rule book")
    title: Leaf | None = Field(None, description="A few words on what is limited")
    note: Leaf | None = Field(None, description="A remark")
    standing: Leaf | None = Field(None, description="shall, should, may or note")
    branches: dict[str, BranchShape] | None = Field(None, description="Alternatives, any of which will do")
    each: Leaf | list[Leaf] | None = Field(None, description="One margin for each element")
    empty: Leaf | None = Field(
        None, description="What an empty collection means: open, complies, breach, not applicable"
    )
    states: Leaf | dict[str, Leaf | list[Leaf]] | None = Field(None, description="every, or states by axis")
    envelope: Any = Field(None, description="Ranges of inputs throughout which it must hold: {path: [least, greatest]}")
    unless: Leaves | None = Field(None, description="Exemption: when and because")
    scale: Leaf | None = Field(None, description="What relative margins are measured by")
    valid: Leaves | None = Field(None, description="First and last day: from, until")
    measure: Any = Field(None, description="The rule book's procedure, for the measuring sheet")
    scrutineer: Any = Field(None, description="The scrutineer's own uncertainty and tolerance")
    decision: Any = Field(None, description="Decision rule where values have a spread")
    consequence: Any = Field(None, description="What follows a breach: kind, points, amount, text")
    examples: list[Any] | None = Field(None, description="The rule's own tests")
    answers: Any = Field(None, description="What officials answered about it: reference, date, text")


class TableShape(Shape):
    """A table: steps, linear rows, or rows with a condition each."""

    over: Leaf | list[Leaf] = Field(description="Key: a figure, or several")
    steps: list[Leaves] | None = Field(None, description="Rows from the top: up_to, below, is, when or otherwise")
    linear: list[list[Leaf]] | None = Field(None, description="Rows [key, …, value], straight lines between them")
    unit: Leaf | None = Field(None, description="Unit of the values")
    meaning: Leaf | None = Field(None, description="What it gives")


class FigureShape(Shape):
    """A derived figure of a ruleset, or a figure of a physics module."""

    formula: Leaf = Field(description="How it is computed")
    unit: Leaf | None = Field(None, description="Unit in which it is spoken of; none for flags")
    meaning: Leaf | None = Field(None, description="One line on what it is")
    source: Leaf | None = Field(None, description="Where the formula comes from")
    valid: Leaf | None = Field(None, description="Range of validity, as a condition")
    loop: Leaf | None = Field(None, alias="for", description="b in bonds: used as name(b)")
    of: Leaf | None = Field(None, description="Name of a point: used as name(p)")
    solve: Leaf | None = Field(None, description="Input whose least value makes the formula zero: the figure is that")
    between: list[Leaf] | None = Field(None, description="Range in which it is looked for: [from, to]")


class InputShape(Shape):
    """The declaration of an input, or of a field of a collection's elements."""

    kind: Leaf | None = Field(
        None, description="number, flag, choice, text, date, point, item, collection, curve, map or signal"
    )
    unit: Leaf | None = Field(None, description="Unit of a number, or of the values of a curve, map or signal")
    over: Leaf | list[Leaf] | None = Field(None, description="Unit of the key of a curve; those of a map, in order")
    choices: list[Leaf] | None = Field(None, description="Words of a choice")
    meaning: Leaf | None = Field(None, description="One line on what it is")
    datum: Leaf | None = Field(None, description="required: a point must name its datum")
    definition: Leaf | None = Field(None, description="Definition that a value must meet")
    basis: Leaf | None = Field(None, description="Where the value must come from; supplier needs a reference too")
    of: Leaf | None = Field(None, description="Collection that an item is of")
    items: list[Leaf] | None = Field(None, description="Items that must be there")
    at_least: Leaf | None = Field(None, description="How many items there must be")
    element: dict[str, InputShape] | None = Field(None, description="Fields of each element")


class RulesetShape(Shape):
    """A ruleset file."""

    ruleset: Leaf = Field(description="Name of the rule book")
    edition: Leaf | None = Field(None, description="Edition")
    note: Leaf | None = Field(None, description="A remark")
    valid: Leaves | None = Field(None, description="First and last day in force: from, until")
    extends: Leaf | list[Leaf] | None = Field(None, description="Rule books that this one adds to")
    withdrawn: Leaves | None = Field(None, description="Rules of those that no longer hold, with the reason")
    physics: Leaf | list[Leaf] | None = Field(None, description="Files of physics modules, beside this one")
    validity: Leaf | None = Field(
        None, description="required: no rule may rest on a figure outside its range; noted where left out"
    )
    units: Leaves | None = Field(None, description="Base units of its own: EUR: currency")
    definitions: dict[str, list[Leaf]] | None = Field(None, description="Rival definitions of a word")
    inputs: dict[str, InputShape] | None = Field(None, description="Inputs beyond the core vocabulary")
    tables: dict[str, TableShape] | None = Field(None, description="Tables")
    lists: dict[str, list[Leaf]] | None = Field(None, description="Lists of what is allowed")
    zones: dict[str, Any] | None = Field(None, description="Regions of the car's space, by their borders")
    templates: dict[str, Any] | None = Field(None, description="Outlines that are placed at a point")
    derived: dict[str, FigureShape] | None = Field(None, description="Derived figures")
    states_needed: dict[str, Any] | None = Field(None, description="States that a design must define, by axis")
    groups: dict[str, Any] | None = Field(None, description="Rules that share a condition")
    clauses: Any = Field(None, description="Register of the rule book's clauses by number, with titles and kinds")
    decision: Any = Field(None, description="Decision rule of every rule that has none of its own")
    rules: dict[str, RuleShape] | None = Field(None, description="Rules")


class PhysicsShape(Shape):
    """A physics module."""

    module: Leaf = Field(description="Name of the module")
    meaning: Leaf = Field(description="One line on what it is for")
    sources: Leaves = Field(description="Books and standards, by short name")
    figures: dict[str, FigureShape] = Field(description="Figures")
    caution: Leaf | None = Field(None, description="Words of caution that outputs carry")
    replaces: Leaves | None = Field(
        None, description="Figures of other modules that those of the same name here take the place of, with the reason"
    )
    traps: list[Leaf] | None = Field(None, description="Mistakes that practitioners make with these figures")


class HouseShape(Shape):
    """A house file, `rulecheck.yaml`."""

    house: Leaf = Field(description="Name of the technical office")
    designs: list[Leaf] | None = Field(None, description="Designs, with wildcards")
    rulesets: list[Leaf] | None = Field(None, description="Rulesets that every design is checked against")
    reserves: Leaves | None = Field(None, description="Room kept beyond the rule book, by rule")
    decision: Any = Field(None, description="Decision rule where values have a spread")
    validity: Leaf | None = Field(
        None, description="required: no rule may rest on a figure outside its range; noted where left out"
    )
    fails_on: list[Leaf] | None = Field(None, description="What fails the gate")
    eroded: Leaves | None = Field(None, description="share: how much of a margin may go in one change")
    ending: Leaves | None = Field(None, description="within: how long before its end a document is named")


S = TypeVar("S", bound=Shape)


def plain(node: Node) -> Any:
    """Nodes as dict and list with `Located` leaves, as pydantic takes them."""
    if isinstance(node, Mapping):
        return {entry.key.text: plain(entry.value) for entry in node}
    if isinstance(node, Sequence):
        return [plain(item) for item in node]
    return node


@cache
def _adapter(shape: type[Shape]) -> TypeAdapter[Any]:
    """Building one costs more than reading a small file: one for each shape, when it is first used."""
    return TypeAdapter(shape)


def shaped(shape: type[S], root: Node, faults: Faults) -> S | None:
    """The node in a shape, or None with every fault noted at the place that it has in the file."""
    try:
        return cast(S, _adapter(shape).validate_python(plain(root)))
    except ValidationError as error:
        before = len(faults.found)
        items = error.errors(include_url=False, include_context=False, include_input=False)
        for item in items:
            _note(item, shape, root, faults)
        if len(faults.found) == before:
            # Only alternatives were refused, each for a reason of its own: say what may stand here.
            location = tuple(items[0]["loc"])
            place = _deepest(root, location)[0]
            told = f"this is not what '{_last_name(location)}' takes"
            faults.add("bad-structure", told, place, expected="a single value, or a list or mapping of them")
        return None


def _note(item: Any, shape: type[Shape], root: Node, faults: Faults) -> None:
    location = tuple(part for part in item["loc"])
    place, rest, known = _deepest(root, location)
    key = str(location[-1]) if location else ""
    if item["type"] == "extra_forbidden":
        names = _fields(shape, location[:-1])
        faults.add(
            "unknown-key",
            f"there is no key '{key}' here",
            _key_span(root, location) or place,
            expected=" or ".join(names) if len(names) <= MOST_NAMED else "",
            advice=nearest(key, names) or f"keys here are {', '.join(sorted(names))}",
        )
    elif item["type"] == "missing":
        faults.add("missing-key", f"'{key}:' is missing here", place, advice="add it")
    elif not known or not rest:
        faults.add(
            "bad-structure", f"this is not what '{_last_name(location)}' takes", place, expected=_wording(item["type"])
        )


def _wording(kind: str) -> str:
    if kind in ("is_instance_of",):
        return "a single value"
    return {"dict_type": "a mapping", "list_type": "a list", "model_type": "a mapping"}.get(kind, "another shape")


def _last_name(location: tuple[Any, ...]) -> str:
    names = [
        part for part in location if isinstance(part, str) and not part.startswith(("is-instance", "list[", "dict["))
    ]
    return str(names[-1]) if names else "the file"


def _deepest(root: Node, location: tuple[Any, ...]) -> tuple[Span, tuple[Any, ...], bool]:
    """The place of the longest prefix of a location that the file has."""
    node: Node = root
    for index, part in enumerate(location):
        below = _child(node, part)
        if below is None:
            return node.span, location[index:], True
        node = below
    return node.span, (), True


def _child(node: Node, part: Any) -> Node | None:
    if isinstance(node, Mapping):
        return node.get(str(part))
    if isinstance(node, Sequence) and isinstance(part, int):
        return node.items[part]
    return None


def _key_span(root: Node, location: tuple[Any, ...]) -> Span | None:
    node: Node | None = root
    for part in location[:-1]:
        node = _child(node, part) if node is not None else None
    if isinstance(node, Mapping):
        key = node.key(str(location[-1]))
        return key.span if key else None
    return None


def _fields(shape: type[Shape], location: tuple[Any, ...]) -> tuple[str, ...]:
    """The keys that a shape knows at a location."""
    names = shape.model_fields
    here: dict[str, Any] = dict(names)
    for part in location:
        found = here.get(str(part))
        inner = _inner(found.annotation) if found is not None and hasattr(found, "annotation") else None
        if inner is not None:
            here = dict(inner.model_fields)
    return tuple((value.alias or name) if hasattr(value, "alias") else name for name, value in here.items())


def _inner(annotation: Any) -> type[Shape] | None:
    """The shape inside `dict[str, X]`, `X | None`, or X itself."""
    if isinstance(annotation, type) and issubclass(annotation, Shape):
        return annotation
    for part in getattr(annotation, "__args__", ()):
        inner = _inner(part)
        if inner is not None:
            return inner
    return None
