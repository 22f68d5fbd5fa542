"""Decide signs and rationality of exact reals; nothing is ever guessed.

A rational is decided by integers. Any other number is enclosed with doubling precision; an
algebraic one is 0 exactly when its enclosure falls below a separation bound (Burnikel, Funke,
Mehlhorn, Schirra, Schmitt, "A separation bound for real algebraic expressions", ESA 2001). The
proof in three lines: x = U/L with algebraic integers U, L; all conjugates of U are at most u in
absolute value and there are at most D of them; their product is a nonzero integer unless x = 0, so
|U| >= u^(1-D) and |x| >= u^(1-D)/l.
"""

from collections.abc import Iterator
from fractions import Fraction
from typing import Literal

from flint import arb, ctx

from verifier.errors import UndecidedError
from verifier.exact.enclosures import ends, simplest_between
from verifier.exact.nodes import Node, Real, ball, is_algebraic

FIRST_BITS = 128
TRANSCENDENTAL_BITS = 4096
ALGEBRAIC_BITS = 65_536

OPEN = f"undecided at {TRANSCENDENTAL_BITS} bits"
TOO_FINE = f"undecided: the separation bound asks for more than {ALGEBRAIC_BITS} bits"


def precisions(x: Real) -> Iterator[int]:
    """Yield doubling precisions for `x`; raise when its limit is reached.

    Raises
    ------
    UndecidedError
        Beyond 4,096 bits for a transcendental number, beyond 65,536 for an algebraic one.
    """
    algebraic = is_algebraic(x)
    limit = 4 * ALGEBRAIC_BITS if algebraic else TRANSCENDENTAL_BITS
    bits = FIRST_BITS
    while bits <= limit:
        yield bits
        bits *= 2
    raise UndecidedError(TOO_FINE if algebraic else OPEN)


def sign(x: Real) -> int:
    """Return -1, 0 or 1.

    Raises
    ------
    UndecidedError
        If the limits of precision do not settle it.
    """
    if isinstance(x, Fraction):
        return (x > 0) - (x < 0)
    if x.algebraic and x.separation > ALGEBRAIC_BITS:
        return _sign_of_far(x)
    for bits in precisions(x):
        found = x.ball(bits)
        if found > 0:
            return 1
        if found < 0:
            return -1
        if x.algebraic and _below(found, x.separation):
            return 0
    raise UndecidedError(OPEN)


def _sign_of_far(x: Node) -> int:
    """Return the sign where equality is out of reach: only separation from 0 can be shown."""
    bits = FIRST_BITS
    while bits <= TRANSCENDENTAL_BITS:
        found = x.ball(bits)
        if found > 0:
            return 1
        if found < 0:
            return -1
        bits *= 2
    raise UndecidedError(TOO_FINE)


def _below(found: arb, separation: int) -> bool:
    with ctx.workprec(64):
        return bool(abs(found) < arb(2) ** -separation)


def compare(x: Real, y: Real) -> int:
    """Return the sign of x - y; numbers made in the same way are equal."""
    if x == y:
        return 0
    if isinstance(x, Fraction) and isinstance(y, Fraction):
        return 1 if x > y else -1
    low, high = ball(x, FIRST_BITS), ball(y, FIRST_BITS)
    if low > high:
        return 1
    if low < high:
        return -1
    return sign(
        Node("add", x, -y if isinstance(y, Fraction) else Node("multiply", Fraction(-1), y))
    )


def rational_value(x: Real) -> Fraction | None:
    """Return the value of `x` where it is rational, else None.

    A number in whose making pi, log or exp stands counts as irrational.

    Raises
    ------
    UndecidedError
        If the limits of precision do not settle it.

    Notes
    -----
    x = U/L as in the separation bound; a rational value has a denominator that divides the norm
    of L, so of at most D log2(l) bits, and at most one such fraction fits a small enclosure.
    """
    if isinstance(x, Fraction):
        return x
    if not x.algebraic:
        return None
    if x.rational is None:
        x.rational = (_rational(x),)
    return x.rational[0]


def _rational(x: Node) -> Fraction | None:
    width = x.bounds[1] * x.degree
    for bits in precisions(x):
        low, high = ends(x.ball(bits))
        if high - low >= Fraction(1, 1 << (2 * width + 1)):
            continue
        candidate = simplest_between(low, high, 1 << width)
        return candidate if candidate is not None and compare(x, candidate) == 0 else None
    raise UndecidedError(TOO_FINE)


def settled(x: Real) -> Real:
    """Return `x` as a rational where it is one."""
    exact = rational_value(x)
    return x if exact is None else exact


def way(left: Real, right: Real) -> Literal["rational", "surd", "enclosure"]:
    """Return how a relation between two settled numbers is decided."""
    if isinstance(left, Fraction) and isinstance(right, Fraction):
        return "rational"
    return "surd" if is_algebraic(left) and is_algebraic(right) else "enclosure"
