"""The exact reader as a program: what stays rational is written as Python once and run for many sets of inputs.

A single check does not need it; studies that evaluate one graph for many overlays do. Terms that leave the rationals
(roots, transcendental functions, what is not stated) are left to `ExactReader`, which takes over what the program found.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Iterable, Sequence
from typing import Any

from rulecheck.graph.terms import Bank, Inputs, Term, cone
from rulecheck.operations.exact import exact_number
from rulecheck.operations.values import Monomial
from rulecheck.readers.exact import ExactReader

# Operations that lead from rationals to rationals or flags, as Python. A division by zero ends the run.
_INFIX = {"add": "+", "subtract": "-", "multiply": "*", "divide": "/", "at_most": "<=", "below": "<", "equal": "=="}
_JOINED = {"total": " + ", "both": " and ", "either": " or "}
_CALLED = {"minimum": "min", "maximum": "max", "abs": "abs"}
_MOST_POWER = 8


class Program:
    """The rational part of the cone of some terms.

    >>> from fractions import Fraction
    >>> from rulecheck.operations.comparison import at_most
    >>> from rulecheck.quantity.dimension import PURE
    >>> bank = Bank()
    >>> holds = bank.apply(at_most, [bank.input("x", "number", PURE), bank.number(3)], PURE)
    >>> program = Program(bank, {"x": Monomial(Fraction(2))}, [holds])
    >>> program.reader({"x": Monomial(Fraction(4))}).truth(holds)
    False
    """

    def __init__(self, bank: Bank, inputs: Inputs, roots: Iterable[Term]) -> None:
        self.bank = bank
        wanted = list(roots)
        terms = cone(wanted)
        self._paths: list[str] = []
        self._known: dict[str, tuple[object, Any]] = {}
        self._inside: set[int] = set()
        for term in terms:
            if self._is_rational(term, inputs):
                self._inside.add(term.index)
        needed = self._needed(terms, {term.index for term in wanted})
        self._indices, self._run = self._written(terms, needed)

    def _is_rational(self, term: Term, inputs: Inputs) -> bool:
        if term.kind == "constant":
            return isinstance(term.value, bool) or (isinstance(term.value, Monomial) and term.value.is_rational)
        if term.kind == "input":
            value = inputs.get(term.path)
            if not (isinstance(value, Monomial) and value.is_rational and term.sort == "number"):
                return False
            self._paths.append(term.path)
            return True
        known = term.kind == "branch" or (term.operation is not None and template(term) is not None)
        return known and all(argument.index in self._inside for argument in term.arguments)

    def _needed(self, terms: Sequence[Term], wanted: set[int]) -> list[int]:
        """What is read from outside: the roots, and the operands of what is not rational."""
        outside = {a.index for term in terms if term.index not in self._inside for a in term.arguments}
        return sorted((wanted | outside) & self._inside)

    def _written(
        self, terms: Sequence[Term], needed: Sequence[int]
    ) -> tuple[list[int], Callable[..., tuple[Any, ...]]]:
        """The function of the inputs; a term that is used once stands inside the one that uses it."""
        used = [argument.index for term in terms if term.index in self._inside for argument in term.arguments]
        counts = Counter(used)
        constants: dict[str, Any] = {}
        texts: dict[int, str] = {}
        lines: list[str] = []
        paths = {path: f"a{place}" for place, path in enumerate(dict.fromkeys(self._paths))}
        keep = set(needed)
        for term in terms:
            if term.index not in self._inside:
                continue
            text = self._text(term, texts, constants, paths)
            if term.kind in ("apply", "branch") and (counts[term.index] > 1 or term.index in keep or len(text) > 600):
                lines.append(f"    t{term.index} = {text}")
                text = f"t{term.index}"
            texts[term.index] = text
        self._paths = list(paths)
        result = ", ".join(texts[index] for index in needed)
        source = (
            f"def run({', '.join(paths.values())}):\n"
            + "\n".join(lines)
            + f"\n    return ({result}{',' if needed else ''})\n"
        )
        space: dict[str, Any] = constants
        # Written by this class from the operations alone: no text of a file stands in it.
        exec(compile(source, "<graph>", "exec"), space)
        return list(needed), space["run"]

    def _text(self, term: Term, texts: dict[int, str], constants: dict[str, Any], paths: dict[str, str]) -> str:
        if term.kind == "constant":
            name = f"c{term.index}"
            constants[name] = exact_number(term.value) if isinstance(term.value, Monomial) else term.value
            return name
        if term.kind == "input":
            return paths[term.path]
        operands = [texts[argument.index] for argument in term.arguments]
        if term.kind == "branch":
            return f"({operands[1]} if {operands[0]} else {operands[2]})"
        write = template(term)
        assert write is not None
        return write(operands)

    def reader(self, inputs: Inputs) -> ExactReader:
        """A reader for these inputs that already knows the rational part. Needs the inputs it was made with."""
        reader = ExactReader(self.bank, inputs)
        arguments = [self._rational(path, inputs.get(path)) for path in self._paths]
        if None in arguments:
            return reader
        try:
            values = self._run(*arguments)
        except ZeroDivisionError:
            # The reader says where, and whether it matters.
            return reader
        reader.take(zip(self._indices, values, strict=True))
        return reader

    def _rational(self, path: str, value: object) -> Any:
        """An input as a flint rational; most inputs are the same object from one overlay to the next."""
        known = self._known.get(path)
        if known is not None and known[0] is value:
            return known[1]
        made = exact_number(value) if isinstance(value, Monomial) and value.is_rational else None
        self._known[path] = (value, made)
        return made


def template(term: Term) -> Callable[[list[str]], str] | None:
    """How an operation is written, or None where it may leave the rationals."""
    operation = term.operation
    assert operation is not None
    name = operation.name
    if name in _INFIX:
        return lambda operands: f"({operands[0]} {_INFIX[name]} {operands[1]})"
    if name in _JOINED:
        return lambda operands: f"({_JOINED[name].join(operands)})"
    if name in _CALLED:
        return lambda operands: (
            f"{_CALLED[name]}({', '.join(operands)})" if len(operands) > 1 or name == "abs" else operands[0]
        )
    if name == "negate":
        return lambda operands: f"(-{operands[0]})"
    if name == "negation":
        return lambda operands: f"(not {operands[0]})"
    exponent = _whole_power(name)
    return (lambda operands: f"{operands[0]}**{exponent}") if exponent is not None else None


def _whole_power(name: str) -> int | None:
    if name.startswith("power[") and name[6:-1].isdigit() and int(name[6:-1]) <= _MOST_POWER:
        return int(name[6:-1])
    return None
