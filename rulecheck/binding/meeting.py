"""Whether cases of a rule are met, as one flag: what `rule(x)` reads."""

from __future__ import annotations

from collections.abc import Sequence

from rulecheck.binding.comparing import all_of, any_of
from rulecheck.binding.conditions import holds
from rulecheck.binding.scope import Scope
from rulecheck.graph.conditions import Case
from rulecheck.graph.terms import Term


def met_by(scope: Scope, cases: Sequence[Case]) -> Term:
    """Yes where every case complies, is exempt or does not apply; no where one is in breach; unknown else."""
    flags = []
    for case in cases:
        asked = any_of(scope, [case.exempt, holds(scope, case.condition)])
        # Where it is unknown whether a rule applies it is open, whatever it would come to (a branch says so).
        met = scope.bank.branch(case.applies, asked, scope.bank.flag(True))
        flags.append(scope.bank.throughout(met, case.envelope.axes) if case.envelope is not None else met)
    return all_of(scope, flags)
