"""Runs the mutants of the verdict logic and tells which survive.

    python tests/mutants/run_mutants.py [--suite PATTERN] [WORD …]

Words pick the mutants in whose line they all stand; `--suite` takes other tests than the usual ones. Ends with 1 where
a survivor is not listed among the equivalents, or a listed one is killed or is there no more.
"""

from __future__ import annotations

import argparse
import sys
from collections.abc import Sequence

from equivalents import EQUIVALENTS
from mutant_making import Mutant, mutants
from mutant_running import Outcome, prepare, run
from mutant_targets import SUITE


def main(arguments: Sequence[str]) -> int:
    """Run, and tell."""
    parser = argparse.ArgumentParser(description="Runs the mutants of the verdict logic.")
    parser.add_argument("--suite", action="append", help="tests that must notice, as a pattern from the root")
    parser.add_argument("words", nargs="*", help="take only mutants in whose line these words stand")
    asked = parser.parse_args(arguments)
    every = mutants()
    chosen = [mutant for mutant in every if all(word in str(mutant) for word in asked.words)]
    prepare()
    outcome = run(chosen, asked.suite or SUITE, told=lambda line: print(line, flush=True))
    return told(outcome, sorted(EQUIVALENTS.keys() - {mutant.key for mutant in every}))


def told(outcome: Outcome, gone: Sequence[tuple[str, str, str, int]]) -> int:
    """What came of it, on the screen; 1 where something is not as it is listed."""
    unlisted = [mutant for mutant in outcome.survivors if mutant.key not in EQUIVALENTS]
    killed = [mutant for mutant in outcome.killers if mutant.key in EQUIVALENTS]
    lines: list[tuple[str, Sequence[Mutant | tuple[str, str, str, int]]]] = [
        ("survives", unlisted),
        ("listed, but killed", killed),
        ("listed, but gone", gone),
    ]
    for heading, found in lines:
        for mutant in found:
            print(f"{heading}: {mutant}")
    equivalent = len(outcome.survivors) - len(unlisted)
    print(f"{len(outcome.killers)} killed, {equivalent} equivalent, {len(unlisted)} survive")
    return 1 if unlisted or killed or gone else 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
