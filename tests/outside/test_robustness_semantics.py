"""Margins of joined conditions against the published quantitative semantics, evaluated apart in `robustness_trees.py`."""

from __future__ import annotations

import random
from fractions import Fraction

import pytest
from robustness_trees import Kinds, Point, Tree, literal, random_point, random_tree, room_of, text_of
from writing import as_fraction, findings, write_design, write_ruleset

PURE = {f"part.n{index}": "" for index in range(4)}
MIXED = {"part.length": "mm", "part.width": "mm", "part.mass": "kg", "part.angle": "rad"}
FLAGS = ("part.fitted", "part.sealed")
VERDICT = {True: "complies", False: "breach", None: "open"}
SEEDS = range(5)
TREES = 24


def write_trees(folder, kinds: Kinds, trees: list[Tree], point: Point) -> None:
    inputs: dict[str, object] = {
        path: {"unit": unit or "1", "meaning": "Number"} for path, unit in kinds.numbers.items()
    }
    inputs |= {path: {"kind": "flag", "meaning": "Flag"} for path in kinds.flags}
    scale = {} if kinds.scale is None else {"scale": literal(kinds.scale, "")}
    rules = {f"tree{index}": {"require": text_of(tree), **scale} for index, tree in enumerate(trees)}
    write_ruleset(folder, inputs=inputs, rules=rules)
    part = {}
    for path, value in point.items():
        name = path.removeprefix("part.")
        part[name] = {1: "yes", 0: "no"}[int(value)] if path in kinds.flags else literal(value, kinds.numbers[path])
    write_design(folder, **({"part": part} if part else {}))


def found_and_due(folder, kinds: Kinds, seed: int, missing: float = 0.0):
    source = random.Random(seed)
    trees = [random_tree(source, kinds, 3) for _ in range(TREES)]
    point = random_point(source, kinds, missing)
    write_trees(folder, kinds, trees, point)
    found = findings(folder)
    return [(text_of(tree), found[f"tree{index}"], room_of(tree, point)) for index, tree in enumerate(trees)]


@pytest.mark.parametrize(
    ("text", "margin", "verdict"),
    [
        ("part.x <= 5 and part.y >= 4", 2, "complies"),
        ("part.x <= 2 or part.y <= 10", 3, "complies"),
        ("not part.x <= 5", -2, "breach"),
        ("not part.x >= 1 or part.y >= 9", -2, "breach"),
    ],
)
@pytest.mark.parametrize("scale", ["", "1", "7"])
def test_worked_example(tmp_path, text, margin, verdict, scale):
    """x = 3 and y = 7: the four lines of the restated table, with its margins 2, 3, -2 and -2 (derived from the
    definitions); `implies` is `not` or. By one scale for all it is the published semantics itself; by relative margin
    the same part binds in these four."""
    inputs = {f"part.{name}": {"unit": "1", "meaning": "Number"} for name in ("x", "y")}
    rule = {"require": text, **({"scale": scale} if scale else {})}
    write_ruleset(tmp_path, inputs=inputs, rules={"line": rule})
    write_design(tmp_path, part={"x": "3", "y": "7"})
    found = findings(tmp_path)["line"]
    assert (as_fraction(found.margin), found.verdict) == (margin, verdict)


@pytest.mark.parametrize("seed", SEEDS)
@pytest.mark.parametrize("scale", [1, 5])
def test_one_scale_is_the_published_semantics(tmp_path, seed, scale):
    """With one scale the margin is the least of least and greatest of the plain margins, exactly."""
    for text, finding, due in found_and_due(tmp_path, Kinds(PURE, scale=Fraction(scale)), seed):
        assert finding.verdict == VERDICT[due.truth], text
        assert as_fraction(finding.margin) == due.margin, text
        assert finding.relative_margin == pytest.approx(float(due.margin / scale), rel=1e-12, abs=1e-15), text


@pytest.mark.parametrize("kinds", [Kinds(PURE), Kinds(MIXED), Kinds(MIXED, FLAGS)], ids=["pure", "mixed", "flags"])
@pytest.mark.parametrize("seed", SEEDS)
def test_relative_margins_choose_the_part(tmp_path, kinds, seed):
    """Least and greatest by relative margin, over several units and with flags, which have no number."""
    for text, finding, due in found_and_due(tmp_path, kinds, seed):
        assert finding.verdict == VERDICT[due.truth], text
        if due.margin is None:
            assert finding.margin is None, text
            continue
        assert finding.relative_margin == pytest.approx(float(due.relative), rel=1e-12, abs=1e-15), text
        assert as_fraction(finding.margin) == due.margin, text


@pytest.mark.parametrize("seed", SEEDS)
def test_missing_inputs_by_three_valued_logic(tmp_path, seed):
    """Kleene's logic: what is missing leaves a condition open unless what is known decides it."""
    seen = set()
    for text, finding, due in found_and_due(tmp_path, Kinds(MIXED, FLAGS), seed, missing=0.35):
        assert finding.verdict == VERDICT[due.truth], text
        assert (finding.margin is None) or due.truth is not None, text
        seen.add(finding.verdict)
    assert len(seen) > 1


def test_trees_are_of_every_kind():
    """The generator does what it is for: every word, both truths, numbers and none, at the seeds used above."""
    rooms, words = [], ""
    for seed in SEEDS:
        source = random.Random(seed)
        kinds = Kinds(MIXED, FLAGS)
        trees = [random_tree(source, kinds, 3) for _ in range(TREES)]
        point = random_point(source, kinds)
        rooms += [room_of(tree, point) for tree in trees]
        words += " ".join(text_of(tree) for tree in trees)
    assert {room.truth for room in rooms} == {True, False}
    assert any(room.margin is None for room in rooms)
    assert any(room.margin == 0 for room in rooms)
    assert all(word in words for word in ("not ", " and ", " or ", " within ", "<=", ">", "== yes"))


@pytest.mark.parametrize("seed", SEEDS)
def test_the_worst_element_is_the_one_of_least_relative_margin(tmp_path, seed):
    """Each element has its own limit: the greatest overshoot in mm need not be the worst."""
    source = random.Random(seed)
    pieces = {
        f"piece{index}": (Fraction(source.randint(1, 400), 4), Fraction(source.randint(1, 400), 4))
        for index in range(9)
    }
    write_ruleset(
        tmp_path,
        inputs={
            "pieces": {
                "kind": "collection",
                "meaning": "Pieces",
                "element": {"size": {"unit": "mm", "meaning": "Size"}, "limit": {"unit": "mm", "meaning": "Limit"}},
            }
        },
        rules={"size": {"each": "p in pieces", "require": "p.size <= p.limit"}},
    )
    write_design(
        tmp_path,
        pieces={
            name: {"size": literal(size, "mm"), "limit": literal(limit, "mm")} for name, (size, limit) in pieces.items()
        },
    )
    found = findings(tmp_path)["size"]
    worst = min(pieces, key=lambda name: (pieces[name][1] - pieces[name][0]) / pieces[name][1])
    size, limit = pieces[worst]
    assert found.binding is not None
    assert found.binding.element == worst
    assert as_fraction(found.margin) == limit - size
    assert found.verdict == ("complies" if size <= limit else "breach")
