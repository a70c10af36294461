"""`correlations:` of a design: measurements that are off together."""

from __future__ import annotations

from collections.abc import Container
from collections.abc import Mapping as MappingOf
from fractions import Fraction
from itertools import combinations

from rulecheck.diagnostics import Faults, Related, Span
from rulecheck.model.design import Correlation, LeafNode
from rulecheck.model.names import check_path
from rulecheck.quantity.dimension import PURE
from rulecheck.quantity.reading_values import read_quantity
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located, Mapping, Node, Sequence

MOST_CORRELATED = 60
"""So many inputs may stand in correlations: their matrix is proved to be one, by exact elimination."""
_KEYS = ("between", "coefficient", "because")


def read_correlations(node: Node | None, known: MappingOf[str, LeafNode], faults: Faults) -> tuple[Correlation, ...]:
    """Pairs of inputs with their coefficients. Notes a fault where no measurements can be correlated like this.

    Each entry names two inputs or more in `between:`, and every pair of them has the `coefficient:`.
    """
    if node is None:
        return ()
    if not isinstance(node, Sequence):
        expected = "[{between: [path, path], coefficient: 0.8}]"
        faults.add("bad-structure", "correlations are a list", node.span, expected=expected)
        return ()
    before = len(faults.found)
    found: dict[frozenset[str], Correlation] = {}
    for item in node:
        for pair in _pairs(item, known, faults):
            key = frozenset((pair.first, pair.second))
            other = found.setdefault(key, pair)
            if other is not pair:
                told = f"'{pair.first}' and '{pair.second}' are correlated twice"
                related = (Related("the other one is here", other.span),)
                faults.add("name-taken", told, pair.span, advice="state each pair once", related=related)
    correlations = tuple(found.values())
    if len(faults.found) == before and correlations:
        _hold_together(correlations, node.span, faults)
    return correlations


def _pairs(node: Node, known: MappingOf[str, LeafNode], faults: Faults) -> tuple[Correlation, ...]:
    if not isinstance(node, Mapping):
        expected = "{between: [path, path], coefficient: 0.8}"
        faults.add("bad-structure", "a correlation has keys", node.span, expected=expected)
        return ()
    for entry in node:
        if entry.key.text not in _KEYS:
            told = f"a correlation has no key '{entry.key.text}'"
            advice = nearest(entry.key.text, _KEYS)
            faults.add("unknown-key", told, entry.key.span, expected=" or ".join(_KEYS), advice=advice)
    paths = _paths(node, known, faults)
    coefficient = _coefficient(node, faults)
    if coefficient is None:
        return ()
    return tuple(Correlation(a, b, coefficient, node.span) for a, b in combinations(paths, 2))


def _paths(node: Mapping, known: MappingOf[str, LeafNode], faults: Faults) -> tuple[str, ...]:
    between = node.get("between")
    if not isinstance(between, Sequence) or len(between.items) < 2:
        place = between.span if between is not None else node.span
        faults.add("bad-structure", "'between' names two inputs or more", place, expected="between: [path, path]")
        return ()
    paths: dict[str, None] = {}
    for item in between:
        if not isinstance(item, Located):
            faults.add("bad-structure", "an input is named by its path", item.span, expected="tyres.rear.width")
        elif not check_path(item, faults):
            continue
        elif item.text in paths:
            faults.add("name-taken", f"'{item.text}' stands twice in one correlation", item.span, advice="name it once")
        elif not _is_stated(item.text, known):
            advice = nearest(item.text, known)
            faults.add("unknown-name", f"the design gives nothing under '{item.text}'", item.span, advice=advice)
        else:
            paths[item.text] = None
    return tuple(paths)


def _is_stated(path: str, known: Container[str]) -> bool:
    """True for a value of the design, or a coordinate of a point that is written in one piece."""
    point, _, axis = path.rpartition(".")
    return path in known or (axis in ("x", "y", "z") and (point in known or f"{point}.at" in known))


def _coefficient(node: Mapping, faults: Faults) -> Fraction | None:
    where = node.get("coefficient")
    if where is None:
        faults.add("missing-key", "'coefficient:' is missing here", node.span, expected="a number from -1 to 1")
        return None
    if not isinstance(where, Located):
        faults.add("bad-value", "'coefficient' is a single value", where.span)
        return None
    read = read_quantity(where, PURE, faults=faults)
    if read is not None and abs(read.si()[0]) > 1:
        faults.add("bad-value", "a correlation lies between -1 and 1", where.span, expected="a number from -1 to 1")
        return None
    return read.si()[0] if read is not None else None


def _hold_together(correlations: tuple[Correlation, ...], span: Span, faults: Faults) -> None:
    """A matrix of correlations has no negative square: no sum of measurements has a negative variance."""
    names = list(dict.fromkeys(name for item in correlations for name in (item.first, item.second)))
    if len(names) > MOST_CORRELATED:
        told = f"{len(names)} inputs stand in correlations"
        faults.add("too-large", told, span, expected=f"at most {MOST_CORRELATED}")
        return
    place = {name: index for index, name in enumerate(names)}
    matrix = [[Fraction(row == column) for column in range(len(names))] for row in range(len(names))]
    for item in correlations:
        row, column = place[item.first], place[item.second]
        matrix[row][column] = matrix[column][row] = item.coefficient
    if not is_semidefinite(matrix):
        faults.add(
            "bad-value", "these correlations contradict each other: a sum of the values would have a negative variance",
            span, advice="lower the coefficients, or correlate the third pair of such a triangle too",
        )  # fmt: skip


def is_semidefinite(matrix: list[list[Fraction]]) -> bool:
    """True where no vector gives the symmetric matrix a negative square; exact, by symmetric elimination.

    >>> one, close, apart = Fraction(1), Fraction(9, 10), Fraction(-9, 10)
    >>> is_semidefinite([[one, close], [close, one]])
    True
    >>> is_semidefinite([[one, close, apart], [close, one, close], [apart, close, one]])
    False
    """
    rows = [list(row) for row in matrix]
    for step, pivot_row in enumerate(rows):
        pivot = pivot_row[step]
        rest = range(step + 1, len(rows))
        if pivot < 0 or (pivot == 0 and any(pivot_row[column] for column in rest)):
            return False
        if pivot == 0:
            continue
        for row in rest:
            share = rows[row][step] / pivot
            for column in rest:
                rows[row][column] -= share * pivot_row[column]
    return True
