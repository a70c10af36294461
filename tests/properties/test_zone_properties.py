"""What holds of zones whatever their borders: the sign of a margin is its verdict, and nothing changes when all moves."""

from __future__ import annotations

from fractions import Fraction

from hypothesis import given, settings
from hypothesis import strategies as st

from rulecheck.geometry.bodies import Body, point_body
from rulecheck.geometry.convex import Corner
from rulecheck.geometry.making import Maker
from rulecheck.geometry.outlines import fault_of
from rulecheck.geometry.rooms import Room
from rulecheck.geometry.zones import Every, Prism, Range, Some, Zone, clear, inside
from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import LENGTH
from rulecheck.readers.exact import ExactReader
from rulecheck.readers.gradient import GradientReader

lengths = st.integers(-6, 6).map(Fraction)
pairs = st.tuples(lengths, lengths).map(sorted)
Plan = tuple  # what a zone is made of, before it has terms


@st.composite
def polygons(draw: st.DrawFn) -> list[tuple[Fraction, Fraction]]:
    corners = draw(st.lists(st.tuples(lengths, lengths), min_size=3, max_size=5, unique=True))
    return (
        corners
        if fault_of(corners) is None
        else [(Fraction(-5), Fraction(-5)), (Fraction(5), Fraction(-4)), (Fraction(0), Fraction(4))]
    )


ranges = st.tuples(st.just("range"), st.sampled_from("xyz"), pairs)
plans = st.recursive(
    ranges | st.tuples(st.just("prism"), st.sampled_from(("side", "plan", "front")), polygons()),
    lambda inner: st.tuples(st.sampled_from(("all", "any")), st.lists(inner, min_size=1, max_size=3)),
    max_leaves=3,
)
boxes = st.tuples(pairs, pairs, pairs)


class Space:
    """A zone and a body in one bank, all moved by one vector."""

    def __init__(self, moved: tuple[int, int, int] = (0, 0, 0), size: int = 1, *, settled: bool = True) -> None:
        self.bank = Bank()
        self.make = Maker(self.bank)
        self.moved = dict(zip("xyz", moved, strict=True))
        self.size, self.settled = size, settled
        self.inputs: dict[str, Monomial] = {}

    def at(self, axis: str, value: Fraction) -> Term:
        there = value * self.size + self.moved[axis]
        if self.settled:
            return self.bank.number(there, LENGTH)
        path = f"{axis}.{len(self.inputs)}"
        self.inputs[path] = Monomial(there)
        return self.bank.input(path, "number", LENGTH)

    def zone(self, plan: Plan) -> Zone:
        word, *rest = plan
        if word == "range":
            axis, (low, high) = rest
            return Range(axis, self.at(axis, low), self.at(axis, high))
        if word == "prism":
            view, corners = rest
            axes = {"side": "xz", "plan": "xy", "front": "yz"}[view]
            return Prism(view, tuple((self.at(axes[0], a), self.at(axes[1], b)) for a, b in corners))
        parts = tuple(self.zone(part) for part in rest[0])
        return Every(parts) if word == "all" else Some(parts)

    def box(self, spans: tuple[list[Fraction], ...]) -> Body:
        return Body(
            {axis: (self.at(axis, low), self.at(axis, high)) for axis, (low, high) in zip("xyz", spans, strict=True)}
        )

    def point(self, values: tuple[Fraction, Fraction, Fraction]) -> Body:
        x, y, z = (self.at(axis, value) for axis, value in zip("xyz", values, strict=True))
        return point_body((x, y, z))

    def outline(self, corners: list[tuple[Fraction, Fraction]], across: list[Fraction]) -> Body:
        polygon: tuple[Corner, ...] = tuple((self.at("x", a), self.at("z", b)) for a, b in corners)
        low, high = (self.at("y", end) for end in across)
        ends = [(self.make.least(values), self.make.greatest(values)) for values in zip(*polygon, strict=True)]
        return Body({"x": ends[0], "y": (low, high), "z": ends[1]}, {"side": polygon})

    def read(self, room: Room) -> tuple[float, bool]:
        reader = ExactReader(self.bank, self.inputs)
        margin, holds, sign = reader.approximate(room.margin), reader.truth(room.holds), reader.sign(room.margin)
        assert margin is not None
        assert isinstance(sign, int)
        assert holds == (sign >= 0), "the margin changes sign where the verdict does"
        return margin, bool(holds)


def both(space: Space, plan: Plan, body: Body) -> list[tuple[float, bool]]:
    zone = space.zone(plan)
    return [space.read(measure(space.make, zone, body)) for measure in (inside, clear)]


@settings(max_examples=12, deadline=None)
@given(plans, st.tuples(lengths, lengths, lengths))
def test_a_point_is_inside_or_clear_and_both_on_the_border_alone(
    plan: Plan, point: tuple[Fraction, Fraction, Fraction]
) -> None:
    space = Space()
    (depth, within), (away, off) = both(space, plan, space.point(point))
    assert within or off
    assert depth == -away
    assert (within and off) == (depth == 0)


@settings(max_examples=12, deadline=None)
@given(plans, boxes)
def test_a_box_inside_has_its_corners_and_middle_inside(plan: Plan, spans: tuple[list[Fraction], ...]) -> None:
    space = Space()
    (room, within), (away, off) = both(space, plan, space.box(spans))
    middle = tuple(sum(span) / 2 for span in spans)
    corners = [(x, y, z) for x in spans[0] for y in spans[1] for z in spans[2]]
    for point in [*corners, middle]:
        (depth, point_within), (point_away, _) = both(space, plan, space.point(point))  # type: ignore[arg-type]
        assert point_within or not within
        assert depth >= 0 or not within
        assert point_away >= 0 or not off
    assert room <= 0 or away <= 0, "a body is not inside and off at once"


@settings(max_examples=12, deadline=None)
@given(plans, polygons(), pairs)
def test_an_outline_inside_has_its_corners_inside(
    plan: Plan, corners: list[tuple[Fraction, Fraction]], across: list[Fraction]
) -> None:
    space = Space()
    (_, within), (_, off) = both(space, plan, space.outline(corners, across))
    for a, b in corners:
        for y in across:
            (_, point_within), (_, point_off) = both(space, plan, space.point((a, y, b)))
            assert point_within or not within
            assert point_off or not off


@settings(max_examples=12, deadline=None)
@given(plans, boxes, st.tuples(*[st.integers(-9, 9)] * 3), st.integers(1, 4))
def test_moving_all_changes_nothing_and_scaling_scales(
    plan: Plan, spans: tuple[list[Fraction], ...], moved: tuple[int, int, int], size: int
) -> None:
    here, there = Space(), Space(moved, size)
    before, after = both(here, plan, here.box(spans)), both(there, plan, there.box(spans))
    for (margin, holds), (other, also) in zip(before, after, strict=True):
        assert holds == also
        assert abs(margin * size - other) <= 1e-9 * max(1, abs(other))


@settings(max_examples=12, deadline=None)
@given(plans, boxes)
def test_what_is_settled_and_what_is_an_input_come_to_the_same(plan: Plan, spans: tuple[list[Fraction], ...]) -> None:
    settled, moving = Space(), Space(settled=False)
    before, after = both(settled, plan, settled.box(spans)), both(moving, plan, moving.box(spans))
    assert [holds for _, holds in before] == [holds for _, holds in after]
    for (margin, holds), (other, _) in zip(before, after, strict=True):
        # A settled polygon without inward corners is measured exactly where others have a bound.
        assert not holds or abs(margin - other) <= 1e-9


def test_slopes_follow_the_border_that_binds() -> None:
    space = Space(settled=False)
    zone = space.zone(
        ("all", [("range", "x", [Fraction(0), Fraction(10)]), ("range", "z", [Fraction(0), Fraction(4)])])
    )
    body = space.point((Fraction(3), Fraction(0), Fraction(3)))
    room = inside(space.make, zone, body)
    gradient = GradientReader(space.bank, ExactReader(space.bank, space.inputs)).gradient(room.margin)
    assert gradient is not None
    # 1 below the roof: a higher roof gives room, a higher point takes it.
    assert gradient.slopes == {"z.3": 1.0, "z.6": -1.0}
