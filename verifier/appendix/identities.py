"""Algebra behind the sketches, checked each time an appendix is made.

A formula and its LaTeX stand side by side; a test evaluates the LaTeX against the formula.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from fractions import Fraction
from functools import cache
from typing import Any

import sympy

from verifier.typography.escape import Latex

Expression = Any  # sympy ships no types


class IdentityError(ArithmeticError):
    """An identity that a sketch uses is false: the sketch is wrong, and no appendix is made."""


@dataclass(frozen=True)
class Side:
    """A formula, and the LaTeX that prints it."""

    formula: Expression
    latex: str


@dataclass(frozen=True)
class Identity:
    """Two sides that are equal as polynomials once `where` is substituted.

    Parameters
    ----------
    left, right
        The sides.
    where
        What letters stand for.
    """

    left: Side
    right: Side
    where: Mapping[Expression, Expression] = field(default_factory=dict)

    def holds(self) -> bool:
        """Return whether the difference of the sides is the zero polynomial."""
        difference = self.left.formula - self.right.formula
        return bool(sympy.expand(difference.subs(self.where, simultaneous=True)) == 0)


def confirmed(name: str) -> Identity:
    """Return an identity after checking it.

    Raises
    ------
    IdentityError
        If it is false.

    Examples
    --------
    >>> confirmed("degree").right.latex
    '2d-n'
    """
    found = identities()[name]
    if not found.holds():
        raise IdentityError(f"the identity {name!r} is false")
    return found


def printed(name: str, side: str = "both") -> Latex:
    """Return a checked identity as LaTeX for maths: both sides, or `left` or `right` alone."""
    found = confirmed(name)
    sides = {"left": found.left.latex, "right": found.right.latex}
    return Latex(sides.get(side, f"{found.left.latex}={found.right.latex}"))


@cache
def identities() -> Mapping[str, Identity]:
    """Return all identities by name."""
    return {**_entries(), **_sums(), **_paley()}


def _entries() -> Mapping[str, Identity]:
    a, b, s, t = sympy.symbols("a b s t")
    signs = {a: (1 + s) / 2, b: (1 + t) / 2}
    agree = Side(a * b + (1 - a) * (1 - b), "ab+(1-a)(1-b)")
    return {
        "agreement of two entries": Identity(
            agree, Side((1 + s * t) / 2, r"\frac{1+st}{2}"), signs
        ),
        "agreement by common neighbours": Identity(agree, Side(1 - a - b + 2 * a * b, "1-a-b+2ab")),
        "product of two entries": Identity(
            Side(a * b, "ab"), Side((1 + s + t + s * t) / 4, r"\frac{1+s+t+st}{4}"), signs
        ),
    }


def _sums() -> Mapping[str, Identity]:
    n, d, k, r, total, bound, measure, root, trace = sympy.symbols("n d k r E B C w T")
    return {
        "degree": Identity(Side(total, "E"), Side(2 * d - n, "2d-n"), {d: (n + total) / 2}),
        "agreement from complete sums": Identity(
            Side(
                n / 2 * (n + (n - 1) * ((2 * k - 1) * root + 2 * r + 4)),
                r"\frac{n}{2}(n+(n-1)((2k-1)\sqrt{p}+2r+4))",
            ),
            Side(n**2 / 2 + n * (n - 1) * bound, r"\frac{n^{2}}{2}+n(n-1)B_0"),
            {bound: (2 * k - 1) * root / 2 + r + 2},
        ),
        "agreement from correlation": Identity(
            Side(n / 2 * (n + (n - 1) * (2 * measure + 2)), r"\frac{n}{2}(n+(n-1)(2C_2+2))"),
            Side(n**2 / 2 + n * (n - 1) * (measure + 1), r"\frac{n^{2}}{2}+n(n-1)(C_2+1)"),
        ),
        "regular four-cycles": Identity(
            Side(trace - 2 * n * d**2 + n * d, r"T-2nd^{2}+nd"),
            Side(trace - n * (2 * d**2 - d), r"T-n(2d^{2}-d)"),
        ),
    }


def _paley() -> Mapping[str, Identity]:
    """Return the sums of the Paley graph, from its degree and its two numbers of common neighbours.

    Half of the p(p-1) ordered pairs of distinct vertices are joined.
    """
    p = sympy.Symbol("p")
    degree, joined, apart = (p - 1) / 2, (p - 5) / 4, (p - 1) / 4
    pairs = p * (p - 1) / 2
    least, most = (p - 2 * degree + 2 * codegree for codegree in (joined, apart))
    agreements = p * (p / 2) + pairs * (p / 2 - least) + pairs * (most - p / 2)
    codegrees = p * (degree - p / 4) + pairs * (p / 4 - joined) + pairs * (p / 4 - apart)
    walks = p * degree**2 + pairs * (joined**2 + apart**2)
    cycles = walks - p * (2 * degree**2 - degree)
    return {
        "Paley agreements": Identity(
            Side(agreements, r"\frac{p^{2}}{2}+p(p-1)"),
            Side(p * (3 * p - 2) / 2, r"\frac{p(3p-2)}{2}"),
        ),
        "Paley codegrees": Identity(
            Side(codegrees, r"\frac{p(p-2)}{4}+\frac{3p(p-1)}{4}"),
            Side(p * (4 * p - 5) / 4, r"\frac{p(4p-5)}{4}"),
        ),
        "Paley four-cycles": Identity(
            Side(
                cycles,
                r"\frac{p(p-1)^{2}}{4}+\frac{p(p-1)((p-5)^{2}+(p-1)^{2})}{32}-\frac{p(p-1)(p-2)}{2}",
            ),
            Side(p * (p - 1) * (p - 5) ** 2 / 16, r"\frac{p(p-1)(p-5)^{2}}{16}"),
        ),
    }


@dataclass(frozen=True)
class Discriminant:
    """Where a polynomial over Q can lose its degree or its distinct zeros modulo a prime.

    Parameters
    ----------
    leading, value
        Leading coefficient and discriminant of the primitive integer multiple of the polynomial.
    primes
        The primes that divide their product; None where they were not all sought.
    """

    leading: int
    value: int
    primes: tuple[int, ...] | None


FACTORED = 10**18
DEGREE = 24


def discriminant(coefficients: Sequence[Fraction]) -> Discriminant | None:
    """Return the discriminant of a polynomial of degree 1 to 24, else None.

    Parameters
    ----------
    coefficients
        Highest first, without leading zeros.

    Examples
    --------
    >>> discriminant([Fraction(1), Fraction(0), Fraction(-2)])
    Discriminant(leading=1, value=8, primes=(2,))
    """
    if not 2 <= len(coefficients) <= DEGREE + 1:
        return None
    x = sympy.Symbol("x")
    rational = [sympy.Rational(c.numerator, c.denominator) for c in coefficients]
    _, integral = sympy.Poly(rational, x, domain="QQ").clear_denoms(convert=True)
    _, primitive = integral.primitive()
    leading, value = int(primitive.LC()), int(primitive.discriminant())
    primes: tuple[int, ...] | None = None
    if value and abs(leading) < FACTORED and abs(value) < FACTORED:
        found = {*sympy.factorint(abs(leading)), *sympy.factorint(abs(value))}
        primes = tuple(sorted(int(prime) for prime in found))
    return Discriminant(leading, value, primes)
