"""Runs the examples of Markdown pages: files are written, commands run, and what they print is compared.

What a fenced block says behind its language:

- `file=NAME`: the block is that file.
- `extends=RULESET design=DESIGN expect="rule: verdict, margin; …"`: the block is part of a ruleset that extends the
  named one; the design is checked against it.
- `console`: lines behind `$ ` are commands of ours, the others what they print; a line `…` stands for any lines.
  `exit=N` is the code of the last command.
- `python`: interactive lines, run as a doctest.

`python tests/handbook/markdown_blocks.py` writes what the commands print now into the pages; read the difference.
"""

from __future__ import annotations

import contextlib
import doctest
import io
import os
import re
import shlex
import sys
import tempfile
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from datetime import date
from pathlib import Path

ROOT = Path(__file__).parents[2]
PAGES = sorted((ROOT / "rulecheck" / "handbook").glob("*.md"))
DAY = date(2027, 3, 1)
_FENCE = re.compile(r"^```([^\n`]*)\n(.*?)^```$", re.MULTILINE | re.DOTALL)


@dataclass(frozen=True)
class Block:
    """A fenced block: its language, what is said behind it, its text, and where the text stands in the page."""

    language: str
    said: Mapping[str, str]
    text: str
    start: int
    end: int


def blocks(markdown: str) -> list[Block]:
    """The fenced blocks of a page."""
    found = []
    for match in _FENCE.finditer(markdown):
        language, *words = shlex.split(match[1]) or [""]
        said = dict(word.partition("=")[::2] for word in words)
        found.append(Block(language, said, match[2], match.start(2), match.end(2)))
    return found


@contextlib.contextmanager
def standing_in(folder: Path) -> Iterator[None]:
    """The folder as the working folder, on a screen of 80 columns without colour."""
    before, columns = Path.cwd(), os.environ.get("COLUMNS")
    os.chdir(folder)
    os.environ["COLUMNS"] = "80"
    try:
        yield
    finally:
        os.chdir(before)
        os.environ.pop("COLUMNS")
        if columns is not None:
            os.environ["COLUMNS"] = columns


def printed(command: str) -> tuple[str, int]:
    """What a command of ours writes to both streams, and its exit code."""
    from rulecheck.cli import run

    name, *arguments = shlex.split(command)
    assert name == "rulecheck", f"'{command}' is no command of ours"
    stream = io.TextIOWrapper(io.BytesIO(), encoding="utf-8", write_through=True)
    with contextlib.redirect_stdout(stream), contextlib.redirect_stderr(stream):
        code = run(arguments)
    return stream.buffer.getvalue().decode("utf-8"), code  # type: ignore[attr-defined]


def conversation(text: str) -> list[tuple[str, str]]:
    """Commands of a console block, each with what it is said to print."""
    parts = re.split(r"^\$ (.*)\n", text, flags=re.MULTILINE)
    assert parts[0] == "", "a console block begins with a command"
    return list(zip(parts[1::2], parts[2::2], strict=True))


def agrees(said: str, real: str) -> bool:
    """True where the printed text is what is said; a line `…` stands for any lines."""
    pieces = [re.escape(piece) for piece in re.split(r"^…\n", _plain(said), flags=re.MULTILINE)]
    return re.fullmatch(r"(?:.*\n)*".join(pieces), _plain(real)) is not None


def _plain(text: str) -> str:
    """Without blanks at line ends, and without empty lines at the end."""
    return "\n".join(line.rstrip() for line in text.rstrip().splitlines()) + "\n"


def run_block(block: Block, folder: Path) -> None:
    """Run one block in a folder that has the files of the blocks before it."""
    if "file" in block.said:
        (folder / block.said["file"]).write_text(block.text, encoding="utf-8")
    elif "extends" in block.said:
        _part_of_a_ruleset(block, folder)
    elif block.language == "console":
        _console(block, folder)
    elif block.language == "python":
        _python(block, folder)
    else:
        raise AssertionError(f"this block is no example that runs: {block.language} {dict(block.said)}\n{block.text}")


def _console(block: Block, folder: Path) -> None:
    code = 0
    for command, said in conversation(block.text):
        with standing_in(folder):
            real, code = printed(command)
        assert agrees(said, real), f"$ {command}\n{real}"
    assert code == int(block.said.get("exit", "0")), f"exit code {code} of\n{block.text}"


def _part_of_a_ruleset(block: Block, folder: Path) -> None:
    from rulecheck import check

    file = folder / "part.ruleset.yaml"
    file.write_text(f"ruleset: Part\nextends: {block.said['extends']}\n{block.text}", encoding="utf-8")
    report = check(folder / block.said["design"], rules=[file], on=DAY)
    found = {finding.name: finding for finding in report.rules}
    for line in filter(None, block.said.get("expect", "").split(";")):
        name, _, outcome = line.strip().partition(": ")
        finding = found[name]
        real = finding.verdict + (f", {finding.margin}" if finding.margin is not None else "")
        assert real == outcome, f"{name}: {real}; said was {outcome}"
    assert "expect" in block.said or "rules:" not in block.text, "a part with rules says what is expected"


def _python(block: Block, folder: Path) -> None:
    runner = doctest.DocTestRunner(verbose=False, optionflags=doctest.ELLIPSIS | doctest.NORMALIZE_WHITESPACE)
    test = doctest.DocTestParser().get_doctest(block.text, {}, "page", None, 0)
    assert test.examples, "a python block has interactive lines"
    said = io.StringIO()
    with standing_in(folder):
        runner.run(test, out=said.write)
    assert not runner.failures, said.getvalue()


def renewed(markdown: str, folder: Path) -> str:
    """The page with what its commands print now; blocks that leave lines out stay as they are."""
    made, behind = "", 0
    for block in blocks(markdown):
        if block.language != "console":
            if "file" in block.said:
                run_block(block, folder)
            continue
        text = ""
        for command, said in conversation(block.text):
            with standing_in(folder):
                real, _ = printed(command)
            text += f"$ {command}\n{said if '…' in said.splitlines() else _plain(real)}"
        made += markdown[behind : block.start] + text
        behind = block.end
    return made + markdown[behind:]


def renew() -> None:
    """Renew every page of the handbook and the README."""
    for page in PAGES:
        with tempfile.TemporaryDirectory() as folder:
            page.write_text(renewed(page.read_text("utf-8"), Path(folder)), encoding="utf-8")
    readme = ROOT / "README.md"
    readme.write_text(renewed(readme.read_text("utf-8"), ROOT), encoding="utf-8")


if __name__ == "__main__":
    sys.path.insert(0, str(ROOT))
    renew()
