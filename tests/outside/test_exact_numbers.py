"""Exact comparison against identities from the literature and against sympy's own arithmetic."""

from fractions import Fraction

import pytest
import sympy
from hypothesis import given
from hypothesis import strategies as st

from verifier.errors import CaseError, UndecidedError, UndefinedError
from verifier.exact.canonical import canonical
from verifier.exact.decide import compare, rational_value, sign, way
from verifier.exact.primes import is_prime, least_primitive_root, pratt, primes_between
from verifier.exact.reals import PI, add, floor, log, multiply, power, root, rounded
from verifier.expressions.evaluate import judge, value
from verifier.expressions.parse import parse


class Numbers:
    """A scope of integers."""

    def __init__(self, **numbers):
        self.numbers = numbers

    def name(self, name):
        return Fraction(self.numbers[name])


def exact(text, **numbers):
    return value(parse(text), Numbers(**numbers))


EQUAL = [  # two sides that are equal, and where the identity stands
    ("sqrt(5 + 2*sqrt(6))", "sqrt(2) + sqrt(3)"),  # common practice, square both sides
    ("sqrt(9 + 4*sqrt(2))", "1 + 2*sqrt(2)"),  # common practice
    ("sqrt(16 - 2*sqrt(29) + 2*sqrt(55 - 10*sqrt(29)))", "sqrt(5) + sqrt(22 + 2*sqrt(5)) - sqrt(11 + 2*sqrt(29))"),  # Shanks 1974, from memory
    ("(2^(1/3) - 1)^(1/3)", "(1/9)^(1/3) - (2/9)^(1/3) + (4/9)^(1/3)"),  # Ramanujan, from memory
    ("(7*20^(1/3) - 19)^(1/6)", "(5/3)^(1/3) - (2/3)^(1/3)"),  # Ramanujan, from memory
    ("(5^(1/3) - 4^(1/3))^(1/2)", "(2^(1/3) + 20^(1/3) - 25^(1/3))/3"),  # Ramanujan, from memory
    ("(1 + sqrt(5))/2", "1/((1 + sqrt(5))/2 - 1)"),  # the golden ratio
    ("(2 + sqrt(5))^(1/3)", "(1 + sqrt(5))/2"),  # common practice
    ("sqrt(8)", "2*sqrt(2)"),
    ("4^(1/4)", "sqrt(2)"),
    ("8^(-2/3)", "1/4"),
    ("sqrt(2)*sqrt(3)", "sqrt(6)"),
    ("exp(0) + log(1)", "1"),
]  # fmt: skip


@pytest.mark.parametrize(("left", "right"), EQUAL)
def test_equalities_are_decided_and_strictness_matters(left, right):
    outcomes = {
        "<=": "holds",
        ">=": "holds",
        "=": "holds",
        "<": "fails",
        ">": "fails",
        "!=": "fails",
    }
    for operator, verdict in outcomes.items():
        assert judge(parse(f"{left} {operator} {right}"), Numbers()).verdict == verdict


@pytest.mark.parametrize(("left", "right"), EQUAL)
def test_the_smallest_difference_is_seen(left, right):
    assert judge(parse(f"{left} < {right} + 10^-60*10^-60"), Numbers()).verdict == "holds"


NEAR = [  # almost equal, the left one smaller; sympy's N to 60 digits says so
    ("sqrt(10) + sqrt(17)", "sqrt(5) + sqrt(22) + 1/2500"),
    ("exp(pi*sqrt(163))", "262537412640768744"),  # Hermite; Weisstein, "Almost Integer"
    ("sqrt(2) + sqrt(3)", "pi + 1/200"),
    ("355/113 - 1/3000000", "pi"),
]


@pytest.mark.parametrize(("left", "right"), NEAR)
def test_near_misses_agree_with_sympy(left, right):
    digits = [sympy.N(sympy.sympify(side.replace("^", "**")), 60) for side in (left, right)]
    assert sign(digits_difference(left, right)) == (1 if digits[0] > digits[1] else -1)


def digits_difference(left, right):
    return exact(f"{left} - ({right})")


@pytest.mark.parametrize(
    "text", ["log(4) = 2*log(2)", "log(8)/log(2) <= 3", "exp(log(5)) < 5", "pi/pi < 1"]
)
def test_transcendental_equalities_stay_open(text):
    judged = judge(parse(text), Numbers())
    assert (judged.verdict, judged.reason) == ("open", "undecided at 4096 bits")


def test_how_a_relation_is_decided():
    two, three = Fraction(2), Fraction(3)
    assert way(two, three) == "rational"
    assert way(two, root(three, 2)) == "surd"
    assert way(root(two, 2), log(three)) == "enclosure"


@given(
    st.lists(st.integers(-6, 6), min_size=3, max_size=3),
    st.sampled_from([2, 3, 5, 6, 7]),
    st.sampled_from([2, 3, 8]),
)
def test_signs_of_surds_agree_with_sympy(coefficients, d, e):
    a, b, c = coefficients
    text = f"({a}) + ({b})*sqrt({d}) + ({c})*sqrt({e})"
    oracle = sympy.Integer(a) + b * sympy.sqrt(d) + c * sympy.sqrt(e)
    assert sign(exact(text)) == sympy.sign(sympy.nsimplify(oracle))
    found = rational_value(exact(text))
    assert (found is not None) == bool(oracle.is_rational)


VALUES = [  # canonical text; irrational digits from sympy's N to 40 digits, cut by hand
    ("1/3 + 1/6", "1/2"),
    ("sqrt(2)", {"lower": "1.41421356237", "upper": "1.41421356238"}),
    ("-sqrt(2)", {"lower": "-1.41421356238", "upper": "-1.41421356237"}),
    ("1000*pi", {"lower": "3141.59265358", "upper": "3141.59265359"}),
    ("10^14*sqrt(3)", {"lower": "173205080756000", "upper": "173205080757000"}),
    ("sqrt(3)/10^5", {"lower": "0.0000173205080756", "upper": "0.0000173205080757"}),
    ("log(2)", {"lower": "0.693147180559", "upper": "0.693147180560"}),
    ("exp(1)", {"lower": "2.71828182845", "upper": "2.71828182846"}),
    ("sqrt(10^24 - 1)/10^11", {"lower": "9.99999999999", "upper": "10.00000000000"}),
    ("sqrt(7)*sqrt(7)", "7"),
    ("floor(2*sqrt(29))", "10"),
    ("ceil(-sqrt(2))", "-1"),
    ("floor(sqrt(2)*sqrt(2))", "2"),
    ("floor(-7/2)", "-4"),
    ("round(5/2, 0)", "2"),
    ("round(7/2, 0)", "4"),
    ("round(-5/2, 0)", "-2"),
    ("round(sqrt(2), 4)", "7071/5000"),
    ("round(0.00005, 4)", "0"),
    ("round(1234, -2)", "1200"),
    ("-7 mod 5", "3"),
    ("(-7) mod 5", "3"),
    ("2^-2", "1/4"),
    ("-2^2", "-4"),
    ("2^3^2", "512"),
    ("(2^-1)^-1", "2"),
    ("min(sqrt(2), 3/2, 2) - sqrt(2)", "0"),
    ("max(1, 2, 3/2)", "2"),
    ("abs(1 - sqrt(2)) + 1 - sqrt(2)", "0"),
    ("binomial(10, 3) + factorial(5)", "240"),
    ("6/2*3", "9"),
    ("1 - 2 - 3", "-4"),
    ("0.125", "1/8"),
]  # fmt: skip


@pytest.mark.parametrize(("text", "expected"), VALUES)
def test_canonical_values(text, expected):
    assert canonical(exact(text)) == expected


@pytest.mark.parametrize(
    ("text", "reason"),
    [
        ("1/(2 - 2)", "division by zero"),
        ("1/(sqrt(8) - 2*sqrt(2))", "division by zero"),
        ("log(0)", "log of a number <= 0"),
        ("log(1 - sqrt(2))", "log of a number <= 0"),
        ("sqrt(-1)", "root of a negative number"),
        ("(-8)^(1/3)", "root of a negative number"),
        ("0^-1", "power 0 to a negative exponent"),
        ("1.5 mod 2", "mod wants an integer"),
        ("3 mod 0", "mod wants a positive modulus"),
        ("factorial(1/2)", "factorial wants an integer"),
    ],
)
def test_what_is_undefined(text, reason):
    with pytest.raises(UndefinedError, match=reason.replace("(", r"\(")):
        exact(text)


@pytest.mark.parametrize("text", ["p^(p^p)", "exp(10^7)", "factorial(10^6)", "(p^60)^(p^3)"])
def test_values_of_more_than_a_million_bits_are_refused(text):
    with pytest.raises(CaseError, match="10\\^6 bits"):
        exact(text, p=101)


def test_a_separation_beyond_the_limit_is_undecided():
    """Thirty nested and independent roots: the degree alone is 2^30."""
    total = Fraction(0)
    for prime in primes_between(2, 113):
        total = add(total, root(Fraction(prime), 2))
    difference = add(total, multiply(Fraction(-1), add(total, Fraction(0))))
    assert compare(total, total) == 0
    with pytest.raises(UndecidedError):
        sign(
            add(
                add(difference, root(Fraction(127), 2)),
                multiply(Fraction(-1), root(Fraction(127), 2)),
            )
        )


@given(st.integers(1, 10**6), st.integers(0, 6))
def test_floor_and_round_of_roots_agree_with_integers(number, digits):
    """floor(sqrt(x) 10^d) by the integer square root of the standard library."""
    from math import isqrt

    assert floor(root(Fraction(number), 2)) == isqrt(number)
    scaled = isqrt(4 * number * 10 ** (2 * digits))  # floor(2 sqrt(x) 10^d)
    expected = Fraction((scaled + 1) // 2, 10**digits)
    assert rounded(root(Fraction(number), 2), digits) == expected


@given(st.integers(-50, 50), st.integers(1, 9), st.integers(1, 4))
def test_powers_agree_with_fractions(above, below, exponent):
    base = Fraction(above, below)
    assert power(base, Fraction(exponent)) == base**exponent


def test_pi_is_between_the_bounds_of_archimedes():
    """223/71 < pi < 22/7: Archimedes, Measurement of a Circle."""
    assert compare(PI, Fraction(223, 71)) == 1
    assert compare(PI, Fraction(22, 7)) == -1


def test_primes_and_roots_are_those_of_sympy():
    assert primes_between(0, 3000) == list(sympy.primerange(0, 3001))
    assert primes_between(10**6, 10**6 + 500) == list(sympy.primerange(10**6, 10**6 + 501))
    for prime in sympy.primerange(3, 500):
        assert least_primitive_root(prime) == sympy.primitive_root(prime)
    assert not is_prime(3215031751)  # strong pseudoprime to 2, 3, 5, 7: Jaeschke 1993, from memory
    assert is_prime(2**89 - 1)  # a Mersenne prime, Powers 1911


@pytest.mark.parametrize("prime", [3, 5, 17, 1009, 1000033, 2**61 - 1])
def test_pratt_witnesses_prove_primality(prime):
    """The conditions of Pratt 1975, checked with pow alone."""
    proved = {2}
    for number, base, factors in reversed(pratt(prime)):
        n, a, primes = int(number), int(base), [int(q) for q in factors]
        assert set(primes) <= proved
        rest = n - 1
        for q in primes:
            assert pow(a, (n - 1) // q, n) != 1
            while rest % q == 0:
                rest //= q
        assert (rest, pow(a, n - 1, n)) == (1, 1)
        proved.add(n)
    assert prime in proved
