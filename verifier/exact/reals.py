"""Arithmetic of exact reals: rationals stay rational, signs are decided where they matter."""

from fractions import Fraction

from verifier.errors import CaseError, UndecidedError, UndefinedError
from verifier.exact.decide import OPEN, compare, precisions, rational_value, settled, sign
from verifier.exact.enclosures import ends
from verifier.exact.nodes import Node, Real, ball

MOST_BITS = 10**6
TOO_LARGE = "a value of more than 10^6 bits"

PI: Real = Node("pi")
ZERO, ONE = Fraction(0), Fraction(1)


def add(x: Real, y: Real) -> Real:
    """Return x + y."""
    if isinstance(x, Fraction) and isinstance(y, Fraction):
        return _small(x + y)
    if x == 0:
        return y
    return x if y == 0 else Node("add", x, y)


def negate(x: Real) -> Real:
    """Return -x."""
    return -x if isinstance(x, Fraction) else Node("multiply", Fraction(-1), x)


def subtract(x: Real, y: Real) -> Real:
    """Return x - y; 0 for numbers made in the same way."""
    return ZERO if x == y else add(x, negate(y))


def multiply(x: Real, y: Real) -> Real:
    """Return x y."""
    if isinstance(x, Fraction) and isinstance(y, Fraction):
        return _small(x * y)
    if x == 0 or y == 0:
        return ZERO
    if x == 1:
        return y
    return x if y == 1 else Node("multiply", x, y)


def divide(x: Real, y: Real) -> Real:
    """Return x / y.

    Raises
    ------
    UndefinedError
        If y is 0.
    """
    if sign(y) == 0:
        raise UndefinedError("undefined: division by zero")
    if isinstance(x, Fraction) and isinstance(y, Fraction):
        return _small(x / y)
    if x == 0:
        return ZERO
    return x if y == 1 else Node("divide", x, y)


def power(base: Real, exponent: Real) -> Real:
    """Return base^exponent; a fractional or irrational exponent wants a base that is not negative.

    Raises
    ------
    UndefinedError
        For 0 to a negative exponent, or an exponent that is no integer with a negative base.
    CaseError
        If the value has more than 10^6 bits.
    """
    exponent = settled(exponent)
    if not isinstance(exponent, Fraction):
        return _transcendental_power(base, exponent)
    if exponent.denominator == 1:
        return _integer_power(base, exponent.numerator)
    order = sign(base)
    if order < 0:
        raise UndefinedError("undefined: root of a negative number")
    return root(_integer_power(base, exponent.numerator), exponent.denominator)


def _integer_power(base: Real, exponent: int) -> Real:
    if exponent < 0 and sign(base) == 0:
        raise UndefinedError("undefined: power 0 to a negative exponent")
    if exponent == 0:
        return ONE
    if isinstance(base, Fraction):
        bits = max(abs(base.numerator).bit_length(), base.denominator.bit_length())
        if base not in (0, 1, -1) and (bits - 1) * abs(exponent) > MOST_BITS:
            raise CaseError(TOO_LARGE)
        return base**exponent
    if abs(exponent) > MOST_BITS:
        raise CaseError(TOO_LARGE)
    return base if exponent == 1 else Node("power", base, exponent)


def _transcendental_power(base: Real, exponent: Node) -> Real:
    order = sign(base)
    if order < 0 or (order == 0 and sign(exponent) <= 0):
        raise UndefinedError("undefined: root of a negative number")
    return ZERO if order == 0 else exp(multiply(exponent, log(base)))


def root(x: Real, index: int) -> Real:
    """Return the index-th root of x >= 0.

    Raises
    ------
    UndefinedError
        If x is negative.
    """
    order = sign(x)
    if order < 0:
        raise UndefinedError("undefined: root of a negative number")
    if order == 0:
        return ZERO
    if isinstance(x, Fraction):
        above, below = _whole_root(x.numerator, index), _whole_root(x.denominator, index)
        if above is not None and below is not None:
            return Fraction(above, below)
    if index > MOST_BITS:
        raise CaseError(TOO_LARGE)
    return Node("root", x, index)


def _whole_root(number: int, index: int) -> int | None:
    """Return the exact root of a positive integer, or None."""
    low, high = 0, 1 << -(-number.bit_length() // index)
    while low < high:
        middle = (low + high + 1) // 2
        if middle**index <= number:
            low = middle
        else:
            high = middle - 1
    return low if low**index == number else None


def log(x: Real) -> Real:
    """Return the natural logarithm of x > 0.

    Raises
    ------
    UndefinedError
        If x <= 0.
    """
    x = settled(x)
    if sign(x) <= 0:
        raise UndefinedError("undefined: log of a number <= 0")
    return ZERO if x == 1 else Node("log", x)


def exp(x: Real) -> Real:
    """Return e^x.

    Raises
    ------
    CaseError
        If the value has more than 10^6 bits.
    """
    x = settled(x)
    if x == 0:
        return ONE
    if not abs(ball(x, 64)) < MOST_BITS // 2:
        raise CaseError(TOO_LARGE)
    return Node("exp", x)


def absolute(x: Real) -> Real:
    """Return the absolute value."""
    return x if sign(x) >= 0 else negate(x)


def minimum(x: Real, y: Real) -> Real:
    """Return the smaller, the first of equals."""
    return x if compare(x, y) <= 0 else y


def maximum(x: Real, y: Real) -> Real:
    """Return the larger, the first of equals."""
    return x if compare(x, y) >= 0 else y


def floor(x: Real) -> Fraction:
    """Return the largest integer that is not above x."""
    if isinstance(x, Fraction):
        return Fraction(x.numerator // x.denominator)
    for bits in precisions(x):
        low, high = (end.numerator // end.denominator for end in ends(x.ball(bits)))
        if low == high:
            return Fraction(low)
        if x.algebraic and high == low + 1:
            return Fraction(high if compare(x, Fraction(high)) >= 0 else low)
    raise UndecidedError(OPEN)


def ceiling(x: Real) -> Fraction:
    """Return the least integer that is not below x."""
    return -floor(negate(x))


def modulo(x: Real, y: Real) -> Fraction:
    """Return x mod y in 0..y-1, for integers, y > 0.

    Raises
    ------
    UndefinedError
        If one is no integer, or y <= 0.
    """
    first, second = rational_value(x), rational_value(y)
    if first is None or second is None or first.denominator != 1 or second.denominator != 1:
        raise UndefinedError("undefined: mod wants an integer")
    if second <= 0:
        raise UndefinedError("undefined: mod wants a positive modulus")
    return Fraction(first.numerator % second.numerator)


def rounded(x: Real, digits: int) -> Fraction:
    """Return x rounded to `digits` decimals, half to even.

    Examples
    --------
    >>> str(rounded(Fraction(5, 2), 0)), str(rounded(root(Fraction(2), 2), 3))
    ('2', '707/500')
    """
    if abs(digits) > 1000:
        raise CaseError("round wants at most 1000 decimals")
    scale = Fraction(10) ** digits
    scaled = settled(multiply(x, scale))
    if isinstance(scaled, Fraction):
        return Fraction(round(scaled)) / scale
    return floor(add(scaled, Fraction(1, 2))) / scale


def _small(x: Fraction) -> Fraction:
    if max(abs(x.numerator).bit_length(), x.denominator.bit_length()) > MOST_BITS:
        raise CaseError(TOO_LARGE)
    return x
