"""How closely the parts of a formula hold together, loosest first; parser and printing share it."""

from __future__ import annotations

from typing import Final

CONDITIONAL: Final = 1
OR: Final = 2
AND: Final = 3
NOT: Final = 4
COMPARISON: Final = 5
SUM: Final = 6
PRODUCT: Final = 7
NEGATIVE: Final = 8
POWER: Final = 9
WHOLE: Final = 10

RANKS: Final[dict[str, int]] = {
    "if": CONDITIONAL,
    "or": OR,
    "and": AND,
    "<": COMPARISON,
    "<=": COMPARISON,
    ">": COMPARISON,
    ">=": COMPARISON,
    "==": COMPARISON,
    "!=": COMPARISON,
    "in": COMPARISON,
    "+": SUM,
    "-": SUM,
    "*": PRODUCT,
    "/": PRODUCT,
    "^": POWER,
}
"""The rank of each sign and word that stands between two operands."""
