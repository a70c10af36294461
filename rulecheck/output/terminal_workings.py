"""`workings` on a terminal: formula, formula with numbers, result, source and place of every step."""

from __future__ import annotations

from collections.abc import Iterable

from rich.console import RenderableType
from rich.padding import Padding
from rich.text import Text

from rulecheck.outcome.results import VERDICTS, ClosedFormResult, PartResult, Step, Working, Workings
from rulecheck.output.screen import PAPER, STYLES, Screen, draw, words
from rulecheck.output.terminal_details import compared
from rulecheck.output.wording import state_words


def workings_text(workings: Workings, screen: Screen = PAPER) -> str:
    """The whole terminal form of `workings`."""
    return draw(_parts(workings), screen)


def _parts(workings: Workings) -> Iterable[RenderableType]:
    yield words(f"workings of {workings.design} ({workings.file}) on {workings.date}")
    for item in workings.items:
        yield Text()
        yield from _working(item)


def _working(item: Working) -> Iterable[RenderableType]:
    yield words(" ".join(filter(None, (item.clause, item.name))) + (f": {item.title}" if item.title else ""), "bold")
    for number, step in enumerate(item.steps, 1):
        yield Padding(_step(number, step), (0, 0, 0, 2))
    for part in item.conditions:
        yield Padding(_condition(part), (0, 0, 0, 2))
    if item.verdict:
        style = next((STYLES[verdict] for verdict in VERDICTS if verdict == item.verdict), "")
        margin = f", margin {item.margin}" if item.margin else ""
        yield Text.assemble("  verdict: ", words(item.verdict, style), words(margin))
    if item.closed_form is not None:
        yield Padding(_closed_form(item.closed_form), (1, 0, 0, 2))
    if item.caution:
        yield words(f"caution: {item.caution}")


def _step(number: int, step: Step) -> Text:
    lines = [f"{number}. {step.name} = {step.result}" if not step.formula else f"{number}. {step.name}"]
    if step.formula:
        lines.append(f"   = {step.formula}")
        if step.numbers and step.numbers != step.formula:
            lines.append(f"   = {step.numbers}")
        lines.append(f"   = {step.result}")
    meaning = "" if step.meaning == "input" else step.meaning
    told = "; ".join(filter(None, (meaning, step.source, str(step.place) if step.place else "")))
    if told:
        lines.append(f"   {told}")
    if step.outside_validity:
        lines.append("   outside its range of validity")
    return Text("\n").join(words(line) for line in lines)


def _condition(part: PartResult) -> Text:
    where = ", ".join(filter(None, (part.element, state_words(part.state), part.branch)))
    told = [f"{part.text}{f' ({where})' if where else ''}"]
    numbers = compared(part.value, part.sense, part.limit)
    margin = f"margin {part.margin}" if part.margin else ""
    told.append("   " + "; ".join(filter(None, (part.verdict, numbers, margin, part.reason))))
    return Text("\n").join(words(line) for line in told)


def _closed_form(found: ClosedFormResult) -> Text:
    lines = ["as one formula of the inputs, in SI units:", f"   margin = {found.formula}"]
    lines.extend(f"   change with {path}: {text}" for path, text in found.derivatives.items())
    for path, texts in found.solved.items():
        lines.extend(f"   on the limit: {path} = {text}" for text in texts)
    lines.extend(f"   where {text}" for text in found.conditions)
    return Text("\n").join(words(line) for line in lines)
