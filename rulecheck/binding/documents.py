"""Evidence and judgements: what a rule asks of papers and of people."""

from __future__ import annotations

from rulecheck.binding.bound import Broken, Date, Item, Words
from rulecheck.binding.conditions import open_part
from rulecheck.binding.inputs import bind_input
from rulecheck.binding.parsing import parsed
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.graph.conditions import AllOf, Condition, Part
from rulecheck.graph.terms import Term
from rulecheck.model.ruleset import EvidenceWanted
from rulecheck.operations.arithmetic import subtract
from rulecheck.operations.calendar import ordinal
from rulecheck.operations.comparison import at_most, below
from rulecheck.operations.values import Monomial, Reason
from rulecheck.quantity.dimension import PURE
from rulecheck.quantity.units import find_unit
from rulecheck.reading.nodes import Located


def evidence(scope: Scope, wanted: EvidenceWanted) -> Condition | Broken:
    """A document of the kind asked for, in force on the evaluation date."""
    name = document_name(scope, wanted.name)
    text = f"{wanted.kind.text} '{name}'" if name else f"{wanted.kind.text} named by {wanted.name.text}"
    due = _due(scope, wanted)
    if isinstance(due, Broken):
        return due
    if name is None:
        return _absent(scope, text, due, wanted)
    base = f"evidence.{name}"
    design = scope.view.design
    scope.touched.add(base)
    if design.names(base) is None or design.states_none(base):
        return _absent(scope, text, due, wanted)
    kind = stated_words(scope, f"{base}.kind", wanted.kind.span)
    if kind != wanted.kind.text:
        found = f"'{name}' is a {kind}" if kind else f"the kind of '{name}'"
        return open_part(scope, f"{text} ({found})", design.keys.get(base), text)
    return _in_force(scope, wanted, base, text)


def document_name(scope: Scope, where: Located) -> str | None:
    """The name of the document; under `each` a field of the element that names it."""
    first, _, rest = where.text.partition(".")
    variable = scope.variables.get(first)
    if not isinstance(variable, Item):
        return where.text
    if not rest:
        return variable.name
    return stated_words(scope, f"{variable.path}.{rest}", where.span)


def stated_words(scope: Scope, path: str, span: Span) -> str | None:
    """A stated text or choice, or None."""
    entry = scope.shared.vocabulary.entry(path)
    if entry is None:
        scope.fault("unknown-name", f"nothing can be stated under '{path}'", span)
        return None
    bound = bind_input(scope, path, entry, span)
    if isinstance(bound, Words) and isinstance(bound.term.value, str) and bound.term.kind == "constant":
        return bound.term.value
    return None


def _due(scope: Scope, wanted: EvidenceWanted) -> Term | Broken | None:
    if wanted.due is None:
        return None
    syntax = parsed(scope, wanted.due)
    bound = scope.express(syntax) if syntax is not None else Broken()
    if isinstance(bound, (Date, Broken)):
        return bound.term if isinstance(bound, Date) else bound
    return scope.fault("bad-date", "'due' is a date", wanted.due.span, expected="a date such as 2027-03-01")


def _absent(scope: Scope, text: str, due: Term | None, wanted: EvidenceWanted) -> Part:
    """Absent evidence is open; after its day it is a breach."""
    gone = scope.missing(text, "flag", PURE, wanted.name.span)
    if due is None:
        return Part("evidence", text, gone, span=wanted.kind.span)
    today = scope.bank.day(scope.shared.day)
    late = scope.apply(below, _ordinals(scope, due, today), None)
    assert late is not None
    holds = scope.bank.branch(late, scope.bank.flag(False), gone)
    return Part("evidence", f"{text} by its day", holds, span=wanted.kind.span)


def _ordinals(scope: Scope, *days: Term) -> list[Term]:
    made = [scope.apply(ordinal, [day], None) for day in days]
    return [term for term in made if term is not None]


def _in_force(scope: Scope, wanted: EvidenceWanted, base: str, text: str) -> Condition:
    place = scope.view.design.keys.get(base)
    parts: list[Condition] = []
    issued = stated_day(scope, f"{base}.issued", wanted.name.span)
    if issued is not None and is_later(scope, issued):
        return open_part(scope, f"{text} (issued after the evaluation date)", place, text)
    if issued is None:
        # Not asked for by rules, so not missing: but nobody is to think that it was held against the day of judging.
        text += ", day of issue not stated"
    until = stated_day(scope, f"{base}.until", wanted.name.span)
    if until is None:
        if wanted.expires:
            return open_part(scope, f"the last day ('until') of {text}", place, text)
        return Part("evidence", text, scope.bank.flag(True), span=wanted.kind.span, place=place)
    today, last = _ordinals(scope, scope.bank.day(scope.shared.day), until)
    holds = scope.apply(at_most, [today, last], None)
    margin = scope.apply(subtract, [last, today], None)
    assert holds is not None
    parts.append(
        Part("evidence", text, holds, margin, unit=find_unit("days"), value=scope.bank.day(scope.shared.day), limit=until, sense="until",
             span=wanted.kind.span, place=place)
    )  # fmt: skip
    return parts[0] if len(parts) == 1 else AllOf(tuple(parts))


def stated_day(scope: Scope, path: str, span: Span) -> Term | None:
    """A stated date, or None."""
    entry = scope.shared.vocabulary.entry(path)
    assert entry is not None
    bound = bind_input(scope, path, entry, span)
    return bound.term if isinstance(bound, Date) and bound.term.kind == "constant" else None


def is_later(scope: Scope, day: Term) -> bool:
    """True where a stated day lies after the evaluation date."""
    return isinstance(day.value, Monomial) and day.value.rational > scope.shared.day.toordinal()


def judgement(scope: Scope, rule: str, element: str | None, question: Located) -> Part:
    """A slot for a person: verdict, role, date and reason; what is not filled in is open.

    `element` is None for a rule that is about the whole car. A judgement that names no element speaks of none.
    """
    design = scope.view.design
    whole = f"judgements.{rule}"
    base = whole if element is None else f"{whole}.{_key(element)}"
    scope.touched.add(base)
    missing = [
        name for name in ("verdict", "role", "reason") if stated_words(scope, f"{base}.{name}", question.span) is None
    ]
    day = stated_day(scope, f"{base}.date", question.span)
    if day is None:
        missing.append("date")
    text = f"judgement: {question.text}"
    if missing:
        is_said_of_rule = any(f"{whole}.{name}" in design.leaves for name in missing)
        told = _unjudged(base, missing, element, is_said_of_rule)
        gone = scope.bank.unknown(Reason("missing", told, question.span), "flag")
        return Part("judgement", text, gone, span=question.span)
    if day is not None and is_later(scope, day):
        return Part(
            "judgement",
            text,
            scope.missing("a judgement that is not of a later day", "flag", PURE, question.span),
            span=question.span,
        )
    verdict = stated_words(scope, f"{base}.verdict", question.span)
    return Part(
        "judgement", text, scope.bank.flag(verdict == "complies"), span=question.span, place=design.keys.get(base)
    )


def _key(element: str) -> str:
    """The name under which an element is judged: `left`, or `left_right` for a pair; `*` where there is none."""
    return element.replace(" with ", "_").replace(", ", "_") or "*"


def _unjudged(base: str, missing: list[str], element: str | None, is_said_of_rule: bool) -> str:
    """What is missing of a judgement, and where it would stand."""
    if element is None:
        return "a judgement" if len(missing) == 4 else f"a judgement ({', '.join(missing)})"
    told = f"{base}, a judgement of '{element}'"
    if len(missing) < 4:
        return f"{told} ({', '.join(missing)})"
    return f"{told}; one of the whole rule speaks of no element" if is_said_of_rule else told
