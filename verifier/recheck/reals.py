"""Exact reals: rationals, and nodes of + - * / root log exp pi, enclosed as narrowly as needed.

Enclosures are made by Python's decimal module, rounded outwards; no float occurs. Whether an
algebraic value is zero or rational is decided by the separation bound of C. Burnikel, S. Funke,
K. Mehlhorn, S. Schirra, S. Schmitt, A separation bound for real algebraic expressions, ESA 2001,
LNCS 2161, 254-265.
"""

import operator
from collections.abc import Callable
from contextlib import suppress
from decimal import MAX_EMAX, MIN_EMIN, ROUND_CEILING, ROUND_FLOOR, Context, Decimal
from fractions import Fraction
from functools import cache
from math import prod
from typing import NamedTuple, TypeVar, Union

ALGEBRAIC_BITS, TRANSCENDENTAL_BITS, VALUE_BITS = 65536, 4096, 10**6
TOO_DEEP = "undecided: the separation bound asks for more than 65536 bits"
RATIONAL = {"+": operator.add, "-": operator.sub, "*": operator.mul, "/": operator.truediv}
METHOD = {"+": "add", "-": "subtract", "*": "multiply", "/": "divide", "exp": "exp", "log": "ln"}
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


Real = Union[Fraction, Node]  # noqa: UP007 (Node speaks of it before it stands)
Interval = tuple[Decimal, Decimal]
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
    return y if (op == "+" and x == 0) or (op == "*" and (x == 1 or y == 0)) else Node(op, x, y)


def power(x: Real, exponent: Real) -> Real:
    """Return x^exponent; a fractional exponent wants x >= 0, an irrational one x > 0."""
    e = rational(exponent)
    if e is None:
        return function("exp", operate("*", exponent, function("log", x)))
    n = e.numerator
    if e.denominator > 1:
        return root(power(x, Fraction(n)) if sign(x) >= 0 else x, e.denominator)
    if n < 0:
        if sign(x) == 0:
            raise OpenError("undefined: power 0 to a negative exponent")
        return operate("/", ONE, power(x, Fraction(-n)))
    if n < 2:
        return x if n else ONE
    size = max(abs(x.numerator), x.denominator) if isinstance(x, Fraction) else 2**200
    if n * (size.bit_length() - 1) > VALUE_BITS:
        raise RecheckError("a value of more than 10^6 bits")
    half = power(x, Fraction(n // 2))
    return operate("*", half, half if n % 2 == 0 else operate("*", half, x))


def integer_root(n: int, k: int) -> int:
    """Return the k-th root of n > 0 where it is an integer, else some integer near it."""
    return int(_enclose(Node("root", Fraction(n), Fraction(k)), n.bit_length() // k + 64)[1])


def root(x: Real, k: int) -> Real:
    """Return the k-th root of x >= 0."""
    side = sign(x)
    if side < 0:
        raise OpenError("undefined: root of a negative number")
    if isinstance(x, Fraction) and side:
        nearest = Fraction(integer_root(x.numerator, k), integer_root(x.denominator, k))
        return nearest if nearest**k == x else Node("root", x, Fraction(k))
    return Node("root", x, Fraction(k)) if side else ZERO


def function(name: str, x: Real) -> Real:
    """Return log x or exp x."""
    if name == "log" and sign(x) <= 0:
        raise OpenError("undefined: log of a number <= 0")
    return 1 - Fraction(x) if x == (name == "log") else Node(name, x)  # log 1 = 0, exp 0 = 1


@cache
def _pi(digits: int) -> tuple[Decimal, Decimal, Decimal]:
    """Return a, b, u with a/u < pi < b/u; pi = 16 arctan(1/5) - 4 arctan(1/239) (J. Machin)."""
    unit, total = 10**digits, 0
    for i in range(digits):  # the two quotients err by less than 2, the tails by less than 1
        term = (-1) ** i * unit // (2 * i + 1)
        total += 16 * (term // 5 ** (2 * i + 1)) - 4 * (term // 239 ** (2 * i + 1))
    error = 40 * (digits + 1)
    return Decimal(total - error), Decimal(total + error), Decimal(unit)


def _enclose(x: Real, bits: int) -> Interval:
    limits = {"Emin": MIN_EMIN, "Emax": MAX_EMAX, "traps": []}
    down, up = (Context(bits * 31 // 100, r, **limits) for r in (ROUND_FLOOR, ROUND_CEILING))  # type: ignore[arg-type]
    return _steps(x, down, up)


def _steps(x: Real, down: Context, up: Context) -> Interval:
    """Enclose x step by step; ZeroDivisionError where the precision is too small."""
    if isinstance(x, Fraction) or x.op == "pi":
        a, b, c = (
            _pi(down.prec)
            if isinstance(x, Node)
            else map(Decimal, (x.numerator, x.numerator, x.denominator))
        )
        return down.divide(a, c), up.divide(b, c)
    if x.op == "root" and x.y != 2:
        return _steps(Node("exp", Node("/", Node("log", x.x), x.y)), down, up)
    a, b = _steps(x.x, down, up)
    if x.op == "root":  # rounded to nearest; what stands under a root is known to be >= 0
        a = max(a, Decimal(0))
        return down.next_minus(down.sqrt(a)), up.next_plus(up.sqrt(b))
    lower, upper = getattr(down, METHOD[x.op]), getattr(up, METHOD[x.op])
    if x.op in ("exp", "log"):  # rounded to nearest, as Python documents
        if x.op == "log" and a <= 0:
            raise ZeroDivisionError
        if x.op == "exp" and max(a.copy_abs(), b.copy_abs()) > VALUE_BITS:
            raise RecheckError("a value of more than 10^6 bits")
        return down.next_minus(lower(a)), up.next_plus(upper(b))
    c, d = _steps(x.y, down, up)
    if x.op == "/" and c <= 0 <= d:
        raise ZeroDivisionError
    pairs = [(s, t) for s in (a, b) for t in (c, d)]  # an extreme lies at two ends
    return min(lower(*pair) for pair in pairs), max(upper(*pair) for pair in pairs)


def algebraic(x: Real) -> bool:
    """Tell whether x is built without pi, log and exp."""
    if isinstance(x, Fraction):
        return True
    return x.op not in ("pi", "log", "exp") and algebraic(x.x) and algebraic(x.y)


def settle(x: Real, decide: Callable[[Decimal, Decimal], T | None]) -> T:
    """Return the first answer that `decide` gives to an enclosure of x with 64, 128, ... bits."""
    bits, limit = 64, 2 * ALGEBRAIC_BITS if algebraic(x) else TRANSCENDENTAL_BITS
    while bits <= limit:
        with suppress(ZeroDivisionError):
            answer = decide(*_enclose(x, bits))
            if answer is not None:
                return answer
        bits *= 2
    raise OpenError(TOO_DEEP if algebraic(x) else "undecided at 4096 bits")


def _bounds(x: Real, degrees: dict[Node, int]) -> tuple[int, int]:
    """Return log2 of the theorem's u and l, and collect the degrees of the distinct roots.

    With D their product, an algebraic x != 0 is at least 1/(u^(D-1) l) in absolute value.
    """
    if isinstance(x, Fraction):
        return (abs(x.numerator) - 1).bit_length(), (x.denominator - 1).bit_length()
    (u, low), (v, lower) = _bounds(x.x, degrees), _bounds(x.y, degrees)
    if x.op == "root":
        k = degrees[x] = int(Fraction(str(x.y)))
        up, down = -(-(u + (k - 1) * low) // k), -(-((k - 1) * u + low) // k)
        return (up, low) if u >= low else (u, down)
    if x.op in "*/":
        return (u + v, low + lower) if x.op == "*" else (u + lower, low + v)
    return max(u + lower, v + low) + 1, low + lower


def sign(x: Real) -> int:
    """Return the sign of x, proved."""
    if isinstance(x, Fraction):
        return (x > 0) - (x < 0)
    least, degrees = ZERO, dict[Node, int]()
    if algebraic(x):
        u, low = _bounds(x, degrees)
        needed = (prod(degrees.values()) - 1) * u + low
        least = Fraction(1, 1 << needed) if needed <= ALGEBRAIC_BITS else ZERO
    return settle(
        x, lambda a, b: 1 if a > 0 else -1 if b < 0 else 0 if -least < a <= b < least else None
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
    degrees: dict[Node, int] = {}
    size = _bounds(x, degrees)[1] * prod(degrees.values())
    if 2 * size + 2 > ALGEBRAIC_BITS:
        raise OpenError(TOO_DEEP)

    def middle(a: Decimal, b: Decimal) -> Fraction | None:
        low, high = Fraction(a), Fraction(b)
        return (low + high) / 2 if (high - low) * (4 << 2 * size) < 1 else None

    candidate = settle(x, middle).limit_denominator(1 << size)
    return candidate if compare(x, candidate) == 0 else None


def floor(x: Real) -> int:
    """Return the largest integer <= x."""
    exact = rational(x)
    if exact is not None:
        return exact // 1
    return settle(x, lambda a, b: k if (k := Fraction(a) // 1) == Fraction(b) // 1 else None)


def rounded(x: Real, places: int) -> Fraction:
    """Return x rounded to so many decimals, half to even."""
    scaled = operate("*", x, Fraction(10) ** places)
    exact = rational(scaled)
    whole = floor(operate("+", scaled, Fraction(1, 2))) if exact is None else round(exact)
    return whole / Fraction(10) ** places


def canonical(x: Real) -> str | dict[str, str]:
    """Write x: a/b in lowest terms, or else its floor and ceiling at 12 significant digits."""
    exact = rational(x)
    if exact is not None:
        return str(exact)

    def digits(a: Decimal, b: Decimal) -> dict[str, str] | None:
        if not a or not b or a.adjusted() != b.adjusted():
            return None
        unit = Decimal((0, (1,), a.adjusted() - 11))
        below = a.quantize(unit, ROUND_FLOOR)
        if below != b.quantize(unit, ROUND_FLOOR):
            return None  # x is no multiple of the unit, as it is not rational
        return {"lower": f"{below:f}", "upper": f"{below + unit:f}"}

    return settle(x, digits)
