"""Primes, polynomials modulo p (lists of residues, the constant first) and the stream of bits."""

from collections.abc import Iterator, Sequence
from hashlib import sha256
from itertools import count
from typing import Any

from .reals import OpenError, RecheckError

Polynomial = list[int]
BASES = (2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37, 41)


def is_prime(n: int) -> bool:
    """Tell whether n is prime: a no is proved, a yes below 3.3 10^24, above by `pratt` alone.

    Miller's test: J. Sorenson, J. Webster, Math. Comp. 86 (2017) 985-1003, for these bases.
    """
    if n < 2 or any(n % b == 0 for b in BASES):
        return n in BASES
    twos = ((n - 1) & (1 - n)).bit_length() - 1
    powers = [[pow(b, (n - 1) >> i, n) for i in range(1, twos + 1)] for b in BASES]
    return all(row[-1] == 1 or n - 1 in row for row in powers)


def pratt(p: int, given: Any) -> list[list[Any]]:
    """Prove that p is prime, with the factorisations in `given`; return the canonical proof.

    V. Pratt, Every prime has a succinct certificate, SIAM J. Comput. 4 (1975) 214-220: p is prime
    if g^(p-1) = 1 mod p for some g, but g^((p-1)/r) != 1 for every prime factor r of p - 1.
    """
    hints = {row[0]: row[2] for row in given or ()}
    proof, wanted = [], {p} - {2}
    while wanted:
        n = max(wanted)
        factors = sorted({r for r in map(int, hints.get(str(n), ())) if 1 < r < n})
        rest = n - 1
        for r in factors:
            while rest % r == 0:
                rest //= r
        fit = (g for g in range(2, 10**4) if all(pow(g, n // r, n) != 1 for r in factors))
        g = next(fit, 0)
        if rest != 1 or pow(g, n - 1, n) != 1:
            raise RecheckError(f"primality.{p} is no proof that {n} is prime")
        proof.append([str(n), str(g), list(map(str, factors))])
        wanted = (wanted | set(factors)) - {n, 2}
    return proof


def bits(seed: int) -> Iterator[int]:
    """Yield the bits of SHA-256 of `primewise:SEED:BLOCK`, a number, the lowest first."""
    for block in count():
        number = int(sha256(f"primewise:{seed}:{block}".encode("ascii")).hexdigest(), 16)
        yield from (number >> i & 1 for i in range(256))


def reduced(f: Sequence[int], p: int) -> Polynomial:
    """Return least residues without leading zeros; the zero polynomial is empty."""
    residues = [c % p for c in f]
    while residues and not residues[-1]:
        residues.pop()
    return residues


def remainder(f: Sequence[int], g: Polynomial, p: int) -> Polynomial:
    """Return f mod g."""
    rest, inverse = reduced(f, p), pow(g[-1], -1, p)
    while len(rest) >= len(g):
        c, shift = rest[-1] * inverse, len(rest) - len(g)
        rest = reduced(rest[:shift] + [a - c * b for a, b in zip(rest[shift:], g, strict=True)], p)
    return rest


def gcd(f: Polynomial, g: Polynomial, p: int) -> Polynomial:
    """Return a greatest common divisor."""
    while g:
        f, g = g, remainder(f, g, p)
    return f


def times(f: Sequence[Any], g: Sequence[Any]) -> list[Any]:
    """Return the product, not reduced."""
    product = [0] * (len(f) + len(g) - 1)
    for i, a in enumerate(f):
        for j, b in enumerate(g):
            product[i + j] += a * b
    return product


def derivative(f: Polynomial, p: int) -> Polynomial:
    """Return f'."""
    return reduced([i * c for i, c in enumerate(f)][1:], p)


def squarefree(f: Polynomial, p: int) -> bool:
    """Tell whether gcd(f, f') = 1."""
    return len(gcd(f, derivative(f, p), p)) == 1


def irreducible(f: Polynomial, p: int) -> bool:
    """Tell whether f has nothing in common with x^(p^i) - x for 1 <= i <= k/2 (M. Ben-Or)."""
    power = [0, 1]
    for _ in range((len(f) - 1) // 2):
        base, power = power, [1]
        for bit in bin(p)[2:]:
            power = remainder(times(power, power), f, p)
            power = remainder(times(power, base), f, p) if bit == "1" else power
        padded = [*power, 0, 0]
        padded[1] -= 1
        if len(gcd(f, reduced(padded, p), p)) > 1:
            return False
    return len(f) > 1


def discriminant(f: Polynomial, p: int) -> int:
    """Return (-1)^(k(k-1)/2) res(f, f')/a mod p, f' taken with the formal degree k - 1.

    res(g, h) = (-1)^(deg g deg h) b^(deg g - deg (g mod h)) res(h, g mod h), b leading in h.
    """
    k, g, h = len(f) - 1, f, derivative(f, p)
    if k < 1:
        raise OpenError("undefined: disc of a polynomial of degree 0")
    result = (-1) ** (k * (k - 1) // 2) * pow(f[-1], k - 1 - len(h), p)
    while len(h) > 1:
        rest = remainder(g, h, p)
        result *= (-1) ** ((len(g) - 1) * (len(h) - 1)) * pow(h[-1], len(g) - len(rest), p)
        g, h = h, rest
    return result * pow(h[0], len(g) - 1, p) % p if h else 0


def polynomial_text(f: Polynomial) -> str:
    """Write a polynomial with least residues, `x^4 + 3*x^2 + 1`."""
    powers = ["", "x", *(f"x^{i}" for i in range(2, len(f)))]
    terms = [
        f"{c}*{x}" if c > 1 and x else x or str(c) for c, x in zip(f, powers, strict=False) if c
    ]
    return " + ".join(reversed(terms)) or "0"
