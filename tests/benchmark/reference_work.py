"""The reference work: 60 inputs, 150 derived formulas of 4 to 8 operations, depth 12, 200 rules, 150 parts.

Drawn from a fixed seed, so that every run measures the same work. The same formulas are written as Python too.
"""

from __future__ import annotations

import random
from dataclasses import dataclass
from pathlib import Path

INPUTS, DERIVED, RULES, PARTS, LEVELS = 60, 150, 200, 150, 12


@dataclass(frozen=True)
class Work:
    """The files of the reference work, and the same formulas as a Python function."""

    design: Path
    ruleset: Path
    python: str
    values: list[float]


def _formula(chance: random.Random, names: list[str]) -> tuple[str, str]:
    """A formula of 4 to 8 operations in the language, and in Python."""
    count = chance.randint(4, 8)
    text = chance.choice(names)
    python = text
    for _ in range(count):
        other = chance.choice(names)
        kind = chance.randint(0, 9)
        if kind < 4:
            sign = chance.choice("+-")
            text, python = f"({text} {sign} {other})", f"({python} {sign} {other})"
        elif kind < 6:
            share = chance.randint(1, 9)
            text, python = f"({text} * 0.{share} + {other})", f"({python} * 0.{share} + {other})"
        elif kind < 7:
            text, python = f"({text} / (1 + {other} * {other}))", f"({python} / (1 + {other} * {other}))"
        elif kind < 8:
            text, python = f"max({text}, {other})", f"max({python}, {other})"
        elif kind < 9:
            text, python = f"min({text}, 2 * {other})", f"min({python}, 2 * {other})"
        else:
            text, python = f"({text} if {other} > 1 else {other})", f"({python} if {other} > 1 else {other})"
    return text, python


def _ledger(folder: Path, chance: random.Random) -> None:
    parts = [
        f"part_{index},{chance.randint(10, 900) / 100},{chance.randint(-500, 3200)},{chance.randint(-600, 600)},{chance.randint(50, 700)}"
        for index in range(PARTS)
    ]
    text = "item,mass [kg],x [mm],y [mm],z [mm]\n" + "\n".join(parts) + "\n"
    (folder / "parts.csv").write_text(text, encoding="utf-8")


def write(folder: Path, seed: int = 20270301) -> Work:
    """Write the reference work to a folder."""
    chance = random.Random(seed)
    inputs = [f"a{index}" for index in range(INPUTS)]
    values = [chance.randint(50, 400) / 100 for _ in inputs]
    levels = [[f"v.{name}" for name in inputs]]
    lines, python, derived = [], [], []
    per_level = -(-DERIVED // LEVELS)
    for index in range(DERIVED):
        if index % per_level == 0:
            levels.append([])
        # At least one operand from the level before, so that the depth is what it says.
        names = [*chance.sample(levels[0], 4), *chance.sample(levels[-2], min(4, len(levels[-2])))]
        text, code = _formula(chance, names)
        # Kept between -4 and 4, so that numbers do not grow with the depth.
        name = f"d{index}"
        lines.append(f'  {name}: {{formula: "min(max({text}, -4), 4)", unit: "1", meaning: Derived {index}}}')
        python.append(f"    {name} = min(max({code.replace('v.', '')}, -4.0), 4.0)")
        levels[-1].append(name)
        derived.append(name)
    rules = []
    for index in range(RULES):
        name = derived[index % DERIVED] if index < DERIVED + 30 else f"v.{inputs[index % INPUTS]}"
        limit = chance.randint(1, 9)
        rules.append(f'  r{index}: {{clause: "{index}", title: Rule {index}, require: "{name} <= {limit}"}}')
        python.append(f"    margins[{index}] = {limit} - {name.replace('v.', '')}")
    rules[-1] = f'  r{RULES - 1}: {{clause: "{RULES - 1}", title: Mass, require: mass.total >= 300 kg}}'
    declared = "\n".join(f'  v.{name}: {{unit: "1", meaning: Input {name}}}' for name in inputs)
    ruleset = folder / "reference.ruleset.yaml"
    ruleset.write_text(
        f"ruleset: Reference work\ninputs:\n{declared}\nderived:\n"
        + "\n".join(lines)
        + "\nrules:\n"
        + "\n".join(rules)
        + "\n",
        encoding="utf-8",
    )
    _ledger(folder, chance)
    stated = "\n".join(f"  {name}: {value}" for name, value in zip(inputs, values, strict=True))
    design = folder / "reference.design.yaml"
    design.write_text(
        f"design: Reference\nrulesets: [reference.ruleset.yaml]\nledger: [parts.csv]\nv:\n{stated}\n", encoding="utf-8"
    )
    code = (
        f"def margins_of({', '.join(inputs)}):\n    margins = [0.0] * {RULES}\n"
        + "\n".join(python)
        + "\n    return margins\n"
    )
    return Work(design, ruleset, code, values)
