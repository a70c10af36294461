"""Text from files made harmless for a screen: nothing that moves the cursor, hides or turns the text around it."""

from __future__ import annotations

import unicodedata

# Invisible characters that languages need between their letters; every other format character is shown by its number.
_JOINERS = "\u200c\u200d"
_UNSEEN = {"Cc", "Cf", "Cs", "Co", "Cn", "Zl", "Zp"}


def plain(text: str) -> str:
    r"""Text on one line, with control, direction and other unseen characters shown by their numbers.

    Line ends and tabs become blanks.

    >>> plain("one\ntwo")
    'one two'
    >>> print(plain("red \x1b[31m and \u202eturned"))
    red \x1b[31m and \u202eturned
    """
    if text.isascii() and text.isprintable():
        return text
    return "".join(map(_shown, text))


def _shown(character: str) -> str:
    if character in "\n\t\r":
        return " "
    if character in _JOINERS or unicodedata.category(character) not in _UNSEEN:
        return character
    code = ord(character)
    if code < 0x100:
        return f"\\x{code:02x}"
    return f"\\u{code:04x}" if code < 0x10000 else f"\\U{code:08x}"


def encodable(text: str, encoding: str) -> str:
    r"""Text that a stream of this encoding takes: what it cannot write is shown by its number.

    >>> encodable("45\u00b0", "ascii")
    '45\\xb0'
    """
    return text.encode(encoding, "backslashreplace").decode(encoding)
