"""Mutants: one small change each to the syntax tree of a file."""

from __future__ import annotations

import ast
from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cache
from types import CodeType

from mutant_changes import changes
from mutant_targets import ROOT, TARGETS, Target

Step = tuple[str, int | None]
"""From a node to a part of it: the field, and the place where the field is a list."""


@dataclass(frozen=True, slots=True)
class Mutant:
    """One change. `name` says it in words that do not move when lines do; `number` tells equal names apart."""

    file: str
    function: str
    name: str
    number: int
    path: tuple[Step, ...]
    alternative: int
    lines: range

    @property
    def key(self) -> tuple[str, str, str, int]:
        """What identifies the mutant from one run to the next."""
        return (self.file, self.function, self.name, self.number)

    def __str__(self) -> str:
        again = f" (number {self.number})" if self.number > 1 else ""
        return f"{self.file}: {self.function}: {self.name}{again}"


@cache
def tree_of(file: str) -> ast.Module:
    """The syntax tree of a file; whoever changes it puts it back."""
    return ast.parse((ROOT / file).read_text(encoding="utf-8"), filename=str(ROOT / file))


def mutants() -> list[Mutant]:
    """All mutants of the verdict logic, in the order of the targets."""
    return [mutant for target in TARGETS for mutant in mutants_of(target)]


def mutants_of(target: Target) -> Iterator[Mutant]:
    """The mutants of one file."""
    named: Counter[tuple[str, str]] = Counter()
    for path, function, node in sites(tree_of(target.file)):
        if not target.takes(function) or (isinstance(node, ast.stmt) and len(path) == 1):
            continue  # without a definition of its own a module does not even load
        for index, (_, name) in enumerate(changes(node)):
            named[function, name] += 1
            yield Mutant(target.file, function, name, named[function, name], path, index, _lines(node))


def _lines(node: ast.AST) -> range:
    """The lines that run where a change makes a difference: of an `if` those of its condition."""
    first = last = node
    if isinstance(node, ast.If):
        first = last = node.test
    elif isinstance(node, ast.comprehension):
        first, last = node.target, node.ifs[-1] if node.ifs else node.iter
    return range(first.lineno, (last.end_lineno or last.lineno) + 1)  # type: ignore[attr-defined]


def mutated(mutant: Mutant) -> CodeType:
    """The code of the mutant's module."""
    tree = tree_of(mutant.file)
    parent: ast.AST = tree
    for step in mutant.path[:-1]:
        parent = _part(parent, step)
    place = mutant.path[-1]
    old = _part(parent, place)
    new = list(changes(old))[mutant.alternative][0]
    _put(parent, place, ast.fix_missing_locations(ast.copy_location(new, old)))
    try:
        return compile(tree, str(ROOT / mutant.file), "exec", dont_inherit=True)
    finally:
        _put(parent, place, old)


def _part(node: ast.AST, step: Step) -> ast.AST:
    field, index = step
    value = getattr(node, field)
    part: ast.AST = value if index is None else value[index]
    return part


def _put(node: ast.AST, step: Step, new: ast.AST) -> None:
    field, index = step
    if index is None:
        setattr(node, field, new)
    else:
        getattr(node, field)[index] = new


# --- where a change may be made --------------------------------------------------------------------------------------

_NO_LOGIC = (ast.Assert, ast.JoinedStr, ast.Import, ast.ImportFrom)
_TOLD = ("fault", "add", "nearest", "Related", "zip")
"""Calls whose arguments are words for people, or are named nowhere else, or are only held to be of one length."""
_FACTS = ("array", "form", "gives", "many", "meaning", "partials", "precedence", "script", "sign", "symbolic", "takes")
"""Facts of an operation that no exact reading asks for."""
_FAULTS = ("Broken", "BROKEN", "fault", "faults")
"""Names that speak of files at fault: those get no verdict at all, and the tests of diagnostics hold them."""
_BESIDE = ("touched", "uses", "memo", "leave", "MOST_CASES", "MOST_COMBINATIONS")
"""Names of what other studies ask for, of what is kept to be quick, and of bounds."""
_WORDS = ("text", "shown", "told", "label", "advice", "count")
"""Names of texts for people, and of the count that is held against a bound."""


def sites(
    node: ast.AST, path: tuple[Step, ...] = (), function: str = ""
) -> Iterator[tuple[tuple[Step, ...], str, ast.AST]]:
    """Every node that may be changed, with its path and the function in which it stands."""
    if isinstance(node, (ast.FunctionDef, ast.ClassDef)):
        function = f"{function}.{node.name}" if function else node.name
    for step, part in _parts(node):
        inside = function or _constant(part)
        if isinstance(part, ast.expr | ast.stmt | ast.comprehension) and not _about_faults(part):
            yield (*path, step), inside, part
        yield from sites(part, (*path, step), inside)


def _about_faults(node: ast.AST) -> bool:
    if isinstance(node, ast.If):
        return (
            _names(node.test, (*_FAULTS, *_BESIDE)) or _names(node.body[-1], _FAULTS) or _names(node.body[0], _FAULTS)
        )
    if isinstance(node, ast.Expr):
        return _names(node, (*_FAULTS, *_BESIDE))
    return not isinstance(node, (ast.FunctionDef, ast.ClassDef, ast.For)) and _names(node, _FAULTS)


def _names(node: ast.AST, words: Sequence[str]) -> bool:
    return any(getattr(part, "id", getattr(part, "attr", "")) in words for part in ast.walk(node))


def _constant(node: ast.AST) -> str:
    """What stands in a module's constant goes by the constant's name."""
    if isinstance(node, ast.Assign):
        node = node.targets[0]
    elif isinstance(node, ast.AnnAssign):
        node = node.target
    return node.id if isinstance(node, ast.Name) else ""


def _parts(node: ast.AST) -> Iterator[tuple[Step, ast.AST]]:
    for field, value in ast.iter_fields(node):
        if isinstance(node, ast.keyword) and node.arg in _FACTS:
            continue
        if field in ("test", "body") and isinstance(node, ast.If) and _about_faults(node):
            continue
        if field in ("annotation", "returns", "decorator_list", "func_name", "bases", "targets", "target"):
            continue
        if isinstance(node, ast.Call) and field in ("args", "keywords") and _called(node) in _TOLD:
            continue
        for index, item in enumerate(value if isinstance(value, list) else [value]):
            if isinstance(item, ast.AST) and not isinstance(item, _NO_LOGIC) and not _is_words(item):
                yield (field, index if isinstance(value, list) else None), item


def _called(call: ast.Call) -> str:
    function = call.func
    return function.attr if isinstance(function, ast.Attribute) else getattr(function, "id", "")


def _is_words(node: ast.AST) -> bool:
    """Docstrings, and what is put together as text for people."""
    if isinstance(node, (ast.Assign, ast.AugAssign)):
        target = node.targets[0] if isinstance(node, ast.Assign) else node.target
        return isinstance(target, ast.Name) and target.id in _WORDS
    return isinstance(node, ast.Expr) and isinstance(node.value, ast.Constant)
