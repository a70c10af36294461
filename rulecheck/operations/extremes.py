"""The least and the greatest of several numbers; they know which operand binds."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import Any

from rulecheck.operations import bounds
from rulecheck.operations.dimensions import alike
from rulecheck.operations.exact import to_ball
from rulecheck.operations.operation import Operation
from rulecheck.operations.spaces import is_arrays, is_symbolic

Rule = Callable[[Sequence[Any]], Any]


def fold_balls(pick: Callable[[Any, Any], Any]) -> Rule:
    """The extreme of balls: overlapping ones give a ball around both possibilities."""

    def rule(values: Sequence[Any]) -> Any:
        found = to_ball(values[0])
        for value in values[1:]:
            found = pick(found, to_ball(value))
        return found

    return rule


def binding(better: Callable[[Any, Any], bool]) -> Callable[[Sequence[float]], int]:
    """The index of the extreme; the first of equals; numbers that are not known never bind."""

    def rule(values: Sequence[float]) -> int:
        found = 0
        for index, value in enumerate(values):
            if better(value, values[found]) or values[found] != values[found]:
                found = index
        return found

    return rule


def one_hot(space: Any, values: Sequence[Any], best: Any, binds: Callable[[Sequence[float]], int]) -> Sequence[Any]:
    """Partials of an extreme: one for the operand that binds (the first of equals), zero for the others."""
    if not is_arrays(space) and not is_symbolic(space):
        found = binds(values)
        return tuple(1.0 if index == found else 0.0 for index in range(len(values)))
    shares: list[Any] = []
    taken: Any = False
    for index, value in enumerate(values):
        if is_symbolic(space):
            earlier = [space.Ne(other, best) for other in values[:index]]
            shares.append(space.Piecewise((1, space.And(space.Eq(value, best), *earlier)), (0, True)))
        else:
            held = space.equal(value, best) & ~space.asarray(taken)
            shares.append(space.where(held, 1.0, 0.0))
            taken = space.asarray(taken) | held
    return tuple(shares)


def _extreme(name: str, meaning: str, word: str, pick: Any, better: Callable[[Any, Any], bool]) -> Operation:
    exact = min if word == "min" else max

    def folded(space: Any, values: Sequence[Any]) -> Any:
        found = values[0]
        for value in values[1:]:
            found = space.minimum(found, value) if word == "min" else space.maximum(found, value)
        return found

    def symbolic(sympy: Any, values: Sequence[Any]) -> Any:
        return (sympy.Min if word == "min" else sympy.Max)(*values)

    def partials(space: Any, values: Sequence[Any]) -> Sequence[Any]:
        best: Any = None
        if is_arrays(space):
            best = folded(space, values)
        elif is_symbolic(space):
            best = symbolic(space, values)
        return one_hot(space, values, best, binds)

    binds = binding(better)
    return Operation(
        name=name,
        takes=("number",),
        gives="number",
        dimension=alike("compared"),
        exact=exact,
        ball=fold_balls(pick),
        array=folded,
        symbolic=symbolic,
        script=name,
        partials=partials,
        binds=binds,
        bounds=bounds.by_ends(exact),
        many=True,
        meaning=meaning,
        sign=word,
    )


minimum = _extreme(
    "minimum", "the least of one or more numbers", "min", lambda a, b: a.min(b), lambda new, old: new < old
)
maximum = _extreme(
    "maximum", "the greatest of one or more numbers", "max", lambda a, b: a.max(b), lambda new, old: new > old
)
