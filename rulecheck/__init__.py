"""rulecheck: a car's design file held against a technical rule book, exactly, with margins and workings.

>>> import rulecheck
>>> report = rulecheck.check("designs_demo/marram-p2.design.yaml", on=rulecheck.date(2027, 3, 1))
>>> report.verdict
'complies'
"""

from datetime import date
from typing import TYPE_CHECKING, Any

from rulecheck.diagnostics import Diagnostic, Refused, Span

__version__ = "0.1.0"

if TYPE_CHECKING:
    from rulecheck.api import Change, check, headroom, load_design, load_ruleset, proofread, vary, whatif, workings
    from rulecheck.outcome.changes import WhatIf
    from rulecheck.outcome.proofreading import Proofreading
    from rulecheck.outcome.results import Finding, Report, Workings
    from rulecheck.outcome.travel import HeadroomReport
    from rulecheck.outcome.varied import Varied

_LATE = {
    "check": "rulecheck.api",
    "load_design": "rulecheck.api",
    "load_ruleset": "rulecheck.api",
    "workings": "rulecheck.api",
    "whatif": "rulecheck.api",
    "headroom": "rulecheck.api",
    "vary": "rulecheck.api",
    "proofread": "rulecheck.api",
    "Change": "rulecheck.api",
    "WhatIf": "rulecheck.outcome.changes",
    "Proofreading": "rulecheck.outcome.proofreading",
    "HeadroomReport": "rulecheck.outcome.travel",
    "Varied": "rulecheck.outcome.varied",
    "Finding": "rulecheck.outcome.results",
    "Report": "rulecheck.outcome.results",
    "Workings": "rulecheck.outcome.results",
}

__all__ = [
    "Change",
    "Diagnostic",
    "Finding",
    "HeadroomReport",
    "Proofreading",
    "Refused",
    "Report",
    "Span",
    "Varied",
    "WhatIf",
    "Workings",
    "check",
    "date",
    "headroom",
    "load_design",
    "load_ruleset",
    "proofread",
    "vary",
    "whatif",
    "workings",
]


def __getattr__(name: str) -> Any:
    # Loaded when first used, so that `rulecheck --help` does not pay for the engine.
    if name in _LATE:
        from importlib import import_module  # noqa: PLC0415

        return getattr(import_module(_LATE[name]), name)
    raise AttributeError(f"module 'rulecheck' has no attribute {name!r}")
