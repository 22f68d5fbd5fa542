"""The canonical text of an exact value."""

from fractions import Fraction

from verifier.errors import UndecidedError
from verifier.exact.decide import OPEN, precisions, settled
from verifier.exact.enclosures import ends
from verifier.exact.nodes import Real

DIGITS = 12

Canonical = str | dict[str, str]


def rational_text(x: Fraction | int) -> str:
    """Return `a/b` in lowest terms, or `a` for an integer."""
    return str(Fraction(x))


def canonical(x: Real) -> Canonical:
    """Return a rational as text, and any other number as its floor and ceiling at 12 digits.

    Raises
    ------
    UndecidedError
        If the limits of precision settle neither rationality nor the digits.

    Examples
    --------
    >>> from verifier.exact.reals import root
    >>> canonical(root(Fraction(2), 2))
    {'lower': '1.41421356237', 'upper': '1.41421356238'}
    """
    x = settled(x)
    if isinstance(x, Fraction):
        return rational_text(x)
    for bits in precisions(x):
        low, high = ends(x.ball(bits))
        if low.numerator * high.numerator <= 0:
            continue
        places = DIGITS - 1 - _exponent(low)
        if _exponent(high) == DIGITS - 1 - places and _scaled(low, places) == _scaled(high, places):
            below = _scaled(low, places)
            return {"lower": _decimal(below, places), "upper": _decimal(below + 1, places)}
    raise UndecidedError(OPEN)


def _exponent(x: Fraction) -> int:
    """Return floor(log10 |x|) of a nonzero rational."""
    x = abs(x)
    guess = (x.numerator.bit_length() - x.denominator.bit_length()) * 30103 // 100_000
    while Fraction(10) ** guess > x:
        guess -= 1
    while Fraction(10) ** (guess + 1) <= x:
        guess += 1
    return guess


def _scaled(x: Fraction, places: int) -> int:
    """Return floor(x 10^places)."""
    if places >= 0:
        return x.numerator * int(10**places) // x.denominator
    return x.numerator // (x.denominator * int(10**-places))


def _decimal(scaled: int, places: int) -> str:
    """Return scaled / 10^places in plain decimals."""
    if places <= 0:
        return str(scaled * 10**-places)
    digits = str(abs(scaled)).rjust(places + 1, "0")
    sign = "-" if scaled < 0 else ""
    return f"{sign}{digits[:-places]}.{digits[-places:]}"
