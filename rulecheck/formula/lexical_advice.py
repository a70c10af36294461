"""What to say about text that is no piece of a formula, and what to write instead."""

from __future__ import annotations

import re
from collections.abc import Callable
from typing import NamedTuple

from rulecheck.diagnostics import Faults
from rulecheck.formula.places import Places
from rulecheck.formula.tokens import RESERVED, STUCK_NUMBER, Token
from rulecheck.quantity.numbers import NumberFault, quoted, read_number, show_exact


class Wrong(NamedTuple):
    """A stretch of a formula that cannot be read, and the tokens before it."""

    text: str
    start: int
    end: int
    before: list[Token]

    @property
    def piece(self) -> str:
        """The stretch itself."""
        return self.text[self.start : self.end]


class Advice(NamedTuple):
    """What is wrong, what to do, and under which code."""

    message: str
    advice: str
    code: str = "formula-syntax"


def advise(wrong: Wrong, group: str, places: Places, faults: Faults) -> None:
    """Note the fault of one stretch, by the group of the token pattern that found it."""
    found = _BY_GROUP[group](wrong)
    faults.add(found.code, found.message, places.span(wrong.start, wrong.end), advice=found.advice)


def _bad_day(wrong: Wrong) -> Advice:
    return Advice(
        f"{quoted(wrong.piece)} begins with a date and goes on",
        "write a date as year-month-day, with a blank behind it",
    )


def _fraction(wrong: Wrong) -> Advice:
    """`3/8 in`, and `1 3/8 in`."""
    found = re.compile(r"\s+([^\s,)\]]+)").match(wrong.text, wrong.end)
    unit = found[1] if found else ""
    message = f"a fraction of a unit is written as a decimal, not as {quoted(f'{wrong.piece} {unit}')}"
    before = wrong.before[-1] if wrong.before else None
    whole = before.text if before and before.kind == "number" and before.unit is None else "0"
    try:
        whole_number, above, below = map(read_number, (whole, *wrong.piece.split("/")))
    except NumberFault as fault:
        return Advice(fault.message, fault.advice, fault.code)
    if not below:
        return Advice(message, "a fraction is not over zero")
    share = show_exact(whole_number + above / below)
    return Advice(message, f"write ({share}) * 1 {unit}" if "/" in share else f"write {share} {unit}")


def _bad_number(wrong: Wrong) -> Advice:
    piece = wrong.piece
    before = wrong.before[-1] if wrong.before else None
    if piece.startswith(".") and before and before.kind == "name" and before.end == wrong.start:
        return Advice(f"a part of a name cannot begin with a digit: {quoted(piece)}", "begin each part with a letter")
    stuck = STUCK_NUMBER.fullmatch(piece)
    if stuck:
        return _stuck_number(piece, stuck[1], stuck[2])
    try:
        read_number(piece)
    except NumberFault as fault:
        return Advice(fault.message, fault.advice, fault.code)
    return Advice(f"{quoted(piece)} is not a number", "write digits with a point")


def _stuck_number(piece: str, numeral: str, rest: str) -> Advice:
    message = f"{quoted(piece)} is neither a number nor a name"
    product = f"write a product as '{numeral} * {rest}'"
    if "." in rest:
        return Advice(message, product)
    blank = f"put a blank before a unit: '{numeral} {rest}'"
    return Advice(message, blank if rest[0] in "%\u00b0" else f"{blank}; {product}")


def _unclosed(wrong: Wrong) -> Advice:
    return Advice("the quoted text is not closed", "close it with another '\"'")


def _reserved(wrong: Wrong) -> Advice:
    words = [part for part in wrong.piece.split(".") if part in RESERVED]
    return Advice(f"'{words[0]}' is a word of the language and cannot be part of a name", "name the item otherwise")


def _stuck(wrong: Wrong) -> Advice:
    """A unit with something directly behind it: `3 m^x`, `5 tyres.width`, `75 %*max(a)`."""
    token, sign = wrong.before[-1], wrong.piece
    unit = token.unit or ""
    message = f"'{sign}' stands directly behind the unit {quoted(unit)}"
    if sign == "^":
        return Advice(message, f"put a blank behind the unit, or parentheses: ({token.text} {unit})^2")
    if sign == "/" and "/" in unit:
        return Advice(message, "a unit has one slash: write N/(m*s) for N/m/s, or put blanks round a division")
    if sign == "." and re.search(r"\^-?[0-9]+$", unit):
        return Advice(message, f"a unit takes whole powers only; a broken one is written ({token.text} m)^2.5")
    if unit != "1" and not unit.endswith(")") and (sign == "(" or re.match(r"\.[^\W\d]", wrong.text[wrong.start :])):
        cut = max(unit.rfind("*"), unit.rfind("/"))
        name = unit[cut + 1 :]
        goes_on = f"{name}(...)" if sign == "(" else name + wrong.text[wrong.start :].split(maxsplit=1)[0]
        shown = f"{token.text} * {goes_on}" if cut < 0 else f"{token.text} {unit[:cut]} {unit[cut]} {goes_on}"
        return Advice(message, f"put a blank behind a unit, as in {quoted(shown)}")
    return Advice(message, "put a blank behind the unit")


def _trap(wrong: Wrong) -> Advice:
    piece = wrong.piece
    if piece.startswith("+"):
        return Advice(
            f"{quoted(piece)} is a tolerance, and tolerances stand in values only",
            "leave it out, or put blanks round '+' and '/'",
        )
    return Advice(f"'{piece}' is not a sign of the language", f"write {_SIGNS[piece]}")


def _strange(wrong: Wrong) -> Advice:
    piece = wrong.piece
    if piece in _BLANKS:
        return Advice(f"a special blank <U+{ord(piece):04X}> stands in the formula", "write an ordinary blank")
    if piece in _MINUSES:
        return Advice(f"'{piece}' is a typographic minus or dash", "write the minus as the hyphen of the keyboard: '-'")
    if piece in _QUOTES:
        return Advice(f"{piece} is not the quotation mark of the language", 'write text in double quotes: "25CrMo4"')
    if piece in _POWERS:
        return Advice(f"'{piece}' is a raised figure", f"write '^{_POWERS[piece]}', as in m^2")
    if piece == "=" and _names_argument(wrong.before):
        return Advice(
            "an argument is given by name, and named arguments do not exist", "write the argument alone, in its place"
        )
    if piece in _SIGNS:
        return Advice(f"'{piece}' is not a sign of the language", f"write {_SIGNS[piece]}")
    if piece.isdecimal():
        return Advice(f"'{piece}' is not a digit of the language", "write the digits 0 to 9")
    return _ODD.get(piece) or Advice(
        f"{quoted(piece)} cannot stand in a formula", "names are letters, digits and underscores; other text is quoted"
    )


def _names_argument(before: list[Token]) -> bool:
    return len(before) > 1 and before[-1].kind == "name" and before[-2].kind in ("(", ",")


_BLANKS = frozenset(
    "\u00a0\u1680\u2000\u2001\u2002\u2003\u2004\u2005\u2006\u2007\u2008\u2009\u200a\u200b\u202f\u205f\u2060\u3000\ufeff"
)
_MINUSES = frozenset("\u2010\u2011\u2012\u2013\u2014\u2015\u2212\ufe63\uff0d")
_QUOTES = frozenset("'`\u2018\u2019\u201a\u201c\u201d\u201e\u00ab\u00bb\u2039\u203a\u00b4")
_POWERS = dict(zip("\u2070\u00b9\u00b2\u00b3\u2074\u2075\u2076\u2077\u2078\u2079", "0123456789", strict=True))
_SIGNS = {
    "&&": "'and'",
    "&": "'and'",
    "||": "'or'",
    "|": "'or'",
    "!": "'not', or '!=' for a difference",
    "~": "'not'",
    "=": "'==' to compare",
    "=<": "'<='",
    "=>": "'>='",
    "<>": "'!='",
    "**": "'^' for a power",
    "//": "'/', or floor(a / b)",
    "\u00d7": "'*'",
    "\u00b7": "'*'",
    "\u22c5": "'*'",
    "\u2217": "'*'",
    "\u00f7": "'/'",
    "\u2215": "'/'",
    "\u2044": "'/'",
    "\u2264": "'<='",
    "\u2a7d": "'<='",
    "\u2265": "'>='",
    "\u2a7e": "'>='",
    "\u2260": "'!='",
    "\u2248": "'== ... within ...'",
    "\u221a": "sqrt(x)",
    "\u2208": "'in'",
    "\u2227": "'and'",
    "\u2228": "'or'",
    "\u00ac": "'not'",
}
_ODD = {
    "%": Advice("'%' stands without a number", "write the number before it, with a blank between: 75 %"),
    "\u00b0": Advice("'\u00b0' stands without a number", "write the number before it, with a blank between: 30 deg"),
    "\u00b1": Advice(
        "'\u00b1' stands in values only, not in formulas", "write the bound itself, or '== ... within ...'"
    ),
    ":": Advice(
        "':' cannot stand in a formula", "named arguments do not exist: write the argument alone, in its place"
    ),
    ";": Advice("';' cannot stand in a formula", "write ',' between arguments"),
    "{": Advice("'{' cannot stand in a formula", "write '(' for a group and '[' for a list"),
    "}": Advice("'}' cannot stand in a formula", "write ')' for a group and ']' for a list"),
    "#": Advice("'#' cannot stand in a formula", "put a note in the file beside the formula"),
    "?": Advice("'?' cannot stand in a formula", "write 'a if condition else b'"),
    ".": Advice(
        "'.' stands alone", "write a name directly before and behind the dot, or a digit before a decimal point"
    ),
}
_BY_GROUP: dict[str, Callable[[Wrong], Advice]] = {
    "bad_day": _bad_day,
    "fraction": _fraction,
    "bad_number": _bad_number,
    "unclosed": _unclosed,
    "reserved": _reserved,
    "stuck": _stuck,
    "trap": _trap,
    "strange": _strange,
}
