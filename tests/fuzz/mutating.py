"""Mutants of texts: a few random edits with pieces that are apt to hurt. The source of randomness is seeded."""

from __future__ import annotations

import random
import re
from collections.abc import Sequence

PIECES = (
    *'()[]{}<>=!+-*/^.,:;#&*!|>\'"%@`~?\\$',
    " ", "  ", "\n", "\n  ", "\t", "\r", "\x00", "\ufeff", "\u00a0", "\u2212", "µ", "°", "½", "\U0001d7d9", "é", "\ud800",
    "0", "1", "-1", "1e9", "1e999", "1e-999", "0x10", "1_0", "00", "0.1", ".5", "5.", "nan", "inf", "9^9^9^9",
    " mm", " kg", " m^2", " deg", " degC", " %", " 1", " in", " days", " g", "mm", " mm^99", " m/s/s", " ± 1 mm", " +0/-2 mm",
    "and", " or ", " not ", " if ", " else ", " for ", " in ", " where ", " within ", "yes", "no", "none", "on", "pi", "true", "null", "~",
    "x", ".x", ".y", ".*", "*", "t.", "tyres", "masses", "edges", "points.knee", "dimensions.wheelbase", "2027-03-01", "2027-02-30", "5 years",
    "sqrt(", "min(", "max(", "sum(", "count(for ", "distance(", "present(", "rule(it)", "margin(it)", "round(", "end_of_year(", "line(", "plane(",
    "- ", ": ", "? ", "&a ", "*a", "<<: ", "!!int ", "--- ", "...", "|\n", ">-\n", "%YAML 1.1\n",
    "when: ", "each: ", "require: ", "states: every", "envelope: {vehicle.speed: [1 m/s, 2 m/s]}", "empty: ", "extends: cup.ruleset.yaml", "changes: car.design.yaml", "ledger: [parts.csv]",
    "set: ", "value: ", "complete: yes", "at: ", "datum: rear_axle", "kind: ", "unit: ", "meaning: ", "evidence: ", "judgement: ", "valid: ",
)  # fmt: skip


def mutant(source: random.Random, text: str, others: Sequence[str] = ()) -> str:
    """The text with one to six edits, most often one."""
    for _ in range(source.choice((1, 1, 1, 2, 3, 6))):
        text = source.choice(_EDITS)(source, text, others)
    return text.encode("utf-8", "replace").decode("utf-8")


def _stretch(source: random.Random, text: str, most: int = 12) -> tuple[int, int]:
    start = source.randint(0, len(text))
    return start, min(len(text), start + source.randint(0, most))


def _insert(source: random.Random, text: str, _others: Sequence[str]) -> str:
    at = source.randint(0, len(text))
    return text[:at] + source.choice(PIECES) + text[at:]


def _replace(source: random.Random, text: str, _others: Sequence[str]) -> str:
    start, end = _stretch(source, text)
    return text[:start] + source.choice(PIECES) + text[end:]


def _delete(source: random.Random, text: str, _others: Sequence[str]) -> str:
    start, end = _stretch(source, text)
    return text[:start] + text[end:]


def _repeat(source: random.Random, text: str, _others: Sequence[str]) -> str:
    start, end = _stretch(source, text, 40)
    return text[:end] + text[start:end] * source.choice((1, 1, 1, 2, 30)) + text[end:]


def _swap(source: random.Random, text: str, _others: Sequence[str]) -> str:
    a, b = sorted((_stretch(source, text), _stretch(source, text)))
    if a[1] > b[0]:
        return text
    return text[: a[0]] + text[b[0] : b[1]] + text[a[1] : b[0]] + text[a[0] : a[1]] + text[b[1] :]


def _line(source: random.Random, text: str, _others: Sequence[str]) -> str:
    lines = text.split("\n")
    line = lines.pop(source.randrange(len(lines)))
    lines.insert(source.randint(0, len(lines)), line.strip() if source.random() < 0.3 else line)
    return "\n".join(lines)


def _cross(source: random.Random, text: str, others: Sequence[str]) -> str:
    if not others:
        return text
    other = source.choice(others)
    start, end = _stretch(source, other, 60)
    at = source.randint(0, len(text))
    return text[:at] + other[start:end] + text[at:]


def _number(source: random.Random, text: str, _others: Sequence[str]) -> str:
    """Another number in the place of one."""
    found = list(re.finditer(r"\d+", text))
    if not found:
        return text
    chosen = source.choice(found)
    return text[: chosen.start()] + str(source.choice((0, 1, 2, 5, 1900, 10**6, 10**30))) + text[chosen.end() :]


def _word(source: random.Random, text: str, others: Sequence[str]) -> str:
    """Another word in the place of one."""
    found = list(re.finditer(r"[a-z_]{2,}", text))
    words = re.findall(r"[a-z_]{2,}", source.choice([text, *others]))
    if not found or not words:
        return text
    chosen = source.choice(found)
    return text[: chosen.start()] + source.choice(words) + text[chosen.end() :]


def _without_line(source: random.Random, text: str, _others: Sequence[str]) -> str:
    lines = text.split("\n")
    del lines[source.randrange(len(lines))]
    return "\n".join(lines)


_EDITS = (
    _insert, _replace, _delete, _repeat, _swap, _line, _cross, _number, _number, _word, _word, _word, _without_line,
)  # fmt: skip
