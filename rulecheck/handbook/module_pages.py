"""A page for each physics module, made wholly from the module's file: figures, formulas, inputs, sources, traps."""

from __future__ import annotations

import re
import textwrap
from collections.abc import Iterable, Iterator, Mapping

from rulecheck.diagnostics import Span
from rulecheck.formula.parser import parse_formula
from rulecheck.formula.syntax import Aggregate, Call, Name, Syntax
from rulecheck.formula.walk import walk
from rulecheck.handbook.markdown import table
from rulecheck.model.core_table import CORE
from rulecheck.model.ruleset import Formula, PhysicsModule
from rulecheck.model.vocabulary import Vocabulary
from rulecheck.physics.modules import BUILT_IN, built_in
from rulecheck.physics.solvers import OWN, solver_module
from rulecheck.reading.nodes import Located

PREFIX = "physics-"
MODULES: tuple[str, ...] = tuple(sorted((*BUILT_IN, *OWN)))
"""Every module that comes with the program: of formulas, and of a solver."""
_WIDTH = 110
_LOOP = re.compile(r"(\w+) in (\S+)")


def module_names() -> tuple[str, ...]:
    """The pages of the modules.

    >>> "physics-mass" in module_names()
    True
    """
    return tuple(f"{PREFIX}{name}" for name in MODULES)


def module_of(name: str) -> PhysicsModule:
    """A module that comes with the program. Raises `KeyError` where there is none of this name."""
    module = built_in(name) if name in BUILT_IN else solver_module(name) if name in OWN else None
    if module is None:
        raise KeyError(name)
    return module


def module_page(name: str) -> str:
    """The page of a built-in module. Raises `KeyError` where there is no such module.

    >>> module_page("mass").splitlines()[0]
    '# Physics: mass'
    """
    module = module_of(name)
    uses = _Uses(module)
    parts = [f"# Physics: {name}", _wrapped(f"{module.meaning}.")]
    if module.solver is not None:
        parts.append(_wrapped(f"A solver finds its figures, value ± bound: {module.solver.method}."))
    if module.caution:
        parts.append(_wrapped(f"Caution: {module.caution}"))
    if module.traps:
        parts.append("## Traps\n\n" + "\n".join(_wrapped(text, "- ") for text in module.traps))
    parts.append("## Figures")
    parts += [_figure(module, figure) for figure in module.figures.values()]
    parts.append(f"## Inputs\n\n{_inputs(uses)}")
    if uses.modules:
        pages = ", ".join(f"`{PREFIX}{other}`" for other in sorted(uses.modules))
        parts.append(_wrapped(f"It rests on figures of other modules too: {pages}."))
    parts.append(
        "## Sources\n\n" + "\n".join(_wrapped(f"`{key}`: {text}", "- ") for key, text in module.sources.items())
    )
    told = f"`rulecheck workings DESIGN {name}` shows every figure of a car step by step."
    return "\n\n".join([*parts, told]) + "\n"


def _figure(module: PhysicsModule, figure: Formula) -> str:
    """Name, unit, meaning, formula, source, range."""
    argument = figure.loop.text if figure.loop else figure.of.text if figure.of else ""
    unit = figure.unit.text if figure.unit else ""
    head = f"### `{module.name}.{figure.name}`" + (f" in `{unit}`" if unit not in ("", "1") else "")
    meaning = f"{figure.meaning}." + (f" For `{argument}`." if argument else "")
    valid = f" Valid for `{figure.valid.text}`." if figure.valid is not None else ""
    formula = (
        "The solver finds it."
        if figure.by_solver
        else _wrapped(f"{figure.formula.text}{' = 0' if figure.solve else ''}", "    ")
    )
    if figure.solve is not None:
        low, high = figure.between
        formula = f"The least `{figure.solve.text}` from `{low.text}` to `{high.text}` with\n\n{formula}"
    return "\n\n".join([head, _wrapped(meaning), formula, _wrapped(f"Source: `{figure.source}`.{valid}")])


def _wrapped(text: str, lead: str = "") -> str:
    """Text on lines of a readable width; a formula goes on at a blank, as a file may write it too."""
    after = lead if not lead.strip() else " " * len(lead)
    return textwrap.fill(
        text, _WIDTH, initial_indent=lead, subsequent_indent=after, break_long_words=False, break_on_hyphens=False
    )


def _inputs(uses: _Uses) -> str:
    entries = [(path, VOCABULARY.entry(path)) for path in sorted(uses.paths)]
    rows = [
        [f"`{path}`", f"`{entry.unit}`" if entry.unit not in ("", "1") else "", entry.meaning]
        for path, entry in entries
        if entry is not None
    ]
    return table(["path", "unit", "meaning"], rows) if rows else "None."


VOCABULARY = Vocabulary(CORE)


class _Uses:
    """What the formulas of a module name: inputs by path, and other modules."""

    def __init__(self, module: PhysicsModule) -> None:
        self.module = module
        self.paths: set[str] = set()
        self.modules: set[str] = set()
        for figure in module.figures.values():
            loops = dict(_LOOP.findall(figure.loop.text)) if figure.loop else {}
            own = () if figure.by_solver else (figure.formula,)
            for formula in filter(None, (*own, figure.valid, *figure.between)):
                self._note(parse_formula(formula), loops)

        for item in module.solver.inputs if module.solver is not None else ():
            where = Located(item.formula, Span(module.file, 0, len(item.formula), 1, 1))
            self._note(parse_formula(where), {})

    def _note(self, syntax: Syntax, loops: Mapping[str, str]) -> None:
        inner = dict(loops)
        inner.update(_loops(syntax))
        for node in walk(syntax):
            if isinstance(node, Name):
                self._name(node.path, inner)
            elif isinstance(node, Call) and "." in node.function:
                self._name(tuple(node.function.split(".")), inner)  # a curve or map of the design

    def _name(self, path: tuple[str, ...], loops: Mapping[str, str]) -> None:
        first, rest = path[0], path[1:]
        if first in loops:
            self._input((*loops[first].split("."), "*", *rest))
        elif len(path) == 2 and self._is_of_another(first, rest[0]):
            self.modules.add(first)
            return
        self._input(path)

    def _is_of_another(self, module: str, figure: str) -> bool:
        return module in MODULES and module != self.module.name and figure in module_of(module).figures

    def _input(self, path: tuple[str, ...]) -> None:
        """The path, or what holds it where it is a coordinate."""
        for length in range(len(path), 1, -1):
            shorter = ".".join(path[:length])
            entry = VOCABULARY.entry(shorter)
            if entry is not None and entry.kind != "collection":
                self.paths.add(entry.path)
                return


def _loops(syntax: Syntax) -> Iterator[tuple[str, str]]:
    """Variables of aggregates with the collection that they run over."""
    for node in walk(syntax):
        if isinstance(node, Aggregate) and isinstance(node.collection, Name):
            yield from ((variable, ".".join(node.collection.path)) for variable in node.variables)


def modules_table() -> str:
    """Every module with its page."""
    return table(["page", "what it computes"], _module_rows())


def _module_rows() -> Iterable[list[str]]:
    for name in MODULES:
        module = module_of(name)
        yield [f"`{PREFIX}{name}`", module.meaning]
