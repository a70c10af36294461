"""The bounds of reading. They are counts, never seconds, so that a file reads alike on every machine.

Each is far above what a whole car or a whole rule book needs; reaching one is a diagnostic that
states the bound.
"""

from __future__ import annotations

MAXIMUM_BYTES = 4 * 1024 * 1024
"""Bytes of one file: 4 MiB."""

MAXIMUM_NODES = 200_000
"""Keys, values, lists and mappings of one YAML file, with what aliases repeat counted each time."""

MAXIMUM_DEPTH = 64
"""Lists and mappings inside each other, in one YAML file."""

MAXIMUM_ALIASES = 1_000
"""Aliases (`*name`) in one YAML file."""

MAXIMUM_SCALAR = 65_536
"""Characters of one value, and of one cell of a ledger."""

MAXIMUM_ROWS = 20_000
"""Rows of one ledger."""

MAXIMUM_FAULTS = 200
"""Faults noted in one file before reading stops; the first of them are the ones that matter."""

MAXIMUM_CELLS = 200
"""Cells of one row of a ledger."""
