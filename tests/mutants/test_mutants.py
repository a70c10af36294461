"""Mutants of the verdict logic: none survives but those that are listed as equivalent, each with its reason."""

from __future__ import annotations

import ast
import subprocess
import sys

import pytest
from equivalents import EQUIVALENTS
from mutant_making import mutants, mutated, tree_of
from mutant_targets import ROOT, TARGETS

RUN = ROOT / "tests" / "mutants" / "run_mutants.py"


def run(*arguments: str, seconds: int) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, str(RUN), *arguments], cwd=ROOT, capture_output=True, text=True, timeout=seconds, check=False
    )


def test_every_file_of_the_verdict_logic_has_mutants() -> None:
    assert {mutant.file for mutant in mutants()} == {target.file for target in TARGETS}


def test_mutants_have_keys_of_their_own_and_change_the_code() -> None:
    made = [mutant for mutant in mutants() if mutant.file.endswith(("totals.py", "comparison.py"))]
    assert len({mutant.key for mutant in made}) == len(made) > 40
    for mutant in made:
        before = ast.dump(tree_of(mutant.file))
        assert mutated(mutant) != compile(tree_of(mutant.file), str(ROOT / mutant.file), "exec", dont_inherit=True)
        assert ast.dump(tree_of(mutant.file)) == before


def test_equivalents_are_mutants_and_have_a_reason() -> None:
    assert EQUIVALENTS.keys() <= {mutant.key for mutant in mutants()}
    assert all(len(reason) > 20 for reason in EQUIVALENTS.values())


def test_a_change_of_strictness_is_noticed() -> None:
    done = run("--suite", "tests/unit/test_verdict_logic_operations.py", "left <= right -> left < right", seconds=120)
    assert done.returncode == 0, done.stdout + done.stderr
    assert "2 killed, 0 equivalent, 0 survive" in done.stdout


def test_a_change_that_no_test_reaches_survives() -> None:
    done = run("--suite", "tests/unit/formula/test_tokens.py", "left <= right -> left < right", seconds=120)
    assert done.returncode == 1, done.stdout + done.stderr
    assert "0 killed, 0 equivalent, 2 survive" in done.stdout


@pytest.mark.long
def test_no_mutant_of_the_verdict_logic_survives() -> None:
    done = run(seconds=7200)
    assert done.returncode == 0, done.stdout[-20_000:] + done.stderr[-2000:]
