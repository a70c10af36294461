"""Tests: the record of one is held against the set-up that the rule book asks for, and its result against the limit.

A run whose set-up is not met is void: it neither proves nor disproves anything. A record without day and report is none.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from functools import reduce

from rulecheck.binding.bound import Broken, Item, Number
from rulecheck.binding.conditions import Builder, certain, holds, labelled, open_part
from rulecheck.binding.documents import document_name, is_later, stated_day, stated_words
from rulecheck.binding.parsing import parsed
from rulecheck.binding.ruling import ruled
from rulecheck.binding.scope import Scope
from rulecheck.graph.conditions import AllOf, Condition, Either, Part, every_part
from rulecheck.graph.terms import Term
from rulecheck.model.records import RecordWanted
from rulecheck.model.rulings import Ruling
from rulecheck.operations.arithmetic import add
from rulecheck.operations.comparison import at_most
from rulecheck.quantity.dimension import PURE
from rulecheck.quantity.units import find_unit


@dataclass(frozen=True, slots=True)
class _Run:
    """One run of a test: where it stands, and the record that it is part of."""

    path: str
    record: str


def record(scope: Scope, wanted: RecordWanted, scale: Number | None, ruling: Ruling) -> Condition | Broken:
    """Every valid run of the test meets what is asked, and there are as many as are asked for."""
    bases = _records(scope, wanted)
    if isinstance(bases, Broken):
        return bases
    hand = _Hand(scope, wanted, scale, wanted.ruling.within(ruling), len(bases) == 1)
    runs = [run for base in bases for run in _runs(scope, base)]
    return hand.judged(runs) if runs else hand.absent()


def _records(scope: Scope, wanted: RecordWanted) -> list[str] | Broken:
    """The paths of the records that are meant; none where the design has none."""
    design = scope.view.design
    if wanted.of is None:
        assert wanted.name is not None
        name = document_name(scope, wanted.name)
        base = f"records.{name}" if name is not None else ""
        scope.touched.add(base or "records")
        return [base] if base and design.names(base) is not None and not design.states_none(base) else []
    scope.touched.add("records")
    element = scope.variables.get(wanted.of.text)
    if not isinstance(element, Item):
        told = f"'{wanted.of.text}' is no element of this rule's 'each'"
        return scope.fault("unknown-name", told, wanted.of.span, expected="its variable: of: o under each: o in …")
    paths = [f"records.{name}" for name in design.names("records") or ()]
    return [path for path in paths if stated_words(scope, f"{path}.of", wanted.of.span) == element.name]


def _runs(scope: Scope, base: str) -> list[_Run]:
    """The runs of a record; one without `runs` is a run of its own."""
    path = f"{base}.runs"
    names = scope.view.design.names(path)
    if names is None:
        return [_Run(base, base)]
    scope.touched.add(path)
    return [_Run(f"{path}.{name}", base) for name in names]


@dataclass(frozen=True, slots=True)
class _Hand:
    """Judges the runs of one test."""

    scope: Scope
    wanted: RecordWanted
    scale: Number | None
    ruling: Ruling
    single: bool

    @property
    def text(self) -> str:
        return f"test '{self.wanted.called.text}'"

    def judged(self, runs: list[_Run]) -> Condition | Broken:
        alone = len(runs) == 1
        made = [self._run(run, alone) for run in runs]
        whole = [item for item in made if not isinstance(item, Broken)]
        if len(whole) < len(made):
            return Broken()
        parts: list[Condition] = []
        if alone and self.wanted.runs == 1:
            parts.extend(self._shown(whole[0][1], whole[0][2]))
        elif self.wanted.runs > 1 or self.wanted.setup is not None:
            parts.append(self._enough([valid for _, _, valid in whole]))
        parts.extend(condition for condition, _, _ in whole)
        return parts[0] if len(parts) == 1 else AllOf(tuple(parts))

    def absent(self) -> Condition | Broken:
        """No record: open. What would be asked of one is bound, so that its faults and its kind of margin are known."""
        gone = open_part(self.scope, f"the record of {self.text}", self.wanted.span)
        name = self.wanted.called.text if self.wanted.of is None and "." not in self.wanted.called.text else "*"
        made = self._run(_Run(f"records.{name}", f"records.{name}"), True, documented=True)
        return made if isinstance(made, Broken) else Either(gone, gone.holds, made[0], gone)

    def _run(
        self, run: _Run, alone: bool, *, documented: bool = False
    ) -> tuple[Condition, Condition | None, Term] | Broken:
        """What a run comes to, its set-up, and a flag: it is valid."""
        variables = [("setup", Item(f"{run.path}.setup")), ("result", Item(f"{run.path}.result"))]
        # Of several runs, formulas with numbers would show those of the first.
        inner = self.scope.inside(variables, loop=not alone)
        result = self._built(inner, self.wanted.require.text, self.scale)
        setup = None if self.wanted.setup is None else self._built(inner, self.wanted.setup.text, None)
        if isinstance(result, Broken) or isinstance(setup, Broken):
            return Broken()
        result = ruled(inner, result, self.ruling)
        if not alone:
            result = labelled(result, run.path.rpartition(".")[2])
        lacking = "" if documented else self._undocumented(run)
        if lacking:
            part = open_part(self.scope, lacking, self.scope.view.design.keys.get(run.path))
            return part, None, part.holds
        if setup is None:
            return result, None, self.scope.bank.flag(True)
        valid = holds(self.scope, setup)
        return Either(setup, valid, result, self._void(run, alone)), setup, valid

    def _built(self, scope: Scope, text: str, scale: Number | None) -> Condition | Broken:
        where = self.wanted.require if text == self.wanted.require.text else self.wanted.setup
        assert where is not None
        syntax = parsed(scope, where)
        return Broken() if syntax is None else Builder(scope, scale).build(syntax)

    def _undocumented(self, run: _Run) -> str:
        """What a run lacks of a record: its day, its report; those of the whole record hold for each run."""
        missing = []
        days = [stated_day(self.scope, f"{path}.date", self.wanted.called.span) for path in (run.path, run.record)]
        day = days[0] if days[0] is not None else days[1]
        if day is None:
            missing.append("date")
        elif is_later(self.scope, day):
            return f"the record of {self.text} (its date is after the evaluation date)"
        reports = (
            stated_words(self.scope, f"{path}.report", self.wanted.called.span) for path in (run.path, run.record)
        )
        if not any(reports):
            missing.append("report")
        return f"{' and '.join(missing)} of {run.path}" if missing else ""

    def _void(self, run: _Run, alone: bool) -> Part:
        if alone and self.wanted.runs == 1:
            return open_part(self.scope, self._why_void(), self.wanted.span)
        return certain(self.scope, True, f"{run.path} is void: its set-up is not met", self.wanted.span)

    def _why_void(self) -> str:
        assert self.wanted.setup is not None
        return f"a valid {self.text}: its set-up ({self.wanted.setup.text}) is not met"

    def _shown(self, setup: Condition | None, valid: Term) -> Iterable[Part]:
        """The conditions of a set-up, which limit nothing and so have no margin."""
        for part in () if setup is None else every_part(setup):
            yes = self.scope.bank.flag(True)
            void = self.scope.missing(self._why_void(), "flag", PURE, self.wanted.span)
            yield Part(
                "record", f"set-up: {part.text}", self.scope.bank.branch(valid, yes, void), unit=part.unit,
                value=part.value, limit=part.limit, sense=part.sense, span=part.span,
            )  # fmt: skip

    def _enough(self, valid: list[Term]) -> Part:
        """As many valid runs as are asked for; with fewer the rule is open."""
        bank = self.scope.bank
        one, none = bank.number(1), bank.number(0)
        counted = [bank.branch(flag, one, none) for flag in valid]
        total = reduce(lambda sum_so_far, one_more: self._made(add, [sum_so_far, one_more]), counted)
        needed = bank.number(self.wanted.runs)
        enough = self._made(at_most, [needed, total])
        what = f"{self.wanted.runs} valid run{'s' if self.wanted.runs > 1 else ''} of {self.text}"
        gone = self.scope.missing(what, "flag", PURE, self.wanted.span)
        return Part(
            "record", what, bank.branch(enough, bank.flag(True), gone), unit=find_unit("1"), value=total, limit=needed,
            sense="at least", span=self.wanted.span,
        )  # fmt: skip

    def _made(self, operation, terms: list[Term]) -> Term:  # type: ignore[no-untyped-def]
        made = self.scope.apply(operation, terms, None)
        assert made is not None
        return made
