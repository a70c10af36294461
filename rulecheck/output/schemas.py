"""The JSON Schemas of everything that `--form json` prints, by form."""

from __future__ import annotations

from collections.abc import Callable

from rulecheck.output.json_varied import varied_schema
from rulecheck.output.proofreading_schema import proofreading_schema
from rulecheck.output.report_schema import Schema, diagnostics_schema, report_schema, workings_schema
from rulecheck.output.study_schemas import headroom_schema, whatif_schema

OUTPUTS: dict[str, Callable[[], Schema]] = {
    "report": report_schema,
    "workings": workings_schema,
    "varied": varied_schema,
    "whatif": whatif_schema,
    "headroom": headroom_schema,
    "proofreading": proofreading_schema,
    "diagnostics": diagnostics_schema,
}
