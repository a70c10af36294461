from __future__ import annotations

from fractions import Fraction

from hypothesis import assume, example, given
from hypothesis import strategies as st

from rulecheck.diagnostics import CODES, Faults, Span
from rulecheck.quantity.dimension import LENGTH, Dimension
from rulecheck.quantity.dimension_names import base_form
from rulecheck.quantity.numbers import NumberFault, read_number, show_exact, show_number
from rulecheck.quantity.quantity import Pressure, Quantity, Tolerance, Uncertainty
from rulecheck.quantity.reading_values import read_day, read_outline, read_period, read_point, read_quantity
from rulecheck.quantity.unit_table import PREFIXES, UNITS
from rulecheck.quantity.units import Unit, UnitFault, find_unit, symbols
from rulecheck.reading.nodes import Located

decimals = st.builds(
    lambda digits, power: Fraction(digits) * Fraction(10) ** power,
    st.integers(-(10**30), 10**30),
    st.integers(-40, 40),
)
single_units = st.sampled_from(sorted(symbols())).map(find_unit)


factor = st.builds(
    lambda name, power: name if power == 1 else f"{name}^{power}",
    st.sampled_from([name for name, unit in symbols().items() if not unit.offset and name != "1"]),
    st.sampled_from([1, 1, 2, 3, -1, -2]),
)


def numerators() -> st.SearchStrategy[str]:
    """A product of factors, as text."""
    return st.lists(factor, min_size=1, max_size=3).map("*".join)


@st.composite
def products(draw: st.DrawFn) -> str:
    """A unit of several factors, as text."""
    above = draw(st.lists(factor, min_size=0, max_size=3))
    below = draw(st.lists(factor, min_size=0 if above else 1, max_size=3))
    text = "*".join(above) or "1"
    if not below:
        return text
    return f"{text}/({'*'.join(below)})" if len(below) > 1 else f"{text}/{below[0]}"


def located(text: str) -> Located:
    return Located(text, Span("a.yaml", 0, len(text), 1, 1))


@given(decimals)
@example(Fraction(10) ** 999)
@example(Fraction(1, 10**999))
def test_an_exact_print_reads_back(value: Fraction) -> None:
    assert read_number(show_exact(value)) == value


@given(st.fractions(), st.integers(1, 30))
def test_a_rounded_print_is_within_half_a_digit_and_keeps_its_sign(value: Fraction, digits: int) -> None:
    shown = read_number(show_number(value, digits))
    assert abs(shown - value) <= abs(value) * Fraction(1, 2 * 10 ** (digits - 1))
    assert (shown > 0, shown < 0) == (value > 0, value < 0)


@given(st.text(alphabet="0123456789.eE+-_, 'xinfa/\u2212\u00a0", max_size=12))
def test_any_text_is_a_number_or_a_fault_with_advice(text: str) -> None:
    fault: NumberFault | None = None
    try:
        assert read_number(text) == Fraction(text)
    except NumberFault as caught:
        fault = caught
    assert fault is None or (fault.advice and fault.code in CODES)


@given(decimals, single_units)
def test_a_unit_and_back_is_exact(value: Fraction, unit: Unit) -> None:
    assert unit.of_si(*unit.in_si(value)) == (value, 0)
    assert unit.width_of_si(*unit.width_in_si(value)) == (value, 0)


@given(decimals, decimals, single_units)
def test_differences_do_not_know_the_zero_of_the_unit(first: Fraction, second: Fraction, unit: Unit) -> None:
    difference = unit.in_si(first)[0] - unit.in_si(second)[0]
    assert difference == unit.width_in_si(first - second)[0]


@given(products())
def test_the_symbol_of_a_unit_finds_the_unit(text: str) -> None:
    unit = find_unit(text)
    assert unit.symbol == text
    assert find_unit(unit.symbol) == unit


@given(numerators(), numerators())
def test_a_product_of_units_is_the_product_of_factors(left: str, right: str) -> None:
    one, other, both = find_unit(left), find_unit(right), find_unit(f"{left}*{right}")
    assert both.dimension == one.dimension * other.dimension
    assert (both.factor, both.power) == (one.factor * other.factor, one.power + other.power)


@given(st.sampled_from([row for row in UNITS if row.prefixes]), st.data())
def test_prefixes_multiply_where_a_unit_takes_them(row: object, data: st.DataObject) -> None:
    assert isinstance(row, type(UNITS[0]))
    prefix = data.draw(st.sampled_from(row.prefixes))
    assert find_unit(prefix + row.symbol).factor == PREFIXES[prefix] * row.factor


@given(st.sampled_from(UNITS), st.sampled_from(list(PREFIXES)))
def test_no_other_unit_takes_a_prefix(row: object, prefix: str) -> None:
    assert isinstance(row, type(UNITS[0]))
    symbol = prefix + row.symbol
    assume(prefix not in row.prefixes and symbol not in symbols() and row.symbol != "1")
    try:
        found = find_unit(symbol)
    except UnitFault:
        return
    assert found.symbol != symbol  # an alias: `ml`


@given(st.dictionaries(st.sampled_from(["m", "kg", "s", "A", "K", "mol", "cd", "day", "dB"]), st.integers(-9, 9)))
def test_the_base_form_of_a_dimension_is_a_unit_of_it(powers: dict[str, int]) -> None:
    dimension = Dimension.of(**powers)
    unit = find_unit(base_form(dimension))
    assert (unit.dimension, unit.factor, unit.power) == (dimension, 1, 0)


positive = decimals.map(abs)
spreads = st.one_of(
    st.none(),
    st.builds(lambda width: Uncertainty(width), positive),
    st.builds(lambda width, k: Uncertainty(width, k, "normal"), positive, positive.filter(bool)),
    st.tuples(decimals, decimals).map(lambda pair: Tolerance(max(pair), min(pair))),
)


@given(
    decimals, st.one_of(single_units, products().map(find_unit)), spreads, st.sampled_from(["", "gauge", "absolute"])
)
def test_a_quantity_reads_back_from_its_print(
    value: Fraction, unit: Unit, spread: Uncertainty | Tolerance | None, pressure: Pressure
) -> None:
    if unit.dimension != find_unit("Pa").dimension:
        pressure = ""
    quantity = Quantity(value, unit, spread, pressure=pressure)
    faults = Faults()
    assert read_quantity(located(str(quantity)), unit.dimension, faults=faults) == quantity, faults.found


@given(st.text(alphabet="0123456789 .eE+-/*^()%±=kmNgshabrdC,\u00b5\u00b0\u00a0\u2212", max_size=30), st.booleans())
@example("+0/-2", False)
@example("1 ± ±", False)
@example("1/", True)
def test_any_text_gives_a_value_or_faults_within_the_text(text: str, missing_blank: bool) -> None:
    faults = Faults()
    where = located(text)
    found = read_quantity(where, LENGTH, missing_blank=missing_blank, faults=faults)
    assert (found is None) == bool(faults)
    for read in (
        lambda: read_point(where, {}, faults),
        lambda: read_outline(where, {}, faults),
        lambda: read_period(where, faults),
        lambda: read_day(where, faults),
    ):
        before = len(faults.found)
        assert read() is not None or len(faults.found) >= max(before, 1)
    for item in faults.found:
        assert item.span is not None
        assert 0 <= item.span.start <= item.span.end <= max(len(text), 1)
        assert item.advice or item.expected
