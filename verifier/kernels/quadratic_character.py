"""The quadratic character of all values of a polynomial over F_p."""

from collections.abc import Iterator
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

from verifier.errors import LimitError

BLOCK = 1 << 14
LARGEST = 10**8


@lru_cache(maxsize=2)
def character_table(p: int) -> NDArray[np.int8]:
    """Return chi(0), ..., chi(p - 1) for an odd prime p, read-only.

    Raises
    ------
    LimitError
        If p is beyond 10^8.

    Notes
    -----
    Cost: p/2 squarings modulo p; squares below p^2 < 2^54 fit int64.
    """
    check_size(p)
    table = np.full(p, -1, np.int8)
    table[0] = 0
    for start in range(1, (p + 1) // 2, BLOCK):
        squares = np.arange(start, min(start + BLOCK, (p + 1) // 2), dtype=np.int64)
        squares *= squares
        squares -= squares // p * p  # division by one number is faster than the remainder
        table[squares] = 1
    table.flags.writeable = False
    return table


def check_size(p: int) -> None:
    """Refuse a prime too large for a table of all residues."""
    if p > LARGEST:
        raise LimitError(
            f"limit: p = {p}, more than {LARGEST}, for the values of f at all residues"
        )


def value_blocks(p: int, polynomial: tuple[int, ...]) -> Iterator[tuple[int, NDArray[np.int64]]]:
    """Yield f(start), f(start + 1), ... modulo p in blocks, each with its start.

    Parameters
    ----------
    p
        A prime up to 10^8: the intermediate values stay below p^2 + p < 2^63.
    polynomial
        Least residues, highest coefficient first, one at least.

    Notes
    -----
    Horner's rule; a block fits the cache. Cost: p operations a coefficient.
    """
    check_size(p)
    for start in range(0, p, BLOCK):
        x = np.arange(start, min(start + BLOCK, p), dtype=np.int64)
        value = np.full(len(x), polynomial[0], np.int64)
        for coefficient in polynomial[1:]:
            value *= x
            value += coefficient
            value -= value // p * p
        yield start, value


def looked_up(p: int, polynomial: tuple[int, ...], table: NDArray[np.int8]) -> NDArray[np.int8]:
    """Return table[f(0)], ..., table[f(p - 1)], read-only."""
    found = np.empty(p, np.int8)
    for start, values in value_blocks(p, polynomial):
        found[start : start + len(values)] = table[values]
    found.flags.writeable = False
    return found


def character_values(p: int, polynomial: tuple[int, ...]) -> NDArray[np.int8]:
    """Return chi(f(0)), ..., chi(f(p - 1)) for an odd prime p <= 10^8, read-only."""
    table = character_table(p)
    return table if polynomial == (1, 0) else looked_up(p, polynomial, table)
