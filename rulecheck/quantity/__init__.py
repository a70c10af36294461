"""Numbers with units, exactly.

Lives here: numbers as text (`numbers`), dimensions, the table of units (data, `unit_table`) and what reads
a unit from its symbol (`units`), quantities with their spread, and what reads them from located text.

Promises: a value is a rational, never a float, times a whole power of pi; factors are exact; nothing is
guessed where a unit is missing; text that cannot be read gives diagnostics with place and advice. Every
value is frozen. Knows nothing of designs, rules or formulas.
"""
