"""The re-checker's exact reals and its arithmetic against mpmath and sympy."""

import random
from fractions import Fraction

import mpmath
import pytest
import sympy

from verifier.recheck import arithmetic
from verifier.recheck.expression import judge, parse, value, write
from verifier.recheck.reals import OpenError, RecheckError, canonical, floor, rational, sign


class Scope:
    """n = 29, p = 13."""

    def look_up(self, name, _arguments):
        return {"n": Fraction(29), "p": Fraction(13)}[name]


def evaluated(text):
    return value(parse(text, {}), Scope())


VALUES = [  # read by mpmath in its own syntax; the texts are of the grammar
    "sqrt(n)", "n^(5/2)", "2*sqrt(n)*(1 + (2/pi)*log(4*n/pi)) + 8", "exp(-50)", "exp(50.5)",
    "log(1/3)", "pi^3", "-pi", "1 - sqrt(n)", "n^(1/3)", "n^pi", "(1 + sqrt(5))^40", "exp(sqrt(2))",
    "log(n)*log(p)/log(2)", "sqrt(sqrt(2) + sqrt(3))", "10^12*sqrt(2)", "sqrt(10)/10^20",
    "exp(exp(2))", "log(log(n))", "(n/p)^(-7/3)", "log(1 + 1/10^15)", "99999999999.95 + sqrt(2)/10^9",
]  # fmt: skip


@pytest.mark.parametrize("text", VALUES)
def test_twelve_digits_against_mpmath(text):
    with mpmath.workdps(80):
        names = {"n": mpmath.mpf(29), "p": mpmath.mpf(13), "pi": +mpmath.pi, "sqrt": mpmath.sqrt}
        names |= {"log": mpmath.log, "exp": mpmath.exp}
        tree = sympy.sympify(text.replace("^", "**"), {"n": 29, "p": 13})
        expected = mpmath.mpf(sympy.N(tree, 80))
        found = canonical(evaluated(text))
        low, high = mpmath.mpf(found["lower"]), mpmath.mpf(found["upper"])
        unit = mpmath.mpf(10) ** (mpmath.floor(mpmath.log10(abs(expected))) - 11)
        assert low < expected < high
        assert abs(high - low - unit) < unit / 10**20


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("-2^2", "-4"), ("2^-3^2", "1/512"), ("2^3^2", "512"), ("7 mod 3*2", "2"), ("8/4/2", "1"),
        ("2 - 3 - 4", "-5"), ("0.25", "1/4"), ("round(5/2, 0)", "2"), ("round(-1/3, 2)", "-33/100"),
        ("round(sqrt(2), 3)", "707/500"), ("floor(-sqrt(2))", "-2"), ("ceil(-1/2)", "0"),
        ("ceil(sqrt(2))", "2"), ("abs(-sqrt(4))", "2"), ("min(3, pi, sqrt(2)^2)", "2"),
        ("max(1, 2/3)", "1"), ("binomial(10, 3)", "120"), ("binomial(3, 5)", "0"),
        ("factorial(5)", "120"), ("8^(2/3)", "4"), ("(4/9)^(-3/2)", "27/8"), ("0^0", "1"),
        ("sqrt(2)*sqrt(8)", "4"), ("(sqrt(2) + sqrt(3))^2 - 2*sqrt(6)", "5"), ("-7 mod 3", "2"),
        ("log(1) + exp(0)", "1"), ("pi - pi", "0"), ("(1 + sqrt(5))*(1 - sqrt(5))", "-4"),
        ("1/(sqrt(3) - sqrt(2)) - sqrt(3) - sqrt(2)", "0"), ("--3", "3"), ("2*-3", "-6"),
    ],
)  # fmt: skip
def test_rational_values(text, expected):
    assert canonical(evaluated(text)) == expected


@pytest.mark.parametrize(
    ("text", "verdict", "reason"),
    [
        ("sqrt(2) + sqrt(3) = sqrt(5 + 2*sqrt(6))", "holds", ""),
        ("sqrt(2)*10^20 < floor(sqrt(2)*10^20) + 1", "holds", ""),
        ("log(4) = 2*log(2)", "open", "undecided at 4096 bits"),
        ("log(n) = log(29)", "holds", ""),
        ("log(4) = log(5)", "fails", ""),
        ("1/(n - 29) < 1", "open", "undefined: division by zero"),
        ("log(29 - n) < 1", "open", "undefined: log of a number <= 0"),
        ("sqrt(-n) < 1", "open", "undefined: root of a negative number"),
        ("0^(-1) < 1", "open", "undefined: power 0 to a negative exponent"),
        ("1/2 mod 3 = 1", "open", "undefined: mod wants an integer"),
        ("1 mod 0 = 1", "open", "undefined: mod wants a positive modulus"),
        ("binomial(3, -1) = 0", "open", "undefined: binomial wants 0 <= k"),
        ("n > 1 or 1/0 > 1", "holds", "undefined: division by zero"),
        ("not (n > 1 and 1/0 > 1)", "open", "undefined: division by zero"),
        ("n < 1 and 1/0 > 1", "fails", "undefined: division by zero"),
    ],
)
def test_truth(text, verdict, reason):
    found, leaves = judge(parse(text, {}), Scope())
    assert (found, "".join(leaf.reason for leaf in leaves)) == (verdict, reason)


@pytest.mark.parametrize(
    "text",
    ["", "2x", "1 2", "a < b < c", "a ** b", "a == b", "f(a,)", "(a, b)", "+3", "f(*a)", "sqrt(2",
     "1e3", ".5", "5.", "1_000", "0x10", "#", "a && b", "a[1]", "a.b", "lambda", "'x'", "a if b else c",
     "a < b = c", "a = b in c", "()", "f()", "x := 3", "n²", "1; 2", "n" * 401, "n" + "+n" * 150],
)  # fmt: skip
def test_refused(text):
    with pytest.raises((RecheckError, SyntaxError, KeyError, TypeError)):
        value(parse(text, {}), Scope())


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("a-(b-c)", "a - (b - c)"), ("(a-b)-c", "a - b - c"), ("a*(b/c)", "a*(b/c)"),
        ("(a*b)/c", "a*b/c"), ("(a^b)^c", "(a^b)^c"), ("a^(b^c)", "a^b^c"), ("a^-b", "a^-b"),
        ("-(a*b)", "-(a*b)"), ("(-a)*b", "-a*b"), ("(-a)^b", "(-a)^b"), ("-(a^b)", "-a^b"),
        ("0.25*n", "1/4*n"), ("2^0.5", "2^(1/2)"), ("round( a ,2 )<=b", "round(a, 2) <= b"),
        ("a mod(b*c)", "a mod (b*c)"), ("a!=b", "a != b"), ("a=(b+c)", "a = b + c"),
        ("a^-(b+c)", "a^-(b + c)"), ("2^-3^2", "2^-3^2"), ("a^(-b/c)", "a^(-b/c)"),
    ],
)  # fmt: skip
def test_canonical_text(text, expected):
    assert write(parse(text, {})) == expected
    assert write(parse(expected, {})) == expected


def test_signs_that_only_the_separation_bound_settles():
    """Nested radicals that vanish, and neighbours that do not (denesting, by squaring)."""
    zero = evaluated("sqrt(2) + sqrt(5) - sqrt(7 + 2*sqrt(10))")
    assert (sign(zero), rational(zero)) == (0, 0)
    near = evaluated("sqrt(2) + sqrt(5) - sqrt(7 + 2*sqrt(10)) - 1/10^200")
    assert (sign(near), floor(near)) == (-1, -1)
    with pytest.raises(OpenError):
        sign(evaluated("log(4) - 2*log(2)"))


def test_primes_and_proofs():
    assert [n for n in range(2000) if arithmetic.is_prime(n)] == list(sympy.primerange(2000))
    for n in range(10**20, 10**20 + 200):
        assert arithmetic.is_prime(n) == sympy.isprime(n)
    for n in (
        561,
        1729,
        3215031751,
        3474749660383,
    ):  # strong pseudoprimes, OEIS A014233, from memory
        assert not arithmetic.is_prime(n)
    given = [["29", "3", ["2", "7"]], ["7", "0", ["3", "2"]], ["3", "2", ["2"]]]
    proof = [["29", "2", ["2", "7"]], ["7", "3", ["2", "3"]], ["3", "2", ["2"]]]
    assert arithmetic.pratt(29, given) == proof
    for false in (given[1:], [["29", "3", ["2"]], *given[1:]], [["29", "3", ["28"]]], []):
        with pytest.raises(RecheckError):
            arithmetic.pratt(29, false)


@pytest.mark.parametrize("p", [3, 5, 7, 101])
def test_polynomials_against_sympy(p):
    x, draw = sympy.symbols("x"), random.Random(p)
    for _ in range(60):
        f = [draw.randrange(p) for _ in range(draw.randrange(1, 7))] + [draw.randrange(1, p)]
        other = sympy.Poly(f[::-1], x, modulus=p)
        assert arithmetic.squarefree(f, p) == other.is_sqf
        assert arithmetic.irreducible(f, p) == other.is_irreducible
        assert arithmetic.discriminant(f, p) == sympy.discriminant(sympy.Poly(f[::-1], x)) % p
