"""Handbook pages: laid out at a terminal, as they are written when piped."""

from __future__ import annotations

from rich.markdown import Markdown

from rulecheck.output.screen import Screen, draw


def page_text(markdown: str, screen: Screen) -> str:
    """A page for the screen; without colours it stays Markdown, which is plain text."""
    if not screen.colours:
        return markdown if markdown.endswith("\n") else markdown + "\n"
    return draw([Markdown(markdown, hyperlinks=False)], screen)
