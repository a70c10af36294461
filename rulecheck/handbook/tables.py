"""The tables of the handbook, made from what the code knows."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from fractions import Fraction

from rulecheck.binding import rules, states
from rulecheck.binding.inputs import VALUE_KEYS
from rulecheck.diagnostics import CODES
from rulecheck.formula import lexer, token_reader
from rulecheck.handbook.functions import FUNCTIONS
from rulecheck.model.core_table import CORE
from rulecheck.model.vocabulary import Entry
from rulecheck.operations.catalogue import CATALOGUE
from rulecheck.outcome.results import VERDICTS
from rulecheck.physics.modules import BUILT_IN, built_in
from rulecheck.quantity import numbers, unit_table, units
from rulecheck.readers import exact
from rulecheck.reading import bounds
