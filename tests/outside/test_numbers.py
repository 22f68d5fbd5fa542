"""Published numbers that the character sums and measures must reproduce, each with its source."""

from fractions import Fraction
from itertools import product

import numpy as np
import pytest
from sympy import legendre_symbol, primerange

from verifier.kernels.quadratic_character import character_table
from verifier.quantities.complete_sum import complete_sum
from verifier.quantities.correlation import correlation
from verifier.quantities.out_of_phase import out_of_phase
from verifier.quantities.window_sum import window_sum
from verifier.rules.inverse import inverse
from verifier.rules.legendre import legendre
from verifier.structures.character import Character
from verifier.structures.sequence import BinarySequence
from verifier.structures.subject import Subject


def of_word(signs):
    return Subject(None, None, None, BinarySequence(np.array(signs, np.int8)), None)


def of_polynomial(p, *coefficients):
    residues = [c % p for c in coefficients]
    while len(residues) > 1 and residues[0] == 0:
        residues = residues[1:]
    polynomial = tuple(residues)
    return Subject(p, polynomial, Character(p, polynomial), None, None)


def total(p, *coefficients):
    return complete_sum(of_polynomial(p, *coefficients)).value


def signs(text):
    return [1 if sign == "+" else -1 for sign in text]


# Squares modulo p by hand, +1 at 0.
LEGENDRE = {3: "++-", 5: "++--+", 7: "+++-+--", 13: "++-++----++-+"}


@pytest.mark.parametrize(("p", "text"), LEGENDRE.items())
def test_the_first_legendre_sequences(p, text):
    character = Character(p, (1, 0))
    found = legendre(p=p, polynomial=(1, 0), character=character, at_zero=1)
    assert found.signs.tolist() == signs(text)


def test_the_table_of_squares_is_the_legendre_symbol_of_sympy():
    for p in primerange(3, 120):
        expected = [0, *(int(legendre_symbol(a, p)) for a in range(1, p))]
        assert character_table(p).tolist() == expected


@pytest.mark.parametrize("at_zero", [1, -1])
def test_the_inverse_rule_by_the_inverses_of_python(at_zero):
    for p in (3, 5, 7, 11, 101):
        for polynomial in ((1, 0), (1, 0, 1), (2, 1, 0, 3)[: 3 if p == 3 else 4]):
            expected = []
            for x in range(p):
                value = 0
                for coefficient in polynomial:
                    value = (value * x + coefficient) % p
                expected.append(at_zero if value == 0 else 1 if 2 * pow(value, -1, p) < p else -1)
            character = Character(p, polynomial)
            found = inverse(p=p, polynomial=polynomial, character=character, at_zero=at_zero)
            assert found.signs.tolist() == expected


def test_quadratic_sums_are_exact():
    """Berndt, Evans, Williams, Gauss and Jacobi Sums, Theorem 2.1.2 (from memory).

    The sum over a x^2 + b x + c is -chi(a), and (p - 1) chi(a) where the discriminant is 0.
    """
    for p in (3, 5, 7, 11, 13):
        for a, b, c in product(range(1, p), range(p), range(p)):
            sign = int(legendre_symbol(a, p))
            expected = -sign if (b * b - 4 * a * c) % p else (p - 1) * sign
            assert total(p, a, b, c) == expected


# p = a^2 + b^2, and the sum over x^3 - x; signs by 8.5 of Ireland and Rosen's normalisation
# S/2 = 3 mod 4 for p = 1 mod 8, 1 mod 4 for p = 5 mod 8 (from memory).
JACOBSTHAL = {5: 2, 13: -6, 17: -2, 29: 10, 37: 2, 41: -10, 53: -14}


def test_jacobsthal_sums():
    """Berndt, Evans, Williams, Gauss and Jacobi Sums, chapter 6: S(1)^2 + S(n)^2 = 4 p."""
    for p in primerange(5, 400):
        if p % 4 == 3:
            assert total(p, 1, 0, -1, 0) == 0
            continue
        n = next(a for a in range(2, p) if int(legendre_symbol(a, p)) == -1)
        first, second = total(p, 1, 0, -1, 0), total(p, 1, 0, -n, 0)
        assert first % 4 == 2
        assert second % 4 == 0
        assert first**2 + second**2 == 4 * p
        assert (first // 2) % 4 == (3 if p % 8 == 1 else 1)
    assert {p: total(p, 1, 0, -1, 0) for p in JACOBSTHAL} == JACOBSTHAL


# Cremona, Algorithms for Modular Elliptic Curves, Table 3 (from memory): a_p, and
# a_p = - sum chi(4 x^3 + b_2 x^2 + 2 b_4 x + b_6).
CURVES = {
    "11a1": (
        (0, -1, 1, -10, -20),
        {3: -1, 5: 1, 7: -2, 11: 1, 13: 4, 17: -2, 19: 0, 23: -1, 29: 0, 31: 7, 37: 3, 41: -8,
         43: -6, 47: 8},
    ),
    "37a1": (
        (0, 0, 1, -1, 0),
        {3: -3, 5: -2, 7: -1, 11: -5, 13: -2, 17: 0, 19: 0, 23: 2, 29: 6, 31: -4, 37: -1, 41: -9,
         43: 2, 47: -9},
    ),
    "32a1": (
        (0, 0, 0, 4, 0),
        {3: 0, 5: -2, 7: 0, 11: 0, 13: 6, 17: 2, 19: 0, 23: 0, 29: -10, 31: 0, 37: -2, 41: 10,
         43: 0, 47: 0},
    ),
}  # fmt: skip


@pytest.mark.parametrize(("curve", "traces"), CURVES.values(), ids=CURVES)
def test_traces_of_elliptic_curves(curve, traces):
    a1, a2, a3, a4, a6 = curve
    b2, b4, b6 = a1**2 + 4 * a2, 2 * a4 + a1 * a3, a3**2 + 4 * a6
    assert {p: -total(p, 4, b2, 2 * b4, b6) for p in traces} == traces


# Cohen, A Course in Computational Algebraic Number Theory, table of class numbers (from memory).
CLASS_NUMBERS = {
    7: 1, 11: 1, 19: 1, 23: 3, 31: 3, 43: 1, 47: 5, 59: 3, 67: 1, 71: 7, 79: 5, 83: 3, 103: 5,
    107: 3,
}  # fmt: skip
CLASS_NUMBERS_OF_4P = {5: 2, 13: 2, 17: 4, 29: 6, 37: 2, 41: 8, 53: 6, 61: 6}


def chi(a, p):
    return int(legendre_symbol(a, p))


@pytest.mark.parametrize(("p", "h"), CLASS_NUMBERS.items())
def test_class_numbers_for_3_mod_4(p, h):
    subject = of_polynomial(p, 1, 0)
    assert window_sum(subject, 0, -(-p // 2)).value == h * (2 - chi(2, p))
    assert 2 * window_sum(subject, 0, -(-p // 3)).value == h * (3 - chi(3, p))


@pytest.mark.parametrize(("p", "h"), CLASS_NUMBERS_OF_4P.items())
def test_class_numbers_for_1_mod_4(p, h):
    subject = of_polynomial(p, 1, 0)
    assert window_sum(subject, 0, -(-p // 2)).value == 0
    assert 2 * window_sum(subject, 0, -(-p // 4)).value == h


# Golomb and Scholtz 1965, generalized Barker sequences (from memory): all lengths, up to symmetry.
BARKER = {
    2: "+-", 3: "++-", 4: "++-+", 5: "+++-+", 7: "+++--+-", 11: "+++---+--+-",
    13: "+++++--++-+-+",
}  # fmt: skip


@pytest.mark.parametrize(("n", "text"), [*BARKER.items(), (4, "+++-")])
def test_barker_sequences(n, text):
    word = signs(text)
    aperiodic = [sum(word[x] * word[x + d] for x in range(n - d)) for d in range(1, n)]
    assert max(map(abs, aperiodic)) == 1
    assert correlation(of_word(word), 2).value >= 1
    periodic = out_of_phase(of_word(word)).value
    # R(d) = A(d) + A(n - d), and R = n mod 4
    assert periodic == max(abs(aperiodic[d - 1] + aperiodic[n - d - 1]) for d in range(1, n))
    if n % 2:
        assert periodic == 1


def test_out_of_phase_of_legendre_sequences():
    """Golomb, Shift Register Sequences (from memory): -1 for p = 3 mod 4, {1, -3} for 1 mod 4."""
    for p in primerange(5, 200):
        character = Character(p, (1, 0))
        for at_zero in (1, -1):
            found = legendre(p=p, polynomial=(1, 0), character=character, at_zero=at_zero)
            lags = set(found.autocorrelation[1:].tolist())
            assert lags == ({-1} if p % 4 == 3 else {1, -3})


# The least C_2 over all words of a length. No published table is known: the design notes give these
# values from another program, and the exhaustion here is a second computation.
LEAST_CORRELATION = {4: 2, 5: 2, 6: 2, 7: 3, 8: 3, 9: 3, 10: 3, 11: 3}


@pytest.mark.parametrize(("n", "least"), LEAST_CORRELATION.items())
def test_the_least_correlation_of_all_words(n, least):
    """And never below the bound of Alon, Kohayakawa, Mauduit, Moreira, Rodl 2006.

    C_k >= sqrt(floor(N / (k + 1)) / 2) for even k; in integers 2 C^2 >= floor(N/3).
    """
    words = product((1, -1), repeat=n - 1)
    values = [correlation(of_word([1, *word]), 2).value for word in words]
    assert min(values) == least
    assert 2 * min(values) ** 2 >= n // 3


def test_correlation_of_long_words_keeps_the_lower_bound():
    drawn = np.random.default_rng(7)
    for n in (50, 100, 333):
        word = drawn.choice([1, -1], n).tolist()
        assert 2 * correlation(of_word(word), 2).value ** 2 >= n // 3


# Exact values of the Legendre sequence on 1..p-1. The design notes give them from another program.
LEGENDRE_MEASURES = {31: (6, 9, 11), 61: (8, 13, 19), 101: (14, 17, 26), 503: (33, 45, 77)}


@pytest.mark.parametrize(("p", "expected"), LEGENDRE_MEASURES.items())
def test_measures_of_legendre_sequences(p, expected):
    from verifier.quantities.well_distribution import well_distribution

    whole = legendre(p=p, polynomial=(1, 0), character=Character(p, (1, 0)), at_zero=1)
    subject = Subject(p, (1, 0), None, whole.with_indices(1, p - 1), None)
    found = (
        well_distribution(subject).value,
        correlation(subject, 2).value,
        correlation(subject, 3).value,
    )
    assert found == expected


def test_weil_bound_by_parity():
    """Serre 1983 for the curve y^2 = f(x), f squarefree (from memory).

    |S| <= (k-1)/2 floor(2 sqrt p) for odd k, |S + chi(a)| <= (k-2)/2 floor(2 sqrt p) for even k.
    """
    from math import isqrt

    from verifier.predicates.squarefree import squarefree

    for p in (5, 7, 11):
        for k in (3, 4):
            attained = False
            for lower in product(range(p), repeat=k):
                subject = of_polynomial(p, 1, *lower)
                if not squarefree(subject).value:
                    continue
                size = abs(complete_sum(subject).value + (1 if k % 2 == 0 else 0))
                bound = Fraction(k - 1 if k % 2 else k - 2, 2) * isqrt(4 * p)
                assert size <= bound
                attained |= size == bound
                if p == 11 and lower[0] > 1:
                    break
            assert attained
