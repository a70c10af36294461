"""Values and slopes of terms written as Python, for `sensitivities`."""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Callable, Iterable, Mapping, Sequence, Set
from dataclasses import dataclass
from typing import Any

import numpy

from rulecheck.graph.terms import Term
from rulecheck.operations.operation import Operation
from rulecheck.operations.values import Monomial
from rulecheck.readers.program import template

# Two operands closer than this share of the larger may tie.
_CLOSE = "1e-9"
_COMPARISONS = ("at_most", "below", "equal")


def matters(term: Term, values: Mapping[str, Any], moving: Set[int]) -> bool:
    """Whether it matters which operand of a term binds, where they tie: not where it is one number, or neither moves.

    `values` are those of `run`.
    """
    if term.operation is None or term.operation.binds is None:
        return True
    cores = {_core(part, values) for part in term.arguments if part.sort == "number"}
    return len(cores) > 1 and not all(is_still(core, values, moving) for core in cores)


def _core(term: Term, values: Mapping[str, Any]) -> Term:
    """What a number is when only what binds is looked at."""
    while term.kind == "branch" or (term.operation is not None and term.operation.binds is not None):
        binding = _binding(term, values)
        if len(binding) != 1:
            return term
        term = binding[0]
    return term


def is_still(term: Term, values: Mapping[str, Any], moving: Set[int]) -> bool:
    """True where a number certainly does not move, since what binds in it stands on a bound."""
    waiting = [term]
    while waiting:
        found = waiting.pop()
        if found.index not in moving:
            continue
        if found.kind == "input":
            return False
        waiting.extend(_binding(found, values))
    return True


def _binding(term: Term, values: Mapping[str, Any]) -> Sequence[Term]:
    """The operands that move a number: of two that may bind the one that does, or both where they are close."""
    if term.kind == "branch":
        return (term.arguments[1 if values[f"t{term.arguments[0].index}"] else 2],)
    if term.operation is None or term.operation.binds is None or len(term.arguments) != 2:
        return term.arguments
    first, second = (values[f"t{part.index}"] for part in term.arguments)
    if abs(first - second) <= float(_CLOSE) * (abs(first) + abs(second)):
        return term.arguments
    return (term.arguments[term.operation.binds((first, second))],)


@dataclass(frozen=True, slots=True)
class Entry:
    """The slope in a slot is that of the joint in a row by the input or joint below."""

    row: int
    slot: int
    below: int


class Writer:
    """The program of some terms: `run` takes the inputs and gives the slots; `levels` say what they are slopes of.

    `places` has the row of each input that is asked for and of each joint, by the index of its term.
    """

    def __init__(
        self, terms: Sequence[Term], roots: Sequence[Term], given: Sequence[str], paths: Sequence[str]
    ) -> None:
        self._names = {path: f"a{place}" for place, path in enumerate(given)}
        self._space: dict[str, Any] = {}
        self._lines: list[str] = []
        self._slots: list[str] = ["0.0"]
        columns = {path: place for place, path in enumerate(paths)}
        self.places = {t.index: columns[t.path] for t in terms if t.kind == "input" and t.path in columns}
        self.moving = self._resting(terms)
        self.joints = self._joints(terms, roots)
        for place, term in enumerate(self.joints):
            self.places[term.index] = len(paths) + place
        for term in terms:
            self._lines.extend(self._value(term))
        self.levels = self._written_levels()
        self.run = self._compiled()

    def _resting(self, terms: Iterable[Term]) -> set[int]:
        found = set(self.places)
        for term in terms:
            if term.sort == "number" and any(part.index in found for part in term.arguments):
                found.add(term.index)
        return found

    def _joints(self, terms: Sequence[Term], roots: Sequence[Term]) -> list[Term]:
        """What is used more than once, or asked for; deeper ones later."""
        uses = Counter(part.index for term in terms if term.index in self.moving for part in term.arguments)
        wanted = {root.index for root in roots}
        self._depths: dict[int, int] = {}
        below: dict[int, int] = {}
        joints = []
        for term in terms:
            depth = max((below.get(part.index, 0) for part in term.arguments), default=0)
            is_joint = uses[term.index] > 1 and term.index in self.moving and term.kind != "input"
            if is_joint or (term.index in wanted and term.index not in self.places):
                depth += 1
                self._depths[term.index] = depth
                joints.append(term)
            below[term.index] = depth
        return sorted(joints, key=lambda term: (self._depths[term.index], term.index))

    # --- values ------------------------------------------------------------------------------------------------------

    def _value(self, term: Term) -> Iterable[str]:
        """The lines that compute one term, with a look at whether its operands tie."""
        name = f"t{term.index}"
        operands = [f"t{part.index}" for part in term.arguments]
        if term.kind == "constant":
            self._space[name] = _as_float(term.value)
        elif term.kind == "input":
            yield f"{name} = {self._names[term.path]}"
        elif term.kind == "branch":
            yield f"{name} = {operands[1]} if {operands[0]} else {operands[2]}"
        elif term.operation is None:
            raise ValueError(f"a term of the kind '{term.kind}' has no program")
        else:
            yield from self._near(term, operands)
            write = template(term)
            if write is None:
                self._space[f"f{term.index}"] = _valued(term.operation)
            joined = ", ".join(operands)
            yield f"{name} = {write(operands) if write else f'f{term.index}(({joined},))'}"

    def _near(self, term: Term, operands: Sequence[str]) -> Iterable[str]:
        assert term.operation is not None
        name = term.operation.name
        if name == "abs" and term.index in self.moving:
            yield f"if {operands[0]} == 0.0: near.append({term.index})"
        elif name in _COMPARISONS or (term.operation.binds is not None and len(operands) == 2):
            first, second = operands
            yield f"if abs({first} - {second}) <= {_CLOSE} * (abs({first}) + abs({second})): near.append({term.index})"
        elif term.operation.binds is not None and term.index in self.moving:
            self._space[f"n{term.index}"] = _ties(term.operation)
            yield f"if n{term.index}(({', '.join(operands)},)): near.append({term.index})"

    # --- slopes ------------------------------------------------------------------------------------------------------

    def _written_levels(self) -> list[list[Entry]]:
        levels: dict[int, list[Entry]] = {}
        for joint in self.joints:
            found: dict[int, list[str]] = {}
            if joint.index in self.moving:
                self._tree(joint, "1.0", found)
            row, level = self.places[joint.index], levels.setdefault(self._depths[joint.index], [])
            for below, texts in found.items():
                level.append(Entry(row, len(self._slots), below))
                self._slots.append(" + ".join(texts))
            if not found:
                level.append(Entry(row, 0, 0))
        return [levels[depth] for depth in sorted(levels)]

    def _tree(self, joint: Term, slope: str, found: dict[int, list[str]]) -> None:
        waiting = [(joint, slope)]
        while waiting:
            term, slope = waiting.pop()
            for part, partial in zip(term.arguments, self._partials(term, slope), strict=True):
                if part.index not in self.moving:
                    continue
                if part.index in self.places:
                    found.setdefault(self.places[part.index], []).append(partial)
                    continue
                if len(partial) > 12:
                    self._lines.append(f"g{part.index} = {partial}")
                    partial = f"g{part.index}"
                waiting.append((part, partial))

    def _partials(self, term: Term, slope: str) -> list[str]:
        operands = [f"t{part.index}" for part in term.arguments]
        if term.kind == "branch":
            return ["0.0", f"({slope} if {operands[0]} else 0.0)", f"(0.0 if {operands[0]} else {slope})"]
        assert term.operation is not None
        known = _written_partials(term.operation.name, f"t{term.index}", operands, slope)
        if known is not None:
            return known
        if term.operation.partials is None:
            return ["0.0"] * len(operands)
        self._space[f"d{term.index}"] = _sloped(term.operation)
        self._lines.append(f"p{term.index} = d{term.index}(({', '.join(operands)},))")
        return [f"{slope} * p{term.index}[{place}]" for place in range(len(operands))]

    def _compiled(self) -> Callable[..., tuple[tuple[float, ...], dict[str, Any] | None]]:
        """Takes a list for what may tie, and the inputs; gives the slots, and all values where something may."""
        body = "".join(f"    {line}\n" for line in self._lines)
        head = f"def run(near, {', '.join(self._names.values())}):\n"
        # Constants are found faster as locals than as globals.
        constants = list(self._space)
        taken = "".join(f"    {name} = _space[{name!r}]\n" for name in constants if name.startswith("t"))
        text = f"{head}{taken}{body}    return ({', '.join(self._slots)},), locals() if near else None\n"
        self._space["_space"] = dict(self._space)
        # Written by this class from the operations alone: no text of a file stands in it.
        exec(compile(text, "<slopes>", "exec"), self._space)
        run: Callable[..., tuple[tuple[float, ...], dict[str, Any] | None]] = self._space["run"]
        return run


def _written_partials(name: str, own: str, operands: Sequence[str], slope: str) -> list[str] | None:
    """The slope times each partial, for the usual operations."""
    first, second = operands[0], operands[-1]
    if name in ("add", "subtract"):
        return [slope, slope if name == "add" else _negative(slope)]
    if name == "multiply":
        return [_times(slope, second), _times(slope, first)]
    if name == "divide":
        return [f"{slope} / {second}", f"-{_times(slope, own)} / {second}"]
    if name == "negate":
        return [_negative(slope)]
    if name == "total":
        return [slope] * len(operands)
    if name in ("minimum", "maximum") and len(operands) == 2:
        sign = "<" if name == "minimum" else ">"
        return [f"({slope} if {first} {sign} {second} else 0.0)", f"(0.0 if {first} {sign} {second} else {slope})"]
    if name == "power[2]":
        return [_times(slope, f"2.0 * {first}")]
    return None


def _times(slope: str, factor: str) -> str:
    return factor if slope == "1.0" else f"{slope} * {factor}"


def _negative(slope: str) -> str:
    return f"(-{slope})"


def _as_float(value: Any) -> Any:
    return float(value.rational) * math.pi**value.power if isinstance(value, Monomial) else value


def _valued(operation: Operation) -> Callable[[Sequence[Any]], Any]:
    is_number = operation.gives == "number"

    def value(operands: Sequence[Any]) -> Any:
        found = operation.array(numpy, operands)
        return float(found) if is_number else bool(found)

    return value


def _sloped(operation: Operation) -> Callable[[Sequence[Any]], Sequence[float]]:
    assert operation.partials is not None
    partials = operation.partials
    return lambda operands: partials(math, operands)


def _ties(operation: Operation) -> Callable[[Sequence[Any]], bool]:
    """Whether two of the numbers that may bind are close."""

    def look(operands: Sequence[Any]) -> bool:
        assert operation.binds is not None
        paired = operation.takes[0] == "flag"
        numbers = [b for a, b in zip(operands[::2], operands[1::2], strict=True) if a] if paired else list(operands)
        if not numbers:
            return False
        best = operands[operation.binds(operands)]
        close = [value for value in numbers if abs(value - best) <= float(_CLOSE) * (abs(value) + abs(best))]
        return len(close) > 1

    return look
