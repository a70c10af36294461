"""Kleene's strong logic of three values, and reconciliation of declared values."""

from __future__ import annotations

import itertools

import pytest

from rulecheck.operations.exact import Ball, Rational
from rulecheck.operations.logic import CONTRADICTION, both, either, negation, reconcile
from rulecheck.operations.operation import UNDECIDED
from rulecheck.operations.values import Reason, Unknown

FIRST = Unknown((Reason("missing", "options.bodywork"),))
SECOND = Unknown((Reason("missing", "tyres.rear.width"),))

# S. C. Kleene, Introduction to Metamathematics (1952), section 64, strong tables; from memory. u is unknown.
AND = {"tt": "t", "tf": "f", "tu": "u", "ff": "f", "fu": "f", "uu": "u"}
OR = {"tt": "t", "tf": "t", "tu": "t", "ff": "f", "fu": "u", "uu": "u"}
VALUES = {"t": True, "f": False, "u": FIRST}


@pytest.mark.parametrize("row", sorted(AND))
@pytest.mark.parametrize("turn", [1, -1])
def test_tables(row, turn):
    operands = [VALUES[letter] for letter in row[::turn]]
    assert both.exact(operands) == VALUES[AND[row]]
    assert either.exact(operands) == VALUES[OR[row]]
    assert both.ball(operands) == VALUES[AND[row]]


def test_reasons_are_merged_each_once():
    assert both.exact([FIRST, True, SECOND, FIRST]) == Unknown((*FIRST.reasons, *SECOND.reasons))
    assert either.exact([FIRST, False, SECOND]).reasons == (*FIRST.reasons, *SECOND.reasons)


def test_more_precision_is_tried_before_unknown_is_given():
    assert both.exact([UNDECIDED, FIRST]) is UNDECIDED
    assert both.exact([UNDECIDED, False]) is False
    assert either.exact([UNDECIDED, True, FIRST]) is True


def test_three_operands_are_folded():
    for flags in itertools.product(VALUES.values(), repeat=3):
        assert both.exact(flags) == both.exact([both.exact(flags[:2]), flags[2]])
        assert either.exact(flags) == either.exact([either.exact(flags[:2]), flags[2]])


def test_negation():
    assert negation.exact([True]) is False
    assert negation.exact([False]) is True


def test_declared_values_hold_until_contradicted():
    declared = Rational(1892, 1000)
    assert reconcile.exact([declared, True]) == declared
    assert reconcile.exact([declared, FIRST]) == declared
    assert reconcile.exact([declared, False]) == CONTRADICTION
    assert reconcile.exact([FIRST, False]) == FIRST
    assert reconcile.exact([declared, UNDECIDED]) is UNDECIDED
    assert isinstance(reconcile.ball([declared, True]), Ball)
