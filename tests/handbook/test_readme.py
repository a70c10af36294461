"""The README's commands run, and print what it says."""

from __future__ import annotations

import shlex

from markdown_blocks import ROOT, Block, blocks, printed, run_block, standing_in

TEXT = (ROOT / "README.md").read_text("utf-8")
BLOCKS = blocks(TEXT)
SHELL = [block for block in BLOCKS if block.language == "sh"]


def _excerpt(block: Block) -> None:
    whole = (ROOT / block.said["excerpt"]).read_text("utf-8")
    assert block.text in whole, f"{block.said['excerpt']} has no longer\n{block.text}"


def test_every_example() -> None:
    assert {"console", "python", "yaml", "sh"} == {block.language for block in BLOCKS}
    for block in BLOCKS:
        if "excerpt" in block.said:
            _excerpt(block)
        elif block.language != "sh":
            run_block(block, ROOT)


def test_the_first_two_blocks_are_the_two_commands() -> None:
    first, second = BLOCKS[0], BLOCKS[1]
    assert [first, second] == SHELL
    assert second.text == "bash tests/run\n"
    assert (ROOT / "tests" / "run").is_file()
    made, rest = first.text.replace("\\\n", "").strip().split("\n")
    installed, checked = rest.split(" && ")
    assert made.startswith("python3 -m venv .venv || { apt-get update && apt-get install -y python3-venv")
    assert installed == ".venv/bin/pip install --quiet ."
    with standing_in(ROOT):
        text, code = printed(shlex.join(["rulecheck", *shlex.split(checked)[1:]]))
    assert shlex.split(checked)[0] == ".venv/bin/rulecheck"
    assert code == 0
    assert "total: complies" in text


def test_files_and_folders_that_it_names_are_there() -> None:
    names = [
        "rulecheck/handbook",
        "rulecheck/CHANGELOG.md",
        "DEVELOPERS.md",
        "LICENSE",
        "designs_demo",
        "rulesets_demo",
    ]
    for name in names:
        assert name in TEXT
        assert (ROOT / name).exists()
