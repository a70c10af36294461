"""The facts that an operation states, each in one place."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Any, Literal

from rulecheck.operations.values import ReasonKind
from rulecheck.quantity.dimension import Dimension

Sort = Literal["number", "flag", "text", "date"]
Form = Literal["infix", "prefix", "call"]


class DimensionFault(Exception):
    """Raised by a dimension rule: the message names the dimensions, the advice says what to do."""

    def __init__(self, message: str, advice: str = "") -> None:
        super().__init__(message)
        self.advice = advice


@dataclass(frozen=True, slots=True)
class Undefined:
    """What a rule gives where the operation has no value: `division by zero`."""

    text: str
    kind: ReasonKind = "undefined"


class Undecided:
    """What a ball rule gives where this precision cannot tell; a single value, `UNDECIDED`."""


UNDECIDED = Undecided()


@dataclass(frozen=True, slots=True, kw_only=True)
class Operation:
    """One operation of the catalogue.

    `takes` names the sorts of the operands (where `many`, the last `repeats` of them repeat), `gives` the
    sort of the result. `dimension(dimensions)` gives the result's dimension or raises `DimensionFault`.
    `exact(values)` evaluates in the exact ring and gives None where it leads out of it;
    `ball(values)` evaluates on flint balls at the current precision, or gives `Undefined` or `UNDECIDED`.
    `array(numpy, values)` evaluates on float arrays; total, also on masked lanes (gives nan, no warning).
    `partials(space, values)` gives the partial derivatives by each operand, in any name space that has
    `sqrt exp log sin cos ...` (math, numpy, sympy), or None where the operation gives no number.
    Where `strict`, a reader hands in known values only: one unknown operand makes the result unknown. Else
    `exact` and `ball` see every operand, also `Unknown`, `Bounds` and `UNDECIDED`, and may give them.
    `bounds(values)` evaluates where an operand is `Bounds` and the others are exact; None where it cannot say.
    `jumps` marks an operation whose partials are those between its jumps.
    `binds(floats)` says which operand decides the result (minimum, maximum), else None.
    `symbolic(sympy, values)` gives the sympy form. `script` is JavaScript with `{0}`, `{1}`
    for the operands, or the name of a function of `script_library` that takes them all where `many`.
    `name` is the word in workings; `sign`, `form`, `precedence` say how it is printed.
    """

    name: str
    takes: tuple[Sort, ...]
    gives: Sort
    dimension: Callable[[Sequence[Dimension]], Dimension]
    exact: Callable[[Sequence[Any]], Any]
    ball: Callable[[Sequence[Any]], Any]
    array: Callable[[Any, Sequence[Any]], Any]
    symbolic: Callable[[Any, Sequence[Any]], Any]
    script: str
    partials: Callable[[Any, Sequence[Any]], Sequence[Any]] | None = None
    binds: Callable[[Sequence[float]], int] | None = None
    bounds: Callable[[Sequence[Any]], Any] | None = None
    jumps: bool = False
    strict: bool = True
    many: bool = False
    repeats: int = 1
    domain: str = ""
    meaning: str = ""
    sign: str = ""
    form: Form = "call"
    precedence: int = 100
