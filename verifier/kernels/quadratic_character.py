"""The quadratic character of all values of a polynomial over F_p."""

from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

BLOCK = 1 << 14
LARGEST = 1 << 31


@lru_cache(maxsize=2)
def character_table(p: int) -> NDArray[np.int8]:
    """Return chi(0), ..., chi(p - 1) for an odd prime p < 2^31, read-only.

    Cost: p/2 squarings modulo p; squares below p^2 < 2^62 fit int64.
    """
    table = np.full(p, -1, np.int8)
    table[0] = 0
    for start in range(1, (p + 1) // 2, BLOCK):
        x = np.arange(start, min(start + BLOCK, (p + 1) // 2), dtype=np.int64)
        table[x * x % p] = 1
    table.flags.writeable = False
    return table


def polynomial_values(p: int, polynomial: tuple[int, ...]) -> NDArray[np.int64]:
    """Return f(0), ..., f(p - 1) modulo p by Horner's rule.

    Parameters
    ----------
    p
        A prime below 2^31: the intermediate values stay below p^2 + p < 2^63.
    polynomial
        Least residues, highest coefficient first.
    """
    found = np.empty(p, np.int64)
    for start in range(0, p, BLOCK):
        x = np.arange(start, min(start + BLOCK, p), dtype=np.int64)
        value = np.full(len(x), polynomial[0], np.int64)
        for coefficient in polynomial[1:]:
            value *= x
            value += coefficient
            value -= value // p * p
        found[start : start + len(x)] = value
    return found


def character_values(p: int, polynomial: tuple[int, ...]) -> NDArray[np.int8]:
    """Return chi(f(0)), ..., chi(f(p - 1)) for an odd prime p < 2^31, read-only."""
    table = character_table(p)
    if polynomial == (1, 0):
        return table
    found = table[polynomial_values(p, polynomial)]
    found.flags.writeable = False
    return found
