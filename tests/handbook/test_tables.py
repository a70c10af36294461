"""Tables of the handbook say what the code knows, and all of it."""

from __future__ import annotations

import ast
import inspect
import json
import re
import textwrap
from datetime import date
from fractions import Fraction
from pathlib import Path

import pytest
from markdown_blocks import ROOT, blocks

from rulecheck import workings
from rulecheck.binding import curve_calls, functions, geometry_calls, signal_calls
from rulecheck.diagnostics import CODES
from rulecheck.formula.tokens import AGGREGATES
from rulecheck.handbook import pages, tables
from rulecheck.handbook.functions import FUNCTIONS, Row
from rulecheck.handbook.module_pages import module_names
from rulecheck.model.core_table import CORE
from rulecheck.model.edge import RulesetShape, RuleShape
from rulecheck.outcome.results import VERDICTS
from rulecheck.quantity import unit_table

DAY = date(2027, 3, 1)


def _first_column(table: str) -> list[str]:
    return re.findall(r"^\| `([^`]*)` \|", table, re.MULTILINE)


def test_every_marker_is_filled_and_every_table_is_shown() -> None:
    written = {name: (pages.FOLDER / f"{name}.md").read_text("utf-8") for name in pages.FIRST}
    marked = re.findall(r"<!-- table: (\S+) -->", "".join(written.values()))
    assert sorted(marked) == sorted(tables.TABLES)
    assert all("<!--" not in pages.page(name) for name in pages.names())


def test_every_page_has_its_place_and_is_named_by_the_index() -> None:
    assert tuple(name for name in pages.names() if name not in module_names()) == pages.FIRST
    index = pages.page("index")
    assert [name for name in pages.FIRST if name != "index"] == re.findall(r"^\| `([a-z-]+)` \|", index, re.MULTILINE)


def test_heads_of_examples_are_for_readers() -> None:
    shown = "".join(pages.page(name) for name in pages.names())
    assert "File `plover.design.yaml`:\n\n```yaml\n" in shown
    assert "Save this as `grebe.design.yaml`, beside it:\n\n```yaml\n" in shown
    assert "Gives shares: complies, 3 %; ratio: complies, 15 mm.\n\n```yaml\n" in shown
    assert not re.search(r"^```\w+ ", shown, re.MULTILINE)


def test_an_unknown_page() -> None:
    with pytest.raises(KeyError):
        pages.page("../api")


def test_pages_keep_to_their_width() -> None:
    for name in pages.FIRST:
        inside = False
        for line in (pages.FOLDER / f"{name}.md").read_text("utf-8").splitlines():
            inside ^= line.startswith("```")
            assert inside or len(line) <= 120 or line.startswith(("|", "```")), f"{name}: {line}"


def test_vocabulary_units_and_codes_are_complete() -> None:
    assert _first_column(tables.vocabulary()) == [entry.path for entry in CORE]
    assert _first_column(tables.unit_rows()) == [row.symbol for row in unit_table.UNITS]
    assert _first_column(tables.code_rows()) == list(CODES)
    assert _first_column(tables.prefix_rows())[0] == "p"


def test_sizes_of_units_are_exact() -> None:
    """Against figures of NIST SP 811 (2008), appendix B (from memory): inch, pound-force, horsepower, atmosphere."""
    sizes = {row.symbol: tables.in_si(row) for row in unit_table.UNITS}
    assert sizes["in"] == "0.0254 `m`"
    assert sizes["lbf"] == "4.4482216152605 `kg*m*s^-2`"
    assert sizes["atm"] == "101325 `kg*m^-1*s^-2`"
    assert sizes["rpm"] == "pi/30 `s^-1`"
    assert Fraction("745.69987158227022") == Fraction(sizes["hp"].split()[0])


def test_signs_of_axes_follow_from_the_turns() -> None:
    """A turn by half about one axis: products of two coordinates change sign where one of them does alone."""
    rows = dict(re.findall(r"^\| (product of inertia \w+) \| (.*) \|$", pages.page("design-files"), re.MULTILINE))
    turns = ({"x": -1, "y": -1, "z": 1}, {"x": -1, "y": 1, "z": -1})  # to ISO 8855, to SAE J1594
    for pair in ("xy", "xz", "yz"):
        signs = [turn[pair[0]] * turn[pair[1]] for turn in turns]
        told = ["stays" if sign > 0 else "changes sign" for sign in signs]
        assert rows[f"product of inertia {pair}"] == " | ".join(told)


def test_every_verdict_is_explained() -> None:
    assert _first_column(pages.page("verdicts-and-margins"))[: len(VERDICTS)] == list(VERDICTS)


def test_every_key_of_rulesets_is_explained() -> None:
    page = pages.page("rulesets")
    for shape in (RulesetShape, RuleShape):
        for key in shape.model_fields:
            assert re.search(rf"`{key}`", page), f"{shape.__name__}.{key}"


# --- functions -------------------------------------------------------------------------------------------------


def _known_functions() -> set[str]:
    """Every function that binding knows: those by table, and those by a case of `call`."""
    tree = ast.parse(textwrap.dedent(inspect.getsource(functions.call)))
    special = {
        key.value
        for node in ast.walk(tree)
        if isinstance(node, ast.Dict)
        for key in node.keys
        if isinstance(key, ast.Constant)
    }
    return {
        *special,
        *functions._ONE,
        *functions._ROUND,
        *geometry_calls.GEOMETRY,
        *curve_calls.CURVES,
        *signal_calls.SIGNALS,
        *AGGREGATES,
    }


def test_every_function_is_explained() -> None:
    assert {row.name for row in FUNCTIONS} == _known_functions()
    assert len({row.name for row in FUNCTIONS}) == len(FUNCTIONS)


def _unit(row: Row) -> str:
    found = re.fullmatch(r"-?[0-9.]+( \S+)?", row.result)
    return (found[1] or " 1").strip() if found else ""


@pytest.fixture(scope="module")
def computed(tmp_path_factory: pytest.TempPathFactory) -> dict[str, str]:
    """What the examples of all functions give, on the car of the page on the language."""
    folder: Path = tmp_path_factory.mktemp("functions")
    page = (ROOT / "rulecheck" / "handbook" / "language.md").read_text("utf-8")
    for block in blocks(page):
        if "file" in block.said:
            (folder / block.said["file"]).write_text(block.text, "utf-8")
    lines = ["ruleset: Functions", "extends: stilt.ruleset.yaml", "derived:"]
    for row in FUNCTIONS:
        unit = f', unit: "{_unit(row)}"' if _unit(row) else ""
        lines.append(f"  x_{row.name}: {{formula: {json.dumps(row.example)}{unit}}}")
    (folder / "functions.ruleset.yaml").write_text("\n".join(lines) + "\n", "utf-8")
    names = [f"x_{row.name}" for row in FUNCTIONS]
    found = workings(folder / "stilt.design.yaml", names, rules=[folder / "functions.ruleset.yaml"], on=DAY)
    return {item.name.removeprefix("x_"): item.steps[-1].result for item in found.items}


@pytest.mark.parametrize("row", FUNCTIONS, ids=lambda row: row.name)
def test_the_example_of_a_function(row: Row, computed: dict[str, str]) -> None:
    assert computed[row.name] == row.result
