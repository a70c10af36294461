import io

import pytest

from rulecheck.output.pages import page_text
from rulecheck.output.screen import PAPER, Screen, screen_of


class _Stream(io.TextIOWrapper):
    def __init__(self, encoding: str, terminal: bool) -> None:
        super().__init__(io.BytesIO(), encoding=encoding)
        self.terminal = terminal

    def isatty(self) -> bool:
        return self.terminal


@pytest.fixture(autouse=True)
def _plain_environment(monkeypatch: pytest.MonkeyPatch) -> None:
    for name in ("NO_COLOR", "FORCE_COLOR", "COLUMNS", "TTY_COMPATIBLE", "TTY_INTERACTIVE"):
        monkeypatch.delenv(name, raising=False)
    monkeypatch.setenv("TERM", "xterm-256color")
    monkeypatch.setenv("COLORTERM", "")


def test_away_from_a_terminal() -> None:
    assert screen_of(_Stream("utf-8", False)) == PAPER
    assert screen_of(_Stream("latin-1", False)) == Screen(80, False, "", "latin-1")


def test_at_a_terminal(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setenv("COLUMNS", "300")
    assert screen_of(_Stream("utf-8", True)) == Screen(120, True, "256", "utf-8")
    monkeypatch.setenv("COLORTERM", "truecolor")
    monkeypatch.setenv("COLUMNS", "20")
    assert screen_of(_Stream("utf-8", True)) == Screen(40, True, "truecolor", "utf-8")


@pytest.mark.parametrize(("name", "value"), [("NO_COLOR", "1"), ("NO_COLOR", ""), ("TERM", "dumb")])
def test_colours_can_be_refused(monkeypatch: pytest.MonkeyPatch, name: str, value: str) -> None:
    monkeypatch.setenv(name, value)
    assert screen_of(_Stream("utf-8", True)).colours == ""


def test_pages_stay_markdown_without_colours() -> None:
    assert page_text("# Units\n\n`mm`", PAPER) == "# Units\n\n`mm`\n"
    laid_out = page_text("# Units\n\n`mm`\n", Screen(colours="256"))
    assert "Units" in laid_out
    assert "# Units" not in laid_out
