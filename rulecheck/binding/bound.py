"""What an expression is when it is bound: its kind, and the terms that carry it."""

from __future__ import annotations

from dataclasses import dataclass, field

from rulecheck.diagnostics import Span
from rulecheck.graph.terms import Term
from rulecheck.operations.samples import Samples
from rulecheck.quantity.dimension import Dimension
from rulecheck.quantity.units import Unit
from rulecheck.reading.nodes import Located


@dataclass(frozen=True, slots=True)
class Number:
    """A number; `unit` is the unit in which it is spoken of. `counted` marks counts and whole literals,
    `bare` a literal without unit, `offset` a literal of a scale with a zero of its own (degC);
    `place` says, in words, where a curve or signal has this value."""

    term: Term
    unit: Unit | None = None
    counted: bool = False
    bare: bool = False
    offset: bool = False
    place: str = ""

    @property
    def dimension(self) -> Dimension:
        """The dimension of the term."""
        return self.term.dimension


@dataclass(frozen=True, slots=True)
class Truth:
    """A flag; `place` says where a curve does not keep what is asked of it."""

    term: Term
    place: str = ""


@dataclass(frozen=True, slots=True)
class Words:
    """A text; `choices` where it can only be one of these."""

    term: Term
    choices: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Date:
    """A date."""

    term: Term


@dataclass(frozen=True, slots=True)
class Period:
    """A calendar period."""

    months: int
    days: int


@dataclass(frozen=True, slots=True)
class Place:
    """A point: three lengths, x rearward, y to the right, z up, from the front axle and the reference plane."""

    x: Number
    y: Number
    z: Number


@dataclass(frozen=True, slots=True)
class Line:
    """A line through two points, or one of the directions `vertical`, `horizontal`, `rearward`."""

    a: Place
    b: Place
    ends: bool = False
    direction: str = ""


@dataclass(frozen=True, slots=True)
class Plane:
    """A plane through three points."""

    a: Place
    b: Place
    c: Place


@dataclass(frozen=True, slots=True)
class Item:
    """An item of a collection, by its path."""

    path: str

    @property
    def name(self) -> str:
        """The last part of the path."""
        return self.path.rpartition(".")[2]


@dataclass(frozen=True, slots=True)
class Items:
    """A collection. `items` is None where the design says nothing of it; `lacking` says what is required and not there,
    `gone` which required items stand in it though the design does not state them."""

    path: str
    items: tuple[Item, ...] | None
    lacking: str = ""
    missing: int = 0
    gone: frozenset[str] = frozenset()


@dataclass(frozen=True, slots=True)
class Choices:
    """A list of texts or numbers, for `in`."""

    members: tuple[Bound, ...]
    name: str = ""


@dataclass(frozen=True, slots=True)
class Curve:
    """A curve or map: `keys` are the keys of its rows along each axis, rising, and `values` stand in their order, the
    last axis running fastest; all are terms. Without rows where the design states none. `over` are the names that it
    is stated over; with `steps` a value holds up to the next key, else lines between rows are straight."""

    path: str
    keys: tuple[tuple[Number, ...], ...]
    values: tuple[Number, ...]
    key_units: tuple[Unit, ...]
    unit: Unit
    over: tuple[Located, ...]
    steps: bool
    span: Span | None


@dataclass(frozen=True, slots=True)
class Signal:
    """Samples over time, in SI; none where the design states none, or too few or too coarse ones: `lacking` says what
    is missing. `path` names it, `unit` is what it is spoken of in, `counted` marks whole states or counts."""

    path: str
    samples: Samples | None
    dimension: Dimension
    unit: Unit | None = None
    lacking: str = ""
    span: Span | None = None
    counted: bool = False


@dataclass(frozen=True, slots=True)
class Slopes:
    """The slopes of a curve between two keys: all of them keep a limit where these two do."""

    least: Number
    greatest: Number


@dataclass(frozen=True, slots=True)
class Broken:
    """What a fault leaves behind: whatever is made of it is broken too, without a second fault."""


BROKEN = Broken()

Bound = (
    Number
    | Truth
    | Words
    | Date
    | Period
    | Place
    | Line
    | Plane
    | Item
    | Items
    | Choices
    | Curve
    | Slopes
    | Signal
    | Broken
)

_KINDS: dict[type, str] = {
    Number: "a number",
    Truth: "a flag",
    Words: "a text",
    Date: "a date",
    Period: "a period",
    Place: "a point",
    Line: "a line",
    Plane: "a plane",
    Item: "an item",
    Items: "a collection",
    Choices: "a list",
    Curve: "a curve that is not called at a key",
    Slopes: "the slopes of a curve",
    Signal: "a signal",
    Broken: "nothing",
}


def kind_of(bound: Bound) -> str:
    """The kind in words."""
    return _KINDS[type(bound)]


@dataclass(frozen=True, slots=True)
class Element:
    """One turn of a loop: the variables, and a flag that says whether it takes part (None: certainly)."""

    label: str
    variables: tuple[tuple[str, Bound], ...]
    condition: Term | None = field(default=None)
