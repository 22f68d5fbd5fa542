"""Rules that take data or a seed, and the predicates, against definitions and sympy."""

import hashlib

import numpy as np
import pytest
from sympy import Poly, isprime, symbols
from sympy.polys.domains import ZZ
from sympy.polys.galoistools import gf_irreducible_p, gf_sqf_p

from verifier.errors import CaseError, LimitError, UndefinedError
from verifier.kernels.quadratic_character import character_values
from verifier.predicates.even import even
from verifier.predicates.irreducible import irreducible
from verifier.predicates.odd import odd
from verifier.predicates.prime import prime
from verifier.predicates.squarefree import squarefree
from verifier.quantities.balance import balance
from verifier.quantities.correlation import correlation
from verifier.quantities.edges import edges
from verifier.quantities.row_out_of_phase import row_out_of_phase
from verifier.quantities.shifted_sum import shifted_sum
from verifier.rules.explicit import explicit
from verifier.rules.random import random
from verifier.structures.sequence import BinarySequence
from verifier.structures.subject import Subject

NOTHING = Subject(None, None, None, None, None)


def of(p, polynomial):
    return Subject(p, polynomial, None, None, None)


@pytest.mark.parametrize(
    ("given", "expected"),
    [
        ([1, -1, -1], [1, -1, -1]),
        ("+--", [1, -1, -1]),
        ("+ - -", [1, -1, -1]),
        ("++,-+\n-", [1, 1, -1, 1, -1]),
        ("1 -1 +1", [1, -1, 1]),
        ("1", [1]),
        ("1 1", [1, 1]),
        ("0", [1]),
        ("011", [1, -1, -1]),
        ("01 1 0", [1, -1, -1, 1]),
        ("1 0 1", [-1, 1, -1]),
        ("11", [-1, -1]),
        ("  +  ", [1]),
    ],
)
def test_explicit_values(given, expected):
    assert explicit(values=given).signs.tolist() == expected
    if isinstance(given, str):
        assert explicit(content=given.encode()).signs.tolist() == expected


@pytest.mark.parametrize(
    ("given", "message"),
    [
        ([], "is empty"),
        ([1, 0], "entry 2 is 0; 1 or -1 was wanted; bits are given as a text"),
        ([1, 2], "entry 2 is 2"),
        ([True, 1], "entry 1 is True"),
        ([1.0], "entry 1 is 1.0"),
        (["+"], "entry 1 is +"),
        ("", "is empty"),
        (" , ", "is empty"),
        ("1 -1 2", "entry 3 is '2'"),
        ("1 -1 0", "entry 3 is '0'"),
        ("01 -1", "entry 2 is '-1'"),
        ("++ 1", "entry 2 is '1'"),
        ("1 ++", "entry 1 is '1'"),
        ("+-x", "entry 1 is '+-x'"),
        ("1_1", "entry 1 is '1_1'"),
        ("\u0661", "entry 1 is"),
    ],
)
def test_other_values_are_refused_with_their_place(given, message):
    with pytest.raises(CaseError) as caught:
        explicit(values=given)
    assert message in str(caught.value)


def test_a_file_of_values():
    with pytest.raises(CaseError, match="byte 3 is no text"):
        explicit(content=b"+-\xff")
    with pytest.raises(CaseError, match="one of values and file"):
        explicit(values="+", content=b"+")
    with pytest.raises(CaseError, match="one of values and file"):
        explicit()
    assert len(explicit(content=b"01" * 10**6).signs) == 2 * 10**6


def test_random_bits_come_from_the_documented_stream():
    found = random(length=600, seed=12).signs.tolist()
    for i in (0, 1, 7, 8, 255, 256, 511, 512, 599):
        text = f"primewise:12:{i // 256}".encode()
        number = int(hashlib.sha256(text).hexdigest(), 16)
        bit = number >> (i % 256) & 1
        assert found[i] == (-1) ** bit


@pytest.mark.parametrize(("length", "seed"), [(0, 1), (-1, 1), (10**8 + 1, 1), (5, -1)])
def test_random_refuses(length, seed):
    with pytest.raises(CaseError):
        random(length=length, seed=seed)


def test_predicates_of_polynomials_are_those_of_sympy():
    x = symbols("x")
    drawn = np.random.default_rng(2)
    for p in (2, 3, 5, 7, 31):
        for degree in range(1, 7):
            for _ in range(12):
                f = (int(drawn.integers(1, p)), *map(int, drawn.integers(0, p, degree)))
                assert irreducible(of(p, f)).value == gf_irreducible_p(list(f), p, ZZ)
                assert squarefree(of(p, f)).value == gf_sqf_p(list(f), p, ZZ)
                poly = Poly(list(f), x, modulus=p)
                mirrored = poly.compose(Poly(-x, x, modulus=p))
                if p > 2:
                    assert even(of(p, f)).value == (mirrored == poly)
                    assert odd(of(p, f)).value == (mirrored == -poly)


def test_predicates_of_constants():
    for c in (1, 2):
        assert squarefree(of(3, (c,))).value
        assert even(of(3, (c,))).value
        assert not odd(of(3, (c,))).value
        assert not irreducible(of(3, (c,))).value
    assert squarefree(of(3, (1, 0))).value
    assert not squarefree(of(3, (1, 0, 0, 1))).value  # x^3 + 1 = (x + 1)^3 modulo 3


def test_prime_is_that_of_sympy():
    for a in range(-5, 400):
        assert prime(NOTHING, a).value is isprime(a)
    assert prime(NOTHING, 2**61 - 1).value is True


def test_what_is_missing_is_said():
    for measure in (balance, edges, row_out_of_phase):
        with pytest.raises(UndefinedError):
            measure(NOTHING)
    with pytest.raises(UndefinedError):
        shifted_sum(NOTHING, 2)
    with pytest.raises(UndefinedError):
        squarefree(NOTHING)
    with pytest.raises(CaseError, match="known orders: 2"):
        shifted_sum(NOTHING, 3)
    with pytest.raises(CaseError, match="known orders: 2, 3"):
        correlation(Subject(None, None, None, BinarySequence(np.ones(3, np.int8)), None), 4)


def test_a_prime_beyond_the_tables_is_refused_before_anything_is_allocated():
    with pytest.raises(LimitError, match="more than 100000000"):
        character_values(10**12 + 39, (1, 0, 1))
