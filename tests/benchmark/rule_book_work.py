"""A rule book of many rules: how long proofreading takes, and a check beyond what it loads.

The rules are invented: ranges of many inputs, some under conditions, some of each tyre, each clause in the register.
"""

from __future__ import annotations

from pathlib import Path

RULES = 2_000
INPUTS = 250


def rule_book(rules: int = RULES, inputs: int = INPUTS) -> str:
    """The text of a ruleset with so many rules on so many inputs of its own, no two of which say the same."""
    lines = ["ruleset: Long book", "inputs:", "  options.roof: {choices: [open, closed], meaning: Roof}"]
    lines += [f"  part{n}.length: {{unit: mm, meaning: Length of part {n}}}" for n in range(inputs)]
    lines.append("clauses:")
    lines += [f'  "{n // 20 + 1}.{n % 20 + 1}": Length' for n in range(rules)]
    lines.append("rules:")
    for n in range(rules):
        part, turn = f"part{n % inputs}.length", n // inputs
        asked = f"{part} + {turn} * part{(n + 1) % inputs}.length <= {1000 + n} mm"
        when = "when: options.roof == closed, " if n % 3 == 0 else ""
        lines.append(f'  rule{n}: {{clause: "{n // 20 + 1}.{n % 20 + 1}", title: Length, {when}require: {asked}}}')
    return "\n".join(lines) + "\n"


def write_rule_book(folder: Path, rules: int = RULES) -> tuple[Path, Path]:
    """The ruleset and a design that meets it, in a folder."""
    book, car = folder / "long.ruleset.yaml", folder / "car.design.yaml"
    book.write_text(rule_book(rules), encoding="utf-8")
    parts = "\n".join(f"part{n}: {{length: 10 mm}}" for n in range(INPUTS))
    car.write_text(
        f"design: Stint\nrulesets: [long.ruleset.yaml]\noptions: {{roof: closed}}\n{parts}\n", encoding="utf-8"
    )
    return book, car
