"""Rules of the repository: what stands where, what must not be in any file, and what the data tables must say."""

from __future__ import annotations

import re
import subprocess
import tomllib
from functools import cache
from pathlib import Path

import pytest

import rulecheck
from rulecheck.model.core_table import CORE
from rulecheck.model.vocabulary import Entry
from rulecheck.physics.modules import BUILT_IN, built_in
from rulecheck.quantity.units import find_unit

ROOT = Path(__file__).parents[2]
TOP = frozenset(
    ("rulecheck", "rulesets_demo", "designs_demo", "tests", "README.md", "DEVELOPERS.md", "pyproject.toml", "LICENSE")
)
WITH_UNITS = ("number", "point", "outline", "range", "curve", "map")
MACHINE = re.compile(r"/(?:home|root|tmp|work|Users)/\w")
"""A path of somebody's machine."""


@cache
def files() -> tuple[Path, ...]:
    """Every file that is kept, as git has it: new ones too, and nothing that is ignored."""
    listed = subprocess.run(
        ["git", "ls-files", "--cached", "--others", "--exclude-standard"],
        cwd=ROOT, capture_output=True, text=True, check=True,
    ).stdout  # fmt: skip
    return tuple(ROOT / line for line in listed.splitlines() if (ROOT / line).is_file())


def test_only_what_belongs_there_stands_at_the_top() -> None:
    found = {path.relative_to(ROOT).parts[0] for path in files()}
    assert {name for name in found if not name.startswith(".")} == TOP


def test_no_file_names_a_path_of_a_machine() -> None:
    named = []
    for path in files():
        text = path.read_bytes().decode("utf-8", errors="ignore")
        named += [f"{path.relative_to(ROOT)}: {found[0]}" for found in MACHINE.finditer(text)]
    assert named == []


def test_the_pattern_finds_such_paths() -> None:
    assert MACHINE.search("see /" + "home/somebody/car.design.yaml")


def test_the_changelog_mentions_the_version() -> None:
    text = (ROOT / "rulecheck" / "CHANGELOG.md").read_text(encoding="utf-8")
    assert f"## {rulecheck.__version__}\n" in text


def test_the_version_is_the_same_everywhere() -> None:
    project = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))["project"]
    assert project["version"] == rulecheck.__version__


def test_the_public_names_are_those_that_are_offered() -> None:
    assert list(rulecheck.__all__) == sorted(rulecheck.__all__)
    for name in rulecheck.__all__:
        assert getattr(rulecheck, name) is not None
    late = set(rulecheck._LATE)
    assert late <= set(rulecheck.__all__)
    with pytest.raises(AttributeError, match="no attribute 'zorg'"):
        rulecheck.__getattr__("zorg")


@pytest.mark.parametrize("entry", CORE, ids=lambda entry: entry.path)
def test_every_row_of_the_vocabulary_is_whole(entry: Entry) -> None:
    assert entry.meaning.strip(), "no meaning"
    if entry.kind == "choice":
        assert entry.choices
    if entry.kind in WITH_UNITS:
        assert find_unit(entry.unit).dimension is not None
    else:
        assert entry.unit == ""


def test_no_path_stands_twice_in_the_vocabulary() -> None:
    paths = [entry.path for entry in CORE]
    assert len(paths) == len(set(paths))


@pytest.mark.parametrize("name", BUILT_IN)
def test_every_physics_figure_has_unit_meaning_and_source(name: str) -> None:
    module = built_in(name)
    assert module is not None
    assert module.name == name
    assert module.meaning
    assert module.sources
    used = set()
    for figure in module.figures.values():
        assert figure.meaning, figure.name
        assert figure.source in {*module.sources, *module.sources.values()}, figure.name
        used.add(figure.source)
        if figure.unit is not None:
            find_unit(figure.unit.text)
    assert set(module.sources) <= used, "a source that no figure rests on"
