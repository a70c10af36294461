from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from rulecheck import proofread


@pytest.mark.parametrize(
    ("over", "steps", "expected"),
    [
        ("dimensions.wheelbase", "{up_to: 2 m, value: 1 kg}, {otherwise: 2 kg}", []),
        ("dimensions.wheelbase", "{up_to: 2 m, value: 1 kg}, {below: 3 m, value: 2 kg}", ["table-gap"]),
        ("options.roof", "{is: open, value: 1 kg}, {is: closed, value: 2 kg}", []),
        ("options.roof", "{is: open, value: 1 kg}", ["table-gap"]),
        ("options.roof", "{is: open, value: 1 kg}, {is: closed, value: 2 kg}, {otherwise: 3 kg}", ["dead-row"]),
        (
            "[dimensions.wheelbase, options.roof]",
            "{when: dimensions.wheelbase <= 2 m, value: 1 kg}, "
            "{when: dimensions.wheelbase <= 1 m and options.roof == open, value: 2 kg}, {otherwise: 3 kg}",
            ["dead-row"],
        ),
        (
            "[dimensions.wheelbase, options.roof]",
            "{when: dimensions.wheelbase <= 2 m, value: 1 kg}, {when: dimensions.wheelbase > 2 m, value: 2 kg}",
            [],
        ),
    ],
)
def test_rows(tmp_path: Path, over: str, steps: str, expected: list[str]) -> None:
    path = tmp_path / "cup.ruleset.yaml"
    path.write_text(
        "ruleset: Heron Cup\ninputs: {options.roof: {choices: [open, closed], meaning: Roof}}\n"
        f"tables: {{least: {{over: {over}, steps: [{steps}]}}}}\n"
        'rules: {a: {clause: "1", title: T, when: options.roof == open, require: mass.total >= least}}\n',
        encoding="utf-8",
    )
    book = proofread([path], on=date(2027, 3, 1)).books[0]
    assert [item.code for item in book.findings] == expected
