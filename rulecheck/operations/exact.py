"""Exact numbers and balls: the one typed module behind which the library for them stands.

A number is a `Rational`, a `PiNumber` (a quotient of polynomials in pi), or a `Ball`: a midpoint with
a radius that encloses the true value. Since pi is transcendental, a polynomial in it that is not zero
has a value that is not zero, so the sign of every exact number can be decided.
"""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from typing import Any, TypeGuard

from flint import arb as Ball
from flint import ctx as precision
from flint import fmpq as Rational
from flint import fmpq_poly as Polynomial
from flint import fmpz as Whole
from flint.utils.flint_exceptions import DomainError

from rulecheck.operations.values import Monomial

# Numerator or denominator beyond this many bits: the exact rules give up, and balls go on.
BITS = 100_000
# Balls grow to this precision where the sign of an exact number is looked for.
_SIGN_BITS = 1 << 20

__all__ = ["BITS", "Ball", "Exact", "PiNumber", "Polynomial", "Rational", "Whole", "precision"]


class PiNumber:
    """A quotient of two polynomials in pi with rational coefficients, that is not itself rational.

    Kept without common factors and with a monic denominator, so equal numbers have equal parts. Made
    by `quotient` and by arithmetic, which give a plain `Rational` where pi falls out.

    >>> turn = exact_number(Monomial(Fraction(2), 1))
    >>> turn / turn
    1
    >>> turn > 6
    True
    """

    __slots__ = ("denominator", "numerator")

    def __init__(self, numerator: Polynomial, denominator: Polynomial) -> None:
        self.numerator = numerator
        self.denominator = denominator

    def __add__(self, other: Any) -> Any:
        if type(other) is Ball:
            return self.to_ball() + other
        top, bottom = _parts(other)
        if bottom == self.denominator:
            return quotient(self.numerator + top, bottom)
        return quotient(self.numerator * bottom + top * self.denominator, self.denominator * bottom)

    __radd__ = __add__

    def __neg__(self) -> PiNumber:
        return PiNumber(-self.numerator, self.denominator)

    def __sub__(self, other: Any) -> Any:
        return self + -other

    def __rsub__(self, other: Any) -> Any:
        return -self + other

    def __mul__(self, other: Any) -> Any:
        if type(other) is Ball:
            return self.to_ball() * other
        top, bottom = _parts(other)
        return quotient(self.numerator * top, self.denominator * bottom)

    __rmul__ = __mul__

    def __truediv__(self, other: Any) -> Any:
        if type(other) is Ball:
            return self.to_ball() / other
        top, bottom = _parts(other)
        return quotient(self.numerator * bottom, self.denominator * top)

    def __rtruediv__(self, other: Any) -> Any:
        if type(other) is Ball:
            return other / self.to_ball()
        top, bottom = _parts(other)
        return quotient(top * self.denominator, bottom * self.numerator)

    def __pow__(self, exponent: int) -> Any:
        if exponent < 0:
            return quotient(self.denominator**-exponent, self.numerator**-exponent)
        return quotient(self.numerator**exponent, self.denominator**exponent)

    def __abs__(self) -> PiNumber:
        return self if self.sign() > 0 else -self

    def __bool__(self) -> bool:
        return True

    def __eq__(self, other: object) -> bool:
        return (
            isinstance(other, PiNumber) and self.numerator == other.numerator and self.denominator == other.denominator
        )

    def __hash__(self) -> int:
        return hash((str(self.numerator), str(self.denominator)))

    def __lt__(self, other: Any) -> bool:
        return sign(self - other) < 0

    def __gt__(self, other: Any) -> bool:
        return sign(self - other) > 0

    def __le__(self, other: Any) -> bool:
        return sign(self - other) <= 0

    def __ge__(self, other: Any) -> bool:
        return sign(self - other) >= 0

    def __repr__(self) -> str:
        shown = str(self.numerator).replace("x", "pi")
        below = str(self.denominator).replace("x", "pi")
        return shown if below == "1" else f"({shown})/({below})"

    def sign(self) -> int:
        """1 or -1; always decided, since pi is transcendental."""
        bits = max(64, precision.prec)
        while bits <= _SIGN_BITS:
            ball = at_precision(self, bits)
            if ball > 0:
                return 1
            if ball < 0:
                return -1
            bits *= 2
        raise OverflowError("a sign beyond a million bits")

    def to_ball(self) -> Ball:
        """A ball around the value at the precision in force."""
        top = _value_at_pi(self.numerator)
        return top if self.denominator.is_one() else top / _value_at_pi(self.denominator)

    def bits(self) -> int:
        """A measure of size: the number of coefficients times the bits of the largest."""
        return max(_polynomial_bits(self.numerator), _polynomial_bits(self.denominator))


Exact = Rational | PiNumber
_ONE = Polynomial([1])


def quotient(top: Polynomial, bottom: Polynomial) -> Exact:
    """The number `top / bottom`, in lowest terms; `bottom` is not zero."""
    if bottom.degree() > 0:
        shared = top.gcd(bottom)
        if shared.degree() > 0:
            top, bottom = top // shared, bottom // shared
    lead = bottom.leading_coefficient()
    if lead != 1:
        top, bottom = top / lead, bottom / lead
    if top.degree() <= 0 and bottom.degree() == 0:
        return Rational(top[0])
    return PiNumber(top, bottom)


def exact_number(value: Monomial) -> Exact:
    """The exact number that a constant stands for."""
    rational = from_fraction(value.rational)
    if value.is_rational:
        return rational
    shifted = Polynomial([0] * abs(value.power) + [1])
    return quotient(shifted * rational, _ONE) if value.power > 0 else quotient(_ONE * rational, shifted)


def from_fraction(value: Fraction) -> Rational:
    """The same rational.

    >>> from_fraction(Fraction(3, 2))
    3/2
    """
    return Rational(value.numerator, value.denominator)


def to_fraction(value: Rational) -> Fraction:
    """The same rational as a value of the standard library."""
    return Fraction(int(value.numer()), int(value.denom()))


def pi_multiple(value: Exact) -> Rational | None:
    """The rational r where `value` is r times pi, else None.

    >>> pi_multiple(exact_number(Monomial(Fraction(1, 6), 1)))
    1/6
    """
    if isinstance(value, Rational):
        return value if not value else None
    if value.denominator.is_one() and value.numerator.degree() == 1 and not value.numerator[0]:
        return Rational(value.numerator[1])
    return None


def pi_times(value: Rational) -> Exact:
    """`value` times pi."""
    return quotient(Polynomial([0, value]), _ONE)


def sign(value: Exact) -> int:
    """-1, 0 or 1.

    >>> sign(Rational(-1, 3)), sign(exact_number(Monomial(Fraction(1), 1)) - Rational(22, 7))
    (-1, -1)
    """
    if isinstance(value, PiNumber):
        return value.sign()
    # The numerator alone: twice as quick as comparing the rational with zero.
    return 0 if not value else 1 if value.p > 0 else -1


def magnitude(value: Exact) -> Exact:
    """The value without its sign."""
    return value if sign(value) >= 0 else -value


def size(value: Exact) -> int:
    """Bits of the larger part; for a number with pi, of all its coefficients together."""
    return value.height_bits() if isinstance(value, Rational) else value.bits()


def to_ball(value: Any) -> Ball:
    """A ball around any number, at the precision in force."""
    if isinstance(value, Ball):
        return value
    return value.to_ball() if isinstance(value, PiNumber) else Ball(value)


def at_precision(value: Any, bits: int) -> Ball:
    """A ball around any number at a precision of its own."""
    before = precision.prec
    precision.prec = bits
    try:
        return to_ball(value)
    finally:
        precision.prec = before


def whole_below(value: Exact) -> Whole:
    """The largest whole number that is not above an exact number.

    >>> whole_below(Rational(-7, 2)), whole_below(exact_number(Monomial(Fraction(1), 1)))
    (-4, 3)
    """
    if isinstance(value, Rational):
        return value.floor()
    bits = max(64, precision.prec)
    while bits <= _SIGN_BITS:
        # Pi does not fall out of a PiNumber, so it is no whole number and the search ends.
        found = at_precision(value, bits).floor().unique_fmpz()
        if found is not None:
            return found
        bits *= 2
    raise OverflowError("a whole part beyond a million bits")


def exact_root(value: Exact, degree: int) -> Exact | None:
    """The root that is not negative, where it is exact, else None; `value` is not negative.

    >>> exact_root(Rational(8, 27), 3), exact_root(Rational(2), 2)
    (2/3, None)
    """
    if isinstance(value, PiNumber):
        return _polynomial_root(value) if degree == 2 else None
    top, bottom = value.numer().root(degree), value.denom().root(degree)
    if top**degree == value.numer() and bottom**degree == value.denom():
        return Rational(top, bottom)
    return None


def _polynomial_root(value: PiNumber) -> Exact | None:
    try:
        root = quotient(value.numerator.sqrt(), value.denominator.sqrt())
    except (DomainError, ValueError):  # flint raises the one or the other
        return None
    return magnitude(root)


def is_exact(value: object) -> TypeGuard[Exact]:
    """True for a number in the exact ring."""
    return isinstance(value, (Rational, PiNumber))


def all_exact(values: Sequence[Any]) -> bool:
    """True where every number is in the exact ring."""
    return all(isinstance(value, (Rational, PiNumber)) for value in values)


def _parts(value: Any) -> tuple[Polynomial, Polynomial]:
    if isinstance(value, PiNumber):
        return value.numerator, value.denominator
    return Polynomial([value]), _ONE


def _value_at_pi(polynomial: Polynomial) -> Ball:
    """Horner's rule."""
    pi, result = Ball.pi(), Ball(0)
    for coefficient in reversed(polynomial.coeffs()):
        result = result * pi + coefficient
    return result


def _polynomial_bits(polynomial: Polynomial) -> int:
    return polynomial.length() * max(
        (Rational(coefficient).height_bits() for coefficient in polynomial.coeffs()), default=1
    )
