"""How a mutant gets into a process: into functions that live already, or at the import of its module."""

from __future__ import annotations

import gc
import importlib.abc
import importlib.machinery
import importlib.util
import sys
from collections.abc import Callable, Iterator, Mapping, Sequence
from functools import cache
from types import CodeType, FrameType, FunctionType, ModuleType

from mutant_making import Mutant, mutated, tree_of
from mutant_targets import ROOT

CodeKey = tuple[str, str, int, int]
"""File, dotted name, first line and first column: what tells a function's code from all others."""


def code_key(code: CodeType) -> CodeKey:
    """The key of a code object."""
    column = next((place[2] for place in code.co_positions() if place[0] == code.co_firstlineno and place[2]), 0)
    return (code.co_filename, code.co_qualname, code.co_firstlineno, column or 0)


def nested(code: CodeType) -> Iterator[CodeType]:
    """A code object with all those inside it."""
    yield code
    for constant in code.co_consts:
        if isinstance(constant, CodeType):
            yield from nested(constant)


@cache
def original(file: str) -> CodeType:
    """The code of a file as it stands."""
    return compile(tree_of(file), str(ROOT / file), "exec", dont_inherit=True)


def exchanged(mutant: Mutant) -> Mapping[CodeKey, CodeType]:
    """The code that the mutant changes, by the key of what it stands for."""
    new = {code_key(code): code for code in nested(mutated(mutant))}
    return {
        code_key(code): new[code_key(code)]
        for code in nested(original(mutant.file))
        if code_key(code) in new and new[code_key(code)] != code
    }


def needs_import(changed: Mapping[CodeKey, CodeType], run_at_import: frozenset[CodeKey]) -> bool:
    """Whether the change is in code that runs while modules load: then it must be there from the start."""
    return any(
        (key[1] == "<module>" or key in run_at_import) and not _alike_outside(key, code)
        for key, code in changed.items()
    )


def _alike_outside(key: CodeKey, new: CodeType) -> bool:
    """Whether two codes differ only in the functions that stand inside them."""
    file = str(key[0]).removeprefix(f"{ROOT}/")
    old = next(code for code in nested(original(file)) if code_key(code) == key)
    return _own(old) == _own(new)


def _own(code: CodeType) -> tuple[object, ...]:
    constants = tuple("a function" if isinstance(value, CodeType) else (type(value), value) for value in code.co_consts)
    return (code.co_code, code.co_names, code.co_varnames, code.co_freevars, code.co_cellvars, constants)


def living(files: frozenset[str]) -> Mapping[CodeKey, list[FunctionType]]:
    """All functions of some files that live in this process."""
    found: dict[CodeKey, list[FunctionType]] = {}
    for function in gc.get_objects():
        if type(function) is FunctionType and function.__code__.co_filename in files:
            found.setdefault(code_key(function.__code__), []).append(function)
    return found


def patch(changed: Mapping[CodeKey, CodeType], functions: Mapping[CodeKey, list[FunctionType]]) -> bool:
    """Give living functions their changed code. False where one of them cannot take it."""
    for key, code in changed.items():
        for function in functions.get(key, ()):
            if code.co_freevars != function.__code__.co_freevars:
                return False
            function.__code__ = code
    return True


class _MutantFinder(importlib.abc.MetaPathFinder, importlib.abc.Loader):
    """Loads the mutant in place of its module."""

    def __init__(self, mutant: Mutant) -> None:
        self.mutant = mutant
        self.module = mutant.file.removesuffix(".py").replace("/", ".")

    def find_spec(
        self, fullname: str, path: Sequence[str] | None, target: ModuleType | None = None
    ) -> importlib.machinery.ModuleSpec | None:
        if fullname != self.module:
            return None
        return importlib.util.spec_from_file_location(fullname, ROOT / self.mutant.file, loader=self)

    def exec_module(self, module: ModuleType) -> None:
        exec(mutated(self.mutant), module.__dict__)


def install(mutant: Mutant) -> None:
    """Have the mutant loaded in place of its module, which must not be loaded yet."""
    finder = _MutantFinder(mutant)
    assert finder.module not in sys.modules
    sys.meta_path.insert(0, finder)


def called(run: Callable[[], object], files: frozenset[str]) -> frozenset[CodeKey]:
    """The code of some files that runs during a call."""
    seen: set[CodeType] = set()

    def note(frame: FrameType, event: str, _: object) -> None:
        if event == "call":
            seen.add(frame.f_code)

    sys.setprofile(note)
    try:
        run()
    finally:
        sys.setprofile(None)
    return frozenset(code_key(code) for code in seen if code.co_filename in files)


Line = tuple[str, int]


def lines_run(run: Callable[[], object], files: frozenset[str]) -> frozenset[Line]:
    """The lines of some files that run during a call."""
    seen: set[Line] = set()

    def inside(frame: FrameType, event: str, _: object) -> object:
        if event == "line":
            seen.add((frame.f_code.co_filename, frame.f_lineno))
        return inside

    def outside(frame: FrameType, event: str, _: object) -> object:
        return inside if frame.f_code.co_filename in files else None

    sys.settrace(outside)  # type: ignore[arg-type]
    try:
        run()
    finally:
        sys.settrace(None)
    return frozenset(seen)
