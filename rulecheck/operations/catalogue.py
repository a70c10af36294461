"""All operations by name."""

from __future__ import annotations

from rulecheck.operations import (
    arithmetic,
    calendar,
    comparison,
    extremes,
    logic,
    roots_and_exponentials,
    rounding,
    statistics,
    trigonometry,
)
from rulecheck.operations.operation import Operation

_FAMILIES = (
    arithmetic,
    roots_and_exponentials,
    trigonometry,
    rounding,
    extremes,
    statistics,
    comparison,
    logic,
    calendar,
)

# Every operation that stands by name in a family; powers with a constant exponent come from `rational_power`.
CATALOGUE: dict[str, Operation] = {
    operation.name: operation
    for family in _FAMILIES
    for operation in vars(family).values()
    if isinstance(operation, Operation)
}
