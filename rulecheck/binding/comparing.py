"""Comparisons: what holds, and how much room there is to the limit."""

from __future__ import annotations

from dataclasses import dataclass, replace

from rulecheck.binding.arithmetic import mismatch
from rulecheck.binding.bound import (
    BROKEN,
    Bound,
    Broken,
    Choices,
    Date,
    Item,
    Number,
    Period,
    Signal,
    Truth,
    Words,
    kind_of,
)  # fmt: skip
from rulecheck.binding.curve_calls import steepest
from rulecheck.binding.scope import Scope
from rulecheck.binding.signal_rates import not_sampled, resolved
from rulecheck.diagnostics import Span
from rulecheck.formula.printing import show
from rulecheck.formula.syntax import Comparison, Listing, Name, Syntax
from rulecheck.graph.terms import Term
from rulecheck.operations.arithmetic import absolute, subtract
from rulecheck.operations.calendar import ordinal
from rulecheck.operations.comparison import at_most, below, equal, same_text
from rulecheck.operations.logic import both, either, negation
from rulecheck.quantity.dimension import CALENDAR
from rulecheck.quantity.dimension_names import name_of
from rulecheck.quantity.units import find_unit
from rulecheck.reading.nearest import nearest

FLIPPED = {"<=": ">", "<": ">=", ">=": "<", ">": "<="}


@dataclass(frozen=True, slots=True)
class Side:
    """One side of a comparison: its syntax, what it is, and whether a design's input stands in it."""

    syntax: Syntax
    bound: Bound
    rests_on_inputs: bool
    day: Term | None = None


@dataclass(frozen=True, slots=True)
class Compared:
    """One comparison: the flag, and where it has a number its margin with value and limit."""

    text: str
    span: Span
    holds: Term
    margin: Term | None = None
    strict: bool = False
    value: Number | None = None
    limit: Number | None = None
    sense: str = ""
    width: Term | None = None
    formula: Syntax | None = None


def compare(scope: Scope, syntax: Comparison, *, negated: bool = False) -> list[Compared] | Broken:
    """Every pair of a chain; `negated` turns each round (the caller turns `and` into `or`)."""
    sides = _sides(scope, syntax)
    made: list[Compared] = []
    for index, operator in enumerate(syntax.operators):
        compared = _pair(scope, syntax, sides[index], operator, sides[index + 1], negated)
        if isinstance(compared, Broken):
            return BROKEN
        made.append(replace(compared, formula=_alone(syntax, index)))
    return made


def _alone(syntax: Comparison, index: int) -> Comparison:
    """One pair of a chain as a comparison of its own."""
    if len(syntax.operators) == 1:
        return syntax
    return replace(syntax, operands=syntax.operands[index : index + 2], operators=(syntax.operators[index],))


def truth(scope: Scope, syntax: Comparison) -> Bound:
    """A comparison as a flag."""
    made = compare(scope, syntax)
    if isinstance(made, Broken):
        return BROKEN
    return Truth(all_of(scope, [item.holds for item in made]))


def all_of(scope: Scope, flags: list[Term]) -> Term:
    """Kleene's `and` with what is certain settled."""
    return _joined(scope, flags, decides=False)


def any_of(scope: Scope, flags: list[Term]) -> Term:
    """Kleene's `or` with what is certain settled."""
    return _joined(scope, flags, decides=True)


def _joined(scope: Scope, flags: list[Term], *, decides: bool) -> Term:
    open_flags = []
    for flag in flags:
        if flag.kind != "constant":
            open_flags.append(flag)
        elif flag.value is decides:
            return flag
    if not open_flags:
        return scope.bank.flag(not decides)
    if len(open_flags) == 1:
        return open_flags[0]
    made = scope.apply(either if decides else both, open_flags, None)
    assert made is not None
    return made


def opposite(scope: Scope, flag: Term) -> Term:
    """`not`."""
    if flag.kind == "constant":
        return scope.bank.flag(not flag.value)
    made = scope.apply(negation, [flag], None)
    assert made is not None
    return made


def _sides(scope: Scope, syntax: Comparison) -> list[Side]:
    """The operands; a bare word is a choice only opposite an input that declares choices."""
    operands = syntax.operands
    first = operands[0]
    if (
        len(operands) == 2
        and isinstance(first, Name)
        and len(first.path) == 1
        and not isinstance(operands[1], (Name, Listing))
    ):
        second = _side(scope, operands[1], None)
        return [_side(scope, first, second.bound), second]
    if len(operands) == 2 and isinstance(first, Name) and len(first.path) == 1 and first.path[0] not in scope.variables:
        other = _chosen(scope, operands[1]) or _quiet(scope, operands[1])
        if isinstance(other, Words) and first.path[0] in other.choices:
            second = _side(scope, operands[1], None)
            return [_side(scope, first, second.bound), second]
    made: list[Side] = []
    for operand in operands:
        made.append(_side(scope, operand, made[-1].bound if made else None))
    return made


def _chosen(scope: Scope, syntax: Syntax) -> Bound | None:
    """An input of one word that declares choices; None for any other word, which may be a choice itself."""
    word = syntax.path[0] if isinstance(syntax, Name) and len(syntax.path) == 1 else ""
    entry = scope.shared.vocabulary.entry(word) if word and word not in scope.variables else None
    return scope.express(syntax) if entry is not None and entry.kind == "choice" else None


def _quiet(scope: Scope, syntax: Syntax) -> Bound | None:
    """What a name is, where binding it raises no fault."""
    if not isinstance(syntax, Name) or len(syntax.path) < 2:
        return None
    before = list(scope.shared.faults.found)
    bound = scope.express(syntax)
    scope.shared.faults.found[:] = before
    return bound


def _side(scope: Scope, syntax: Syntax, other: Bound | None) -> Side:
    apart = scope.apart()
    bound = _expressed(apart, syntax, other)
    scope.touched.update(apart.touched)
    return Side(syntax, bound, bool(apart.touched))


def _expressed(scope: Scope, syntax: Syntax, other: Bound | None) -> Bound:
    if isinstance(other, Broken) and isinstance(syntax, Name) and len(syntax.path) == 1:
        # It may be a choice of the other side, which is at fault already.
        before = len(scope.shared.faults.found)
        bound = scope.express(syntax)
        del scope.shared.faults.found[before:]
        return bound
    if isinstance(other, Words) and other.choices:
        if isinstance(syntax, Name) and len(syntax.path) == 1 and syntax.path[0] not in scope.variables:
            return _choice(scope, syntax, other)
        if isinstance(syntax, Listing):
            return Choices(tuple(_expressed(scope, item, other) for item in syntax.items))
    return scope.express(syntax)


def _choice(scope: Scope, syntax: Name, other: Words) -> Bound:
    word = syntax.path[0]
    if word in other.choices:
        return Words(scope.bank.text(word), other.choices)
    before = len(scope.shared.faults.found)
    bound = scope.express(syntax)
    if isinstance(bound, Broken):
        del scope.shared.faults.found[before:]
        return scope.fault(
            "unknown-choice",
            f"'{word}' is not one of the choices here",
            syntax.span,
            expected=" or ".join(other.choices),
            advice=nearest(word, other.choices),
        )
    return bound


def _pair(scope: Scope, syntax: Comparison, left: Side, operator: str, right: Side, negated: bool) -> Compared | Broken:
    a, b = left.bound, right.bound
    if isinstance(a, Broken) or isinstance(b, Broken):
        return BROKEN
    shown = operator
    text = f"{show(left.syntax)} {shown} {show(right.syntax)}"
    if syntax.within is not None:
        text += f" within {show(syntax.within)}"
    if negated:
        text = f"not {text}"
    if operator == "in":
        return _membership(scope, left, right, text, negated)
    left, right = replace(left, bound=steepest(a, operator, True)), replace(right, bound=steepest(b, operator, False))
    if isinstance(a, Signal) or isinstance(b, Signal):
        return not_sampled(scope, text, syntax.span)
    left, right = _as_numbers(scope, left, right)
    if isinstance(left.bound, Number) and isinstance(right.bound, Number):
        return _numbers(scope, syntax, left, operator, right, text, negated)
    return _others(scope, syntax, left, operator, right, text, negated)


def _as_numbers(scope: Scope, left: Side, right: Side) -> tuple[Side, Side]:
    """Dates are compared by their days; a period of days is a number of them."""
    if isinstance(left.bound, Date) and isinstance(right.bound, Date):
        return _ordinal(scope, left), _ordinal(scope, right)
    for one, other in ((left, right), (right, left)):
        if isinstance(one.bound, Period) and not one.bound.months and isinstance(other.bound, Number):
            number = Number(scope.bank.number(one.bound.days, CALENDAR), find_unit("days"), counted=True)
            made = replace(one, bound=number)
            return (made, right) if one is left else (left, made)
    return left, right


def _ordinal(scope: Scope, side: Side) -> Side:
    assert isinstance(side.bound, Date)
    term = scope.apply(ordinal, [side.bound.term], side.syntax.span)
    assert term is not None
    return replace(side, bound=Number(term, find_unit("days"), counted=True), day=side.bound.term)


def _numbers(
    scope: Scope, syntax: Comparison, left: Side, operator: str, right: Side, text: str, negated: bool
) -> Compared | Broken:
    a, b = left.bound, right.bound
    assert isinstance(a, Number) and isinstance(b, Number)
    if a.dimension != b.dimension:
        return mismatch(scope, "compare", left.syntax, a, right.syntax, b, syntax.span)
    a, b = resolved(scope, a, b, syntax.span)
    if operator in ("==", "!="):
        return _equality(scope, syntax, left, operator, right, text, negated)
    if syntax.within is not None:
        return scope.fault(
            "formula-syntax", "'within' belongs to '=='", syntax.within.span, expected="a == b within width"
        )
    turned = FLIPPED[operator] if negated else operator
    limit_right = not right.rests_on_inputs or left.rests_on_inputs
    value, limit = (a, b) if limit_right else (b, a)
    upper = (turned in ("<", "<=")) == limit_right
    small, large = (a.term, b.term) if turned in ("<", "<=") else (b.term, a.term)
    strict = turned in ("<", ">")
    holds = scope.apply(below if strict else at_most, [small, large], syntax.span)
    margin = scope.apply(subtract, [large, small], syntax.span)
    if holds is None or margin is None:
        return BROKEN
    days = (left.day, right.day) if limit_right else (right.day, left.day)
    value, limit = (_shown(number, day) for number, day in zip((value, limit), days, strict=True))
    return Compared(text, syntax.span, holds, margin, strict, value, limit, "at most" if upper else "at least")


def _shown(number: Number, day: Term | None) -> Number:
    """A day is shown as a date, though it is compared as a number."""
    return number if day is None else replace(number, term=day)


def _equality(
    scope: Scope, syntax: Comparison, left: Side, operator: str, right: Side, text: str, negated: bool
) -> Compared | Broken:
    a, b = left.bound, right.bound
    assert isinstance(a, Number) and isinstance(b, Number)
    unequal = (operator == "!=") != negated
    limit_right = not right.rests_on_inputs or left.rests_on_inputs
    shown = _shown(a, left.day), _shown(b, right.day)
    value, limit = shown if limit_right else shown[::-1]
    if syntax.within is None:
        if not (a.counted and b.counted):
            return scope.fault(
                "formula-syntax",
                f"'{text}' compares measured numbers for equality and does not say how close",
                syntax.span,
                expected="a == b within 1 mm",
            )
        flag = scope.apply(equal, [a.term, b.term], syntax.span)
        if flag is None:
            return BROKEN
        return Compared(text, syntax.span, opposite(scope, flag) if unequal else flag, value=value, limit=limit)
    width = scope.express(syntax.within)
    if isinstance(width, Broken):
        return BROKEN
    if not isinstance(width, Number) or width.dimension != a.dimension:
        found = name_of(width.dimension) if isinstance(width, Number) else kind_of(width)
        return scope.fault(
            "dimension-mismatch", f"the width is {found}, the sides are {name_of(a.dimension)}", syntax.within.span
        )
    apart = scope.apply(subtract, [a.term, b.term], syntax.span)
    gap = scope.apply(absolute, [apart], syntax.span) if apart else None
    if gap is None:
        return BROKEN
    near, far = (width.term, gap) if unequal else (gap, width.term)
    holds = scope.apply(below if unequal else at_most, [near, far], syntax.span)
    margin = scope.apply(subtract, [far, near], syntax.span)
    assert holds is not None and margin is not None
    spoken = replace(limit, unit=width.unit or limit.unit)
    return Compared(text, syntax.span, holds, margin, unequal, value, spoken, "within", width.term)


def _others(
    scope: Scope, syntax: Comparison, left: Side, operator: str, right: Side, text: str, negated: bool
) -> Compared | Broken:
    a, b = left.bound, right.bound
    if operator not in ("==", "!="):
        return scope.fault(
            "kind-mismatch",
            f"'{show(left.syntax)}' is {kind_of(a)} and '{show(right.syntax)}' is {kind_of(b)}: these have no order",
            syntax.span,
            expected="numbers of one dimension, or dates",
        )
    flag = same(scope, a, b)
    if flag is None:
        advice = "quote the text" if isinstance(a, Words) != isinstance(b, Words) else ""
        return scope.fault(
            "kind-mismatch",
            f"'{show(left.syntax)}' is {kind_of(a)} and '{show(right.syntax)}' is {kind_of(b)}",
            syntax.span,
            expected="two values of one kind",
            advice=advice,
        )
    if (operator == "!=") != negated:
        flag = opposite(scope, flag)
    return Compared(text, syntax.span, flag)


def same(scope: Scope, a: Bound, b: Bound) -> Term | None:
    """Whether two texts, flags, items or dates are the same; None for what cannot be held against each other."""
    if isinstance(a, Words) and isinstance(b, Words):
        if a.term.kind == "constant" and b.term.kind == "constant":
            return scope.bank.flag(a.term.value == b.term.value)
        return scope.apply(same_text, [a.term, b.term], None)
    if isinstance(a, Truth) and isinstance(b, Truth):
        if b.term.kind == "constant":
            return a.term if b.term.value else opposite(scope, a.term)
        together = all_of(scope, [a.term, b.term])
        neither = all_of(scope, [opposite(scope, a.term), opposite(scope, b.term)])
        return any_of(scope, [together, neither])
    if isinstance(a, Item) and isinstance(b, Item):
        return scope.bank.flag(a.path == b.path)
    if isinstance(a, Date) and isinstance(b, Date):
        days = [scope.apply(ordinal, [day.term], None) for day in (a, b)]
        return scope.apply(equal, [day for day in days if day is not None], None)
    return None


def _membership(scope: Scope, left: Side, right: Side, text: str, negated: bool) -> Compared | Broken:
    if not isinstance(right.bound, Choices):
        return scope.fault(
            "kind-mismatch",
            f"'{show(right.syntax)}' is {kind_of(right.bound)}, and 'in' asks for a list",
            right.syntax.span,
            expected="a list of the ruleset, or [a, b, c]",
        )
    flags = []
    for member in right.bound.members:
        if isinstance(member, Broken):
            return BROKEN
        flag = same(scope, left.bound, member)
        if (
            flag is None
            and isinstance(left.bound, Number)
            and isinstance(member, Number)
            and left.bound.dimension == member.dimension
        ):
            flag = scope.apply(equal, [left.bound.term, member.term], left.syntax.span)
        if flag is None:
            return scope.fault(
                "kind-mismatch",
                f"'{show(left.syntax)}' is {kind_of(left.bound)}, and the list holds {kind_of(member)}",
                left.syntax.span,
                expected="values of the kind that the list holds",
            )
        flags.append(flag)
    found = any_of(scope, flags)
    return Compared(text, left.syntax.span, opposite(scope, found) if negated else found, sense="one of")
