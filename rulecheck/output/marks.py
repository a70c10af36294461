"""What is said of marked figures, on a terminal and in JSON."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from rulecheck.outcome.results import Mark
from rulecheck.output.schema_parts import Schema, list_of, object_of, text_of

_MOST = 6
_MOST_LINES = 20


def mark_lines(marks: Sequence[Mark], columns: Sequence[str] = ()) -> Iterable[str]:
    """A line for each mark; `columns` are the names of the changes beside which the figures stand."""
    told = [line for mark in marks for line in _lines(mark, columns)]
    yield from told[:_MOST_LINES]
    if len(told) > _MOST_LINES:
        yield f"and {len(told) - _MOST_LINES} more such figures, in --form json"


def _lines(mark: Mark, columns: Sequence[str]) -> Iterable[str]:
    rests = f", in {some(mark.rules)}" if mark.rules else ""
    if any(mark.outside_validity):
        when = [
            name for name, outside in zip(("as it stands", *columns), mark.outside_validity, strict=False) if outside
        ]
        told = f" {' and '.join(when)}" if len(mark.outside_validity) > 1 else ""
        yield f"{mark.figure} is used outside its range of validity{told}{rests}"
    if mark.replaced:
        yield f"{mark.figure} is {mark.replaced}{rests}"


def some(texts: Sequence[str]) -> str:
    """The first of many texts, and how many more there are."""
    more = f" and {len(texts) - _MOST} more" if len(texts) > _MOST else ""
    return ", ".join(texts[:_MOST]) + more


def marks_json(marks: Sequence[Mark]) -> list[dict[str, object]]:
    """The marks as JSON."""
    return [
        {
            "figure": mark.figure,
            "outside_validity": list(mark.outside_validity),
            "replaced": mark.replaced,
            "rules": list(mark.rules),
        }
        for mark in marks
    ]


def marks_schema() -> Schema:
    """The schema of `marks_json`."""
    outside: Schema = {
        "description": "As it stands, then with each change",
        "type": "array",
        "items": {"type": "boolean"},
    }
    mark: Schema = {
        "figure": text_of("Name of the figure, with the states that it is taken in"),
        "outside_validity": outside,
        "replaced": text_of("By which file it stands in the place of another figure, and why; empty where it does not"),
        "rules": list_of(text_of(), "The rules that rest on it"),
    }
    return list_of(object_of(mark), "Figures outside their range of validity, or put in the place of others")
