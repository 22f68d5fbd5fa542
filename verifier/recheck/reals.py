"""Exact reals: rationals, and nodes of + - * / root log exp pi, enclosed as narrowly as needed.

An enclosure is a pair of rationals, rounded outwards; no float occurs. Whether an algebraic value is
zero, or rational, is decided by the separation bound of C. Burnikel, R. Fleischer, K. Mehlhorn,
S. Schirra: "A strong and easily computable separation bound for arithmetic expressions involving
radicals", Algorithmica 27 (2000) 87-99, in the form with divisions (ESA 2001, LNCS 2161, 254-265).
"""

from __future__ import annotations

import operator
from collections.abc import Callable
from contextlib import suppress
from fractions import Fraction
from functools import cache
from math import isqrt, prod
from typing import NamedTuple, TypeVar

ALGEBRAIC_BITS, TRANSCENDENTAL_BITS, VALUE_BITS = 65536, 4096, 10**6


class RecheckError(Exception):
    """The folder does not check; the text says where and why."""


class OpenError(Exception):
    """A value is undefined, undecided or beyond a limit here; the text is the reason."""


class OutsideError(Exception):
    """What is spoken of does not exist at this instance; the text is the reason."""


class _CoarseError(Exception):
    """An enclosure contains zero where it must not; more bits help."""


class Node(NamedTuple):
    """A real that is not literally rational: op on two reals (one for log, exp; none for pi)."""

    op: str
    x: Real
    y: Real = Fraction(0)


Real = Fraction | Node
Interval = tuple[Fraction, Fraction]
T = TypeVar("T")
TOO_DEEP = "undecided: the separation bound asks for more than 65536 bits"
PI = Node("pi", Fraction(0))
RATIONAL = {"+": operator.add, "-": operator.sub, "*": operator.mul, "/": operator.truediv}


def operate(op: str, x: Real, y: Real) -> Real:
    """Return x op y for + - * /, without the operations that change nothing."""
    if op == "/" and sign(y) == 0:
        raise OpenError("undefined: division by zero")
    if isinstance(x, Fraction) and isinstance(y, Fraction):
        return Fraction(RATIONAL[op](x, y))
    if op == "-" and x == y:
        return Fraction(0)
    if (op in "+-" and y == 0) or (op in "*/" and (y == 1 or x == 0)):
        return x
    if (op == "+" and x == 0) or (op == "*" and (x == 1 or y == 0)):
        return y
    return Node(op, x, y)


def power(x: Real, exponent: Real) -> Real:
    """Return x^exponent; a fractional exponent wants x >= 0, an irrational one x > 0."""
    e = rational(exponent)
    if e is None:
        return exp(operate("*", exponent, log(x)))
    n = e.numerator
    if e.denominator > 1:
        if sign(x) < 0:
            raise OpenError("undefined: root of a negative number")
        return root(power(x, Fraction(n)), e.denominator)
    if n < 0:
        if sign(x) == 0:
            raise OpenError("undefined: power 0 to a negative exponent")
        return operate("/", Fraction(1), power(x, Fraction(-n)))
    if n < 2:
        return x if n else Fraction(1)
    if isinstance(x, Node):
        if n > 4096:
            raise RecheckError("a power above 4096 of an irrational number")
        half = power(x, Fraction(n // 2))
        return operate("*", half, half if n % 2 == 0 else operate("*", half, x))
    if n * (max(abs(x.numerator), x.denominator).bit_length() - 1) > VALUE_BITS:
        raise RecheckError("a value of more than 10^6 bits")
    return x**n


def root(x: Real, k: int) -> Real:
    """Return the k-th root of x >= 0."""
    side = sign(x)
    if side < 0:
        raise OpenError("undefined: root of a negative number")
    if side == 0:
        return Fraction(0)
    if isinstance(x, Fraction):
        a, b = integer_root(x.numerator, k), integer_root(x.denominator, k)
        if Fraction(a**k, b**k) == x:
            return Fraction(a, b)
    return Node("root", x, Fraction(k))


def log(x: Real) -> Real:
    """Return the natural logarithm of x > 0."""
    if sign(x) <= 0:
        raise OpenError("undefined: log of a number <= 0")
    return Fraction(0) if x == 1 else Node("log", x)


def exp(x: Real) -> Real:
    """Return e^x."""
    return Fraction(1) if x == 0 else Node("exp", x)


def integer_root(n: int, k: int) -> int:
    """Return the floor of the k-th root of n >= 0, by Newton's iteration from above."""
    if k == 2 or n == 0:
        return isqrt(n)
    if k > 1000:
        raise RecheckError("a root of degree above 1000")
    x = 1 << -(-n.bit_length() // k)
    while (y := ((k - 1) * x + n // x ** (k - 1)) // k) < x:
        x = y
    return x


@cache
def _series(t: Fraction, side: int, width: int) -> Interval:
    """Enclose the sum of side^i t^(2i+1)/(2i+1), which is atanh t or arctan t, for 0 <= t <= 1/3.

    The power is low by less than 2 units of 2^-width (e -> e/9 + 1/3 + 1), a term by less than 3; as
    t^2 <= 1/9, the tail after `count` terms is less than one unit.
    """
    one, count = 1 << width, width // 3 + 2
    square, term, total = t * t * one // 1, t * one // 1, 0
    for i in range(count):
        total += side**i * (term // (2 * i + 1))
        term = term * square >> width
    slack = 3 * count + 1
    return Fraction(total - slack, one), Fraction(total + slack, one)


def _pi(bits: int) -> Interval:  # Machin: pi = 16 arctan(1/5) - 4 arctan(1/239)
    a, b = _series(Fraction(1, 5), -1, bits + 32), _series(Fraction(1, 239), -1, bits + 32)
    return 16 * a[0] - 4 * b[1], 16 * a[1] - 4 * b[0]


def _log(x: Fraction, bits: int) -> Interval:  # x = 2^e m, log m = 2 atanh((m-1)/(m+1)), 1 <= m < 2
    if x <= 0:
        raise _CoarseError
    e = x.numerator.bit_length() - x.denominator.bit_length()
    e -= x < Fraction(2) ** e
    m = x / Fraction(2) ** e
    a, two = _series((m - 1) / (m + 1), 1, bits + 64), _series(Fraction(1, 3), 1, bits + 64)
    low, high = sorted((e * two[0], e * two[1]))
    return 2 * (a[0] + low), 2 * (a[1] + high)


def _exp(x: Fraction, bits: int) -> Interval:  # x = n log 2 + rest, 0 < rest < 3/2, Taylor's series
    if abs(x) > VALUE_BITS:
        raise RecheckError("a value of more than 10^6 bits")
    one = 1 << (bits + 64)
    two = [2 * end for end in _series(Fraction(1, 3), 1, bits + 64)]
    n = x // two[1] - 1
    rest = sorted(x - n * end for end in two)
    r, s = rest[0] * one // 1, -(-rest[1] * one // 1)
    low, high, a, b, i = 0, 0, one, one, 0
    while b > 1:  # a <= rest^i/i! <= b in units; once b = 1 the terms halve, so the tail is < 2
        low, high, i = low + a, high + b, i + 1
        a, b = a * r // (i * one), -(-b * s // (i * one))
    return low * Fraction(2) ** n / one, (high + 2) * Fraction(2) ** n / one


def _root(x: Fraction, k: int, bits: int) -> Interval:
    x = max(x, Fraction(0))  # what stands under a root is known to be >= 0
    small = max(0, x.denominator.bit_length() - x.numerator.bit_length())
    scale = 1 << (bits + small // k + 2)
    low = integer_root(x * scale**k // 1, k)
    return Fraction(low, scale), Fraction(low + 1, scale)


def _times(a: Interval, b: Interval, _bits: int = 0) -> Interval:
    products = [x * y for x in a for y in b]
    return min(products), max(products)


def _over(a: Interval, b: Interval, _bits: int) -> Interval:
    if b[0] <= 0 <= b[1]:
        raise _CoarseError
    return _times(a, (1 / b[1], 1 / b[0]))


INTERVALS: dict[str, Callable[[Interval, Interval, int], Interval]] = {
    "+": lambda a, b, _: (a[0] + b[0], a[1] + b[1]),
    "-": lambda a, b, _: (a[0] - b[1], a[1] - b[0]),
    "*": _times,
    "/": _over,
    "root": lambda a, k, bits: (_root(a[0], int(k[0]), bits)[0], _root(a[1], int(k[0]), bits)[1]),
    "log": lambda a, _, bits: (_log(a[0], bits)[0], _log(a[1], bits)[1]),
    "exp": lambda a, _, bits: (_exp(a[0], bits)[0], _exp(a[1], bits)[1]),
    "pi": lambda _a, _b, bits: _pi(bits),
}


def _down(x: Fraction, bits: int) -> Fraction:
    scale = Fraction(2) ** (bits - x.numerator.bit_length() + x.denominator.bit_length())
    return x * scale // 1 / scale


def _outwards(a: Interval, bits: int) -> Interval:
    return _down(a[0], bits), -_down(-a[1], bits)


def enclose(x: Real, bits: int) -> Interval:
    """Enclose x, every step rounded outwards to `bits` bits."""
    if isinstance(x, Fraction):
        return x, x
    return _outwards(INTERVALS[x.op](enclose(x.x, bits), enclose(x.y, bits), bits), bits)


def settle(x: Real, decide: Callable[[Fraction, Fraction], T | None]) -> T:
    """Return the first answer that `decide` gives to an enclosure of x with 64, 128, ... bits."""
    limit = 2 * ALGEBRAIC_BITS if algebraic(x) else TRANSCENDENTAL_BITS
    bits = 64
    while bits <= limit:
        with suppress(_CoarseError):
            if (answer := decide(*enclose(x, bits))) is not None:
                return answer
        bits *= 2
    raise OpenError(TOO_DEEP if algebraic(x) else "undecided at 4096 bits")


def algebraic(x: Real) -> bool:
    """Tell whether x is built without pi, log and exp."""
    return isinstance(x, Fraction) or (
        x.op not in ("pi", "log", "exp") and algebraic(x.x) and algebraic(x.y)
    )


def _separation(x: Real) -> tuple[int, int, int]:
    """Return D, log2 u and log2 l of the theorem: an algebraic x != 0 is at least 1/(u^(D-1) l)."""
    degrees: dict[Node, int] = {}

    def bounds(x: Real) -> tuple[int, int]:
        if isinstance(x, Fraction):
            return (abs(x.numerator) - 1).bit_length(), (x.denominator - 1).bit_length()
        (u, low), (v, lower) = bounds(x.x), bounds(x.y)
        if x.op == "root":
            k = degrees[x] = int(Fraction(x.y))
            if u >= low:
                return -(-(u + (k - 1) * low) // k), low
            return u, -(-((k - 1) * u + low) // k)
        if x.op in "*/":
            return (u + v, low + lower) if x.op == "*" else (u + lower, low + v)
        return max(u + lower, v + low) + 1, low + lower

    u, low = bounds(x)
    return prod(degrees.values()), u, low


def sign(x: Real) -> int:
    """Return the sign of x, proved."""
    if isinstance(x, Fraction):
        return (x > 0) - (x < 0)
    degree, u, low = _separation(x) if algebraic(x) else (1, 0, ALGEBRAIC_BITS + 1)
    needed = (degree - 1) * u + low
    least = Fraction(1, 1 << needed) if needed <= ALGEBRAIC_BITS else Fraction(0)
    return settle(
        x, lambda a, b: 1 if a > 0 else -1 if b < 0 else 0 if max(-a, b) < least else None
    )


def compare(x: Real, y: Real) -> int:
    """Return the sign of x - y."""
    return sign(operate("-", x, y))


def rational(x: Real) -> Fraction | None:
    """Return x as a rational, or None where it is not; what has pi, log or exp in it is not.

    The denominator of a rational value is at most Q = l^D (the norm of the theorem's denominator),
    so the best approximation with such a denominator to a point within 1/(4 Q^2) of it is itself.
    """
    if isinstance(x, Fraction) or not algebraic(x):
        return x if isinstance(x, Fraction) else None
    degree, _, low = _separation(x)
    if 2 * degree * low + 2 > ALGEBRAIC_BITS:
        raise OpenError(TOO_DEEP)
    width = Fraction(1, 1 << (2 * degree * low + 2))
    middle = settle(x, lambda a, b: (a + b) / 2 if b - a < width else None)
    candidate = middle.limit_denominator(1 << degree * low)
    return candidate if compare(x, candidate) == 0 else None


def floor(x: Real) -> int:
    """Return the largest integer <= x."""
    value = rational(x)
    return value // 1 if value is not None else settle(x, lambda a, b: _same(a // 1, b // 1))


def rounded(x: Real, places: int) -> Fraction:
    """Return x rounded to so many decimals, half to even."""
    scaled = operate("*", x, Fraction(10) ** places)
    value = rational(scaled)
    whole = floor(operate("+", scaled, Fraction(1, 2))) if value is None else round(value)
    return whole / Fraction(10) ** places


def way(x: Real, y: Real) -> str:
    """Return by what a comparison of x and y is decided."""
    if rational(x) is not None and rational(y) is not None:
        return "rational"
    return "surd" if algebraic(x) and algebraic(y) else "enclosure"


def _same(a: int, b: int) -> int | None:
    return a if a == b else None


def decimals(x: Fraction, places: int) -> str:
    """Write x, a multiple of 10^-places, with exactly so many decimals."""
    digits = str(abs(x) * 10**places // 1).zfill(places + 1)
    whole, rest = digits[: len(digits) - places], digits[len(digits) - places :]
    return "-" * (x < 0) + whole + "." * (places > 0) + rest


def canonical(x: Real) -> str | dict[str, str]:
    """Write x: a/b in lowest terms, or else its floor and ceiling at 12 significant digits."""
    value = rational(x)
    if value is not None:
        return str(value)

    def digits(low: Fraction, high: Fraction) -> dict[str, str] | None:
        e, f = _exponent(low), _exponent(high)
        unit = Fraction(10) ** (e - 11)
        if low * high <= 0 or e != f or low // unit != high // unit:
            return None  # x itself is no multiple of the unit, as it is not rational
        places, below = max(0, 11 - e), low // unit * unit
        return {"lower": decimals(below, places), "upper": decimals(below + unit, places)}

    return settle(x, digits)


def _exponent(x: Fraction) -> int:  # floor(log10 |x|), 0 for 0
    e = len(str(abs(x.numerator))) - len(str(x.denominator))
    return e - (0 < abs(x) < Fraction(10) ** e)
