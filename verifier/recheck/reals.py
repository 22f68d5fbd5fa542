"""Exact reals: rationals, and nodes of + - * / root log exp pi, enclosed as narrowly as needed.

Enclosures are computed by Python's decimal module, rounded outwards; no float occurs. Zero and
rationality of an algebraic value are decided by the separation bound of C. Burnikel, S. Funke,
K. Mehlhorn, S. Schirra, S. Schmitt, A separation bound for real algebraic expressions, ESA 2001,
LNCS 2161, 254-265.
"""

import operator
from collections.abc import Callable
from contextlib import suppress
from decimal import MAX_EMAX, MIN_EMIN, ROUND_CEILING, ROUND_FLOOR, Context, Decimal
from fractions import Fraction
from functools import cache
from math import isqrt, prod
from typing import NamedTuple, TypeVar, Union

ALGEBRAIC_BITS, TRANSCENDENTAL_BITS, VALUE_BITS = 65536, 4096, 10**6
TOO_DEEP = "undecided: the separation bound asks for more than 65536 bits"
RATIONAL = {"+": operator.add, "-": operator.sub, "*": operator.mul, "/": operator.truediv}
ZERO, ONE = Fraction(0), Fraction(1)
T = TypeVar("T")


class RecheckError(Exception):
    """The folder does not check; the text says where and why."""


class OpenError(Exception):
    """A value is undefined, undecided or beyond a limit here; the text is the reason."""


class OutsideError(Exception):
    """What is spoken of does not exist at this instance; the text is the reason."""


class Node(NamedTuple):
    """A real that is not literally rational: op on two reals (one for log, exp; none for pi)."""

    op: str
    x: "Real"
    y: "Real" = ZERO


Real = Union[Fraction, Node]  # noqa: UP007 (a name that Node itself uses)
PI = Node("pi", ZERO)


def operate(op: str, x: Real, y: Real) -> Real:
    """Return x op y for + - * /, without the operations that change nothing."""
    if op == "/" and sign(y) == 0:
        raise OpenError("undefined: division by zero")
    if isinstance(x, Fraction) and isinstance(y, Fraction):
        return Fraction(RATIONAL[op](x, y))
    if op == "-" and x == y:
        return ZERO
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
        return operate("/", ONE, power(x, Fraction(-n)))
    if n < 2:
        return x if n else ONE
    if isinstance(x, Node) and n <= 4096:
        half = power(x, Fraction(n // 2))
        return operate("*", half, half if n % 2 == 0 else operate("*", half, x))
    if (
        isinstance(x, Node)
        or n * (max(map(abs, x.as_integer_ratio())).bit_length() - 1) > VALUE_BITS
    ):
        raise RecheckError("a value of more than 10^6 bits")
    return x**n


def root(x: Real, k: int) -> Real:
    """Return the k-th root of x >= 0."""
    side = sign(x)
    if side < 0:
        raise OpenError("undefined: root of a negative number")
    if isinstance(x, Fraction):
        nearest = Fraction(integer_root(x.numerator, k), integer_root(x.denominator, k))
        return nearest if nearest**k == x else Node("root", x, Fraction(k))
    return Node("root", x, Fraction(k)) if side else ZERO


def log(x: Real) -> Real:
    """Return the natural logarithm of x > 0."""
    if sign(x) <= 0:
        raise OpenError("undefined: log of a number <= 0")
    return ZERO if x == 1 else Node("log", x)


def exp(x: Real) -> Real:
    """Return e^x."""
    return ONE if x == 0 else Node("exp", x)


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
def _pi(digits: int) -> tuple[Decimal, Decimal, Decimal]:
    """Return a < b, u with a/u < pi < b/u; pi = 16 arctan(1/5) - 4 arctan(1/239) (Machin)."""
    unit, total = 10**digits, 0
    for i in range(digits):  # two quotients of an error below 2, and the tail is below 20 units
        term = (-1) ** i * unit // (2 * i + 1)
        total += 16 * (term // 5 ** (2 * i + 1)) - 4 * (term // 239 ** (2 * i + 1))
    error = 40 * (digits + 1)
    return Decimal(total - error), Decimal(total + error), Decimal(unit)


def _steps(x: Real, down: Context, up: Context) -> tuple[Decimal, Decimal]:
    """Enclose x step by step; ZeroDivisionError where the precision is too small."""
    if isinstance(x, Fraction):
        n, d = map(Decimal, x.as_integer_ratio())
        return down.divide(n, d), up.divide(n, d)
    if x.op == "pi":
        a, b, c = _pi(down.prec)
        return down.divide(a, c), up.divide(b, c)
    if x.op == "root":
        return _steps(Node("exp", Node("/", Node("log", x.x), x.y)), down, up)
    (a, b), (c, d) = _steps(x.x, down, up), _steps(x.y, down, up)
    if (x.op == "/" and c <= 0 <= d) or (x.op == "log" and a <= 0):
        raise ZeroDivisionError
    if x.op == "+":
        return down.add(a, c), up.add(b, d)
    if x.op == "-":
        return down.subtract(a, d), up.subtract(b, c)
    if x.op in "*/":
        name, pairs = (
            {"*": "multiply", "/": "divide"}[x.op],
            [(s, t) for s in (a, b) for t in (c, d)],
        )
        lows, highs = ([getattr(to, name)(*pair) for pair in pairs] for to in (down, up))
        return min(lows), max(highs)
    if x.op == "exp" and max(a.copy_abs(), b.copy_abs()) > VALUE_BITS:
        raise RecheckError("a value of more than 10^6 bits")
    function = "exp" if x.op == "exp" else "ln"  # both are rounded to nearest, as Python documents
    return down.next_minus(getattr(down, function)(a)), up.next_plus(getattr(up, function)(b))


def enclose(x: Real, bits: int) -> tuple[Fraction, Fraction]:
    """Enclose x, every step rounded outwards."""
    contexts = [
        Context(bits * 31 // 100, rounding, MIN_EMIN, MAX_EMAX, traps=[])
        for rounding in (ROUND_FLOOR, ROUND_CEILING)
    ]
    low, high = _steps(x, *contexts)
    return Fraction(low), Fraction(high)


def algebraic(x: Real) -> bool:
    """Tell whether x is built without pi, log and exp."""
    if isinstance(x, Fraction):
        return True
    return x.op not in ("pi", "log", "exp") and algebraic(x.x) and algebraic(x.y)


def settle(x: Real, decide: Callable[[Fraction, Fraction], T | None]) -> T:
    """Return the first answer that `decide` gives to an enclosure of x with 64, 128, ... bits."""
    bits, limit = 64, 2 * ALGEBRAIC_BITS if algebraic(x) else TRANSCENDENTAL_BITS
    while bits <= limit:
        with suppress(ZeroDivisionError):
            answer = decide(*enclose(x, bits))
            if answer is not None:
                return answer
        bits *= 2
    raise OpenError(TOO_DEEP if algebraic(x) else "undecided at 4096 bits")


def _separation(x: Node) -> tuple[int, int, int]:
    """Return D, log2 u and log2 l of the theorem: an algebraic x != 0 is at least 1/(u^(D-1) l)."""
    degrees: dict[Node, int] = {}

    def bounds(x: Real) -> tuple[int, int]:
        if isinstance(x, Fraction):
            return (abs(x.numerator) - 1).bit_length(), (x.denominator - 1).bit_length()
        (u, low), (v, lower) = bounds(x.x), bounds(x.y)
        if x.op == "root":
            k = degrees[x] = int(Fraction(x.y))  # type: ignore[arg-type]
            roots = -(-(u + (k - 1) * low) // k), -(-((k - 1) * u + low) // k)
            return (roots[0], low) if u >= low else (u, roots[1])
        if x.op in "*/":
            return (u + v, low + lower) if x.op == "*" else (u + lower, low + v)
        return max(u + lower, v + low) + 1, low + lower

    u, low = bounds(x)
    return prod(degrees.values()), u, low


def sign(x: Real) -> int:
    """Return the sign of x, proved."""
    if isinstance(x, Fraction):
        return (x > 0) - (x < 0)
    least = ZERO
    if algebraic(x):
        degree, u, low = _separation(x)
        needed = (degree - 1) * u + low
        least = Fraction(1, 1 << needed) if needed <= ALGEBRAIC_BITS else ZERO
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
    exact = rational(x)
    if exact is not None:
        return exact // 1
    return settle(x, lambda a, b: a // 1 if a // 1 == b // 1 else None)


def rounded(x: Real, places: int) -> Fraction:
    """Return x rounded to so many decimals, half to even."""
    scaled = operate("*", x, Fraction(10) ** places)
    exact = rational(scaled)
    whole = floor(operate("+", scaled, Fraction(1, 2))) if exact is None else round(exact)
    return whole / Fraction(10) ** places


def decimals(x: Fraction, places: int) -> str:
    """Write x, a multiple of 10^-places, with exactly so many decimals."""
    digits = str(abs(x) * 10**places // 1).zfill(places + 1)
    point = len(digits) - places
    return "-" * (x < 0) + digits[:point] + "." * (places > 0) + digits[point:]


def canonical(x: Real) -> str | dict[str, str]:
    """Write x: a/b in lowest terms, or else its floor and ceiling at 12 significant digits."""
    exact = rational(x)
    if exact is not None:
        return str(exact)

    def digits(a: Fraction, b: Fraction) -> dict[str, str] | None:
        if a * b <= 0:
            return None
        e = len(str(abs(a.numerator))) - len(str(a.denominator))
        e -= abs(a) < Fraction(10) ** e  # now 10^e <= |a| < 10^(e+1)
        unit, places = Fraction(10) ** (e - 11), max(0, 11 - e)
        if a // unit != b // unit or not 10**11 <= abs(b) / unit < 10**12:
            return None  # x is no multiple of the unit, as it is not rational
        below = a // unit * unit
        return {"lower": decimals(below, places), "upper": decimals(below + unit, places)}

    return settle(x, digits)
