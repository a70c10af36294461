"""`workings`: how a rule or a figure came about, step by step."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from datetime import date
from types import MappingProxyType

from rulecheck import __version__
from rulecheck.diagnostics import Faults
from rulecheck.formula.printing import show, show_with
from rulecheck.formula.syntax import Aggregate, Call, Name, Number, Syntax
from rulecheck.graph.conditions import BoundRule, Case, Part, Use
from rulecheck.graph.envelopes import Placing
from rulecheck.graph.figures import Figure
from rulecheck.graph.terms import Term
from rulecheck.model.design import Design
from rulecheck.model.ruleset import Rule, Ruleset
from rulecheck.operations.values import Unknown
from rulecheck.outcome.results import Amount, ClosedFormResult, Step, Working, Workings
from rulecheck.readers.applying import START_BITS
from rulecheck.reading.nearest import nearest
from rulecheck.studies.amounts import amount, place, reason_text
from rulecheck.studies.check import Checker
from rulecheck.studies.envelopes import place_of

MOST_STEPS = 400
Describe = Callable[[Term], ClosedFormResult]


def workings_of(
    checker: Checker,
    design: Design,
    rulesets: Sequence[Ruleset],
    names: Sequence[str],
    day: date,
    *,
    describe: Describe | None = None,
) -> Workings:
    """The workings of each name. Raises `Refused` where a name is not known.

    `describe` gives the closed form of a term; without it none is given.
    """
    faults = Faults()
    items: list[Working] = []
    for name in names:
        found = list(_named(checker, rulesets, name, describe))
        if not found:
            known = _known(checker, rulesets)
            faults.add("unknown-name", f"there is no rule, figure or module '{name}'", advice=nearest(name, known))
        items.extend(found)
    faults.settle()
    return Workings(design.name, design.file, day.isoformat(), tuple(items), __version__)


def _known(checker: Checker, rulesets: Sequence[Ruleset]) -> list[str]:
    return [*(name for book in rulesets for name in book.rules), *checker.graph.figures]


def _named(checker: Checker, rulesets: Sequence[Ruleset], name: str, describe: Describe | None) -> Iterable[Working]:
    books, cautions = {book.file: book for book in rulesets}, checker.graph.cautions
    for bound in checker.graph.rules:
        if bound.name == name:
            yield _rule(checker, bound, books[bound.ruleset].rules[name], describe)
    figures = checker.graph.figures
    if name in figures:
        yield _figure(checker, figures[name], describe, cautions.get(name.partition(".")[0], ""))
    elif any(full.startswith(f"{name}.") for full in figures):
        for full, figure in figures.items():
            if full.startswith(f"{name}.") and "(" not in full and "[" not in full:
                yield _figure(checker, figure, describe, cautions.get(name, ""))


def _rule(checker: Checker, bound: BoundRule, rule: Rule, describe: Describe | None) -> Working:
    """The steps behind the case that decides, and the condition itself as the last of them."""
    finding = checker.finding(bound, rule, with_spread=False)
    judged = checker.binding(bound)
    walk = _Walk(checker)
    part = judged.part if judged else None
    if judged is not None and judged.case is not None:
        walk.place(judged.case)
        walk.uses(judged.case.uses, _states(judged.case))
        if part is not None:
            walk.condition(rule, part, judged.case.uses)
    margin = f"{finding.margin}" if finding.margin else ""
    form = describe(part.margin) if describe is not None and part is not None and part.margin is not None else None
    return Working(
        rule.name,
        finding.title,
        rule.clause,
        finding.verdict,
        margin,
        finding.binding,
        finding.parts,
        tuple(walk.steps.values()),
        form,
    )


def _figure(checker: Checker, figure: Figure, describe: Describe | None, caution: str) -> Working:
    walk = _Walk(checker)
    walk.figure(figure, 0)
    form = describe(figure.term) if describe is not None and figure.term.sort == "number" else None
    return Working(figure.name, figure.meaning, "", "", "", None, (), tuple(walk.steps.values()), form, caution)


def _formula(figure: Figure) -> str:
    """The formula of a step; of a solve, what is looked for; of a solver's figure, how it was found."""
    solved = figure.solved
    if figure.method:
        return figure.method
    if solved is None:
        return show(figure.syntax)
    return f"the least {solved.path} from {solved.low} to {solved.high} with {show(figure.syntax)} = 0"


def _states(case: Case) -> tuple[tuple[str, str], ...]:
    """The states under which figures are kept that a case rests on."""
    return (*case.states, *([("over", case.envelope.label)] if case.envelope is not None else []))


_WHOLE = (Name, Call, Aggregate, Number)


def _taken(node: Syntax, arms: Mapping[Syntax, Syntax]) -> Syntax:
    while node in arms:
        node = arms[node]
    return node


class _Walk:
    """Figures with what they rest on, what comes first first; each once."""

    def __init__(self, checker: Checker) -> None:
        self.checker = checker
        self.steps: dict[str, Step] = {}
        self.placing: Placing | None = None

    def place(self, case: Case) -> None:
        """Read everything at the point of an envelope at which a case stands."""
        if case.envelope is not None and case.at:
            point = {axis.term.path: value for axis, value in case.at}
            self.placing = Placing.at(self.checker.bank, case.envelope, point)
            for path, value in place_of(case).items():
                self.steps[path] = Step(path, "the point of the envelope", "", "", str(value), value.exact, "", None)

    def at(self, term: Term) -> Term:
        """A term where the case stands."""
        return term if self.placing is None else self.placing.term(term)

    def uses(self, uses: Iterable[Use], states: tuple[tuple[str, str], ...]) -> None:
        """What a condition names, in its case."""
        state = ",".join(f"{axis}={name}" for axis, name in states)
        for use in uses:
            self._use(use, f"{state}]" if state else "", 0)

    def condition(self, rule: Rule, part: Part, uses: Iterable[Use]) -> None:
        """The condition as the last step."""
        margin = (
            amount(self.checker.reader, self.checker.bank, part.margin, part.unit, width=True) if part.margin else None
        )
        result = f"margin {margin}" if margin else self._holds(part)
        numbers = self._with_numbers(part.formula, uses) if part.formula is not None else ""
        exact = margin.exact if margin else ""
        self.steps[f"rule {rule.name}"] = Step(
            f"rule {rule.name}", rule.title, part.text, numbers, result, exact, "", place(part.span)
        )

    def _holds(self, part: Part) -> str:
        truth = self.checker.reader.truth(part.holds)
        if isinstance(truth, Unknown):
            return f"unknown: {reason_text(truth.reasons)}"
        return "holds" if truth else "does not hold"

    def figure(self, figure: Figure, depth: int) -> None:
        if figure.name in self.steps or len(self.steps) >= MOST_STEPS:
            return
        state = figure.name.partition(" [")[2]
        if figure.solved is not None:
            state = f"{state.removesuffix(']')},{figure.solved.label}]".lstrip(",")
        for use in figure.uses:
            self._use(use, state, depth)
        self.steps[figure.name] = self._step(figure, depth)

    def _use(self, use: Use, state: str, depth: int) -> None:
        figures = self.checker.graph.figures
        for candidate in (f"{use.target} [{state}" if state else "", use.target):
            if candidate in figures:
                self.figure(figures[candidate], depth + 1)
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
        return amount(self.checker.reader, self.checker.bank, self.at(term), use.unit)

    def _step(self, figure: Figure, depth: int) -> Step:
        shown = self._amount(figure.term, figure)
        outside = figure.valid is not None and self.checker.reader.truth(self.at(figure.valid)) is False
        return Step(
            figure.name,
            figure.meaning,
            _formula(figure),
            self._numbers(figure),
            str(shown) if shown else self._why(figure.term),
            shown.exact if shown else "",
            figure.source,
            place(figure.span),
            outside,
            depth,
            self.checker.graph.replaced.get(figure.name, ""),
        )

    def _numbers(self, figure: Figure) -> str:
        """The formula with numbers; of a solve, with those at the solution, and what is left of zero there."""
        numbers = "" if figure.method else self._with_numbers(figure.syntax, figure.uses, figure.arms)
        if figure.solved is None:
            return numbers
        rest = self.checker.reader.ball(self.at(figure.solved.residual), START_BITS)
        if isinstance(rest, Unknown):
            return numbers
        if rest.is_zero():
            return f"{numbers}, exactly zero"
        return f"{numbers}, which is zero to within {float(abs(rest).upper()):.1g} in SI units"

    def _with_numbers(
        self, syntax: Syntax, names: Iterable[Use], arms: Mapping[Syntax, Syntax] = MappingProxyType({})
    ) -> str:
        """The formula with numbers for names; of a conditional that is settled, the arm that is taken."""
        uses = {use.text: use for use in names}

        def number(node: Syntax) -> str | None:
            if node in arms:
                text = show_with(_taken(node, arms), number)
                return text if node is syntax or isinstance(_taken(node, arms), _WHOLE) else f"({text})"
            if not isinstance(node, (Name, Aggregate, Call)):
                return None
            use = uses.get(show(node))
            shown = self._amount(use.term, use) if use else None
            return str(shown) if shown else None

        return show_with(syntax, number)

    def _why(self, term: Term) -> str:
        from_reader = self.checker.reader.value(self.at(term))
        reasons = getattr(from_reader, "reasons", ())
        texts = dict.fromkeys(reason.text for reason in reasons)
        return f"unknown: {', '.join(list(texts)[:4])}"
