"""A small writer of SVG: elements as text, everything from files escaped, no styles but those written here."""

from __future__ import annotations

from collections.abc import Iterable
from xml.sax.saxutils import escape, quoteattr

from rulecheck.output.escaping import plain


def element(name: str, content: str = "", /, **attributes: object) -> str:
    """An element; underscores in the names of attributes stand for hyphens, numbers are cut to a tenth.

    >>> element("text", words("a < b"), x=1.25, font_size=12)
    '<text x="1.2" font-size="12">a &lt; b</text>'
    """
    said = "".join(
        f" {key.strip('_').replace('_', '-')}={quoteattr(_text(value))}" for key, value in attributes.items()
    )
    return f"<{name}{said}>{content}</{name}>" if content else f"<{name}{said}/>"


def words(text: str) -> str:
    """Text from files as content: harmless and escaped."""
    return escape(plain(text))


def document(width: int, height: int, title: str, description: str, parts: Iterable[str]) -> str:
    """A whole drawing with its title and description for those who do not see it."""
    head = (
        f'<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 {width} {height}" width="{width}" height="{height}" '
        'role="img" aria-labelledby="title description" font-family="sans-serif" font-size="12" fill="#000">'
    )
    named = element("title", words(title), id="title") + "\n" + element("desc", words(description), id="description")
    ground = element("rect", width=width, height=height, fill="#fff")
    return "\n".join([head, named, ground, *parts, "</svg>"]) + "\n"


def _text(value: object) -> str:
    return f"{value:.1f}".removesuffix(".0") if isinstance(value, float) else plain(str(value))
