"""What may be a name: letters, digits, underscores; paths are names joined by dots."""

from __future__ import annotations

import re

from rulecheck.diagnostics import Faults
from rulecheck.reading.nodes import Located

RESERVED_KEYS = ("design", "revision", "note", "rulesets", "ledger", "states", "correlations", "changes", "set")
"""Keys at the top of a design that are no inputs."""
RESERVED = frozenset(["and", "or", "not", "if", "else", "for", "in", "where", "within", "yes", "no"])
_NAME = re.compile(r"[^\W\d]\w*\Z")


def is_name(text: str) -> bool:
    """True for a plain name that a formula can use.

    >>> is_name("rear_wing"), is_name("2nd"), is_name("in")
    (True, False, False)
    """
    return bool(_NAME.match(text)) and text not in RESERVED


def check_name(key: Located, faults: Faults) -> bool:
    """Note a fault where a key cannot be a name."""
    if is_name(key.text):
        return True
    advice = f"'{key.text}' is a word of the language" if key.text in RESERVED else "join words by underscores"
    faults.add(
        "bad-name",
        f"'{key.text}' cannot be a name",
        key.span,
        expected="letters, digits and underscores, a letter first",
        advice=advice,
    )
    return False


def check_path(key: Located, faults: Faults) -> bool:
    """Note a fault where a key cannot be a path."""
    if all(is_name(part) for part in key.text.split(".")):
        return True
    faults.add(
        "bad-name",
        f"'{key.text}' cannot be a path",
        key.span,
        expected="names joined by dots, such as tyres.rear.width",
    )
    return False
