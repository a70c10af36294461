"""The verdict logic: which functions of which files are mutated, and the tests that must notice."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]

SUITE = ("tests/unit/test_verdict_logic_*.py",)
"""Quick tests, as patterns from the root; a mutant is killed by the first of them that fails."""


@dataclass(frozen=True, slots=True)
class Target:
    """A file with the functions of it that decide verdicts; `only` is empty for all but `without`."""

    file: str
    only: tuple[str, ...] = ()
    without: tuple[str, ...] = ()

    def takes(self, function: str) -> bool:
        """Whether a function (by its dotted name, `Class.method`, `outer.inner`) is mutated."""
        if any(function == name or function.startswith(f"{name}.") for name in self.without):
            return False
        return not self.only or function in self.only


TARGETS = (
    Target("rulecheck/studies/judging.py"),
    Target("rulecheck/studies/totals.py"),
    Target(
        "rulecheck/studies/check.py",
        only=("Checker._case", "Checker._rule", "Checker._settled"),
    ),
    # What keeps a reserve throughout an envelope is held by tests of envelopes.
    Target("rulecheck/studies/reserves.py", without=("Keeping._keeping",)),
    # How an operation looks in arrays, in sympy and in script decides no verdict.
    Target("rulecheck/operations/logic.py", only=("_joined", "_joined.rule", "_reconcile", "_reconcile_balls", "both",
                                                  "either", "negation", "reconcile")),
    Target("rulecheck/operations/comparison.py", only=("_compare.rule", "at_most", "below", "equal",
                                                       "same_text")),
    Target("rulecheck/operations/bounds.py"),
    # Which words are choices is a matter of names; `_alone` is for workings.
    Target("rulecheck/binding/comparing.py", without=("_alone", "_sides", "_quiet", "_side", "_expressed", "_choice")),
    Target("rulecheck/binding/conditions.py"),
    # What is not there is bound all the same, so that its faults are found; how large a check may be is a bound.
    Target("rulecheck/binding/rules.py", without=("MOST_CASES", "bind_rule", "_Binding._note_shape",
                                                  "_Binding._check_stand_in", "_Binding._check_scale")),
    Target("rulecheck/binding/documents.py"),
    Target("rulecheck/binding/dispensations.py"),
    Target("rulecheck/binding/states.py", without=("MOST_COMBINATIONS",)),
    Target("rulecheck/binding/presence.py", only=("presence",)),
    # Tables out of order are refused; which words are names is a matter of names.
    Target("rulecheck/binding/tables.py", without=("Parse", "_in_order", "_rising", "_lies_above", "_value", "_is_own")),
    Target("rulecheck/model/ruleset.py", only=("Window.holds",)),
)  # fmt: skip
