"""The names of all rules that a house works to: of its own rulesets, and of those that its designs name."""

from __future__ import annotations

from collections.abc import Iterable
from itertools import islice
from pathlib import PurePosixPath

from rulecheck.diagnostics import Refused
from rulecheck.model.design_reader import read_design
from rulecheck.model.ruleset import House, Ruleset
from rulecheck.model.ruleset_reader import read_ruleset
from rulecheck.reading.workspace import Workspace

MOST_DESIGNS = 500


def rule_names(rulesets: Iterable[Ruleset]) -> frozenset[str]:
    """The names of rules that stand in rulesets, those that they withdraw included."""
    return frozenset(
        name for book in rulesets for name in (*book.rules, *(item.rule.name for item in book.withdrawn))
    )  # fmt: skip


def house_rule_names(workspace: Workspace, house: House) -> frozenset[str] | None:
    """The names of rules of every ruleset that the house or one of its designs names.

    None where one of them cannot be read, or where there are more than `MOST_DESIGNS` designs: then nothing can be
    said of names that are missing. Raises nothing; whoever reads such a file for its own sake tells its faults.
    """
    references = [(house.file, reference.text) for reference in house.rulesets]
    try:
        files = _designs(workspace, house)
        if files is None:
            return None
        for file in files:
            references += [(file, reference.text) for reference in read_design(workspace, file).rulesets]
        books = dict.fromkeys(workspace.resolve(reference, beside, None) for beside, reference in references)
        return rule_names([read_ruleset(workspace, book) for book in books])
    except Refused:
        return None


def _designs(workspace: Workspace, house: House) -> list[str] | None:
    """The files that the patterns of a house file meet; None for patterns that lead out, and for too many files."""
    files: dict[str, None] = {}
    for pattern in house.designs:
        inside = PurePosixPath(pattern.text)
        if inside.is_absolute() or ".." in inside.parts or not inside.parts:
            return None
        found = islice(workspace.root.glob(pattern.text), MOST_DESIGNS + 1)
        files.update((workspace.name(path), None) for path in found)
        if len(files) > MOST_DESIGNS:
            return None
    return sorted(files)
