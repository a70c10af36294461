"""Runs the mutants of the verdict logic and tells which survive: `python tests/mutants/run_mutants.py [WORD …]`.

Words pick the mutants in whose line they all stand. Ends with 1 where a survivor is not listed among the equivalents,
or a listed one is killed.
"""

from __future__ import annotations

import sys

from equivalents import EQUIVALENTS
from mutant_making import mutants
from mutant_running import prepare, run


def main(words: list[str]) -> int:
    """Run, and tell."""
    chosen = [mutant for mutant in mutants() if all(word in str(mutant) for word in words)]
    prepare()
    outcome = run(chosen, told=lambda line: print(line, flush=True))
    unlisted = [mutant for mutant in outcome.survivors if mutant.key not in EQUIVALENTS]
    killed = [mutant for mutant in outcome.killers if mutant.key in EQUIVALENTS]
    gone = [] if words else sorted(EQUIVALENTS.keys() - {mutant.key for mutant in chosen})
    for heading, found in (("survives", unlisted), ("listed, but killed", killed), ("listed, but gone", gone)):
        for mutant in found:
            print(f"{heading}: {mutant}")
    print(f"{len(chosen)} mutants, {len(outcome.killers)} killed, {len(outcome.survivors) - len(unlisted)} equivalent")
    return 1 if unlisted or killed or gone else 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
