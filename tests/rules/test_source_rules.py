"""Rules of the source: who may import whom, what carries a docstring, how long a file or function may be."""

from __future__ import annotations

import ast
import re
from collections.abc import Iterator
from functools import cache
from pathlib import Path

import pytest
from importlinter import api as linter
from importlinter.application import use_cases

ROOT = Path(__file__).parents[2]
PACKAGE = ROOT / "rulecheck"
MODULES = sorted(PACKAGE.rglob("*.py"))
MOST_LINES, MOST_FUNCTION_LINES = 350, 60

LONGER_FILES = {
    # Each with the lines that it may have, and the reason why it is one file.
    "binding/comparing.py": (400, "one pair of a comparison by kind; its cases lean on each other"),
}
LATE_IMPORTS = ("__init__.py", "answering.py", "api.py", "cli.py")
"""Only these load heavy parts when they are used."""


@cache
def tree(path: Path) -> ast.Module:
    return ast.parse(path.read_text(encoding="utf-8"))


def name(path: Path) -> str:
    return path.relative_to(PACKAGE).as_posix()


def functions(node: ast.AST) -> Iterator[ast.FunctionDef]:
    return (inner for inner in ast.walk(node) if isinstance(inner, ast.FunctionDef))


def public(node: ast.AST, before: str = "") -> Iterator[tuple[str, ast.AST]]:
    """Classes and functions that are not private, methods too; what is inside of a function is nobody's business."""
    for inner in ast.iter_child_nodes(node):
        if isinstance(inner, (ast.ClassDef, ast.FunctionDef)) and not inner.name.startswith("_"):
            yield f"{before}{inner.name}", inner
            if isinstance(inner, ast.ClassDef):
                yield from public(inner, f"{inner.name}.")


def test_there_is_source_to_look_at() -> None:
    assert len(MODULES) > 50


def test_imports_go_only_to_what_stands_lower(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(ROOT)
    options = linter.read_configuration()
    assert len(options["contracts_options"]) >= 3
    assert use_cases.lint_imports(config_filename=str(ROOT / "pyproject.toml"), cache_dir=None) is use_cases.SUCCESS


@pytest.mark.parametrize("folder", sorted({path.parent for path in MODULES}), ids=name)
def test_every_folder_says_what_lives_there(folder: Path) -> None:
    doc = ast.get_docstring(tree(folder / "__init__.py"))
    assert doc, f"{folder.name}/__init__.py has no docstring"
    assert len(doc.split()) >= 8, "a few words on what it promises"


@pytest.mark.parametrize("path", MODULES, ids=name)
def test_modules_and_what_is_public_carry_docstrings(path: Path) -> None:
    assert ast.get_docstring(tree(path)), "the module"
    bare = [what for what, node in public(tree(path)) if not ast.get_docstring(node)]  # type: ignore[arg-type]
    assert bare == []


@pytest.mark.parametrize("path", MODULES, ids=name)
def test_files_and_functions_are_short(path: Path) -> None:
    most, reason = LONGER_FILES.get(name(path), (MOST_LINES, "the bound of every file"))
    assert len(path.read_text(encoding="utf-8").splitlines()) <= most, reason
    for function in functions(tree(path)):
        assert (function.end_lineno or 0) - function.lineno < MOST_FUNCTION_LINES, function.name


def test_no_file_is_excused_without_need() -> None:
    for file in LONGER_FILES:
        assert len((PACKAGE / file).read_text(encoding="utf-8").splitlines()) > MOST_LINES, f"{file} needs no excuse"


@pytest.mark.parametrize("path", [path for path in MODULES if name(path) not in LATE_IMPORTS], ids=name)
def test_imports_stand_at_the_top(path: Path) -> None:
    late = [
        (function.name, ast.unparse(node))
        for function in functions(tree(path))
        for node in ast.walk(function)
        if isinstance(node, (ast.Import, ast.ImportFrom))
    ]
    assert late == []


@pytest.mark.parametrize("path", MODULES, ids=name)
def test_every_function_is_typed(path: Path) -> None:
    bare = [function.name for function in functions(tree(path)) if function.returns is None]
    assert bare == []


@pytest.mark.parametrize("path", MODULES, ids=name)
def test_nothing_reads_the_clock_but_the_verbs(path: Path) -> None:
    """The evaluation date comes from outside: a calculation gives the same answer tomorrow."""
    clock = re.compile(r"\b(date\.today|datetime\.now|time\.time|perf_counter|monotonic)\(")
    if name(path) != "api.py":
        assert clock.findall(path.read_text(encoding="utf-8")) == []
