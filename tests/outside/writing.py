"""Writes designs, rulesets and ledgers for the outside checks, and reads back what was found."""

from __future__ import annotations

import json
import re
from collections.abc import Iterable, Mapping, Sequence
from datetime import date
from fractions import Fraction
from pathlib import Path

from rulecheck import check
from rulecheck.outcome.results import Amount, Finding, Report

DAY = date(2027, 3, 1)
BARE = re.compile(r"[A-Za-z0-9][A-Za-z0-9 ._/*^()+<>=-]*|-[0-9][A-Za-z0-9 ./*^-]*")


def yaml_lines(tree: object, depth: int = 0) -> Iterable[str]:
    """A tree of mappings, lists and texts as YAML; a text is quoted where it would not be read as it stands."""
    pad = "  " * depth
    assert isinstance(tree, Mapping)
    for key, value in tree.items():
        if isinstance(value, Mapping) and value:
            yield f"{pad}{key}:"
            yield from yaml_lines(value, depth + 1)
        else:
            yield f"{pad}{key}: {_leaf(value)}"


def _leaf(value: object) -> str:
    if isinstance(value, Mapping):
        return "{" + ", ".join(f"{key}: {_leaf(item)}" for key, item in value.items()) + "}"
    if isinstance(value, (list, tuple)):
        return "[" + ", ".join(_leaf(item) for item in value) + "]"
    text = str(value)
    return text if BARE.fullmatch(text) else json.dumps(text, ensure_ascii=False)


def write(path: Path, tree: Mapping[str, object]) -> Path:
    path.write_text("\n".join(yaml_lines(tree)) + "\n", encoding="utf-8")
    return path


def write_design(folder: Path, **parts: object) -> Path:
    """A design named `car.design.yaml` that names the ruleset beside it."""
    return write(folder / "car.design.yaml", {"design": "Test car", "rulesets": ["book.ruleset.yaml"], **parts})


def write_ruleset(folder: Path, **parts: object) -> Path:
    """A ruleset named `book.ruleset.yaml`."""
    return write(folder / "book.ruleset.yaml", {"ruleset": "Test book", "edition": "2027", **parts})


def write_ledger(folder: Path, header: Sequence[str], rows: Iterable[Sequence[object]]) -> str:
    """A ledger named `parts.csv`; the name as a design refers to it."""
    lines = [",".join(header), *(",".join(map(str, row)) for row in rows)]
    (folder / "parts.csv").write_text("\n".join(lines) + "\n", encoding="utf-8")
    return "parts.csv"


def checked(folder: Path, settings: Mapping[str, str] | None = None, on: date = DAY) -> Report:
    """The report on the design in the folder."""
    return check(folder / "car.design.yaml", settings=settings or {}, on=on)


def findings(folder: Path, settings: Mapping[str, str] | None = None, on: date = DAY) -> dict[str, Finding]:
    """The findings on the design in the folder, by rule."""
    return {finding.name: finding for finding in checked(folder, settings, on).rules}


def as_float(amount: Amount | None) -> float:
    """An amount that must be there, as a double."""
    assert amount is not None
    assert amount.value is not None
    return amount.value


def as_fraction(amount: Amount | None) -> Fraction:
    """An amount that must be there and must be exact."""
    assert amount is not None
    assert amount.exact, f"{amount} is not exact"
    return Fraction(amount.exact)


def write_figures(folder: Path, units: Mapping[str, str], **parts: object) -> None:
    """A ruleset with one rule a figure, so that `values` can read each figure in the unit given."""
    rules = {
        name.replace(".", "_"): {"require": f"{name} >= 0 {unit}" if unit != "1" else f"{name} >= 0"}
        for name, unit in units.items()
    }
    write_ruleset(folder, **parts, rules=rules)


def values(folder: Path, units: Mapping[str, str], settings: Mapping[str, str] | None = None) -> dict[str, float]:
    """The figures of `write_figures` as doubles; each must be known, in the unit asked for."""
    found = findings(folder, settings)
    result = {}
    for name, unit in units.items():
        amount = found[name.replace(".", "_")].value
        assert amount is not None, (name, found[name.replace(".", "_")].reason)
        assert amount.unit in (unit, "" if unit == "1" else unit)
        result[name] = as_float(amount)
    return result
