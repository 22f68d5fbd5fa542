"""Parameters and their order against counts and sequences that this project did not compute."""

import hashlib
from itertools import islice

import pytest
from sympy import primerange

from verifier import catalogue
from verifier.case.case import Family
from verifier.case.combinations import combinations, family_members
from verifier.case.read import build_case
from verifier.instance.conditions import kept

catalogue.load()

HEAD = 'format = 1\ntitle = "T"\n[[table]]\nname = "t"\ncolumns = ["{measured}"]\n[parameters]\n'


def instances(tmp_path, parameters, rest="", measured="p"):
    text = HEAD.format(measured=measured) + parameters + rest
    case = build_case("case.toml", "case", text.encode(), tmp_path)
    return combinations(case, lambda made: kept(case, made))


@pytest.mark.parametrize("p", [3, 5, 7])
@pytest.mark.parametrize("degree", [2, 3, 4])
def test_monic_squarefree_polynomials_are_counted(p, degree):
    """p^d - p^(d-1) monic squarefree polynomials of degree d >= 2 (Rosen, Number Theory in
    Function Fields, Proposition 2.3; from memory)."""
    if p**degree > 700:
        p = 3
    family = Family("f", degree, even=False, monic=True, squarefree=True, sample=None, seed=0)
    assert len(list(family_members(family, p))) == p**degree - p ** (degree - 1)


def test_every_is_in_lexicographic_order():
    """The definition: all coefficient vectors 0..p-1, highest first."""
    family = Family("f", 2, even=True, monic=False, squarefree=False, sample=None, seed=0)
    assert list(family_members(family, 3)) == [
        (1, 0, 0), (1, 0, 1), (1, 0, 2), (2, 0, 0), (2, 0, 1), (2, 0, 2),
    ]  # fmt: skip


def test_a_sample_follows_the_documented_stream():
    """The stream written out from hashlib: SHA-256 is FIPS 180-4."""

    def stream():
        block = 0
        while True:
            number = int(hashlib.sha256(f"primewise:7:{block}".encode()).hexdigest(), 16)
            yield from (number >> i & 1 for i in range(256))
            block += 1

    bits = stream()

    def draw():
        while True:
            value = sum(next(bits) << i for i in range(4))  # 11 needs four bits
            if value < 11:
                return value

    seen = []
    while len(seen) < 20:
        candidate = (1, 0, draw(), 0, draw())
        if candidate not in seen:
            seen.append(candidate)
    family = Family("f", 4, even=True, monic=True, squarefree=False, sample=20, seed=7)
    assert list(family_members(family, 11)) == seen


def test_a_sample_stops_when_all_have_been_drawn():
    family = Family("f", 2, even=True, monic=True, squarefree=True, sample=50, seed=1)
    found = list(family_members(family, 5))
    assert sorted(found) == [(1, 0, c) for c in (1, 2, 3, 4)]


def test_large_families_are_drawn_without_counting():
    family = Family("f", 60, even=False, monic=True, squarefree=True, sample=3, seed=1)
    assert len(list(islice(family_members(family, 101), 3))) == 3


def test_primes_of_a_class_are_those_of_sympy(tmp_path):
    found = instances(tmp_path, "p = { primes = [1, 1000], class = [3, 8] }\n")
    assert [made.p for made in found] == [p for p in primerange(1, 1001) if p % 8 == 3]


def test_prime_powers_are_those_of_sympy(tmp_path):
    from sympy import factorint

    found = instances(tmp_path, "q = { prime-powers = [2, 300], class = [1, 4] }\n", measured="q")
    expected = [q for q in range(2, 301) if len(factorint(q)) == 1 and q % 4 == 1]
    assert [made.numbers["q"] for made in found] == expected
    assert all(made.numbers["q"] % made.p == 0 for made in found)


def test_the_last_parameter_varies_fastest(tmp_path):
    found = instances(
        tmp_path,
        'l = { values = [3, 2] }\np = { primes = [5, 11] }\nwhere = ["p > 2*l or p = 5", "p mod 7 != 0"]\n',
    )
    assert [(made.numbers["l"], made.p) for made in found] == [(3, 5), (3, 11), (2, 5), (2, 11)]


def test_listed_polynomials_are_echoed_and_may_name_numbers(tmp_path):
    rest = '[sequence]\nrule = "legendre"\npolynomial = "f"\n'
    found = instances(
        tmp_path,
        'p = { values = [7] }\nf = { polynomials = ["x^2  + a"] }\na = { values = [1, 3] }\nwhere = ["k = 2", "r = 0"]\n',
        rest,
    )
    assert [dict(made.texts) for made in found] == [{"p": "7", "f": "x^2  + a", "a": "1"}]
