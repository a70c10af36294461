"""Loops over collections: aggregates, `each`, pairs."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from itertools import combinations

from rulecheck.binding.bound import BROKEN, Bound, Broken, Element, Item, Items, Number, Truth, kind_of
from rulecheck.binding.comparing import all_of, any_of, opposite
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import Aggregate, Call, Listing, Syntax
from rulecheck.graph.conditions import Use
from rulecheck.graph.terms import Term
from rulecheck.operations.arithmetic import divide, total
from rulecheck.operations.extremes import maximum, minimum
from rulecheck.operations.operation import Operation
from rulecheck.operations.statistics import (
    count_where,
    deviation_where,
    greatest_where,
    least_where,
    mean_where,
    total_where,
)
from rulecheck.operations.values import Reason
from rulecheck.quantity.dimension import PURE
from rulecheck.quantity.units import find_unit

_CONDITIONAL: dict[str, Operation] = {
    "sum": total_where,
    "min": least_where,
    "max": greatest_where,
    "mean": mean_where,
    "deviation": deviation_where,
}
_PLAIN: dict[str, Operation] = {"sum": total, "min": minimum, "max": maximum}
MOST_ELEMENTS = 20_000


@dataclass(frozen=True, slots=True)
class _Turn:
    """An expression bound for one element, and what it rests on."""

    bound: Bound
    touched: frozenset[str]
    figures: frozenset[str]


@dataclass(frozen=True, slots=True)
class Loop:
    """The elements that may take part. `lacking` names what is required and not there, `missing` how much of it."""

    elements: tuple[Element, ...]
    lacking: str
    missing: int
    absent: bool
    empty_name: tuple[tuple[str, Bound], ...]


def loop(scope: Scope, variables: Sequence[str], collection: Syntax, where: Syntax | None, span: Span) -> Loop | Broken:
    """Expand a collection; elements that a condition certainly leaves out are left out."""
    items = _collection(scope, collection)
    if isinstance(items, Broken):
        return BROKEN
    turns = _turns(scope, variables, collection, items, span)
    if isinstance(turns, Broken):
        return BROKEN
    stand_in = tuple((name, Item(f"{items.path}.*")) for name in variables)
    if len(turns) > MOST_ELEMENTS:
        return scope.fault("too-large", f"this loop has {len(turns)} turns", span, expected=f"at most {MOST_ELEMENTS}")
    if where is not None and not turns:
        scope.inside(stand_in).express(where)
    elements: list[Element] = []
    for pairs in turns:
        label = ", ".join(bound.name for _, bound in pairs if isinstance(bound, Item))
        there = _there(scope, pairs, items, span)
        if where is None:
            elements.append(Element(label, pairs, there))
            continue
        condition = _turn(scope, pairs, where)
        if isinstance(condition, Broken):
            return BROKEN
        if not isinstance(condition, Truth):
            return scope.fault(
                "kind-mismatch", f"'where' takes a condition, and this is {kind_of(condition)}", where.span
            )
        if condition.term.kind != "constant":
            elements.append(Element(label, pairs, all_of(scope, [there, condition.term]) if there else condition.term))
        elif condition.term.value:
            elements.append(Element(label, pairs, there))
    return Loop(tuple(elements), items.lacking, items.missing, items.items is None, stand_in)


def stand_ins(loops: Iterable[Loop]) -> list[tuple[str, Bound]]:
    """An item for each variable of loops that no item stands behind; no two are the same."""
    pairs = [pair for item in loops for pair in item.empty_name]
    return [
        (name, Item(bound.path + "'" * place) if isinstance(bound, Item) else bound)
        for place, (name, bound) in enumerate(pairs)
    ]


def _there(scope: Scope, pairs: tuple[tuple[str, Bound], ...], items: Items, span: Span) -> Term | None:
    """None where the design states the items; a required item that it does not state may or may not be there."""
    gone = [bound.path for _, bound in pairs if isinstance(bound, Item) and bound.path in items.gone]
    return scope.missing(" and ".join(gone), "flag", PURE, span) if gone else None


def _turn(scope: Scope, pairs: tuple[tuple[str, Bound], ...], expression: Syntax) -> Bound:
    """An expression for one element; bound once for all states that change nothing that it reads."""
    variables = {**scope.variables, **dict(pairs)}
    if not all(isinstance(bound, Item) for bound in variables.values()):
        return scope.inside(pairs).express(expression)
    names = tuple((name, bound.path) for name, bound in variables.items() if isinstance(bound, Item))
    key = ("turn", expression.span, scope.owner.file, names)
    known: _Turn | None = scope.shared.memo.get((*key, ()))
    if known is None or scope.view.changes_any(known.touched):
        known = scope.shared.memo.get((*key, scope.view.states))
    if known is None:
        inner = replace(scope.inside(pairs), touched=set(), figures=set())
        bound = inner.express(expression)
        known = _Turn(bound, frozenset(inner.touched), frozenset(inner.figures))
        scope.shared.memo[(*key, scope.view.states)] = known
    scope.touched.update(known.touched)
    scope.figures.update(known.figures)
    return known.bound


def _turns(
    scope: Scope, variables: Sequence[str], collection: Syntax, items: Items, span: Span
) -> list[tuple[tuple[str, Bound], ...]] | Broken:
    paired = isinstance(collection, Call) and collection.function == "pairs"
    if paired != (len(variables) == 2):
        return scope.fault(
            "wrong-arguments",
            "two variables go with pairs(collection), one with a collection",
            span,
            expected="a, b in pairs(lamps), or a in lamps",
        )
    if not paired:
        return [((variables[0], item),) for item in items.items or ()]
    return [tuple(zip(variables, pair, strict=True)) for pair in combinations(items.items or (), 2)]


def _collection(scope: Scope, syntax: Syntax) -> Items | Broken:
    if isinstance(syntax, Call) and syntax.function == "pairs" and len(syntax.arguments) == 1:
        return _collection(scope, syntax.arguments[0])
    if isinstance(syntax, Listing):
        bound = [scope.express(item) for item in syntax.items]
        if any(isinstance(item, Broken) for item in bound):
            return BROKEN
        items = tuple(item for item in bound if isinstance(item, Item))
        if len(items) == len(bound) and items:
            return Items(items[0].path.rpartition(".")[0], items)
    found = scope.express(syntax)
    if isinstance(found, (Items, Broken)):
        return found
    return scope.fault(
        "kind-mismatch",
        f"'{show(syntax)}' is {kind_of(found)}, not a collection",
        syntax.span,
        expected="a collection such as tyres",
    )


def aggregate(scope: Scope, syntax: Aggregate) -> Bound:
    """`sum(m.mass for m in masses where …)` and its like."""
    turns = loop(scope, syntax.variables, syntax.collection, syntax.where, syntax.span)
    if isinstance(turns, Broken):
        return BROKEN
    bound = _folded_turns(scope, syntax, turns)
    if scope.shared.stand_ins and turns.absent:
        bound = _standing_in(scope, syntax, bound)
    if isinstance(bound, (Number, Truth)) and not scope.loop:
        text = show(syntax)
        scope.uses.setdefault(text, Use(text, "", bound.term, bound.unit if isinstance(bound, Number) else None))
    return bound


def _standing_in(scope: Scope, syntax: Aggregate, bound: Bound) -> Bound:
    """What an aggregate over unknown items gives goes by its text: the same text is the same value."""
    items = ", ".join(f"{name} in {item.path}" for name, item in scope.variables.items() if isinstance(item, Item))
    label = f"{show(syntax)} [{scope.owner.file}; {items}]"
    if isinstance(bound, Number):
        return replace(bound, term=scope.bank.input(label, "number", bound.dimension, syntax.span))
    return Truth(scope.bank.input(label, "flag", PURE, syntax.span)) if isinstance(bound, Truth) else bound


def _folded_turns(scope: Scope, syntax: Aggregate, turns: Loop) -> Bound:
    if syntax.function in ("count", "share"):
        return _count(scope, syntax, turns)
    assert syntax.expression is not None
    if syntax.function in ("every", "some"):
        return _quantified(scope, syntax, turns)
    return _numbers(scope, syntax, turns, syntax.expression)


def _absent(scope: Scope, turns: Loop, span: Span) -> Reason | None:
    return Reason("missing", turns.lacking, span) if turns.lacking else None


def _count(scope: Scope, syntax: Aggregate, turns: Loop) -> Bound:
    if turns.absent:
        return Number(scope.missing(turns.lacking, "number", PURE, syntax.span), find_unit("1"), counted=True)
    flags = [element.condition or scope.bank.flag(True) for element in turns.elements]
    gone = scope.missing(turns.lacking, "flag", PURE, syntax.span) if turns.lacking else None
    flags.extend([gone] * turns.missing if gone else [])
    certain = sum(1 for flag in flags if flag.kind == "constant")
    if certain == len(flags):
        counted = scope.bank.number(certain)
    else:
        made = scope.apply(count_where, flags, syntax.span)
        assert made is not None
        counted = made
    if syntax.function == "count":
        return Number(counted, find_unit("1"), counted=True)
    everything = loop(scope, syntax.variables, syntax.collection, None, syntax.span)
    whole = len(everything.elements) + everything.missing if isinstance(everything, Loop) else 0
    share = scope.apply(divide, [counted, scope.bank.number(whole)], syntax.span)
    assert share is not None
    return Number(share, find_unit("%"))


def _quantified(scope: Scope, syntax: Aggregate, turns: Loop) -> Bound:
    assert syntax.expression is not None
    flags: list[Term] = []
    for element in turns.elements or (Element("", turns.empty_name),):
        bound = scope.inside(element.variables).express(syntax.expression)
        if isinstance(bound, Broken):
            return BROKEN
        if not isinstance(bound, Truth):
            return scope.fault(
                "kind-mismatch",
                f"'{syntax.function}' takes a condition, and this is {kind_of(bound)}",
                syntax.expression.span,
            )
        if not turns.elements:
            break
        if element.condition is None:
            flags.append(bound.term)
        elif syntax.function == "every":
            flags.append(any_of(scope, [opposite(scope, element.condition), bound.term]))
        else:
            flags.append(all_of(scope, [element.condition, bound.term]))
    if turns.lacking:
        flags.append(scope.missing(turns.lacking, "flag", PURE, syntax.span))
    return Truth((all_of if syntax.function == "every" else any_of)(scope, flags))


def _numbers(scope: Scope, syntax: Aggregate, turns: Loop, expression: Syntax) -> Bound:
    bounds: list[Number] = []
    for element in turns.elements or (Element("", turns.empty_name),):
        bound = _turn(scope, element.variables, expression)
        if isinstance(bound, Broken):
            return BROKEN
        if not isinstance(bound, Number):
            return scope.fault(
                "kind-mismatch", f"'{syntax.function}' takes numbers, and this is {kind_of(bound)}", expression.span
            )
        bounds.append(bound)
    first = bounds[0]
    counted = all(bound.counted for bound in bounds) and syntax.function in ("sum", "min", "max")
    if turns.lacking:
        return Number(scope.missing(turns.lacking, "number", first.dimension, syntax.span), first.unit)
    if not turns.elements:
        return _of_nothing(scope, syntax, first)
    term = _folded(scope, syntax, turns, [bound.term for bound in bounds])
    return Number(term, first.unit, counted) if term else BROKEN


def _of_nothing(scope: Scope, syntax: Aggregate, first: Number) -> Number:
    """An empty collection sums to zero; its extremes and means are unknown."""
    if syntax.function == "sum":
        return Number(scope.bank.number(Fraction(0), first.dimension), first.unit)
    reason = Reason("undefined", f"'{show(syntax)}' has no element to take", syntax.span)
    return Number(scope.bank.unknown(reason, "number", first.dimension), first.unit)


def _folded(scope: Scope, syntax: Aggregate, turns: Loop, terms: list[Term]) -> Term | None:
    conditions = [element.condition for element in turns.elements]
    plain = _PLAIN.get(syntax.function)
    if plain is not None and not any(conditions):
        return terms[0] if len(terms) == 1 else scope.apply(plain, terms, syntax.span)
    pairs: list[Term] = []
    for condition, term in zip(conditions, terms, strict=True):
        pairs.extend((condition or scope.bank.flag(True), term))
    return scope.apply(_CONDITIONAL[syntax.function], pairs, syntax.span)
