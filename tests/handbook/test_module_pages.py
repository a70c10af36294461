"""Every physics module has a page that says all that its file says, and which inputs it reads."""

from __future__ import annotations

import re

import pytest

from rulecheck.cli import run
from rulecheck.handbook import pages
from rulecheck.handbook.module_pages import MODULES, module_names, module_of, module_page
from rulecheck.physics.modules import BUILT_IN
from rulecheck.physics.solvers import OWN


def flat(text: str) -> str:
    return " ".join(text.split())


@pytest.mark.parametrize("name", MODULES)
def test_the_page_says_all_that_the_file_says(name: str) -> None:
    page, said = flat(pages.page(f"physics-{name}")), module_of(name)
    assert said.meaning in page
    assert said.caution in page
    for figure in said.figures.values():
        assert f"### `{name}.{figure.name}`" in page
        assert figure.by_solver or flat(figure.formula.text) in page
        assert flat(figure.meaning) in page
        assert figure.valid is None or f"Valid for `{flat(figure.valid.text)}`" in page
    assert all(f"`{key}`: {flat(text)}" in page for key, text in said.sources.items())


@pytest.mark.parametrize("name", MODULES)
def test_every_module_names_its_traps(name: str) -> None:
    """Where this fails: the file or solver of the module has no `traps:`, mistakes that practitioners make with its figures."""
    traps = module_of(name).traps
    assert traps
    assert all(trap.endswith(".") and flat(f"- {trap}") in flat(module_page(name)) for trap in traps)


@pytest.mark.parametrize("name", MODULES)
def test_pages_are_listed_and_of_readable_width(name: str) -> None:
    assert f"| `physics-{name}` |" in pages.page("physics")
    lines = module_page(name).splitlines()
    assert [line for line in lines if len(line) > 120 and " " in line.strip() and not line.startswith("|")] == []


def test_inputs_are_those_that_the_formulas_read() -> None:
    inputs = module_page("mass").partition("## Inputs")[2].partition("## Sources")[0]
    read = re.findall(r"^\| `([^`]+)` \|", inputs, re.MULTILINE)
    assert read == sorted(set(read))
    assert {
        "dimensions.wheelbase", "dimensions.front_ride_height", "masses.*.at", "masses.*.mass", "masses.*.mirror",
        "masses.*.inertia.xx", "masses.*.unsprung", "suspension.front.roll_stiffness",
    } <= set(read)  # fmt: skip
    assert not {path for path in read if path.startswith(("tyres.", "aero_surfaces.", "vehicle."))}
    assert "`physics-aero`, `physics-mass`" in flat(module_page("load_transfer"))


def test_every_module_has_a_page_also_that_of_a_solver() -> None:
    assert set(module_names()) == {f"physics-{name}" for name in (*BUILT_IN, *OWN)}
    page = flat(module_page("lap"))
    assert "quasi-steady" in page
    assert "| `vehicle.rolling_resistance` |" in page
    assert "`physics-mass`" in page


def test_the_name_of_a_module_alone_shows_its_page(capsys: pytest.CaptureFixture[str]) -> None:
    assert run(["handbook", "mass"]) == 0
    short = capsys.readouterr().out
    assert run(["handbook", "physics-mass"]) == 0
    assert short == capsys.readouterr().out == module_page("mass")


def test_a_page_that_is_not_there() -> None:
    assert "physics-none" not in module_names()
    with pytest.raises(KeyError):
        module_page("none")
