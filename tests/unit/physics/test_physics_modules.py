"""What every physics module promises: sources, meanings, caution, and nothing that is missing counts as known."""

from __future__ import annotations

from pathlib import Path

import pytest
from small_files import CAR, DAY

from rulecheck import workings
from rulecheck.model.core_table import CORE
from rulecheck.physics.modules import BUILT_IN, built_in

# Figures of nature, and a standard's: the only ones that a car need not say anything for.
CONSTANTS = {"air.gravity", "air.gas_constant", "air.vapour_gas_constant"}


@pytest.fixture(scope="module")
def empty(tmp_path_factory: pytest.TempPathFactory) -> dict[str, str]:
    """What every figure gives for a design that says nothing."""
    path: Path = tmp_path_factory.mktemp("empty") / "car.design.yaml"
    path.write_text(CAR.replace("rulesets: [cup.ruleset.yaml]\n", ""), encoding="utf-8")
    found = workings(path, list(BUILT_IN), on=DAY)
    return {item.name: item.steps[-1].result for item in found.items}


@pytest.mark.parametrize("name", BUILT_IN)
def test_every_figure_says_what_it_is(name: str) -> None:
    module = built_in(name)
    assert module is not None
    assert module.meaning
    assert not module.meaning.endswith(".")
    used = set()
    for figure in module.figures.values():
        assert figure.meaning, figure.name
        assert figure.source in module.sources, figure.name
        used.add(figure.source)
    assert used == set(module.sources)


@pytest.mark.parametrize("name", ["ballasting", "braking", "mass", "recovery", "rollover"])
def test_what_can_hurt_carries_caution(name: str) -> None:
    module = built_in(name)
    assert module is not None
    assert "design comparison" in module.caution
    assert "officials" in module.caution


@pytest.mark.parametrize("name", BUILT_IN)
def test_nothing_missing_counts_as_known(name: str, empty: dict[str, str]) -> None:
    module = built_in(name)
    assert module is not None
    whole = [f"{name}.{figure.name}" for figure in module.figures.values() if figure.loop is None and figure.of is None]
    assert whole
    known = {figure for figure in whole if not empty[figure].startswith("unknown: ")}
    assert known <= CONSTANTS


def test_no_input_of_the_same_name_hides_a_figure() -> None:
    """A path is an input first: a figure under the name of one, or in a module named as a collection, is out of reach."""
    inputs = {entry.path for entry in CORE if not entry.computed}
    collections = {entry.path for entry in CORE if entry.kind == "collection"}
    for name in BUILT_IN:
        module = built_in(name)
        assert module is not None
        assert name not in collections
        assert not inputs & {f"{name}.{figure}" for figure in module.figures}
