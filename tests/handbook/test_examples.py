"""Every example of the handbook runs, and prints what its page says."""

from __future__ import annotations

from pathlib import Path

import pytest
from markdown_blocks import PAGES, agrees, blocks, run_block


@pytest.mark.parametrize("page", PAGES, ids=lambda page: page.stem)
def test_examples_of_a_page(page: Path, tmp_path: Path) -> None:
    for block in blocks(page.read_text("utf-8")):
        run_block(block, tmp_path)


def test_a_wrong_example_is_noticed(tmp_path: Path) -> None:
    (block,) = blocks("```console\n$ rulecheck --version\nsome other program\n```\n")
    with pytest.raises(AssertionError, match="rulecheck 0"):
        run_block(block, tmp_path)


def test_lines_that_are_left_out() -> None:
    assert agrees("a\n…\nd\n", "a\nb\nc\nd\n")
    assert agrees("a\n…\nd\n", "a\nd\n")
    assert not agrees("a\n…\nd\n", "a\nb\nc\n")
    assert not agrees("a\n", "a\nb\n")
