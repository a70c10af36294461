"""The spread of a rule as JSON, and amounts, which every answer has."""

from __future__ import annotations

import math

from rulecheck.outcome.amount import Amount
from rulecheck.outcome.spread import Contributor, SpreadResult, Trials

Json = dict[str, object]


def amount_json(amount: Amount | None) -> Json | None:
    """An amount, null where there is none."""
    if amount is None:
        return None
    return {
        "value": finite(amount.value),
        "unit": amount.unit,
        "exact": amount.exact or None,
        "shown": amount.shown,
    }


def finite(value: float | None) -> float | None:
    """A double, or null where there is none: JSON has no infinity."""
    return value if value is not None and math.isfinite(value) else None


def spread_json(spread: SpreadResult | None) -> Json | None:
    """The spread of what decides a rule, null where nothing that it rests on has one."""
    if spread is None:
        return None
    measured, chance, stack, worst = spread.measured, spread.probability, spread.stack, spread.worst_case
    return {
        "decision": spread.decision,
        "measured": measured
        and {
            "standard": amount_json(measured.standard),
            "expanded": amount_json(measured.expanded),
            "coverage": measured.coverage,
            "bound": measured.bound,
        },
        "guard": amount_json(spread.guard),
        "probability": chance
        and {
            "conforms": finite(chance.conforms),
            "fails": finite(chance.fails),
            "found_conforming": finite(chance.found_conforming),
            "scrutineer": chance.scrutineer,
        },
        "stack": stack
        and {"at_worst": amount_json(stack.at_worst), "low": amount_json(stack.low), "high": amount_json(stack.high)},
        "worst_case": worst
        and {
            "margin": amount_json(worst.margin),
            "proved": worst.proved,
            "found": amount_json(worst.found),
            "of": worst.of,
        },
        "contributors": [_contributor(item) for item in spread.contributors],
        "trials": _trials(spread.trials),
        "notes": list(spread.notes),
    }


def _contributor(item: Contributor) -> Json:
    return {
        "path": item.path,
        "kind": item.kind,
        "stated": item.stated,
        "slope": item.slope,
        "contribution": amount_json(item.contribution),
        "share": finite(item.share),
        "share_of_squares": finite(item.share_of_squares),
    }


def _trials(trials: Trials | None) -> Json | None:
    if trials is None:
        return None
    return {
        "trials": trials.trials,
        "seed": trials.seed,
        "mean": amount_json(trials.mean),
        "standard": amount_json(trials.standard),
        "low": amount_json(trials.low),
        "high": amount_json(trials.high),
        "conforms": finite(trials.conforms),
        "agrees": trials.agrees,
        "note": trials.note,
    }
