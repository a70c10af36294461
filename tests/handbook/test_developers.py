"""The developers' map names files that are there, the import order that is held, and every command is in the handbook."""

from __future__ import annotations

import re
import tomllib

from markdown_blocks import ROOT

from rulecheck import __version__
from rulecheck.cli import rulecheck as commands
from rulecheck.handbook import pages

TEXT = (ROOT / "DEVELOPERS.md").read_text("utf-8")


def test_named_files_are_there() -> None:
    named = set(re.findall(r"`((?:rulecheck|tests)/[\w./]*)`", TEXT))
    assert len(named) > 30
    assert sorted(name for name in named if not (ROOT / name).exists()) == []


def test_import_order_is_the_one_that_is_held() -> None:
    settings = tomllib.loads((ROOT / "pyproject.toml").read_text("utf-8"))
    layers = settings["tool"]["importlinter"]["contracts"][0]["layers"]
    assert re.findall(r"^- `(\w+)`$", TEXT, re.MULTILINE) == layers


def test_every_command_is_explained_by_the_handbook() -> None:
    handbook = "".join(pages.page(name) for name in pages.names())
    assert commands.commands
    for name in commands.commands:
        assert f"rulecheck {name}" in handbook, name


def test_the_changelog_speaks_of_this_version() -> None:
    assert f"## {__version__}\n" in (ROOT / "rulecheck" / "CHANGELOG.md").read_text("utf-8")
