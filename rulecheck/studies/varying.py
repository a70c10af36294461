"""`workings --vary`: margins and figures along the values of one input, each an exact evaluation of its own.

A number is exchanged on the same graph, and what does not rest on it is taken over; what is settled at binding (a
choice, a part that comes or goes) binds anew for each value.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, replace
from datetime import date

from rulecheck import __version__
from rulecheck.diagnostics import Faults
from rulecheck.graph.figures import Figure, Graph
from rulecheck.model.design import Design
from rulecheck.model.ruleset import Rule, Ruleset
from rulecheck.model.value_ranges import Setting, Varying
from rulecheck.operations.values import Monomial, Unknown
from rulecheck.outcome.results import Amount
from rulecheck.outcome.varied import Axis, Varied, VariedFigure, VariedPoint
from rulecheck.quantity.numbers import show_exact, show_number
from rulecheck.readers.segment import resting_on
from rulecheck.reading.nearest import nearest
from rulecheck.studies.amounts import DIGITS, amount, reason_text
from rulecheck.studies.check import Checker
from rulecheck.studies.reporting import CAUTION

MOST_BOUND = 100
"""Values for each of which the design binds anew."""


@dataclass(frozen=True, slots=True)
class Asked:
    """What is asked along which values; `changes` are what lies over the design besides."""

    design: Design
    rulesets: Sequence[Ruleset]
    names: Sequence[str]
    day: date
    along: Varying
    curves: Varying | None
    changes: tuple[str, ...] = ()


def vary(asked: Asked, runs: Iterable[Iterable[Checker]]) -> Varied:
    """Every name along the values; `runs` has for each curve a checker for each value, made one at a time.

    Raises `Refused` where a name is not known.
    """
    rows: dict[str, list[list[VariedPoint]]] = {}
    heads: dict[str, VariedFigure] = {}
    cautions: dict[str, None] = {CAUTION: None}
    axis: list[Amount] = []
    for number, run in enumerate(runs):
        for setting, checker in zip(asked.along.settings, run, strict=True):
            heads = heads or _heads(asked, checker)
            cautions.update((text, None) for name in heads for text in _cautions(checker.graph, name))
            if not number:
                axis.append(_value(asked.along, setting, checker.graph))
            for name in heads:
                curves = rows.setdefault(name, [])
                if len(curves) == number:
                    curves.append([])
                curves[number].append(_point(asked, checker, name))
    figures = tuple(_finished(head, rows[name]) for name, head in heads.items())
    second = asked.curves
    return Varied(
        asked.design.name,
        asked.design.file,
        asked.day.isoformat(),
        Axis(asked.along.path, tuple(axis), asked.along.step),
        Axis(second.path, tuple(_stated(second, item) for item in second.settings), second.step) if second else None,
        figures,
        asked.changes,
        tuple(cautions),
        __version__,
    )


def exchanged(base: Checker, varying: Varying) -> Iterator[Checker]:
    """A checker for each number of a range: the first is the base, whose graph has the first number."""
    yield base
    graph, unit = base.graph, varying.unit
    assert unit is not None
    moving = resting_on(graph.bank, varying.path)
    still = [(index, found) for index, found in base.reader.known() if index not in moving]
    for setting in varying.settings[1:]:
        assert setting.number is not None
        inputs = {**graph.inputs, varying.path: Monomial(*unit.in_si(setting.number))}
        checker = Checker(replace(graph, inputs=inputs), base.reserves, base.decision)
        checker.reader.take(still)
        yield checker


# --- names -----------------------------------------------------------------------------------------------------------


def _heads(asked: Asked, checker: Checker) -> dict[str, VariedFigure]:
    """Rules, figures and all figures of a module, in the order in which they were asked for."""
    faults, heads = Faults(), {}
    rules = {bound.name for bound in checker.graph.rules}
    figures = checker.graph.figures
    for name in asked.names:
        found = [name] if name in rules or name in figures else _of_module(checker.graph, name)
        if not found:
            advice = nearest(name, [*rules, *figures])
            faults.add("unknown-name", f"there is no rule, figure or module '{name}'", advice=advice)
        for full in found:
            heads[full] = _head(asked, checker, full)
    faults.settle()
    return heads


def _of_module(graph: Graph, name: str) -> list[str]:
    return [full for full in graph.figures if full.startswith(f"{name}.") and not set(full) & set("([")]


def _head(asked: Asked, checker: Checker, name: str) -> VariedFigure:
    rule = _rule(asked, name)
    if rule is not None:
        return VariedFigure(name, rule.clause, rule.title or name.replace("_", " "), "", True, ())
    return VariedFigure(name, "", checker.graph.figures[name].meaning, "", False, ())


def _rule(asked: Asked, name: str) -> Rule | None:
    return next((book.rules[name] for book in asked.rulesets if name in book.rules), None)


def _cautions(graph: Graph, name: str) -> Iterator[str]:
    text = graph.cautions.get(name.partition(".")[0], "")
    if text:
        yield text


def _finished(head: VariedFigure, curves: Sequence[Sequence[VariedPoint]]) -> VariedFigure:
    """With its points, and the unit of the first number among them."""
    points = [point for curve in curves for point in curve]
    unit = next((point.amount.unit for point in points if point.amount and point.amount.value is not None), "")
    return replace(head, unit=unit, curves=tuple(tuple(curve) for curve in curves))


# --- points ----------------------------------------------------------------------------------------------------------


def _value(varying: Varying, setting: Setting, graph: Graph) -> Amount:
    """The value of the input: as stated, and as a number in its own unit where a list has numbers."""
    stated, fact = _stated(varying, setting), graph.facts.get(varying.path)
    value = graph.inputs.get(varying.path)
    if stated.value is not None or fact is None or fact.unit is None or not isinstance(value, Monomial):
        return stated
    rational, power = fact.unit.of_si(value.rational, value.power)
    if power:
        return stated
    return Amount(show_number(rational, DIGITS), fact.unit.symbol, float(rational), show_exact(rational))


def _stated(varying: Varying, setting: Setting) -> Amount:
    if setting.number is None or varying.unit is None:
        return Amount(setting.text.text, "")
    number = setting.number
    return Amount(show_number(number, DIGITS), varying.unit.symbol, float(number), show_exact(number))


def _point(asked: Asked, checker: Checker, name: str) -> VariedPoint:
    rule = _rule(asked, name)
    if rule is not None:
        return _margin(checker, rule)
    figure = checker.graph.figures.get(name)
    if figure is None:
        return VariedPoint(None, reason="there is no such figure at this value")
    return _figure(checker, figure)


def _margin(checker: Checker, rule: Rule) -> VariedPoint:
    bound = next(bound for bound in checker.graph.rules if bound.name == rule.name)
    finding = checker.finding(bound, rule)
    part = finding.binding.part if finding.binding else ""
    return VariedPoint(finding.margin, finding.verdict, finding.reason, part, bool(finding.outside_validity))


def _figure(checker: Checker, figure: Figure) -> VariedPoint:
    shown = amount(checker.reader, checker.bank, figure.term, figure.unit)
    outside = _is_outside(checker, figure)
    if shown is not None:
        return VariedPoint(shown, outside=outside)
    truth = checker.reader.truth(figure.term) if figure.term.sort == "flag" else checker.reader.value(figure.term)
    reason = reason_text(truth.reasons) if isinstance(truth, Unknown) else "not known"
    return VariedPoint(None, reason=reason, outside=outside)


def _is_outside(checker: Checker, figure: Figure) -> bool:
    """True where the figure, or one that it rests on, is outside its range of validity."""
    waiting, seen = [figure], {figure.name}
    while waiting:
        found = waiting.pop()
        if found.valid is not None and checker.reader.truth(found.valid) is False:
            return True
        for use in found.uses:
            below = checker.graph.figures.get(use.target)
            if below is not None and below.name not in seen:
                seen.add(below.name)
                waiting.append(below)
    return False
