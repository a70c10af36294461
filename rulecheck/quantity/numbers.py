"""Numbers as text: read as exact rationals, shown as decimals."""

from __future__ import annotations

import re
from fractions import Fraction
from functools import lru_cache

MAXIMUM_DIGITS = 400
MAXIMUM_EXPONENT = 999

NUMBER_PATTERN = r"(?:0|[1-9][0-9]*)(?:\.[0-9]+)?(?:[eE][+-]?[0-9]{1,3})?"
"""An unsigned number as the language writes it, without the bound on its digits."""

_NUMBER = re.compile(rf"([+-]?)({NUMBER_PATTERN})", re.ASCII)
_MINUSES = "\u2010-\u2015\u2212\ufe63\uff0d"
_BLANKS = "\u00a0\u1680\u2000-\u200b\u202f\u205f\u2060\u3000\ufeff"
_LONGEST_PLAIN = 9
_SMALLEST_PLAIN = -5
_LONGEST_INTEGER = 4000
_QUOTED_LENGTH = 40


class NumberFault(ValueError):
    """Raised where text is no number: what is wrong, what to do, and the code of the diagnostic."""

    def __init__(self, message: str, advice: str = "", code: str = "bad-number") -> None:
        super().__init__(message)
        self.message = message
        self.advice = advice
        self.code = code

    def __reduce__(self) -> tuple[type[NumberFault], tuple[str, str, str]]:
        return NumberFault, (self.message, self.advice, self.code)


def read_number(text: str) -> Fraction:
    """The exact value of a decimal number: `1900`, `-3.5`, `+2`, `1e3`, `1.5e-6`.

    At most 400 digits, and an exponent from -999 to 999. Raises `NumberFault` for anything else:
    no infinities, no hexadecimal digits, no separators, no decimal comma, no leading zeros.

    >>> read_number("1.9")
    Fraction(19, 10)
    >>> read_number("1,9")
    Traceback (most recent call last):
    rulecheck.quantity.numbers.NumberFault: '1,9' is not a number
    """
    found = _NUMBER.fullmatch(text)
    if found is None:
        raise _fault(text)
    mantissa, _, exponent = found[2].lower().partition("e")
    if len(mantissa) - ("." in mantissa) > MAXIMUM_DIGITS:
        raise NumberFault(
            f"the number {quoted(text)} has too many digits",
            f"write at most {MAXIMUM_DIGITS} digits",
            "too-large",
        )
    whole, _, decimals = mantissa.partition(".")
    power = int(exponent or "0") - len(decimals)
    number = int(whole + decimals)
    value = Fraction(number * 10**power) if power >= 0 else Fraction(number, 10**-power)
    return -value if found[1] == "-" else value


def quoted(text: str) -> str:
    """Text in quotes for a message, cut where it is long; what cannot be seen is written as a code.

    >>> quoted("1" * 100)
    "'1111111111111111111111111111111111111111...'"
    """
    cut = text if len(text) <= _QUOTED_LENGTH else text[:_QUOTED_LENGTH] + "..."
    shown = "".join(item if item.isprintable() else f"<U+{ord(item):04X}>" for item in cut)
    return f"'{shown}'"


def _fault(text: str) -> NumberFault:
    for pattern, advice, code in _FAULTS:
        if re.search(pattern, text, re.ASCII | re.IGNORECASE):
            message = f"{quoted(text)} is not a number" if text.strip() else "a number is missing"
            if code == "too-large":
                message = f"the exponent of {quoted(text)} is out of bounds"
            return NumberFault(message, advice, code)
    return NumberFault(f"{quoted(text)} is not a number", "write digits with a point, such as 1900, -3.5 or 1.5e-6")


# Compiled where one is needed: most runs meet no such text.
_FAULTS: tuple[tuple[str, str, str], ...] = (
    (r"^\s*$", "write a number, such as 1900", "bad-number"),
    (f"[{_MINUSES}]", "write the minus as the hyphen of the keyboard: '-'", "bad-number"),
    (f"[{_BLANKS}]", "write ordinary blanks: a no-break blank or the like stands here", "bad-number"),
    (r"^[+-]?(inf|infinity|nan|\.inf|\.nan)$", "write a finite number", "bad-number"),
    (r"^[+-]?0[xob][0-9a-f_]+$", "write the number in decimal digits", "bad-number"),
    (r"^[+-]?[0-9.]*[0-9](_[0-9.]+)+$", "write the digits without underscores", "bad-number"),
    (r"^[+-]?[0-9.]*('[0-9.]+)+$", "write the digits without separators", "bad-number"),
    (r"^[+-]?[0-9.]*,[0-9.,]*(e[+-]?[0-9]+)?$", "write the decimal mark as a point and thousands without a mark", "bad-number"),
    ("^[+-]?[0-9]+ *[/\u2044] *[0-9]+$", "write a fraction as a decimal: 0.375 for 3/8", "bad-number"),
    (r"^[+-]?0[0-9]+(\.[0-9]*)?(e[+-]?[0-9]+)?$", "write the number without leading zeros", "bad-number"),
    (r"^[+-]?\.[0-9]+(e[+-]?[0-9]+)?$", "write a digit before the point: 0.5", "bad-number"),
    (r"^[+-]?[0-9]+\.(e[+-]?[0-9]+)?$", "write a digit behind the point, or no point", "bad-number"),
    (r"^[+-]?[0-9]+(\.[0-9]+)?e[+-]?[0-9]{4,}$", f"write an exponent from -{MAXIMUM_EXPONENT} to {MAXIMUM_EXPONENT}", "too-large"),
    (r"^[+-]?[0-9]+(\.[0-9]+)?e[+-]?([0-9]*\.[0-9]*)?$", "write a whole exponent, such as 1.5e-6", "bad-number"),
    (r"^[+-]{2,}|^[+-] ", "write one sign, directly before the digits", "bad-number"),
    (r"^[+-]?[0-9]+( [0-9.]+)+$", "write the digits without blanks", "bad-number"),
    (r"[^\x00-\x7f]", "write the digits 0 to 9", "bad-number"),
)  # fmt: skip


@lru_cache(maxsize=4096)
def show_number(value: Fraction, digits: int = 6) -> str:
    """A decimal for the screen: exact where it ends within `digits` significant digits, else rounded to them.

    Ties go away from zero. A value that is not zero is never shown as zero. Below 1e9 the digits of the whole
    part are all shown; values from 1e9 on and below 1e-5 carry an exponent.

    >>> show_number(Fraction(19, 10)), show_number(Fraction(-2, 3), 3), show_number(Fraction(1, 10**9))
    ('1.9', '-0.667', '1e-9')
    """
    if not value:
        return "0"
    whole = _leading(abs(value)) + 1
    number, power = _rounded(abs(value), max(digits, whole) if whole <= _LONGEST_PLAIN else digits)
    text = str(number)
    stripped = text.rstrip("0")
    power += len(text) - len(stripped)
    leading = power + len(stripped) - 1
    plain = _SMALLEST_PLAIN <= leading < _LONGEST_PLAIN
    shown = _plain(stripped, power) if plain else _scientific(stripped, leading)
    return f"-{shown}" if value < 0 else shown


@lru_cache(maxsize=4096)
def show_exact(value: Fraction) -> str:
    """The value itself: a decimal where one ends, else a fraction in lowest terms.

    `read_number` reads a decimal back to the same value, as far as its bounds go.

    >>> show_exact(Fraction(1900)), show_exact(Fraction(3, 10)), show_exact(Fraction(1, 3))
    ('1900', '0.3', '1/3')
    """
    decimals = _decimals(value.denominator)
    if max(value.numerator.bit_length(), value.denominator.bit_length()) > 3 * _LONGEST_INTEGER:
        # Longer than Python writes an integer: nothing a file can state, only what a calculation may reach.
        return f"about {show_number(value, 17)}"
    if decimals is None:
        return f"{value.numerator}/{value.denominator}"
    if not value:
        return "0"
    text = str(abs(value.numerator) * 10**decimals // value.denominator)
    stripped = text.rstrip("0")
    power = len(text) - len(stripped) - decimals
    leading = power + len(stripped) - 1
    plain = -_LONGEST_PLAIN <= leading <= 2 * _LONGEST_PLAIN
    shown = _plain(stripped, power) if plain else _scientific(stripped, leading)
    return f"-{shown}" if value < 0 else shown


def _rounded(value: Fraction, digits: int) -> tuple[int, int]:
    """`number * 10^power` with `digits` digits, nearest to a positive value."""
    power = _leading(value) - digits + 1
    top, bottom = value.numerator, value.denominator
    if power >= 0:
        bottom *= 10**power
    else:
        top *= 10**-power
    return (2 * top + bottom) // (2 * bottom), power


def _leading(value: Fraction) -> int:
    """The power of ten of the first digit of a positive value."""
    top, bottom = value.numerator, value.denominator
    guess = (top.bit_length() - bottom.bit_length()) * 30103 // 100000 - 1
    while _reaches(top, bottom, guess + 1):
        guess += 1
    while not _reaches(top, bottom, guess):
        guess -= 1
    return guess


def _reaches(top: int, bottom: int, power: int) -> bool:
    """True where `top / bottom` is at least ten to the power; in whole numbers, since this runs for every figure."""
    if power >= 0:
        return bool(top >= bottom * 10**power)
    return bool(top * 10**-power >= bottom)


def _decimals(denominator: int) -> int | None:
    """How many decimals a fraction in lowest terms with this denominator has; None where they do not end."""
    twos = (denominator & -denominator).bit_length() - 1
    rest, fives = denominator >> twos, 0
    while rest % 5 == 0:
        rest //= 5
        fives += 1
    return max(twos, fives) if rest == 1 else None


def _plain(digits: str, power: int) -> str:
    if power >= 0:
        return digits + "0" * power
    padded = digits.rjust(1 - power, "0")
    return f"{padded[:power]}.{padded[power:]}"


def _scientific(digits: str, leading: int) -> str:
    exponent = max(-MAXIMUM_EXPONENT, min(leading, MAXIMUM_EXPONENT)) if abs(leading) <= 1398 else leading
    mantissa = _plain(digits, leading - len(digits) + 1 - exponent)
    return f"{mantissa}e{exponent}"
