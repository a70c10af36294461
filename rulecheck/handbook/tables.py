"""The tables of the handbook, made from what the code knows."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction

from rulecheck.binding import aggregates, arithmetic, curves, envelopes, placing, points, rules, scope, states
from rulecheck.binding.inputs import VALUE_KEYS
from rulecheck.diagnostics import CODES
from rulecheck.formula import lexer, token_reader
from rulecheck.geometry import cells, hulls, outlines
from rulecheck.handbook.functions import FUNCTIONS
from rulecheck.handbook.markdown import table
from rulecheck.handbook.module_pages import modules_table
from rulecheck.model import correlations, design_reader, house_rules, ruleset_reader, solver, track_reader, zone_reader
from rulecheck.model.core_table import CORE
from rulecheck.model.value_ranges import MOST_CURVES, MOST_VALUES
from rulecheck.model.vocabulary import Entry
from rulecheck.quantity import numbers, unit_table, value_parts
from rulecheck.readers import exact, least, throughout
from rulecheck.reading import bounds, logs
from rulecheck.reading.ledger import COLUMNS, REQUIRED
from rulecheck.studies import varying


def vocabulary() -> str:
    """Every input of the core vocabulary."""
    return table(
        ["path", "what it holds", "meaning"],
        ([f"`{entry.path}`", holds(entry), meaning(entry)] for entry in CORE),
    )


def holds(entry: Entry) -> str:
    """What stands under an input, in a few words.

    >>> holds(Entry("tyres.*.width", "number", "Tread width", unit="mm"))
    'number in `mm`'
    """
    if entry.kind == "number":
        return "pure number" if entry.unit == "1" else f"number in `{entry.unit}`"
    if entry.kind in ("curve", "map"):
        return f"{entry.kind} in `{entry.unit}`"
    if entry.kind == "choice":
        return ", ".join(f"`{choice}`" for choice in entry.choices)
    if entry.kind == "collection":
        return "collection" + (f" of {', '.join(f'`{item}`' for item in entry.items)}" if entry.items else "")
    return {"flag": "`yes` or `no`", "datum": "name of a datum"}.get(entry.kind, entry.kind)


def meaning(entry: Entry) -> str:
    """The meaning of an input, with the standard's term and the default."""
    parts = [entry.meaning]
    if entry.term:
        parts.append(entry.term)
    if entry.sign:
        parts.append(entry.sign)
    if entry.default:
        parts.append(f"`{entry.default}` where not stated")
    return "; ".join(parts)


def unit_rows() -> str:
    """Every unit with its exact factor and source."""
    return table(
        ["unit", "name", "in SI units", "prefixes", "source"],
        ([f"`{row.symbol}`", row.name, in_si(row), prefixes(row), row.source] for row in unit_table.UNITS),
    )


def in_si(row: unit_table.Row) -> str:
    """The exact size of a unit in SI base units.

    >>> [in_si(row) for row in unit_table.UNITS if row.symbol in ("in", "deg", "degC")]
    ['pi/180', '0.0254 `m`', '`K` + 273.15']
    """
    factor = _factor(row.factor, row.power)
    base = "" if row.dimension.is_pure else f"`{row.dimension}`"
    shown = " ".join(part for part in (factor if factor != "1" or not base else "", base) if part)
    return f"{shown} + {numbers.show_exact(row.offset)}" if row.offset else shown


def _factor(factor: Fraction, power: int) -> str:
    if not power:
        return numbers.show_exact(factor)
    above = "pi" if factor.numerator == 1 else f"{factor.numerator} pi"
    return above if factor.denominator == 1 else f"{above}/{factor.denominator}"


def prefixes(row: unit_table.Row) -> str:
    """The prefixes that a unit takes."""
    return "all" if row.prefixes == unit_table.SI else " ".join(row.prefixes)


def alias_rows() -> str:
    """Second spellings that are read."""
    return table(["read", "as"], ([f"`{read}`", f"`{meant}`"] for read, meant in unit_table.ALIASES.items()))


def prefix_rows() -> str:
    """The prefixes with their powers of ten."""
    rows = sorted(unit_table.PREFIXES.items(), key=lambda item: item[1])
    return table(["prefix", "factor"], ([f"`{prefix}`", numbers.show_exact(factor)] for prefix, factor in rows))


def code_rows() -> str:
    """Every diagnostic code."""
    return table(["code", "meaning"], ([f"`{code}`", meaning] for code, meaning in CODES.items()))


def bound_rows() -> str:
    """What is bounded. All are counts, so that an answer does not depend on the machine."""
    rows = (
        ("bytes of a file", bounds.MAXIMUM_BYTES),
        ("keys and values of a YAML file, repeats by alias counted", bounds.MAXIMUM_NODES),
        ("mappings and lists inside each other", bounds.MAXIMUM_DEPTH),
        ("aliases of a YAML file", bounds.MAXIMUM_ALIASES),
        ("characters of a text in a YAML file or of a ledger's cell", bounds.MAXIMUM_SCALAR),
        ("rows of a curve or map", curves.MOST_POINTS),
        ("rows of a ledger or of a file of columns", bounds.MAXIMUM_ROWS),
        ("rows of a log of channels", logs.MAXIMUM_SAMPLES),
        ("characters of a sample in a log", logs.MAXIMUM_DIGITS),
        ("cells of a ledger's row", bounds.MAXIMUM_CELLS),
        ("faults told of one file", bounds.MAXIMUM_FAULTS),
        ("digits of a number", numbers.MAXIMUM_DIGITS),
        ("size of a power of ten", numbers.MAXIMUM_EXPONENT),
        ("characters of a value with its unit", value_parts.LONGEST_VALUE),
        ("characters of a formula", lexer.MAXIMUM_LENGTH),
        ("parentheses and signs inside each other in a formula", token_reader.MAXIMUM_DEPTH),
        ("figures and rules resting one on the other", scope.MOST_DEEP),
        ("datums counted one from the other", points.MOST_DATUMS),
        ("variants of variants", design_reader.MOST_VARIANTS),
        ("rulesets that extend one another", ruleset_reader.MOST_LAYERS),
        ("turns of a loop", aggregates.MOST_ELEMENTS),
        ("a constant exponent, either way", arithmetic.MOST_POWER),
        ("corners of an outline", outlines.MOST_CORNERS),
        ("corners of a polygon of a zone", zone_reader.MOST_CORNERS),
        ("zones under `all` or `any`", zone_reader.MOST_PARTS),
        ("points of a hull", hulls.MOST_POINTS),
        ("boxes that ranges under `any` leave free, before one part has to hold a thing as a whole", cells.MOST_CELLS),
        ("corners of a zone, squared, times those of an outline, where corners point inward", placing.MOST_CUTS),
        ("designs of a house file that are looked through for the name of a rule", house_rules.MOST_DESIGNS),
        ("inputs that stand in correlations", correlations.MOST_CORRELATED),
        ("boxes into which a range of values is bisected", least.MOST_BOXES),
        ("boxes into which an envelope is bisected for one rule, element and state", throughout.MOST_BOXES),
        ("axes of an envelope", envelopes.MOST_AXES),
        ("combinations of states of a rule", states.MOST_COMBINATIONS),
        ("cases of a rule: elements times states", rules.MOST_CASES),
        ("segments of a track", track_reader.MOST_SEGMENTS),
        ("steps of a lap", track_reader.MOST_STEPS),
        ("runs of a solver that are remembered", solver.MOST_KEPT),
        ("terms of everything that is computed", exact.MAXIMUM_TERMS),
        ("values of a `--vary`", MOST_VALUES),
        ("values of a `--vary` that is settled before anything is computed, such as a choice", varying.MOST_BOUND),
        ("curves of a second `--vary`", MOST_CURVES),
        ("bits of a number that is not exact, when a sign is looked for", exact.MOST_BITS),
    )
    return table(["what", "at most"], ([what, f"{bound:,}".replace(",", " ")] for what, bound in rows))


def evidence_rows() -> str:
    """The kinds of evidence."""
    kinds = next(entry for entry in CORE if entry.path == "evidence.*.kind").choices
    return "\n".join(f"- `{kind}`" for kind in kinds)


def function_rows() -> str:
    """Every function with an example."""
    return table(
        ["function", "gives", "example", "result"],
        ([f"`{row.form}`", row.gives, f"`{row.example}`", f"`{row.result}`"] for row in FUNCTIONS),
    )


def ledger_rows() -> str:
    """The columns of a ledger."""
    fields = {entry.path: entry for entry in CORE}
    rows = []
    for column in COLUMNS:
        entry = fields.get(f"masses.*.{column.replace('inertia_', 'inertia.')}")
        said = meaning(entry) if entry else {"item": "Name of the row"}.get(column, "Place of its centre of gravity")
        rows.append([f"`{column}`", "must be there" if column in REQUIRED else "", said])
    return table(["column", "", "meaning"], rows)


def value_key_rows() -> str:
    """The keys of a value that is written as a mapping."""
    return ", ".join(f"`{key}`" for key in VALUE_KEYS)


TABLES: dict[str, Callable[[], str]] = {
    "vocabulary": vocabulary,
    "units": unit_rows,
    "unit-aliases": alias_rows,
    "prefixes": prefix_rows,
    "codes": code_rows,
    "bounds": bound_rows,
    "evidence": evidence_rows,
    "functions": function_rows,
    "ledger": ledger_rows,
    "value-keys": value_key_rows,
    "physics": modules_table,
}
