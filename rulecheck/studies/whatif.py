"""`whatif`: every margin and every figure before and after changes, most affected first.

Beside the true value stands the first-order prediction from the gradient of the margin, so that what is not linear
shows. It is given where a change moves numbers alone; a choice or a part that comes or goes has no slope.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from fractions import Fraction

from rulecheck import __version__
from rulecheck.graph.figures import Figure
from rulecheck.graph.terms import Inputs, Term
from rulecheck.model.design import Design
from rulecheck.model.ruleset import Ruleset
from rulecheck.operations.values import Monomial
from rulecheck.outcome.changes import FigureChange, InputChange, LimitChange, Moved, RuleChange, WhatIf
from rulecheck.outcome.results import Amount, Finding
from rulecheck.quantity.numbers import show_exact, show_number
from rulecheck.quantity.units import Unit
from rulecheck.readers.gradient import GradientReader
from rulecheck.reading.nodes import Located
from rulecheck.reading.nodes import Mapping as Mapped
from rulecheck.studies.amounts import PI, amount
from rulecheck.studies.check import Checker
from rulecheck.studies.marks import marks
from rulecheck.studies.reporting import CAUTION
from rulecheck.studies.totals import total

_AXES = ("x", "y", "z")


@dataclass(frozen=True, slots=True)
class Column:
    """One change: its name, what it sets, and the design judged under it."""

    name: str
    settings: tuple[str, ...]
    checker: Checker
    structural: bool
    design: Design


def what_if(base: Checker, columns: Sequence[Column], design: Design, rulesets: Sequence[Ruleset], day: date) -> WhatIf:
    """Compare the design with itself under each change."""
    comparing = _Comparing(base, columns, rulesets)
    rules = [change for change in comparing.rules() if change is not None]
    figures = [change for change in comparing.figures() if change is not None]
    before, after = comparing.findings
    return WhatIf(
        design=design.name,
        file=design.file,
        date=day.isoformat(),
        columns=tuple((column.name, column.settings) for column in columns),
        verdict=total(before.values()),
        verdicts=tuple(total(found.values()) for found in after),
        rules=tuple(sorted(rules, key=lambda change: -comparing.weight(change))),
        figures=tuple(sorted(figures, key=lambda change: -_relative(change.before, change.moved))),
        inputs=tuple(_inputs(design, [column.design for column in columns])),
        limits=tuple(comparing.limits()),
        unchanged=len(before) - len(rules),
        cautions=(CAUTION,),
        version=__version__,
        marks=marks([base, *(column.checker for column in columns)], whole=True),
    )


Findings = dict[tuple[str, str], Finding]


class _Comparing:
    def __init__(self, base: Checker, columns: Sequence[Column], rulesets: Sequence[Ruleset]) -> None:
        self.base, self.columns = base, columns
        self.books = {book.file: book for book in rulesets}
        self.gradients = GradientReader(base.bank, base.reader)
        self.findings = self._all(base), [self._all(column.checker) for column in columns]

    def _all(self, checker: Checker) -> Findings:
        return {
            (rule.ruleset, rule.name): checker.finding(
                rule, self.books[rule.ruleset].rules[rule.name], with_spread=False
            )
            for rule in checker.graph.rules
        }

    def rules(self) -> Iterable[RuleChange | None]:
        """Every rule that moves."""
        before, after = self.findings
        bound = {(rule.ruleset, rule.name): rule for rule in self.base.graph.rules}
        for key, finding in before.items():
            others = [found[key] for found in after]
            if all(_same(finding, other) for other in others):
                continue
            judged = self.base.binding(bound[key])
            part = judged.part if judged else None
            moved = [
                Moved(
                    other.verdict,
                    other.margin,
                    _difference(finding.margin, other.margin),
                    self._foretold(part.margin, part.unit, column) if part is not None and part.margin else None,
                    other.binding.part if other.binding else "",
                )
                for other, column in zip(others, self.columns, strict=True)
            ]
            name = finding.binding.part if finding.binding else ""
            yield RuleChange(
                finding.name, finding.clause, finding.title, finding.verdict, finding.margin, name, tuple(moved)
            )

    def weight(self, change: RuleChange) -> float:
        """How much a rule is affected: a verdict that turns first, then the movement against the margin's own scale."""
        turned = any(moved.verdict != change.verdict for moved in change.moved)
        return (1e12 if turned else 0.0) + _relative(change.before, change.moved)

    def figures(self) -> Iterable[FigureChange | None]:
        """Every figure without an argument and outside states that moves."""
        for name, figure in self.base.graph.figures.items():
            if "(" in name or "[" in name or figure.term.sort == "text":
                continue
            before = self._figure(self.base, figure)
            moved = [self._moved_figure(name, figure, before, column) for column in self.columns]
            if any(item is not None and item.difference is not None for item in moved):
                yield FigureChange(
                    name, figure.meaning, before, tuple(item or Moved(None, None, None, None) for item in moved)
                )

    def limits(self) -> Iterable[LimitChange]:
        """Every figure that is a word and known before or after a change, also where it stays as it is."""
        for name, figure in self.base.graph.figures.items():
            if "(" in name or "[" in name or figure.term.sort != "text":
                continue
            before = self._word(self.base, name)
            after = tuple(self._word(column.checker, name) for column in self.columns)
            if before or any(after):
                yield LimitChange(name, figure.meaning, before, after)

    def _word(self, checker: Checker, name: str) -> str:
        figure = checker.graph.figures.get(name)
        shown = self._figure(checker, figure) if figure is not None else None
        return shown.shown if shown is not None else ""

    def _figure(self, checker: Checker, figure: Figure) -> Amount | None:
        return amount(checker.reader, checker.bank, figure.term, figure.unit)

    def _moved_figure(self, name: str, figure: Figure, before: Amount | None, column: Column) -> Moved | None:
        other = column.checker.graph.figures.get(name)
        if other is None:
            return None
        after = self._figure(column.checker, other)
        difference = _difference(before, after)
        if difference is None and (before is None) == (after is None) and str(before) == str(after):
            return Moved(None, after, None, None)
        if difference is None:
            difference = Amount("changed", "")
        foretold = self._foretold(figure.term, figure.unit, column) if figure.term.sort == "number" else None
        return Moved(None, after, difference, foretold)

    def _foretold(self, term: Term, unit: Unit | None, column: Column) -> Amount | None:
        """The first-order change of a number, in its unit."""
        if column.structural:
            return None
        steps = _steps(self.base.graph.inputs, column.checker.graph.inputs)
        change = self.gradients.along(term, {path: float(step) for path, step in steps.items()})
        if change is None or math.isinf(change):
            return None
        scale = float(unit.factor * PI**unit.power) if unit is not None else 1.0
        shown = change / scale
        return Amount(
            show_number(Fraction(repr(shown)), 4) if shown == shown else "?", unit.symbol if unit else "", shown
        )


def _inputs(before: Design, after: Sequence[Design]) -> Iterable[InputChange]:
    """Every input whose text differs, in the order of the changed design."""
    paths = dict.fromkeys(path for design in (*after, before) for path in design.leaves)
    for path in paths:
        point, _, axis = path.rpartition(".")
        if axis in _AXES and point in paths:
            continue  # a point that is written in one piece on one side
        first, others = _text(before, path), tuple(_text(design, path) for design in after)
        if any(other != first for other in others):
            yield InputChange(path, first, others)


def _text(design: Design, path: str) -> str:
    node = design.leaves.get(path)
    if node is None and f"{path}.x" in design.leaves:
        return " ".join(_text(design, f"{path}.{axis}") or "?" for axis in _AXES)
    value = node.get("value") if isinstance(node, Mapped) else node
    return value.text if isinstance(value, Located) else "" if node is None else "…"


def _steps(before: Inputs, after: Inputs) -> Mapping[str, Fraction]:
    """By how much each number moves, in SI."""
    steps = {}
    for path, value in before.items():
        other = after.get(path)
        if isinstance(value, Monomial) and isinstance(other, Monomial) and value != other:
            steps[path] = other.rational * PI**other.power - value.rational * PI**value.power
    return steps


def _same(before: Finding, after: Finding) -> bool:
    if before.verdict == after.verdict == "not applicable":
        return True
    return before.verdict == after.verdict and before.margin == after.margin and before.reason == after.reason


def _difference(before: Amount | None, after: Amount | None) -> Amount | None:
    """After less before: exact where both are; None where nothing moves or one is not known."""
    if before is None or after is None or before.unit != after.unit:
        return None
    if before.exact and after.exact:
        step = Fraction(after.exact) - Fraction(before.exact)
        return Amount(_signed(step), before.unit, float(step), show_exact(step)) if step else None
    if before.value is None or after.value is None or before.value == after.value:
        return None
    return Amount(_signed(Fraction(repr(after.value - before.value))), before.unit, after.value - before.value)


def _signed(step: Fraction) -> str:
    shown = show_number(step, 5)
    return shown if shown.startswith("-") else f"+{shown}"


def _relative(before: Amount | None, moved: Sequence[Moved]) -> float:
    """The greatest movement against the value before."""
    steps = [
        abs(item.difference.value)
        for item in moved
        if item.difference is not None and item.difference.value is not None
    ]
    if not steps:
        return 0.0
    size = abs(before.value) if before is not None and before.value else 1.0
    return max(steps) / max(size, 1e-9)
