from __future__ import annotations

from rulecheck.quantity import unit_table
from rulecheck.quantity.dimension_names import name_of, preferred
from rulecheck.quantity.units import find_unit, symbols

RESERVED = {"and", "or", "not", "if", "else", "for", "where", "within", "yes", "no"}


def test_no_symbol_has_two_meanings() -> None:
    spelled = [row.symbol for row in unit_table.UNITS]
    spelled += [prefix + row.symbol for row in unit_table.UNITS for prefix in row.prefixes]
    spelled += [f"{prefix}g" for prefix in unit_table.GRAM_PREFIXES]
    assert sorted(spelled) == sorted(symbols())
    assert not set(unit_table.ALIASES) & set(symbols())


def test_what_is_refused_is_not_in_the_table() -> None:
    known = set(symbols()) | set(unit_table.ALIASES)
    assert not known & (set(unit_table.SPELLINGS) | set(unit_table.ADVICE))


def test_what_advice_names_can_be_written() -> None:
    for meant in {*unit_table.SPELLINGS.values(), *unit_table.ALIASES.values(), *unit_table.EXAMPLES.values()}:
        assert find_unit(meant).symbol == meant


def test_no_reserved_word_is_a_unit() -> None:
    assert not RESERVED & (set(symbols()) | set(unit_table.ALIASES))


def test_every_row_says_its_name_and_its_source() -> None:
    for row in unit_table.UNITS:
        assert row.name, row.symbol
        assert row.source, row.symbol
        assert row.factor > 0, row.symbol


def test_every_dimension_is_spoken_of_in_a_coherent_unit_and_once() -> None:
    dimensions = [find_unit(symbol).dimension for symbol, _ in unit_table.NAMES]
    assert len(set(dimensions)) == len(dimensions)
    for (symbol, words), dimension in zip(unit_table.NAMES, dimensions, strict=True):
        unit = preferred(dimension)
        assert (unit.symbol, unit.factor, unit.power, unit.offset) == (symbol, 1, 0, 0)
        assert name_of(dimension) == f"{words} [{symbol}]"
