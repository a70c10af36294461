"""Text from files in Markdown: nothing of it is taken for markup."""

from __future__ import annotations

import re

from rulecheck.output.escaping import plain

_MARKUP = re.compile(r"([\\`*_{}\[\]<>()#+!|~@&])")


def escaped(text: str) -> str:
    r"""Text on one line with every character that Markdown or HTML would read behind a backslash.

    >>> print(escaped("a|b <i> *c*"))
    a\|b \<i\> \*c\*
    """
    return _MARKUP.sub(r"\\\1", plain(text))


def cell(text: str) -> str:
    """Text between backquotes, which it cannot leave.

    >>> cell("a`b|c")
    "a'b/c"
    """
    return plain(text).replace("`", "'").replace("|", "/")
