"""Primes, polynomials modulo p (lists of residues, the constant first) and the stream of bits."""

from collections.abc import Iterator, Sequence
from hashlib import sha256
from itertools import count, islice

from .reals import OpenError, RecheckError

Polynomial = list[int]


def is_prime(n: int) -> bool:
    """Tell whether n is prime; proved below 3.3 10^24, above only a no is.

    Miller's test to the first 13 prime bases: J. Sorenson, J. Webster, Strong pseudoprimes to twelve
    prime bases, Math. Comp. 86 (2017) 985-1003.
    """
    bases = (2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37, 41)
    if n < 2 or any(n % b == 0 for b in bases):
        return n in bases
    twos = (n - 1 & 1 - n).bit_length() - 1
    for b in bases:
        powers = [pow(b, n - 1 >> twos - i, n) for i in range(twos)]
        if powers[0] != 1 and n - 1 not in powers:
            return False
    return True


def pratt(p: int, given: object) -> list[list[object]]:
    """Prove that p is prime and return the canonical proof; of `given` only factorisations are used.

    V. Pratt, Every prime has a succinct certificate, SIAM J. Comput. 4 (1975) 214-220: p is prime if
    g^(p-1) = 1 mod p for some g, but g^((p-1)/r) != 1 for all prime factors r of p - 1.
    """
    rows = given if isinstance(given, list) else []
    hints = {row[0]: row[2] for row in rows if isinstance(row, list) and len(row) == 3}
    proof, wanted = {}, {p} - {2}
    while wanted:
        n = max(wanted)
        factors = sorted({int(str(r)) for r in hints.get(str(n), ()) if 1 < int(str(r)) < n})
        rest = n - 1
        for r in factors:
            while rest % r == 0:
                rest //= r
        candidates = (g for g in range(2, 10**4) if all(pow(g, n // r, n) != 1 for r in factors))
        g = next(candidates, 0)
        if rest != 1 or pow(g, n - 1, n) != 1:
            raise RecheckError(f"primality.{p} is no proof that {n} is prime")
        proof[n] = [str(n), str(g), [str(r) for r in factors]]
        wanted = (wanted | set(factors)) - set(proof) - {2}
    return [list(proof[n]) for n in sorted(proof, reverse=True)]


def bits(seed: int) -> Iterator[int]:
    """Yield the documented stream: the bits of SHA-256 of `primewise:SEED:BLOCK`, lowest first."""
    for block in count():
        digest = sha256(f"primewise:{seed}:{block}".encode("ascii")).digest()
        yield from (digest[i // 8] >> i % 8 & 1 for i in range(256))


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


def times(f: Sequence[int], g: Sequence[int]) -> list[int]:
    """Return the product, not reduced."""
    product = [0] * (len(f) + len(g))
    for i, a in enumerate(f):
        for j, b in enumerate(g):
            product[i + j] += a * b
    return product


def to_the_p(h: Polynomial, f: Polynomial, p: int) -> Polynomial:
    """Return h^p mod f."""
    result = [1]
    for bit in bin(p)[2:]:
        result = remainder(times(result, result), f, p)
        result = remainder(times(result, h), f, p) if bit == "1" else result
    return result


def common_with_frobenius(f: Polynomial, p: int) -> Iterator[Polynomial]:
    """Yield gcd(f, x^(p^i) - x) for i = 1, 2, ...: the product of the factors of degree i | d."""
    power = remainder([0, 1], f, p)
    while True:
        power = to_the_p(power, f, p)
        padded = power + [0] * (2 - len(power))
        yield gcd(f, reduced([padded[0], padded[1] - 1, *padded[2:]], p), p)


def squarefree(f: Polynomial, p: int) -> bool:
    """Tell whether gcd(f, f') = 1."""
    return len(gcd(f, reduced([i * c for i, c in enumerate(f)][1:], p), p)) == 1


def irreducible(f: Polynomial, p: int) -> bool:
    """Tell whether f, of degree >= 1, has no factor of a degree up to half its own (Ben-Or's test)."""
    halves = islice(common_with_frobenius(f, p), (len(f) - 1) // 2)
    return len(f) > 1 and all(len(common) == 1 for common in halves)


def discriminant(f: Polynomial, p: int) -> int:
    """Return (-1)^(k(k-1)/2) res(f, f')/a mod p, f' taken with the formal degree k - 1.

    res(g, h) = (-1)^(deg g deg h) b^(deg g - deg (g mod h)) res(h, g mod h), b leading in h.
    """
    k, a = len(f) - 1, f[-1]
    if k < 1:
        raise OpenError("undefined: disc of a polynomial of degree 0")
    g, h = f, reduced([i * c for i, c in enumerate(f)][1:], p)
    result = (-1) ** (k * (k - 1) // 2) * pow(a, k - 1 - len(h), p)
    while len(h) > 1:
        rest = remainder(g, h, p)
        result *= (-1) ** ((len(g) - 1) * (len(h) - 1)) * pow(h[-1], len(g) - len(rest), p)
        g, h = h, rest
    return result * pow(h[0], len(g) - 1, p) % p if h else 0


def polynomial_text(f: Polynomial) -> str:
    """Write a polynomial with least residues, `x^4 + 3*x^2 + 1`."""
    terms = []
    for i in range(len(f) - 1, -1, -1):
        power = "x" if i == 1 else f"x^{i}"
        if f[i]:
            terms.append(str(f[i]) if i == 0 else power if f[i] == 1 else f"{f[i]}*{power}")
    return " + ".join(terms) or "0"
