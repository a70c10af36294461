"""`workings` on a terminal: formula, formula with numbers, result, source and place of every step."""

from __future__ import annotations

from collections.abc import Iterable

from rich.console import RenderableType
from rich.padding import Padding
from rich.text import Text

from rulecheck.outcome.results import VERDICTS, BindingPart, ClosedFormResult, PartResult, Step, Working, Workings
from rulecheck.output.screen import PAPER, STYLES, Screen, draw, line, words
from rulecheck.output.terminal_details import compared, ruled_words
from rulecheck.output.wording import at_words, state_words

_MOST_CONDITIONS = 12


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
        yield from _step(number, step)
    yield from _conditions(item)
    if item.verdict:
        style = next((STYLES[verdict] for verdict in VERDICTS if verdict == item.verdict), "")
        margin = f", margin {item.margin}" if item.margin else ""
        case = _case(item.binding)
        decided = f", decided {case}" if case else ""
        yield Padding(Text.assemble("verdict: ", words(item.verdict, style), words(f"{margin}{decided}")), (0, 0, 0, 2))
    if item.closed_form is not None:
        yield from _closed_form(item.closed_form)
    if item.caution:
        yield line(f"caution: {item.caution}", 2)


def _case(binding: BindingPart | None) -> str:
    """For which element, in which states and on which branch it was decided."""
    if binding is None:
        return ""
    state = state_words(binding.state)
    told = (
        f"for {binding.element}" if binding.element else "",
        f"in state {state}" if state else "",
        at_words(binding.at),
        f"on branch {binding.branch}" if binding.branch else "",
    )
    return ", ".join(filter(None, told))


def _step(number: int, step: Step) -> Iterable[RenderableType]:
    if not step.formula:
        yield line(f"{number}. {step.name} = {step.result}", 2)
    else:
        yield line(f"{number}. {step.name}", 2)
        for text in dict.fromkeys(filter(None, (step.formula, step.numbers, step.result))):
            yield line(f"= {text}", 5)
    meaning = "" if step.meaning == "input" else step.meaning
    told = "; ".join(filter(None, (meaning, step.source, str(step.place) if step.place else "")))
    if told:
        yield line(told, 5, "dim")
    if step.outside_validity:
        yield line("outside its range of validity", 5)
    if step.replaced:
        yield line(step.replaced, 5)


def _conditions(item: Working) -> Iterable[RenderableType]:
    """All conditions where there are several, or where no step shows the only one."""
    if len(item.conditions) == 1 and item.steps and item.conditions[0].ruled is None:
        return
    for text, parts in _by_text(item.conditions).items():
        yield line(text, 2)
        yield from (line(_judged(part), 5) for part in parts[:_MOST_CONDITIONS])
        if len(parts) > _MOST_CONDITIONS:
            yield line(f"and {len(parts) - _MOST_CONDITIONS} more", 5)


def _by_text(parts: Iterable[PartResult]) -> dict[str, list[PartResult]]:
    found: dict[str, list[PartResult]] = {}
    for part in parts:
        found.setdefault(part.text, []).append(part)
    return found


def _judged(part: PartResult) -> str:
    where = ", ".join(filter(None, (part.element, state_words(part.state), at_words(part.at), part.branch)))
    numbers = compared(part.value, part.sense, part.limit)
    margin = f"margin {part.margin}" if part.margin else ""
    told = "; ".join(filter(None, (part.verdict, numbers, margin, ruled_words(part.ruled), part.reason)))
    return f"{where}: {told}" if where else told


def _closed_form(found: ClosedFormResult) -> Iterable[RenderableType]:
    yield Text()
    yield line("as one formula of the inputs, in SI units:", 2)
    if found.formula:
        yield line(f"margin = {found.formula}", 5)
    yield from (line(f"change with {path}: {text}", 5) for path, text in found.derivatives.items())
    for path, texts in found.solved.items():
        yield from (line(f"on the limit: {path} = {text}", 5) for text in texts)
    yield from (line(f"where {text}" if found.formula else text, 5) for text in found.conditions)
