"""Equations for the tests of solves: a bank with a variable, and solves in a range."""

from __future__ import annotations

from fractions import Fraction

from rulecheck.graph.terms import Bank, Term
from rulecheck.operations.operation import Operation
from rulecheck.operations.values import Monomial
from rulecheck.quantity.dimension import PURE
from rulecheck.readers.exact import ExactReader


class Equations:
    """Terms with the variable `x`, and what they are solved with."""

    def __init__(self) -> None:
        self.bank = Bank()
        self.x = self.bank.variable("x", PURE)

    def of(self, operation: Operation, *terms: Term) -> Term:
        return self.bank.apply(operation, terms, PURE)

    def number(self, value: Fraction | int | str) -> Term:
        return self.bank.number(Fraction(value))

    def input(self, path: str) -> Term:
        return self.bank.input(path, "number", PURE)

    def solve(self, body: Term, low: Fraction | int | str = 0, high: Fraction | int | str = 10) -> Term:
        ends = self.number(low), self.number(high)
        return self.bank.solve(body, self.x, ends, said=f"x from {low} to {high}")

    def reader(self, **values: Fraction | int | str) -> ExactReader:
        return ExactReader(self.bank, {path: Monomial(Fraction(value)) for path, value in values.items()})
