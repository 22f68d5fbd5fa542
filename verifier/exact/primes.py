"""Primes: ranges, proofs of primality, least primitive roots."""

from functools import lru_cache

import numpy as np
from flint import fmpz

from verifier.records import Json


def is_prime(number: int) -> bool:
    """Return whether `number` is prime, proved by the library's primality test.

    Examples
    --------
    >>> [n for n in range(-2, 12) if is_prime(n)]
    [2, 3, 5, 7, 11]
    """
    return number > 1 and bool(fmpz(number).is_prime())


def primes_between(first: int, last: int, residue: tuple[int, int] = (0, 1)) -> list[int]:
    """Return the primes p of the closed interval with p = a mod m, residue = (a, m), ascending.

    Cost: a sieve of the interval, about last - first bytes and sqrt(last) passes.
    """
    low = max(first, 2)
    if last < low:
        return []
    keep = np.ones(last - low + 1, dtype=bool)
    for prime in _small_primes(int(fmpz(last).isqrt())):
        start = max(prime * prime, -(-low // prime) * prime)
        keep[start - low :: prime] = False
    found = np.flatnonzero(keep) + low
    return [int(p) for p in found[found % residue[1] == residue[0]]]


def _small_primes(last: int) -> list[int]:
    keep = bytearray([1]) * (last + 1)
    for number in range(2, last + 1):
        if number * number > last:
            break
        if keep[number]:
            for multiple in range(number * number, last + 1, number):
                keep[multiple] = 0
    return [number for number in range(2, last + 1) if keep[number]]


def prime_powers_between(first: int, last: int) -> list[tuple[int, int]]:
    """Return (q, p) for the prime powers q = p^m of the closed interval, ascending by q."""
    found = [(p, p) for p in primes_between(first, last)]
    for p in primes_between(2, int(fmpz(max(last, 1)).isqrt())):
        power = p * p
        while power <= last:
            if power >= first:
                found.append((power, p))
            power *= p
    return sorted(found)


def prime_factors(number: int) -> list[int]:
    """Return the distinct prime factors of a positive integer, ascending."""
    return sorted(int(p) for p, _ in fmpz(number).factor())


@lru_cache(maxsize=4096)
def least_primitive_root(p: int) -> int:
    """Return the least primitive root modulo a prime.

    Examples
    --------
    >>> least_primitive_root(7), least_primitive_root(41)
    (3, 6)
    """
    if p == 2:
        return 1
    factors = prime_factors(p - 1)
    root = 2
    while any(pow(root, (p - 1) // factor, p) == 1 for factor in factors):
        root += 1
    return root


def pratt(p: int) -> list[Json]:
    """Return Pratt's witness for the primality of `p`: a primitive root for every prime below it.

    Returns
    -------
    list
        Descending, without 2: [prime, least primitive root, prime factors of prime - 1], in
        decimal texts. Empty for 2.

    Notes
    -----
    Pratt, "Every prime has a succinct certificate", SIAM J. Comput. 4 (1975) 214-220.

    Examples
    --------
    >>> pratt(7)
    [['7', '3', ['2', '3']], ['3', '2', ['2']]]
    """
    needed: set[int] = set()
    waiting = [p]
    while waiting:
        prime = waiting.pop()
        if prime > 2 and prime not in needed:
            needed.add(prime)
            waiting.extend(prime_factors(prime - 1))
    return [
        [str(prime), str(least_primitive_root(prime)), [str(f) for f in prime_factors(prime - 1)]]
        for prime in sorted(needed, reverse=True)
    ]
