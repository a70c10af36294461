"""What needs work: every rule that fails or is not settled, with all that one needs to mend it."""

from __future__ import annotations

from collections.abc import Iterable

from rich.console import RenderableType
from rich.text import Text

from rulecheck.outcome.results import Amount, Finding, PartResult, Report, RuledResult, Verdict
from rulecheck.output.screen import STYLES, line, words
from rulecheck.output.wording import at_words, state_words

# In this order: what stops the car first.
SHOWN: tuple[Verdict, ...] = ("breach", "open", "unproven", "not followed", "dispensed", "tight")
_MOST_PARTS = 6


def details(report: Report) -> Iterable[RenderableType]:
    """A heading and one paragraph a rule; nothing where no rule needs work."""
    found = [item for verdict in SHOWN for item in report.rules if item.verdict == verdict]
    if not found:
        return
    yield Text()
    yield words("what needs work", "bold")
    for item in found:
        yield Text()
        named = " ".join(filter(None, (item.clause, item.title, f"({item.name})")))
        yield Text.assemble(words(item.verdict, STYLES[item.verdict]), words(f" {named}"))
        yield from (line(told, 4) for told in _lines(item))
    yield Text()
    yield line(f"how each came about: rulecheck workings {report.file} NAME")


def _lines(item: Finding) -> Iterable[str]:
    if item.verdict == "tight":
        # Nothing is broken: the numbers and the place of the value say enough.
        yield from _numbers(item)
        yield from _placed(item)
        yield f"value at {item.value_place}" if item.value_place else f"rule at {item.rule_place}"
        return
    if item.reason:
        yield item.reason
    binding = item.binding
    if binding is not None:
        yield binding.part
        yield from _named("branch", binding.branch)
        yield from _named("for", binding.element)
        yield from _named("in state", state_words(binding.state))
    yield from _placed(item)
    yield from _numbers(item)
    yield from _others(item)
    yield from _named("consequence in the rule book:", item.consequence)
    yield f"rule at {item.rule_place}"
    if item.value_place is not None:
        yield f"value at {item.value_place}"


def ruled_words(item: RuledResult | None) -> str:
    """What the rule book's tolerance and rounding did, and the margin without them; empty where nothing was done."""
    if item is None:
        return ""
    rounded = f"value rounded {item.rounding}: {item.value}" if item.rounding and item.value else ""
    allowed = f"tolerance {item.tolerance} on the limit" if item.tolerance else ""
    raw = f"margin without {'them' if rounded and allowed else 'it'}: {item.margin}" if item.margin else ""
    return "; ".join(filter(None, (rounded, allowed, raw)))


def _named(label: str, text: str) -> Iterable[str]:
    if text:
        yield f"{label} {text}"


def _placed(item: Finding) -> Iterable[str]:
    """The point of its envelope that decides, and the envelope."""
    if item.binding is None or item.envelope is None or not item.binding.at:
        return
    ranges = ", ".join(f"{found.figure} from {found.low} to {found.high}" for found in item.envelope.ranges)
    yield f"{at_words(item.binding.at)}, of {ranges}"


def _numbers(item: Finding) -> Iterable[str]:
    told = compared(item.value, item.sense, item.limit)
    margin = f"margin {item.margin}" if item.margin else ""
    if told or margin:
        yield "; ".join(filter(None, (told, margin)))
    ruled = ruled_words(item.ruled)
    if ruled:
        yield ruled


def compared(value: Amount | None, sense: str, limit: Amount | None) -> str:
    """A value against its limit, in words.

    >>> compared(Amount("1180", "mm"), "at most", Amount("1176", "mm"))
    'value 1180 mm, at most 1176 mm'
    >>> compared(None, "at least", Amount("2", "kg"))
    'value not known, at least 2 kg'
    """
    shown = f"value {value}" if value else "value not known" if limit else ""
    bound = f"{sense or 'limit'} {limit}" if limit else ""
    return ", ".join(filter(None, (shown, bound)))


def _others(item: Finding) -> Iterable[str]:
    """Other parts, elements and states of the same rule that fail as well."""
    binding = item.binding
    failing = [part for part in item.parts if part.verdict != "complies" and not _is_binding(part, item)]
    if item.verdict not in ("breach", "not followed", "dispensed") or binding is None or not failing:
        return
    for part in failing[:_MOST_PARTS]:
        margin = f"margin {part.margin}" if part.margin else part.verdict
        where = ", ".join(filter(None, (part.element, state_words(part.state), at_words(part.at), part.branch)))
        yield f"also {where or part.text}: {margin}"
    if len(failing) > _MOST_PARTS:
        yield f"and {len(failing) - _MOST_PARTS} more"


def _is_binding(part: PartResult, item: Finding) -> bool:
    binding = item.binding
    return binding is not None and (part.text, part.element, dict(part.state), part.branch, part.at) == (
        binding.part,
        binding.element,
        dict(binding.state),
        binding.branch,
        binding.at,
    )
