"""The dimension rules that operations share."""

from __future__ import annotations

from collections.abc import Callable, Sequence

from rulecheck.operations.operation import DimensionFault
from rulecheck.quantity.dimension import PURE, Dimension

DimensionRule = Callable[[Sequence[Dimension]], Dimension]


def alike(verb: str, step: int = 1) -> DimensionRule:
    """All operands have one dimension, and so has the result; `verb` tells what cannot be done.

    With `step` 2 only every second operand counts: the others are flags.
    """

    def rule(dimensions: Sequence[Dimension]) -> Dimension:
        return _shared(dimensions[step - 1 :: step], verb)

    return rule


def alike_to_pure(verb: str) -> DimensionRule:
    """All operands have one dimension; the result is pure, or no number at all."""

    def rule(dimensions: Sequence[Dimension]) -> Dimension:
        _shared(dimensions, verb)
        return PURE

    return rule


def pure(name: str) -> DimensionRule:
    """Pure operands, pure result."""

    def rule(dimensions: Sequence[Dimension]) -> Dimension:
        for dimension in dimensions:
            if not dimension.is_pure:
                raise DimensionFault(
                    f"{name} takes a pure number, not {shown(dimension)}", "divide by a value of the same dimension"
                )
        return PURE

    return rule


def same(dimensions: Sequence[Dimension]) -> Dimension:
    """The dimension of the first operand."""
    return dimensions[0]


def product(dimensions: Sequence[Dimension]) -> Dimension:
    """The product of two dimensions."""
    return dimensions[0] * dimensions[1]


def ratio(dimensions: Sequence[Dimension]) -> Dimension:
    """The quotient of two dimensions."""
    return dimensions[0] / dimensions[1]


def none(dimensions: Sequence[Dimension]) -> Dimension:
    """For operands without dimension: flags, texts, dates."""
    return PURE


def exactly(due: Dimension, position: int, name: str, result: Dimension = PURE) -> DimensionRule:
    """The operand at `position` has the dimension that is due."""

    def rule(dimensions: Sequence[Dimension]) -> Dimension:
        if dimensions[position] != due:
            raise DimensionFault(
                f"{name} takes {shown(due)}, not {shown(dimensions[position])}", f"give a value in {due}"
            )
        return result

    return rule


def shown(dimension: Dimension) -> str:
    """A dimension for a message.

    >>> shown(Dimension.of(m=1, s=-2)), shown(PURE)
    ('[m*s^-2]', 'a pure number')
    """
    return "a pure number" if dimension.is_pure else f"[{dimension}]"


def _shared(dimensions: Sequence[Dimension], verb: str) -> Dimension:
    first = dimensions[0] if dimensions else PURE
    for other in dimensions[1:]:
        if other != first:
            raise DimensionFault(f"{shown(first)} and {shown(other)} cannot be {verb}", "both need the same dimension")
    return first
