"""Diagnostics for programs: a JSON array, by the schema that `rulecheck handbook schema diagnostics` prints."""

from __future__ import annotations

import json
from collections.abc import Iterable

from rulecheck.diagnostics import Diagnostic, Span

Json = dict[str, object]


def diagnostics_json(diagnostics: Iterable[Diagnostic]) -> str:
    """All diagnostics as JSON text.

    >>> print(diagnostics_json([Diagnostic("usage", "no design is named")]), end="")
    [
      {
        "code": "usage",
        "message": "no design is named",
        "place": null,
        "expected": "",
        "advice": "",
        "related": []
      }
    ]
    """
    return json.dumps([_item(item) for item in diagnostics], indent=2, ensure_ascii=False) + "\n"


def _item(item: Diagnostic) -> Json:
    return {
        "code": item.code,
        "message": item.message,
        "place": _place(item.span),
        "expected": item.expected,
        "advice": item.advice,
        "related": [{"message": other.message, "place": _place(other.span)} for other in item.related],
    }


def _place(span: Span | None) -> Json | None:
    if span is None:
        return None
    return {"file": span.file, "line": span.line, "column": span.column, "start": span.start, "end": span.end}
