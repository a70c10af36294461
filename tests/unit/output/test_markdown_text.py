from __future__ import annotations

from pathlib import Path

import pytest

from rulecheck.cli import run
from rulecheck.output.markdown_text import cell, escaped


@pytest.mark.parametrize("text", ["<script>", "a | b", "[a](b)", "**a**", "`a`", "# a", "&lt;", "![x](y)"])
def test_nothing_is_markup(text: str) -> None:
    shown = escaped(text)
    assert all(shown[place - 1] == "\\" for place, sign in enumerate(shown) if sign in "<>|[]()*`#&!")


def test_a_line_end_or_a_backquote_does_not_leave_the_cell() -> None:
    assert "\n" not in escaped("a\n| b")
    assert not set("`|") & set(cell("a`b|c"))


def test_a_title_from_a_file_stays_in_its_cell(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    path = tmp_path / "cup.ruleset.yaml"
    path.write_text('ruleset: "A | <b>"\nclauses: {"1": "x | y\\n# z"}\nrules: {a: {require: mass.total >= 1 kg}}\n')
    assert run(["proofread", str(path), "--form", "markdown", "--listing"]) == 0
    out = capsys.readouterr().out
    assert "| 1 | x \\| y \\# z | missing |  |" in out
    assert "<b>" not in out.replace("\\<b\\>", "")
