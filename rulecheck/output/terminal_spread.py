"""The spread on a terminal: margin with its uncertainty, the risk, tolerances, and which inputs matter most."""

from __future__ import annotations

from collections.abc import Iterable

from rich.console import RenderableType
from rich.text import Text

from rulecheck.outcome.results import Finding, Report
from rulecheck.outcome.spread import Contributor, SpreadResult, Stack, Trials, WorstCase
from rulecheck.output.screen import line, words
from rulecheck.output.wording import counted

_MOST = 3


def spreads(report: Report) -> Iterable[RenderableType]:
    """A heading and a few lines for each rule whose margin has a spread; nothing where none has."""
    found = [(item, item.spread) for item in report.rules if item.spread is not None]
    if not found:
        return
    yield Text()
    yield words("spread", "bold")
    for item, spread in found:
        yield line(f"{_rule(item)}: {_first(item, spread)}", 2)
        yield from (line(told, 6) for told in _rest(spread))


def _rule(item: Finding) -> str:
    return " ".join(filter(None, (item.clause, item.name)))


def _first(item: Finding, spread: SpreadResult) -> str:
    measured = spread.measured
    told = f"margin {item.margin}"
    if measured is not None:
        most = "at most " if measured.bound else ""
        told += f" ± {most}{measured.expanded} (k = {measured.coverage})"
    return ", ".join((told, *_chances(spread)))


def _rest(spread: SpreadResult) -> Iterable[str]:
    if spread.decision != "simple":
        guard = f", guard band {spread.guard}" if spread.guard is not None else ""
        yield f"decided as {spread.decision}{guard}"
    for kind, of in (("uncertainty", "from"), ("tolerance", "tolerances of")):
        matter = [item for item in spread.contributors if item.kind == kind]
        if matter:
            yield f"{of} {_contributors(matter)}"
    if spread.stack is not None:
        yield _stack(spread.stack)
    if spread.worst_case is not None and _is_told(spread, spread.worst_case):
        yield _worst_case(spread.worst_case)
    if spread.trials is not None:
        yield _trials(spread.trials)
    yield from spread.notes


def _is_told(spread: SpreadResult, worst: WorstCase) -> bool:
    """True where the least margin says more than the uncertainty does."""
    value = worst.margin.value if worst.margin is not None else None
    return spread.measured is None or spread.decision == "worst case" or value is None or value < 0


def _chances(spread: SpreadResult) -> Iterable[str]:
    chance = spread.probability
    if chance is None:
        return
    if chance.conforms is not None and chance.fails is not None:
        yield f"conforms with {probability(chance.conforms, chance.fails)}"
    if chance.found_conforming is not None:
        shown = probability(chance.found_conforming, 1 - chance.found_conforming)
        yield f"found to conform with {shown} ({chance.scrutineer})"


def probability(holds: float, fails: float) -> str:
    """A probability in percent, never rounded to certainty.

    >>> probability(0.99997, 0.00003), probability(0.9192, 0.0808), probability(1e-9, 1 - 1e-9)
    ('99.997 %', '91.9 %', 'less than 0.001 %')
    """
    if fails <= 0.00001:
        return "more than 99.999 %"
    if holds <= 0.00001:
        return "less than 0.001 %"
    close = min(holds, fails)
    digits = 1 if close >= 0.01 else 2 if close >= 0.001 else 3
    return f"{100 * holds:.{digits}f} %"


def _stack(stack: Stack) -> str:
    return f"tolerance stack: worst {stack.at_worst}, root sum of squares {stack.low} to {stack.high}"


def _worst_case(worst: WorstCase) -> str:
    if worst.margin is None:
        return f"least margin over {worst.of}: not proved"
    if worst.proved:
        return f"least margin over {worst.of}: {worst.margin}"
    met = f"; the least that was met is {worst.found}" if worst.found is not None else ""
    return f"least margin over {worst.of}: certainly not below {worst.margin}{met}"


def _contributors(items: list[Contributor]) -> str:
    if len(items) == 1:
        return f"{items[0].path} ({items[0].stated})"
    told = [f"{item.path} ({item.stated}) {100 * item.share:.0f} %" for item in items[:_MOST]]
    rest = len(items) - _MOST
    return ", ".join(told) + (f" and {counted(rest, 'other')}" if rest > 0 else "")


def _trials(trials: Trials) -> str:
    told = f"{trials.trials} trials: standard uncertainty {trials.standard}, 95 % from {trials.low} to {trials.high}"
    if not trials.note:
        return f"{told}; the first order agrees"
    return f"{told}; {trials.note}"
