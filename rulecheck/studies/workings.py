"""`workings`: how a rule or a figure came about, step by step."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from datetime import date

from rulecheck import __version__
from rulecheck.diagnostics import Faults
from rulecheck.formula.printing import show, show_with
from rulecheck.formula.syntax import Name, Syntax
from rulecheck.graph.conditions import BoundRule
from rulecheck.graph.figures import Figure, Use
from rulecheck.graph.terms import Term
from rulecheck.model.design import Design
from rulecheck.model.ruleset import Rule, Ruleset
from rulecheck.outcome.results import Amount, Step, Working, Workings
from rulecheck.reading.nearest import nearest
from rulecheck.studies.amounts import amount, place
from rulecheck.studies.check import Checker

MOST_STEPS = 400


def workings_of(
    checker: Checker,
    design: Design,
    rulesets: Sequence[Ruleset],
    names: Sequence[str],
    day: date,
    *,
    closed_form: bool = False,
    solve_for: str = "",
) -> Workings:
    """The workings of each name. Raises `Refused` where a name is not known."""
    faults = Faults()
    items: list[Working] = []
    for name in names:
        found = list(_named(checker, rulesets, name))
        if not found:
            known = _known(checker, rulesets)
            faults.add("unknown-name", f"there is no rule, figure or module '{name}'", advice=nearest(name, known))
        items.extend(found)
    faults.settle()
    return Workings(design.name, design.file, day.isoformat(), tuple(items), __version__)


def _known(checker: Checker, rulesets: Sequence[Ruleset]) -> list[str]:
    return [*(name for book in rulesets for name in book.rules), *checker.graph.figures]


def _named(checker: Checker, rulesets: Sequence[Ruleset], name: str) -> Iterable[Working]:
    books = {book.file: book for book in rulesets}
    for bound in checker.graph.rules:
        if bound.name == name:
            yield _rule(checker, bound, books[bound.ruleset].rules[name])
    figures = checker.graph.figures
    if name in figures:
        yield _figure(checker, figures[name])
    elif any(full.startswith(f"{name}.") for full in figures):
        for full, figure in figures.items():
            if full.startswith(f"{name}.") and "(" not in full and "[" not in full:
                yield _figure(checker, figure)


def _rule(checker: Checker, bound: BoundRule, rule: Rule) -> Working:
    finding = checker.finding(bound, rule)
    steps = _Walk(checker).figures(bound.figures)
    margin = f"{finding.margin}" if finding.margin else ""
    return Working(rule.name, finding.title, rule.clause, finding.verdict, margin, finding.parts, tuple(steps))


def _figure(checker: Checker, figure: Figure) -> Working:
    steps = _Walk(checker).figures([figure.name])
    return Working(figure.name, figure.meaning, "", "", "", (), tuple(steps))


class _Walk:
    """Figures with what they rest on, what comes first first; each once."""

    def __init__(self, checker: Checker) -> None:
        self.checker = checker
        self.steps: dict[str, Step] = {}

    def figures(self, names: Iterable[str]) -> list[Step]:
        known = self.checker.graph.figures
        for name in names:
            if name in known:
                self._visit(known[name], 0)
        return list(self.steps.values())[:MOST_STEPS]

    def _visit(self, figure: Figure, depth: int) -> None:
        if figure.name in self.steps or len(self.steps) >= MOST_STEPS:
            return
        state = figure.name.partition(" [")[2]
        for use in figure.uses:
            self._use(use, state, depth)
        self.steps[figure.name] = self._step(figure, depth)

    def _use(self, use: Use, state: str, depth: int) -> None:
        figures = self.checker.graph.figures
        for candidate in (f"{use.target} [{state}" if state else "", use.target):
            if candidate in figures:
                self._visit(figures[candidate], depth + 1)
                return
        fact = self.checker.graph.facts.get(use.target)
        if fact is not None and use.target not in self.steps:
            shown = self._amount(use.term, use)
            source = ", ".join(filter(None, (fact.basis, fact.reference)))
            result, exact = (str(shown), shown.exact) if shown else ("not stated", "")
            self.steps[use.target] = Step(
                use.target, "input", "", "", result, exact, source, place(fact.span), depth=depth + 1
            )

    def _amount(self, term: Term, use: Use | Figure) -> Amount | None:
        return amount(self.checker.reader, self.checker.bank, term, use.unit)

    def _step(self, figure: Figure, depth: int) -> Step:
        shown = self._amount(figure.term, figure)
        outside = figure.valid is not None and self.checker.reader.truth(figure.valid) is False
        return Step(
            figure.name,
            figure.meaning,
            show(figure.syntax),
            self._with_numbers(figure),
            str(shown) if shown else self._why(figure.term),
            shown.exact if shown else "",
            figure.source,
            place(figure.span),
            outside,
            depth,
        )

    def _with_numbers(self, figure: Figure) -> str:
        uses = {use.text: use for use in figure.uses}

        def number(syntax: Syntax) -> str | None:
            use = uses.get(".".join(syntax.path)) if isinstance(syntax, Name) else None
            shown = self._amount(use.term, use) if use else None
            return str(shown) if shown else None

        return show_with(figure.syntax, number)

    def _why(self, term: Term) -> str:
        from_reader = self.checker.reader.value(term)
        reasons = getattr(from_reader, "reasons", ())
        texts = dict.fromkeys(reason.text for reason in reasons)
        return f"unknown: {', '.join(list(texts)[:4])}"
